package text

import (
	"strconv"
	"strings"

	"steelyard/render/page"
)

// compact keeps page one, each hypothesis in short that page one does not
// show, and the count of diagnostics.
func compact(blocks []page.Block) []page.Block {
	var out []page.Block
	shown := map[string]bool{}
	rest := blocks
	for i, b := range blocks {
		if _, ok := b.(page.PageBreak); ok {
			rest = blocks[i+1:]
			break
		}
		if v, ok := b.(page.Verdict); ok {
			shown[v.Name] = true
		}
		out = append(out, b)
		rest = nil
	}
	for i, b := range rest {
		h, ok := b.(page.Heading)
		if !ok {
			continue
		}
		if name, ok := strings.CutPrefix(h.Anchor, "hypothesis-"); ok && !shown[name] {
			out = append(out, short(rest[i:])...)
		}
		if h.Anchor == "diagnostics" {
			if s := countDiagnostics(rest[i+1:]); s != "" {
				out = append(out, page.Paragraph{Text: page.T(s)})
			}
		}
	}
	return out
}

// short keeps a hypothesis's heading and the text before its first fact,
// table or figure.
func short(blocks []page.Block) []page.Block {
	out := blocks[:1:1]
	for _, b := range blocks[1:] {
		if _, ok := b.(page.Paragraph); !ok {
			break
		}
		out = append(out, b)
	}
	return out
}

// countDiagnostics counts the rows of the diagnostics table by kind.
func countDiagnostics(blocks []page.Block) string {
	for _, b := range blocks {
		switch b := b.(type) {
		case page.Table:
			counts := map[string]int{}
			for _, r := range b.Rows {
				for _, c := range r.Cells {
					switch s := page.Plain(c); s {
					case "error", "warning", "note":
						counts[s]++
					}
				}
			}
			var parts []string
			for _, k := range []string{"error", "warning", "note"} {
				if n := counts[k]; n == 1 {
					parts = append(parts, "1 "+k)
				} else if n > 1 {
					parts = append(parts, strconv.Itoa(n)+" "+k+"s")
				}
			}
			if len(parts) == 0 {
				return ""
			}
			return "Diagnostics: " + strings.Join(parts, ", ") + "."
		case page.Heading:
			return ""
		}
	}
	return ""
}
