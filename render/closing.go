package render

import (
	"path"
	"sort"
	"strings"

	"steelyard/compute"
	"steelyard/compute/result"
	"steelyard/protocol/card"
	"steelyard/protocol/diag"
	"steelyard/render/number"
	"steelyard/render/page"
)

// diagnostics prints every warning and note.
func (c *composer) diagnostics() {
	if len(c.res.Diagnostics) == 0 {
		return
	}
	c.heading(1, "Diagnostics", "diagnostics")
	t := newTable("", "Place", "Kind", "Message", "Code")
	for _, g := range c.grouped() {
		message := signed(g.message)
		if len(g.names) > 0 {
			message = join(g.names) + ": " + message
		}
		if g.help != "" {
			message = fullStop(message) + " Help: " + g.help
		}
		t.row(g.place, g.kind, message, g.code)
	}
	t.to(c)
}

// finding is a diagnostic, with all the claims of which it says the same.
type finding struct {
	names                            []string
	place, kind, message, help, code string
}

// grouped are the diagnostics; what is said of several claims in the same
// words stands once.
func (c *composer) grouped() []finding {
	var out []finding
	at := map[sameFinding]int{}
	for _, d := range c.res.Diagnostics {
		file, line, column := c.in.Source.Place(d)
		where := ""
		if line > 0 {
			where = ":" + plainInt(line) + ":" + plainInt(column)
		}
		g := finding{place: path.Base(file) + where, kind: d.Severity.String(), message: d.Message, help: d.Help, code: d.Code}
		if name, rest, ok := strings.Cut(d.Message, ": "); ok && c.hypothesis(name) != nil {
			g.names, g.message = []string{name}, c.said(name, d.Code, rest)
			key := sameFinding{path.Base(file), g.kind, g.message, g.help, g.code}
			if k, seen := at[key]; seen {
				out[k].names = append(out[k].names, name)
				out[k].place += ", " + strings.TrimPrefix(where, ":")
				continue
			}
			at[key] = len(out)
		}
		out = append(out, g)
	}
	return out
}

// said is a message about a claim with its numbers written as everywhere on
// the page, where the claim's own analysis holds it.
func (c *composer) said(name, code, message string) string {
	for _, n := range c.hypothesis(name).Notes {
		if n.Code == code && compute.Text(n) == message {
			return noteText(n)
		}
	}
	return message
}

// sameFinding is what makes two findings the same.
type sameFinding struct{ file, kind, message, help, code string }

// plainInt writes an integer without grouping, for places.
func plainInt(n int) string { return strings.ReplaceAll(number.Int(n), number.Thin, "") }

// conclusion prints the user's conclusion beside the computed one.
func (c *composer) conclusion() {
	u := &c.res.Conclusion
	if u.Text == "" && u.Decision == "" && u.NextSteps == "" {
		return
	}
	c.heading(1, "The conclusion in the user's words, beside the computed one", "conclusion")
	if u.Text != "" {
		c.add(page.Paragraph{Text: page.T(u.Text), Style: page.Quote})
		if !u.Checked {
			c.small("This text was not checked against the verdicts.")
		}
	}
	var l list
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		l.named(h.Name, Sentence(c.res, h, &h.Judged))
	}
	l.to(c)
	n := 0
	for _, d := range c.res.Diagnostics {
		if strings.HasPrefix(d.Code, "W") && d.Severity != diag.SeverityNote {
			n++
		}
	}
	if n > 0 {
		c.para("Phrases that claim more than the analysis supports: " + number.Int(n) + ", listed under Diagnostics.")
	}
	var f facts
	f.add("Decision", u.Decision)
	f.add("Next steps", u.NextSteps)
	f.to(c, 1)
}

// cautions prints the full caution and the record's own circumstances.
func (c *composer) cautions() {
	c.heading(1, "Cautions", "cautions")
	_, full := caution(c.res.Record.Setting)
	c.para(full)
	c.para("A confidence interval states what the data are compatible with under the stated method; other sources of error, such as bias in how units were chosen or measured, are outside it.")
	var l list
	h := &c.rec.Head
	l.named("Funding", h.Funding.V)
	l.named("Interests", h.Interests.V)
	l.to(c)
}

// methods lists the methods used with their published sources.
func (c *composer) methods() {
	used, cards := c.usedWords(), methodCards()
	t := newTable("", "Word", "Method", "Rule", "Assumes", "Source")
	seen := map[[2]string]bool{}
	for _, w := range used {
		k := findCard(cards, w)
		if k == nil || seen[[2]string{w.word, k.Title}] {
			continue
		}
		seen[[2]string{w.word, k.Title}] = true
		t.row(w.word, k.Title, formula(k.Formula), formula(k.Assumptions), k.Source)
	}
	for i, share := range []float64{0.13, 0.16, 0.32, 0.22, 0.17} {
		t.Columns[i].Share = share
	}
	if len(t.Rows) == 0 {
		return
	}
	c.heading(1, "Methods used, with their sources", "methods")
	t.to(c)
}

// usedWord is a method or procedure that this record used.
type usedWord struct {
	kind card.Kind
	word string
	of   string // measure or key
}

