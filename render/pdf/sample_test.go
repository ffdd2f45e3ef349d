package pdf

import (
	"math"

	"steelyard/render/page"
)

// beam is a small interval figure like those of page one. The numbers are
// invented.
func beam(low, est, high float64, tone page.Ink) *page.Drawing {
	d := &page.Drawing{Width: 420, Height: 62}
	at := func(v float64) float64 { return 30 + (v+3)/8*360 }
	d.Marks = append(d.Marks,
		page.Rect{X: at(-1), Y: 12, W: at(1) - at(-1), H: 26, Fill: page.Band},
		page.Line{X1: 30, Y1: 38, X2: 390, Y2: 38, Stroke: page.Stroke{Ink: page.Slate, Width: 1.2}},
		page.Line{X1: at(0), Y1: 12, X2: at(0), Y2: 38, Stroke: page.Stroke{Ink: page.Slate, Width: 0.6, Dash: []float64{2, 2}}},
		page.Line{X1: at(low), Y1: 25, X2: at(high), Y2: 25, Stroke: page.Stroke{Ink: tone, Width: 1.6}},
		page.Disc{X: at(est), Y: 25, R: 3.6, Fill: tone, Outline: &page.Stroke{Ink: page.Paper, Width: 0.8}},
	)
	for v := -3.0; v <= 5; v++ {
		d.Marks = append(d.Marks,
			page.Line{X1: at(v), Y1: 38, X2: at(v), Y2: 41, Stroke: page.Stroke{Ink: page.Slate, Width: 0.6}},
			page.Label{X: at(v), Y: 50, Text: numeral(int(v)), Size: 7.5, Ink: page.Slate, Anchor: page.Middle})
	}
	d.Marks = append(d.Marks,
		page.Label{X: 30, Y: 59, Text: "← worse", Size: 7.5, Ink: page.Slate},
		page.Label{X: 210, Y: 60, Text: "difference in yield, kg", Size: 7.5, Ink: page.Black, Bold: true, Anchor: page.Middle},
		page.Label{X: 390, Y: 59, Text: "better →", Size: 7.5, Ink: page.Slate, Anchor: page.End})
	return d
}

func numeral(v int) string {
	if v < 0 {
		return "−" + string(rune('0'-v))
	}
	return string(rune('0' + v))
}

// curve is a figure with every kind of mark.
func curve() *page.Drawing {
	d := &page.Drawing{Width: 460, Height: 170}
	var x, y []float64
	for i := range 121 {
		v := float64(i)/20 - 3
		x = append(x, 40+float64(i)*3.3)
		y = append(y, 140-120*math.Exp(-v*v/2))
	}
	px := append(append([]float64(nil), x[40:81]...), x[80], x[40])
	py := append(append([]float64(nil), y[40:81]...), 140, 140)
	d.Marks = []page.Mark{
		page.Polygon{X: px, Y: py, Fill: page.Band},
		page.Polyline{X: x, Y: y, Stroke: page.Stroke{Ink: page.Accent, Width: 1.4}},
		page.Line{X1: 40, Y1: 140, X2: 440, Y2: 140, Stroke: page.Stroke{Ink: page.Black, Width: 0.8}},
		page.Rect{X: 236, Y: 16, W: 5, H: 5, Fill: page.Warn, Outline: &page.Stroke{Ink: page.Black, Width: 0.5}},
		page.Polygon{X: []float64{100, 106, 100, 94}, Y: []float64{128, 134, 140, 134}, Fill: page.Faint, Outline: &page.Stroke{Ink: page.Slate, Width: 0.5}},
		page.Label{X: 240, Y: 158, Text: "mean difference μ₁ − μ₂", Size: 8, Ink: page.Slate, Anchor: page.Middle},
		page.Label{X: 36, Y: 24, Text: "p", Size: 8, Ink: page.Slate, Anchor: page.End},
	}
	return d
}

const digest = "9f86d081884c7d659a2feaa0c55ad015a3bf4f1b2b0b822cd15d6c15b0f00a08"

