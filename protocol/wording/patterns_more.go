package wording

// This file goes on with the table of phrases.

var moreEntries = []entry{
	{Difference, "", 0, []string{
		"differ|differs|differed|differing !by", "differ|differs|differed _1 between|from|across|significantly|clearly", "%is _2 different", "significantly|statistically _1 different|differ|differs|differed", "significant _1 %eff|benefit|association|interaction", "statistically significant|significantly", "a|is|was|were|are|be significant",
		"there %is|%be a|an|some|clear|real|marked? %adj? %adj? %eff|benefit", "%eff _3 %is _1 %see|real|genuine|true|confirmed|established|significant", "a|an|the real|true|clear|genuine|definite|marked|positive|beneficial %eff|benefit", "found|saw|showed|shows|show|revealed differences|effects", "%estv|%seev a|an|the|clear|some %adj? %adj? difference|effect|association|relationship|change|impact|influence|correlation",
		"works|worked", "not only? work", "%be %trueadv? effective|efficacious|beneficial|helpful|useful", "highly|clearly|very|truly effective|efficacious", "affects|affected|influences|influenced|alters|altered|changes|changed the|%out|how", "affect|influence|alter the|%out", "%have|having|exerts a|an|some %adj? %adj? %eff|benefit", "proved|proves|prove %trueadv? effective|efficacious|useful|helpful|beneficial",
		"associated|correlated|correlates|linked with|to", "depends|depend on the", "respond|responds|responded to the|%grp", "matters|makes a? difference", "make|makes|made a|the %adj? difference", "%grp|treatment|it|exercise|training|treatments|intervention|programme|method work|works",
	}},
	{Superiority, Better, 0, []string{
		"%good than|to|for|with|after|on|at|in?", "%estv|for|of|with|prove the|a|its|their? superiority !margin|test|trial", "superiority _6 %is been? _1 %est", "superiority !of|margin|test|trial|is|was|has|have|remains|hypothesis|claim|question|cannot|can|were|over",
		"%goodv !is|was|are|were|has|had|share|rate|risk|desk|remains", "more effective|efficacious|reliable|accurate|precise|beneficial|useful|efficient|helpful|successful|durable|potent|powerful|successfully|effectively|reliably|accurately|efficiently", "advantage|advantages|improvement over|on|upon|compared", "best|optimal !estimate|guess|of|case|practice|available|fit|unbiased",
		"%have|having|brings|bring|brought|gives|give|gave|offers|offer|offered|yields|yielded|provides|provide|provided|shows|showed|show|delivers|confers|conferred|produces a|an|some|the|its|clear|real|additional|more? %adj? %adj? benefit|benefits|advantage|advantages|improvement|improvements|gain|gains|saving|savings|relief !too|smaller|that",
		"favours|favors|favoured|favored", "benefits|benefited|benefitted|profit|profits from|patients|users|most|more", "there %is|%be a|some|an %adj? benefit|gain|advantage|improvement|saving", "wins|won|prevails|prevailed", "should|to be? preferred|favoured|favored", "%is the? preferred|first|treatment of choice",
		"less harmful|painful|toxic|burdensome|error|prone|risky|faulty|pain|wear|waste|scrap", "finds|detects|catches|found|detected _1 more|additional", "benefit|gain|improvement|advantage %is|was _1 %see|real|confirmed|established",
		"a success|triumph|breakthrough", "step|leap|advance forward|ahead", "an advance|advancement", "harder wearing", "benefit|benefits|gain|gains|advantage|advantages outweigh|outweighs|outweighed", "relief", "%see|%estv|there|proof|evidence|of a|the|clear %adj? benefit|gain|improvement|advantage|saving of|from|with|in|over|for",
	}},
	{Harm, Worse, 0, []string{
		"%bad than|to|for|with|after|on|at|in?", "%badv !no|nobody|none", "harmful|detrimental|injurious|unsafe|dangerous|toxic|deleterious|hazardous", "less effective|efficacious|reliable|accurate|precise|beneficial|useful|efficient|helpful|durable|potent|well|successful|successfully|effectively|reliably|safe",
		"inferiority _6 %is been? _1 %est", "more harmful|painful|toxic|burdensome|risky|faulty|pain|wear|waste|harm", "%estv|there|%have|poses|carries|brings|raises a|an|some|the|more %adj? %adj? harm|risk|danger|disadvantage|deterioration|worsening", "does|did|do harm",
	}},
	{Change, Better, 0, []string{"in favour|favor of"}},
	{Change, Higher, 0, []string{
		"%up !limit|limits|bound|end|quartile|part|half|deck|floor|confidence|edge|level|levels|dose|price|prices|cost|costs", "%upv !to", "more often|frequent|frequently|%out|%person|%thing|likely", "more than !#|the|a|half|any|one|that", "more _1 %out", "%out more $", "rise|increase|rises of|in|by", "twice|double|triple as|the|that", "an|clear|marked|real|further|significant increase|rise", "gain|gains|gained # ", "lasts|last|lasted longer", "more !than|often|data|information|months|participants|studies|research|trials|results|work|patients|tests|measurements|is|are|needed|on|lots|evidence|people|than|certain|precise|time|precisely|sites|questions|years|weeks|days _1 with|under|in|after|on|at|for _1 %grp",
		"%out _2 come|came|comes later", "came|comes|come later",
	}},
	{Change, Lower, 0, []string{
		"%down !limit|limits|bound|end|quartile|part|half|deck|floor|confidence|edge|level|levels|dose|price|prices|cost|costs", "%downv !off|to|limit|limits|bound|end|quartile|part|half|confidence|edge|level|dose", "less often|frequent|frequently|likely|%out|and|than", "less _1 %out", "fewer _1 %out|%person|%thing?", "reduction|decrease|decline|fall|drop of|in|by", "a|clear|marked|real|further|significant reduction|decrease|fall|drop|decline", "half as|the|that", "rarer|seldom|less _1 with|under|in|after|on|at|for _1 %grp", "%out less $", "%out less with|under|in",
		"came|comes|come earlier|sooner", "cut the|%out|by",
	}},
	{Relevance, "", 0, []string{
		"%field relevant|meaningful|important|significant|worthwhile|useful|valuable|noticeable", "clinical|practical|biological|economic|agronomic|educational relevance|importance|significance", "%rel and|or? %rel? %adj? %eff|benefit|relief", "%relonly %out? reduction|increase|%eff|amount|way|extent", "%rel %adj? %eff|benefit", "%rel step|advance|leap|progress|success|breakthrough|superiority",
		"%much", "%is|be|are %much? considerable|substantial|dramatic|huge|large|important|relevant|meaningful|worthwhile|remarkable|impressive|striking|enormous|big|sizeable|decisive|major", "large|big|great|strong enough|relevant|meaningful to? matter|matters|care|notice|be|for", "matters|matter to|for|in|clinically|practically the|%person|practice|clinical|everyday|daily?",
		"much|far|vastly %good|%bad|%up|%down|more|less", "more|by than|an|a|much the? smallest|amount|degree _2 matters|matter|relevant|care", "game changer|changing", "milestone|breakthrough", "by a|an wide|large|big|huge|considerable|substantial|important|relevant|meaningful|wide amount|margin|degree|extent|gap", "exceeds|exceeded|exceed|above|beyond|over the smallest|minimum|minimal|minimally _3",
		"not|by no|any negligible|trivial|unimportant|irrelevant", "%eff that matters|matter", "%eff of|as the|a|large size|relevant|as _4 care|matter|matters|smallest", "worth the|its|having|while|paying|implementing|introducing", "%is|be %field? relevant|meaningful|important|worthwhile", "of %adj? practical|clinical|great|considerable|real|major importance|relevance|value|significance|interest", "strong|powerful|large effect|effects|influence|impact", "worthwhile",
	}},
	{Limit, Higher, 0, []string{
		"above|over|beyond|exceeds|exceed|exceeded|exceeding|surpasses|surpassed the|a|our|its|that? _1 %limit|requirement|required|acceptable|permitted|allowed|maximum", "above|over|exceeds|exceed|exceeded|exceeding the|a? #", "more|greater|higher|larger|longer than the|a? required|acceptable|permitted|allowed|specified|%limit", "more|greater|higher|larger|longer than #", "at least # !study|studies|of|trial|trials|site|case", "%limit|value %is|was _1 exceeded|surpassed", "reach|reaches|reached|attains|attained # ", "not less|fewer|below|under than? #", "lasts|lives|survives _1 than|over|more|beyond the? required|#",
		"on the higher|upper|far|wrong side",
	}},
	{Limit, Lower, 0, []string{
		"below|under|beneath the|a|our|its|that|this|any? _1 %limit|requirement|required|acceptable|permitted|allowed|maximum|minimum", "below|under the|a? #", "less|fewer|lower|smaller|shorter than the|a? required|acceptable|permitted|allowed|specified|%limit", "less|fewer|lower|smaller|shorter than #", "at|up most|to #", "not|never more|greater|above|over than? the? #|%limit", "fall|falls|fell|falling short of the|its? #|%limit|required", "short of the|its? #|%limit|required|requirement", "not reach|attain|achieve|reached|meet|met the? #|%limit",
		"no|not more|greater|higher|longer|larger than #|the # %limit?",
	}},
	{Limit, Better, 0, []string{
		"meets|meet|met|satisfies|satisfy|satisfied|fulfils|fulfills|fulfil|fulfill|fulfilled|passes|passed|reaches|reached|keeps|kept|respects|attains|attained|achieves|achieved|complies|comply|complied|conforms|conform|conformed with|to|the|all|our|its|within? the|all|our|its|this|these? _2 %limit", "%limit _3 %is|been _2 met|satisfied|fulfilled|reached|achieved|kept|respected|attained|passed", "within the|its|all|our? _1 limit|limits|specification|specifications|spec|tolerance|tolerances|requirement|requirements", "%is|be|fully capable|compliant|conforming|acceptable", "in spec|specification|compliance", "conforms|conform|conformed|complies|comply $", "%thing|lot|product|device|batch|process passes|passed $",
		"inside the|its|all? _1 limit|limits|tolerance|specification",
	}},
	{Limit, Worse, 0, []string{
		"misses|missed|violates|violated|breaches|breached the|its|our|all _1 %limit", "%limit _3 %is _2 missed|violated|breached", "out of|outside spec|the|specification|tolerance limit|limits|tolerance|specification?", "noncompliant|nonconforming",
	}},
	{Safety, "", 0, []string{
		"safe !side|distance|to|custody|place", "safely", "safe for|to|in|and|at use|patients|everyone|children|work|wear|eat|drink|take|give", "harmless|harmlessly|innocuous|nontoxic|benign", "no|zero|without _1 %harmnoun", "no|zero|without any? additional|serious|increased|extra|safety|adverse|side|undue|new? risk|risks|harm|harms|danger|hazard|hazards|toxicity|concern|concerns|events|effects|issues|issue|reactions|reaction|complications|problem|problems",
		"well tolerated|tolerable", "not harm|hurt|injure|endanger", "free of|from _1 side|adverse|risk|risks|harm|effects|danger|complications|hazards", "safety _5 %is been? _1 %est", "%estv|for|of the|its|their? safety", "risk|hazard free", "can be used safely|without", "acceptable|good|excellent|favourable|favorable|reassuring safety|tolerability", "poses|pose|posed|carries no|little|not", "%is no problem|danger|hazard|threat|concern", "no safety",
	}},
	{Proof, "", plain, []string{
		"prove|proves|proving|proven !harmful", "proved !difficult|impossible|to|necessary|hard|a|an|more|less|superior|better|effective|ineffective|safe|useful|useless|equivalent|worse|stronger|no|not|as", "proof that|of|for|positive", "have|has|had|is|gives|provides|offers proof", "conclusive|conclusively|definitive|definitively|irrefutable|irrefutably|incontrovertible|incontrovertibly|unequivocal|unequivocally|indisputable|indisputably|undeniable|undeniably|unquestionable|unquestionably|undoubtedly|incontestable|incontestably|unmistakable|unmistakably|indubitably|categorically",
		"no|little room for doubt|discussion|dispute", "beyond any|all|a|reasonable? _1 doubt|dispute|question|controversy", "no|without|leaves|little|any|leave a|any|no|room? _2 doubt|doubts that|about|of|whatsoever|left|remains?", "out of the? question that?", "certainly|doubtless|evidently", "%is now|quite|absolutely? certain $", "a|an certainty", "we|i am|are|is|can|now _2 certain|sure|convinced", "it is|was _1 certain|sure|undisputed|indisputable", "with absolute? certainty", "guarantee|guarantees|guaranteed|guaranteeing",
		"settles|settled the|this _1 question|matter|debate|issue", "clearly|plainly|obviously|firmly show|shows|showed|demonstrate|demonstrates|demonstrated|establish|establishes|proves", "we now know", "it is now? a|an? established? fact|obvious|undeniable|proven", "overwhelming|compelling|irresistible|watertight evidence|proof|case", "100 % sure|certain|safe|effective|proof", "for sure|certain", "once and for all", "final|ultimate proof|word|answer", "incontrovertibly",
	}},
	{Truth, "", 0, []string{
		"accept|accepts|accepted|accepting the|our|this? null hypothesis?", "null hypothesis? %is|can|may|must _2 accepted|true|correct|right|confirmed|retained|proven|valid", "accept|accepts|accepted|accepting _2 hypothesis|h0|h1", "%hyp turned|turns|proved|proves out? to? be? true|false|right|wrong|correct", "reject|rejects|rejected|rejecting %hyp", "%hyp that _8 %is false|true|wrong|untrue|correct|refuted|falsified|disproved|disproven|rejected", "%hyp %is|has|been been? _2 true|false|wrong|correct|right|accepted|refuted|disproved|disproven|falsified|untrue|rejected|valid|invalid|disconfirmed",
		"disproves|disprove|disproved|refutes|refute|refuted|falsifies|falsify|falsified the|our|this? _1 %hyp", "reject|rejects|rejected|rejecting the|our? alternative|research? %hyp|alternative", "truth of|is the|that|our? %hyp?", "%hyp holds|hold true|good|up?", "there %is|%be truth in", "theory|assumption %is _2 right|true|correct|wrong|false|confirmed",
	}},
	{Misread, "", plain, []string{
		"probability|chance|likelihood|odds|risk that _7 better|superior|effective|true|false|works|nothing|null|hypothesis|real|wrong|correct|chance|right|coincidence|exists", "probability|chance|likelihood|odds of _3 hypothesis|null|being|claim|effect|true _3 true|false|real|due?", "# % confident|confidence that", "%hyp _8 probability|likelihood of|is", "with|at # % probability|certainty|likelihood", "# %|per cent? probability|chance|likelihood|sure|certain|certainty",
		"due|down|attributable|owing to pure|mere|random|sheer|simple? chance|luck|coincidence", "by|pure|mere|not|just chance|luck|coincidence|accident alone?", "chance|random finding|result|alone|fluctuation|effect", "likely|unlikely|improbable|probably|probable to|that|a|it|due _4 true|chance|real|false|coincidence|works|hypothesis", "more likely|probable than|that not|true|it", "p|value _3 probability|chance|proves|measures _2 that|of|hypothesis|size|strength",
		"would|will replicate|reproduce", "highly|very|extremely|strongly|hugely significant", "probability|chance that|of the? true|population|real|actual? value|mean|effect|share|difference|parameter|%out", "most likely|probably true|value|lies", "one|# in a? hundred|thousand|twenty|# chance|probability", "a|only|just # % risk that|of",
	}},
	{Verdict, "", 0, []string{
		"%hyp|hypotheses %is|has|have|been|was been? _1 established|shown|confirmed|supported|met|demonstrated|verified|upheld|substantiated|corroborated|vindicated|right", "primary|secondary|main|coprimary|study|key endpoint|endpoints|objective|objectives|outcome|outcomes|aim|aims|goal _1 %is|been|has|have|were been? _1 met|reached|achieved|attained|fulfilled|satisfied|confirmed",
		"%estv|confirming|supporting|verify|verified|verifies our|the|this|all|their _1 %hyp|hypotheses", "%study reached|met|achieved|attained its|the|all _1 goal|goals|objective|objectives|endpoint|endpoints|aim|aims|target|targets", "%study|it %is|was a? success|successful|positive", "%study succeeded|succeeds", "success criteria|criterion %is|were|was _1 met|fulfilled", "%estv|confirm|confirms|supports|support|meets|met|establish %hyp",
	}},
	{Difference, "", 0, []string{"%have|exerts a|an !%rel _1 effect|impact|influence"}},
	{Decision, "", plain, []string{
		"we|i will|shall|recommend|continue|adopt|keep|stop|release|withdraw|propose|advise|plan|introduce|switch|stay", "%is released|rejected|withdrawn|recommended|adopted|approved", "further|another|larger trial|trials|study|studies|research|series",
	}},
}
