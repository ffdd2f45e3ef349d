// Package family adjusts the p-values of several hypotheses that are judged
// together: nothing but numbers go in and come out. It knows no record, no
// claim and no data, and it never decides which hypotheses form a family.
//
// One use: results, faults := family.Adjust(families) gives, for every member,
// the adjusted p-value to compare with that member's own level.
package family

import (
	"math"

	"steelyard/compute/dist"
)

// Procedure is the word of a record for how a family is judged.
type Procedure string

// The procedures.
const (
	All           Procedure = "all"
	Bonferroni    Procedure = "bonferroni"
	Holm          Procedure = "holm"
	Hochberg      Procedure = "hochberg"
	Hommel        Procedure = "hommel"
	FixedSequence Procedure = "fixed-sequence"
	Fallback      Procedure = "fallback"
	Graph         Procedure = "graph"
)

// Procedures lists every procedure, in the order the record's reference does.
func Procedures() []Procedure {
	return []Procedure{All, Bonferroni, Holm, Hochberg, Hommel, FixedSequence, Fallback, Graph}
}

// Member is one hypothesis.
type Member struct {
	P       dist.Tail // evidence for the claim; a member without result has P = 1
	Against dist.Tail // evidence for the opposite; P = 1 where there is none
	Alpha   float64   // the member's own level, 0 < Alpha < 1
}

// Family is the input: members in order of importance, which also breaks
// ties.
type Family struct {
	Procedure Procedure
	Members   []Member
	// Order is the testing order of fixed-sequence and fallback, a
	// permutation of the members' positions; nil means as listed.
	Order []int
	// Weights split the level: bonferroni, holm, fallback, graph. nil means
	// equal shares. They are at least 0 and add to at most 1.
	Weights []float64
	// Transfer is the graph's matrix: row i says where member i's level goes
	// when i is established. Rows add to at most 1, the diagonal is 0.
	Transfer [][]float64
	// After are the positions of the families tested before this one.
	After []int
	// RequireAny opens the gate when any member of the one bonferroni family
	// before is established, instead of all members of all.
	RequireAny bool
}

// Result is a family after its procedure.
type Result struct {
	Alpha       float64   // the family's level, the largest of its members'
	P           dist.Tail // the largest adjusted p: evidence that all hold
	Established bool      // every member is
	Open        bool      // the families before let this one be tested
	Members     []Adjusted
	Path        []Step
}

// Adjusted is one member's outcome. P and Against compare with the member's
// own level, strictly.
type Adjusted struct {
	P            dist.Tail
	Against      dist.Tail
	Level        float64 // the level the member's own p was last compared with
	Tested       bool    // Level holds a value
	Established  bool
	Contradicted bool // the adjusted Against is below the level
}

// Step is one comparison on the way: member's p with a level, in the
// member's own units.
type Step struct {
	Member   int
	Level    float64
	P        dist.Tail
	Rejected bool
}

// Adjust works through the families, those that others wait for first. The
// results stand in the order of the input. Families with a fault, and those
// that wait for them, get no result (nil Members); the faults say why.
func Adjust(families []Family) ([]Result, []Fault) {
	faults := Check(families)
	bad := make([]bool, len(families))
	for _, f := range faults {
		bad[f.Family] = true
	}
	results := make([]Result, len(families))
	states := make([]state, len(families))
	done := make([]bool, len(families))
	for range families {
		for i := range families {
			if done[i] || bad[i] || !ready(families[i].After, done) {
				continue
			}
			states[i] = run(families, states, i)
			results[i] = states[i].result(families[i])
			done[i] = true
		}
	}
	return results, faults
}

func ready(after []int, done []bool) bool {
	for _, j := range after {
		if !done[j] {
			return false
		}
	}
	return true
}

// state is a family at work. All p-values are on the scale of the family's
// level a: q = p·a/alpha.
type state struct {
	alpha  float64
	work   float64  // the level it runs at: alpha, or a part behind a gate
	own    []pvalue // q
	adj    []pvalue // q̃
	level  []float64
	tested []bool
	path   []Step
	open   bool
}

// run adjusts family i, whose predecessors are in states.
func run(families []Family, states []state, i int) state {
	f := families[i]
	m := len(f.Members)
	s := state{own: scaled(f, func(m Member) dist.Tail { return m.P }), alpha: levelOf(f), open: true,
		adj: make([]pvalue, m), level: make([]float64, m), tested: make([]bool, m)}
	s.work = s.alpha
	var gains []gain
	if len(f.After) > 0 && f.RequireAny {
		gains = gainsOf(families[f.After[0]], states[f.After[0]])
		s.work *= openShare(gains)
	}
	switch f.Procedure {
	case All:
		s.all()
	case Bonferroni:
		s.bonferroni(f.Weights)
	case Hochberg:
		s.hochberg()
	case Hommel:
		s.hommel()
	case Holm, FixedSequence, Fallback, Graph:
		s.graph(graphOf(f))
	default:
		panic("family: unchecked procedure")
	}
	switch {
	case len(f.After) == 0:
	case f.RequireAny:
		s.parallelGate(gains)
	default:
		s.serialGate(f, states)
	}
	return s
}

// levelOf is the family's level: the largest of its members'.
func levelOf(f Family) float64 {
	a := 0.0
	for _, m := range f.Members {
		a = max(a, m.Alpha)
	}
	return a
}

func scaled(f Family, pick func(Member) dist.Tail) []pvalue {
	a := levelOf(f)
	q := make([]pvalue, len(f.Members))
	for j, m := range f.Members {
		q[j] = pvalueOf(pick(m)).times(a / m.Alpha).capped()
	}
	return q
}

// result turns the state back into the members' own units.
func (s *state) result(f Family) Result {
	out := Result{Alpha: s.alpha, Established: len(f.Members) > 0, Open: s.open, Path: s.path}
	against := scaled(f, func(m Member) dist.Tail { return m.Against })
	if f.Procedure != All {
		against = holmAdjusted(against)
	}
	worst := pvalue{ln: math.Inf(-1)}
	for j, m := range f.Members {
		back := m.Alpha / s.alpha
		a := Adjusted{
			P:            s.adj[j].times(back).capped().tail(),
			Against:      against[j].times(back).capped().tail(),
			Established:  s.adj[j].below(s.alpha),
			Contradicted: against[j].below(s.alpha),
		}
		if s.tested[j] {
			a.Level, a.Tested = s.level[j]*back, true
		}
		out.Established = out.Established && a.Established
		worst = larger(worst, s.adj[j])
		out.Members = append(out.Members, a)
	}
	out.P = worst.capped().tail()
	for k := range out.Path {
		st := &out.Path[k]
		st.Level *= f.Members[st.Member].Alpha / s.alpha
		st.P = f.Members[st.Member].P
	}
	return out
}

// holmAdjusted is the step-down adjustment with equal weights.
func holmAdjusted(q []pvalue) []pvalue {
	order := sortedIndex(q)
	out := make([]pvalue, len(q))
	t := pvalue{ln: math.Inf(-1)}
	for k, j := range order {
		t = larger(t, q[j].times(float64(len(q)-k)).capped())
		out[j] = t
	}
	return out
}
