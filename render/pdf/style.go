package pdf

import (
	"github.com/go-fonts/liberation/liberationmonobold"
	"github.com/go-fonts/liberation/liberationmonoregular"
	"github.com/go-fonts/liberation/liberationsansbold"
	"github.com/go-fonts/liberation/liberationsansitalic"
	"github.com/go-fonts/liberation/liberationsansregular"
	"github.com/go-fonts/liberation/liberationserifbold"
	"github.com/go-fonts/liberation/liberationserifitalic"
	"github.com/go-fonts/liberation/liberationserifregular"

	"steelyard/render/page"
)

// colour is 8-bit sRGB.
type colour struct{ r, g, b uint8 }

// ink maps the closed palette. In grey print neighbours differ by at least
// 20 of 255 steps of luma, which a test checks.
func ink(i page.Ink) colour {
	switch i {
	case page.Black:
		return colour{0x16, 0x19, 0x1d}
	case page.Slate:
		return colour{0x4f, 0x59, 0x64}
	case page.Mist:
		return colour{0xcb, 0xd1, 0xd7}
	case page.Paper:
		return colour{0xff, 0xff, 0xff}
	case page.Band:
		return colour{0xe3, 0xea, 0xf0}
	case page.Accent:
		return colour{0x10, 0x43, 0x6b}
	case page.Warn:
		return colour{0xb6, 0x58, 0x1c}
	case page.Faint:
		return colour{0x9a, 0xa3, 0xac}
	}
	return colour{}
}

// dim is the text of rows that are shown but not analysed: lighter than
// Slate, still readable.
var dim = colour{0x6a, 0x73, 0x7c}

// faceID names a face of the typecase.
type faceID uint8

const (
	sans faceID = iota
	sansBold
	sansItalic
	serif
	serifBold
	serifItalic
	mono
	monoBold
	extra // the user's
	faceCount
)

func faceBytes(id faceID) []byte {
	switch id {
	case sans:
		return liberationsansregular.TTF
	case sansBold:
		return liberationsansbold.TTF
	case sansItalic:
		return liberationsansitalic.TTF
	case serif:
		return liberationserifregular.TTF
	case serifBold:
		return liberationserifbold.TTF
	case serifItalic:
		return liberationserifitalic.TTF
	case mono:
		return liberationmonoregular.TTF
	case monoBold:
		return liberationmonobold.TTF
	case extra, faceCount:
	}
	return nil
}

// family is the set of faces a text style draws its inlines from.
type family struct{ regular, bold, italic faceID }

var (
	sansFamily  = family{sans, sansBold, sansItalic}
	serifFamily = family{serif, serifBold, serifItalic}
	boldFamily  = family{sansBold, sansBold, sansBold}
)

// textStyle is how running text is set.
type textStyle struct {
	family  family
	size    float64
	leading float64 // baseline to baseline
	colour  colour
}

// The scale: one step is about a fifth.
var (
	bodyStyle    = textStyle{serifFamily, 10.3, 14.2, ink(page.Black)}
	leadStyle    = textStyle{serifFamily, 12.6, 17.2, ink(page.Black)}
	smallStyle   = textStyle{sansFamily, 8, 11.2, ink(page.Slate)}
	quoteStyle   = textStyle{serifFamily, 10.3, 14.2, ink(page.Black)}
	titleStyle   = textStyle{boldFamily, 19, 23.5, ink(page.Black)}
	h1Style      = textStyle{boldFamily, 13.4, 17.5, ink(page.Black)}
	h2Style      = textStyle{boldFamily, 10.6, 14, ink(page.Accent)}
	h3Style      = textStyle{boldFamily, 9.2, 12.6, ink(page.Slate)}
	tableStyle   = textStyle{sansFamily, 8.4, 11.4, ink(page.Black)}
	headStyle    = textStyle{boldFamily, 7.8, 10.6, ink(page.Slate)}
	captionStyle = textStyle{sansFamily, 8.8, 12, ink(page.Black)}
	labelStyle   = textStyle{sansFamily, 8.2, 11.6, ink(page.Slate)}
	valueStyle   = textStyle{sansFamily, 8.8, 11.6, ink(page.Black)}
	runStyle     = textStyle{sansFamily, 7.2, 9.6, ink(page.Slate)}
)

// sheet is the paper and its margins, in points.
type sheet struct{ width, height, left, right, top, bottom float64 }

// sheetOf leaves 480 points between the margins on both papers, the width
// figures are drawn for.
func sheetOf(paper string) sheet {
	s := sheet{width: 595.28, height: 841.89, top: 72, bottom: 70}
	if paper == "letter" {
		s = sheet{width: 612, height: 792, top: 66, bottom: 66}
	}
	s.left = (s.width - 480) / 2
	s.right = s.left
	return s
}

func (s sheet) measure() float64 { return s.width - s.left - s.right }
func (s sheet) depth() float64   { return s.height - s.top - s.bottom }

// readable is the widest a line of running text is set, about 95 characters.
const readable = 424
