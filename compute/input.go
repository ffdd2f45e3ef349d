package compute

import (
	"math"
	"slices"
	"strings"

	"steelyard/compute/effect"
	"steelyard/compute/numeric"
	"steelyard/compute/result"
	"steelyard/protocol/data"
	"steelyard/protocol/record"
)

// entry is one result entry in one analysis set.
type entry struct {
	key  data.Key
	res  *record.Result
	vec  *data.Vectors // nil for summaries
	kind result.Use
}

// spec is how an entry is to be analysed.
type spec struct {
	outcome *record.Outcome
	measure *record.Measure
	method  string
	stated  bool // the record names the method
	adjust  []string
	strata  string
	a       float64 // one-sided error of the claim
}

// inputKey names the numbers of an entry: what they depend on beside the
// entry itself.
type inputKey struct {
	data.Key
	adjust, strata string
}

// key names the numbers of an entry under a spec.
func (s spec) key(e entry) inputKey { return inputKey{e.key, strings.Join(s.adjust, "\x00"), s.strata} }

// input turns an entry into numbers for the measure, once. Its slices are
// shared and must not be written to.
func (r *run) input(e entry, s spec) effect.Input {
	k := s.key(e)
	in, ok := r.inputs[k]
	if !ok {
		in = r.freshInput(e, s)
		r.inputs[k] = in
	}
	in.A = s.a
	return in
}

func (r *run) freshInput(e entry, s spec) effect.Input {
	o := s.outcome
	in := effect.Input{Seed: r.seed, DesignEffect: 1, Null: nullOf(o), Horizon: o.Horizon.V,
		SystematicU: o.SystematicU.V, AnySpread: o.Distribution.V == "any", Crossover: o.Design.V == "crossover"}
	if len(o.Spec.V) == 2 {
		in.Spec = [2]float64{o.Spec.V[0].V, o.Spec.V[1].V}
	}
	if c := o.Cluster; c != nil && !r.clusterMeans(e, s) {
		in.DesignEffect = 1 + (c.Size.V-1)*c.ICC.V
	}
	switch {
	case e.res.Effect != nil:
		in.Given = given(e.res.Effect)
	case e.vec != nil:
		r.fromData(&in, e, s)
	default:
		fromSummary(&in, e.res, o)
	}
	return in
}

func given(f *record.Effect) *effect.Given {
	of := func(n record.Number) result.Opt { return result.Opt{V: n.V, OK: n.Stated} }
	return &effect.Given{Estimate: f.Estimate.V, SE: of(f.SE), DF: of(f.DF), N: of(f.N),
		Low: of(f.Low), High: of(f.High), Level: of(f.Level)}
}

func fromSummary(in *effect.Input, res *record.Result, o *record.Outcome) {
	for _, g := range res.Groups {
		switch groupIndex(o, g.Name) {
		case 0:
			in.First = groupOf(g)
		case 1:
			in.Second = groupOf(g)
		}
	}
	if res.Sample != nil {
		in.Sample = groupOf(res.Sample)
	}
	if p := res.Pairs; p != nil {
		in.Pairs = pairsOf(p)
	}
}

func groupOf(g *record.Group) effect.Group {
	return effect.Group{N: g.N.V, Mean: g.Mean.V, SD: g.SD.V, LogMean: g.LogMean.V, LogSD: g.LogSD.V,
		Events: g.Events.V, Exposure: g.Exposure.V, R: g.R.V}
}

func pairsOf(p *record.Pairs) effect.Pairs {
	q := effect.Pairs{N: p.N.V, Mean: p.Mean.V, SD: p.SD.V, FirstMean: p.FirstMean.V, SecondMean: p.SecondMean.V,
		FirstSD: p.FirstSD.V, SecondSD: p.SecondSD.V, R: p.R.V, HasParts: p.FirstSD.Stated,
		Both: p.Both.V, FirstOnly: p.FirstOnly.V, SecondOnly: p.SecondOnly.V, Neither: p.Neither.V}
	if p.FirstMean.Stated {
		q.Mean = q.FirstMean - q.SecondMean
		q.SD = math.Sqrt(math.Max(0, q.FirstSD*q.FirstSD+q.SecondSD*q.SecondSD-2*q.R*q.FirstSD*q.SecondSD))
	}
	return q
}

