package compute

import (
	"math"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/record"
)

// run loads and computes a record that must have no errors.
func mustRun(t *testing.T, text string) *result.Result {
	t.Helper()
	in := protocol.Load("test.toml", []byte(text), nil, nil)
	for _, d := range in.Diagnostics {
		if d.Severity == 0 {
			t.Fatalf("%s [%s]\n%s", d.Message, d.Code, text)
		}
	}
	return Run(in, "test")
}

// Every starting record of every measure and claim computes, and what comes
// out is consistent in itself.
func TestEveryMeasureAndClaimComputes(t *testing.T) {
	for _, m := range record.Measures {
		for _, c := range record.Claims {
			text, err := protocol.Starter(m.Word, c.Word)
			if err != nil {
				continue // the claim makes no sense on the measure
			}
			t.Run(m.Word+"/"+c.Word, func(t *testing.T) {
				in := protocol.Load("test.toml", text, nil, nil)
				if in.Diagnostics.HasErrors() {
					t.Fatalf("%+v", in.Diagnostics)
				}
				consistent(t, Run(in, "test"))
			})
		}
	}
}

// consistent checks what must hold of every result.
func consistent(t *testing.T, res *result.Result) {
	t.Helper()
	for _, h := range res.Hypotheses {
		for what, o := range map[string]result.Opt{"estimate": h.Estimate, "se": h.SE, "low": h.Low, "high": h.High, "smallest margin": h.SmallestMargin} {
			if o.OK && math.IsNaN(o.V) {
				t.Errorf("%s: %s is NaN", h.Name, what)
			}
		}
		if h.P.OK && !(h.P.P >= 0 && h.P.P <= 1) {
			t.Errorf("%s: p = %v", h.Name, h.P.P)
		}
		if h.Low.OK && h.High.OK && !(h.Low.V <= h.High.V) {
			t.Errorf("%s: %v to %v", h.Name, h.Low.V, h.High.V)
		}
		switch h.Verdict {
		case result.Established, result.Contradicted, result.Open, result.Suggested:
			if !h.P.OK && h.Reason == nil {
				t.Errorf("%s is %s without a p and without a reason", h.Name, h.Verdict)
			}
		case result.Pending, result.Described:
			if h.P.OK {
				t.Errorf("%s is %s with a p", h.Name, h.Verdict)
			}
		default:
			t.Errorf("%s: verdict %q", h.Name, h.Verdict)
		}
		for _, p := range h.Curve {
			if math.IsNaN(p.P) || math.IsInf(p.Value, 0) {
				t.Errorf("%s: curve at %v is %v", h.Name, p.Value, p.P)
			}
		}
	}
}
