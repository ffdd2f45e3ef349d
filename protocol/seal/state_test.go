package seal

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"steelyard/protocol/data"
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

func parsed(t *testing.T, chain []byte) *Chain {
	t.Helper()
	c, faults := Parse("a.seal", chain)
	if len(faults) > 0 {
		t.Fatal(faults)
	}
	return c
}

func compared(t *testing.T, text string, chain []byte) (*State, []string) {
	t.Helper()
	s, list := Compare(load(t, text), nil, parsed(t, chain))
	var words []string
	for _, d := range list {
		line, column := diag.NewSource("a.toml", []byte(text)).Position(d.Span.Start)
		words = append(words, fmt.Sprintf("%s %d:%d %s", d.Code, line, column, d.Message))
	}
	return s, words
}

const deviation = "[[deviation]]\ndate = 2026-05-02\nwhat = \"Changed.\"\nwhy = \"On request of the buyer.\"\nresults_known = true\n"

func TestCompareChanges(t *testing.T) {
	chain := sealed(t, nil, planned, "2026-04-01T08:00:00Z", nil)
	declare := func(paths string) string { return deviation + "changes = [" + paths + "]\n" }
	swap := func(old, new string) string {
		if !strings.Contains(planned, old) {
			t.Fatalf("nothing to change: %s", old)
		}
		return strings.Replace(planned, old, new, 1)
	}
	type change struct {
		Path, Old, New string
		Wording        bool
		Declared       bool
	}
	for _, tt := range []struct {
		name, text string
		state      string
		changes    []change
		faults     []string
	}{
		{"nothing", planned, Kept, nil, nil},
		{"layout", swap("alpha    = { one_sided = 0.05 }", "alpha.one_sided = 5e-2 # as agreed"), Kept, nil, nil},
		{"prose", swap("Seal peel strength", "Peel strength"), Kept,
			[]change{{"plan.outcome.peel.label", `"Seal peel strength"`, `"Peel strength"`, true, false}}, nil},
		{"a number", swap("smallest = 0.8", "smallest = 1.2"), Changed,
			[]change{{"plan.outcome.peel.smallest", "0.8", "1.2", false, false}},
			[]string{`L201 13:12 "plan.outcome.peel.smallest" is now 1.2 and was 0.8 in seal 1`}},
		{"a number, declared", swap("smallest = 0.8", "smallest = 1.2") + arrived + declare(`"plan.outcome.peel.smallest"`), Kept,
			[]change{{"plan.outcome.peel.smallest", "0.8", "1.2", false, true}}, nil},
		{"a level, declared by its table", swap("0.05", "0.04") + arrived + declare(`"plan.alpha"`), Kept,
			[]change{{"plan.alpha.one_sided", "0.05", "0.04", false, true}}, nil},
		{"declared too widely", swap("smallest = 0.8", "smallest = 1.2") + arrived + declare(`"plan.outcome.peel"`), Changed,
			[]change{{"plan.outcome.peel.smallest", "0.8", "1.2", false, false}},
			[]string{`L201 13:12 "plan.outcome.peel.smallest" is now 1.2 and was 0.8 in seal 1`,
				`L202 30:12 "plan.outcome.peel" stands as it was sealed, or was changed as a part or a whole of another name`}},
		{"a default replaced", swap("[plan]\n", "[plan]\nlevel = 0.9\n"), Changed,
			[]change{{"plan.level", "", "0.9", false, false}},
			[]string{`L201 6:9 "plan.level" is now 0.9, and was left to its default, 0.95, in seal 1`}},
		{"a key removed", swap("unit     = \"N\"\n", ""), Changed,
			[]change{{"plan.outcome.peel.unit", `"N"`, "", false, false}},
			[]string{`L201 8:1 "plan.outcome.peel.unit" was "N" in seal 1 and is gone`}},
		{"a table added", planned + "[plan.looks]\nfractions = [0.5, 1]\ntotal = 48\nspending = \"pocock\"\n", Changed,
			[]change{{"plan.looks", "", `{ fractions = [0.5, 1], total = 48, spending = "pocock" }`, false, false}},
			[]string{`L201 18:1 "plan.looks" was not in the plan of seal 1`}},
		{"an inline table added, declared", planned + "alpha = { one_sided = 0.01 }\n" + arrived + declare(`"plan.hypothesis.H1.alpha"`), Kept,
			[]change{{"plan.hypothesis.H1.alpha", "", "{ one_sided = 0.01 }", false, true}}, nil},
		{"a hypothesis renamed", swap("plan.hypothesis.H1", "plan.hypothesis.H2"), Changed,
			[]change{{"plan.hypothesis.H1", `{ claim = "equivalent", outcome = "peel" }`, "", false, false},
				{"plan.hypothesis.H2", "", `{ outcome = "peel", claim = "equivalent" }`, false, false}},
			[]string{`L201 15:1 "plan.hypothesis.H2" was not in the plan of seal 1`,
				`L201 15:7 "plan.hypothesis.H1" was { claim = "equivalent", outcome = "peel" } in seal 1 and is gone`}},
		{"an estimand added is prose", planned + "[plan.estimand.E]\npopulation = \"All pouches.\"\ntreatment = \"The adhesive.\"\nvariable = \"Peel strength.\"\nsummary = \"The mean.\"\n", Kept,
			[]change{{"plan.estimand.E", "", `{ population = "All pouches.", treatment = "The adhesive.", variable = "Peel strength.", summary = "The mean." }`, true, false}}, nil},
	} {
		t.Run(tt.name, func(t *testing.T) {
			s, faults := compared(t, tt.text, chain)
			var got []change
			for _, c := range s.Changes {
				got = append(got, change{c.Path, c.Old, c.New, c.Wording, c.Declared})
			}
			if d := cmp.Diff(tt.changes, got); d != "" {
				t.Errorf("changes (-want +got)\n%s", d)
			}
			if d := cmp.Diff(tt.faults, faults); d != "" {
				t.Errorf("faults (-want +got)\n%s", d)
			}
			if s.State != tt.state {
				t.Errorf("state %q, want %q", s.State, tt.state)
			}
		})
	}
}

