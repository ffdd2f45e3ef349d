package wording

import "steelyard/protocol/card"

// Codes that belong to no class of phrase.
const (
	NotChecked        = "W100"
	OppositeDirection = "W114"
	OnlySuggested     = "W121"
	NoResults         = "W122"
	NotJudged         = "W123"
)

// Code is the code under which a class is reported when the analysis does not
// bear it out; "" for decisions, which claim nothing.
func (c Class) Code() string {
	switch c {
	case NoEffect:
		return "W101"
	case NotSignificant:
		return "W102"
	case Proof:
		return "W103"
	case Difference:
		return "W104"
	case Superiority, Harm, Change:
		return "W105"
	case Relevance:
		return "W106"
	case Equivalence:
		return "W107"
	case Noninferiority:
		return "W108"
	case Trend:
		return "W109"
	case Causation:
		return "W110"
	case Safety:
		return "W111"
	case Generality:
		return "W112"
	case Misread:
		return "W113"
	case TooSmall:
		return "W115"
	case Limit:
		return "W116"
	case Truth:
		return "W117"
	case Failure:
		return "W118"
	case Count:
		return "W119"
	case Average:
		return "W120"
	case Verdict:
		return "W124"
	case Decision:
		return ""
	}
	panic("wording: unknown class")
}

const (
	statement = "ASA statement on p-values (Wasserstein and Lazar 2016), from memory"
	absence   = "Altman and Bland 1995, Absence of evidence is not evidence of absence, from memory"
	practice  = "common practice, no source"
	e9        = "ICH E9 (1998), from memory"
)

