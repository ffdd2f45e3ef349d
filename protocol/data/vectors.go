// Package data turns columns of a CSV file into vectors: labels mapped to
// groups, rows filtered, every dropped row counted by reason and group. It
// reads from the file system it is given and computes no statistic.
//
//	tables, faults := data.Load(rec, files)
//	v := tables[data.Key{Entry: 0}]
package data

// Vectors are the columns that one result entry uses in one analysis set:
// the rows that are analysed, in the order of the file. A column that the
// entry does not name is nil.
//
// Halves of pairs in two rows are matched: First and Second, in the order in
// which pairs begin. A crossover has the group of each row in Group whether
// or not the file names it, and only subjects with both periods.
//
// A masked entry (record.Masked) has no Group, Period, Sequence, Subject,
// Cluster, covariates, First or Second, and its Dropped names no group; the
// two readings of its pairs are in Value, the smaller of each pair first, so
// that Value is twice as long as Used.
type Vectors struct {
	File   string // as the record names it
	SHA256 string // of the file, lower-case hex
	Set    string // analysis set; "" when none is declared
	Rows   int    // data rows in the file
	Used   int    // rows analysed; for pairs, complete pairs

	Group    []uint8   // 0 first, 1 second group of the outcome
	Value    []float64 //
	First    []float64 // paired: first and second reading of a pair
	Second   []float64 //
	Time     []float64 //
	Event    []float64 // 1 or 0; for rates a count
	Exposure []float64 //
	Period   []uint8   // crossover: 1 or 2
	Sequence []uint8   // crossover: group of the first period, 0 or 1
	Subject  []int32   // numbered from 0 in order of first appearance
	Cluster  []int32   // likewise
	Clusters int       // how many clusters

	Numeric map[string][]float64 // covariates whose every cell is a number
	Factors map[string]*Factor   // covariates that are not, and the strata column

	Dropped []Dropped
}

// Factor is a column of categories.
type Factor struct {
	Levels []string // in byte order
	Code   []int32  // index into Levels, one a row
}

// Dropped counts rows that one reason removed.
type Dropped struct {
	Reason string // "value missing", a filter in words, …
	Why    string // the filter's own `why`
	// Planned says that a filter of the plan dropped them: they are excluded,
	// not missing.
	Planned bool
	Group   string // "" where the row's group is not known
	Count   int
}

// Tables holds the vectors of every result entry that names a data file.
type Tables map[Key]*Vectors

// Key finds the vectors of a result entry in a set. Entry counts the
// [[result]] entries from 0; earlier results count from -1 downwards.
type Key struct {
	Entry int
	Set   string
}
