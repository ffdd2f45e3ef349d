package render_test

import (
	"strings"
	"testing"

	"steelyard/compute/result"
	"steelyard/protocol"
	"steelyard/protocol/diag"
	"steelyard/render"
	"steelyard/render/internal/fixture"
	"steelyard/render/number"
	"steelyard/render/page"
)

// Page one has every item that it must have, before the first page break.
func TestPageOne(t *testing.T) {
	in, res := fixture.Trial()
	doc := render.Compose(in, res)
	var one strings.Builder
	for _, b := range doc.Blocks {
		if _, ok := b.(page.PageBreak); ok {
			break
		}
		one.WriteString(words(b))
	}
	flat := strings.NewReplacer(number.Hard, " ", number.Thin, " ").Replace(one.String())
	for _, want := range []string{
		"CL-0077, version 3", "review", "2026-09-30", res.Record.SourceSHA256[:16], // identity
		"Can the short infusion replace", "randomised one to one", // question and comparison
		"OPEN", "ESTABLISHED", "−4.8 to 4.3 percentage points", "95 % interval", "Margin 4 percentage points", "Half of what the standard infusion gains", // verdicts
		"short 300 / 309 / 300 / 9", "2 planned; 2 taken", // numbers and looks
		"Sealed before results", "1 undeclared change", "1 sealed result changed later", "1 result left out", "1 result missing", "1 result earlier", // seal and counts
		"As claimed above: H2 and H3", "H1: its claim (open)", // support
		"about 993 participants", "Offer the short infusion", "Monitoring board", "Lead statistician", // needs and decision
		"does not replace it", "licensed practice", "steelyard verify trial.pdf", // caution and check
	} {
		if !strings.Contains(flat, want) {
			t.Errorf("page one lacks %q", want)
		}
	}
}

// Several primary claims in no family are a warning on page one.
func TestPageOneWarns(t *testing.T) {
	in, res := fixture.Peel()
	res.Diagnostics = append(res.Diagnostics, diag.Warning("R319", diag.Span{}, "H1 and H2 are both primary and in no family"))
	for _, b := range render.Compose(in, res).Blocks {
		if _, ok := b.(page.PageBreak); ok {
			t.Fatal("page one is silent")
		}
		if strings.Contains(words(b), "Warning: H1 and H2 are both primary and in no family.") {
			return
		}
	}
}

// Sections with nothing to say are left out, except deviations.
func TestSections(t *testing.T) {
	titles := func(load func() (*protocol.Loaded, *result.Result)) string {
		in, res := load()
		var s []string
		for _, b := range render.Compose(in, res).Blocks {
			if h, ok := b.(page.Heading); ok && h.Level == 1 {
				s = append(s, page.Plain(h.Text))
			}
		}
		return strings.Join(s, " | ")
	}
	waiting := titles(fixture.Waiting)
	for _, none := range []string{"What arrived", "Pooled", "Looks", "Combined", "beliefs", "Sign-off"} {
		if strings.Contains(waiting, none) {
			t.Errorf("a plan without results has %q: %s", none, waiting)
		}
	}
	if !strings.Contains(waiting, "Deviations and changes") {
		t.Error("deviations are left out")
	}
	want := "The plan, changed since it was sealed | What arrived | The analysis of each hypothesis | Pooled evidence | Combined p-values | Families of claims | Looks and boundaries | Stated beliefs and how far the results move them | What next | Timeline | Deviations and changes since the seal | Diagnostics | The conclusion in the user's words, beside the computed one | Cautions"
	if got := titles(fixture.Trial); !strings.HasPrefix(got, want) {
		t.Errorf("order of sections:\n got %s\nwant %s", got, want)
	}
}
