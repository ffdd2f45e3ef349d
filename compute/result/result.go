// Package result is what a record becomes before any view: estimates, tests,
// verdicts, notes and choices, as data. It does no arithmetic, builds no
// sentence, and every view prints nothing that is not in it.
package result

import (
	"steelyard/protocol/diag"
	"steelyard/protocol/record"
)

// Opt is a number that may not apply. A limit that does not exist is an
// applying ±Inf.
type Opt struct {
	V  float64
	OK bool
}

// Some is a number that applies.
func Some(v float64) Opt { return Opt{v, true} }

// P is a p-value with its natural logarithm, which holds below 1e-300 too.
type P struct {
	P, Ln float64
	OK    bool
}

// Result is everything computed from one record.
type Result struct {
	Engine string
	Record Record
	Seal   Seal
	Masked bool

	Outcomes    []Outcome
	Studies     []Study      // every entry, in record order: results, earlier, missing
	Totals      []GroupTotal // page one: counts per outcome of a primary hypothesis and group, over its analysed entries
	Hypotheses  []Hypothesis
	Removed     []Hypothesis // of the sealed plan, gone from the plan now
	Pooled      []Pooled
	Combined    []Combined
	Families    []Family
	Looks       []Look
	Sizes       []Size
	Priors      []Prior
	Sensitivity []Sensitivity
	Timeline    []Event
	Files       []File
	Choices     []Choice
	Conclusion  Conclusion
	Diagnostics diag.List
}

// Stage is how far the record has come.
type Stage string

// The stages.
const (
	PlanOnly Stage = "plan-only"
	Interim  Stage = "interim"
	Complete Stage = "complete"
)

// Record identifies the record.
type Record struct {
	Title, Number, Version, Status, Setting string
	Stage                                   Stage
	Date                                    record.Date // zero: undated
	SourceSHA256                            string
	PlanSHA256                              string // of the canonical plan now
}

// Seal is how the record stands to its chain of seals.
type Seal struct {
	State         string // unsealed, sealed, changed, broken
	Entries       int
	FirstAt       string // RFC 3339, UTC
	LastAt        string
	PlanSHA256    string // of the binding seal
	Order         string // before-results, same-day, after-results, unsealed
	Changes       []Change
	EditedResults []ResultName
	Broken        string // which entry, and how
	Amendments    []Amendment
	Vanished      []string // dates of sealed deviations that are changed or gone
	Unreadable    []string // why the sealed plan could not be computed
	Witnesses     []Witness
	OrderProved   bool // witnesses show that every result came after its seal
}

// Witness is what became of one [[witness]].
type Witness struct {
	Seal            int
	What, Reference string
	Outcome         string   // stated, verified, other-digest, refused, unread
	Why             string   // why it is neither stated nor verified
	At              string   // RFC 3339, UTC: of the token; of the record where it is only stated
	Authority       string   // who signed the token, as the certificate says
	Chain           bool     // the certificate leads to the authority in the record's own file
	CA              []string // SHA-256 of the certificates in that file
}

// Amendment is what one seal changed in the plan of the seal before it.
type Amendment struct {
	Number  int
	At      string // RFC 3339, UTC
	Changes []Change
}

// Change is one difference between the sealed plan and the plan now.
type Change struct {
	Path     string
	Old, New string
	Span     diag.Span
	Declared bool
	Wording  bool // prose or label only
}

// ResultName names an entry.
type ResultName struct {
	Study, Outcome, Set, Look string
	File                      string // the data file that was changed; "" when the entry was
	Removed, Declared         bool
	Seal                      int // the first seal that knew it otherwise
}

// Outcome describes one outcome on its own scale.
type Outcome struct {
	Name, Label, Unit, Measure, MeasureLabel, Better, Why string
	Scale                                                 record.Scale
	Null, Low, High                                       Opt
	Groups                                                [2]string // "" when the measure has none
	Ratio                                                 bool
	Digits                                                int     // decimals for values in the unit; -1: from the data
	Per                                                   float64 // display: rates per this exposure; 0 none
	Percent                                               bool    // display: proportions in percent
}

// Use says what became of an entry.
type Use string

// The uses.
const (
	Analysed    Use = "analysed"
	LeftOut     Use = "left-out"
	EarlierUse  Use = "earlier"
	Superseded  Use = "superseded"
	MaskedUse   Use = "masked"
	MissingUse  Use = "missing"
	NotComputed Use = "not-computed" // the data do not support the computation; Why says so
)

// Study is one entry with its own analysis at the plan's descriptive level.
type Study struct {
	Study, Outcome, Set string
	Date                record.Date
	Look                string // "", a number, "unplanned"
	Use                 Use
	Why                 string
	Form                string // groups, sample, pairs, effect, p, data
	Groups              []GroupNumbers
	Source              string
	File                string
	Analysis            Analysis        // Method "" when not computed
	P                   P               // two-sided at the null
	BareP               *BareP          // entry that gives only a p-value
	Survival            []SurvivalCurve // time-to-event data
}

