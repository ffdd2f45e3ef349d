package render

import (
	"slices"

	"steelyard/compute"
	"steelyard/compute/belief"
	"steelyard/compute/claim"
	"steelyard/compute/combine"
	"steelyard/compute/effect"
	"steelyard/compute/family"
	"steelyard/compute/pool"
	"steelyard/compute/survival"
	"steelyard/protocol/card"
)

// methodCards joins the cards of all packages whose methods a record can use.
func methodCards() []card.Card {
	return slices.Concat(effect.Cards, survival.Cards, claim.Cards, compute.Cards, family.Cards, pool.Cards, combine.Cards, belief.Cards)
}

// findCard finds the card of a used word; nil when there is none. The card
// must name the measure or key that the word is of, or none.
func findCard(cards []card.Card, w usedWord) *card.Card {
	for i := range cards {
		k := &cards[i]
		if k.Kind != w.kind || k.Word != w.word {
			continue
		}
		if w.of == "" || len(k.Of) == 0 || slices.Contains(k.Of, w.of) {
			return k
		}
	}
	return nil
}
