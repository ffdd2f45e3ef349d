package effect

import (
	"math"
	"slices"

	"steelyard/compute/numeric"
	"steelyard/compute/result"
	"steelyard/protocol/record"
)

// The formats of this file.
const (
	combination  = "%s is a combination of the columns before it, so its effect cannot be told from theirs"
	linearNeeds  = "method %q needs value and group of every row"
	fullLeverage = "one row alone decides %s, so its error cannot be seen"
)

func meanDifferenceLinear(in Input) (*Inference, *Problem) {
	return linear("linear", record.Identity, in)
}
func meanDifferenceHC3(in Input) (*Inference, *Problem) {
	return linear("linear-hc3", record.Identity, in)
}
func geometricLinear(in Input) (*Inference, *Problem) { return linear("linear", record.Log, in) }
func geometricHC3(in Input) (*Inference, *Problem)    { return linear("linear-hc3", record.Log, in) }

// linear is the difference of means adjusted by a linear model with intercept,
// covariates, dummies of factors and strata (reference: the first level), and
// the indicator of the first group, whose coefficient is the effect. `linear`
// takes one variance for all; `linear-hc3` the sandwich with squared
// residuals over (1-h)^2 (MacKinnon and White 1985). Both use n - p degrees
// of freedom. On the log scale the outcome is the logarithm of the values.
func linear(word string, scale record.Scale, in Input) (*Inference, *Problem) {
	y, cols, n1, bad := design(word, scale, in)
	if bad != nil {
		return nil, bad
	}
	n := float64(len(y))
	n2 := n - n1
	switch {
	case n1 < 1:
		return nil, problem("S101", tooFew, "the first group", n1, 1)
	case n2 < 1:
		return nil, problem("S101", tooFew, "the second group", n2, 1)
	case n-float64(len(cols)) < 1:
		return nil, problem("S101", tooFew, "the linear model", n, len(cols)+1)
	}
	fit := leastSquares(y, cols)
	if j := fit.singular(); j >= 0 {
		return nil, problem("S107", combination, cols[j].name)
	}
	residuals, hc3, ok := fit.residuals(y, cols)
	df := n - float64(len(cols))
	s := math.Sqrt(numeric.MomentsOf(residuals).M2 / df)
	// Below the rounding of the outcome itself nothing is left to estimate an
	// error from.
	if m := numeric.MomentsOf(y); s <= 16*0x1p-52*math.Sqrt(m.M2/n+m.Mean*m.Mean) {
		return nil, problem("S102", noVariation, "what the model leaves")
	}
	last := len(cols) - 1
	se := s / math.Abs(fit.r[last][last])
	if word == "linear-hc3" {
		if !ok {
			return nil, problem("S101", fullLeverage, cols[last].name)
		}
		se = math.Sqrt(hc3)
	}
	w := Wald{Scale: scale, Y: fit.z[last] / fit.r[last][last], SE: se, DF: df, Low: math.Inf(-1), High: math.Inf(1)}
	if scale == record.Log {
		w.Low = 0
	}
	inf := fromWald(word, w.WithSystematic(in.SystematicU), n)
	inf.Checks = linearChecks(word, residuals, in.Group)
	return inf, nil
}

// design builds the outcome and the columns: intercept, covariates, strata,
// group indicator. Covariates are centred and brought to a mean square of 1,
// which changes no coefficient of another column.
func design(word string, scale record.Scale, in Input) (y []float64, cols []column, n1 float64, bad *Problem) {
	n := len(in.Value)
	switch {
	case in.Crossover:
		return nil, nil, 0, problem("S112", noAdjustment, word)
	case n == 0 || len(in.Group) != n || in.Strata != nil && len(in.Strata) != n:
		return nil, nil, 0, problem("S104", linearNeeds, word)
	case in.DesignEffect != 1:
		return nil, nil, 0, problem("S104", notClustered, word)
	}
	y = in.Value
	if scale == record.Log {
		if y, bad = logsOf("the data", y); bad != nil {
			return nil, nil, 0, bad
		}
	}
	m := numeric.MomentsOf(y)
	if !isFinite(m.Mean) {
		return nil, nil, 0, problem("S103", outsideRange, "the mean of the values", m.Mean)
	}
	centred := make([]float64, n)
	for i, v := range y {
		centred[i] = v - m.Mean
	}
	cols = append(cols, column{name: "the intercept", kind: intercept})
	for _, c := range in.Covariates {
		more, bad := covariateColumns(word, c, n)
		if bad != nil {
			return nil, nil, 0, bad
		}
		cols = append(cols, more...)
	}
	if in.Strata != nil && !amongCovariates(in.Strata, in.Covariates) {
		cols = append(cols, dummies("strata", in.Strata, in.StrataCount)...)
	}
	for _, g := range in.Group {
		if g == 0 {
			n1++
		}
	}
	cols = append(cols, column{name: "the group", kind: groups, group: in.Group, mean: n1 / float64(n)})
	return centred, cols, n1, nil
}

// covariateColumns are the columns of one covariate of n rows.
func covariateColumns(word string, c Covariate, n int) ([]column, *Problem) {
	if c.Levels != nil {
		if len(c.Code) != n {
			return nil, problem("S104", linearNeeds, word)
		}
		return dummies(c.Name, c.Code, len(c.Levels)), nil
	}
	if len(c.Values) != n {
		return nil, problem("S104", linearNeeds, word)
	}
	m := numeric.MomentsOf(c.Values)
	size := math.Sqrt(m.M2 / float64(n))
	switch {
	case !isFinite(m.Mean) || !isFinite(size):
		return nil, problem("S103", outsideRange, "the mean of "+c.Name, m.Mean)
	case size <= 16*0x1p-52*math.Abs(m.Mean):
		return nil, problem("S107", combination, c.Name)
	}
	return []column{{name: c.Name, kind: numbers, values: c.Values, mean: m.Mean, size: size}}, nil
}

// amongCovariates reports whether the strata are a factor that was also handed
// over as a covariate, under its own name.
func amongCovariates(strata []int32, covariates []Covariate) bool {
	for _, c := range covariates {
		if c.Levels != nil && slices.Equal(c.Code, strata) {
			return true
		}
	}
	return false
}

// dummies are the columns of a factor; levels that no row has are skipped,
// and the first that some row has is the reference.
func dummies(name string, code []int32, levels int) []column {
	seen := make([]bool, levels)
	for _, c := range code {
		if c >= 0 && int(c) < levels {
			seen[c] = true
		}
	}
	var cols []column
	reference := true
	for level, has := range seen {
		if !has {
			continue
		}
		if !reference {
			cols = append(cols, column{name: name, kind: factor, code: code, level: int32(level)})
		}
		reference = false
	}
	return cols
}

// linearChecks is what the residuals show.
func linearChecks(word string, residuals []float64, group []uint8) []result.Check {
	var parts [2][]float64
	for i, e := range residuals {
		parts[min(group[i], 1)] = append(parts[min(group[i], 1)], e)
	}
	checks := []result.Check{check("normal-residuals", normality("", float64(len(residuals)), residuals))}
	if word == "linear" && len(parts[0]) > 1 && len(parts[1]) > 1 {
		s1, s2 := numeric.MomentsOf(parts[0]).SD, numeric.MomentsOf(parts[1]).SD
		if r := spreadRatio(s1, s2); r != nil {
			checks = append(checks, check("equal-variances", r))
		}
	}
	return checks
}
