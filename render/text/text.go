// Package text prints a result for a reader at a prompt.
package text

import (
	"io"

	"steelyard/render/page"
)

// Options say what the terminal can do.
type Options struct {
	Width int  // columns; at most 80 are used
	Color bool // emphasis allowed
}

// Write prints the document.
func Write(w io.Writer, doc *page.Document, opt Options) error { panic("text: not built") }
