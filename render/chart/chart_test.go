package chart

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"steelyard/render/page"
)

// outside names a mark that leaves the picture, "" when all stay inside.
func outside(d *page.Drawing) string {
	in := func(x, y float64) bool {
		const e = 0.01
		return x >= -e && y >= -e && x <= d.Width+e && y <= d.Height+e && !math.IsNaN(x) && !math.IsNaN(y)
	}
	for i, m := range d.Marks {
		ok := true
		switch m := m.(type) {
		case page.Line:
			ok = in(m.X1, m.Y1) && in(m.X2, m.Y2)
		case page.Polyline:
			for k := range m.X {
				ok = ok && in(m.X[k], m.Y[k])
			}
			ok = ok && len(m.X) == len(m.Y)
		case page.Polygon:
			for k := range m.X {
				ok = ok && in(m.X[k], m.Y[k])
			}
		case page.Rect:
			ok = in(m.X, m.Y) && in(m.X+m.W, m.Y+m.H) && m.W >= 0 && m.H >= 0
		case page.Disc:
			ok = in(m.X-m.R, m.Y-m.R) && in(m.X+m.R, m.Y+m.R)
		case page.Label:
			l, r := labelSpan(m)
			ok = in(l, m.Y-m.Size*0.8) && in(r, m.Y+m.Size*0.25)
		}
		if !ok {
			return fmt.Sprintf("mark %d: %#v", i, m)
		}
	}
	return ""
}

// labelSpan is from where to where a label reaches, by the approximate widths.
func labelSpan(l page.Label) (left, right float64) {
	w := textWidth(l.Text, l.Size)
	switch l.Anchor {
	case page.Middle:
		return l.X - w/2, l.X + w/2
	case page.End:
		return l.X - w, l.X
	case page.Start:
	}
	return l.X, l.X + w
}

// touching names two labels on one line that overlap.
func touching(d *page.Drawing) string {
	var ls []page.Label
	for _, m := range d.Marks {
		if l, ok := m.(page.Label); ok {
			ls = append(ls, l)
		}
	}
	for i := range ls {
		for k := i + 1; k < len(ls); k++ {
			if math.Abs(ls[i].Y-ls[k].Y) > 4 {
				continue
			}
			l1, r1 := labelSpan(ls[i])
			l2, r2 := labelSpan(ls[k])
			if l1 < r2-0.1 && l2 < r1-0.1 {
				return fmt.Sprintf("%q and %q", ls[i].Text, ls[k].Text)
			}
		}
	}
	return ""
}

// The checks must find what they look for.
func TestChecksFind(t *testing.T) {
	d := &page.Drawing{Width: 100, Height: 20, Marks: []page.Mark{page.Line{X1: 0, Y1: 0, X2: 101, Y2: 5}}}
	if outside(d) == "" {
		t.Error("a line outside is not found")
	}
	d.Marks = []page.Mark{page.Label{X: 10, Y: 10, Text: "aaaa", Size: 8}, page.Label{X: 20, Y: 10, Text: "bbbb", Size: 8}}
	if touching(d) == "" {
		t.Error("touching labels are not found")
	}
	d.Marks[1] = page.Label{X: 60, Y: 10, Text: "bbbb", Size: 8}
	if m := touching(d) + outside(d); m != "" {
		t.Errorf("found %s where there is nothing", m)
	}
}

func TestTicks(t *testing.T) {
	texts := func(ts []Tick) string {
		var s []string
		for _, x := range ts {
			s = append(s, x.Text)
		}
		return strings.Join(s, " ")
	}
	for _, c := range []struct {
		log    bool
		lo, hi float64
		n      int
		want   string
	}{
		{false, -1, 1, 5, "−1 −0.5 0 0.5 1"},
		{false, 0, 10, 6, "0 2 4 6 8 10"},
		{false, 0, 7, 4, "0 2 4 6"},
		{false, -0.05, 0.05, 5, "−0.04 −0.02 0 0.02 0.04"},
		{false, 99990, 100030, 5, "99\u202f990 100\u202f000 100\u202f010 100\u202f020 100\u202f030"},
		{true, 0.5, 2, 8, "0.5 0.7 1 1.5 2"},
		{true, 0.1, 10, 7, "0.1 0.2 0.5 1 2 5 10"},
		{true, 0.9, 1.2, 8, "0.9 0.95 1 1.1 1.2"},
		{true, 0.001, 1000, 7, "0.001 0.01 0.1 1 10 100 1000"},
		{true, 1e-6, 1e6, 5, "0.000001 0.001 1 1000 1\u202f000\u202f000"},
	} {
		a := Axis{Log: c.log, Lo: c.lo, Hi: c.hi}
		got := texts(a.Ticks(c.n))
		if got != c.want {
			t.Errorf("%v %g to %g, %d: %s, want %s", c.log, c.lo, c.hi, c.n, got, c.want)
		}
	}
}

