// Package numeric holds the numerical tools that the methods share: stable
// sums and moments, bracketed roots, golden section, adaptive quadrature,
// selection and seeded random streams.
//
// It refuses to know any test, measure or record: it gets numbers and
// functions of numbers. Inputs must be finite unless a function says
// otherwise; sums always run in the same order, so the same input gives the
// same bits whatever the number of workers.
//
// One use: m := numeric.MomentsOf(column) gives the mean and the standard
// deviation that a t test needs.
package numeric

// blockLen is the length of the blocks that are summed on their own and then
// added in order. Splitting work between goroutines on block borders
// therefore cannot change a result.
const blockLen = 4096