// The prose of a filter is wording; its condition is not.
func TestCompareFilters(t *testing.T) {
	filters := "[[plan.data.exclude]]\ncolumn = \"lot\"\nequals = 3\nwhy = \"Started before the repair.\"\n"
	chain := sealed(t, nil, planned+filters, "2026-04-01T08:00:00Z", nil)
	for text, wording := range map[string]bool{strings.Replace(filters, "Started", "Made", 1): true, strings.Replace(filters, "3", "4", 1): false} {
		s, _ := compared(t, planned+text, chain)
		if len(s.Changes) != 1 || s.Changes[0].Path != "plan.data.exclude" || s.Changes[0].Wording != wording {
			t.Errorf("%s: %+v", text, s.Changes)
		}
	}
}

func TestCompareUnsealed(t *testing.T) {
	s, faults := compared(t, planned+arrived, nil)
	if s.State != Unsealed || s.Order != Unsealed || len(faults) > 0 || s.Binds[0] != (Bind{0, Unsealed}) || s.PlanSHA256() != "" || s.Substantive() {
		t.Errorf("%+v %v", s, faults)
	}
	broken, list := Compare(load(t, planned), nil, &Chain{Broken: "seal 2: lost"})
	if broken.State != Broken || broken.Broken != "seal 2: lost" || len(list) > 0 {
		t.Errorf("%+v", broken)
	}
	var none *State
	if none.Substantive() || none.PlanSHA256() != "" {
		t.Error("nil state")
	}
}