// Ticks stand inside the range, ascend, are no more than asked for, and exist
// wherever two of them fit; for every size of number.
func TestTicksSane(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for k := range 20000 {
		log := k%2 == 0
		lo := math.Pow(10, r.Float64()*598-299)
		if !log && r.IntN(2) == 0 {
			lo = -lo
		}
		hi := lo + math.Abs(lo)*math.Pow(10, r.Float64()*8-4)
		if log {
			hi = lo * math.Pow(10, math.Pow(10, r.Float64()*3-2))
		}
		a := NewAxis(log, lo, hi)
		if !(a.Lo < a.Hi) || math.IsInf(a.Lo, 0) || math.IsInf(a.Hi, 0) || math.IsNaN(a.Lo) {
			t.Fatalf("range %g to %g gives axis %v", lo, hi, a)
		}
		n := 2 + r.IntN(8)
		ts := a.Ticks(n)
		if len(ts) > n {
			t.Fatalf("%v: %d ticks, asked for %d", a, len(ts), n)
		}
		if len(ts) == 0 && n > 4 {
			t.Fatalf("%v: no tick of %d", a, n)
		}
		for i, x := range ts {
			if !a.Inside(x.V) || i > 0 && x.V <= ts[i-1].V {
				t.Fatalf("%v: ticks %v", a, ts)
			}
			if i > 0 && x.Text == ts[i-1].Text {
				t.Fatalf("%v: two ticks read %q", a, x.Text)
			}
			if p := a.At(x.V); p < 0 || p > 1 {
				t.Fatalf("%v: tick %g stands at %g", a, x.V, p)
			}
		}
	}
}

// Values outside every measure give an axis all the same.
func TestAxisOddities(t *testing.T) {
	inf := math.Inf(1)
	for _, log := range []bool{false, true} {
		for _, v := range [][]float64{nil, {0}, {inf}, {math.NaN()}, {-inf, inf}, {1, 1}, {-1, -1}, {0, 0}, {math.MaxFloat64, -math.MaxFloat64}, {math.SmallestNonzeroFloat64}, {1e300, 1e300}, {5e-324, 1e308}} {
			a := NewAxis(log, v...)
			if !(a.Lo < a.Hi) || math.IsInf(a.Lo, 0) || math.IsInf(a.Hi, 0) || log && a.Lo <= 0 {
				t.Errorf("%v %v: %v", log, v, a)
			}
			for _, x := range []float64{-inf, 0, inf, math.NaN(), 1} {
				if p := a.At(x); !(p >= 0 && p <= 1) {
					t.Errorf("%v: %g stands at %g", a, x, p)
				}
			}
			w := a.Widened(1, v...)
			if !(w.Lo < w.Hi) {
				t.Errorf("%v widened: %v", a, w)
			}
		}
	}
}

// Whatever the numbers, figures stay inside their pictures, and the beam's
// labels do not touch.
func TestFiguresInside(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	value := func() Point {
		switch r.IntN(8) {
		case 0:
			return Point{}
		case 1:
			return Point{math.Inf(r.IntN(2)*2 - 1), true}
		case 2:
			return Point{math.Pow(10, r.Float64()*600-300), true}
		}
		return Point{r.NormFloat64() * 10, true}
	}
	for range 3000 {
		log := r.IntN(2) == 0
		a := NewAxis(log, value().V, value().V, value().V)
		a.Title, a.Better = "Difference of means (new minus current), percentage points of everything", []string{"", "higher", "lower"}[r.IntN(3)]
		b := Beam{Axis: a, Band: Band{value().V, value().V, r.IntN(2) == 0}, Null: value(), Marks: []Mark{{value().V, "margin 4"}, {value().V, "limit 5"}}}
		if b.Band.High < b.Band.Low {
			b.Band.Low, b.Band.High = b.Band.High, b.Band.Low
		}
		if r.IntN(2) == 0 {
			b.Names, b.Right, b.Height = 130, 120, 16
		}
		for range r.IntN(4) {
			lo, hi := value(), value()
			if lo.V > hi.V {
				lo, hi = hi, lo
			}
			b.Rows = append(b.Rows, Row{Name: "a study with a name that is far too long for its column", Est: value(), Low: lo, High: hi, LowText: "−12 345.67", HighText: "0.42", EstText: "−0.18", Right: "−0.2 (−4.8 to 4.3), a text too long for its column", Weight: r.Float64(), Strong: r.IntN(2) == 0, Grey: r.IntN(2) == 0, Wider: lo, WiderHigh: hi})
		}
		d := b.Draw()
		if m := outside(d); m != "" {
			t.Fatalf("%+v: %s", b, m)
		}
		if m := ticksTouch(d); m != "" {
			t.Fatalf("%+v: %s", a, m)
		}
		for _, l := range b.Plain(72) {
			if n := len([]rune(l)); n > 72 {
				t.Fatalf("%d columns: %q", n, l)
			}
		}
		c := Curve{Axis: a, Band: b.Band, Null: b.Null, Marks: b.Marks, Level: r.Float64(), LevelText: "p = 0.05: the 95 % interval"}
		for range 30 {
			c.X, c.P = append(c.X, value().V), append(c.P, r.Float64())
		}
		if m := outside(c.Draw()); m != "" {
			t.Fatalf("curve %s", m)
		}
		s := MarginStep{Axis: a, X: c.X, P: c.P, Alpha: 0.05, Smallest: value(), Stated: value()}
		if m := outside(s.Draw()); m != "" {
			t.Fatalf("margin %s", m)
		}
		h := Beliefs{Axis: a, Band: b.Band, Null: b.Null, Hills: []Hill{{X: c.X, H: c.P, Name: "before", Dashed: true}, {X: c.X, H: []float64{math.Inf(1), math.NaN(), 1}, Name: "after"}}}
		if m := outside(h.Draw()); m != "" {
			t.Fatalf("beliefs %s", m)
		}
	}
}