// usedWords lists methods and procedures, sorted.
func (c *composer) usedWords() []usedWord {
	seen := map[usedWord]bool{}
	add := func(kind card.Kind, word, of string) {
		if word != "" {
			seen[usedWord{kind, word, of}] = true
		}
	}
	for i := range c.res.Hypotheses {
		h := &c.res.Hypotheses[i]
		add(card.Method, h.Method, outcomeOf(c.res, h.Outcome).Measure)
		add(card.Claim, h.Claim, "")
	}
	for _, s := range c.res.Studies {
		add(card.Method, s.Analysis.Method, outcomeOf(c.res, s.Outcome).Measure)
	}
	for _, p := range c.res.Pooled {
		if p.Decides {
			add(card.Procedure, p.Model, "plan.pooling.model")
			add(card.Procedure, p.Between, "plan.pooling.between")
			add(card.Procedure, p.Interval, "plan.pooling.interval")
			add(card.Procedure, p.Weights, "plan.pooling.weights")
		}
	}
	for _, s := range c.res.Sensitivity {
		add(card.Procedure, s.Kind, "plan.sensitivity.kind")
	}
	for _, x := range c.res.Combined {
		add(card.Procedure, x.Method, "")
	}
	for _, f := range c.res.Families {
		add(card.Procedure, f.Procedure, "")
	}
	if l := c.rec.Plan.Looks; l != nil {
		add(card.Procedure, l.Spending.V, "")
	}
	out := make([]usedWord, 0, len(seen))
	for w := range seen {
		out = append(out, w)
	}
	sort.Slice(out, func(i, j int) bool {
		a, b := out[i], out[j]
		if a.kind != b.kind {
			return a.kind < b.kind
		}
		if a.word != b.word {
			return a.word < b.word
		}
		return a.of < b.of
	})
	return out
}

// choices prints every analysis choice and where it came from.
func (c *composer) choices() {
	if len(c.res.Choices) == 0 {
		return
	}
	c.heading(1, "Every choice, and whether the plan or a default made it", "choices")
	t := newTable("", "Choice", "Value", "From", "Why")
	for _, x := range c.res.Choices {
		t.row(x.What, signed(x.Value), x.From, x.Why)
	}
	t.to(c)
}

// reproduce says how to make this document again.
func (c *composer) reproduce() {
	c.heading(1, "How to reproduce this record", "reproduce")
	var f facts
	f.add("Program", "steelyard "+c.res.Engine)
	f.code("SHA-256 of the record", c.res.Record.SourceSHA256)
	f.code("SHA-256 of the plan now", c.res.Record.PlanSHA256)
	f.code("SHA-256 of the sealed plan", c.res.Seal.PlanSHA256)
	seen := map[string]bool{}
	for _, x := range c.res.Files {
		if !seen[x.Path] {
			seen[x.Path] = true
			f.code("SHA-256 of "+x.Path, x.SHA256)
		}
	}
	f.to(c, 1)
	name := path.Base(c.in.Source.Name)
	c.add(page.Verbatim{Lines: []string{"steelyard compile --to pdf,json " + name}})
	c.small("The same record, seal, data and version of the program give the same numbers; on one type of processor, the same bytes.")
}

// signOff prints the signature block and the record's references.
func (c *composer) signOff() {
	h := &c.rec.Head
	var f facts
	for _, r := range h.References {
		f.add("Reference: "+r.Name, r.Text.V)
	}
	if h.Ethics != nil {
		f.add("Ethics", strings.TrimSpace(h.Ethics.Body.V+" "+h.Ethics.Number.V+" "+dateText(h.Ethics.Date.V)))
	}
	if h.Registry != nil {
		f.add("Registry", strings.TrimSpace(h.Registry.Body.V+" "+h.Registry.Number.V+" "+dateText(h.Registry.Date.V)))
	}
	for _, e := range h.Equipment {
		f.add("Equipment "+e.ID.V, e.What.V+", calibrated until "+dateText(e.CalibratedUntil.V))
	}
	for _, a := range h.Authors {
		f.add("Author", strings.Trim(strings.Join([]string{a.Name.V, a.Role.V, a.Affiliation.V}, ", "), ", "))
	}
	if s := h.Supersedes; s != nil {
		f.add("Replaces", s.Number.V+" "+s.Version.V+" "+s.SHA256.V)
	}
	if len(f.items) > 0 {
		c.heading(1, "References, people and equipment", "references")
		f.to(c, 1)
	}
	if len(h.ApprovalsWanted) == 0 {
		return
	}
	c.heading(1, "Sign-off", "sign-off")
	var b page.Signatures
	for _, w := range h.ApprovalsWanted {
		b.Rows = append(b.Rows, page.Signature{Role: w.Role.V, Name: w.Name.V, Meaning: w.Meaning.V})
	}
	note := noSignature
	if d := signedDigest(c.res); d != "" {
		note += " Plan SHA-256 " + d + "."
	}
	b.Note = page.T(note)
	c.add(b)
}

// signedDigest is the plan's digest that a signature binds.
func signedDigest(res *result.Result) string {
	if res.Seal.PlanSHA256 != "" {
		return res.Seal.PlanSHA256
	}
	return res.Record.PlanSHA256
}
