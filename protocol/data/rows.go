package data

import (
	"fmt"
	"math"
	"slices"
)

// rows gathers what one set of one entry keeps.
type rows struct {
	name string
	keep []*filter
	live bool // the present row is still in

	sized bool // room has been made

	// dropped counts rows by reason (exclusions, filters of the set, missing
	// cells, incomplete pairs or subjects) and group (unknown, first, second).
	dropped [][3]int

	num      [roles][]float64
	group    []uint8
	period   []uint8
	sequence []uint8
	cluster  numbering
	subject  numbering
	clusters []int32
	subjects []int32

	units []unit // pairs or subjects, by number
	covs  []column

	clusterGroup []int8
}

// numbering gives texts numbers in order of first appearance.
type numbering map[string]int32

func (n numbering) of(text []byte) (number int32, isNew bool) {
	if i, ok := n[string(text)]; ok {
		return i, false
	}
	i := int32(len(n))
	n[string(text)] = i
	return i, true
}

// unit is a pair or a subject: which halves or periods it has.
type unit struct {
	have     uint8 // bit 0 first, bit 1 second
	sequence uint8
	cluster  int32
	value    [2]float64
}

// column gathers a covariate.
type column struct {
	values []float64
	levels numbering
	names  []string
	code   []int32
}

// parsed is the present row, its cells understood.
type parsed struct {
	num      [roles]float64
	group    uint8
	sequence uint8
	period   uint8
	faulty   bool
}

// begin empties the sets before a pass over the file.
func (e *entry) begin() {
	for i, s := range e.sets {
		covs := make([]column, len(e.covs))
		for j := range covs {
			covs[j].levels = numbering{}
		}
		e.sets[i] = &rows{name: s.name, keep: s.keep, covs: covs, cluster: numbering{}, subject: numbering{},
			dropped: make([][3]int, len(e.exclude)+len(s.keep)+len(e.uses)+len(e.covs)+1)}
	}
}

// row takes the present record of the file.
func (e *entry) row(c *reader) {
	if !e.filter(c) || e.cellsMissing(c) {
		return
	}
	var p parsed
	if e.parse(c, &p); p.faulty {
		return
	}
	for _, s := range e.sets {
		if s.live {
			if !s.sized {
				e.size(s, c)
			}
			e.add(s, c, &p)
		}
	}
}

// size makes room for the rows that a file of this length should hold.
func (e *entry) size(s *rows, c *reader) {
	s.sized = true
	if e.form == halfARow {
		return
	}
	n := c.guessRows()
	for _, r := range e.numeric {
		s.num[r] = make([]float64, 0, n)
	}
	if e.use[roleGroup] != nil || e.form == crossover {
		s.group = make([]uint8, 0, n)
	}
}

func (e *entry) isMissing(cell []byte) bool {
	if len(cell) > e.longest {
		return false
	}
	for _, m := range e.missing {
		if string(cell) == m {
			return true
		}
	}
	return false
}

// filter marks the sets that keep the row and reports whether any does.
func (e *entry) filter(c *reader) bool {
	for _, s := range e.sets {
		s.live = true
	}
	if len(e.filters) == 0 {
		return len(e.sets) > 0
	}
	ask := func(f *filter) bool {
		cell := c.cell(f.column)
		drop, kind := f.drops(cell, e.isMissing(cell))
		if kind != aNumber {
			e.fault(c, "D130", use{name: f.src.Column.V, at: f.src.Column.Span, column: f.column},
				"%s is not a number, and a filter compares this column with one", "")
			for _, s := range e.sets {
				s.live = false
			}
		}
		return drop
	}
	for i, f := range e.exclude {
		if ask(f) {
			for _, s := range e.sets {
				s.drop(i, e, c)
			}
			return false
		}
	}
	kept := false
	for _, s := range e.sets {
		for i, f := range s.keep {
			if s.live && ask(f) {
				s.drop(len(e.exclude)+i, e, c)
			}
		}
		kept = kept || s.live
	}
	return kept
}

// drop counts the row as dropped for a reason.
func (s *rows) drop(reason int, e *entry, c *reader) {
	if s.live {
		s.dropped[reason][e.groupOf(c)+1]++
		s.live = false
	}
}

// groupOf is the group of the present row as far as its cells tell, else -1.
func (e *entry) groupOf(c *reader) int {
	if u := e.use[roleGroup]; u != nil {
		return e.lookUp(c.cell(u.column))
	}
	if e.form == crossover {
		g := e.lookUp(c.cell(e.use[roleSequence].column))
		switch period(c.cell(e.use[rolePeriod].column)) {
		case 1:
			return g
		case 2:
			if g >= 0 {
				return 1 - g
			}
		}
	}
	return -1
}

// lookUp maps a cell to a group, -1 for none.
func (e *entry) lookUp(cell []byte) int {
	for i := range e.labels {
		if string(cell) == e.labels[i].text {
			return int(e.labels[i].group)
		}
	}
	return -1
}

