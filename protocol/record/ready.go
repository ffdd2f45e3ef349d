package record

// NotReady lists the keys that this version reads but does not compute yet. A
// record that uses one is refused, never half computed: whatever could change
// a number, a verdict or a mask and is ignored would be a lie. Keys below a
// listed table are covered by it. To make a key ready, delete its line here.
var NotReady = []string{
	"plan.looks",
	"plan.size",
	"plan.rehearsal",
	"result.look",
	"earlier_result.look",
}

// NotReadyWords lists, per key, the words of its closed list that this version
// does not compute yet. Measures say so themselves (Measure.Ready).
var NotReadyWords = map[string][]string{}
