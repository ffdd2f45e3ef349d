package effect

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"steelyard/compute/dist"
)

// Helpers that compare with outside values, for every test of this package.
// They report through reporter, so that reference_check_test.go can see them
// fail.

type reporter interface {
	Helper()
	Errorf(format string, args ...any)
}

const referenceDir = "../../testdata/reference"

// publishedRow is one example of testdata/reference/published.json; its
// README explains the fields.
type publishedRow struct {
	ID            string             `json:"id"`
	Source        string             `json:"source"`
	FromMemory    bool               `json:"from_memory"`
	Input         json.RawMessage    `json:"input"`
	Expected      map[string]any     `json:"expected"`
	Recomputed    map[string]any     `json:"recomputed"`
	PrintedDigits map[string]int     `json:"printed_digits"`
	Slack         map[string]float64 `json:"slack"`
}

// published loads one row.
func published(t *testing.T, id string) publishedRow {
	t.Helper()
	var rows []publishedRow
	readJSON(t, "published.json", &rows)
	for _, r := range rows {
		if r.ID == id {
			return r
		}
	}
	t.Fatalf("published.json has no row %q", id)
	return publishedRow{}
}

// check compares one number with the printed one: within half a unit of the
// last printed decimal, plus the row's slack in such units.
func (r publishedRow) check(t reporter, name string, got float64) {
	t.Helper()
	want, ok := r.Expected[name].(float64)
	digits, has := r.PrintedDigits[name]
	if !ok || !has {
		t.Errorf("%s: no printed number %q", r.ID, name)
		return
	}
	tol := (0.5 + r.Slack[name]) * math.Pow(10, -float64(digits))
	// A certified value may carry more decimals than a double: allow two units
	// of its last place.
	tol = max(tol, 4e-16*math.Abs(want))
	if !(math.Abs(got-want) <= tol*(1+1e-9)) {
		t.Errorf("%s: %s = %.15g, printed %v with %d decimals (%s)", r.ID, name, got, want, digits, r.Source)
	}
}

// second compares one number with the row's recomputed value at a relative
// tolerance: a second opinion by another program, not a printed one.
func (r publishedRow) second(t reporter, name string, got, tol float64) {
	t.Helper()
	want, ok := r.Recomputed[name].(float64)
	if !ok {
		t.Errorf("%s: no recomputed number %q", r.ID, name)
		return
	}
	near(t, r.ID+" recomputed "+name, got, want, tol)
}

// input decodes the row's input.
func (r publishedRow) input(t *testing.T, into any) {
	t.Helper()
	if err := json.Unmarshal(r.Input, into); err != nil {
		t.Fatalf("%s: %v", r.ID, err)
	}
}

// valueRow is one computation by another program, in a file of such rows.
type valueRow struct {
	ID       string             `json:"id"`
	Program  string             `json:"program"` // with its version
	Call     string             `json:"call"`
	Date     string             `json:"date"`
	Input    json.RawMessage    `json:"input"`
	Expected map[string]float64 `json:"expected"`
	Digits   map[string]int     `json:"digits"` // significant digits that hold; "all" is the default of the row
}

// values loads a file of rows under testdata/reference.
func values(t testing.TB, file string) []valueRow {
	t.Helper()
	var rows []valueRow
	readJSON(t, file, &rows)
	if len(rows) == 0 {
		t.Fatalf("%s has no rows", file)
	}
	return rows
}

// check compares one number with the row's within half a unit of its last
// significant digit.
func (r valueRow) check(t reporter, name string, got float64) {
	t.Helper()
	want, ok := r.Expected[name]
	if !ok {
		t.Errorf("%s: no expected number %q", r.ID, name)
		return
	}
	digits, ok := r.Digits[name]
	if !ok {
		digits = r.Digits["all"]
	}
	if digits <= 0 {
		t.Errorf("%s: no digits for %q", r.ID, name)
		return
	}
	if !(math.Abs(got-want) <= half(want, digits)) {
		t.Errorf("%s: %s = %.17g, %s gives %.17g to %d digits by %s", r.ID, name, got, r.Program, want, digits, r.Call)
	}
}

// half is half a unit of the last of so many significant digits of x.
func half(x float64, digits int) float64 {
	if x == 0 {
		return 0.5 * math.Pow(10, -float64(digits))
	}
	exponent := math.Floor(math.Log10(math.Abs(x)))
	return 0.5 * math.Pow(10, exponent-float64(digits)+1)
}

// input decodes the row's input.
func (r valueRow) input(t testing.TB, into any) {
	t.Helper()
	if err := json.Unmarshal(r.Input, into); err != nil {
		t.Fatalf("%s: %v", r.ID, err)
	}
}

// near compares at a relative tolerance; equal infinities agree, NaN agrees
// with nothing.
func near(t reporter, what string, got, want, tol float64) {
	t.Helper()
	if got == want {
		return
	}
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s = %.17g, want %.17g within %g of it", what, got, want, tol)
	}
}

// within compares at an absolute tolerance.
func within(t reporter, what string, got, want, tol float64) {
	t.Helper()
	if got == want {
		return
	}
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.17g, want %.17g within %g", what, got, want, tol)
	}
}