func groupIndex(o *record.Outcome, name string) int {
	for i, g := range o.Groups.V {
		if g.V == name {
			return i
		}
	}
	return -1
}

// fromData reduces the columns of an entry to what the measure reads.
func (r *run) fromData(in *effect.Input, e entry, s spec) {
	v := e.vec
	in.Time, in.Event, in.Exposure, in.Group, in.Value = v.Time, v.Event, v.Exposure, v.Group, v.Value
	in.Period, in.Sequence, in.Subject = v.Period, v.Sequence, v.Subject
	switch s.measure.Shape {
	case record.OneSample:
		in.Sample = sampleOf(v)
		if r.clusterMeans(e, s) {
			means, _ := clusterMeans(v, false)
			in.Sample = valueGroup(means)
		}
		if len(v.First) > 0 {
			in.Pairs = pairsOfData(v.First, v.Second)
			in.Sample.N, in.Sample.R = in.Pairs.N, in.Pairs.R
		}
	case record.TwoGroups:
		in.First, in.Second = r.groupsOf(e, s)
	case record.Paired:
		first, second := v.First, v.Second
		if r.clusterMeans(e, s) {
			first, second = meansOf(v.First, v), meansOf(v.Second, v)
		}
		in.Pairs = pairsOfData(first, second)
	case record.Given:
	}
	for _, name := range s.adjust {
		in.Covariates = append(in.Covariates, covariate(v, name))
	}
	if s.strata != "" {
		if f := v.Factors[s.strata]; f != nil {
			in.Strata, in.StrataCount = f.Code, len(f.Levels)
			if s.measure.Word == "mean-difference" || s.measure.Word == "geometric-mean-ratio" {
				in.Covariates = append(in.Covariates, covariate(v, s.strata))
			}
		}
	}
}

func covariate(v *data.Vectors, name string) effect.Covariate {
	if x, ok := v.Numeric[name]; ok {
		return effect.Covariate{Name: name, Values: x}
	}
	f := v.Factors[name]
	if f == nil {
		return effect.Covariate{Name: name}
	}
	return effect.Covariate{Name: name, Levels: f.Levels, Code: f.Code}
}

func sampleOf(v *data.Vectors) effect.Group {
	g := valueGroup(v.Value)
	if v.Event != nil {
		g.N, g.Events = float64(len(v.Event)), numeric.Sum(v.Event)
	}
	if v.Exposure != nil {
		g.Exposure = numeric.Sum(v.Exposure)
	}
	return g
}

func valueGroup(x []float64) effect.Group {
	if len(x) == 0 {
		return effect.Group{}
	}
	m := numeric.MomentsOf(x)
	g := effect.Group{N: m.N, Mean: m.Mean, SD: m.SD, Values: x}
	if m.Min > 0 {
		logs := make([]float64, len(x))
		for i, y := range x {
			logs[i] = math.Log(y)
		}
		l := numeric.MomentsOf(logs)
		g.LogMean, g.LogSD = l.Mean, l.SD
	} else {
		g.LogMean, g.LogSD = math.NaN(), math.NaN()
	}
	return g
}

