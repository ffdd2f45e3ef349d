package record

import "steelyard/protocol/diag"

// The struct tags `key:"…"` name the TOML key a field is read from; reading
// walks the key table and fills these fields. A Table field named At is the
// place of the table's head; Name is the user's own name for a table that
// has one. Slices keep the order of the file.

// Record is one whole record.
type Record struct {
	Source *diag.Source
	Tree   *Node // everything stated, as written; Tree.Get("plan") is what a seal covers

	Language   Int          `key:"steelyard"`
	Head       Head         `key:"record"`
	Plan       Plan         `key:"plan"`
	Results    []*Result    `key:"result"`
	Earlier    []*Result    `key:"earlier_result"`
	Missing    []*Missing   `key:"missing_result"`
	Deviations []*Deviation `key:"deviation"`
	Decisions  []*Decision  `key:"decision"`
	Approvals  []*Approval  `key:"approval"`
	Witnesses  []*Witness   `key:"witness"`
	Conclusion *Conclusion  `key:"conclusion"` // nil when absent
}

// Table is the place of a table: its header, or the key of an inline table.
type Table struct{ At diag.Span }

// Named is a table under a name that the user gave.
type Named struct {
	Table
	Name string
}

// Head is [record].
type Head struct {
	Table
	Title           String       `key:"title"`
	Setting         String       `key:"setting"`
	Number          String       `key:"number"`
	Version         String       `key:"version"`
	Status          String       `key:"status"`
	Complete        Bool         `key:"complete"`
	Date            Day          `key:"date"`
	Authors         []*Author    `key:"authors"`
	ApprovalsWanted []*Wanted    `key:"approvals_wanted"`
	Ethics          *Body        `key:"ethics"`
	Registry        *Body        `key:"registry"`
	References      []NamedText  `key:"references"` // NAME = string
	Equipment       []*Equipment `key:"equipment"`
	Funding         String       `key:"funding"`
	Interests       String       `key:"interests"`
	Confidential    String       `key:"confidential"`
	Paper           String       `key:"paper"`
	Typeface        String       `key:"typeface"`
	Supersedes      *Supersedes  `key:"supersedes"`
	Attach          Strings      `key:"attach"`
}

// NamedText is one entry of a table of strings.
type NamedText struct {
	Named
	Text String
}

// Author is one of record.authors.
type Author struct {
	Table
	Name        String `key:"name"`
	Role        String `key:"role"`
	Affiliation String `key:"affiliation"`
}

// Wanted is one of record.approvals_wanted.
type Wanted struct {
	Table
	Role    String `key:"role"`
	Meaning String `key:"meaning"`
	Name    String `key:"name"`
}

// Body is an ethics committee or a registry.
type Body struct {
	Table
	Body   String `key:"body"`
	Number String `key:"number"`
	Date   Day    `key:"date"`
}

// Equipment is one of record.equipment.
type Equipment struct {
	Table
	ID              String `key:"id"`
	What            String `key:"what"`
	CalibratedUntil Day    `key:"calibrated_until"`
}

// Supersedes names the issued record that this one replaces.
type Supersedes struct {
	Table
	Number  String `key:"number"`
	Version String `key:"version"`
	SHA256  String `key:"sha256"`
}

// Plan is [plan]: everything here is sealed.
type Plan struct {
	Table
	Question   String `key:"question"`
	Population String `key:"population"`
	Comparison String `key:"comparison"`
	Design     String `key:"design"`
	Background String `key:"background"`
	Missing    String `key:"missing"`
	Alpha      Alpha  `key:"alpha"`
	AlphaWhy   String `key:"alpha_why"`
	Level      Number `key:"level"`
	Seed       Int    `key:"seed"`

	Outcomes     []*Outcome     `key:"outcome"`
	Hypotheses   []*Hypothesis  `key:"hypothesis"`
	Families     []*Family      `key:"family"`
	Sets         []*Set         `key:"set"`
	Data         PlanData       `key:"data"`
	Looks        *Looks         `key:"looks"`
	Poolings     []*Pooling     `key:"pooling"`     // Name is the outcome
	Combinations []*Combination `key:"combination"` // Name is the outcome
	Sizes        []*Size        `key:"size"`
	Rehearsal    *Rehearsal     `key:"rehearsal"`
	Priors       []*Prior       `key:"prior"`
	Sensitivity  []*Sensitivity `key:"sensitivity"`
	Estimands    []*Estimand    `key:"estimand"`
}

