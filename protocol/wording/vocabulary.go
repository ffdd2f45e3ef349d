package wording

// This file is a table: the sets of words that the patterns name with %.

var vocabulary = map[string]string{
	"be":   "is are was were be been being seem seems seemed appear appears appeared remain remains remained stay stays stayed look looks looked",
	"is":   "is are was were be been being",
	"have": "has have had having",
	"do":   "do does did will would can could",
	// what a comparison can find
	"eff": "effect effects difference differences benefit benefits impact influence advantage advantages improvement improvements change changes association associations relationship correlation link gain gains effectiveness efficacy reduction reductions increase increases decrease decreases saving savings rise loss drop fall disadvantage disadvantages deterioration harm bearing disparity discrepancy distinction shift",
	// words that narrow it without saying how large it is
	"adj": "real measurable detectable discernible visible apparent noticeable overall additional true observable demonstrable general direct actual genuine added extra further beneficial positive negative adverse favourable favorable harmful clear marked definite any such other statistical consistent lasting causal systematic therapeutic protective net",
	// words that say that it is large enough to care about
	"rel":     "relevant meaningful important worthwhile substantial considerable appreciable material practical clinical useful notable noteworthy large big major sizeable sizable dramatic huge remarkable impressive striking profound tangible decisive enormous vast strong great spectacular",
	"relonly": "relevant meaningful important worthwhile",
	"field":   "clinically practically biologically economically technically educationally operationally commercially agronomically medically therapeutically functionally",
	"much":    "substantially dramatically considerably markedly greatly vastly remarkably strikingly hugely enormously massively drastically profoundly impressively notably tremendously spectacularly",
	"trueadv": "clearly really truly actually indeed also still now thus therefore much far quite very so even just simply either significantly statistically generally materially measurably appreciably noticeably in fact",
	// verbs and participles of a finding
	"est":      "established shown demonstrated confirmed supported concluded met reached achieved evident proven proved verified documented attained satisfied given fulfilled",
	"estv":     "show shows showed establish establishes established demonstrate demonstrates demonstrated confirm confirms confirmed support supports supported conclude concludes concluded indicate indicates indicated suggest suggests suggested declare declared reveal reveals revealed document documents documented achieve achieves achieved claim reach reached",
	"see":      "found detected seen observed shown demonstrated evident apparent noted recorded measured noticed identified present established revealed",
	"seev":     "found find finds saw see sees detected detect detects observed observe observes showed show shows noted revealed reveal reveals demonstrated demonstrate demonstrates yielded produced recorded measured",
	"meta":     "show shown shows prove proves proven proved establish established establishes demonstrate demonstrated demonstrates conclude concluded concludes conclusion claim claims claimed mean means imply implies implied say says said know known support supports supported allow allows let lets justify justifies justified confirm confirmed confirms suffice suffices tell tells settle settles settled decide decides decided answer answers permit permits entitle entitles suggest suggests suggested indicate indicates infer inferred assert asserted warrant warrants warranted speak assume assumed judge judged call called guarantee guarantees license licenses certain sure possible clear follow follows regard consider considered regarded describe describes described recommend view viewed drawn declare declared argue argued enough sufficient sufficiently",
	"exclude":  "exclude excludes excluded rule rules ruled refute refutes refuted reject rejects rejected dismiss dismissed",
	"quality":  "good well strong effective safe fast accurate reliable precise durable efficacious potent useful efficient quick stable clean robust beneficial productive sensitive helpful tolerable comfortable badly poorly bad poor",
	"amount":   "high low long much many often large small hard soft warm big wide thick frequent frequently short hot cold dry heavy late early",
	"up":       "higher greater larger longer stronger bigger harder warmer heavier wider thicker taller hotter",
	"down":     "lower fewer shorter smaller weaker cooler rarer softer lighter narrower thinner colder",
	"good":     "better superior safer healthier cleaner preferable quicker sooner faster",
	"bad":      "worse inferior poorer slower",
	"upv":      "increase increases increased increasing raise raises raised raising prolong prolongs prolonged lengthen lengthens lengthened rose rises strengthen strengthens strengthened doubles doubled elevate elevates elevated climbed",
	"downv":    "reduce reduces reduced reducing lower lowers lowered lowering decrease decreases decreased decreasing cuts shorten shortens shortened shortening halve halves halved weaken weakens weakened fell dropped diminish diminishes diminished lessen lessens lessened curb curbs curbed declined suppress suppresses suppressed",
	"goodv":    "improve improves improved improving relieve relieves relieved help helps helped heal heals healed cure cures cured protect protects protected prevent prevents prevented enhance enhances enhanced boost boosts boosted ease eases eased alleviate alleviates alleviated save saves saved outperform outperforms outperformed surpass surpasses surpassed beat beats excel excels excelled accelerate accelerates accelerated speeds sped outdo outdoes outdid trump trumps",
	"badv":     "worsen worsens worsened impair impairs impaired damage damages damaged deteriorate deteriorates deteriorated harm harms harmed hurt hurts degrade degrades degraded compromise compromises compromised underperform underperforms underperformed",
	"actv":     "work works worked help helps helped matter matters mattered affect affects affected influence influences influenced change changes changed alter alters altered differ differs differed respond responds responded vary varies varied depend depends",
	"study":    "study studies trial trials experiment experiments series site sites centre centres laboratory laboratories lab labs result results finding findings comparison comparisons replication replications test tests investigation",
	"limit":    "limit limits requirement requirements target targets specification specifications spec criterion criteria threshold thresholds tolerance standard standards goal ceiling floor maximum minimum class grade norm norms",
	"person":   "patient patients person people user users customer customers pupil pupils student students driver drivers child children adult adults woman women man men everyone everybody trainee trainees worker workers farmer farmers animal animals",
	"thing":    "part parts unit units pouch pouches case cases lot lots batch batches line lines condition conditions setting settings hospital hospitals school schools field fields situation situations population populations circumstances circumstance climate climates soil soils ward wards machine machines product products item items sample samples season seasons age ages",
	"harmnoun": "risk risks harm harms danger dangers hazard hazards toxicity complications",
}

// denies are the words that turn what follows; a gap of a pattern does not run over them.
var denies = set("not no non never neither nor without fail failed fails hardly whether")
