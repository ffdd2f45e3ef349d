package record

import "slices"

// Scale is the analysis scale of a measure.
type Scale string

// The four analysis scales.
const (
	Identity Scale = "identity"
	Log      Scale = "log"
	Logit    Scale = "logit"
	Atanh    Scale = "atanh"
)

// Shape is what a measure compares.
type Shape uint8

// The shapes.
const (
	OneSample Shape = iota
	TwoGroups
	Paired
	Given // estimated elsewhere
)

// NullKind says where a measure's null comes from.
type NullKind uint8

// The kinds of null.
const (
	NullZero            NullKind = iota
	NullOne                      // ratios
	NullHalf                     // superiority-probability
	NullReference                // `reference`, required
	NullReferenceOrZero          // `reference`, default 0
)

// Measure describes one measure of the language.
type Measure struct {
	Word    string
	Label   string // for readers: "difference of means"
	Shape   Shape
	Null    NullKind
	Scale   Scale
	Low     float64  // ends of the effect's range
	High    float64  //
	Summary []string // alternatives of keys that a summary gives, each space separated; nil: none
	Effect  bool     // an `effect` is accepted
	Data    []string // columns that `data` must name, alternatives space separated; nil: none
	Methods []string // default first
	Ready   bool     // computed by this version
}

var inf = infinity()