// Alpha holds the error levels.
type Alpha struct {
	Table
	OneSided Number `key:"one_sided"`
	TwoSided Number `key:"two_sided"`
}

// Outcome is [plan.outcome.NAME].
type Outcome struct {
	Named
	Label        String   `key:"label"`
	Measure      String   `key:"measure"`
	Unit         String   `key:"unit"`
	Better       String   `key:"better"`
	Groups       Strings  `key:"groups"` // first, second
	Reference    Number   `key:"reference"`
	Smallest     Bounds   `key:"smallest"`
	Why          String   `key:"why"`
	Spec         Numbers  `key:"spec"` // low, high; infinities allowed
	Distribution String   `key:"distribution"`
	Horizon      Number   `key:"horizon"`
	Cluster      *Cluster `key:"cluster"`
	SystematicU  Number   `key:"systematic_u"`
	Per          Number   `key:"per"`
	As           String   `key:"as"`
	Design       String   `key:"design"`
	Estimand     String   `key:"estimand"`
	Timepoint    String   `key:"timepoint"`
	Instrument   String   `key:"instrument"`
	Notes        String   `key:"notes"`
	Digits       Int      `key:"digits"`
}

// Cluster is the assumed clustering of an outcome.
type Cluster struct {
	Table
	ICC  Number `key:"icc"`
	Size Number `key:"size"`
}

// Hypothesis is [plan.hypothesis.NAME].
type Hypothesis struct {
	Named
	Outcome     String       `key:"outcome"`
	Claim       String       `key:"claim"`
	Role        String       `key:"role"`
	Statement   String       `key:"statement"`
	Alpha       Alpha        `key:"alpha"` // overrides the plan's
	Margin      Bounds       `key:"margin"`
	MarginWhy   String       `key:"margin_why"`
	MarginBasis *MarginBasis `key:"margin_basis"`
	Limit       Number       `key:"limit"`
	Evidence    String       `key:"evidence"`
	Method      String       `key:"method"`
	Studies     Strings      `key:"studies"`
	Sets        Strings      `key:"sets"`
	Adjust      Strings      `key:"adjust"`
	Strata      String       `key:"strata"`
}

// MarginBasis is the evidence behind a margin.
type MarginBasis struct {
	Table
	Effect Number `key:"effect"`
	Low    Number `key:"low"`
	High   Number `key:"high"`
	Source String `key:"source"`
}

// Family is [plan.family.NAME].
type Family struct {
	Named
	Members   Strings   `key:"members"`
	Procedure String    `key:"procedure"`
	Order     Strings   `key:"order"`
	Weights   Numbers   `key:"weights"`
	Transfer  []Numbers `key:"transfer"` // rows
	After     Strings   `key:"after"`
	Require   String    `key:"require"`
}

// Set is [plan.set.NAME], an analysis set.
type Set struct {
	Named
	Label String    `key:"label"`
	Why   String    `key:"why"`
	Keep  []*Filter `key:"keep"`
}

// PlanData is [plan.data].
type PlanData struct {
	Table
	Exclude []*Filter `key:"exclude"`
}

// Filter selects rows of a data file. Exactly one condition is stated.
type Filter struct {
	Table
	Column  String          `key:"column"`
	Above   Number          `key:"above"`
	AtLeast Number          `key:"at_least"`
	Below   Number          `key:"below"`
	AtMost  Number          `key:"at_most"`
	Equals  Scalar          `key:"equals"`
	OneOf   Value[[]Scalar] `key:"one_of"`
	Missing Bool            `key:"missing"`
	Why     String          `key:"why"`
}

// Scalar is a string, number or boolean that a filter compares with a cell.
// Text is its form in a CSV cell; IsNumber says that cells compare as numbers.
type Scalar struct {
	Text     string
	Number   float64
	IsNumber bool
	Span     diag.Span
	Stated   bool
}

// Looks is [plan.looks].
type Looks struct {
	Table
	Fractions   Numbers   `key:"fractions"`
	Total       Number    `key:"total"`
	Information String    `key:"information"`
	Spending    String    `key:"spending"`
	Parameter   Number    `key:"parameter"`
	Futility    *Futility `key:"futility"`
	Hypotheses  Strings   `key:"hypotheses"`
	Masked      Bool      `key:"masked"`
	Anytime     Bool      `key:"anytime"`
}

// Futility is plan.looks.futility.
type Futility struct {
	Table
	Spending  String `key:"spending"`
	Parameter Number `key:"parameter"`
	Beta      Number `key:"beta"`
	Binding   Bool   `key:"binding"`
}

