package wording

// patterns are the phrases, class by class; see parse for how they are
// written. This file is a table, long because English is. Words that also have
// an innocent use ("as well as", "the same lots") stand only with the
// neighbours that make them a claim.
var patterns = compile(map[Class][]string{
	NoEffect: {
		"no|zero|without|little any? meaningful|real|measurable|detectable|discernible|visible|apparent|noticeable|overall|beneficial|additional|clinical|practical|whatsoever? effect|effects|difference|differences|benefit|benefits|impact|influence|advantage|improvement|association|relationship|correlation|disadvantage",
		"no change in",
		"not|n't have|has|had any|an? effect|effects|impact|influence|benefit|bearing",
		"does|did|do|has not work|worked|help|helped|matter",
		"doesn't|didn't|don't work|help|matter|differ|affect|influence",
		"does|did|do|will not differ|affect|influence|alter|matter",
		"has|have not affected|influenced|altered",
		"makes|made|make|making no|little difference|odds",
		"ineffective|ineffectual|useless|futile",
		"is|are|was|were not effective|efficacious|useful|beneficial",
		"is|are|was|were not different|any? different",
		"isn't|aren't|wasn't|weren't effective|different|efficacious|useful|beneficial",
		"unaffected by?",
		"does|did|achieves|achieved nothing",
		"null hypothesis? is|was true|accepted|confirmed",
		"accept|accepted|accepts|accepting the null hypothesis?",
		"fails|failed to work|help",
		"absence|lack of an|any|a|the? effect|difference|benefit|association",
	},
	NotSignificant: {
		"no|not|without|n't _1 statistically? significant|significantly _2 difference|differences|effect|effects|benefit|change|association|improvement|different|better|worse|higher|lower|increase|reduction|correlation|greater|fewer|more|less|shorter|longer",
		"no|not|non|without|n't statistically? significant|significance",
		"not|n't reach|attain|achieve statistical? significance",
		"insignificant|nonsignificant",
		"no|little|without evidence|indication|sign|signs|hint of|for|that _4 effect|difference|differences|benefit|association|harm|improvement|differ|differs|impact|advantage|change|effects",
		"failed|fails|fail|failing|unable to show|find|detect|demonstrate|reach|identify a|an|any|the? clear|significant|real|statistical? effect|difference|benefit|significance|association|advantage|improvement",
		"not|n't|never show|find|detect|see|observe|demonstrate|found|shown|seen|detected a|an|any|the? clear|significant|real|meaningful? effect|difference|benefit|association|advantage|differences|effects|improvement",
		"no clear|real|overall? effect|difference|differences|benefit|association|change was|were|could found|detected|seen|observed|shown|demonstrated|be",
		"effect|difference|differences|benefit|association|improvement|advantage was|were|is|has|could not been|be? shown|found|detected|seen|observed|demonstrated|established|proven",
	},
	Proof: {
		"prove|proves|proved|proven|proving", "proof of|that?", "conclusive|conclusively|definitive|definitively|irrefutable|irrefutably|incontrovertible|unequivocal|unequivocally|indisputable|undeniable|undeniably",
		"beyond any|a|all? reasonable? doubt|dispute|question", "no|without|leaves|leave any|a|no|little? doubt|question that|about?",
		"certainly|undoubtedly|unquestionably|indisputably", "without fail", "certainty",
		"confirm|confirms|confirmed|confirming that?", "establishes|established that", "guarantee|guarantees|guaranteed",
		"settles|settled|settle the|this question|matter|debate", "clearly|plainly|obviously show|shows|showed|demonstrate|demonstrates|demonstrated that?",
		"we now know that?", "it is now? a? fact|known|clear|evident|obvious that?", "clear|overwhelming|compelling evidence that|for|of",
		"100|100% sure|certain",
	},
	Difference: {
		"differ|differs|differed|differing", "is|are|was|were clearly|markedly|statistically|quite|really? different",
		"significantly _1 different|higher|lower|greater|fewer|more|less|reduced|increased|improved|shorter|longer|faster|slower|stronger|weaker|better|worse|heavier|lighter|reduces|increases|improves",
		"significant _1 difference|differences|effect|effects|increase|decrease|reduction|improvement|benefit|change|association|correlation", "statistically significant", "reached|reaches|attained statistical? significance",
		"there is|was|are|were a|an clear|real|marked|genuine|true? difference|effect|benefit|association|increase|decrease|reduction|improvement",
		"a|the|real|true|clear|marked|an effect|difference|benefit|association|improvement was|is shown|found|seen|observed|demonstrated|detected|real|confirmed|established",
		"it|treatment|method|drug|gel|product|die|approach|programme|program|process|course|intervention|vaccine|coating|training|diet works|worked",
		"is|are|was|were|proved|be highly|very|clearly|truly? effective|efficacious|beneficial",
		"reduces|reduced|lowers|lowered|increases|increased|improves|improved|shortens|shortened|prolongs|prolonged|strengthens|strengthened|weakens|weakened|worsens|worsened|relieves|relieved|eases|eased|prevents|prevented|halves|halved|doubles|doubled|cures|cured the|all|its|their|peel? pain|symptoms|mortality|yield|yields|strength|wear|scrap|defects|risk|risks|recovery|healing|scores|infections|relapse|relapses|survival|errors|output|quality|growth|throughput|sleep|stays|falls|costs|returns|injuries|injury|deaths|waste|accuracy|attendance",
		"does|did|do|can|will|doesn't|didn't _5 reduce|lower|increase|improve|shorten|prolong|strengthen|weaken|worsen|relieve|ease|prevent|halve|double|raise the|all|its|their? pain|symptoms|mortality|yield|yields|strength|wear|scrap|defects|risk|risks|recovery|healing|scores|infections|relapse|relapses|survival|errors|output|quality|growth|sleep|stays|falls|costs|returns|injuries|deaths|waste|accuracy|attendance",
		"prevents|prevented|relieves|relieved the|all",
		"has|have|had|having a|an clear|marked|real|strong|positive|negative|beneficial|favourable|considerable? effect|impact|influence on|upon?",
		"is|are|was|were associated|correlated with",
		"shows|showed|show|demonstrates|demonstrated|demonstrate|reveals|revealed|found|find a|an clear|real|marked|positive|negative|significant? difference|effect|benefit|association|improvement|reduction|increase",
	},
	Superiority: {
		"better|stronger|safer|faster|preferable than|to?", "superior|superiority to|over?", "outperform~", "beats|beat|surpass~|excels the?", "outdo|outdoes|outdid",
		"more|less effective|efficacious|reliable|accurate|precise|powerful|durable|potent|harmful|painful than?",
		"higher|lower|greater|longer|shorter|fewer|larger|smaller|quicker|worse|weaker|slower|cheaper|lighter|heavier than", "inferior|inferiority to?", "advantage over", "improvement on|over",
		"the best|preferred treatment|choice|option|method|product|supplier|adhesive|machine|material|process", "should be preferred|favoured|favored", "favours|favors|favoured|favored the", "the winner",
	},
	Relevance: {
		"clinically|practically|biologically|economically|technically relevant|meaningful|important|significant|worthwhile",
		"clinical|practical|biological|economic relevance|importance|significance|benefit",
		"large|substantial|considerable|dramatic|huge|major|important|meaningful|relevant|remarkable|impressive|striking|worthwhile|profound|sizeable effect|effects|benefit|benefits|improvement|reduction|increase|difference|differences|gain|gains|advantage|saving|savings",
		"substantially|dramatically|considerably|markedly|greatly|vastly|remarkably|strikingly reduced|reduces|increased|increases|improved|improves|lowered|lowers|better|higher|lower|longer|shorter|stronger|faster|fewer|raised|raises|worse",
		"large|big|great enough to matter", "is|was|are|were worthwhile|substantial|considerable|dramatic|huge", "matters to|for? patients|customers|users|practice|production?",
		"much|far better|stronger|faster|superior|safer than?",
	},
	Equivalence: {
		"equivalent|equivalence|bioequivalent|bioequivalence|interchangeable|interchangeably|exchangeable to|with?",
		"as good|strong|effective|safe|fast|accurate|reliable|precise|durable|efficacious|potent as", "equally good|strong|effective|safe|fast|accurate|well|reliable|precise|durable|efficacious|potent",
		"the same as", "exactly|practically|virtually|essentially|basically the? same|equal|identical", "the same effect|effects|result|results|strength|quality|performance|yield|outcome|outcomes|accuracy",
		"is|are|was|were identical|indistinguishable|alike", "identical to|with", "indistinguishable from", "is|are|was|were similar|comparable to|with?",
		"comparable|similar effect|effects|efficacy|effectiveness|performance|strength|outcomes|yield|accuracy|safety", "comparable|similar to",
		"on par with?", "on a par with?", "no different from|than", "may|can|could be substituted|exchanged|swapped for", "agree|agrees|agreed well|closely|perfectly", "every bit as", "works|work|performs|perform|performed|worked|does|do|did _1 as well as", "is|are|was|were _1 the same",
		"too small to matter|care|notice", "trivial|negligible|immaterial", "no|without relevant|meaningful|important|appreciable difference|differences|effect", "of no|little practical|clinical? importance|relevance|consequence",
	},
	Noninferiority: {
		"noninferior|noninferiority to?", "non|not inferior|inferiority to?", "no|not|never _1 worse|weaker|slower|poorer than?", "isn't|wasn't|aren't|weren't any? worse|inferior|weaker than?",
		"at least as|equally good|strong|effective|safe|fast|accurate|well|reliable|durable|precise as?", "not|no less effective|safe|reliable|accurate|strong|durable|precise than?",
		"no|without relevant|meaningful|important|appreciable|any? loss of|in efficacy|effectiveness|strength|quality|performance|accuracy",
	},
	Trend: {
		"trend|trended|trending|trends toward|towards|to|for|in", "a|clear|positive|negative|favourable|favorable|downward|upward trend",
		"approached|approaching|approaches|nearing|near|bordering|borders|verging|close|short on|to|of? statistical? significance|significant",
		"nearly|almost|marginally|borderline|barely|narrowly|just|weakly|virtually|quasi statistically? significant", "borderline|marginal|near|almost statistical? significance", "tended|tends|tendency|tendencies to|toward|towards",
		"missed|misses|missing just|narrowly|barely? statistical? significance", "just|narrowly|barely missed|misses|failed|fell short|to? of|reach? statistical? significance", "fell|fails|failed just|narrowly short|to of|reach? statistical? significance",
		"not quite statistically? significant", "would have been|reached|become statistically? significant|significance", "numerically|directionally better|higher|lower|greater|superior|favourable|favorable|fewer|more|less|longer|shorter", "promising|encouraging",
	},
	Causation: {
		"cause|causes|caused|causing", "effect|gain|improvement|difference|change|reduction|increase|decrease|rise|fall|drop is|was|are|were due|owing|attributable to", "attributed|attributable|ascribed to", "leads|led|lead|leading to", "resulted|resulting in", "responsible for",
		"brings|brought|bringing about", "causal|causally|causation", "triggers|triggered|induces|induced a|an|the", "makes|made patients|people|them|units|parts|pupils|students|samples better|stronger|healthier|faster|safer|weaker|worse", "thanks to",
	},
	Safety: {
		"safe|safely", "harmless|innocuous|nontoxic", "risk free", "no|zero|without any|added|additional|serious|increased|extra|safety|side? risk|risks|harm|harms|danger|hazard|hazards|toxicity|concern|concerns|effects for|to?", "well tolerated",
		"does|did|do|will|can no harm", "poses|pose|posed no", "free of|from side|adverse|any? risk|risks|harm|effects|danger", "cannot|not|never harm|hurt|injure|endanger",
	},
	Generality: {
		"always|invariably|universally", "holds|hold|held|applies|apply|works|work|valid|true|used|use|helps|help|generalises|generalizes|safe|effective _1 for|in|to|at|under|on|of all|every|any|everyone|everybody", "works|work|holds|hold|applies|apply everywhere|anywhere", "everyone|everybody|nobody benefits|improves|improved|benefited|recovers|recovered|gains", "without exception|exceptions", "in general",
	},
	Misread: {
		"probability|chance|likelihood|odds of|that _1 null|hypothesis|h0|alternative _3 true|false|real|correct|wrong|right", "probability|chance|likelihood|odds that _2 effect|difference|result|results|finding|findings|treatment|it|drug|gel _4 true|false|real|chance|correct|wrong|coincidence|random|luck|works|exists",
		"%~ _1 probability|chance|likelihood|certainty|confidence that", "%~ certain|sure|confident of|that?", "probability|chance|likelihood that _2 true|population|real|actual|effect|value|mean|parameter|difference _3 lies|lie|lying|is|falls|being",
		"due|down to pure|mere|random|simple? chance|luck|coincidence", "arose|arisen|occurred|happened|explained|explain by pure|mere? chance|luck|coincidence", "would replicate", "highly|very|extremely|strongly statistically? significant", "was|is|be just|only|mere|pure? luck|coincidence",
	},
})

// compile parses the patterns in the order of the classes.
func compile(table map[Class][]string) (out []pattern) {
	for _, c := range Classes {
		for _, text := range table[c] {
			out = append(out, parse(c, text))
		}
	}
	return out
}
