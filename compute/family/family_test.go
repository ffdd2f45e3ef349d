package family

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"testing"

	"steelyard/compute/dist"
	"steelyard/compute/numeric"
)

// of makes a family of one-level members.
func of(proc Procedure, alpha float64, p ...float64) Family {
	f := Family{Procedure: proc}
	for _, v := range p {
		f.Members = append(f.Members, Member{P: dist.TailOf(v), Against: dist.TailOf(1), Alpha: alpha})
	}
	return f
}

func adjusted(t testing.TB, fs ...Family) []Result {
	t.Helper()
	r, faults := Adjust(fs)
	if len(faults) > 0 {
		t.Fatalf("faults: %+v", faults)
	}
	return r
}

func ps(r Result) []float64 {
	var out []float64
	for _, m := range r.Members {
		out = append(out, m.P.P)
	}
	return out
}

// differs says whether two lists of p-values differ by more than tol,
// relative.
func differs(a, b []float64, tol float64) bool {
	if len(a) != len(b) {
		return true
	}
	for i := range a {
		if !(math.Abs(a[i]-b[i]) <= tol*math.Abs(b[i])) {
			return true
		}
	}
	return false
}

func TestDiffersSeesDifferences(t *testing.T) {
	for _, c := range []struct {
		a, b []float64
		want bool
	}{
		{[]float64{0.1}, []float64{0.1}, false},
		{[]float64{0.1}, []float64{0.1 + 1e-9}, true},
		{[]float64{0.1}, []float64{0.1, 0.2}, true},
		{[]float64{math.NaN()}, []float64{0.1}, true},
	} {
		if differs(c.a, c.b, 1e-12) != c.want {
			t.Errorf("%v against %v: not %v", c.a, c.b, c.want)
		}
	}
}

type publishedRow struct {
	ID    string
	Input struct {
		P        []float64
		Alpha    float64
		Weights  []float64
		Transfer [][]float64
	}
	Expected      map[string]any
	Recomputed    map[string]any
	PrintedDigits map[string]int `json:"printed_digits"`
}

func published(t *testing.T, id string) publishedRow {
	t.Helper()
	text, err := os.ReadFile("../../testdata/reference/published.json")
	if err != nil {
		t.Fatal(err)
	}
	var raw []json.RawMessage
	if err := json.Unmarshal(text, &raw); err != nil {
		t.Fatal(err)
	}
	for _, m := range raw {
		var key struct{ ID string }
		if json.Unmarshal(m, &key) == nil && key.ID == id {
			var r publishedRow
			if err := json.Unmarshal(m, &r); err != nil {
				t.Fatal(err)
			}
			return r
		}
	}
	t.Fatalf("no row %q", id)
	return publishedRow{}
}

// The rows mult-* of published.json: adjusted values and counts from the
// literature, further values by R 4.2.2 p.adjust ("recomputed").
func TestPublishedAdjustments(t *testing.T) {
	for _, id := range []string{"mult-bh1995", "mult-hypertension-1", "mult-hypertension-3"} {
		row := published(t, id)
		checked := 0
		for _, proc := range []Procedure{Bonferroni, Holm, Hochberg, Hommel} {
			r := adjusted(t, of(proc, row.Input.Alpha, row.Input.P...))[0]
			count := 0.0
			for i, m := range r.Members {
				if m.Established {
					count++
				}
				key := fmt.Sprintf("%s_%d", proc, i+1)
				if want, ok := row.Recomputed[key].(float64); ok {
					checked++
					if math.Abs(m.P.P-want) > 1e-12 {
						t.Errorf("%s %s: %v, R gives %v", id, key, m.P.P, want)
					}
				}
				if want, ok := row.Expected[key].(float64); ok {
					checked++
					if math.Abs(m.P.P-want) > 0.5*math.Pow10(-row.PrintedDigits[key])+1e-12 {
						t.Errorf("%s %s: %v, printed %v", id, key, m.P.P, want)
					}
				}
			}
			if want, ok := row.Recomputed["rejected_"+string(proc)].(float64); ok {
				checked++
				if count != want {
					t.Errorf("%s: %s establishes %v, want %v", id, proc, count, want)
				}
			}
		}
		if checked < 8 {
			t.Errorf("%s: only %d values checked", id, checked)
		}
	}
}

