package data

import (
	"strconv"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// filter is one condition on a cell, ready to be asked of every row.
type filter struct {
	src    *record.Filter
	column int
	keep   bool   // of a set: rows that do not meet it drop; else rows that do
	reason string // in words, as rows that it drops are counted
}

// reasonOf words what a dropped row has in common: "age below 18" for an
// exclusion, "not age at_least 18" for a set that keeps the others. Numbers
// stand as the record has them.
func reasonOf(f *record.Filter, keep bool, src *diag.Source) string {
	column, s := f.Column.V, ""
	number := func(word string, n record.Number) {
		if n.Stated {
			s += " " + word + " " + written(n.Span, src, strconv.FormatFloat(n.V, 'g', -1, 64))
		}
	}
	number("above", f.Above)
	number("at least", f.AtLeast)
	number("below", f.Below)
	number("at most", f.AtMost)
	if f.Equals.Stated {
		s += " = " + f.Equals.Text
	}
	if f.OneOf.Stated {
		s += " one of"
		for i, o := range f.OneOf.V {
			if i > 0 {
				s += ","
			}
			s += " " + o.Text
		}
	}
	if f.Missing.Stated {
		if f.Missing.V {
			s += " missing"
		} else {
			s += " present"
		}
	}
	if keep {
		return "not " + column + s
	}
	return column + s
}

// written is a value as the record has it.
func written(at diag.Span, src *diag.Source, otherwise string) string {
	if src == nil || at.IsZero() || at.Start < 0 || at.End > len(src.Text) || at.Start >= at.End {
		return otherwise
	}
	return string(src.Text[at.Start:at.End])
}

// drops reports whether the filter removes a row with this cell. A missing
// cell meets only the condition `missing`. kind is not aNumber where the
// condition compares numbers and the cell holds none.
func (f *filter) drops(cell []byte, missing bool) (drop bool, kind numberKind) {
	met, kind := f.met(cell, missing)
	return met != f.keep, kind
}

func (f *filter) met(cell []byte, missing bool) (bool, numberKind) {
	r := f.src
	if r.Missing.Stated && r.Missing.V != missing {
		return false, aNumber
	}
	if missing {
		return r.Missing.Stated, aNumber
	}
	if r.Above.Stated || r.AtLeast.Stated || r.Below.Stated || r.AtMost.Stated {
		v, kind := parseNumber(cell)
		if kind != aNumber {
			return false, kind
		}
		if r.Above.Stated && !(v > r.Above.V) || r.AtLeast.Stated && !(v >= r.AtLeast.V) ||
			r.Below.Stated && !(v < r.Below.V) || r.AtMost.Stated && !(v <= r.AtMost.V) {
			return false, aNumber
		}
	}
	if r.Equals.Stated && !same(r.Equals, cell) {
		return false, aNumber
	}
	if r.OneOf.Stated {
		for _, o := range r.OneOf.V {
			if same(o, cell) {
				return true, aNumber
			}
		}
		return false, aNumber
	}
	return true, aNumber
}

// same compares a cell with a value of the record: as numbers where both are.
func same(s record.Scalar, cell []byte) bool {
	if string(cell) == s.Text {
		return true
	}
	if !s.IsNumber {
		return false
	}
	v, kind := parseNumber(cell)
	return kind == aNumber && v == s.Number
}
