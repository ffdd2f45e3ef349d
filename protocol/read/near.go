package read

import "strings"

// nearest finds the known word closest to what was written, "" when none is
// close: at most a third of its letters away, or the one continues the other.
func nearest(written string, known []string) string {
	best, distance := "", 1<<30
	w := strings.ReplaceAll(strings.ToLower(written), "_", "-")
	for _, k := range known {
		c := strings.ReplaceAll(strings.ToLower(k), "_", "-")
		d := editDistance(w, c)
		if d > 2 && len(w) >= 4 && (strings.HasPrefix(c, w) || strings.HasPrefix(w, c) && len(c) >= 4) {
			d = 2
		}
		if d < distance {
			best, distance = k, d
		}
	}
	if distance > max(1, min(len(w), len(best))/3) && !(distance <= 2 && len(w) >= 4) {
		return ""
	}
	return best
}

// editDistance counts insertions, deletions, replacements and swaps of
// neighbours (optimal string alignment), by bytes. Long words are not
// compared.
func editDistance(a, b string) int {
	const most = 48
	if len(a) > most || len(b) > most {
		return most
	}
	var before, last, row [most + 1]int
	for j := range len(b) + 1 {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			cost := 1
			if a[i-1] == b[j-1] {
				cost = 0
			}
			row[j] = min(last[j]+1, row[j-1]+1, last[j-1]+cost)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last = last, row
	}
	return last[len(b)]
}
