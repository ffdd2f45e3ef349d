// Package jsonout prints a result as versioned JSON: the contract that other
// programs read.
package jsonout

import (
	"io"

	"steelyard/compute/result"
	"steelyard/protocol"
)

// Write prints one JSON object, indented, ending in a newline.
func Write(w io.Writer, in *protocol.Loaded, res *result.Result) error { panic("jsonout: not built") }
