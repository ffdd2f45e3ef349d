package batch

import "steelyard/cmd/internal/pipeline"

// Open takes a record, its seal and its folder from the disk without working
// on it; close gives the folder back.
func (w Worker) Open(rec Found) (in pipeline.Input, close func(), err error) { return w.read(rec) }
