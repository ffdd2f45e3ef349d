package page

// Drawing is a vector picture in points (1/72 inch), origin at the upper left.
// A figure is drawn as wide as the text block unless it says otherwise.
type Drawing struct {
	Width, Height float64
	Marks         []Mark
}

// Mark is one of the types below, drawn in order.
type Mark interface{ mark() }

// Ink is a colour that stays apart in grey print. The palette is closed.
type Ink uint8

// The palette.
const (
	Black  Ink = iota
	Slate      // secondary text, axes
	Mist       // hairlines
	Paper      // white
	Band       // the region too small to matter
	Accent     // what decides
	Warn       // contradicted, cautions
	Faint      // shown, not analysed
)

// Stroke is how a line is drawn.
type Stroke struct {
	Ink   Ink
	Width float64
	Dash  []float64 // empty: solid
}

// Line is a straight line.
type Line struct {
	X1, Y1, X2, Y2 float64
	Stroke         Stroke
}

// Polyline is an open line through points.
type Polyline struct {
	X, Y   []float64
	Stroke Stroke
}

// Polygon is a closed filled shape.
type Polygon struct {
	X, Y    []float64
	Fill    Ink
	Outline *Stroke
}

// Rect is a filled rectangle.
type Rect struct {
	X, Y, W, H float64
	Fill       Ink
	Outline    *Stroke
}

// Disc is a filled circle.
type Disc struct {
	X, Y, R float64
	Fill    Ink
	Outline *Stroke
}

// Anchor is where a label's X stands.
type Anchor uint8

// The anchors.
const (
	Start Anchor = iota
	Middle
	End
)

// Label is text on one line; Y is its baseline.
type Label struct {
	X, Y   float64
	Text   string
	Size   float64
	Ink    Ink
	Bold   bool
	Anchor Anchor
}

func (Line) mark()     {}
func (Polyline) mark() {}
func (Polygon) mark()  {}
func (Rect) mark()     {}
func (Disc) mark()     {}
func (Label) mark()    {}
