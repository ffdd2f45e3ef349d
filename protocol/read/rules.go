package read

import (
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// checker holds what the rules between fields share.
type checker struct {
	rec     *record.Record
	damaged bool               // names may be hidden by a fault: do not call them unknown
	refused map[diag.Span]bool // tables that are at fault as a whole
	list    diag.List

	outcomes   map[string]*record.Outcome
	hypotheses map[string]*record.Hypothesis
	families   map[string]*record.Family
	sets       map[string]*record.Set
	estimands  map[string]*record.Estimand
	seen       map[string]map[string]bool // outcome → studies with results
	member     map[string]string          // hypothesis → its family
	guesses    int                        // nearest names sought in long lists
}

// rules checks what no single key can tell.
func rules(rec *record.Record, damaged bool, refused map[diag.Span]bool) diag.List {
	c := &checker{
		rec: rec, damaged: damaged, refused: refused,
		outcomes:   byName(rec.Plan.Outcomes, func(o *record.Outcome) string { return o.Name }),
		hypotheses: byName(rec.Plan.Hypotheses, func(h *record.Hypothesis) string { return h.Name }),
		families:   byName(rec.Plan.Families, func(f *record.Family) string { return f.Name }),
		sets:       byName(rec.Plan.Sets, func(s *record.Set) string { return s.Name }),
		estimands:  byName(rec.Plan.Estimands, func(e *record.Estimand) string { return e.Name }),
		seen:       map[string]map[string]bool{},
		member:     map[string]string{},
	}
	for _, f := range rec.Plan.Families {
		for _, s := range f.Members.V {
			if c.member[s.V] == "" {
				c.member[s.V] = f.Name
			}
		}
	}
	for _, r := range rec.Results {
		if r.Study.Stated && r.Outcome.Stated && !r.LeaveOut.Stated {
			if c.seen[r.Outcome.V] == nil {
				c.seen[r.Outcome.V] = map[string]bool{}
			}
			c.seen[r.Outcome.V][r.Study.V] = true
		}
	}
	c.head()
	for _, o := range rec.Plan.Outcomes {
		c.outcome(o)
	}
	for _, h := range rec.Plan.Hypotheses {
		c.hypothesis(h)
	}
	c.unprotected()
	c.familyRules()
	c.dataRules()
	c.looks()
	c.evidenceRules()
	c.planningRules()
	c.results()
	c.history()
	return c.list
}

func byName[T any](list []*T, name func(*T) string) map[string]*T {
	m := make(map[string]*T, len(list))
	for _, x := range list {
		if m[name(x)] == nil {
			m[name(x)] = x
		}
	}
	return m
}

// absent reports that nothing was written: neither a value nor a fault.
func absent[T any](v record.Value[T]) bool { return !v.Stated && v.Span.IsZero() }

func (c *checker) add(d diag.Diagnostic) { c.list.Add(d) }

// known reports whether a name is one of a kind, and says so where it is not.
// A value at fault was reported before and is passed over.
func known[T any](c *checker, v record.String, what string, table map[string]*T) *T {
	if !v.Stated {
		return nil
	}
	if x := table[v.V]; x != nil {
		return x
	}
	if c.damaged {
		return nil
	}
	d := diag.Error("R301", v.Span, "there is no %s %s", what, quoteShort(v.V))
	if len(table) > longList && c.guesses > mostGuesses {
		c.add(d)
		return nil
	}
	names := make([]string, 0, len(table))
	for _, name := range sortedNames(table) {
		if name != "" {
			names = append(names, name)
		}
	}
	switch near := c.near(v.V, names); {
	case near != "":
		d = d.WithHelp("did you mean %q?", near)
	case len(names) == 0:
		d = d.WithHelp("the record declares none")
	case len(names) <= 12:
		d = d.WithHelp("declared: %s", words(names))
	}
	c.add(d)
	return nil
}

// Bounds of the search for nearest names.
const (
	longList    = 100 // names
	mostGuesses = 20  // searches through lists that are longer
)

// near is nearest, which gives up after some long lists.
func (c *checker) near(written string, names []string) string {
	if len(names) > longList {
		if c.guesses++; c.guesses > mostGuesses {
			return ""
		}
	}
	return nearest(written, names)
}

func sortedNames[T any](m map[string]*T) []string {
	names := make([]string, 0, len(m))
	for name := range m {
		names = append(names, name)
	}
	sortStrings(names)
	return names
}

// twice reports names that a list repeats.
func (c *checker) twice(list record.Strings) {
	seen := map[string]bool{}
	for _, s := range list.V {
		if s.Stated && seen[s.V] {
			c.add(diag.Error("R302", s.Span, "%s stands twice in this list", quoteShort(s.V)).WithHelp("delete one of the two"))
		}
		seen[s.V] = true
	}
}

// distinct lists the texts of a list once, in order.
func distinct(list record.Strings) []record.String {
	var out []record.String
	seen := map[string]bool{}
	for _, s := range list.V {
		if s.Stated && !seen[s.V] {
			out = append(out, s)
		}
		seen[s.V] = true
	}
	return out
}

// misplaced reports a key that says nothing here and would be passed over.
func (c *checker) misplaced(at diag.Span, key, reason string) {
	c.add(diag.Error("R304", at, "%q %s", key, reason).WithHelp("delete it: what is written is never passed over in silence"))
}

// strict reports whether the setting is one that is held to more.
func (c *checker) strict() bool {
	s := c.rec.Head.Setting
	return s.Stated && (s.V == "clinical" || s.V == "safety")
}

// num writes a number of a message.
func num(v float64) string { return record.FormatNumber(v) }

// stock are phrases that give no reason, in lower case without punctuation.
var stock = map[string]bool{
	"clinically relevant": true, "clinically meaningful": true, "clinical relevance": true, "clinical judgement": true,
	"clinical judgment": true, "expert opinion": true, "expert judgement": true, "common practice": true, "usual practice": true,
	"standard practice": true, "industry standard": true, "as usual": true, "by convention": true, "convention": true,
	"see protocol": true, "see plan": true, "to be defined": true, "to be decided": true, "to be determined": true,
	"not applicable": true, "not available": true, "no reason": true, "because": true, "just because": true,
	"based on literature": true, "from the literature": true, "from literature": true, "literature": true, "per literature": true,
	"practically relevant": true, "relevant difference": true, "meaningful difference": true, "smallest relevant difference": true,
	"minimal clinically important difference": true, "minimum clinically important difference": true, "mcid": true,
	"small effect": true, "medium effect": true, "large effect": true, "rule of thumb": true, "cohen": true, "default value": true,
	"it seems reasonable": true, "seems reasonable": true, "reasonable": true, "lorem ipsum": true, "statistically significant": true,
}

// filler are the words of which a phrase without a reason is made: whatever
// their order, they name no loss, no gain and no source.
var filler = wordSet(`a an the it is was as of by per in on for to we our us and or not no so this that which with from at
clinically clinical practically practical statistically relevant relevance meaningful important significant minimal minimum smallest
difference effect change size margin limit value threshold standard care usual common practice convention conventional protocol plan
agreed agreement consensus team group panel committee decided chosen set defined determined accepted acceptable reasonable appropriate
think thought believe feel seems expert experts opinion judgement judgment experience literature previous published studies study based
industry guideline guidelines rule thumb default small medium large x y z n tbd ok yes none`)

func wordSet(text string) map[string]bool {
	out := map[string]bool{}
	for _, w := range strings.Fields(text) {
		out[w] = true
	}
	return out
}

// empty reports whether every word is filler.
func empty(words []string) bool {
	for _, w := range words {
		if !filler[w] {
			return false
		}
	}
	return true
}

// reason checks that a text gives a reason.
func (c *checker) reason(v record.String, key string) {
	if !v.Stated {
		return
	}
	plain := strings.FieldsFunc(strings.ToLower(v.V), func(r rune) bool {
		return !(r >= 'a' && r <= 'z' || r >= '0' && r <= '9' || r > 127)
	})
	for len(plain) > 0 && (plain[0] == "a" || plain[0] == "the" || plain[0] == "it" || plain[0] == "is" || plain[0] == "an") {
		plain = plain[1:]
	}
	if len(plain) < 2 || empty(plain) || stock[strings.Join(plain, " ")] {
		c.add(diag.Error("R308", v.Span, "%q gives no reason: %s", key, quoteShort(v.V)).
			WithHelp("say what would be lost or gained at that size, and how it is known"))
	}
}
