package render

import (
	"slices"

	"steelyard/compute/effect"
	"steelyard/protocol/card"
)

// methodCards joins the cards of the packages whose methods a record can use.
func methodCards() []card.Card { return effect.Cards }

// findCard finds the card of a used word; nil when there is none. A method's
// card must name the measure or none.
func findCard(w usedWord) *card.Card {
	for _, k := range methodCards() {
		if k.Kind != w.kind || k.Word != w.word {
			continue
		}
		if w.measure == "" || len(k.Of) == 0 || slices.Contains(k.Of, w.measure) {
			return &k
		}
	}
	return nil
}
