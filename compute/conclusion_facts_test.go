package compute

import (
	"testing"

	"github.com/google/go-cmp/cmp"

	"steelyard/compute/result"
)

// What verdicts and readings establish, worked out by hand from the rules of
// claims: better = lower, so that benefit has the sign -1 and harm +1.
func TestFacts(t *testing.T) {
	type scene struct {
		claim   string
		verdict result.Verdict
		above   int
		below   int
		bare    bool // no reading
	}
	for _, tt := range []struct {
		scene
		adjusted bool
		want     facts
	}{
		{scene: scene{"superior", result.Established, 0, 2, false}, want: facts{sign: -1, notWorse: true, decided: true}},
		{scene: scene{"superior", result.Established, 0, 0, true}, want: facts{sign: -1, decided: true}},
		{scene: scene{"superior", result.Contradicted, 2, 0, false}, want: facts{sign: 1, notMuchBetter: true, decided: true}},
		{scene: scene{"minimum-effect", result.Established, 0, 3, false}, want: facts{sign: -1, beyond: -1, notWorse: true, decided: true}},
		{scene: scene{"minimum-effect", result.Contradicted, 1, 0, false}, want: facts{notMuchBetter: true, decided: true}},
		{scene: scene{"noninferior", result.Established, 0, 1, false}, want: facts{notWorse: true, decided: true}},
		{scene: scene{"noninferior", result.Contradicted, 3, 0, false}, want: facts{sign: 1, beyond: 1, notMuchBetter: true, decided: true}},
		{scene: scene{"equivalent", result.Established, 1, 1, false}, want: facts{inside: true, notWorse: true, notMuchBetter: true, decided: true}},
		{scene: scene{"equivalent", result.Contradicted, 3, 0, false}, want: facts{sign: 1, beyond: 1, notMuchBetter: true, decided: true}},
		{scene: scene{"benefit-too-small", result.Established, 1, 0, false}, want: facts{notMuchBetter: true, decided: true}},
		{scene: scene{"benefit-too-small", result.Contradicted, 0, 3, false}, want: facts{sign: -1, beyond: -1, notWorse: true, decided: true}},
		{scene: scene{"differs", result.Established, 2, 1, false}, want: facts{sign: 1, inside: true, notWorse: true, notMuchBetter: true, decided: true}},
		{scene: scene{"below", result.Established, 0, 0, true}, want: facts{limit: -1, limitClaim: -1, decided: true}},
		{scene: scene{"above", result.Contradicted, 0, 0, true}, want: facts{limit: -1, limitClaim: 1, decided: true}},
		{scene: scene{"superior", result.Open, 1, 1, false}, want: facts{inside: true, notWorse: true, notMuchBetter: true}},
		{scene: scene{"superior", result.Open, 0, 2, false}, adjusted: true, want: facts{}}, // the reading is not adjusted, the verdict is
		{scene: scene{"superior", result.Pending, 0, 0, true}, want: facts{}},
		{scene: scene{"describe", result.Described, 0, 2, false}, want: facts{}},
	} {
		h := &result.Hypothesis{Claim: tt.claim}
		h.Verdict = tt.verdict
		if !tt.bare {
			h.Reading = result.Reading{Above: tt.above, Below: tt.below, HasRegion: true, OK: true}
		}
		h.PAdjusted.OK = tt.adjusted
		var got facts
		got.add(h, &result.Outcome{Better: "lower"})
		if d := cmp.Diff(tt.want, got, cmp.AllowUnexported(facts{})); d != "" {
			t.Errorf("%+v: %s", tt.scene, d)
		}
	}
}
