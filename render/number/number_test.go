package number

import (
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"

	"steelyard/compute/result"
)

// blank makes the blanks inside numbers visible.
func blank(s string) string {
	return strings.NewReplacer(Hard, "_", Thin, "'", Minus, "-").Replace(s)
}

func opt(v float64) result.Opt { return result.Some(v) }

func TestInterval(t *testing.T) {
	none := result.Opt{}
	inf := math.Inf(1)
	newtons := Format{Digits: -1, Unit: "N"}
	points := Format{Factor: 100, Digits: -1, Unit: "percentage points"}
	ratio := Format{Ratio: true, Digits: -1, Ends: []float64{0}}
	for _, c := range []struct {
		name           string
		f              Format
		est, low, high result.Opt
		points         []float64
		want           string // estimate | range | equal
	}{
		{"two digits of the half-width", newtons, opt(-0.18), opt(-0.7842678), opt(0.4242678), []float64{-0.8, 0, 0.8}, "-0.18|-0.78 to 0.42_N|"},
		{"wide", newtons, opt(512.2), opt(431.7), opt(592.7), nil, "512|432 to 593_N|"},
		{"thousands", newtons, opt(1234567), opt(1200000), opt(1269134), nil, "1'234'567|1'200'000 to 1'269'134_N|"},
		{"a limit just inside its margin", newtons, opt(-0.18), opt(-0.79996), opt(0.44), []float64{-0.8, 0.8}, "-0.18000|-0.79996 to 0.44000_N|"},
		{"a limit just beyond its margin", newtons, opt(-0.18), opt(-0.8004), opt(0.44), []float64{-0.8, 0.8}, "-0.1800|-0.8004 to 0.4400_N|"},
		{"a limit on its margin", newtons, opt(-0.18), opt(-0.8), opt(0.44), []float64{-0.8, 0.8}, "-0.18|-0.80 to 0.44_N|-0.8"},
		{"a limit on its margin but for the accuracy of limits", newtons, opt(-0.18), opt(-0.80000000000001), opt(0.44), []float64{-0.8}, "-0.18|-0.80 to 0.44_N|-0.8"},
		{"a limit near the null", newtons, opt(3), opt(0.004), opt(6), []float64{0}, "3.000|0.004 to 6.000_N|"},
		{"a limit near the null from below", newtons, opt(3), opt(-0.004), opt(6), []float64{0}, "3.000|-0.004 to 6.000_N|"},
		{"margin with more digits than the limit", newtons, opt(1), opt(0.81), opt(1.2), []float64{0.8125}, "1.00|0.81 to 1.20_N|"},
		{"rounding would cross such a margin", newtons, opt(1), opt(0.8114), opt(1.2), []float64{0.8111}, "1.0000|0.8114 to 1.2000_N|"},
		{"percent", points, opt(-0.00241), opt(-0.04768), opt(0.04286), []float64{-0.04, 0, 0.04}, "-0.2|-4.8 to 4.3_percentage_points|"},
		{"near the end of the range", Of(&result.Outcome{Measure: "proportion", Percent: true, Digits: -1}), opt(0.9999999845), opt(0.9999984348), opt(0.9999999999), []float64{0.99}, "99.9999985|99.9998435 to >_99.9999999_%|"},
		{"at the end of the range", Of(&result.Outcome{Measure: "proportion", Percent: true, Digits: -1}), opt(0), opt(0), opt(0.0075), []float64{0.01}, "0.00|0.00 to 0.75_%|"},
		{"percent on the margin", points, opt(0.01), opt(-0.02), opt(0.04), []float64{0.04}, "1.0|-2.0 to 4.0_percentage_points|4"},
		{"no upper limit", newtons, opt(2), opt(1.5), opt(inf), nil, "2.00|1.50_N or more, no upper limit|"},
		{"no lower limit", newtons, opt(2), opt(-inf), opt(2.5), nil, "2.00|2.50_N or less, no lower limit|"},
		{"no limits", newtons, opt(2), opt(-inf), opt(inf), nil, "2.00|no limit on either side|"},
		{"one-sided by design", newtons, opt(2), opt(1.5), none, nil, "2.00|1.50_N or more|"},
		{"absent", newtons, none, none, none, nil, "||"},
		{"ratio by its shorter arm", ratio, opt(0.08), opt(0.01), opt(2.1), []float64{1}, "0.080|0.010 to 2.100|"},
		{"ratio, two decimals at least", ratio, opt(31), opt(5), opt(193), []float64{1}, "31.00|5.00 to 193.00|"},
		{"ratio near zero, which is no ratio", ratio, opt(0.5), opt(0.0004), opt(2), []float64{1}, "0.5000|0.0004 to 2.0000|"},
		{"ratio without upper limit", ratio, opt(inf), opt(1.3), opt(inf), []float64{1}, "infinite|1.30 or more, no upper limit|"},
		{"very small", Format{Digits: 2, Unit: "mol"}, opt(3.14159e-9), opt(2.9e-9), opt(3.4e-9), []float64{3e-9}, "3.14_×_10^-9|2.90_×_10^-9 to 3.40_×_10^-9_mol|"},
		{"very small, near a margin", Format{Digits: -1, Unit: "mol"}, opt(3.14159e-9), opt(2.99996e-9), opt(3.4e-9), []float64{3e-9}, "3.14159_×_10^-9|2.99996_×_10^-9 to 3.40000_×_10^-9_mol|"},
		{"very large", newtons, opt(3.14159e20), opt(2.9e20), opt(3.4e20), nil, "3.14_×_10^20|2.90_×_10^20 to 3.40_×_10^20_N|"},
		{"digits stated", Format{Digits: 3, Unit: "mm"}, opt(-4.7), opt(-9.07986), opt(-0.32014), nil, "-4.700|-9.080 to -0.320_mm|"},
		{"just below a derived margin, which prints as 0.8333", ratio, opt(0.9), opt(0.8333333), opt(0.99), []float64{1 / 1.2}, "0.900|0.833 to 0.990|"},
	} {
		s := c.f.Interval(c.est, c.low, c.high, c.points...)
		got := blank(s.Estimate + "|" + s.Range() + "|" + s.LowEqual + s.HighEqual)
		got = strings.ReplaceAll(got, "percentage points", "percentage_points")
		if got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

// The printed limit stands on the same side of the printed point as the
// limit does in full, whatever the numbers.
func TestLimitsKeepTheirSide(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	f := Format{Digits: -1}
	for range 20000 {
		point := math.Round(r.NormFloat64()*100) / 100
		width := math.Pow(10, r.Float64()*6-4)
		if size := r.IntN(3); size > 0 {
			point *= math.Pow(10, float64(20*size-30))
			width *= math.Pow(10, float64(20*size-30))
		}
		low := point + r.NormFloat64()*width*math.Pow(10, -r.Float64()*5)
		high := low + width
		s := f.Interval(opt(low+width/2), opt(low), opt(high), point)
		if s.LowEqual != "" || low == point || s.Decimals >= maxDecimals {
			continue
		}
		got, err := parse(s.Low)
		ulp := 0.5000001 * math.Pow(10, float64(s.power-s.Decimals))
		if err != nil {
			t.Fatal(err)
		}
		if got == point || (got < point) != (low < point) {
			t.Fatalf("limit %v printed %q against point %v", low, s.Low, point)
		}
		if math.Abs(got-low) > ulp {
			t.Fatalf("limit %v printed %q", low, s.Low)
		}
	}
}

// parse reads a written number back.
func parse(s string) (float64, error) {
	return strconv.ParseFloat(strings.NewReplacer(Minus, "-", Thin, "", Hard+"×"+Hard+"10^", "e").Replace(s), 64)
}

func TestP(t *testing.T) {
	for _, c := range []struct {
		p      result.P
		bounds []float64
		want   string
	}{
		{result.P{P: 0.0123456, OK: true}, nil, "p_=_0.012"},
		{result.P{P: 0.0004, OK: true}, nil, "p_<_0.001"},
		{result.P{P: 0, Ln: -800, OK: true}, nil, "p_<_0.001"},
		{result.P{P: 0.00051, OK: true}, nil, "p_<_0.001"},
		{result.P{P: 0.001, OK: true}, nil, "p_=_0.001"},
		{result.P{P: 0.9996, OK: true}, nil, "p_>_0.999"},
		{result.P{P: 1, OK: true}, nil, "p_=_1.000"},
		{result.P{P: 0.9994, OK: true}, nil, "p_>_0.999"},
		{result.P{P: 0.04996, OK: true}, []float64{0.05}, "p_=_0.04996"},
		{result.P{P: 0.0503, OK: true}, []float64{0.05}, "p_=_0.0503"},
		{result.P{P: 0.05, OK: true}, []float64{0.05}, "p_=_0.050"},
		{result.P{P: 0.0251, OK: true}, []float64{0.025}, "p_=_0.0251"},
		{result.P{}, nil, "p not computed"},
		{result.P{P: math.NaN(), OK: true}, nil, "p not computed"},
	} {
		if got := blank(PEquals(c.p, c.bounds...)); got != c.want {
			t.Errorf("%v: got %q, want %q", c.p, got, c.want)
		}
	}
}

func TestWords(t *testing.T) {
	inf := math.Inf(1)
	for _, c := range []struct{ got, want string }{
		{Plain(0.8), "0.8"},
		{Plain(-0.8), "-0.8"},
		{Plain(0.1 + 0.2), "0.3"},
		{Plain(1 / 1.2), "0.8333"},
		{Plain(0.123456789), "0.123456789"},
		{Plain(12345.5), "12'345.5"},
		{Plain(1234), "1234"},
		{Plain(1e-9), "1_×_10^-9"},
		{Plain(-2.5e20), "-2.5_×_10^20"},
		{Plain(0), "0"},
		{Plain(math.Copysign(0, -1)), "0"},
		{Plain(inf), "without upper limit"},
		{Plain(math.NaN()), "not computed"},
		{Level(0.95), "95_%"},
		{Level(0.975), "97.5_%"},
		{Level(1 - 2*0.05), "90_%"},
		{Level(1 - 2*0.025), "95_%"},
		{Error(0.05 / 3), "0.01667"},
		{Error(0.025), "0.025"},
		{Count(48), "48"},
		{Count(37.62), "37.6"},
		{Count(1200000), "1'200'000"},
		{Count(math.NaN()), "not computed"},
		{Int(-12), "-12"},
		{Statistic(opt(1.7227)), "1.72"},
		{Statistic(opt(-inf)), "-infinite"},
		{Statistic(result.Opt{}), Absent},
		{DF(opt(45.506534)), "45.5"},
		{DF(opt(30)), "30"},
		{DF(opt(inf)), "infinite"},
		{SValue(opt(4.4465)), "4.4"},
		{Share(0.3349), "33.5_%"},
		{Share(0.0004), "<_0.1_%"},
		{Share(0.99999), ">_99.9_%"},
		{Share(0), "0.0_%"},
		{Share(1), "100.0_%"},
		{Significant(0.0021, 3), "0.00210"},
		{Significant(123456, 3), "123'456"},
		{Significant(1e-20, 3), "1.00_×_10^-20"},
		{Significant(math.NaN(), 3), "not computed"},
		{Short(0.0083333, 3), "0.00833"},
		{Short(300, 2), "300"},
		{Verb("%g", 0.123456), "0.1235"},
		{Verb("%.2f", 1.005), "1.00"},
		{Verb("%.3g", 0.0312), "0.0312"},
		{Verb("%v", math.NaN()), "not computed"},
	} {
		if blank(c.got) != c.want {
			t.Errorf("got %q, want %q", blank(c.got), c.want)
		}
	}
}

func TestOf(t *testing.T) {
	for _, c := range []struct {
		o    result.Outcome
		v    float64
		want string
	}{
		{result.Outcome{Measure: "proportion", Percent: true, Digits: -1}, 0.07, "7_%"},
		{result.Outcome{Measure: "proportion", Digits: -1}, 0.07, "0.07"},
		{result.Outcome{Measure: "risk-difference", Percent: true, Digits: -1}, -0.05, "-5_percentage points"},
		{result.Outcome{Measure: "rate", Per: 1000, Unit: "falls per bed-day", Digits: -1}, 0.0042, "4.2_falls per 1000 bed-day"},
		{result.Outcome{Measure: "rate-difference", Per: 1000, Unit: "per patient-year", Digits: -1}, 0.0042, "4.2_per 1000 patient-year"},
		{result.Outcome{Measure: "rate", Per: 1, Digits: -1}, 1.42, "1.42"},
		{result.Outcome{Measure: "rate", Per: 100, Digits: -1}, 0.0042, "0.42_per 100"},
		{result.Outcome{Measure: "rate-ratio", Per: 1000, Unit: "x", Ratio: true, Digits: -1}, 1.25, "1.25"},
		{result.Outcome{Measure: "correlation", Unit: "N", Digits: -1}, 0.3, "0.3"},
		{result.Outcome{Measure: "mean-difference", Unit: "N", Digits: -1}, 0.8, "0.8_N"},
	} {
		if got := blank(Of(&c.o).PointUnit(c.v)); got != c.want {
			t.Errorf("%s: got %q, want %q", c.o.Measure, got, c.want)
		}
	}
}

// A mean is never printed with more decimals than the record gives it with.
func TestStated(t *testing.T) {
	f := Format{Factor: 1, Digits: -1}
	for _, c := range []struct {
		v, sd float64
		want  string
	}{{5.95, 0.52, "5.95"}, {5.9, 0.52, "5.90"}, {40.3966, 17.7012, "40.4"}, {12, 3, "12"}} {
		if got := f.Stated(c.v, c.sd/10, c.sd); got != c.want {
			t.Errorf("%v (%v): got %q, want %q", c.v, c.sd, got, c.want)
		}
	}
}

// Nothing prints NaN or a hyphen for a minus, whatever it is given.
func FuzzWritten(f *testing.F) {
	for _, v := range []float64{0, 1, -1, 1e-320, 1e300, math.Inf(1), math.Inf(-1), math.NaN(), 0.05} {
		f.Add(v, v, v)
	}
	f.Fuzz(func(t *testing.T, est, low, high float64) {
		form := Format{Factor: 100, Digits: -1, Unit: "u"}
		s := form.Interval(opt(est), opt(low), opt(high), 0, 0.05)
		all := []string{s.Estimate, s.Low, s.High, s.Range(), s.EstimateUnit(), Plain(est), P(result.P{P: est, OK: true}, 0.05),
			Level(low), Count(high), Share(est), Significant(low, 3), Statistic(opt(est)), Verb("%.3g", high), Short(low, 3)}
		for _, x := range all {
			if strings.Contains(x, "NaN") || strings.Contains(x, "-") || strings.Contains(x, "Inf") || strings.Contains(x, "0.000") && strings.HasPrefix(x, "p") {
				t.Errorf("%v %v %v: %q", est, low, high, x)
			}
		}
	})
}
