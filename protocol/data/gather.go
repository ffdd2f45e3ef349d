package data

import (
	"slices"
	"sort"
)

// add appends the present row to a set.
func (e *entry) add(s *rows, c *reader, p *parsed) {
	var cluster int32
	if u := e.use[roleCluster]; u != nil {
		if cluster = e.clusterOf(s, c, u, p); cluster < 0 {
			return
		}
	}
	switch e.form {
	case halfARow:
		e.addHalf(s, c, p, cluster)
		return
	case crossover:
		if !e.addPeriod(s, c, p) {
			return
		}
		s.period = append(s.period, p.period)
		s.sequence = append(s.sequence, p.sequence)
	case oneARow, pairARow:
	}
	for _, r := range e.numeric {
		s.num[r] = append(s.num[r], p.num[r])
	}
	if e.use[roleGroup] != nil || e.form == crossover {
		s.group = append(s.group, p.group)
	}
	if e.use[roleCluster] != nil {
		s.clusters = append(s.clusters, cluster)
	}
	for i, v := range e.covs {
		v.add(&s.covs[i], c)
	}
}

// clusterOf numbers the row's cluster; -1 where it has rows in both groups.
func (e *entry) clusterOf(s *rows, c *reader, u *use, p *parsed) int32 {
	n, isNew := s.cluster.of(c.cell(u.column))
	if isNew {
		s.clusterGroup = append(s.clusterGroup, int8(p.group))
	}
	if e.use[roleGroup] != nil && e.form == oneARow && s.clusterGroup[n] != int8(p.group) {
		e.fault(c, "D129", *u, "cluster %s has rows in both groups",
			"a cluster lies in one group: give clusters of different groups different names")
		return -1
	}
	return n
}

// addHalf adds one half of a pair.
func (e *entry) addHalf(s *rows, c *reader, p *parsed, cluster int32) {
	u := e.use[rolePair]
	n, isNew := s.subject.of(c.cell(u.column))
	if isNew {
		s.units = append(s.units, unit{cluster: cluster})
	}
	pair := &s.units[n]
	if pair.have&(1<<p.group) != 0 {
		e.fault(c, "D127", *u, "pair %s has a second row of the same group", "")
		return
	}
	if pair.cluster != cluster {
		e.fault(c, "D128", *u, "the halves of pair %s lie in different clusters", "")
		return
	}
	pair.have |= 1 << p.group
	r := roleValue
	if e.use[roleEvent] != nil {
		r = roleEvent
	}
	pair.value[p.group] = p.num[r]
}

// addPeriod notes one period of a subject.
func (e *entry) addPeriod(s *rows, c *reader, p *parsed) bool {
	u := e.use[roleSubject]
	n, isNew := s.subject.of(c.cell(u.column))
	if isNew {
		s.units = append(s.units, unit{sequence: p.sequence})
	}
	subject := &s.units[n]
	if subject.have&p.period != 0 {
		e.fault(c, "D127", *u, "subject %s has a second row of the same period", "")
		return false
	}
	if subject.sequence != p.sequence {
		e.fault(c, "D128", *u, "subject %s has two sequences", "")
		return false
	}
	subject.have |= p.period
	s.subjects = append(s.subjects, n)
	return true
}

// add appends a cell of a covariate. On the first pass cells that are no
// numbers are only noted: the file is then read again.
func (v *covariate) add(to *column, c *reader) {
	cell := c.cell(v.column)
	if !v.factor {
		x, kind := parseNumber(cell)
		if kind == aNumber {
			v.numbers++
			to.values = append(to.values, x)
			return
		}
		if v.words++; v.words == 1 {
			line, column, excerpt := c.place(v.column)
			v.first = diagPlace{line, column, excerpt, string(cell)}
		}
		return
	}
	n, isNew := to.levels.of(cell)
	if isNew {
		to.names = append(to.names, string(cell))
	}
	to.code = append(to.code, n)
}

// vectors makes the result of one set. read counts the rows of the file.
func (e *entry) vectors(s *rows, read int, sum string) *Vectors {
	v := &Vectors{File: e.data.File.V, SHA256: sum, Set: s.name, Rows: read}
	incomplete := len(s.dropped) - 1
	switch e.form {
	case halfARow:
		e.join(s, v, incomplete)
	case crossover:
		e.complete(s, incomplete)
		v.Subject, v.Period, v.Sequence = s.subjects, s.period, s.sequence
		v.Used = len(s.subjects)
	case oneARow, pairARow:
		v.Used = len(s.num[e.numeric[0]])
	}
	if e.form != halfARow {
		v.Group, v.Value = s.group, s.num[roleValue]
		v.First, v.Second = s.num[roleFirst], s.num[roleSecond]
		v.Time, v.Event, v.Exposure = s.num[roleTime], s.num[roleEvent], s.num[roleExposure]
	}
	if e.use[roleCluster] != nil {
		v.Cluster, v.Clusters = renumber(s.clusters)
	}
	for i, c := range e.covs {
		if c.factor {
			if v.Factors == nil {
				v.Factors = map[string]*Factor{}
			}
			v.Factors[c.name] = s.covs[i].inOrder()
		} else {
			if v.Numeric == nil {
				v.Numeric = map[string][]float64{}
			}
			v.Numeric[c.name] = s.covs[i].values
		}
	}
	v.fit()
	v.Dropped = e.reasons(s)
	if e.masked {
		e.mask(v)
	}
	return v
}