// sample holds every block and inline, several pages of them. All of it is
// invented.
func sample() *page.Document {
	t := page.T
	doc := &page.Document{
		Title: "Does coarse mulch raise the yield of early beans?", Subject: "Invented example", Authors: []string{"Plot statistician", "Field lead"},
		Language: "en", Paper: "a4", Created: "2026-03-14T09:30:00Z", Status: "draft",
		Header: "Does coarse mulch raise the yield of early beans?",
		Footer: []string{"BEAN-07 version 3", "sha256 9f86d081 884c7d65", "internal"},
		Attachments: []page.Attachment{
			{Name: "beans.toml", Media: "application/toml", Description: "The record", Relation: "Source", Modified: "2026-03-14T09:30:00Z", Bytes: []byte("title = \"beans\"\n")},
			{Name: "Ernte-Übersicht.csv", Media: "text/csv", Description: "Yield per plot", Relation: "Data", Bytes: []byte("plot,group,kg\n1,mulch,4.2\n2,bare,3.9\n")},
			{Name: "result.json", Media: "application/json", Description: "The result in full precision", Relation: "Supplement", Bytes: []byte("{}\n")},
		},
		Keywords: []string{"invented", "example"},
	}
	add := func(bs ...page.Block) { doc.Blocks = append(doc.Blocks, bs...) }
	add(page.Heading{Level: 0, Text: t("Does coarse mulch raise the yield of early beans?")},
		page.Paragraph{Style: page.Lead, Text: t("Two groups of plots, drawn by lot, compared by the mean yield per plot after nine weeks.")},
		page.Facts{Columns: 2, Items: []page.Fact{
			{Label: "Status", Value: []page.Inline{page.Strong("draft"), page.Text(", complete data")}},
			{Label: "Number", Value: t("BEAN-07, version 3")},
			{Label: "Date", Value: t("14 March 2026")},
			{Label: "Setting", Value: t("agriculture; invented data")},
			{Label: "Record", Value: []page.Inline{page.Code("sha256 " + digest)}},
			{Label: "Seal", Value: t("sealed on 2 January 2026, before the first result; 1 change since, declared")},
			{Label: "Planned", Value: t("60 plots a group")},
			{Label: "Analysed", Value: t("58 with mulch, 57 bare; 5 missing")},
		}},
		page.Verdict{Name: "H1", Word: "ESTABLISHED", Tone: page.Established,
			Claim:   t("Coarse mulch raises the mean yield per plot."),
			Answer:  t("+1.9 kg (95% confidence interval 0.4 to 3.4 kg)"),
			Reading: t("All values in the interval lie above zero; values inside the region too small to matter remain compatible with the data."),
			Region:  t("Differences within ±1 kg are held to be too small to matter, since one plot's picking error is about 0.8 kg."),
			Figure:  &page.Figure{Alt: "Interval from 0.4 to 3.4 kg with the estimate 1.9 kg; the band from −1 to 1 kg is too small to matter.", Drawing: beam(0.4, 1.9, 3.4, page.Accent)},
		},
		page.Verdict{Name: "H2", Word: "OPEN", Qualify: "unadjusted", Tone: page.Open,
			Claim:   t("The share of marketable pods differs by less than five points."),
			Answer:  t("−0.6 points (90% confidence interval −2.6 to 4.1 points)"),
			Reading: t("The interval reaches beyond the margin on one side, so differences of up to 4.1 points remain compatible with the data."),
			Region:  t("The margin is the smallest difference a buyer would price."),
			Figure:  &page.Figure{Alt: "Interval from −2.6 to 4.1 points.", Drawing: beam(-2.6, 0.6, 4.1, page.Black)},
		},
		page.Verdict{Name: "H3", Word: "CONTRADICTED", Qualify: "post hoc", Tone: page.Contradicted,
			Claim: t("Mulch halves the hours of weeding."), Answer: t("−2 % (95% confidence interval −20 to 21 %)"),
			Reading: t("Halving lies outside the interval.")},
		page.Verdict{Name: "H4", Word: "PENDING", Tone: page.Neutral,
			Claim: t("Mulch does not raise the count of slugs by more than a tenth."), Reading: t("The second count is not in.")},
		page.Callout{Kind: page.Caution, Title: "What this record does not say", Blocks: []page.Block{
			page.Paragraph{Text: t("It supports and does not replace the judgement of those responsible, and defers to the rules that apply on the site.")}}},
	)
	add(page.PageBreak{}, page.Heading{Level: 1, Text: t("What arrived"), Anchor: "arrived"},
		page.Paragraph{Text: []page.Inline{
			page.Text("Three results came in. The weight of a plot is "), page.Emph("w"), page.Sub("i"), page.Text(" = 1/(SE"), page.Sub("i"), page.Sup("2"),
			page.Text(" + τ²), the heterogeneity "), page.Emph("I"), page.Text("² is 31%, and the mean x̄ of the plots was "), page.Strong("4.21 kg"),
			page.Text(" at a rate of 3·10⁻⁹. The key "), page.Code("results.yield.file"), page.Text(" names the file; the "), page.Link{Text: "analysis of each hypothesis", Target: "#analysis"},
			page.Text(" follows, and the method is described at "), page.Link{Text: "example.org/méthode", Target: "https://example.org/méthode?a=1&b=(2)"}, page.Text("."),
		}},
		page.Table{Caption: []page.Inline{page.Strong("Table 1. "), page.Text("Studies and what they say of the yield")},
			Columns: []page.Column{{}, {}, {Align: page.Right}, {Align: page.Decimal}, {Align: page.Decimal}, {Align: page.Center}, {}},
			Head:    [][]page.Inline{t("Study"), t("Date"), t("Plots"), t("Difference, kg"), t("p"), t("95% interval"), t("Use")},
			Rows: []page.Row{
				{Cells: [][]page.Inline{t("North field"), t("2026-02-01"), t("60"), t("1.94"), t("0.012"), t("0.4 to 3.4"), t("analysed")}},
				{Cells: [][]page.Inline{t("South field, replanted after the frost of the second week"), t("2026-02-09"), t("1,155"), t("−10.5"), t("< 0.001"), t("−12.1 to −8.9"), t("analysed")}},
				{Grey: true, Cells: [][]page.Inline{t("Glasshouse"), t("2026-02-11"), t("14"), t("0.3"), t("not given"), t("—"), t("left out: not drawn by lot")}},
				{Strong: true, Cells: [][]page.Inline{t("All analysed"), nil, t("1,215"), t("1.2"), t("0.031"), t("0.1 to 2.3"), t("decides")}},
			},
			Notes: t("Differences are mulch minus bare; greater is better. The glasshouse is shown and not analysed."),
		},
		page.Heading{Level: 2, Text: t("Files and exclusions")},
		page.Facts{Columns: 1, Items: []page.Fact{
			{Label: "beans.csv", Value: []page.Inline{page.Code(digest)}},
			{Label: "Rows dropped", Value: t("3 of 118: two without a weight, one outside the period")},
			{Label: "Lost", Value: t("2 plots with mulch and 3 bare, after the storm")},
		}},
		page.Paragraph{Style: page.Quote, Text: t("We will read the mean difference only after both fields are picked, and we will not look before.")},
		page.Callout{Kind: page.Note, Title: "On the digests", Blocks: []page.Block{page.List{Items: [][]page.Inline{t("Each digest is of the file as read."), t("A file that has changed since gives another.")}}}},
	)
	add(page.Heading{Level: 1, Text: t("The analysis of each hypothesis"), Anchor: "analysis"},
		page.Heading{Level: 2, Text: t("H1: yield")}, page.Heading{Level: 3, Text: t("The p-value function")},
		page.Paragraph{Text: t("Each value of the difference has a p-value; those above 0.05 form the 95% interval. A curve that is narrow says the data are many; where it stands says what they are compatible with.")},
		page.Figure{Caption: []page.Inline{page.Strong("Figure 1. "), page.Text("p-value function of the mean difference")}, Alt: "A bell-shaped curve centred on 1.9 kg.", Drawing: curve()},
		page.List{Ordered: true, Items: [][]page.Inline{
			t("The plots were drawn by lot within rows, so neighbouring plots share soil and light and the comparison is made within rows first and over rows second."),
			{page.Text("The variances were not held equal ("), page.Emph("df"), page.Text(" = 97.3).")}, t("No plot was weighed twice.")}},
		longTable(),
		page.Callout{Kind: page.Warning, Title: "One file has changed", Blocks: []page.Block{
			page.Paragraph{Text: t("The digest of weeds.csv is not the one in the seal.")}, page.Verbatim{Lines: []string{"sealed  " + digest, "now     " + digest[8:] + "00000000"}}}},
		page.Heading{Level: 1, Text: t("How to reproduce this record")},
		page.Verbatim{Lines: []string{"$ steelyard verify beans.pdf", "\tsha256 " + digest + digest, "", "method = \"welch\"   # as sealed"}},
		page.PageBreak{},
		page.Heading{Level: 1, Text: t("Sign-off")},
		page.Signatures{Rows: []page.Signature{
			{Role: "Field lead", Name: "", Meaning: "The plots were treated as the plan says."},
			{Role: "Plot statistician", Name: "M. Example", Meaning: "The analysis is the one that was sealed."}},
			Note: t("A signature says what stands beside it and nothing more.")},
	)
	return doc
}

// longTable runs over a page's end.
func longTable() page.Table {
	tab := page.Table{Caption: []page.Inline{page.Strong("Table 2. "), page.Text("Plots")},
		Columns: []page.Column{{Share: 0.1}, {}, {Align: page.Decimal}, {Align: page.Decimal}, {}},
		Head:    [][]page.Inline{page.T("Plot"), page.T("Group"), page.T("Yield, kg"), page.T("Weeding, h"), page.T("Remark")}}
	groups := []string{"mulch", "bare"}
	for i := range 48 {
		remark := ""
		if i%11 == 3 {
			remark = "picked one day late, in the rain; weighed dry the day after and entered from the field book"
		}
		tab.Rows = append(tab.Rows, page.Row{Cells: [][]page.Inline{page.T(itoa(i + 1)), page.T(groups[i%2]), page.T(itoa(3+i%3) + "." + itoa(i*7%10)), page.T(itoa(i*3%14) + "." + itoa(i%4*25)), page.T(remark)}})
	}
	return tab
}

func itoa(v int) string {
	if v < 10 {
		return string(rune('0' + v))
	}
	return itoa(v/10) + string(rune('0'+v%10))
}