// Cards explains the codes of the user's own conclusion. This is a table.
var Cards = []card.Card{
	{Kind: card.Diagnostic, Word: NotChecked, Title: "not checked", Source: practice,
		Meaning: "The conclusion does not read as English. The rules that find claims are those of English, so it is printed as it stands and nobody has compared it with the verdicts.",
		Repair:  "Have a second reader compare it with the verdicts, or write it in English."},
	{Kind: card.Diagnostic, Word: "W101", Title: "no effect", Source: absence,
		Meaning: "The conclusion says that there is no effect or no difference. An interval always leaves some effects possible; where equivalence is established its region says how small they are.",
		Formula: "Never supported, except the denial of one direction where the other is established.",
		Repair:  "Say which effects remain compatible with the data, or claim equivalence within the stated region where it is established."},
	{Kind: card.Diagnostic, Word: "W102", Title: "not significant", Source: absence,
		Meaning: "The conclusion rests on a lack of significance or of evidence. That is no finding about the effect.",
		Formula: "Let pass where the same sentence or the next says what remains possible.",
		Repair:  "Give the estimate and the interval, and say what they leave open."},
	{Kind: card.Diagnostic, Word: "W103", Title: "proof", Source: statement,
		Meaning: "The conclusion speaks of proof or certainty. A test bounds how often such a claim is wrong; it never excludes that this one is.",
		Repair:  "Say that the claim is established at its level."},
	{Kind: card.Diagnostic, Word: "W104", Title: "an effect is claimed", Source: practice,
		Meaning: "The conclusion states an effect or a difference.",
		Formula: "Supported where a decided claim or its reading excludes the null.",
		Repair:  "Where nothing does, say that it is open whether there is an effect."},
	{Kind: card.Diagnostic, Word: "W105", Title: "better or worse", Source: practice,
		Meaning: "The conclusion calls one thing better, worse, higher or lower than another.",
		Formula: "Supported where a decided claim or its reading puts the effect on that side of the null.",
		Repair:  "Where nothing does, say which differences remain compatible, or speak of the estimate."},
	{Kind: card.Diagnostic, Word: "W106", Title: "large enough to matter", Source: practice,
		Meaning: "The conclusion calls an effect relevant, large or meaningful. An effect that excludes the null may still be too small to matter.",
		Formula: "Supported by an established minimum-effect, or a reading beyond the region.",
		Repair:  "Claim minimum-effect in the plan, or say that the effect may be smaller than the smallest that matters."},
	{Kind: card.Diagnostic, Word: "W107", Title: "the same", Source: absence,
		Meaning: "The conclusion calls things equivalent, as good as each other or the same.",
		Formula: "Supported by an established equivalent, or a reading inside the region; identity only with the region named.",
		Repair:  "Where it is not established, say so; a difference that was not found is not equivalence."},
	{Kind: card.Diagnostic, Word: "W108", Title: "not worse", Source: e9,
		Meaning: "The conclusion calls one thing no worse than another.",
		Formula: "Supported by an established noninferior, equivalent, superior or minimum-effect.",
		Repair:  "Say that a loss beyond the margin remains possible."},
	{Kind: card.Diagnostic, Word: "W109", Title: "trend", Source: statement,
		Meaning: "The conclusion speaks of a trend, of significance nearly reached, or of a direction that only the estimate has. A claim is established or it is open; a p-value just above its level moves nowhere.",
		Repair:  "Say that the claim is open and give the interval."},
	{Kind: card.Diagnostic, Word: "W110", Title: "cause", Source: practice,
		Meaning: "The conclusion names a cause. Whether a difference has that cause depends on how the groups were formed, which no test sees.",
		Formula: "Let pass where the record gives numbers randomised or a design that says random.",
		Repair:  "Say how the groups were formed, or speak of what went together."},
	{Kind: card.Diagnostic, Word: "W111", Title: "safe", Source: "Hanley and Lippman-Hand 1983, If nothing goes wrong, is everything all right?, from memory",
		Meaning: "The conclusion calls something safe or free of risk. Events that were not seen have a rate above 0 that the data still allow.",
		Formula: "Supported by an established claim on an outcome that speaks of safety.",
		Repair:  "Give the upper limit of the rate of events."},
	{Kind: card.Diagnostic, Word: "W112", Title: "always", Source: practice,
		Meaning: "The conclusion speaks of every case. The results speak of the average of those that were studied.",
		Repair:  "Name the population of the plan."},
	{Kind: card.Diagnostic, Word: "W113", Title: "probability of a hypothesis", Source: statement,
		Meaning: "The conclusion reads a p-value or an interval as the probability that a hypothesis is true, as the work of chance, or as the size of an effect.",
		Formula: "Let pass where the record states prior beliefs.",
		Repair:  "State the p-value beside estimate and interval, or state a prior and what the results make of it."},
	{Kind: card.Diagnostic, Word: OppositeDirection, Title: "the opposite direction", Source: practice,
		Meaning: "The conclusion points one way, and the analysis establishes the other.",
		Repair:  "Check which group is named first, which direction is better, and the sentence."},
	{Kind: card.Diagnostic, Word: "W115", Title: "too small to matter", Source: absence,
		Meaning: "The conclusion calls an effect negligible, irrelevant or too small to matter.",
		Formula: "Supported by an established equivalent or benefit-too-small, or a reading inside the region.",
		Repair:  "Say which effects that matter are not excluded."},
	{Kind: card.Diagnostic, Word: "W116", Title: "a side of the limit", Source: practice,
		Meaning: "The conclusion says that a value lies above or below a limit, or that a requirement is met or missed.",
		Formula: "Supported by a decided below or above. Said of the sample it passes.",
		Repair:  "Say that the side is open, or speak of the observed value."},
	{Kind: card.Diagnostic, Word: "W117", Title: "truth of a hypothesis", Source: statement,
		Meaning: "The conclusion accepts a null hypothesis, or calls a hypothesis true, false or refuted. A test says how the data stand to it, and no more.",
		Repair:  "Say that the claim is established, contradicted or open."},
	{Kind: card.Diagnostic, Word: "W118", Title: "failure", Source: practice,
		Meaning: "The conclusion says that a study, or an attempt to show something, failed or was negative. A study that leaves a question open has not answered it with no.",
		Repair:  "Say that the question is open, or that the data show the opposite, as the verdict is."},
	{Kind: card.Diagnostic, Word: "W119", Title: "studies counted", Source: "Hedges and Olkin 1980, Vote-counting methods in research synthesis, from memory",
		Meaning: "The conclusion counts studies for and against. Each may be open for lack of data only, and their count says little of the effect.",
		Repair:  "Pool the estimates, or combine the p-values as planned."},
	{Kind: card.Diagnostic, Word: "W120", Title: "an average from combined p-values", Source: practice,
		Meaning: "The conclusion speaks of an average or of all studies. Combined p-values establish an effect in at least one study and nothing of the rest.",
		Repair:  "Say “in at least one study”."},
	{Kind: card.Diagnostic, Word: OnlySuggested, Title: "exploratory, said as a fact", Source: e9,
		Meaning: "The conclusion states what rests on an exploratory analysis alone. Such an analysis suggests and never establishes.",
		Repair:  "Say that it suggests, and plan a test."},
	{Kind: card.Diagnostic, Word: NoResults, Title: "no results to be read yet", Source: practice,
		Meaning: "The conclusion says how a comparison came out whose results have not arrived or are masked.",
		Repair:  "Wait, or say what is expected as an expectation."},
	{Kind: card.Diagnostic, Word: NotJudged, Title: "nothing was claimed in the plan", Source: practice,
		Meaning: "The conclusion makes a claim on an outcome that is only described, or on which no hypothesis was planned.",
		Repair:  "Give the estimate and its interval without a claim, or plan a hypothesis for the next study."},
	{Kind: card.Diagnostic, Word: "W124", Title: "a verdict misreported", Source: practice,
		Meaning: "The conclusion says that a hypothesis is established or an endpoint met, and the computed verdict is another.",
		Repair:  "Give the verdict as computed."},
}
