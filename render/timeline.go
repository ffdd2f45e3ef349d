package render

import (
	"steelyard/protocol/record"
)

// instant writes an offset date-time as it was written, to the minute.
func instant(t record.Instant) string {
	if !t.Stated {
		return ""
	}
	return t.V.Format("2006-01-02 15:04 -07:00")
}

// timeline prints one order of approvals, seals, results, looks, decisions
// and changes.
func (c *composer) timeline() {
	if len(c.res.Timeline) == 0 {
		return
	}
	c.heading(1, "Timeline", "timeline")
	c.add2(c.timelineFigure())
	t := newTable("", "When", "What", "Kind", "Order")
	for _, e := range c.res.Timeline {
		order := e.Order
		if order == "unproven" {
			order = "order cannot be proved"
		}
		t.row(e.At, e.What, e.Kind, order)
	}
	t.to(c)
	c.witnesses()
}
