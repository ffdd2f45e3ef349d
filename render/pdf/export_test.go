package pdf

import "steelyard/render/page"

// For the tests of composed records, which stand outside the package.

var TagFaults = tagFaults

// PageOne is on how many pages what stands before the first page break lies.
func PageOne(doc *page.Document) int {
	first := *doc
	for i, b := range doc.Blocks {
		if _, ok := b.(page.PageBreak); ok {
			first.Blocks = doc.Blocks[:i+1]
			break
		}
	}
	return len(laid(&first))
}