// Pooling is [plan.pooling.OUTCOME].
type Pooling struct {
	Named
	Independent    String `key:"independent"`
	Model          String `key:"model"`
	Between        String `key:"between"`
	Interval       String `key:"interval"`
	Guard          Bool   `key:"guard"`
	Weights        String `key:"weights"`
	Continuity     Number `key:"continuity"`
	IncludeEarlier Bool   `key:"include_earlier"`
}

// Combination is [plan.combination.OUTCOME].
type Combination struct {
	Named
	Method  String `key:"method"`
	Weights String `key:"weights"`
}

// Size is [plan.size.NAME].
type Size struct {
	Named
	Hypothesis  String  `key:"hypothesis"`
	Assumed     Number  `key:"assumed"`
	SD          Numbers `key:"sd"` // one, or first and second
	ControlMean Number  `key:"control_mean"`
	ControlRisk Number  `key:"control_risk"`
	ControlRate Number  `key:"control_rate"`
	Exposure    Number  `key:"exposure"`
	EventShare  Number  `key:"event_share"`
	Discordant  Number  `key:"discordant"`
	PairR       Number  `key:"pair_r"`
	Power       Number  `key:"power"`
	Allocation  Numbers `key:"allocation"`
	Dropout     Number  `key:"dropout"`
	N           Int     `key:"n"`
	HalfWidth   Number  `key:"half_width"`
	Accept      Int     `key:"accept"`
}

// Rehearsal is [plan.rehearsal].
type Rehearsal struct {
	Table
	Replicates Int         `key:"replicates"`
	Scenarios  []*Scenario `key:"scenarios"`
}

// Scenario is one stated truth of a rehearsal.
type Scenario struct {
	Table
	Label     String        `key:"label"`
	Effects   []NamedNumber `key:"effects"`
	BetweenSD Number        `key:"between_sd"`
}

// NamedNumber is one entry of a table of numbers.
type NamedNumber struct {
	Named
	Number Number
}

// Prior is [plan.prior.NAME].
type Prior struct {
	Named
	Outcome   String `key:"outcome"`
	Label     String `key:"label"`
	Why       String `key:"why"`
	Mean      Number `key:"mean"`
	SD        Number `key:"sd"`
	Median    Number `key:"median"`
	Low       Number `key:"low"`
	High      Number `key:"high"`
	Level     Number `key:"level"`
	NullShare Number `key:"null_share"`
}

// Sensitivity is [plan.sensitivity.NAME].
type Sensitivity struct {
	Named
	Of     String `key:"of"`
	Kind   String `key:"kind"`
	Method String `key:"method"`
}

// Estimand is [plan.estimand.NAME].
type Estimand struct {
	Named
	Population   String          `key:"population"`
	Treatment    String          `key:"treatment"`
	Variable     String          `key:"variable"`
	Summary      String          `key:"summary"`
	Intercurrent []*Intercurrent `key:"intercurrent"`
}

// Intercurrent is one event of an estimand.
type Intercurrent struct {
	Table
	Event    String `key:"event"`
	Strategy String `key:"strategy"`
	Why      String `key:"why"`
}

// Result is one [[result]] or [[earlier_result]].
type Result struct {
	Table
	Study     String   `key:"study"`
	Outcome   String   `key:"outcome"`
	Date      Day      `key:"date"`
	Known     Instant  `key:"known"`
	Set       String   `key:"set"`
	Look      Look     `key:"look"`
	Groups    []*Group `key:"groups"` // groups.X, one per name
	Sample    *Group   `key:"sample"`
	Pairs     *Pairs   `key:"pairs"`
	Effect    *Effect  `key:"effect"`
	P         *PValue  `key:"p"`
	Data      *Data    `key:"data"`
	Flow      []*Flow  `key:"flow"` // flow.X
	Source    String   `key:"source"`
	By        String   `key:"by"`
	CheckedBy String   `key:"checked_by"`
	LeaveOut  String   `key:"leave_out"`
}

// Day is the local day on which the result became known: `date`, or the day
// of `known` at its own offset.
func (r *Result) Day() Date {
	if r.Known.Stated {
		return DateOf(r.Known.V)
	}
	return r.Date.V
}

// Look is which look an entry belongs to.
type Look struct {
	Stated    bool
	Unplanned bool
	Number    int
	Span      diag.Span
}