// BareP is a p-value that came without an estimate.
type BareP struct {
	Value     float64
	Sides     int
	Direction string
	Relation  string
	N         Opt
}

// GroupNumbers are what an entry says of one group, in the order of the
// record; the name is "" for one-sample and paired measures.
type GroupNumbers struct {
	Name                                           string
	N, Mean, SD, Median, Events, Exposure, R       Opt
	Assessed, Randomised, Received, Lost, Analysed Opt // flow
	Missing                                        int // rows dropped for want of a value, this group known
	Excluded                                       int // rows dropped by a filter of the plan
}

// GroupTotal counts one group of one outcome over all its analysed entries.
// Group is "" for one-sample and paired measures. A number nobody stated does
// not apply; Planned is of [plan.size] or the plan of looks.
type GroupTotal struct {
	Outcome, Group, Set                    string // the analysis set that decides; "" without sets
	Planned, Randomised, Analysed, Missing Opt
	Excluded                               Opt // rows that a filter of the plan dropped
}

// SurvivalCurve is the Kaplan–Meier curve of one group: a step at each event
// time, with pointwise limits at the plan's level, and the numbers at risk at
// a few round times.
type SurvivalCurve struct {
	Group                 string
	Time, Share           []float64
	Low, High             []float64 // nil: no limits
	Censored              []float64 // times of censoring, ascending
	RiskTimes, RiskCounts []float64
}

// Analysis is one estimate with its interval, on the effect's own scale; for
// ratios SE is of the natural logarithm.
type Analysis struct {
	Measure  string
	Method   string // the word of the method actually used
	N        float64
	Events   Opt
	Estimate Opt // ±Inf where the data put it at the end of the range
	SE, DF   Opt
	Level    float64
	Low      Opt // ±Inf: no such limit
	High     Opt
	Notes    []Note
}

// Test is one test of a point.
type Test struct {
	Null        float64
	Alternative string // greater, less, two-sided
	Statistic   string // t, z, chi2, f, exact, …
	Value       Opt
	DF          Opt
	P           P
}

// Note is a finding of a computation: a permanent code, the message as a
// format that its package keeps beside the method's card, and its arguments.
type Note struct {
	Code    string
	Message string
	Args    []any
}

// Verdict is what a claim's analysis comes to.
type Verdict string

// The verdicts.
const (
	Established  Verdict = "established"
	Suggested    Verdict = "suggested"
	Contradicted Verdict = "contradicted"
	Open         Verdict = "open"
	Pending      Verdict = "pending"
	Described    Verdict = "described"
	Masked       Verdict = "masked"
)

// Reading is where the interval stands against null and region: how many of
// the points low, null, high the data exclude from below (Above) and from
// above (Below).
type Reading struct {
	Above, Below int
	HasRegion    bool
	OK           bool
}

// Judged is a claim decided on one analysis.
type Judged struct {
	Because string // alternatives: sealed-plan, left-out-kept, worst-case, sensitivity:NAME, method:WORD
	Set     string
	Analysis
	Tests           []Test
	P               P // decides the claim
	PAdjusted       P
	SValue          Opt
	SmallestMargin  Opt // in the grammar of margin
	SmallestLimit   Opt // the same as a value of the effect; of a region, its upper end
	SmallestLow     Opt // equivalent: the lower end of the smallest region
	Verdict         Verdict
	Reason          *Note // why the claim could not be decided
	Reading         Reading
	IntervalDecides bool
}

// Hypothesis is one claim with all that was computed for it.
type Hypothesis struct {
	Name, Outcome, Claim, Role, Statement string
	Alpha                                 float64
	TwoSided                              bool
	MarginLow, MarginHigh                 Opt // the points in force
	MarginWhy                             string
	Limit                                 Opt
	Evidence                              string // single, pooled, combined, none
	Studies                               []string
	Judged
	PostHoc      bool
	BySet        []Judged
	Curve        []CurvePoint
	Descriptive  Analysis // the same method at the plan's level
	Assumptions  []Check
	Alternatives []Judged
	WhatNext     *WhatNext
	// MethodsTried counts the alternatives by other methods, MethodsAgree those
	// of them with the verdict of the planned one.
	MethodsAgree, MethodsTried int
	// Excludes names a claim on the same outcome of which and this one at most
	// one can be wrong; said in place of an adjustment. "" where there is none.
	Excludes string
}

// CurvePoint is one point of a p-value function: two-sided p at a null value.
type CurvePoint struct{ Value, P float64 }

// Check is one assumption and what the data show of it.
type Check struct {
	Assumption string // card word: "normal-means", "equal-variances", …
	Shows      []Shown
}

// Shown is one number that bears on an assumption.
type Shown struct {
	What  string // "spread ratio", "skewness", …
	Group string
	Value float64
}

// WhatNext says what would settle an open claim.
type WhatNext struct {
	NewStudyN80, NewStudyN90  Opt  // participants of a new study alone, at power 0.8 and 0.9
	AddedN80, AddedN90        Opt  // participants added to the present ones
	ExcludedLow, ExcludedHigh Opt  // values beyond these are already excluded
	NoSize                    bool // the present estimate does not point toward the claim
}