func TestOrder(t *testing.T) {
	day := record.Date{Year: 2026, Month: 4, Day: 12}
	result := func(d record.Date, known string) *record.Result {
		r := &record.Result{Date: record.Day{V: d, Stated: true}}
		if known != "" {
			r.Known = record.Instant{V: at(known), Stated: true}
		}
		return r
	}
	next := day
	next.Day++
	for _, tt := range []struct {
		seals  string // times
		result *record.Result
		want   Bind
	}{
		// 12 April begins at UTC+14, when it is 10:00 on the 11th at Greenwich.
		{"2026-04-11T09:59:59Z", result(day, ""), Bind{1, BeforeResults}},
		{"2026-04-11T10:00:00Z", result(day, ""), Bind{1, SameDay}},
		// It ends at UTC−12, when it is 12:00 on the 13th at Greenwich.
		{"2026-04-13T11:59:59Z", result(day, ""), Bind{1, SameDay}},
		{"2026-04-13T12:00:00Z", result(day, ""), Bind{0, AfterResults}},
		{"2026-04-01T00:00:00Z 2026-04-10T00:00:00Z 2026-04-12T00:00:00Z 2026-05-01T00:00:00Z", result(day, ""), Bind{2, BeforeResults}},
		{"2026-04-12T00:00:00Z 2026-04-12T06:00:00Z 2026-05-01T00:00:00Z", result(day, ""), Bind{2, SameDay}},
		{"2026-04-12T07:59:59Z", result(day, "2026-04-12T10:00:00+02:00"), Bind{1, BeforeResults}},
		{"2026-04-12T08:00:00Z", result(day, "2026-04-12T10:00:00+02:00"), Bind{0, AfterResults}},
	} {
		var seals []Entry
		for i, s := range strings.Fields(tt.seals) {
			seals = append(seals, Entry{Number: i + 1, Time: at(s)})
		}
		if got := bindOf(seals, tt.result); got != tt.want {
			t.Errorf("%s, known %v: %+v, want %+v", tt.seals, tt.result.Known.V, got, tt.want)
		}
	}
}

func TestBinding(t *testing.T) {
	second := strings.NewReplacer("0412", "0502", "2026-04-12", "2026-05-02").Replace(arrived)
	both := strings.Replace(planned, "claim   = \"equivalent\"", "claim   = \"equivalent\"\nevidence = \"single\"\nstudies = [\"Lot 0412\"]", 1) + arrived + second
	plan2 := strings.Replace(both, "smallest = 0.8", "smallest = 0.9", 1)
	one := strings.Replace(both, arrived+second, "", 1)
	chain := sealed(t, nil, one, "2026-04-01T08:00:00Z", nil)
	chain = sealed(t, chain, strings.Replace(plan2, second, "", 1), "2026-04-20T08:00:00Z", nil)

	s, faults := compared(t, plan2, chain)
	if s.Order != BeforeResults || s.Binding.Number != 1 || s.Binds[0].Seal != 1 || s.Binds[1].Seal != 2 || s.State != Changed {
		t.Errorf("order %s, binding %d, binds %v, state %s", s.Order, s.Binding.Number, s.Binds, s.State)
	}
	if len(s.Amendments) != 1 || s.Amendments[0].Seal != 2 || len(s.Amendments[0].Changes) != 1 || s.Amendments[0].Changes[0].New != "0.9" {
		t.Errorf("amendments %+v", s.Amendments)
	}
	if len(faults) != 1 || !strings.HasPrefix(faults[0], "L201") {
		t.Errorf("sealing again has washed a change: %q", faults)
	}
	// Going back to the first plan leaves the amendment in the list.
	if s, _ = compared(t, both, chain); s.State != Kept || len(s.Amendments) != 1 || len(s.Changes) != 0 {
		t.Errorf("state %s, amendments %+v", s.State, s.Amendments)
	}
	// An amendment before any result binds.
	if s, _ = compared(t, strings.Replace(plan2, arrived+second, "", 1), chain); s.Binding.Number != 2 || s.State != Changed || s.Order != BeforeResults {
		t.Errorf("binding %d, state %s", s.Binding.Number, s.State) // changed: the sealed result is gone
	}
	// Sealed after the only result: the first seal binds, and order says so.
	late := sealed(t, nil, planned+arrived, "2026-06-01T08:00:00Z", nil)
	late = sealed(t, late, strings.Replace(planned, "0.8", "0.7", 1)+arrived, "2026-06-02T08:00:00Z", nil)
	if s, _ = compared(t, planned+arrived, late); s.Order != AfterResults || s.Binding.Number != 1 || s.State != Kept {
		t.Errorf("order %s, binding %d, state %s", s.Order, s.Binding.Number, s.State)
	}
}

