package seal

import (
	"slices"
	"strings"
	"time"

	"steelyard/protocol/data"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// The states of a record against its chain.
const (
	Unsealed = "unsealed" // there is no chain
	Kept     = "sealed"   // what changed is wording or declared
	Changed  = "changed"  // something sealed was changed or removed without a declaration
	Broken   = "broken"   // the chain itself was changed
)

// The orders of seal and results, the best first.
const (
	BeforeResults = "before-results" // the seal precedes the results everywhere on Earth
	SameDay       = "same-day"       // it may
	AfterResults  = "after-results"
)

// State is how a record stands to its chain.
type State struct {
	State   string
	Broken  string // which seal, and how
	Entries []Entry
	Order   string // the worst over all results; Unsealed without a chain

	// Binding is the seal that the plan now is compared with: the last one
	// before the first results; the first one where none is before them; the
	// last one while there are none. Nil without a chain.
	Binding *Entry
	Binds   []Bind // of each [[result]], in order

	Changes    []Change    // from the binding seal to the plan now
	Amendments []Amendment // from seal to seal, whatever came of them
	Edited     []Edited    // results that are not as they were sealed
	Vanished   []Vanished  // deviations that are not as they were sealed
	Defaults   []Change    // defaults that this program chooses otherwise
	Witnesses  []Witness   // of each [[witness]], in order; filled by Witness

	// Unreadable says why the binding plan could not be read again as a record
	// with the present results; empty where it could or was not needed.
	Unreadable []string
}

// Bind is the seal that binds one result.
type Bind struct {
	Seal  int // its number; 0 when there is none
	Order string
}

// Amendment is what one seal changed in the plan of the seal before it.
type Amendment struct {
	Seal    int
	At      time.Time
	Changes []Change
}

// Edited is a result that was changed or removed after a seal.
type Edited struct {
	Name
	Seal     int    // the first seal that knew it otherwise
	Removed  bool   // it is no longer in the record
	File     string // the data file that was changed; "" when the entry was
	Declared bool   // a deviation names it as corrected
	By       int    // that deviation, from 0; -1 where none does
	Span     diag.Span
}

// Vanished is a deviation that was sealed and is changed or gone.
type Vanished struct {
	Seal int
	Date string
}

// PlanSHA256 is the digest of the binding plan; "" without a chain.
func (s *State) PlanSHA256() string {
	if s == nil || s.Binding == nil {
		return ""
	}
	return s.Binding.Plan
}

// Substantive reports whether a change of the plan can change a number.
func (s *State) Substantive() bool {
	return s != nil && slices.ContainsFunc(s.Changes, func(c Change) bool { return !c.Wording })
}

// Compare holds a record against its chain. Faults are warnings, each at its
// place in the record; those of the chain itself come from Parse.
func Compare(rec *record.Record, tables data.Tables, c *Chain) (*State, diag.List) {
	s := &State{State: Unsealed, Order: Unsealed}
	for range rec.Results {
		s.Binds = append(s.Binds, Bind{Order: Unsealed})
	}
	if c == nil {
		return s, nil
	}
	s.Entries = c.Entries
	if c.Broken != "" {
		s.State, s.Broken = Broken, c.Broken
		return s, nil
	}
	if len(c.Entries) == 0 {
		return s, nil
	}
	s.bind(rec)
	plan := rec.Tree.Get("plan")
	s.Changes = Changes(s.Binding.plan, plan, rec.Plan.At)
	s.withDefaults(s.Changes, s.Binding)
	s.amendments()
	var list diag.List
	s.declare(rec, &list)
	s.watch(rec, tables, &list)
	s.deviations(rec, &list)
	s.defaults(rec, &list)
	for _, w := range rec.Witnesses {
		if w.Seal.Stated && (w.Seal.V < 1 || w.Seal.V > int64(len(c.Entries))) {
			list.Add(diag.Warning("L209", w.Seal.Span, "there is no seal %d; the chain has %d", w.Seal.V, len(c.Entries)))
		}
	}
	s.State = Kept
	if slices.ContainsFunc(s.Changes, func(c Change) bool { return !c.Wording && !c.Declared }) ||
		slices.ContainsFunc(s.Edited, func(e Edited) bool { return !e.Declared }) || len(s.Vanished) > 0 {
		s.State = Changed
	}
	list.Sort()
	return s, list
}

// bind finds the seal before each result, and the one that binds the record.
func (s *State) bind(rec *record.Record) {
	s.Order = BeforeResults
	worst := map[string]int{BeforeResults: 0, SameDay: 1, AfterResults: 2}
	binding := len(s.Entries)
	for i, r := range rec.Results {
		b := bindOf(unaware(s.Entries, r), r)
		s.Binds[i] = b
		binding = min(binding, max(b.Seal, 1))
		if worst[b.Order] > worst[s.Order] {
			s.Order = b.Order
		}
	}
	s.Binding = &s.Entries[binding-1]
}

// unaware are the seals that did not know a result yet. One that holds its
// digest came after it, whatever date the result bears.
func unaware(seals []Entry, r *record.Result) []Entry {
	name := Name{"result", r.Study.V, r.Outcome.V, r.Set.V, lookText(r.Look)}
	for i, e := range seals {
		if slices.ContainsFunc(e.Results, func(k Sealed) bool { return k.Name == name }) {
			return seals[:i]
		}
	}
	return seals
}

// bindOf is the last seal that precedes a result, else the last that may
// have, else none.
func bindOf(seals []Entry, r *record.Result) Bind {
	earliest, latest := window(r)
	b := Bind{Order: AfterResults}
	for _, e := range seals {
		switch {
		case e.Time.Before(earliest):
			b = Bind{e.Number, BeforeResults}
		case e.Time.Before(latest) && b.Order != BeforeResults:
			b = Bind{e.Number, SameDay}
		}
	}
	return b
}

// window is when a result became known at the earliest and at the latest: the
// instant it states, or its date from its first moment anywhere on Earth, at
// UTC+14, to its last, at UTC−12.
func window(r *record.Result) (earliest, latest time.Time) {
	if r.Known.Stated {
		return r.Known.V, r.Known.V
	}
	day := r.Date.V.UTC()
	return day.Add(-14 * time.Hour), day.AddDate(0, 0, 1).Add(12 * time.Hour)
}

// withDefaults adds what the program had chosen where a key was absent.
func (s *State) withDefaults(changes []Change, e *Entry) {
	for i, c := range changes {
		if c.Old != "" {
			continue
		}
		for _, d := range e.Defaults {
			if d.Path == c.Path {
				changes[i].Default = d.Value
			}
		}
	}
}

func (s *State) amendments() {
	for i := 1; i < len(s.Entries); i++ {
		if changes := Changes(s.Entries[i-1].plan, s.Entries[i].plan, diag.Span{}); len(changes) > 0 {
			for j := range changes {
				changes[j].Span = diag.Span{} // places of a sealed plan are none of the record
			}
			s.withDefaults(changes, &s.Entries[i-1])
			s.Amendments = append(s.Amendments, Amendment{s.Entries[i].Number, s.Entries[i].Time, changes})
		}
	}
}

// declare marks the changes that deviations name, warns of the others, and of
// declarations of what never changed.
func (s *State) declare(rec *record.Record, list *diag.List) {
	for i, d := range rec.Deviations {
		for _, p := range d.Changes.V {
			found := false
			mark := func(changes []Change) {
				for j := range changes {
					if declares(p.V, changes[j].Path) {
						found = true
						if !changes[j].Declared {
							changes[j].Declared, changes[j].By = true, i
						}
					}
				}
			}
			mark(s.Changes)
			for _, a := range s.Amendments {
				mark(a.Changes)
			}
			if !found {
				list.Add(diag.Warning("L202", p.Span, "%s stands as it was sealed, or was changed as a part or a whole of another name", quote(p.V)).
					WithHelp("%s", s.helpPath(p.V)))
			}
		}
	}
	for _, c := range s.Changes {
		if c.Wording || c.Declared {
			continue
		}
		d := diag.Warning("L201", c.Span, "%s", changeText(c, s.Binding.Number))
		*list = append(*list, d.WithHelp("declare it: [[deviation]] with changes = [%s], or seal again before results are known", quote(c.Path)))
	}
}

// helpPath lists the changes that a wrong declaration may have meant.
func (s *State) helpPath(path string) string {
	var near []string
	for _, c := range s.Changes {
		if strings.HasPrefix(c.Path, path+".") || strings.HasPrefix(path, c.Path+".") {
			near = append(near, quote(c.Path))
		}
	}
	if len(near) == 0 {
		return "remove it, or correct the path"
	}
	return "name exactly what changed: " + strings.Join(near, ", ")
}

func quote(s string) string { return string(appendQuoted(nil, s)) }

func changeText(c Change, number int) string {
	switch {
	case c.Old == "" && c.Default != "":
		return quote(c.Path) + " is now " + c.New + ", and was left to its default, " + c.Default + ", in seal " + itoa(number)
	case c.Old == "":
		return quote(c.Path) + " was not in the plan of seal " + itoa(number)
	case c.New == "":
		return quote(c.Path) + " was " + short(c.Old) + " in seal " + itoa(number) + " and is gone"
	}
	return quote(c.Path) + " is now " + short(c.New) + " and was " + short(c.Old) + " in seal " + itoa(number)
}
