package main

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"steelyard/compute"
	"steelyard/compute/belief"
	"steelyard/compute/claim"
	"steelyard/compute/combine"
	"steelyard/compute/effect"
	"steelyard/compute/family"
	"steelyard/compute/pool"
	"steelyard/compute/survival"
	"steelyard/protocol/card"
	"steelyard/protocol/data"
	"steelyard/protocol/read"
	"steelyard/protocol/seal"
	"steelyard/protocol/wording"
)

// cards joins the cards of all packages.
func cards() []card.Card {
	return slices.Concat(effect.Cards, survival.Cards, claim.Cards, compute.Cards, family.Cards, pool.Cards, combine.Cards, belief.Cards,
		read.Cards, data.Cards, seal.Cards, wording.Cards)
}

// exampleFiles are the data files that examples name, with their text.
func exampleFiles() map[string]string {
	files := effect.ExampleFiles()
	maps.Copy(files, survival.ExampleFiles())
	return files
}

// kindName is a kind of card for readers.
func kindName(k card.Kind) string {
	switch k {
	case card.Measure:
		return "measure"
	case card.Method:
		return "method"
	case card.Claim:
		return "claim"
	case card.Diagnostic:
		return "diagnostic"
	case card.Procedure:
		return "procedure"
	case card.Term:
		return "term"
	}
	panic("steelyard: unknown kind of card")
}

// cardsOf finds the cards of a word. Letters of codes may be small, and the
// words of a reading may be joined by hyphens; readings of an outcome without
// a better direction are those of one with it.
func cardsOf(word string) []card.Card {
	var found []card.Card
	for _, c := range cards() {
		if plainWord(c.Word) == plainWord(word) {
			found = append(found, c)
		}
	}
	if found == nil {
		if w := neutral.Replace(word); w != word {
			return cardsOf(w)
		}
	}
	return found
}

var neutral = strings.NewReplacer("higher", "better", "lower", "worse")

func plainWord(w string) string {
	return strings.ReplaceAll(strings.ReplaceAll(strings.ToLower(w), ",", ""), " ", "-")
}

// explained finds what the arguments of explain mean: one word, perhaps of
// several parts, or a word and the measure or key that it belongs to, or its
// kind, where it has several meanings. Nothing found is an error that names
// what is near.
func explained(args []string) ([]card.Card, error) {
	whole := strings.Join(args, " ")
	if found := cardsOf(whole); found != nil {
		return found, nil
	}
	for i := len(args) - 1; i > 0; i-- {
		word, of := strings.Join(args[:i], " "), strings.Join(args[i:], " ")
		all := cardsOf(word)
		if all == nil {
			continue
		}
		var found []card.Card
		var places []string
		for _, c := range all {
			if belongs(c, of) {
				found = append(found, c)
			}
			places = append(append(places, kindName(c.Kind)), c.Of...)
		}
		if found == nil {
			slices.Sort(places)
			return nil, fmt.Errorf("%q has no meaning for %q; it has one for %s", word, of, strings.Join(slices.Compact(places), ", "))
		}
		return found, nil
	}
	err := fmt.Errorf("nothing is known of %q", whole)
	if n := near(whole); n != nil {
		err = fmt.Errorf("%w; near it: %s", err, strings.Join(n, ", "))
	}
	return nil, err
}

// belongs reports whether a card's word belongs to a measure, a key or the
// last part of one, or is of a kind.
func belongs(c card.Card, of string) bool {
	if strings.EqualFold(kindName(c.Kind), of) {
		return true
	}
	return slices.ContainsFunc(c.Of, func(o string) bool {
		return strings.EqualFold(o, of) || slices.Contains(strings.Split(o, "."), strings.ToLower(of))
	})
}

// words lists the words that have a card, each once, in order.
func words() []string {
	var list []string
	for _, c := range cards() {
		list = append(list, c.Word)
	}
	slices.Sort(list)
	return slices.Compact(list)
}

// near lists the words that are most like one that is not there: those that
// begin or end with it, then those few letters away.
func near(word string) []string {
	word = strings.ToLower(word)
	type scored struct {
		word  string
		score int
	}
	var list []scored
	for _, w := range words() {
		low := strings.ToLower(w)
		switch d := distance(word, low); {
		case len(word) > 2 && strings.Contains(low, word) || len(low) > 2 && strings.Contains(word, low):
			list = append(list, scored{w, 0})
		case d <= max(1, len(word)/3):
			list = append(list, scored{w, d})
		}
	}
	slices.SortStableFunc(list, func(a, b scored) int { return a.score - b.score })
	var out []string
	for _, s := range list[:min(3, len(list))] {
		out = append(out, s.word)
	}
	return out
}

// distance counts the letters to be inserted, removed or changed (Levenshtein
// 1966).
func distance(a, b string) int {
	x, y := []rune(a), []rune(b)
	row := make([]int, len(y)+1)
	for j := range row {
		row[j] = j
	}
	for i := range x {
		diagonal := row[0]
		row[0] = i + 1
		for j := range y {
			cost := 1
			if x[i] == y[j] {
				cost = 0
			}
			diagonal, row[j+1] = row[j+1], min(row[j+1]+1, row[j]+1, diagonal+cost)
		}
	}
	return row[len(y)]
}