// groupsOf splits the rows by group.
func (r *run) groupsOf(e entry, s spec) (first, second effect.Group) {
	v := e.vec
	values := v.Value
	group := v.Group
	if r.clusterMeans(e, s) {
		values, group = clusterMeans(v, s.measure.Word == "geometric-mean-ratio")
	}
	var size [2]int
	for i := range values {
		size[group[i]]++
	}
	split := [2][]float64{make([]float64, 0, size[0]), make([]float64, 0, size[1])}
	for i, x := range values {
		split[group[i]] = append(split[group[i]], x)
	}
	first, second = valueGroup(split[0]), valueGroup(split[1])
	groups := [2]*effect.Group{&first, &second}
	if v.Event != nil {
		for k, g := range groups {
			if values == nil {
				g.N = 0
			}
			for i, x := range v.Event {
				if int(v.Group[i]) == k {
					g.Events += x
					if values == nil {
						g.N++
					}
				}
			}
		}
	}
	for i, x := range v.Exposure {
		groups[v.Group[i]].Exposure += x
	}
	return first, second
}

// clusterMeans reports whether an entry's data are analysed as cluster means:
// measures of means, as far as their methods look at nothing but the groups,
// and the risk difference (methods.md 0). A standardized difference is not: it
// is measured in standard deviations of individuals.
func (r *run) clusterMeans(e entry, s spec) bool {
	if e.vec == nil || e.vec.Cluster == nil || len(s.adjust) > 0 || s.strata != "" {
		return false
	}
	return slices.Contains([]string{"mean", "mean-difference", "risk-difference", "ratio-of-means", "geometric-mean-ratio", "paired-mean-difference"}, s.measure.Word)
}

// clusterMeans averages the values, or the events, of each cluster; of a
// ratio of geometric means, their logarithms. A cluster lies in one group.
func clusterMeans(v *data.Vectors, logs bool) (means []float64, group []uint8) {
	x := v.Value
	if x == nil {
		x = v.Event
	}
	sum := make([]float64, v.Clusters)
	count := make([]float64, v.Clusters)
	group = make([]uint8, v.Clusters)
	for i, c := range v.Cluster {
		if count[c] == 0 && v.Group != nil {
			group[c] = v.Group[i]
		}
		y := x[i]
		if logs {
			y = math.Log(y)
		}
		sum[c] += y
		count[c]++
	}
	kept := 0
	for c := range sum {
		if count[c] == 0 {
			continue
		}
		m := sum[c] / count[c]
		if logs {
			m = math.Exp(m)
		}
		means, group[kept] = append(means, m), group[c]
		kept++
	}
	return means, group[:kept]
}

// meansOf averages a column over clusters.
func meansOf(x []float64, v *data.Vectors) []float64 {
	means, _ := clusterMeans(&data.Vectors{Value: x, Cluster: v.Cluster, Clusters: v.Clusters}, false)
	return means
}

func pairsOfData(first, second []float64) effect.Pairs {
	p := effect.Pairs{N: float64(len(first)), First: first, Second: second}
	d := make([]float64, len(first))
	for i := range d {
		d[i] = first[i] - second[i]
	}
	m := numeric.MomentsOf(d)
	a, b := numeric.MomentsOf(first), numeric.MomentsOf(second)
	p.Mean, p.SD = m.Mean, m.SD
	p.FirstMean, p.FirstSD, p.SecondMean, p.SecondSD, p.HasParts = a.Mean, a.SD, b.Mean, b.SD, true
	if a.SD > 0 && b.SD > 0 {
		p.R = math.Max(-1, math.Min(1, covarianceOf(first, second, a.Mean, b.Mean)/(a.SD*b.SD)))
	}
	for i, x := range first {
		switch y := second[i]; {
		case x == 1 && y == 1:
			p.Both++
		case x == 1 && y == 0:
			p.FirstOnly++
		case x == 0 && y == 1:
			p.SecondOnly++
		case x == 0 && y == 0:
			p.Neither++
		}
	}
	return p
}

func covarianceOf(x, y []float64, mx, my float64) float64 {
	z := make([]float64, len(x))
	for i := range x {
		z[i] = (x[i] - mx) * (y[i] - my)
	}
	return numeric.Sum(z) / float64(len(x)-1)
}

// nullOf is the null of an outcome's measure.
func nullOf(o *record.Outcome) float64 {
	null, _, _, _ := o.Points()
	return null
}
