package compute

import (
	"fmt"
	"sort"
	"strings"

	"steelyard/compute/result"
	"steelyard/protocol/record"
	"steelyard/protocol/seal"
)

// timeline gathers what happened, in order. Dates without a time of day come
// before instants of the same day, and say that their order is not proved.
func (r *run) timeline() {
	rec := r.rec
	var all []result.Event
	day := func(d record.Date, kind, what string) {
		if !d.IsZero() {
			all = append(all, result.Event{At: d.String(), Sort: d.String(), Kind: kind, What: what})
		}
	}
	if b := rec.Head.Ethics; b != nil {
		day(b.Date.V, "ethics", strings.TrimSpace(b.Body.V+" "+b.Number.V))
	}
	if b := rec.Head.Registry; b != nil {
		day(b.Date.V, "registry", strings.TrimSpace(b.Body.V+" "+b.Number.V))
	}
	for _, list := range [][]*record.Result{rec.Earlier, rec.Results} {
		for _, res := range list {
			what := res.Study.V + ", " + res.Outcome.V
			if res.Known.Stated {
				all = append(all, instant(res.Known, "result", what))
			} else {
				day(res.Day(), "result", what)
			}
		}
	}
	if r.in.Seal != nil {
		for _, e := range r.in.Seal.Entries {
			all = append(all, result.Event{At: e.Time.Format("2006-01-02 15:04 UTC"), Sort: e.Time.UTC().Format(sortable), Kind: "seal", What: fmt.Sprintf("seal %d of the plan", e.Number)})
		}
	}
	for _, d := range rec.Deviations {
		day(d.Date.V, "deviation", d.What.V)
		if d.Approved != nil {
			day(d.Approved.Date.V, "approval", fmt.Sprintf("of the deviation, by %s", d.Approved.By.V))
		}
	}
	for i, w := range rec.Witnesses {
		if s := r.in.Seal; s != nil && i < len(s.Witnesses) && s.Witnesses[i].Outcome == seal.Verified {
			at := s.Witnesses[i].At
			all = append(all, result.Event{At: at.Format("2006-01-02 15:04 UTC"), Sort: at.Format(sortable), Kind: "witness", What: fmt.Sprintf("of seal %d: time stamp of %s", w.Seal.V, s.Witnesses[i].Authority)})
			continue
		}
		if w.At.Stated {
			all = append(all, instant(w.At, "witness", strings.TrimSpace(fmt.Sprintf("of seal %d: %s %s", w.Seal.V, w.What.V, w.Reference.V))))
		}
	}
	for _, d := range rec.Decisions {
		all = append(all, instant(d.At, "decision", d.Body.V+": "+d.What.V))
	}
	for _, a := range rec.Approvals {
		all = append(all, instant(a.At, "approval", strings.TrimSpace(a.Role.V+" "+a.Meaning.V)))
	}
	sort.SliceStable(all, func(i, j int) bool { return all[i].Sort < all[j].Sort })
	unprovable(all)
	r.res.Timeline = append(r.res.Timeline, all...)
}

// unprovable marks, in a sorted timeline, what shares its day with something
// else while one of the two has no time of day.
func unprovable(all []result.Event) {
	for i := 0; i < len(all); {
		day, j, timeless := all[i].Sort[:10], i, 0
		for ; j < len(all) && all[j].Sort[:10] == day; j++ {
			if len(all[j].Sort) == 10 {
				timeless++
			}
		}
		if timeless > 0 && j-i > 1 {
			for k := i; k < j; k++ {
				all[k].Order = "unproven"
			}
		}
		i = j
	}
}

// sortable orders instants of Greenwich as text.
const sortable = "2006-01-02T15:04:05.000000000"

func instant(at record.Instant, kind, what string) result.Event {
	return result.Event{At: at.V.Format("2006-01-02 15:04 -07:00"), Sort: at.V.UTC().Format(sortable), Kind: kind, What: what}
}