// ticksTouch looks at the labels over the beam only.
func ticksTouch(d *page.Drawing) string {
	only := &page.Drawing{Width: d.Width, Height: d.Height}
	for _, m := range d.Marks {
		if l, ok := m.(page.Label); ok && l.Y == beamTop-4 {
			only.Marks = append(only.Marks, l)
		}
	}
	return touching(only)
}

func TestSurvivalTallyTimeline(t *testing.T) {
	s := Survival{Unit: "days", RiskTimes: []float64{0, 2, 4, 6, 1e9}, Groups: []Survive{
		{Name: "short", Time: []float64{1, 2, 5}, Frac: []float64{0.9, 0.5, 0.1}, Censored: []float64{1.5, 6}, Risk: []float64{100, 60, 20, 2, 0}},
		{Name: "a group with a long name", Time: []float64{1, 3}, Frac: []float64{0.8, 0.3}, Risk: []float64{100000, 40}}}}
	if m := outside(s.Draw()) + touching(s.Draw()); m != "" {
		t.Error(m)
	}
	if m := outside(Survival{}.Draw()); m != "" {
		t.Error(m)
	}
	for _, n := range []int{0, 1, 5, 400} {
		d := Tally{Toward: n / 2, With: n, TowardText: "some toward the claim", Other: "full: toward"}.Draw()
		if m := outside(d); m != "" {
			t.Error(n, m)
		}
	}
	day := func(y, m, d int) time.Time { return time.Date(y, time.Month(m), d, 0, 0, 0, 0, time.UTC) }
	for _, e := range [][]Event{
		{{At: day(2026, 4, 1), Kind: "result"}, {At: day(2026, 4, 1), Kind: "seal"}},
		{{At: day(2024, 1, 1), Kind: "seal"}, {At: day(2026, 4, 1), Kind: "result", Unproven: true}},
		{{At: day(1900, 1, 1), Kind: "seal"}, {At: day(2999, 4, 1), Kind: "result"}},
	} {
		d := Timeline{Events: e, Kinds: []string{"seal", "result"}}.Draw()
		if m := outside(d) + touching(d); m != "" {
			t.Error(m)
		}
	}
}

// A Kaplan–Meier curve holds its share until the next step and starts at 1.
func TestStepPath(t *testing.T) {
	g := Survive{Time: []float64{1, 3}, Frac: []float64{0.8, 0.4}, Censored: []float64{5}}
	x, y := stepPath(g, 5)
	want := "[0 1 1 3 3 5] [1 1 0.8 0.8 0.4 0.4]"
	if got := fmt.Sprint(x, y); got != want {
		t.Errorf("%s, want %s", got, want)
	}
	for _, c := range [][2]float64{{0, 1}, {1, 0.8}, {2.9, 0.8}, {3, 0.4}, {9, 0.4}} {
		if got := shareAt(g, c[0]); got != c[1] {
			t.Errorf("share at %g: %g, want %g", c[0], got, c[1])
		}
	}
}

// A gauge stands where its number lies: the centre in the middle, what goes
// beyond the line at its end.
func TestGaugePlace(t *testing.T) {
	for _, c := range []struct {
		g    Gauge
		want float64
	}{
		{Gauge{V: 0, Reach: 2}, 0}, {Gauge{V: 1, Reach: 2}, 0.5}, {Gauge{V: -9, Reach: 2}, -1},
		{Gauge{V: 2, Centre: 1, Reach: 4, Log: true}, 0.5}, {Gauge{V: 0.25, Centre: 1, Reach: 4, Log: true}, -1}, {Gauge{V: math.NaN(), Reach: 1}, 0},
	} {
		if got := c.g.place(); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%+v: %v", c.g, got)
		}
	}
	d := Gauges{Rows: []Gauge{{Name: "Skewness, a group of a very long name", V: 9, Reach: 2, Below: "tail to the left", Above: "tail to the right", Text: "9.00"}}}.Draw()
	if s := outside(d); s != "" {
		t.Error(s)
	}
}

// The unit of an axis is never cut away.
func TestAxisKeepsItsUnit(t *testing.T) {
	a := Axis{Title: "Difference of restricted mean times (six_mp minus placebo), weeks", Short: "Difference (six_mp minus placebo), weeks", Unit: "weeks"}
	for _, room := range []float64{400, 200, 90, 60} {
		if s := a.named(labelSize, room); !strings.HasSuffix(s, ", weeks") {
			t.Errorf("room %v: %q", room, s)
		}
	}
	if s := a.named(labelSize, 200); s != a.Short {
		t.Errorf("got %q", s)
	}
}
