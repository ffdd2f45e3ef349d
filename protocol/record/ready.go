package record

// NotReady lists the keys that this version reads but does not compute yet. A
// record that uses one is refused, never half computed: whatever could change
// a number, a verdict or a mask and is ignored would be a lie. Keys below a
// listed table are covered by it. To make a key ready, delete its line here.
var NotReady = []string{
	"plan.outcome.NAME.cluster",
	"plan.outcome.NAME.systematic_u",
	"plan.hypothesis.NAME.adjust",
	"plan.hypothesis.NAME.strata",
	"plan.hypothesis.NAME.sets",
	"plan.set",
	"plan.looks",
	"plan.pooling",
	"plan.combination",
	"plan.size",
	"plan.rehearsal",
	"plan.prior",
	"plan.sensitivity",
	"result.look",
	"result.p",
	"earlier_result.look",
	"earlier_result.p",
}

// NotReadyWords lists, per key, the words of its closed list that this version
// does not compute yet. Measures say so themselves (Measure.Ready).
var NotReadyWords = map[string][]string{
	"plan.outcome.NAME.design":      {"crossover"},
	"plan.hypothesis.NAME.evidence": {"pooled", "combined"},
}