func TestWatch(t *testing.T) {
	chain := sealed(t, nil, planned, "2026-04-01T08:00:00Z", nil)
	missing := "[[missing_result]]\nstudy = \"Lot 0409\"\noutcome = \"peel\"\nwhy = \"The pouches were thrown away.\"\n"
	chain = sealed(t, chain, planned+arrived+missing+deviation, "2026-05-03T08:00:00Z", nil)
	edit := strings.Replace(arrived, "11.92", "11.98", 1)
	found := strings.NewReplacer("0412", "0409").Replace(arrived)
	single := strings.Replace(planned, "claim   = \"equivalent\"", "claim   = \"equivalent\"\nevidence = \"single\"\nstudies = [\"Lot 0412\"]", 1)
	for _, tt := range []struct {
		name, text string
		state      string
		edited     []Edited
		faults     []string
	}{
		{"as sealed", planned + arrived + missing + deviation, Kept, nil, nil},
		{"checked later", planned + arrived + "checked_by = \"A second person\"\n" + missing + deviation, Kept, nil, nil},
		{"edited", planned + edit + missing + deviation, Changed, []Edited{{Name: Name{Kind: "result", Study: "Lot 0412", Outcome: "peel"}, Seal: 2, By: -1}},
			[]string{`L203 18:1 the result of "Lot 0412" for "peel" is not as it was known in seal 2`}},
		{"edited and declared", planned + edit + missing + deviation + deviation + "results = [ { study = \"Lot 0412\", outcome = \"peel\" } ]\n", Kept,
			[]Edited{{Name: Name{Kind: "result", Study: "Lot 0412", Outcome: "peel"}, Seal: 2, Declared: true, By: 1}}, nil},
		{"removed", planned + missing + deviation, Changed, []Edited{{Name: Name{Kind: "result", Study: "Lot 0412", Outcome: "peel"}, Seal: 2, Removed: true, By: -1}},
			[]string{`L204 2:1 the result of "Lot 0412" for "peel" was known in seal 2 and is gone`}},
		{"missing removed", planned + arrived + deviation, Changed, []Edited{{Name: Name{Kind: "missing", Study: "Lot 0409", Outcome: "peel"}, Seal: 2, Removed: true, By: -1}},
			[]string{`L204 2:1 the missing result of "Lot 0409" for "peel" was known in seal 2 and is gone`}},
		{"missing found", single + arrived + found + deviation, Changed, nil, nil},
		{"deviation removed", planned + arrived + missing, Changed, nil,
			[]string{`L205 2:1 the deviation of 2026-05-02 that seal 2 knew was changed or removed`}},
		{"witness of no seal", planned + arrived + missing + deviation + "[[witness]]\nseal = 3\nwhat = \"Signed printout\"\nreference = \"Binder 7\"\nat = 2026-05-04T08:00:00Z\n", Kept, nil,
			[]string{`L209 35:8 there is no seal 3; the chain has 2`}},
	} {
		t.Run(tt.name, func(t *testing.T) {
			s, faults := compared(t, tt.text, chain)
			for i := range s.Edited {
				s.Edited[i].Span = diag.Span{}
			}
			if d := cmp.Diff(tt.edited, s.Edited); d != "" {
				t.Errorf("edited (-want +got)\n%s", d)
			}
			var rest []string
			for _, f := range faults {
				if !strings.HasPrefix(f, "L201") || !strings.Contains(f, "H1.") {
					rest = append(rest, f)
				}
			}
			if d := cmp.Diff(tt.faults, rest); d != "" {
				t.Errorf("faults (-want +got)\n%s", d)
			}
			if s.State != tt.state {
				t.Errorf("state %q, want %q", s.State, tt.state)
			}
		})
	}
	// Sealing the edited result does not wash the edit.
	again := sealed(t, chain, planned+edit+missing+deviation, "2026-05-04T08:00:00Z", nil)
	if s, _ := compared(t, planned+edit+missing+deviation, again); s.State != Changed || len(s.Edited) != 1 || s.Edited[0].Seal != 2 {
		t.Errorf("%s %+v", s.State, s.Edited)
	}
}

func TestWatchFiles(t *testing.T) {
	text := planned + "[[result]]\nstudy = \"Lot 0412\"\noutcome = \"peel\"\ndate = 2026-04-12\ndata = { file = \"lot.csv\", value = \"v\", group = \"g\" }\n"
	tables := func(sum string) data.Tables {
		return data.Tables{{Entry: 0}: {File: "lot.csv", SHA256: Digest([]byte(sum))}}
	}
	chain := sealed(t, nil, text, "2026-05-01T08:00:00Z", tables("old"))
	for sum, state := range map[string]string{"old": Kept, "new": Changed} {
		s, list := Compare(load(t, text), tables(sum), parsed(t, chain))
		if s.State != state || (len(list) == 1) != (sum == "new") {
			t.Errorf("%s: %s %v", sum, s.State, list)
		}
		if sum == "new" && (s.Edited[0].File != "lot.csv" || list[0].Code != "L206") {
			t.Errorf("%+v %v", s.Edited, list)
		}
	}
	corrected := text + deviation + "results = [ { study = \"Lot 0412\", outcome = \"peel\" } ]\n"
	if s, list := Compare(load(t, corrected), tables("new"), parsed(t, chain)); s.State != Kept || len(list) > 0 || !s.Edited[0].Declared {
		t.Errorf("declared: %s %v", s.State, list)
	}
}