func period(cell []byte) uint8 {
	if len(cell) == 1 && (cell[0] == '1' || cell[0] == '2') {
		return cell[0] - '0'
	}
	if v, kind := parseNumber(cell); kind == aNumber && (v == 1 || v == 2) {
		return uint8(v)
	}
	return 0
}

// cellsMissing drops a row that lacks a cell the entry needs, counted once,
// by the first such column.
func (e *entry) cellsMissing(c *reader) bool {
	lacking := -1
	for i := range e.uses {
		u := &e.uses[i]
		cell := c.cell(u.column)
		if lacking < 0 && e.isMissing(cell) {
			lacking = i
		}
		e.cells[i] = cell
	}
	for i, v := range e.covs {
		if lacking < 0 && e.isMissing(c.cell(v.column)) {
			lacking = len(e.uses) + i
		}
	}
	if lacking < 0 {
		return false
	}
	for _, s := range e.sets {
		s.drop(len(e.exclude)+len(s.keep)+lacking, e, c)
	}
	return true
}

// fault reports a cell. The format takes the cell as shown.
func (e *entry) fault(c *reader, code string, u use, format, help string) {
	line, column, excerpt := c.place(u.column)
	at := u.at
	if at.IsZero() {
		at = e.data.File.Span
	}
	e.faults.cell(code, at, line, column, excerpt, help,
		fmt.Sprintf("column %s: "+format, quoteText(u.name), e.faults.show(c.cell(u.column))))
}

// parse understands the cells of the row.
func (e *entry) parse(c *reader, p *parsed) {
	for i := range e.uses {
		u, cell := &e.uses[i], e.cells[i]
		switch u.role {
		case roleGroup, roleSequence:
			g := e.lookUp(cell)
			if g < 0 {
				p.faulty = true
				e.fault(c, "D122", *u, "%s is no group of this outcome", e.helpGroup(cell))
				continue
			}
			if u.role == roleGroup {
				p.group = uint8(g)
			} else {
				p.sequence = uint8(g)
			}
		case rolePeriod:
			if p.period = period(cell); p.period == 0 {
				p.faulty = true
				e.fault(c, "D126", *u, "%s is not a period: 1 or 2", "")
			}
		case roleValue, roleFirst, roleSecond, roleTime, roleEvent, roleExposure:
			v, ok := e.number(c, u, cell)
			p.num[u.role] = v
			p.faulty = p.faulty || !ok
		case rolePair, roleSubject, roleCluster, roles:
		}
	}
	if e.form == crossover && !p.faulty {
		g := p.sequence
		if p.period == 2 {
			g = 1 - g
		}
		if u := e.use[roleGroup]; u != nil && g != p.group {
			p.faulty = true
			e.fault(c, "D128", *u, "%s contradicts the sequence and period of this row", "")
		}
		p.group = g
	}
}

func (e *entry) helpGroup(cell []byte) string {
	if e.masked || e.faults.masked {
		return fmt.Sprintf("the groups are %s; `labels` maps other codes to them", listOf(e.groups))
	}
	if n := nearest(string(cell), e.groups); n != "" {
		return fmt.Sprintf("did you mean %s? labels = { %q = %q } maps it", quoteText(n), cell, n)
	}
	return fmt.Sprintf("the groups are %s; labels = { %q = %q } would map it to the first", listOf(e.groups), cell, e.groups[0])
}

// number reads a cell and holds it against the range of its role.
func (e *entry) number(c *reader, u *use, cell []byte) (float64, bool) {
	v, kind := parseNumber(cell)
	switch kind {
	case aNumber:
	case noNumber:
		e.fault(c, "D120", *u, "%s is not a number", e.helpNumber(cell))
		return 0, false
	case tooLarge:
		e.fault(c, "D121", *u, "%s is not a finite number", "")
		return 0, false
	}
	switch {
	case e.binary[u.role] && v != 0 && v != 1:
		e.fault(c, "D123", *u, "%s is not an event: 1 (it happened) or 0 (it did not)", "")
	case e.whole[u.role] && (v < 0 || v != math.Trunc(v)):
		e.fault(c, "D123", *u, "%s is not a number of events: 0, 1, 2, …", "")
	case u.role == roleExposure && v <= 0:
		e.fault(c, "D124", *u, "%s is not an exposure: it must be above 0", "")
	case u.role == roleTime && v < 0:
		e.fault(c, "D125", *u, "%s is not a time: it must be 0 or above", "")
	default:
		return v, true
	}
	return 0, false
}

func (e *entry) helpNumber(cell []byte) string {
	comma := slices.Index(cell, ',')
	if comma >= 0 {
		point := slices.Clone(cell)
		point[comma] = '.'
		if _, kind := parseNumber(point); kind == aNumber {
			return "numbers are written with a decimal point"
		}
	}
	return "a code for a missing value belongs into missing_values"
}
