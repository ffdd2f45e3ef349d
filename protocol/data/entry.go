package data

import (
	"slices"
	"strings"

	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// role is what a column is to an entry.
type role uint8

const (
	roleGroup role = iota
	rolePair
	roleSubject
	rolePeriod
	roleSequence
	roleValue
	roleFirst
	roleSecond
	roleTime
	roleEvent
	roleExposure
	roleCluster
	roles
)

var roleWords = [roles]string{"group", "pair", "subject", "period", "sequence", "value",
	"first", "second", "time", "event", "exposure", "cluster"}

// form is how the rows of an entry make observations.
type form uint8

const (
	oneARow   form = iota // a row is an observation
	pairARow              // a row is a pair: first, second
	halfARow              // a row is half a pair: value or event, group, pair
	crossover             // a row is one period of a subject
)

// use is one column that an entry reads.
type use struct {
	role   role
	name   string
	at     diag.Span // where the record names it
	column int       // in the file
}

// label maps a cell to a group of the outcome.
type label struct {
	text  string
	group uint8
}

// covariate is a column of `adjust` or `strata`.
type covariate struct {
	use
	strata bool
	factor bool // categories: the strata column, or a cell is no number

	numbers, words int // cells of each kind, first pass
	first          diagPlace
}

type diagPlace struct {
	line, column  int
	excerpt, cell string
}

// entry is one result entry while its file is read.
type entry struct {
	key     int
	data    *record.Data
	src     *diag.Source
	masked  bool
	form    form
	paired  bool // the two columns of a pair are two readings, not two variables
	binary  [roles]bool
	whole   [roles]bool
	uses    []use
	use     [roles]*use   // of uses, nil where there is none
	cells   [roles][]byte // of the present row, in the order of uses
	labels  []label
	groups  []string
	missing []string
	longest int // of missing
	exclude []*filter
	filters []*filter // every filter of every set, for finding columns
	covs    []*covariate
	sets    []*rows
	faults  *faults
	numeric []role // of uses, those that hold numbers
}

// columnOf is the column an entry names for a role.
func columnOf(d *record.Data, r role) record.String {
	switch r {
	case roleGroup:
		return d.Group
	case rolePair:
		return d.Pair
	case roleSubject:
		return d.Subject
	case rolePeriod:
		return d.Period
	case roleSequence:
		return d.Sequence
	case roleValue:
		return d.Value
	case roleFirst:
		return d.First
	case roleSecond:
		return d.Second
	case roleTime:
		return d.Time
	case roleEvent:
		return d.Event
	case roleExposure:
		return d.Exposure
	case roleCluster:
		return d.Cluster
	case roles:
	}
	panic("data: unknown role")
}

// newEntry prepares an entry; nil where the record is too incomplete to say
// which columns it needs, which reading the record has reported.
func newEntry(rec *record.Record, key int, res *record.Result) *entry {
	d := res.Data
	if d == nil || !d.File.Stated {
		return nil
	}
	var outcome *record.Outcome
	for _, o := range rec.Plan.Outcomes {
		if o.Name == res.Outcome.V {
			outcome = o
		}
	}
	if outcome == nil {
		return nil
	}
	measure := record.MeasureOf(outcome.Measure.V)
	if measure == nil {
		return nil
	}
	e := &entry{key: key, data: d, src: rec.Source, masked: rec.Masked(res), missing: []string{"", "NA"}}
	if !e.choose(measure, outcome) {
		return nil
	}
	if measure.Shape != record.OneSample && len(outcome.Groups.V) != 2 {
		return nil
	}
	e.paired = measure.Shape == record.Paired
	counts := strings.HasPrefix(measure.Word, "rate")
	e.whole[roleEvent] = counts
	e.binary[roleEvent] = !counts
	e.binary[roleFirst] = measure.Word == "paired-risk-difference"
	e.binary[roleSecond] = e.binary[roleFirst]
	if d.MissingValues.Stated {
		e.missing = e.missing[:0]
		for _, m := range d.MissingValues.V {
			e.missing = append(e.missing, strings.Trim(m.V, " \t"))
		}
	}
	for _, m := range e.missing {
		e.longest = max(e.longest, len(m))
	}
	for _, g := range outcome.Groups.V {
		e.groups = append(e.groups, g.V)
	}
	for _, l := range d.Labels {
		if i := slices.Index(e.groups, l.Text.V); i >= 0 {
			e.labels = append(e.labels, label{l.Name, uint8(i)})
		}
	}
	for i, g := range e.groups {
		e.labels = append(e.labels, label{g, uint8(i)})
	}
	e.addCovariates(rec, outcome.Name)
	e.addSets(rec, res)
	return e
}

// choose finds the first alternative of the measure whose columns are all
// named, and with it the form of the rows.
func (e *entry) choose(m *record.Measure, o *record.Outcome) bool {
	alternatives := m.Data
	if o.Design.V == "crossover" {
		alternatives = []string{"value subject period sequence"}
		e.form = crossover
	}
	for _, a := range alternatives {
		words := strings.Fields(a)
		if slices.ContainsFunc(words, func(w string) bool {
			i := slices.Index(roleWords[:], w)
			return i < 0 || !columnOf(e.data, role(i)).Stated
		}) {
			continue
		}
		for r := range roles {
			c := columnOf(e.data, r)
			optional := r == roleCluster || r == roleGroup && e.form == crossover
			if !c.Stated || !optional && !slices.Contains(words, roleWords[r]) {
				continue
			}
			e.uses = append(e.uses, use{role: r, name: c.V, at: c.Span})
		}
		for i := range e.uses {
			u := &e.uses[i]
			e.use[u.role] = u
			switch u.role {
			case roleValue, roleFirst, roleSecond, roleTime, roleEvent, roleExposure:
				e.numeric = append(e.numeric, u.role)
			case roleGroup, rolePair, roleSubject, rolePeriod, roleSequence, roleCluster, roles:
			}
		}
		switch {
		case e.form == crossover:
		case e.use[rolePair] != nil:
			e.form = halfARow
		case e.use[roleFirst] != nil:
			e.form = pairARow
		}
		return true
	}
	return false
}

// addCovariates takes the columns that hypotheses on the outcome adjust for
// or stratify by. Pairs have none.
func (e *entry) addCovariates(rec *record.Record, outcome string) {
	if e.form == halfARow || e.form == pairARow {
		return
	}
	add := func(s record.String, strata bool) {
		if s.V == "" || slices.ContainsFunc(e.covs, func(c *covariate) bool { return c.name == s.V && c.strata == strata }) {
			return
		}
		e.covs = append(e.covs, &covariate{use: use{name: s.V, at: s.Span}, strata: strata, factor: strata})
	}
	for _, h := range rec.Plan.Hypotheses {
		if h.Outcome.V != outcome {
			continue
		}
		for _, a := range h.Adjust.V {
			add(a, false)
		}
		if h.Strata.Stated {
			add(h.Strata, true)
		}
	}
}

// addSets prepares the analysis sets that the entry serves.
func (e *entry) addSets(rec *record.Record, res *record.Result) {
	prepare := func(filters []*record.Filter, keep bool) (out []*filter) {
		for _, f := range filters {
			if f != nil && f.Column.V != "" {
				out = append(out, &filter{src: f, keep: keep, reason: reasonOf(f, keep, rec.Source)})
			}
		}
		e.filters = append(e.filters, out...)
		return out
	}
	e.exclude = prepare(rec.Plan.Data.Exclude, false)
	for _, s := range rec.Plan.Sets {
		if !res.Set.Stated || res.Set.V == s.Name {
			e.sets = append(e.sets, &rows{name: s.Name, keep: prepare(s.Keep, true)})
		}
	}
	if len(rec.Plan.Sets) == 0 {
		e.sets = append(e.sets, &rows{})
	}
}

// find resolves the columns of an entry in a header.
func (e *entry) find(header []string, list *diag.List) bool {
	ok := true
	at := func(name string, span diag.Span) int {
		if span.IsZero() {
			span = e.data.File.Span
		}
		i := slices.Index(header, name)
		switch {
		case i < 0:
			d := diag.Error("D110", span, "column %s is not in %s", quoteText(name), e.data.File.V)
			d.Help = helpColumn(name, header)
			list.Add(d)
			ok = false
		case slices.Contains(header[i+1:], name):
			list.Add(diag.Error("D111", span, "%s has more than one column %s", e.data.File.V, quoteText(name)).
				WithHelp("give every column that the record names a name of its own"))
			ok = false
		}
		return i
	}
	for i := range e.uses {
		e.uses[i].column = at(e.uses[i].name, e.uses[i].at)
	}
	for _, c := range e.covs {
		c.column = at(c.name, c.at)
	}
	for _, f := range e.filters {
		f.column = at(f.src.Column.V, f.src.Column.Span)
	}
	return ok
}

func helpColumn(name string, header []string) string {
	if n := nearest(name, header); n != "" {
		return "did you mean " + quoteText(n) + "?"
	}
	return "the file has the columns " + listOf(header)
}