// Bretz et al. (2009), the successive graph; adjusted values by two other
// algorithms, see the row.
func TestPublishedGraph(t *testing.T) {
	row := published(t, "mult-graph-4")
	f := of(Graph, row.Input.Alpha, row.Input.P...)
	f.Weights, f.Transfer = row.Input.Weights, row.Input.Transfer
	r := adjusted(t, f)[0]
	var want []float64
	for i := range 4 {
		want = append(want, row.Recomputed[fmt.Sprintf("adj_%d", i+1)].(float64))
	}
	if differs(ps(r), want, 1e-12) {
		t.Errorf("%v, want %v", ps(r), want)
	}
	for i, m := range r.Members {
		if m.Established != (i < 2) {
			t.Errorf("H%d established: %v", i+1, m.Established)
		}
	}
	// The path: H2 at α/2, then H1 with what H2 hands on, then H3 and H4 with
	// a half each (worked by hand from the graph).
	type step struct {
		member   int
		level    float64
		rejected bool
	}
	var got []step
	for _, s := range r.Path {
		got = append(got, step{s.Member, s.Level, s.Rejected})
	}
	wantPath := []step{{1, 0.0125, true}, {0, 0.01875, true}, {2, 0.0125, false}, {3, 0.0125, false}}
	if len(got) != len(wantPath) {
		t.Fatalf("path %+v", got)
	}
	for i := range got {
		if got[i].member != wantPath[i].member || got[i].rejected != wantPath[i].rejected || math.Abs(got[i].level-wantPath[i].level) > 1e-15 {
			t.Errorf("step %d: %+v, want %+v", i, got[i], wantPath[i])
		}
	}
}

func TestPublishedFixedSequence(t *testing.T) {
	row := published(t, "mult-fixed-sequence")
	r := adjusted(t, of(FixedSequence, row.Input.Alpha, row.Input.P...))[0]
	if differs(ps(r), []float64{0.01, 0.06, 0.06}, 1e-13) {
		t.Errorf("%v", ps(r))
	}
	if m := r.Members[2]; m.Tested || m.Established || !r.Members[1].Tested {
		t.Errorf("the third must not be reached: %+v", r.Members)
	}
}

// R 4.2.2, p.adjust(c(.01,.02,.022,.04,.3), "hommel"), 2026-12-01.
func TestHommelAgainstR(t *testing.T) {
	r := adjusted(t, of(Hommel, 0.05, 0.01, 0.02, 0.022, 0.04, 0.3))[0]
	if differs(ps(r), []float64{0.04, 0.06, 0.06, 0.08, 0.30}, 1e-13) {
		t.Errorf("%v", ps(r))
	}
}

// intersections calls f with the sets of members that hold i.
func intersections(m, i int, f func(set int)) {
	for set := 1; set < 1<<m; set++ {
		if set>>i&1 == 1 {
			f(set)
		}
	}
}

// simes is the closed test's p of one intersection.
func simes(p []float64, set int) float64 {
	var q []float64
	for i, v := range p {
		if set>>i&1 == 1 {
			q = append(q, v)
		}
	}
	best := 1.0
	for i := range q {
		rank := 0
		for j := range q {
			if q[j] < q[i] || q[j] == q[i] && j <= i {
				rank++
			}
		}
		best = min(best, q[i]*float64(len(q))/float64(rank))
	}
	return best
}

// weightsOf are the weights of an intersection: members outside the set are
// dropped from the graph one after another; written apart from the package's
// own updates, on the full matrix.
func weightsOf(w []float64, g [][]float64, set int) []float64 {
	m := len(w)
	w = append([]float64(nil), w...)
	h := make([][]float64, m)
	for i := range h {
		h[i] = append([]float64(nil), g[i]...)
	}
	in := make([]bool, m)
	for i := range in {
		in[i] = true
	}
	for j := range m {
		if set>>j&1 == 1 {
			continue
		}
		in[j] = false
		next := make([][]float64, m)
		for l := range m {
			next[l] = make([]float64, m)
			for k := range m {
				if in[l] && in[k] && l != k && h[l][j]*h[j][l] < 1 {
					next[l][k] = (h[l][k] + h[l][j]*h[j][k]) / (1 - h[l][j]*h[j][l])
				}
			}
			if in[l] {
				w[l] += w[j] * h[j][l]
			}
		}
		h = next
	}
	return w
}

// Brute force: a member's adjusted p is the largest, over all intersections
// that hold it, of the intersection's p.
func closed(m int, local func(set int) float64) []float64 {
	out := make([]float64, m)
	for i := range m {
		intersections(m, i, func(set int) { out[i] = max(out[i], local(set)) })
		out[i] = min(out[i], 1)
	}
	return out
}

func randomP(s *numeric.Stream, m int) []float64 {
	p := make([]float64, m)
	for i := range p {
		p[i] = math.Pow(s.Uniform(), 3)
		if s.IntN(6) == 0 && i > 0 {
			p[i] = p[i-1] // ties
		}
	}
	return p
}