// fit gives back the room that the rows did not take.
func (v *Vectors) fit() {
	for _, x := range []*[]float64{&v.Value, &v.First, &v.Second, &v.Time, &v.Event, &v.Exposure} {
		if cap(*x) > len(*x)+len(*x)/4+64 {
			*x = slices.Clone(*x)
		}
	}
	if cap(v.Group) > len(v.Group)+len(v.Group)/4+64 {
		v.Group = slices.Clone(v.Group)
	}
}

// join makes pairs of halves, in order of first appearance. A half without
// its other half is a dropped row.
func (e *entry) join(s *rows, v *Vectors, incomplete int) {
	v.First, v.Second = make([]float64, 0, len(s.units)), make([]float64, 0, len(s.units))
	for _, u := range s.units {
		switch u.have {
		case 1, 2:
			s.dropped[incomplete][u.have]++
		case 3:
			v.First = append(v.First, u.value[0])
			v.Second = append(v.Second, u.value[1])
			if e.use[roleCluster] != nil {
				s.clusters = append(s.clusters, u.cluster)
			}
		}
	}
	v.Used = len(v.First)
}

// complete removes the rows of subjects that lack a period.
func (e *entry) complete(s *rows, incomplete int) {
	all := true
	for _, u := range s.units {
		all = all && u.have == 3
	}
	if !all {
		keep := make([]bool, len(s.subjects))
		for i, n := range s.subjects {
			if keep[i] = s.units[n].have == 3; !keep[i] {
				s.dropped[incomplete][s.group[i]+1]++
			}
		}
		s.subjects = pick(s.subjects, keep)
		s.group, s.period, s.sequence = pick(s.group, keep), pick(s.period, keep), pick(s.sequence, keep)
		s.clusters = pick(s.clusters, keep)
		for _, r := range e.numeric {
			s.num[r] = pick(s.num[r], keep)
		}
		for i := range s.covs {
			s.covs[i].values, s.covs[i].code = pick(s.covs[i].values, keep), pick(s.covs[i].code, keep)
		}
	}
	s.subjects, _ = renumber(s.subjects)
}

func pick[T any](from []T, keep []bool) []T {
	out := from[:0]
	for i, x := range from {
		if keep[i] {
			out = append(out, x)
		}
	}
	return out
}

// renumber numbers from 0 in order of first appearance, without gaps.
func renumber(codes []int32) ([]int32, int) {
	if len(codes) == 0 {
		return codes, 0
	}
	to := make([]int32, slices.Max(codes)+1)
	next := int32(0)
	for i, c := range codes {
		if to[c] == 0 {
			next++
			to[c] = next
		}
		codes[i] = to[c] - 1
	}
	return codes, int(next)
}

// inOrder sorts the levels that the rows have in byte order.
func (c *column) inOrder() *Factor {
	used := make([]bool, len(c.names))
	for _, n := range c.code {
		used[n] = true
	}
	f := &Factor{Levels: []string{}, Code: c.code}
	for n, name := range c.names {
		if used[n] {
			f.Levels = append(f.Levels, name)
		}
	}
	sort.Strings(f.Levels)
	to := make([]int32, len(c.names))
	for n, name := range c.names {
		to[n] = int32(sort.SearchStrings(f.Levels, name))
	}
	for i, n := range c.code {
		f.Code[i] = to[n]
	}
	return f
}

// reasons words the counts of dropped rows: exclusions, the set's filters,
// missing cells, incomplete pairs; within a reason first, second, unknown group.
func (e *entry) reasons(s *rows) []Dropped {
	type reason struct {
		text, why string
		planned   bool
	}
	var list []reason
	for _, f := range slices.Concat(e.exclude, s.keep) {
		list = append(list, reason{f.reason, f.src.Why.V, true})
	}
	for _, u := range e.uses {
		list = append(list, reason{text: roleWords[u.role] + " missing"})
	}
	for _, c := range e.covs {
		list = append(list, reason{text: "column " + c.name + " missing"})
	}
	last := reason{text: "pair incomplete"}
	if e.form == crossover {
		last.text = "subject without both periods"
	}
	list = append(list, last)
	var out []Dropped
	for i, r := range list {
		counts := s.dropped[i]
		if e.masked {
			counts = [3]int{counts[0] + counts[1] + counts[2], 0, 0}
		}
		for _, g := range []int{1, 2, 0} {
			if counts[g] == 0 {
				continue
			}
			d := Dropped{Reason: r.text, Why: r.why, Planned: r.planned, Count: counts[g]}
			if g > 0 && len(e.groups) == 2 {
				d.Group = e.groups[g-1]
			}
			out = append(out, d)
		}
	}
	return out
}

// mask takes away everything that tells groups apart: labels, periods,
// subjects, clusters, covariates. The two readings of a pair go, the smaller
// first, into Value.
func (e *entry) mask(v *Vectors) {
	if e.paired {
		v.Value = make([]float64, 0, 2*len(v.First))
		for i, x := range v.First {
			v.Value = append(v.Value, min(x, v.Second[i]), max(x, v.Second[i]))
		}
	}
	v.First, v.Second = nil, nil
	v.Group, v.Period, v.Sequence, v.Subject = nil, nil, nil, nil
	v.Cluster, v.Clusters = nil, 0
	v.Numeric, v.Factors = nil, nil
}
