package render

import (
	"slices"

	"steelyard/compute/belief"
	"steelyard/compute/claim"
	"steelyard/compute/combine"
	"steelyard/compute/effect"
	"steelyard/compute/family"
	"steelyard/compute/survival"
	"steelyard/protocol/card"
)

// methodCards joins the cards of the packages whose methods a record can use.
func methodCards() []card.Card {
	return slices.Concat(effect.Cards, survival.Cards, claim.Cards, family.Cards, combine.Cards, belief.Cards)
}

// findCard finds the card of a used word; nil when there is none. A method's
// card must name the measure or none.
func findCard(cards []card.Card, w usedWord) *card.Card {
	for _, k := range cards {
		if k.Kind != w.kind || k.Word != w.word {
			continue
		}
		if w.measure == "" || len(k.Of) == 0 || slices.Contains(k.Of, w.measure) {
			return &k
		}
	}
	return nil
}
