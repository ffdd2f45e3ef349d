package main

import (
	"maps"
	"slices"
	"strings"

	"steelyard/compute"
	"steelyard/compute/belief"
	"steelyard/compute/claim"
	"steelyard/compute/combine"
	"steelyard/compute/effect"
	"steelyard/compute/family"
	"steelyard/compute/pool"
	"steelyard/compute/survival"
	"steelyard/protocol/card"
	"steelyard/protocol/data"
	"steelyard/protocol/read"
	"steelyard/protocol/seal"
	"steelyard/protocol/wording"
)

// cards joins the cards of all packages.
func cards() []card.Card {
	return slices.Concat(effect.Cards, survival.Cards, claim.Cards, compute.Cards, family.Cards, pool.Cards, combine.Cards, belief.Cards,
		read.Cards, data.Cards, seal.Cards, wording.Cards)
}

// exampleFiles are the data files that examples name, with their text.
func exampleFiles() map[string]string {
	files := effect.ExampleFiles()
	maps.Copy(files, survival.ExampleFiles())
	return files
}

// kindName is a kind of card for readers.
func kindName(k card.Kind) string {
	switch k {
	case card.Measure:
		return "measure"
	case card.Method:
		return "method"
	case card.Claim:
		return "claim"
	case card.Diagnostic:
		return "diagnostic"
	case card.Procedure:
		return "procedure"
	case card.Term:
		return "term"
	}
	panic("steelyard: unknown kind of card")
}

// cardsOf finds the cards of a word; letters of codes may be small.
func cardsOf(word string) []card.Card {
	var found []card.Card
	for _, c := range cards() {
		if strings.EqualFold(c.Word, word) {
			found = append(found, c)
		}
	}
	return found
}

// words lists the words that have a card, each once, in order.
func words() []string {
	var list []string
	for _, c := range cards() {
		list = append(list, c.Word)
	}
	slices.Sort(list)
	return slices.Compact(list)
}

// near lists the words that are most like one that is not there: those that
// begin or end with it, then those few letters away.
func near(word string) []string {
	word = strings.ToLower(word)
	type scored struct {
		word  string
		score int
	}
	var list []scored
	for _, w := range words() {
		low := strings.ToLower(w)
		switch d := distance(word, low); {
		case strings.Contains(low, word) || strings.Contains(word, low):
			list = append(list, scored{w, 0})
		case d <= max(1, len(word)/3):
			list = append(list, scored{w, d})
		}
	}
	slices.SortStableFunc(list, func(a, b scored) int { return a.score - b.score })
	var out []string
	for _, s := range list[:min(3, len(list))] {
		out = append(out, s.word)
	}
	return out
}

// distance counts the letters to be inserted, removed or changed (Levenshtein
// 1966).
func distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	row := make([]int, len(y)+1)
	for j := range row {
		row[j] = j
	}
	for i := range x {
		diagonal := row[0]
		row[0] = i + 1
		for j := range y {
			cost := 1
			if x[i] == y[j] {
				cost = 0
			}
			diagonal, row[j+1] = row[j+1], min(row[j+1]+1, row[j]+1, diagonal+cost)
		}
	}
	return row[len(y)]
}