// Measures lists every measure in the order of the language reference.
var Measures = []*Measure{
	{Word: "mean", Label: "mean", Shape: OneSample, Null: NullReference, Scale: Identity, Low: -inf, High: inf,
		Summary: []string{"n mean sd"}, Effect: true, Data: []string{"value"}, Methods: []string{"t", "permutation"}, Ready: true},
	{Word: "mean-difference", Label: "difference of means", Shape: TwoGroups, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Summary: []string{"n mean sd"}, Effect: true, Data: []string{"value group"}, Methods: []string{"welch", "pooled-variance", "permutation", "linear", "linear-hc3"}, Ready: true},
	{Word: "paired-mean-difference", Label: "mean within-pair difference", Shape: Paired, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Summary: []string{"n mean sd", "n first_mean second_mean first_sd second_sd r"}, Effect: true, Data: []string{"first second", "value group pair"}, Methods: []string{"t", "permutation"}, Ready: true},
	{Word: "standardized-mean-difference", Label: "standardized mean difference (Hedges' g)", Shape: TwoGroups, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Summary: []string{"n mean sd"}, Effect: true, Data: []string{"value group"}, Methods: []string{"noncentral-t"}, Ready: true},
	{Word: "ratio-of-means", Label: "ratio of means", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n mean sd"}, Effect: true, Data: []string{"value group"}, Methods: []string{"fieller", "log-delta"}, Ready: true},
	{Word: "geometric-mean-ratio", Label: "ratio of geometric means", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n log_mean log_sd"}, Effect: true, Data: []string{"value group"}, Methods: []string{"welch", "pooled-variance", "linear", "linear-hc3"}, Ready: true},
	{Word: "median-shift", Label: "shift between groups (Hodges–Lehmann)", Shape: TwoGroups, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Effect: true, Data: []string{"value group"}, Methods: []string{"wilcoxon", "wilcoxon-exact", "wilcoxon-normal"}, Ready: true},
	{Word: "paired-median-shift", Label: "shift within pairs (Hodges–Lehmann)", Shape: Paired, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Effect: true, Data: []string{"first second", "value group pair"}, Methods: []string{"signed-rank", "signed-rank-exact", "signed-rank-normal"}, Ready: true},
	{Word: "superiority-probability", Label: "probability that the first group's value is higher", Shape: TwoGroups, Null: NullHalf, Scale: Logit, Low: 0, High: 1,
		Effect: true, Data: []string{"value group"}, Methods: []string{"brunner-munzel", "delong", "logit", "hanley-mcneil"}, Ready: true},
	{Word: "proportion", Label: "proportion", Shape: OneSample, Null: NullReference, Scale: Logit, Low: 0, High: 1,
		Summary: []string{"n events"}, Effect: true, Data: []string{"event"}, Methods: []string{"exact", "mid-p", "wilson"}, Ready: true},
	{Word: "risk-difference", Label: "risk difference", Shape: TwoGroups, Null: NullZero, Scale: Identity, Low: -1, High: 1,
		Summary: []string{"n events"}, Effect: true, Data: []string{"event group"}, Methods: []string{"score", "farrington-manning", "newcombe", "unconditional", "mantel-haenszel"}, Ready: true},
	{Word: "risk-ratio", Label: "risk ratio", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n events"}, Effect: true, Data: []string{"event group"}, Methods: []string{"score", "farrington-manning", "log-delta", "unconditional", "mantel-haenszel"}, Ready: true},
	{Word: "odds-ratio", Label: "odds ratio", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n events"}, Effect: true, Data: []string{"event group"}, Methods: []string{"score", "exact", "mid-p", "woolf", "boschloo", "mantel-haenszel"}, Ready: true},
	{Word: "paired-risk-difference", Label: "risk difference within pairs", Shape: Paired, Null: NullZero, Scale: Identity, Low: -1, High: 1,
		Summary: []string{"both first_only second_only neither"}, Effect: true, Data: []string{"first second", "event group pair"}, Methods: []string{"tango", "exact", "mid-p"}, Ready: true},
	{Word: "rate", Label: "event rate", Shape: OneSample, Null: NullReference, Scale: Log, Low: 0, High: inf,
		Summary: []string{"events exposure"}, Effect: true, Data: []string{"event exposure"}, Methods: []string{"exact", "mid-p", "score"}, Ready: true},
	{Word: "rate-difference", Label: "difference of event rates", Shape: TwoGroups, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Summary: []string{"events exposure"}, Effect: true, Data: []string{"event exposure group"}, Methods: []string{"score", "mantel-haenszel"}, Ready: true},
	{Word: "rate-ratio", Label: "ratio of event rates", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"events exposure"}, Effect: true, Data: []string{"event exposure group"}, Methods: []string{"score", "exact", "mid-p", "mantel-haenszel"}, Ready: true},
	{Word: "hazard-ratio", Label: "hazard ratio", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Effect: true, Data: []string{"time event group"}, Methods: []string{"wald", "likelihood-ratio", "score"}, Ready: true},
	{Word: "restricted-mean-difference", Label: "difference of restricted mean times", Shape: TwoGroups, Null: NullZero, Scale: Identity, Low: -inf, High: inf,
		Effect: true, Data: []string{"time event group"}, Methods: []string{"greenwood"}, Ready: true},
	{Word: "correlation", Label: "correlation (Pearson)", Shape: OneSample, Null: NullReferenceOrZero, Scale: Atanh, Low: -1, High: 1,
		Summary: []string{"n r"}, Effect: true, Data: []string{"first second"}, Methods: []string{"fisher-z", "exact"}, Ready: true},
	{Word: "rank-correlation", Label: "rank correlation (Spearman)", Shape: OneSample, Null: NullReferenceOrZero, Scale: Atanh, Low: -1, High: 1,
		Summary: []string{"n r"}, Effect: true, Data: []string{"first second"}, Methods: []string{"bonett-wright", "permutation"}, Ready: true},
	{Word: "sd", Label: "standard deviation", Shape: OneSample, Null: NullReference, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n sd"}, Effect: true, Data: []string{"value"}, Methods: []string{"chi-square"}, Ready: true},
	{Word: "sd-ratio", Label: "ratio of standard deviations", Shape: TwoGroups, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n sd"}, Effect: true, Data: []string{"value group"}, Methods: []string{"f", "log-kurtosis"}, Ready: true},
	{Word: "paired-sd-ratio", Label: "ratio of standard deviations within pairs", Shape: Paired, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Summary: []string{"n first_sd second_sd r"}, Effect: true, Data: []string{"first second", "value group pair"}, Methods: []string{"pitman-morgan"}, Ready: true},
	{Word: "agreement", Label: "share of paired differences inside the limits", Shape: Paired, Null: NullReference, Scale: Logit, Low: 0, High: 1,
		Summary: []string{"n mean sd"}, Effect: true, Data: []string{"first second", "value group pair"}, Methods: []string{"normal", "any"}, Ready: true},
	{Word: "conforming-share", Label: "share of values inside the limits", Shape: OneSample, Null: NullReference, Scale: Logit, Low: 0, High: 1,
		Summary: []string{"n mean sd"}, Effect: true, Data: []string{"value"}, Methods: []string{"normal", "any"}, Ready: true},
	{Word: "estimate", Label: "effect estimated elsewhere", Shape: Given, Null: NullReferenceOrZero, Scale: Identity, Low: -inf, High: inf,
		Effect: true, Methods: []string{"normal", "t"}, Ready: true},
	{Word: "ratio-estimate", Label: "ratio estimated elsewhere", Shape: Given, Null: NullOne, Scale: Log, Low: 0, High: inf,
		Effect: true, Methods: []string{"normal", "t"}, Ready: true},
}

// MeasureOf finds a measure by its word; nil when there is none.
func MeasureOf(word string) *Measure {
	for _, m := range Measures {
		if m.Word == word {
			return m
		}
	}
	return nil
}

// IsRatio reports whether the effect is a ratio between groups: null 1, log scale.
func (m *Measure) IsRatio() bool { return m.Null == NullOne }

// HasMethod reports whether the measure has the method.
func (m *Measure) HasMethod(word string) bool { return slices.Contains(m.Methods, word) }

// Claim describes one claim of the language.
type Claim struct {
	Word       string
	Label      string // for readers
	Directed   bool   // needs `better`
	NeedsLimit bool   // needs `limit`
	NeedsSize  bool   // reads `smallest` or `margin`
	TwoSided   bool   // uses alpha.two_sided
	HasMargin  bool   // accepts `margin`
	Judged     bool
}

// Claims lists every claim in the order of the language reference.
var Claims = []*Claim{
	{Word: "differs", Label: "differs", TwoSided: true, Judged: true},
	{Word: "superior", Label: "superior", Directed: true, Judged: true},
	{Word: "minimum-effect", Label: "better by more than the smallest effect that matters", Directed: true, NeedsSize: true, HasMargin: true, Judged: true},
	{Word: "noninferior", Label: "noninferior", Directed: true, NeedsSize: true, HasMargin: true, Judged: true},
	{Word: "equivalent", Label: "equivalent", NeedsSize: true, HasMargin: true, Judged: true},
	{Word: "benefit-too-small", Label: "any benefit too small to matter", Directed: true, NeedsSize: true, HasMargin: true, Judged: true},
	{Word: "below", Label: "below the limit", NeedsLimit: true, Judged: true},
	{Word: "above", Label: "above the limit", NeedsLimit: true, Judged: true},
	{Word: "describe", Label: "described"},
}

// ClaimOf finds a claim by its word; nil when there is none.
func ClaimOf(word string) *Claim {
	for _, c := range Claims {
		if c.Word == word {
			return c
		}
	}
	return nil
}
