package chart

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"spanwright/estimate/document"
)

// Option adds something to the cumulative curve that the document does not hold.
type Option func(*curve)

// WithBudget marks a requested budget, in major units of the document's
// currency. A value that is not a finite number is left out.
func WithBudget(amount float64) Option {
	return func(c *curve) {
		if finite(amount) {
			c.budget, c.hasBudget = amount, true
		}
	}
}

// Places of the parts of the curve's drawing.
const (
	plotLeft   = 64.0
	plotRight  = width - 20
	plotHeight = 300.0
	rowHeight  = 18.0
)

// curve is the cumulative curve while it is laid out.
type curve struct {
	doc       document.Document
	budget    float64
	hasBudget bool

	*Drawing
	values []float64 // the drawn curve, at equal steps of probability from 0 to 1
	x, y   ruler
	scale  scale
}

// Curve draws the cumulative probability of the total: the curve of
// Range.Curve, its percentiles, the base, the chosen confidence with the
// contingency between the two, and a budget where WithBudget gives one. The
// axis runs from the 1st to the 99th percentile and a little beyond, because the
// ends of a simulated curve are accidents of its sampling. What lies outside is
// marked at the edge and says its value.
func Curve(d document.Document, options ...Option) Drawing {
	c := &curve{doc: d, Drawing: newDrawing("curve", "Probability that the total is not exceeded")}
	for _, o := range options {
		o(c)
	}
	for _, v := range d.Range.Curve {
		c.values = append(c.values, float64(v))
	}
	c.Description = c.describe()
	if !c.drawable() {
		c.Height = 70
		c.text(margin, 48, "The document holds no curve that can be drawn.", Start, Muted)
		return *c.Drawing
	}
	c.setScale()
	flags := c.flags()
	rows := placeFlags(flags, margin, width-margin)
	top := 37 + float64(rows)*rowHeight
	c.y = ruler{low: 0, high: 1, from: top + plotHeight, to: top}
	c.Height = top + plotHeight + 46
	c.band()
	c.axes()
	c.flagLines(flags)
	c.stroke()
	c.percentiles()
	return *c.Drawing
}

func (c *curve) drawable() bool {
	for _, v := range c.values {
		if !finite(v) {
			return false
		}
	}
	return len(c.values) > 1 && sort.Float64sAreSorted(c.values)
}

// setScale fixes the axis of money.
func (c *curve) setScale() {
	n := len(c.values) - 1
	low, high := c.quantile(0.01), c.quantile(0.99)
	pad := 0.12 * (high - low)
	low, high = max(low-pad, c.values[0]), min(high+pad, c.values[n])
	reach := high - low
	for _, v := range c.marks() {
		if finite(v) && low-reach <= v && v <= high+reach {
			low, high = min(low, v), max(high, v)
		}
	}
	pad = 0.04 * (high - low)
	c.x = newRuler(low-pad, high+pad, plotLeft, plotRight)
	c.scale = scaleOf(max(math.Abs(c.x.low), math.Abs(c.x.high)))
}

// marks are the values that the axis is stretched for, within reason.
func (c *curve) marks() []float64 {
	m := []float64{c.doc.Totals.Base.Float64(), c.doc.Totals.AtConfidence.Float64()}
	if c.hasBudget {
		m = append(m, c.budget)
	}
	return m
}

// quantile reads the curve at probability p, between its points in proportion.
func (c *curve) quantile(p float64) float64 {
	at := p * float64(len(c.values)-1)
	i := min(int(at), len(c.values)-2)
	t := at - float64(i)
	return c.values[i]*(1-t) + c.values[i+1]*t
}

// probability reads the probability of not exceeding x from the curve: the
// highest where the curve is upright.
func (c *curve) probability(x float64) float64 {
	n := len(c.values) - 1
	i := sort.Search(n+1, func(i int) bool { return c.values[i] > x })
	switch i {
	case 0:
		return 0
	case n + 1:
		return 1
	}
	t := (x - c.values[i-1]) / (c.values[i] - c.values[i-1])
	return (float64(i-1) + t) / float64(n)
}

// money writes an amount in the scale of the axis, or in its own where that
// would begin with several zeros.
func (c *curve) money(x float64) string {
	if s := c.scale; s.sign != "" && math.Abs(x) >= 0.1*s.factor {
		return ThreeFigures(x/s.factor) + space + s.sign + space + c.doc.Job.Currency
	}
	return Money(x, c.doc.Job.Currency)
}

// place writes where a value lies on the curve; simulated tails are too rough
// for more than the nearest whole percentile.
func place(p float64) string {
	switch {
	case !(p >= 0.005):
		return "below P1"
	case p >= 0.995:
		return "above P99"
	}
	return "P" + percent(math.Round(p*100)/100)
}

// flags are the labels of the vertical lines.
func (c *curve) flags() []flag {
	t := c.doc.Totals
	base, chosen := t.Base.Float64(), t.AtConfidence.Float64()
	flags := []flag{
		{x: c.x.at(base), text: c.edge(base, fmt.Sprintf("base %s, %s", c.money(base), place(float64(c.doc.Range.BaseAt)))), ink: Base},
		{x: c.x.at(chosen), text: c.edge(chosen, fmt.Sprintf("chosen P%s, contingency %s", percent(float64(t.Confidence)), c.money(t.Contingency.Float64()))), ink: Text},
	}
	if c.hasBudget {
		flags = append(flags, flag{x: c.x.at(c.budget), ink: Budget,
			text: c.edge(c.budget, fmt.Sprintf("budget %s, %s", c.money(c.budget), place(c.probability(c.budget))))})
	}
	return flags
}

