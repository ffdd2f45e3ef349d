package wording

// This file is a table: what takes a claim back, and how far it reaches.

type scope uint8

const (
	forward  scope = iota // from the words on to the end of the clause
	backward              // from the beginning of the clause to the words
	near                  // the three words behind
	whole                 // the sentence
)

// turn is a scope that turns a claim into its opposite; explained and
// observed do not change how firmly a claim is said.
const (
	turn      Force = "turn"
	observed  Force = "observed"
	explained Force = "explained"
	within    Force = "within"
	onlyOne   Force = "only-one"
)

type triggerEntry struct {
	force    Force
	scope    scope
	patterns []string
}

var triggerEntries = []triggerEntry{
	{Denied, forward, []string{
		"not|never|neither|nor|cannot _2 %meta", "not been? _1 %meta", "no|without|any|little|insufficient _1 proof|claim|conclusion|statement|basis|grounds|reason|support|way|certainty|answer|assurance|verdict|word", "can|could|may|must|should|shall|do|does|did|will not be? _1 %exclude|tell|call|say|speak|conclude|claim|read|take|taken|interpreted|found|infer|concluded|excluded|assume|decide",
		"not be? %exclude out?", "nothing|none _5 lets|allows|shows|says|supports|suggests|proves|known|said|indicates|points|be|is|tells|tell|means|establishes|demonstrates|amounts|justifies", "nothing _2 can|could be said|concluded", "leave|leaves|left it? open", "leave|leaves|left _9 open", "unclear|unknown|uncertain|undecided|unsettled|unproven|unproved|unresolved|undetermined", "too small|few|early|short|imprecise|wide|little|noisy|uncertain|weak|coarse to|for",
		"insufficient|inadequate to|for|evidence", "far|away from", "fall|falls|fell|stops|stopped short of", "wrong|misleading|mistake|premature|error|incorrect|false|rash|mistaken|unwise|overstatement|fallacy to|that", "not evidence|proof|sign|reason", "absence|lack|want of evidence|proof|information|data", "not suffice|suffices|enough|sufficient|sufficiently", "without showing|establishing|proving|proof|implying|claiming|meaning|demonstrating|assuming",
		"neither|nor _8 %est|shown", "words|word|phrase|phrases|term|terms|expression", "neither|not|nor _1 nor|or? a|an|the _2 %eff", "no|not _1 show|says? anything", "refrain|refrains|abstain|abstains from", "should|must|may|can not be read|taken|understood|interpreted|seen|used", "would|might overstate|overclaim|mislead", "not the same|identical|equivalent as|thing|to proof|evidence|showing|saying|proving|no|having?", "do|does not _1 %meta",
		"nor|neither do|does|did|can|is|was|has|have", "lacks|lack|lacked|needs|need|requires|require more? the? proof|evidence|precision|power|data|participants", "yet to", "say|says|said nothing", "unable|impossible|unlikely to", "stop|stops short of", "no|little|without|any _1 evidence|indication|indications|sign|signs that|of|for",
	}},
	{Denied, near, []string{"rather|other than", "instead of", "as opposed to"}},
	{Denied, backward, []string{
		"%is|has|have|had|can|could|will|would|may not|never been|be|yet|therefore|thus? _2 %est|possible|excluded|ruled|settled|clear|known|certain|available|justified|warranted|drawn|assured|claimed|said|tested|assessed|judged|planned|compared|guaranteed|concluded|inferred|assumed|permitted|allowed|secured|resolved|determined|decided|unproven|answered|decided|made|excluded|studied|investigated|examined|sought",
		"%is|has|have|had|can|could not|never $", "remains|remain|remained|stays|stay|is|was|are still|thus|therefore|yet? a|an? open|unproven|unproved|unknown|unclear|unsettled|undecided|uncertain|unresolved|unsupported|unestablished|unanswered|undetermined|inconclusive|masked|unconfirmed|conjecture|speculation|speculative|premature|doubtful", "remains|remain|is|are|was|has|have yet? to be _1 shown|tested|seen|determined|settled|confirmed|established|proven|judged|demonstrated|answered",
		"%is|remains another|a|separate|different|separate|an question|matter|story|issue|open", "%is neither|not _3 nor", "goes|go|going beyond|further|too", "%is beyond|outside|more what|the|than", "%is lacking|missing|masked|unsupported|withheld", "would be _3 overstatement|wrong|misleading|premature|mistake|error|mistaken|overclaim|rash", "%is premature|wrong|misleading|unjustified|unwarranted", "need|needs|requires|require _2 evidence|trial|data|test|study|series|proof|confirmation|participants|specimens|replication", "cannot|can not be? %exclude", "not _1 %est $", "neither|nor %is|has|have",
		"not supported|justified|warranted|established|shown|excluded|known|tested|settled|covered",
	}},
	{Asked, forward, []string{
		"how|whatever", "provided|providing that|the|it|they|a", "whether|unless|until|before|assuming|suppose|supposing|if|once|lest", "would|should|must|ought|shall", "need|needs|needed|has|have|had|required|requires|supposed|intended|meant|expected|designed|planned|plans|plan|aims|aimed|aim|hope|hopes|hoped|wanted|wants|want|intends|intend|ready|powered|thought|assumed to|that",
		"aim|aims|objective|objectives|purpose|goal|question|expectation|assumption|hope|hopes|endpoint|plan|criterion|idea|possibility|aimed|hypothesis|hypotheses %is|of|that|which|to|asks", "expect|expects|expected|hope|hoped|hypothesise|hypothesised|hypothesized|hypothesize|anticipate|anticipated|assume|assumed|assumes|suspect|wish|wonder|wondered|believe that|a|the|fewer|more|less|better|an|paste?", "to test|learn|see|find|determine|assess|examine|investigate|check|ask|decide|judge|know|explore|study|evaluate|clarify|establish|show|detect|demonstrate|tell|exclude",
		"ask|asks|asked|asking|tests|testing|wonder|study|studied|studies|examine|examined|look|looked|check|test for|if|how|a|that|any|the", "will|shall be|show|tell|test|decide|reveal|judge|help|compare", "planned|future|next|later|larger|another|further|new|separate _2 trial|study|series|test|experiment|analysis|trials|studies", "powered|power|sized for|to", "hypothesis|null|alternative states|says|that|was|is|of", "question|questions|test|tests|tested|criterion|criteria|analysis|claim|margin for|of|whether",
		"except|only if|when|in", "null|alternative|research hypothesis of", "were|was to", "in case|order to|that?", "to be accepted|released|worth|useful", "a|the claim of", "ask|asked", "considered|deemed|regarded|defined|judged|taken as|to|too|so", "smaller|lesser|such differences|effects|changes|gains|benefits|difference|effect",
	}},
	{Asked, backward, []string{
		"%is|was|were a|an|the|one|our? _1 hypothesis|question|claim|assumption|possibility|plan|aim|objective|guess|conjecture|expectation|idea|hope", "will|shall|is|are|to be _1 tested|judged|decided|measured|assessed|compared|examined|investigated|checked|evaluated|analysed|analyzed|seen|described|known|shown", "was|were|%is _1 hoped|expected|wanted|assumed|planned|intended|chosen|required|needed|sought|asked|desired", "would|should|must|will be _1 tested|shown|judged|confirmed|needed|required|sought",
	}},
	{Attributed, forward, []string{"one|some|few|several|individual %person|participant|participants|subject|subjects|member|members",

		"according to", "supplier|suppliers|manufacturer|manufacturers|vendor|maker|makers|seller|sponsor|inventor|critics|some|others|reviewer|reviewers|authors|author|leaflet|brochure|advertisement|advertising|literature|guideline|guidelines|colleagues|operators|staff|nurses|teachers|they|consultant|label|textbook|textbooks|experts|salesman|catalogue _2 claim|claims|claimed|say|says|said|state|states|stated|believe|believes|believed|report|reports|reported|think|thinks|thought|argue|argues|argued|felt|feel|expected|hoped|describe|described|describes|promise|promises|promised|maintain|maintains|assert|asserts|asserted|told|call|calls|called|suggest|suggests|praises|praise|insist|insists|consider|considered",
		"earlier|previous|prior|older|another|other|published|past|historical|former|first|pilot _2 study|studies|report|reports|trial|trials|work|review|reviews|paper|papers|results|publication|authors|group|series|experience|season", "it|that is|was|has|been _2 said|claimed|believed|assumed|thought|argued|held|reported|known _1 that|elsewhere", "reportedly|allegedly|supposedly|purportedly", "claimed|reported|said|described|stated by|elsewhere", "%is said|claimed|believed|reputed|advertised|marketed|sold|reported to|as",
	}},
	{Asked, near, []string{"smallest|least|minimal|minimum"}},
	{Possible, forward, []string{
		"may|might", "could !not", "possibly|perhaps|maybe|conceivably|potentially", "possible|plausible|conceivable|thinkable|imaginable that|to|but|gain|gains|effect|benefit|explanation|difference|for|a|values", "compatible|consistent|reconcilable with", "still|also|would|does|do|interval|limits|data|range|results|they|it allow|allows|permit|permits|admit|admits|include|includes|included|covers|contain|contains|cover|reach|reaches|extends|extend|spans|span|range|ranges",
		"leave|leaves room|scope|space for|to", "possibility of|that", "includes|include|covers|contains|spans both|the|values|a|useful|zero|null|no",
	}},
	{Possible, backward, []string{
		"remain|remains|remained|is|are|was|were|seem|seems|stays|stay _1 possible|plausible|compatible|conceivable|imaginable|thinkable|consistent|allowed|admissible|tenable", "%exclude not", "may|might or|exist|hold",
	}},
	{Suggested, forward, []string{
		"suggest|suggests|suggested|suggesting|suggestion|suggestive", "appear|appears|appeared|apparently|seemingly|seem|seems|seemed", "hint|hints|hinted|indication|indications|indicate|indicates|indicated|tentative|tentatively|preliminary|preliminarily|provisionally", "probably|likely|presumably", "point|points|pointed to|towards|at", "hypothesis generating", "exploratory",
	}},
	{Suggested, backward, []string{"%is|seems _1 likely|probable|suggested|suggestive|tentative|exploratory|preliminary|provisional"}},
	{turn, forward, []string{"contradict|contradicts|contradicting|oppose|opposes", "against the|any|a claim|idea|assumption|view|hypothesis", "contradicted|refute|refutes|refuted|disprove|disproves|disproved !by", "opposite|reverse of", "exclude|excludes|rules|rule|excluded|ruled|refutes|rejects out? that|a|any|superiority|equivalence|noninferiority|harm|benefit"}},
	{turn, backward, []string{"%is|are|can|has|have been|be? _1 contradicted|refuted|excluded|ruled|dismissed|rejected|disproved|disproven"}},
	{observed, forward, []string{"upper|lower|higher confidence? limit|bound|end", "observed|estimated|estimate|estimates|sample|samples|crude|raw|unadjusted|recorded|counted", "point estimate", "in our|this|these|the sample|data|series|patients|specimens", "expressed|measured in"}},
	{observed, backward, []string{"in our|this|these|the sample|samples|data|specimens|lots", "%is _1 described|descriptive", "per|as day|hour|year|week|observed|estimated|measured"}},
	{explained, whole, []string{"interval|intervals|compatible|limits", "not mean|imply|show|establish|prove|demonstrate|settle|exclude|rule", "remain|remains|is|are|stays|leaves|leave _2 open|possible|unsettled|undecided|inconclusive", "not excluded|ruled", "cannot|can not be? %exclude", "too small|few|imprecise|short", "absence of evidence", "not the? same|proof|evidence|sign", "no proof"}},
	{within, whole, []string{"within|margin|region|tolerance", "by|to|than|of|below|about|least|most # ", "for practical purposes", "practically|virtually|essentially|effectively|roughly|broadly", "enough|amount to|that matter|matters", "would matter", "as much as"}},
	{onlyOne, whole, []string{"at|in least one", "one or more", "some|one study|of|trial|site", "at least # of"}},
}
