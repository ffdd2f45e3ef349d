package read

import (
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// rules checks what no single key can tell.
func rules(rec *record.Record, damaged bool) diag.List { return nil }