// Group is a summary of one group, or of the one sample.
type Group struct {
	Named           // the group's name; "" for sample
	N        Number `key:"n"`
	Mean     Number `key:"mean"`
	SD       Number `key:"sd"`
	LogMean  Number `key:"log_mean"`
	LogSD    Number `key:"log_sd"`
	Events   Number `key:"events"`
	Exposure Number `key:"exposure"`
	R        Number `key:"r"` // correlations
}

// Pairs is a summary of paired results.
type Pairs struct {
	Table
	N          Number `key:"n"`
	Mean       Number `key:"mean"`
	SD         Number `key:"sd"`
	FirstMean  Number `key:"first_mean"`
	SecondMean Number `key:"second_mean"`
	FirstSD    Number `key:"first_sd"`
	SecondSD   Number `key:"second_sd"`
	R          Number `key:"r"`
	Both       Number `key:"both"`
	FirstOnly  Number `key:"first_only"`
	SecondOnly Number `key:"second_only"`
	Neither    Number `key:"neither"`
}

// Effect is an effect estimated elsewhere.
type Effect struct {
	Table
	Estimate Number `key:"estimate"`
	SE       Number `key:"se"`
	DF       Number `key:"df"`
	N        Number `key:"n"`
	Low      Number `key:"low"`
	High     Number `key:"high"`
	Level    Number `key:"level"`
}

// PValue is a bare p-value.
type PValue struct {
	Table
	Value     Number `key:"value"`
	Sides     Int    `key:"sides"`
	Direction String `key:"direction"`
	N         Number `key:"n"`
	Relation  String `key:"relation"`
}

// Data names the columns of a CSV file.
type Data struct {
	Table
	File          String      `key:"file"`
	Value         String      `key:"value"`
	Group         String      `key:"group"`
	Labels        []NamedText `key:"labels"` // code in the file = group's name
	Pair          String      `key:"pair"`
	Subject       String      `key:"subject"`
	Period        String      `key:"period"`
	Sequence      String      `key:"sequence"`
	First         String      `key:"first"`
	Second        String      `key:"second"`
	Time          String      `key:"time"`
	Event         String      `key:"event"`
	Exposure      String      `key:"exposure"`
	Cluster       String      `key:"cluster"`
	MissingValues Strings     `key:"missing_values"`
	SHA256        String      `key:"sha256"`
}

// Flow is flow.X of a result: one group's numbers.
type Flow struct {
	Named
	Assessed   Int `key:"assessed"`
	Randomised Int `key:"randomised"`
	Received   Int `key:"received"`
	Lost       Int `key:"lost"`
	Analysed   Int `key:"analysed"`
}

// Missing is one [[missing_result]].
type Missing struct {
	Table
	Study   String `key:"study"`
	Outcome String `key:"outcome"`
	Why     String `key:"why"`
}

// Deviation is one [[deviation]].
type Deviation struct {
	Table
	Date         Day          `key:"date"`
	What         String       `key:"what"`
	Why          String       `key:"why"`
	ResultsKnown Bool         `key:"results_known"`
	Changes      Strings      `key:"changes"`
	Results      []*ResultRef `key:"results"`
	Approved     *ApprovedBy  `key:"approved"`
}

// ResultRef names a result entry.
type ResultRef struct {
	Table
	Study   String `key:"study"`
	Outcome String `key:"outcome"`
	Set     String `key:"set"`
	Look    Look   `key:"look"`
}

// ApprovedBy is who approved a deviation.
type ApprovedBy struct {
	Table
	By        String `key:"by"`
	Reference String `key:"reference"`
	Date      Day    `key:"date"`
}

// Decision is one [[decision]].
type Decision struct {
	Table
	At   Instant `key:"at"`
	Body String  `key:"body"`
	On   String  `key:"on"`
	Saw  String  `key:"saw"`
	What String  `key:"what"`
}

// Approval is one [[approval]].
type Approval struct {
	Table
	Role    String  `key:"role"`
	Name    String  `key:"name"`
	Meaning String  `key:"meaning"`
	At      Instant `key:"at"`
}

// Witness is one [[witness]].
type Witness struct {
	Table
	Seal      Int     `key:"seal"`
	What      String  `key:"what"`
	Reference String  `key:"reference"`
	At        Instant `key:"at"`
	Token     String  `key:"token"`
	CA        String  `key:"ca"`
}

// Conclusion is [conclusion].
type Conclusion struct {
	Table
	Text      String `key:"text"`
	Decision  String `key:"decision"`
	NextSteps String `key:"next_steps"`
}
