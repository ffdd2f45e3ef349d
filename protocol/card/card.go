// Package card defines what can be explained: a measure, method, claim or
// diagnostic with its meaning, rule, assumptions, source and an example. Each
// package keeps its own cards beside its code; the commands join them.
package card

// Kind says what a card explains.
type Kind uint8

// The kinds of card.
const (
	Measure Kind = iota
	Method
	Claim
	Diagnostic
	Procedure // multiplicity, combination, pooling, spending, sensitivity
	Term      // a word of the printed record: readings, verdicts, S-value
)

// Card explains one word.
type Card struct {
	Kind        Kind
	Word        string   // as written in a record, or the diagnostic's code
	Of          []string // methods: the measures that have it; procedures: the keys that take the word, where the word alone is not clear
	Title       string   // a few words
	Meaning     string   // what it says, in plain words
	Formula     string   // the formula or the rule
	Assumptions string   // what must hold for it to be right
	Source      string   // author and year; "from memory" or "common practice, no source" where so
	Repair      string   // diagnostics: what to do
	Example     string   // a short record, compiled in tests; may be empty for diagnostics
}