func TestGraphIsTheClosedTest(t *testing.T) {
	s := numeric.NewStream("test", 1, "graphs", 0)
	for trial := range 300 {
		m := 2 + s.IntN(5)
		p := randomP(s, m)
		f := of(Graph, 0.05, p...)
		f.Weights = make([]float64, m)
		f.Transfer = make([][]float64, m)
		total := 0.0
		for i := range m {
			f.Transfer[i] = make([]float64, m)
			sum := 0.0
			for j := range m {
				if j != i && s.IntN(3) > 0 {
					f.Transfer[i][j] = s.Uniform()
					sum += f.Transfer[i][j]
				}
			}
			for j := range m {
				if sum > 0 {
					f.Transfer[i][j] /= sum
				}
			}
			if s.IntN(4) > 0 || i == 0 {
				f.Weights[i] = s.Uniform()
				total += f.Weights[i]
			}
		}
		for i := range m {
			f.Weights[i] /= total
		}
		want := closed(m, func(set int) float64 {
			w := weightsOf(f.Weights, f.Transfer, set)
			best := 1.0
			for i := range m {
				if set>>i&1 == 1 && w[i] > 0 {
					best = min(best, p[i]/w[i])
				}
			}
			return best
		})
		if got := ps(adjusted(t, f)[0]); differs(got, want, 1e-9) {
			t.Fatalf("graph %d: %v, closed test %v (w %v, g %v, p %v)", trial, got, want, f.Weights, f.Transfer, p)
		}
	}
}

func TestStepProceduresAgainstTheClosedTest(t *testing.T) {
	s := numeric.NewStream("test", 2, "steps", 0)
	for range 300 {
		m := 1 + s.IntN(6)
		p := randomP(s, m)
		bonf := closed(m, func(set int) float64 {
			n, least := 0, 1.0
			for i := range m {
				if set>>i&1 == 1 {
					n++
					least = min(least, p[i])
				}
			}
			return min(1, float64(n)*least)
		})
		sim := closed(m, func(set int) float64 { return simes(p, set) })
		holm, hommel, hochberg := ps(adjusted(t, of(Holm, 0.05, p...))[0]), ps(adjusted(t, of(Hommel, 0.05, p...))[0]), ps(adjusted(t, of(Hochberg, 0.05, p...))[0])
		if differs(holm, bonf, 1e-12) {
			t.Fatalf("holm %v, closed %v", holm, bonf)
		}
		if differs(hommel, sim, 1e-12) {
			t.Fatalf("hommel %v, closed %v", hommel, sim)
		}
		for i := range m {
			if hommel[i] > hochberg[i]*(1+1e-12) || hochberg[i] > holm[i]*(1+1e-12) || hommel[i] < p[i]*(1-1e-12) {
				t.Fatalf("order broken: p %v hommel %v hochberg %v holm %v", p, hommel, hochberg, holm)
			}
		}
	}
}

// Established by the adjusted value, by the path and by a level that is just
// enough must be the same thing, for every procedure.
func TestPathAgreesWithAdjustedValues(t *testing.T) {
	s := numeric.NewStream("test", 3, "path", 0)
	for range 400 {
		m := 1 + s.IntN(5)
		for _, proc := range Procedures() {
			f := of(proc, 0.05, randomP(s, m)...)
			if proc == Graph {
				f.Transfer = make([][]float64, m)
				for i := range m {
					f.Transfer[i] = make([]float64, m)
					f.Transfer[i][(i+1)%m] = 0.75
					f.Transfer[i][i] = 0
				}
			}
			r := adjusted(t, f)[0]
			byPath := map[int]bool{}
			for _, st := range r.Path {
				if st.Rejected {
					byPath[st.Member] = true
				}
			}
			for i, a := range r.Members {
				if a.Established != (a.P.P < 0.05) {
					t.Fatalf("%s: established %v at %v", proc, a.Established, a.P.P)
				}
				if proc == Hochberg {
					continue // the path stops at the first success
				}
				if a.Established != byPath[i] {
					t.Fatalf("%s: member %d established %v, path %+v", proc, i, a.Established, r.Path)
				}
				// the raw p and the local level tell the same
				if proc != Graph && a.Tested && a.Established != (f.Members[i].P.P < a.Level) && math.Abs(f.Members[i].P.P/a.Level-1) > 1e-9 {
					t.Fatalf("%s: p %v, level %v, established %v", proc, f.Members[i].P.P, a.Level, a.Established)
				}
			}
		}
	}
}

func BenchmarkAdjust(b *testing.B) {
	s := numeric.NewStream("bench", 1, "", 0)
	for _, m := range []int{3, 20} {
		p := make([]float64, m)
		for i := range p {
			p[i] = s.Uniform() / 20
		}
		for _, proc := range []Procedure{Bonferroni, Holm, Hommel, Fallback} {
			fs := []Family{of(proc, 0.05, p...)}
			b.Run(fmt.Sprintf("%s%d", proc, m), func(b *testing.B) {
				b.ReportAllocs()
				for b.Loop() {
					Adjust(fs)
				}
			})
		}
	}
}
