package render

import (
	"steelyard/compute/result"
	"steelyard/render/number"
)

// claim says what is claimed, to stand after "that".
func (v voice) claim() string {
	if v.grouped() {
		return v.groupClaim()
	}
	return v.sampleClaim()
}

// the is the effect of the outcome, to stand as a subject.
func (v voice) the() string {
	if v.grouped() {
		return "the " + v.effect() + " in " + v.label()
	}
	return "the " + v.effect() + " of " + v.label()
}

// question asks what the claim decides, to stand after "whether". Claims that
// deny something are asked without the denial.
func (v voice) question() string {
	who := v.the()
	than, on := v.null(), ""
	if v.grouped() {
		who, than, on = v.a(), v.b(), " in "+v.label()
	}
	named := func(text, what string, p result.Opt) string {
		if !p.OK || v.brief {
			return text
		}
		return text + " (" + what + " " + v.f.PointUnit(p.V) + ")"
	}
	switch v.h.Claim {
	case "noninferior":
		return named(who+" is worse than "+than+on+" by the margin or more", "margin", v.harm())
	case "benefit-too-small":
		if v.grouped() {
			return named("a benefit of "+who+" over "+than+on+" is large enough to matter", "from", v.benefit())
		}
		return named("a benefit in "+v.label()+" over "+than+" is large enough to matter", "from", v.benefit())
	}
	return v.claim()
}

// groupClaim words a claim between two named groups.
func (v voice) groupClaim() string {
	a, b, on := v.a(), v.b(), v.label()
	switch v.h.Claim {
	case "differs":
		return a + " differs from " + b + " in " + on
	case "superior":
		return v.sided(a+" is better than "+b+" in "+on, v.o.Null, v.upward())
	case "minimum-effect":
		return v.sided(a+" is better than "+b+" in "+on+" by more than the smallest effect that matters", v.benefit(), v.upward())
	case "noninferior":
		return v.sided(a+" is not worse than "+b+" in "+on+" by the margin or more", v.harm(), v.upward())
	case "equivalent":
		s := a + " and " + b + " differ in " + on + " by less than matters"
		if r := v.region(); r != "" && !v.brief {
			s += " (" + v.t.short + " strictly inside " + r + ")"
		}
		return s
	case "benefit-too-small":
		return v.sided("any benefit of "+a+" over "+b+" in "+on+" is smaller than matters", v.benefit(), v.upward())
	}
	return v.sampleClaim()
}

// sampleClaim words a claim about one sample or an effect given as a number.
func (v voice) sampleClaim() string {
	the := v.the()
	switch v.h.Claim {
	case "differs":
		return the + " differs from " + v.null()
	case "superior":
		return v.sided(the+" is better than "+v.null(), v.o.Null, v.upward())
	case "minimum-effect":
		return v.sided(the+" is better than "+v.null()+" by more than the smallest effect that matters", v.benefit(), v.upward())
	case "noninferior":
		return v.sided(the+" is not worse than "+v.null()+" by the margin or more", v.harm(), v.upward())
	case "equivalent":
		s := the + " differs from " + v.null() + " by less than matters"
		if r := v.region(); r != "" && !v.brief {
			s += " (strictly inside " + r + ")"
		}
		return s
	case "benefit-too-small":
		return v.sided("any benefit in "+v.label()+" over "+v.null()+" is smaller than matters", v.benefit(), v.upward())
	case "below", "above":
		return the + " is " + v.h.Claim + " the limit" + v.limit()
	}
	return the + " is described"
}

// limit is " of 0.05", with its unit.
func (v voice) limit() string {
	if !v.h.Limit.OK {
		return ""
	}
	return " of " + v.f.PointUnit(v.h.Limit.V)
}

// opposite says what the data show when a claim is contradicted.
func (v voice) opposite(j *result.Judged) string {
	pair, one := v.a()+" is %s than "+v.b()+" in "+v.label(), v.the()+" is %s than "+v.null()
	than := func(word string) string {
		if v.grouped() {
			return sprintf(pair, word)
		}
		return sprintf(one, word)
	}
	up := v.upward()
	switch v.h.Claim {
	case "superior":
		return v.sided(than("worse"), v.o.Null, !up)
	case "minimum-effect":
		return v.sided("any benefit in "+v.label()+" is smaller than matters", v.benefit(), !up)
	case "noninferior":
		return v.sided(than("worse")+" by more than the margin", v.harm(), !up)
	case "equivalent":
		return v.outside(j)
	case "benefit-too-small":
		return v.sided(than("better")+" by more than the smallest effect that matters", v.benefit(), !up)
	case "below":
		return v.sided(v.the()+" is above the limit", v.h.Limit, true)
	case "above":
		return v.sided(v.the()+" is below the limit", v.h.Limit, false)
	}
	return v.the() + " lies on the other side"
}

// outside says on which side of the region the interval lies.
func (v voice) outside(j *result.Judged) string {
	what := v.the() + " lies wholly outside the region too small to matter"
	switch {
	case j.Reading.OK && j.Reading.HasRegion && j.Reading.Above == 3:
		return v.sided(what, v.h.MarginHigh, true)
	case j.Reading.OK && j.Reading.HasRegion && j.Reading.Below == 3:
		return v.sided(what, v.h.MarginLow, false)
	case j.Low.OK && v.h.MarginHigh.OK && j.Low.V >= v.h.MarginHigh.V:
		return v.sided(what, v.h.MarginHigh, true)
	case j.High.OK && v.h.MarginLow.OK && j.High.V <= v.h.MarginLow.V:
		return v.sided(what, v.h.MarginLow, false)
	}
	return what
}

// claimName is the claim as a heading.
func claimName(claim string) string {
	switch claim {
	case "differs":
		return "differs"
	case "superior":
		return "superior"
	case "minimum-effect":
		return "better by more than the smallest effect that matters"
	case "noninferior":
		return "noninferior"
	case "equivalent":
		return "equivalent"
	case "benefit-too-small":
		return "any benefit smaller than matters"
	case "below":
		return "below the limit"
	case "above":
		return "above the limit"
	case "describe":
		return "described"
	}
	return claim
}

// atError says at which error the claim is tested.
func (v voice) atError() string {
	switch {
	case v.h.Claim == "equivalent":
		return "at one-sided error " + number.Error(v.h.Alpha) + " for each of the two tests"
	case v.h.TwoSided:
		return "at two-sided error " + number.Error(v.h.Alpha)
	}
	return "at one-sided error " + number.Error(v.h.Alpha)
}