// edge says beside a label that its value lies outside the axis.
func (c *curve) edge(x float64, text string) string {
	switch {
	case x < c.x.low:
		return "← " + text
	case x > c.x.high:
		return text + " →"
	}
	return text
}

// band tints what lies between the base and the chosen percentile.
func (c *curve) band() {
	a, b := c.x.at(c.doc.Totals.Base.Float64()), c.x.at(c.doc.Totals.AtConfidence.Float64())
	if math.Abs(b-a) >= 0.5 {
		c.box(min(a, b), c.y.to, max(a, b), c.y.from, Soft)
	}
}

func (c *curve) axes() {
	for p := 0.0; p <= 1.001; p += 0.2 {
		y := c.y.at(p)
		c.line(plotLeft, y, plotRight, y, Rule, 1)
		c.text(plotLeft-8, y+4, percent(p)+space+"%", End, Muted)
	}
	write := func(v float64, places int) string { return fixed(v/c.scale.factor, places) }
	values, places := c.x.ticks(c.scale, 8, write)
	for _, v := range values {
		x := c.x.at(v)
		c.line(x, c.y.from, x, c.y.from+5, Muted, 1)
		if label := write(v, places); x+textWidth(label, sizeText)/2 <= width {
			c.text(x, c.y.from+19, label, Middle, Muted)
		}
	}
	c.line(plotLeft, c.y.from, plotRight, c.y.from, Muted, 1)
	caption := "total cost, " + strings.TrimPrefix(c.scale.sign+space+c.doc.Job.Currency, space)
	if c.doc.Job.Money != "" {
		caption += ", " + c.doc.Job.Money
	}
	c.text(plotRight, c.y.from+38, shorten(caption, sizeText, plotRight-plotLeft), End, Muted)
}

func (c *curve) flagLines(flags []flag) {
	for _, f := range flags {
		top := c.y.to - 9 - float64(f.row)*rowHeight
		c.line(f.x, top-11, f.x, c.y.from, f.ink, 1.25)
		if f.left {
			c.text(f.x-5, top, f.text, End, f.ink)
		} else {
			c.text(f.x+5, top, f.text, Start, f.ink)
		}
	}
}

// stroke draws the curve, cut at the ends of the axis.
func (c *curve) stroke() {
	points := []Point{{c.x.from, c.y.at(c.probability(c.x.low))}}
	n := len(c.values) - 1
	for i, v := range c.values {
		if c.x.low < v && v < c.x.high {
			points = append(points, Point{c.x.at(v), c.y.at(float64(i) / float64(n))})
		}
	}
	points = append(points, Point{c.x.to, c.y.at(c.probability(c.x.high))})
	c.add(Path{Points: points, Stroke: Accent, Width: 2.5})
}

// percentiles marks the percentiles on the curve, each with its label to the
// right, where the plane below a rising curve is empty, or to the left of it,
// above the curve, where the drawing ends.
func (c *curve) percentiles() {
	var levels []document.Percentile
	for _, p := range c.doc.Range.Percentiles {
		if finite(float64(p.Value)) && p.P >= 0 && p.P <= 1 {
			levels = append(levels, p)
		}
	}
	sort.SliceStable(levels, func(i, j int) bool { return levels[i].P > levels[j].P })
	ys := make([]float64, len(levels))
	for i, p := range levels {
		ys[i] = c.y.at(float64(p.P))
	}
	spreadOut(ys, 16, c.y.to+4, c.y.from-12)
	for i, p := range levels {
		c.percentile(p, ys[i])
	}
}

func (c *curve) percentile(p document.Percentile, labelY float64) {
	dot := Point{c.x.at(float64(p.Value)), c.y.at(float64(p.P))}
	text := "P" + percent(float64(p.P)) + space + space + c.money(float64(p.Value))
	c.line(plotLeft, dot.Y, dot.X, dot.Y, Muted, 0.75, 2, 3)
	c.add(Dot{Centre: dot, Radius: 4, Fill: Accent, Stroke: Paper})
	l := Label{At: Point{dot.X + 10, labelY + 9}, Text: text, Size: sizeText, Anchor: Start, Ink: Text, Halo: true, Bold: true}
	if dot.X+10+textWidth(text, sizeText)*1.06 > width-margin {
		l.At.X, l.Anchor = dot.X-10, End
	}
	c.add(l)
}

// describe says the drawing's figures in words.
func (c *curve) describe() string {
	d := c.doc
	var parts []string
	for _, p := range d.Range.Percentiles {
		parts = append(parts, fmt.Sprintf("P%s %s", percent(float64(p.P)), c.money(float64(p.Value))))
	}
	s := fmt.Sprintf("Cumulative curve of the total cost of %s, scheme %s: %s.", d.Job.Project, d.Job.Scheme, strings.Join(parts, ", "))
	s += fmt.Sprintf(" Base estimate %s, %s.", c.money(d.Totals.Base.Float64()), place(float64(d.Range.BaseAt)))
	s += fmt.Sprintf(" Chosen confidence P%s at %s, contingency %s.", percent(float64(d.Totals.Confidence)),
		c.money(d.Totals.AtConfidence.Float64()), c.money(d.Totals.Contingency.Float64()))
	if c.hasBudget {
		s += " Budget " + c.money(c.budget)
		if c.drawable() {
			s += ", " + place(c.probability(c.budget))
		}
		s += "."
	}
	return s
}
