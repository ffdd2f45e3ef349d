package compute

import (
	"fmt"
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/diag"
)

// Two outcomes, invented: strength is equivalent, pain is open; a third is not judged.
const twoOutcomes = `steelyard = 1
[record]
title = "Invented"
setting = "quality"
%s
[plan]
question = "Is the new adhesive as strong as the current one?"
alpha = { one_sided = 0.05 }
%s
[plan.outcome.peel]
label = "Seal peel strength"
unit = "N"
measure = "mean-difference"
groups = ["new", "current"]
smallest = 0.8
why = "Below 0.8 N the difference is lost between lots."
[plan.outcome.pain]
label = "Opening effort"
unit = "mm"
measure = "mean-difference"
better = "lower"
groups = ["new", "current"]
smallest = 5
why = "Below 5 mm nobody in the panel notices."
[plan.outcome.odour]
label = "Odour score"
measure = "mean-difference"
groups = ["new", "current"]
[plan.hypothesis.H1]
outcome = "peel"
claim = "equivalent"
[plan.hypothesis.H2]
outcome = "pain"
claim = "superior"
[plan.family.F]
members = ["H1", "H2"]
procedure = "all"
[[result]]
study = "S1"
outcome = "peel"
date = 2026-04-12
groups.new = { n = 100, mean = 12.0, sd = 1.2 }
groups.current = { n = 100, mean = 12.1, sd = 1.2 }
[[result]]
study = "S1"
outcome = "pain"
date = 2026-04-12
groups.new = { n = 20, mean = 30, sd = 12 }
groups.current = { n = 20, mean = 32, sd = 12 }
[conclusion]
text = %s
`

func concluded(t *testing.T, head, plan, token string) (*result.Result, *diag.Source, []string) {
	t.Helper()
	in := protocol.Load("a.toml", []byte(fmt.Sprintf(twoOutcomes, head, plan, token)), nil, nil)
	for _, d := range in.Diagnostics {
		if d.Severity == diag.SeverityError {
			t.Fatal(diag.Format(d, in.Source))
		}
	}
	res := Run(in, "test")
	var out []string
	for _, d := range res.Diagnostics {
		if strings.HasPrefix(d.Code, "W") {
			out = append(out, fmt.Sprintf("%s %s", d.Code, in.Source.Text[d.Span.Start:d.Span.End]))
		}
	}
	return res, in.Source, out
}

func TestConclusionOfARecord(t *testing.T) {
	for _, tt := range []struct {
		name, head, plan, token, want string
	}{
		{name: "supported", token: `"The seals are as strong as with the current adhesive to within 0.8 N. Whether opening takes less effort remains open."`},
		{name: "effort is open", token: `"Opening effort is lower with the new adhesive."`, want: "W105 lower"},
		{name: "each its own", token: `"Seal peel strength is equivalent. Opening effort is equivalent."`, want: "W107 equivalent"},
		{name: "of the outcome named before", token: `"Opening effort was measured by a panel. The adhesives are equivalent."`, want: "W107 equivalent"},
		{name: "not judged", token: `"The odour score is lower with the new adhesive."`, want: "W123 lower"},
		{name: "hypotheses by name", token: `"H1 was established. H2 was established."`, want: "W124 H2 was established"},
		{name: "escapes", token: `"The panel\u2019s \"opening effort\" had\tno\u0020effect."`, want: `W101 no\u0020effect`},
		{name: "several lines", token: "\"\"\"\nThe seals hold.\n\nOpening effort is \\\n   unaffected.\n\"\"\"", want: "W101 unaffected"},
		{name: "another language", token: `"Der neue Klebstoff ist nicht schlechter als der alte und wird verwendet."`,
			want: `W100 "Der neue Klebstoff ist nicht schlechter als der alte und wird verwendet."`},
		{name: "cause", token: `"The lower peel strength is caused by humidity."`, want: "W110 caused"},
		{name: "cause, at random", plan: "design = \"pouches assigned at random\"", token: `"The scatter of strength is caused by humidity."`},
	} {
		t.Run(tt.name, func(t *testing.T) {
			res, _, got := concluded(t, tt.head, tt.plan, tt.token)
			if strings.Join(got, "; ") != tt.want {
				t.Errorf("%s\n raised %q, want %q", tt.token, strings.Join(got, "; "), tt.want)
			}
			if res.Conclusion.Checked == strings.HasPrefix(tt.want, "W100") {
				t.Errorf("checked: %v", res.Conclusion.Checked)
			}
		})
	}
}

// A message quotes what was written, says how the claim stands, and offers a sentence.
func TestConclusionMessage(t *testing.T) {
	in := protocol.Load("a.toml", []byte(fmt.Sprintf(twoOutcomes, "", "", "\"\"\"\nIn short:\n  opening effort had no effect.\"\"\"")), nil, nil)
	res := Run(in, "test")
	var got string
	for _, d := range res.Diagnostics {
		if strings.HasPrefix(d.Code, "W") {
			got += diag.Format(d, in.Source)
		}
	}
	for _, want := range []string{"a.toml:53:22: warning: “no effect” says that there is no effect", "H2 (Opening effort, superior) is open", "values from -8", "help: write for example: “For opening effort the data leave superiority open; values from",
		"                         ^^^^^^^^^"} {
		if !strings.Contains(got, want) {
			t.Errorf("%q is not in\n%s", want, got)
		}
	}
}

// What the fix offers must itself pass.
func TestOfferedSentencesPass(t *testing.T) {
	for _, s := range readCorpus(t) {
		if len(s.codes) == 0 {
			continue
		}
		k := s.checker
		for _, f := range k.check(s.text) {
			_, offered, _ := strings.Cut(f.repair, "“")
			offered = strings.TrimSuffix(offered, "”")
			again := s.checker
			for _, g := range again.check(offered) {
				t.Errorf("%s offers %q, which raises %s for %q", f.code, offered, g.code, offered[g.at.Start:g.at.End])
			}
		}
	}
}
