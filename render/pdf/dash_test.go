package pdf

import (
	"regexp"
	"testing"

	"steelyard/render/page"
)

// dashBefore is the last dash pattern set before the n-th stroke, of the page
// contents in their order; "" for none.
func dashBefore(content string, n int) string {
	pattern, strokes := "", 0
	for _, m := range regexp.MustCompile(`(?m)\[([0-9. ]*)\] 0(?:\.0+)? d\b|\bl S\b|\bl s\b`).FindAllStringSubmatch(content, -1) {
		if m[0][0] == '[' {
			pattern = m[1]
			continue
		}
		if strokes++; strokes == n {
			break
		}
	}
	return pattern
}

// A solid line stays solid on the page after one that ends with a dashed line.
func TestDashEndsWithThePage(t *testing.T) {
	figure := func(dash []float64) page.Figure {
		return page.Figure{Alt: "A line.", Drawing: &page.Drawing{Width: 100, Height: 20, Marks: []page.Mark{
			page.Line{X1: 0, Y1: 10, X2: 100, Y2: 10, Stroke: page.Stroke{Width: 1, Dash: dash}},
		}}}
	}
	doc := &page.Document{Title: "Lines", Language: "en", Blocks: []page.Block{figure([]float64{3, 2}), page.PageBreak{}, figure(nil)}}
	b, err := build(doc, options{plain: true})
	if err != nil {
		t.Fatal(err)
	}
	content := string(b)
	if got := dashBefore(content, 1); got == "" {
		t.Fatal("the dashed line is not found")
	}
	if got := dashBefore(content, 2); got != "" {
		t.Errorf("the solid line is drawn with the dashes %q", got)
	}
}
