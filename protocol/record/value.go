// Package record is the typed record: what a user wrote, each value with its
// place and whether it was stated or is a default. It also holds the words of
// the language (measures, claims, methods) and the one table of keys that
// feeds reading, help, the schema and the language reference. It reads no
// file, knows no TOML and computes nothing.
package record

import (
	"fmt"
	"math"
	"time"

	"steelyard/protocol/diag"
)

// Value is one value of the record.
type Value[T any] struct {
	V      T
	Span   diag.Span // of the value as written; zero for a default
	Stated bool      // written by the user
}

// The values of the language.
type (
	String  = Value[string]
	Strings = Value[[]String] // an array; each element keeps its place
	Number  = Value[float64]
	Numbers = Value[[]Number]
	Int     = Value[int64]
	Bool    = Value[bool]
	Day     = Value[Date]
	Instant = Value[time.Time] // an offset date-time, the offset as written
	Bounds  = Value[Region]    // `smallest` and `margin`
)

// Region is what `smallest` or `margin` says: a distance (or factor) from the
// null, or the two limits as values of the effect.
type Region struct {
	IsPair    bool
	Distance  float64 // when not a pair
	Low, High float64 // when a pair
}

// Date is a day of the calendar without a zone.
type Date struct {
	Year  int
	Month time.Month
	Day   int
}

// IsZero reports whether no day is given.
func (d Date) IsZero() bool { return d == Date{} }

// String is the ISO 8601 form.
func (d Date) String() string { return fmt.Sprintf("%04d-%02d-%02d", d.Year, int(d.Month), d.Day) }

// Compare is -1, 0 or 1.
func (d Date) Compare(e Date) int {
	switch {
	case d.Year != e.Year:
		return sign(d.Year - e.Year)
	case d.Month != e.Month:
		return sign(int(d.Month - e.Month))
	default:
		return sign(d.Day - e.Day)
	}
}

// UTC is the start of the day at Greenwich.
func (d Date) UTC() time.Time { return time.Date(d.Year, d.Month, d.Day, 0, 0, 0, 0, time.UTC) }

// DateOf is the day on which an instant falls at its own offset.
func DateOf(t time.Time) Date {
	y, m, d := t.Date()
	return Date{y, m, d}
}

func sign(n int) int {
	switch {
	case n < 0:
		return -1
	case n > 0:
		return 1
	}
	return 0
}

func infinity() float64 { return math.Inf(1) }
