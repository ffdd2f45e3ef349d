package wording

// This file is a table: what phrases look like, class by class. Among phrases
// that begin at one word the longest counts, then the one written first.

type entry struct {
	class     Class
	direction Direction
	flags     flag
	patterns  []string
}

// flag refines a class.
type flag uint8

const (
	exact     flag = 1 << iota // the same in every respect
	ofBenefit                  // speaks of the better side only
	negative                   // the denial is part of the phrase
	plain                      // a denial before it does not turn it
)

var entries = []entry{
	{NoEffect, "", negative, []string{
		"no|zero|without|little|nil %adj? %adj? %eff", "without any|an|a %adj? %eff", "no %adj? or|nor %adj %eff",
		"no|without|little %adj? or|and %adj %eff", "no %out %eff", "no %eff whatever|whatsoever|at",
		"lack|lacks|lacked|lacking|absence of? any|an|a|the? %adj? %eff", "devoid of %adj? %eff",
		"not %have|yield|yields|give|bring|produce|offer|show|make any|an|a %adj? %eff", "%have not had|produced|made|brought any|an|a %adj? %eff",
		"not to? !significantly|statistically|only _1 %actv", "make|makes|made|making no|little|hardly _1 difference|odds", "ineffective|ineffectual|useless|futile|pointless|worthless|inefficacious|fruitless",
		"unaffected|unchanged|uninfluenced|unaltered|untouched", "not do anything|much", "waste of money|time|effort", "ineffectiveness|inefficacy|uselessness|futility", "%eff _6 can|could be excluded|ruled|dismissed", "not an? effective|useful|helpful|beneficial|efficacious", "does|did|do nothing", "not !significantly|statistically %trueadv? effective|efficacious|beneficial|helpful|useful|different|of", "not depend", "in vain", "null effect|effects", "is|was|are|were nil|zero",
		"hardly|barely|scarcely any|a %adj? %eff", "neither|never helps|helped|works|worked|improves|improved", "%is of no|little use|help|benefit|value|avail",
		"nothing to|is|was gain|gained", "offer|offers|offered|bring|brings|brought|add|adds|added|give|gives|gave|contribute|contributes|contributed nothing|little", "no longer? benefits|helps", "irrespective|regardless of the|which|whether", "%eff %is absent|nil|zero|nonexistent|excluded",
		"there %is|%be no|zero %out", "no change", "%eff can be? excluded|ruled|dismissed", "independent of the|which", "no better than?|off?", "inert",
		"no impact|use|good|response", "null hypothesis %is supported|plausible",
	}},
	{NoEffect, Higher, negative, []string{"not to? !significantly|statistically|only _1 increase|rise|raise|raised|risen|increased|climb", "without _1 increasing|raising"}},
	{NoEffect, Lower, negative, []string{"not to? !significantly|statistically|only _1 reduce|reduced|lowered|fall|fallen|drop|dropped|decline|decrease|decreased|shorten|shortened|lessen|cut", "not to? lower the|%out", "without _1 reducing|lowering"}},
	{NoEffect, "", negative, []string{"not to? !significantly|statistically|only _1 lengthen|prolong|respond|speed", "free of|from %out"}},
	{NoEffect, Better, negative | ofBenefit, []string{
		"no %adj? benefit|benefits|advantage|advantages|improvement|improvements|gain|gains|relief|help", "no added|additional value", "not to? !significantly|statistically|only _1 benefit|improve|improved|help|relieve|relieved|heal|cure|protect|prevent|prevented|benefited", "not better",
		"%exclude out? a|any|the|all? %adj? benefit|advantage|gain|improvement",
	}},
	{TooSmall, "", negative | ofBenefit, []string{
		"benefit|gain|gains|saving|savings|advantage|improvement _5 %is %trueadv? smaller|less|below|too|negligible|trivial|irrelevant|immaterial",
		"benefit|gain|gains|saving|savings|advantage|improvement|reduction _6 %is %trueadv? negligible|trivial|irrelevant|immaterial|excluded|unimportant", "no|without %field? %rel %adj? benefit|gain|gains|saving|savings|advantage|improvement|relief",
		"too small|little a|an benefit|gain|saving|improvement", "%exclude out? a|any|the|all? %rel? %adj? benefit|gain|saving|savings|advantage|improvement _1 as|larger|greater|bigger|beyond|above|of|that|exceeding|# large?",
		"%exclude out? a|any|the|all? %field? %rel benefit|gain|saving|savings|advantage|improvement", "only|just|merely a? trivial|negligible _2 benefit|gain|number", "trivial|negligible|irrelevant _1 benefit|gain|saving|improvement|number",
	}},
	{TooSmall, "", negative, []string{
		"no|without|little|any %field? %rel %adj? %eff|benefit", "no|without %field %adj? %rel? %eff", "no|little|any practical|clinical|real|biological importance|relevance|significance|consequence",
		"of no|little|minor _2 importance|relevance|consequence|interest|significance", "negligible|negligibly|trivial|trivially|unimportant|immaterial|irrelevant|inconsequential|insubstantial|minuscule|miniscule",
		"too small|little|slight|modest|weak|low to|for|of !say|tell|show|decide|settle|answer|allow|conclude|detect|exclude|know|judge|establish|see|support|draw|permit|a|firm|reach|confirm|refute|prove|demonstrate|resolve|separate|distinguish|rule|give|yield|provide|find", "smaller|less|lower than _3 matters|matter|smallest", "%eff|it not matter", "differ|differs|differed by less|no|at than|more|most",
		"no difference|differences|effect larger|greater|bigger|wider|more|beyond|above|of than?", "%eff %is smaller|less|below|within than|the|#? ", "%exclude out? a|any|the|all? %rel %adj? %eff",
		"by less than matters|the|#", "%eff of _3 %is excluded|ruled", "within the|our? region|margin|equivalence", "%eff %is minimal|tiny|minor|small|marginal|insignificantly !compared|relative|in|and",
		"does|do not matter", "%exclude out? a|any|the|all? %adj? %eff _1 as|larger|greater|bigger|beyond|above|of|that|exceeding|# large?",
	}},
	{NotSignificant, "", negative, []string{
		"no|not|without|non _1 significant|significantly _2 %eff|different|better|worse|higher|lower|fewer|longer|shorter|reduced|increased|improved", "no|not|non|without _1 significant|significantly|significance",
		"not reach|attain|achieve|reached|attained|achieved _2 significance", "significance %is|was not reached|attained|achieved", "insignificant|nonsignificant|insignificantly|nonsignificantly",
		"no|little|without _1 evidence|indication|indications|sign|signs|hint of|for|that|to|whatever", "no|little|without any? _1 evidence|indication|sign %is|that|of|was", "not find|detect|see|observe|found|detected|seen|observed any|a|an? _2 %eff|benefit",
		"no _1 %adj? %eff|benefit _4 %is|could|can be? %see", "%seev no _1 %eff|evidence|benefit|improvement", "lack of significance|evidence", "not detectable|discernible|measurable|noticeable|perceptible|distinguishable", "not significant|significantly", "no %eff could|can be %see",
	}},
	{Equivalence, "", 0, []string{
		"equivalent|equivalently|bioequivalent|bioequivalence|interchangeable|interchangeably|exchangeable|substitutable|equipotent", "%estv|for|of|is|be|prove|proves|proof|with the|an|a|their? equivalence|equality|parity|interchangeability",
		"equivalence|equality|parity|interchangeability _5 %is been? _1 %est", "equivalence|equality %is|has been? _1 %est",
		"as !well|long|much|often|far %quality|%amount|%out _2 as !#", "as well|long|much|often !as _4 as", "as many %out? _3 as !#", "just|equally|every as|bit? %quality|%amount", "just as %quality|%amount|%out", "equally !likely|well|probable|possible %quality|%amount|%out", "equally well",
		"work|works|worked|perform|performs|performed|do|does|did|heal|heals|germinate|function|functions|hold|holds as well as", "comparable|comparably|similar|similarly|alike|equal|equals|equalled|equaled", "matches|matched|match the|that|those|its",
		"on a? par", "on a|one level with", "perform|performed|performs|did|do|does|work|worked|works|fare|fared equally|alike|similarly|identically", "agree|agrees|agreed _1 well|closely|perfectly|completely", "agree|agrees with !the", "%grp agreed with", "can|could|may be? _1 substituted|exchanged|swapped|interchanged", "can|may|could be? used interchangeably", "used interchangeably", "in line with each|one", "virtually|practically|essentially|effectively the same", "same for|within practical|all|the|any",
		"equal|similar|comparable %eff|efficacy|results|performance|outcomes|outcome", "no less and no more", "does|do|did as well", "neither better nor worse", "tie between", "of equal|similar|comparable _2 %quality|strength|efficacy|performance|quality",
	}},
	{Equivalence, "", exact, []string{
		"identical|indistinguishable", "exactly|absolutely|completely|precisely the? same|equal|alike", "exactly|precisely as %quality|%amount|%out", "%be|stay|stays|stayed|remain|remained|lasts|last|cost|costs _1 the same", "the same %eff|%out|result|results|efficacy|effectiveness|performance|outcome|outcomes|quality|value|values|reading|readings|amount|degree|strength|share|rate|level|levels", "same as the|with|before|under",
		"no|not any? different|different from|than|to", "no|not different", "%is one and the same", "not distinguishable",
	}},
	{Noninferiority, "", negative, []string{
		"noninferior|noninferiority !margin|trial|design|test|hypothesis|claim|question|limit|will|is|was|has|have|remains|cannot|can", "non inferior", "non inferiority|noninferiority _6 %is been? _1 %est", "%estv|for|of|conclude|with non inferiority", "%estv|for|of noninferiority",
		"no|not|never|hardly _1 %bad than?", "not %trueadv %bad", "at least as|equally %quality|%amount|%out as?", "no|not _1 less %quality|%amount|frequent|frequently|likely|often|satisfied", "no|not fewer|less _1 %out|%person|%thing", "no fewer|slower|weaker|rarer", "no|without _1 %rel|%adj? loss of|in",
		"not underperform|worsen|impair|compromise|suffer|harm|damage|deteriorate|degrade|lag", "not inferior", "at|by most # _5 more|fewer|less|longer|higher|lower|worse|later|shorter|greater", "by|at no more than # _5 worse|lower|higher|less|more", "holds|held|hold its own", "can keep|keeps up with",
		"not %bad _2 by more|an|a", "no deterioration|worsening", "worse by less|no", "matches or exceeds",
	}},
	{Trend, "", plain, []string{
		"trend|trended|trending|trends !of|analysis|over|line", "near|nearing|approached|approaching|approaches|bordering|borders|bordered|verging|verged|close|short|shy on|upon|to|of|the|conventional|statistical? statistical|conventional|the? significance|significant",
		"approached|approaches|approaching|neared|borderline|marginal _2 significance|significant", "nearly|almost|marginally|borderline|narrowly|just|practically|virtually|tantalisingly|tantalizingly|quasi _1 significant|significantly|significance",
		"nearly|almost|narrowly|all|just but|about? _1 %est|significant|significantly|equivalent|superior|noninferior|excludes|excluded", "tended|tends|tend to|toward|towards", "tendency|tendencies", "missed|misses|missing just|narrowly|barely|only|statistical? statistical? significance", "just|narrowly|barely|only|marginally missed|missing|failed|short|misses",
		"not quite _2 significant|significance|reach|reached", "would have|be|become been|reached|become? _1 significant|significance", "numerically|directionally|nominally _1 %up|%down|%good|%bad|superior|favourable|favorable|more|less|better|increased|reduced|improved", "suggestive of|trend|pattern", "%is borderline|marginal $", "shows|show|showed|holds|hold great|some|clear? promise", "on the edge|verge|brink|border|cusp|threshold of statistical? significance", "promising|encouraging|tantalising|tantalizing",
		"in|toward|towards the right|expected|desired|hoped direction", "fell|falls just? short of _2 significance", "just short|shy of", "lean|leans|leaned|leaning|inclined toward|towards|to|in", "a|strong|clear signal of|for|towards|toward|in",
		"with|had more|larger|bigger participants|patients|samples|data|sample|n _3 significant|significance",
	}},
	{Failure, "", plain, []string{
		"fail|failed|fails|failing|failure to _1 show|find|demonstrate|reach|detect|establish|confirm|prove|meet|improve|reduce|work|achieve|produce|deliver|help|differ|outperform|beat|lower|raise|increase|shorten|prevent|provide|support|yield|replicate",
		"unable to _1 find|detect|see|identify", "%grp failed|fails $", "%study|treatment|hypothesis|claim|product|intervention|programme|program|%hyp failed|fails|disappointed $|and|because|in|on|again|completely|utterly?", "%study|treatment|hypothesis|intervention %is|has|have been? _1 a|an? negative|unsuccessful|failure|disappointment|flop|disappointing|fruitless|failed",
		"negative|null|failed|unsuccessful|disappointing %study|result|outcome", "missed|misses|miss the|its|their primary|main|key? endpoint|endpoints|objective|objectives|goal", "was|is|were|proved a failure|disappointment|flop", "treatment|intervention failure", "disappointing|disappointingly",
	}},
	{Count, "", plain, []string{
		"#|most|majority|all|none|half|few|several|many|both %study _3 failed|negative|positive|significant|successful|unsuccessful|disappointing|favourable|favorable", "#|most|majority|all|none|half|few|several|many|both of the|these|our? #? %study _3 failed|negative|positive|significant|successful|unsuccessful|disappointing|favourable|favorable",
		"#|most|majority|all|none|half|few|several|many|only|both of|the|out|one? of|one? the|these|our? #? %study _3 found|find|finds|show|shows|showed|saw|reached|reach|detected|favoured|favour|reported|agree|agreed|failed|supported|support",
		"significant|negative|positive|successful in|for #|most|all|none|half of|out? of? the? #? %study?",
	}},
	{Average, "", plain, []string{"on|in average", "overall", "average|mean|typical|pooled|combined %eff|benefit", "in|across all|every|each the|of|#? the? #? %study", "across|throughout the? #? %study", "typically", "on the whole"}},
	{Generality, "", plain, []string{
		"always|invariably|universally|everywhere|everyone|everybody|anyone|anybody", "never !prove|proves|show|establish|demonstrate|tell|replace|mean|been|be|before|shown|established|planned|tested|judged|seen|having|assume|again|measured|intended|opened|unmasked", "for every !#|participant|sample|measurement|hundred|thousand|unit|pair", "without exception|exceptions", "no %out|%person|%thing will|can|ever|shall", "in every|any|all way|case|cases|instance|instances|setting|settings|respect|circumstances",
		"all|every|each|any _1 %person|%thing is|are|will|can|would|lie|lies|benefit|benefits|respond|responds|pass|passes|meet|meets|stay|stays|get|gets|improve|improves|heal|heals|should", "every|each _1 %person|%thing|%out is|are|will|benefits|responds|passes|meets|lies|stays|improves|heals", "all|every|each %out|parts|units is|are|lie|meet|pass|stay",
		"for|in|to|on|helps|suits|benefits|reaches all|every|any|each _1 %person|%thing|ages|sites", "applies|apply|holds|hold|generalises|generalizes|generalise|generalize|valid|transfers to|in|everywhere|for|universally|true|generally? all|every|any|other|everywhere|beyond|always|elsewhere", "once and for all", "for good $", "under|whatever all|any|the conditions|circumstances",
	}},
	{Causation, "", plain, []string{
		"cause|causes|caused|causing !of|for", "due to !chance|the|follow|lack|missing|technical|be|start|arrive|illness|holidays", "due to the !lack|missing|absence|small|low|holiday|holidays|dropout|loss|delay|weather|number", "due to the? %grp", "owing|thanks|attributable|ascribed|attributed|ascribable to", "because of the|our|this? %grp|treatment|intervention|training|programme|drug|product|device", "consequence of|from", "as a result of", "leads|led|leading to", "results|resulted|resulting in", "responsible for", "brings|brought|bringing about|on", "causal|causally|causation|causative", "provoke|provokes|provoked|triggers|triggered|induces|induced",
	}},
}
