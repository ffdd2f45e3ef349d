package compute

import (
	"math"

	"steelyard/compute/dist"
)

// families turns the deciding p-values of the trials into adjusted ones. A
// claim over several sets has the largest p of its sets, for and against.
func (r *run) families() {
	for _, t := range r.tried {
		t.own()
	}
}

// own sets a trial's p-values to its own, before any family.
func (t *trial) own() {
	t.p, t.against = certain, certain
	if _, blocked := t.blocked(); blocked || t.deciding < 0 || !t.bySet[t.deciding].a.Judged {
		return
	}
	t.p = t.bySet[t.deciding].a.P
	t.against = dist.Tail{LnP: math.Inf(-1)}
	for _, at := range t.bySet {
		if at.a.Against.LnP >= t.against.LnP {
			t.against = at.a.Against
		}
	}
}

var certain = dist.Tail{P: 1, LnQ: math.Inf(-1)}
