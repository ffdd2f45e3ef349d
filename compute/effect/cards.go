package effect

import (
	"slices"
)

// Cards explains the measures and methods of this package and the problems
// and notes that it raises.
var Cards = slices.Concat(effectCards, meansCards, countCards, rankCards, spreadCards)