// invertsTest demands that the limits at error a are where the test crosses
// a, on the normal-deviate scale: a continuous test must be at a there to
// tol in z; a step test must change from at most a to more than a between a
// little outside and a little inside.
func invertsTest(t reporter, what string, m Method, a, tol float64) {
	t.Helper()
	low, high := m.Limits(a)
	if math.IsNaN(low) || math.IsNaN(high) {
		t.Errorf("%s: limits %v, %v at a = %g", what, low, high, a)
		return
	}
	za := dist.NormalQuantile(a)
	side := func(name string, c, outward float64, p func(Test) dist.Tail) {
		t.Helper()
		if math.IsInf(c, 0) {
			return
		}
		at := m.Test(c)
		if !at.Step {
			if z := deviate(p(at)); !(math.Abs(z-za) <= tol) {
				t.Errorf("%s: at the %s limit %.17g, z = %.12g, want %.12g (a = %g)", what, name, c, z, za, a)
			}
			return
		}
		h := tol * math.Max(math.Abs(c), math.Abs(high-low))
		if math.IsInf(h, 0) {
			h = tol * math.Max(math.Abs(c), 1)
		}
		if out := m.Test(c + outward*h); !out.Below(p(out), a) {
			t.Errorf("%s: outside the %s limit %.17g, p = %.12g > %g", what, name, c, p(out).P, a)
		}
		if in := m.Test(c - outward*h); in.Below(p(in), a) {
			t.Errorf("%s: inside the %s limit %.17g, p = %.12g <= %g", what, name, c, p(in).P, a)
		}
	}
	side("lower", low, -1, func(t Test) dist.Tail { return t.Up })
	side("upper", high, +1, func(t Test) dist.Tail { return t.Down })
}

// sane demands of a test that no part is NaN and that both tails are pairs of
// probabilities with their logarithms.
func sane(t reporter, what string, at Test) {
	t.Helper()
	if math.IsNaN(at.Value) || math.IsNaN(at.DF) {
		t.Errorf("%s: statistic %v, df %v", what, at.Value, at.DF)
	}
	for _, p := range [...]dist.Tail{at.Up, at.Down} {
		ok := p.P >= 0 && p.P <= 1 && p.Q >= 0 && p.Q <= 1 && math.Abs(p.P+p.Q-1) < 1e-9 &&
			p.LnP <= 0 && p.LnQ <= 0
		if ok && p.P > 1e-290 {
			ok = math.Abs(math.Log(p.P)-p.LnP) <= 1e-9*math.Max(1, math.Abs(p.LnP))
		}
		if !ok {
			t.Errorf("%s: tail %+v", what, p)
		}
	}
}

// csvTable is a CSV file of testdata/reference/data.
type csvTable struct {
	head []string
	rows [][]string
}

func readTable(t testing.TB, file string) csvTable {
	t.Helper()
	f, err := os.Open(filepath.Join(referenceDir, "data", filepath.Base(file)))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return csvTable{head: all[0], rows: all[1:]}
}

// text is one column.
func (d csvTable) text(t testing.TB, column string) []string {
	t.Helper()
	for j, name := range d.head {
		if name == column {
			out := make([]string, len(d.rows))
			for i, r := range d.rows {
				out[i] = r[j]
			}
			return out
		}
	}
	t.Fatalf("no column %q among %q", column, d.head)
	return nil
}

// numbers is one column as numbers.
func (d csvTable) numbers(t testing.TB, column string) []float64 {
	t.Helper()
	words := d.text(t, column)
	out := make([]float64, len(words))
	for i, w := range words {
		x, err := strconv.ParseFloat(w, 64)
		if err != nil {
			t.Fatal(err)
		}
		out[i] = x
	}
	return out
}

// where keeps the numbers of rows in which another column has a value.
func (d csvTable) where(t testing.TB, column, by, equals string) []float64 {
	t.Helper()
	var out []float64
	all, keys := d.numbers(t, column), d.text(t, by)
	for i, k := range keys {
		if k == equals {
			out = append(out, all[i])
		}
	}
	if len(out) == 0 {
		t.Fatalf("no row has %s = %q", by, equals)
	}
	return out
}

func readJSON(t testing.TB, file string, into any) {
	t.Helper()
	b, err := os.ReadFile(filepath.Join(referenceDir, file))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(b, into); err != nil {
		t.Fatalf("%s: %v", file, err)
	}
}

// analysed runs a method and stops the test where it reports a problem.
func analysed(t testing.TB, measure, method string, in Input) *Inference {
	t.Helper()
	inf, bad := Analyse(measure, method, in)
	if bad != nil {
		t.Fatalf("%s %s: %s %s", measure, method, bad.Code, fmt.Sprintf(bad.Message, bad.Args...))
	}
	return inf
}

// refused runs a method and demands a problem of this code.
func refused(t reporter, code, measure, method string, in Input) {
	t.Helper()
	inf, bad := Analyse(measure, method, in)
	switch {
	case bad == nil:
		t.Errorf("%s %s: estimate %v where %s was due", measure, method, inf.Estimate, code)
	case bad.Code != code:
		t.Errorf("%s %s: %s (%s) where %s was due", measure, method, bad.Code, fmt.Sprintf(bad.Message, bad.Args...), code)
	}
}

// hasNote demands a note of this code, or with want false its absence.
func hasNote(t reporter, inf *Inference, code string, want bool) {
	t.Helper()
	got := false
	for _, n := range inf.Notes {
		got = got || n.Code == code
	}
	if got != want {
		t.Errorf("note %s: %v, want %v (notes %v)", code, got, want, inf.Notes)
	}
}
