package batch

import (
	"bytes"

	"steelyard/cmd/internal/pipeline"
)

// Open takes a record, its seal and its folder from the disk without working
// on it; close gives the folder back.
func (w Worker) Open(rec Found) (in pipeline.Input, close func(), err error) { return w.read(rec) }

// LooksLikeRecord reports whether the first key of a text is that of a record.
func LooksLikeRecord(text []byte) bool { return startsRecord(bytes.NewReader(text)) }
