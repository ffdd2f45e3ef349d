// Package render is the door of the third room: a record and its result in, a
// composed page out. All the record's wording is here; nothing is computed.
package render

import (
	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/render/page"
)

// Compose words and orders the whole document.
func Compose(in *protocol.Loaded, res *result.Result) *page.Document {
	return &page.Document{Title: res.Record.Title, Language: "en"}
}
