// Package compute is the door of the second room: a record with its data in,
// a result out. Only this package knows both the record and the numbers: it
// turns entries into inputs, asks the measures' methods, lets claims, families
// and pools decide, and gives every note its place in the record.
//
//	res := compute.Run(in, "0.1.0")
package compute

import (
	"steelyard/compute/effect"
	"steelyard/compute/family"
	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// Run computes everything the record asks for. The record must have no
// errors. Diagnostics of the result are those of the record and those that
// only the numbers can raise, sorted.
func Run(in *protocol.Loaded, engine string) *result.Result {
	r := newRun(in, engine)
	r.describe()
	if in.Diagnostics.HasErrors() {
		r.res.Diagnostics = in.Diagnostics
		return r.res
	}
	r.studies()
	r.decide()
	r.totals()
	r.pooledEvidence()
	r.sensitivities()
	r.beliefs()
	r.sealedPlan()
	r.conclusion()
	r.finish()
	return r.res
}

// decide computes every hypothesis and settles its verdict.
func (r *run) decide() {
	for _, h := range r.rec.Plan.Hypotheses {
		r.hypothesis(h)
	}
	r.families()
	r.settle()
}

// run is one computation of one record.
type run struct {
	in    *protocol.Loaded
	rec   *record.Record
	res   *result.Result
	seed  uint64
	level float64
	notes diag.List
	tried []*trial        // one per hypothesis, in order
	pools []*poolRun      // every pool of a planned analysis, in order
	plans []family.Family // the families as they were adjusted

	inputs map[inputKey]effect.Input
	made   map[madeKey]made
	plain  bool // verdicts and their numbers alone: the sealed plan beside the present one
}

func newRun(in *protocol.Loaded, engine string) *run {
	r := &run{in: in, rec: in.Record, res: &result.Result{Engine: engine}, level: in.Record.Plan.Level.V,
		inputs: map[inputKey]effect.Input{}, made: map[madeKey]made{}}
	if r.level == 0 {
		r.level = 0.95
	}
	sealed := ""
	if in.Seal != nil {
		sealed = in.Seal.PlanSHA256()
	}
	r.seed = seedOf(r.rec.Plan, sealed, in.PlanSHA256)
	r.res.Seal = sealOf(in.Seal)
	return r
}

// finish gathers what the views need beside the numbers.
func (r *run) finish() {
	r.files()
	r.choices()
	r.timeline()
	r.res.Diagnostics = append(append(diag.List{}, r.in.Diagnostics...), r.notes...)
	r.res.Diagnostics.Sort()
}