// What is masked is not known: sealing does not fix it.
func TestSealMasked(t *testing.T) {
	looks := "[plan.looks]\nfractions = [0.5, 1]\ntotal = 48\nspending = \"pocock\"\n"
	e := New(load(t, planned+looks+arrived), nil, "0.1.0", time.Time{})
	if len(e.Results) != 0 {
		t.Errorf("masked results in a seal: %v", e.Results)
	}
	if e = New(load(t, planned+looks+strings.Replace(arrived, "date ", "look = 1\ndate ", 1)), nil, "0.1.0", time.Time{}); len(e.Results) != 1 || e.Results[0].Look != "1" {
		t.Errorf("results of a look: %v", e.Results)
	}
}

func TestDefaultsChanged(t *testing.T) {
	c := parsed(t, sealed(t, nil, planned, "2026-04-01T08:00:00Z", nil))
	for i, d := range c.Entries[0].Defaults {
		if d.Path == "plan.level" {
			c.Entries[0].Defaults[i].Value = "0.9"
		}
	}
	s, list := Compare(load(t, planned), nil, c)
	if len(list) != 1 || list[0].Code != "L208" || len(s.Defaults) != 1 || s.Defaults[0].Old != "0.9" || s.Defaults[0].New != "0.95" {
		t.Errorf("%v %+v", list, s.Defaults)
	}
	if s, list = Compare(load(t, strings.Replace(planned, "[plan]\n", "[plan]\nlevel = 0.9\n", 1)), nil, c); len(list) != 1 || list[0].Code != "L201" || s.Changes[0].Default != "0.9" {
		t.Errorf("%v %+v", list, s.Changes)
	}
}

func TestSealedRecord(t *testing.T) {
	filters := "[[plan.data.exclude]]\ncolumn = \"lot\"\nequals = \"3\"\nwhy = \"Lot \\\"3\\\" was made before the repair.\"\n"
	now := load(t, planned+arrived+deviation+"changes = [\"plan.alpha.one_sided\"]\n")
	for _, plan := range []string{strings.Replace(planned, "0.05", "0.04", 1), planned + filters} {
		c := parsed(t, sealed(t, nil, plan, "2026-04-01T08:00:00Z", nil))
		rec, reasons := SealedRecord(now, &c.Entries[0])
		if rec == nil || PlanDigest(rec) != c.Entries[0].Plan || len(rec.Results) != 1 || rec.Results[0].Groups[0].Mean.V != 11.92 || len(rec.Deviations) != 1 {
			t.Errorf("%s\n%v", plan, reasons)
		}
	}
	// The present result belongs to no outcome of the old plan: a reason.
	c := parsed(t, sealed(t, nil, strings.NewReplacer("outcome.peel", "outcome.tear", "outcome = \"peel\"", "outcome = \"tear\"").Replace(planned), "2026-04-01T08:00:00Z", nil))
	if rec, reasons := SealedRecord(now, &c.Entries[0]); rec != nil || len(reasons) == 0 {
		t.Errorf("a result without its outcome: %v", reasons)
	}
	if rec, reasons := SealedRecord(now, nil); rec != nil || len(reasons) == 0 {
		t.Error("a record out of no seal")
	}
}

// JSON has no infinity: the text "inf" is one again where a number belongs,
// and a text where a text does.
func TestRestore(t *testing.T) {
	n, err := parseCanonical([]byte(`{"data":{"exclude":[{"at_most":"inf","column":"inf","equals":"inf"}]},"outcome":{"inf":{"label":"-inf","spec":["-inf",5e-7]}}}`))
	if err != nil {
		t.Fatal(err)
	}
	want := `{ data = { exclude = [{ at_most = inf, column = "inf", equals = "inf" }] }, outcome = { inf = { label = "-inf", spec = [-inf, 5e-07] } } }`
	if got := text(restore("plan", n)); got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}
