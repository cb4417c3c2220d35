// Package chart draws an estimate document: the same drawing on a page, in a
// file and in a report.
//
//	Document → Curve, Categories, Tonnage → Drawing (paths, dots, texts in named inks)
//	Drawing → SVG (inks become CSS variables, so that a page themes it)
//	Drawing → any other canvas: its shapes are plain data
//
// The shapes are written here, without a plotting library: what matters is where
// the labels stand when values lie close together, that every text stays text,
// and that the bytes are the same on every machine; a library helps with none of
// the three. Percentiles and amounts are shown to three significant figures.
package chart

import "spanwright/estimate/document"

// Ink names a colour by its role. The page, not the drawing, knows its value.
type Ink string

// The inks. None leaves a stroke or a fill out.
const (
	None   Ink = ""
	Text   Ink = "ink"    // text and marks
	Muted  Ink = "muted"  // secondary text
	Rule   Ink = "rule"   // axes and grid
	Accent Ink = "accent" // the curve, the bars
	Soft   Ink = "soft"   // tints behind the accent
	Base   Ink = "base"   // the base estimate
	Budget Ink = "budget" // the requested budget
	Paper  Ink = "paper"  // the ground that a label is cut out of
)

// Point is a place on the drawing in its own units, x to the right, y down.
type Point struct{ X, Y float64 }

// Shape is a Path, a Dot or a Label.
type Shape interface{ shape() }

// Path is a polyline through at least two points, closed and filled on request.
type Path struct {
	Points []Point
	Closed bool
	Stroke Ink
	Fill   Ink
	Width  float64   // of the stroke
	Dash   []float64 // lengths drawn and left out in turn; empty is solid
}

// Dot is a filled circle.
type Dot struct {
	Centre Point
	Radius float64
	Fill   Ink
	Stroke Ink
}

// Anchor says which part of a label stands at its point.
type Anchor string

// The anchors.
const (
	Start  Anchor = "start"
	Middle Anchor = "middle"
	End    Anchor = "end"
)

// Label is one line of text on its baseline.
type Label struct {
	At     Point
	Text   string
	Size   float64 // of the font
	Anchor Anchor
	Ink    Ink
	Bold   bool
	Halo   bool // cut out of what lies below it
}

func (Path) shape()  {}
func (Dot) shape()   {}
func (Label) shape() {}

// Drawing is a finished picture: shapes in the order in which they are painted.
type Drawing struct {
	Width, Height float64
	Name          string // what it is: the prefix of its ids
	Title         string // shown on top and read out
	Description   string // the figures of the drawing in words
	Shapes        []Shape
}

// Font sizes and distances shared by the drawings.
const (
	width     = 760.0
	sizeTitle = 15.0
	sizeText  = 12.5
	margin    = 8.0
)

// newDrawing starts a drawing with its title in the top left corner.
func newDrawing(name, title string) *Drawing {
	d := &Drawing{Width: width, Name: name, Title: title}
	d.add(Label{At: Point{margin, 20}, Text: title, Size: sizeTitle, Anchor: Start, Ink: Text, Bold: true})
	return d
}

func (d *Drawing) add(s ...Shape) { d.Shapes = append(d.Shapes, s...) }

// line adds a straight stroke.
func (d *Drawing) line(x1, y1, x2, y2 float64, ink Ink, w float64, dash ...float64) {
	d.add(Path{Points: []Point{{x1, y1}, {x2, y2}}, Stroke: ink, Width: w, Dash: dash})
}

// box adds a filled rectangle between two corners.
func (d *Drawing) box(x1, y1, x2, y2 float64, fill Ink) {
	d.add(Path{Points: []Point{{x1, y1}, {x2, y1}, {x2, y2}, {x1, y2}}, Closed: true, Fill: fill})
}

// text adds a label of the common size.
func (d *Drawing) text(x, y float64, s string, a Anchor, ink Ink) {
	d.add(Label{At: Point{x, y}, Text: s, Size: sizeText, Anchor: a, Ink: ink})
}

// CumulativeCurve returns the SVG of Curve.
func CumulativeCurve(d document.Document, options ...Option) []byte {
	return Curve(d, options...).SVG()
}

// CategoryBars returns the SVG of Categories.
func CategoryBars(d document.Document) []byte { return Categories(d).SVG() }

// TonnageBars returns the SVG of Tonnage.
func TonnageBars(d document.Document) []byte { return Tonnage(d).SVG() }
