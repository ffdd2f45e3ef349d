package effect

import "steelyard/protocol/card"

// The formats of the problems and notes of the count measures.
const (
	notWhole        = "method %q needs whole numbers of events; %v is none"
	ignoresStrata   = "method %q takes no strata; \"mantel-haenszel\" does"
	needsStrata     = "method \"mantel-haenszel\" needs strata"
	fewExpected     = "the smallest expected count is %.3g, below 5: the normal approximation is doubtful; method %q is exact"
	fewExpectedOnly = "the smallest expected count is %.3g, below 5: the normal approximation is doubtful, and no exact method serves here"
	fewEventsFound  = "only %.4g events: the normal approximation is doubtful below 10; method %q is exact"
	fewEventsOnly   = "only %.4g events: the normal approximation is doubtful below 10, and no exact method serves here"
	zeroCell        = "a cell of the table is 0, which leaves method %q without an error; method %q has one"
	tooManyTables   = "method %q looks at %v tables at most; the groups make %v"
	sparseStrata    = "the strata support no finite ratio above 0: the estimate lies at the end of its range and has no interval"
)

// countCards explains the methods for counts.
var countCards = []card.Card{}
