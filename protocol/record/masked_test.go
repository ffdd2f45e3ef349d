package record

import "testing"

func text(s string) String { return String{V: s, Stated: true} }

func TestMasked(t *testing.T) {
	base := func() *Record {
		return &Record{
			Plan: Plan{
				Hypotheses: []*Hypothesis{
					{Named: Named{Name: "H1"}, Outcome: text("pain")},
					{Named: Named{Name: "H2"}, Outcome: text("sleep")},
				},
				Looks: &Looks{Hypotheses: Strings{V: []String{text("H1")}, Stated: true}, Masked: Bool{V: true}},
			},
			Results: []*Result{{Outcome: text("pain")}, {Outcome: text("sleep")}},
			Earlier: []*Result{{Outcome: text("pain")}},
		}
	}
	tests := []struct {
		name   string
		change func(*Record)
		want   [2]bool
	}{
		{"covered outcome only", func(*Record) {}, [2]bool{true, false}},
		{"no looks", func(r *Record) { r.Plan.Looks = nil }, [2]bool{}},
		{"turned off", func(r *Record) { r.Plan.Looks.Masked = Bool{Stated: true} }, [2]bool{}},
		{"no hypothesis named covers all", func(r *Record) { r.Plan.Looks.Hypotheses = Strings{} }, [2]bool{true, true}},
		{"numbered look opens", func(r *Record) {
			r.Results = append(r.Results, &Result{Outcome: text("pain"), Look: Look{Stated: true, Number: 1}})
		}, [2]bool{}},
		{"look of another outcome opens nothing", func(r *Record) {
			r.Results = append(r.Results, &Result{Outcome: text("sleep"), Look: Look{Stated: true, Number: 1}})
		}, [2]bool{true, false}},
		{"unplanned look opens nothing else", func(r *Record) {
			r.Results = append(r.Results, &Result{Outcome: text("pain"), Look: Look{Stated: true, Unplanned: true}})
		}, [2]bool{true, false}},
		{"the entry is itself a look", func(r *Record) {
			r.Results[0].Look = Look{Stated: true, Unplanned: true}
		}, [2]bool{}},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			rec := base()
			tt.change(rec)
			for i := range tt.want {
				if got := rec.Masked(rec.Results[i]); got != tt.want[i] {
					t.Errorf("result %d: masked %v, want %v", i, got, tt.want[i])
				}
			}
			if rec.Masked(rec.Earlier[0]) {
				t.Error("an earlier result is masked")
			}
		})
	}
	if (&Record{}).Masked(nil) {
		t.Error("nil entry is masked")
	}
}
