package family

import "math"

// Rule says what a family breaks; all of them are diagnostic S115.
type Rule uint8

// The rules.
const (
	UnknownProcedure Rule = iota
	NoMembers
	LevelOutside    // a member's level is not inside (0, 1)
	WeightsLength   // not one weight for each member
	WeightsOutside  // a weight is negative or not a number
	WeightsSum      // the weights add to more than 1
	TransferShape   // the matrix is not square in the members
	TransferOutside // a transfer is negative or not a number
	TransferRow     // a row adds to more than 1
	TransferSelf    // a member hands its level to itself
	OrderInvalid    // the order is not a permutation of the members
	AfterInvalid    // a gate names no family, or the family itself
	AfterCycle      // families wait for each other
	AnyGate         // "any" needs exactly one family before, by bonferroni
)

// String says the rule in words.
func (r Rule) String() string {
	switch r {
	case UnknownProcedure:
		return "unknown procedure"
	case NoMembers:
		return "no members"
	case LevelOutside:
		return "a level is not between 0 and 1"
	case WeightsLength:
		return "one weight for each member is needed"
	case WeightsOutside:
		return "a weight is negative"
	case WeightsSum:
		return "the weights add to more than 1"
	case TransferShape:
		return "the transfers need one row and one column for each member"
	case TransferOutside:
		return "a transfer is negative"
	case TransferRow:
		return "a row of transfers adds to more than 1"
	case TransferSelf:
		return "a member hands its level to itself"
	case OrderInvalid:
		return "the order must name every member once"
	case AfterInvalid:
		return "a gate names no other family"
	case AfterCycle:
		return "families wait for each other"
	case AnyGate:
		return "a gate that any success opens needs exactly one bonferroni family before it"
	}
	return "unknown rule"
}

// Code is the diagnostic of every rule here.
const Code = "S115"

// Fault is one broken rule. Member is the position it concerns, -1 for the
// family as a whole; Value is the number that breaks the rule, 0 where none
// does.
type Fault struct {
	Family int
	Rule   Rule
	Member int
	Value  float64
}

// slack allows for weights written in rounded decimals.
const slack = 1e-9

// Check lists everything wrong with the families. A family that waits for a
// faulty one is reported too (AfterInvalid), unless it has a fault of its own.
func Check(families []Family) []Fault {
	var out []Fault
	for i, f := range families {
		c := checker{i: i, f: f, all: families}
		c.members()
		c.weights()
		c.transfers()
		c.order()
		c.gates()
		out = append(out, c.out...)
	}
	out = append(out, cycles(families)...)
	return spread(families, out)
}

type checker struct {
	i   int
	f   Family
	all []Family
	out []Fault
}

func (c *checker) add(r Rule, member int, v float64) {
	c.out = append(c.out, Fault{Family: c.i, Rule: r, Member: member, Value: v})
}

func (c *checker) members() {
	switch c.f.Procedure {
	case All, Bonferroni, Holm, Hochberg, Hommel, FixedSequence, Fallback, Graph:
	default:
		c.add(UnknownProcedure, -1, 0)
	}
	if len(c.f.Members) == 0 {
		c.add(NoMembers, -1, 0)
	}
	for j, m := range c.f.Members {
		if !(m.Alpha > 0 && m.Alpha < 1) {
			c.add(LevelOutside, j, m.Alpha)
		}
	}
}

func (c *checker) weights() {
	w := c.f.Weights
	if w == nil {
		return
	}
	if len(w) != len(c.f.Members) {
		c.add(WeightsLength, -1, float64(len(w)))
		return
	}
	sum := 0.0
	for j, v := range w {
		if !(v >= 0) || math.IsInf(v, 1) {
			c.add(WeightsOutside, j, v)
			return
		}
		sum += v
	}
	if sum > 1+slack {
		c.add(WeightsSum, -1, sum)
	}
}

func (c *checker) transfers() {
	if c.f.Procedure != Graph {
		return
	}
	m := len(c.f.Members)
	if len(c.f.Transfer) != m {
		c.add(TransferShape, -1, float64(len(c.f.Transfer)))
		return
	}
	for j, row := range c.f.Transfer {
		if len(row) != m {
			c.add(TransferShape, j, float64(len(row)))
			continue
		}
		sum := 0.0
		for k, v := range row {
			switch {
			case !(v >= 0) || math.IsInf(v, 1):
				c.add(TransferOutside, j, v)
			case k == j && v != 0:
				c.add(TransferSelf, j, v)
			}
			sum += v
		}
		if sum > 1+slack {
			c.add(TransferRow, j, sum)
		}
	}
}

func (c *checker) order() {
	if c.f.Order == nil {
		return
	}
	m := len(c.f.Members)
	seen := make([]bool, m)
	for _, j := range c.f.Order {
		if j < 0 || j >= m || seen[j] {
			c.add(OrderInvalid, -1, float64(j))
			return
		}
		seen[j] = true
	}
	if len(c.f.Order) != m {
		c.add(OrderInvalid, -1, float64(len(c.f.Order)))
	}
}

func (c *checker) gates() {
	for _, j := range c.f.After {
		if j < 0 || j >= len(c.all) || j == c.i {
			c.add(AfterInvalid, -1, float64(j))
			return
		}
	}
	if c.f.RequireAny && (len(c.f.After) != 1 || c.all[c.f.After[0]].Procedure != Bonferroni) {
		c.add(AnyGate, -1, float64(len(c.f.After)))
	}
}

// cycles finds the families that can never be reached because they wait, in
// the end, for themselves.
func cycles(families []Family) []Fault {
	done := make([]bool, len(families))
	for range families {
		for i, f := range families {
			ok := true
			for _, j := range f.After {
				ok = ok && (j < 0 || j >= len(families) || done[j] || j == i)
			}
			done[i] = done[i] || ok
		}
	}
	var out []Fault
	for i := range families {
		if !done[i] {
			out = append(out, Fault{Family: i, Rule: AfterCycle, Member: -1})
		}
	}
	return out
}

// spread marks the families that wait for a faulty one.
func spread(families []Family, faults []Fault) []Fault {
	bad := make([]bool, len(families))
	for _, f := range faults {
		bad[f.Family] = true
	}
	for range families {
		for i, f := range families {
			if bad[i] {
				continue
			}
			for _, j := range f.After {
				if bad[j] {
					bad[i] = true
					faults = append(faults, Fault{Family: i, Rule: AfterInvalid, Member: -1, Value: float64(j)})
					break
				}
			}
		}
	}
	return faults
}