// Pooled is several studies under one model.
type Pooled struct {
	Outcome, Set             string
	Hypotheses               []string
	Studies                  []string
	Model, Between, Interval string
	Weights                  string
	Decides                  bool
	K                        int
	Analysis
	P                             P
	Q, QDF                        Opt
	QP                            P
	I2, I2Low, I2High, H2         Opt
	Tau2, Tau2Low, Tau2High       Opt
	PredictionLow, PredictionHigh Opt
	PredictionReading             Reading   // where the prediction interval falls against null and region
	Share                         []float64 // weight per study
	LeaveOneOut                   []LeftOne
	Cumulative                    []Step
	SmallStudy                    *SmallStudy
	LeftForZero                   []string // double-zero studies left out
}

// LeftOne is the pooled result without one study.
type LeftOne struct {
	Study               string
	Estimate, Low, High float64
	Verdicts            []NamedVerdict
}

// NamedVerdict is a hypothesis with a verdict and reading.
type NamedVerdict struct {
	Hypothesis string
	Verdict    Verdict
	Reading    Reading
}

// Step is the pooled result up to one study.
type Step struct {
	Date                record.Date
	Study               string
	Estimate, Low, High float64
}

// SmallStudy is a small-study regression.
type SmallStudy struct {
	Kind        string // egger, peters
	Coefficient float64
	SE, DF, T   float64
	P           P
}

// Combined is a combination of p-values.
type Combined struct {
	Hypothesis, Set, Method, Toward, Case string
	K                                     int
	Statistic                             Opt
	DF                                    Opt
	P                                     P
	Studies                               []string
	Tally                                 *Tally
}

// Tally counts directions.
type Tally struct {
	Toward, With int
	P            P
}

// Family is a multiplicity family after its procedure.
type Family struct {
	Name, Procedure string
	Verdict         Verdict
	Alpha           float64
	Members         []Member
	Path            []PathStep
	After           []string
}

// Member is one hypothesis in a family.
type Member struct {
	Hypothesis   string
	P, PAdjusted P
	AlphaLocal   Opt
	Rejected     bool
}

// PathStep is one step of a stepwise procedure.
type PathStep struct {
	Hypothesis string
	Level      float64
	P          float64
	Rejected   bool
}

// Look is one planned or unplanned look.
type Look struct {
	Hypothesis, Look, Crossed                                string
	Date                                                     record.Date
	Fraction, Information, AlphaSpent                        Opt
	Upper, Lower, Value                                      Opt
	ValueLow, ValueHigh                                      Opt
	P                                                        P
	RepeatedLow, RepeatedHigh                                Opt
	ConditionalAssumed, ConditionalEstimate, ConditionalNull Opt
}

// Size is a solved sample-size question.
type Size struct {
	Name, Hypothesis                           string
	N                                          []float64
	Total, Recruit, Power, Detectable, Assumed Opt
}

// Prior is stated beliefs before and after.
type Prior struct {
	Name, Outcome, Label, Why   string
	Before, After               Belief
	BayesFactor                 Opt // for the null; absent beyond the numbers a computer holds
	LnBayesFactor               Opt // its natural logarithm
	Path                        []Belief
	DensityBefore, DensityAfter []DensityPoint // the densities before and after
}

// Belief is a normal belief with its shares.
type Belief struct {
	Study                 string
	Mean, SD              float64
	Benefit, Inside, Harm float64
	NullShare             Opt
}

// DensityPoint is the height of a belief at a value of the effect, on the
// analysis scale and up to a common factor. What a belief puts exactly on the
// null is not in it.
type DensityPoint struct{ Value, Height float64 }

// Sensitivity is a planned sensitivity analysis.
type Sensitivity struct {
	Name, Of, Kind string
	Curve          []MarginVerdict
	Smallest       Opt // margin
	Judged         []Judged
	Tipping        *Tipping
}

// MarginVerdict is the claim's p-value at a margin.
type MarginVerdict struct {
	Margin  float64
	P       P
	Verdict Verdict
}

// Tipping is where missing results would change the verdict.
type Tipping struct {
	Missing [2]float64
	Shift   Opt // means: how far those missing must differ
	Events  [2]Opt
	Verdict Verdict // of the hypothesis beyond the tipping point
}

// Event is one entry of the timeline.
type Event struct {
	At    string // date or instant as written
	Sort  string // for order
	Kind  string // approval, seal, result, look, decision, deviation, ethics, …
	What  string
	Order string // "unproven" where the order cannot be proved
}

// File is one data file.
type File struct {
	Path, SHA256, Set, Study, Outcome string
	Rows, Used                        int
	Dropped                           []Dropped
}

// Dropped counts rows that one reason removed.
type Dropped struct {
	Reason, Why, Group string
	Count              int
}

// Choice is one analysis choice and where it came from.
type Choice struct {
	What, Value, From string // plan, default, deviation
	Why               string
}

// Conclusion is the user's own conclusion.
type Conclusion struct {
	Text, Decision, NextSteps string
	Checked                   bool // false: not English
}
