package wording

import "steelyard/protocol/card"

// Code is the code under which a class of phrases is reported.
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
	case Superiority:
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
	}
	panic("wording: unknown class")
}

// SupportedBy lists the claims of the language of which one, established,
// supports a phrase of the class. None: no verdict does.
func (c Class) SupportedBy() []string {
	switch c {
	case Difference:
		return []string{"differs", "superior", "minimum-effect", "above", "below"}
	case Superiority:
		return []string{"superior", "minimum-effect", "above", "below"}
	case Relevance:
		return []string{"minimum-effect"}
	case Equivalence:
		return []string{"equivalent"}
	case Noninferiority:
		return []string{"noninferior", "equivalent", "superior", "minimum-effect"}
	case NoEffect, NotSignificant, Proof, Trend, Causation, Safety, Generality, Misread:
		return nil
	}
	panic("wording: unknown class")
}

const (
	statement = "ASA statement on p-values (Wasserstein and Lazar 2016), from memory"
	absence   = "Altman and Bland 1995, Absence of evidence is not evidence of absence, from memory"
	practice  = "common practice, no source"
)

// Cards explains the classes of phrases, in the order of Classes.
var Cards = []card.Card{
	{Kind: card.Diagnostic, Word: "W101", Title: "no effect", Source: absence,
		Meaning: "The conclusion says that there is no effect or no difference. An interval always leaves small effects open; an equivalence that was established says how small.",
		Repair:  "Say which effects remain compatible with the data, or claim equivalence within the stated region where it was established."},
	{Kind: card.Diagnostic, Word: "W102", Title: "not significant", Source: absence,
		Meaning: "The conclusion rests on the absence of significance or of evidence. That is no finding about the effect.",
		Repair:  "Give the estimate and the interval, and say what they leave open."},
	{Kind: card.Diagnostic, Word: "W103", Title: "proof", Source: statement,
		Meaning: "The conclusion speaks of proof or certainty. A test bounds how often such a claim is wrong; it never excludes that this one is.",
		Repair:  "Say that the claim is established at its level."},
	{Kind: card.Diagnostic, Word: "W104", Title: "an effect is claimed", Source: practice,
		Meaning: "The conclusion states an effect or a difference.",
		Formula: "Supported by an established claim that excludes the null: differs, superior, minimum-effect, above, below.",
		Repair:  "Where no such claim is established, say that the direction is open."},
	{Kind: card.Diagnostic, Word: "W105", Title: "better", Source: practice,
		Meaning: "The conclusion calls one thing better than another.",
		Formula: "Supported by an established claim with a direction: superior, minimum-effect, above, below.",
		Repair:  "Where none is established, say which differences remain compatible."},
	{Kind: card.Diagnostic, Word: "W106", Title: "large enough to matter", Source: practice,
		Meaning: "The conclusion calls an effect relevant, large or meaningful. An effect that excludes the null may still be too small to matter.",
		Formula: "Supported by an established minimum-effect.",
		Repair:  "Claim minimum-effect in the plan, or say that the effect may be smaller than the smallest that matters."},
	{Kind: card.Diagnostic, Word: "W107", Title: "the same", Source: absence,
		Meaning: "The conclusion calls things equivalent, as good as each other or different by nothing that matters.",
		Formula: "Supported by an established equivalent, within its region.",
		Repair:  "Where it is not established, say so; a difference that was not found is not equivalence."},
	{Kind: card.Diagnostic, Word: "W108", Title: "not worse", Source: "ICH E9 (1998), from memory",
		Meaning: "The conclusion calls one thing no worse than another.",
		Formula: "Supported by an established noninferior, equivalent, superior or minimum-effect.",
		Repair:  "Name the margin, or say that a loss beyond it remains possible."},
	{Kind: card.Diagnostic, Word: "W109", Title: "trend", Source: statement,
		Meaning: "The conclusion speaks of a trend, or of significance nearly reached. A claim is established or it is open; p just above its level has no drift.",
		Repair:  "Say that the claim is open and give the interval."},
	{Kind: card.Diagnostic, Word: "W110", Title: "cause", Source: practice,
		Meaning: "The conclusion names a cause. Whether a difference has the cause named depends on how groups were formed, which no test sees.",
		Repair:  "Say how the groups were formed, or speak of an association."},
	{Kind: card.Diagnostic, Word: "W111", Title: "safe", Source: "Hanley and Lippman-Hand 1983, If nothing goes wrong, is everything all right?, from memory",
		Meaning: "The conclusion calls something safe or free of risk. Events that were not seen have a rate above 0 that the data still allow.",
		Repair:  "Give the upper limit of the rate of events."},
	{Kind: card.Diagnostic, Word: "W112", Title: "always", Source: practice,
		Meaning: "The conclusion speaks of all cases. The data speak of the average of those that were studied.",
		Repair:  "Name the population of the plan."},
	{Kind: card.Diagnostic, Word: "W113", Title: "probability of a hypothesis", Source: statement,
		Meaning: "The conclusion reads a p-value or an interval as the probability that a hypothesis is true, as the work of chance, or as the size of an effect.",
		Repair:  "State the p-value beside estimate and interval, or state a prior and what the results make of it."},
}
