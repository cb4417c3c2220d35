package chart

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"spanwright/estimate/document"
)

// bar is one row of a bar drawing, in the unit of its axis.
type bar struct {
	label     string
	value     float64
	inner     float64 // a smaller value inside the bar; drawn where below value
	low, high float64 // ends of the whisker; drawn where low < high
	figures   []string
}

// bars is a drawing of horizontal bars with columns of figures.
type bars struct {
	*Drawing
	rows    []bar
	columns []string // heads of the figures to the right of the bars
	note    string   // explains the marks
}

const barHeight = 26.0

// layout draws the rows under each other on a common axis from zero.
func (b *bars) layout() Drawing {
	if len(b.rows) == 0 {
		b.Height = 70
		b.text(margin, 48, "Nothing to show.", Start, Muted)
		return *b.Drawing
	}
	labels, low, high := 0.0, 0.0, 0.0
	for i, r := range b.rows {
		b.rows[i].label = shorten(r.label, sizeText, 190)
		labels = max(labels, textWidth(b.rows[i].label, sizeText))
		low = min(low, r.value, r.low)
		high = max(high, r.value, r.high)
	}
	ends := b.columnEnds()
	from := margin + labels + 12
	to := ends[0] - b.columnWidth(0) - 20
	x := newRuler(low, high, from, to)
	if low == 0 && high == 0 {
		x = ruler{0, 1, from, to}
	}
	const top = 58.0
	bottom := top + barHeight*float64(len(b.rows))
	for i, c := range b.columns {
		b.text(ends[i], 46, c, End, Muted)
	}
	for i, r := range b.rows {
		b.row(r, x, top+barHeight*(float64(i)+0.5), from, ends)
	}
	b.line(x.at(0), top, x.at(0), bottom, Muted, 1)
	b.Height = bottom + 34
	b.text(margin, bottom+22, b.note, Start, Muted)
	return *b.Drawing
}

func (b *bars) row(r bar, x ruler, y, labelsTo float64, ends []float64) {
	b.line(margin, y+barHeight/2, width-margin, y+barHeight/2, Rule, 0.75)
	b.text(margin, y+4.5, r.label, Start, Text)
	zero, end := x.at(0), x.at(r.value)
	if r.inner != 0 && r.inner < r.value {
		b.add(Path{Points: []Point{{zero, y - 7}, {end, y - 7}, {end, y + 7}, {zero, y + 7}}, Closed: true, Fill: Soft, Stroke: Accent, Width: 1})
		b.box(zero, y-7, x.at(r.inner), y+7, Accent)
	} else {
		b.box(min(zero, end), y-7, max(zero, end), y+7, Accent)
	}
	if r.low < r.high {
		a, c := x.at(r.low), x.at(r.high)
		b.line(a, y, c, y, Paper, 4)
		b.line(a, y, c, y, Text, 1.5)
		b.line(a, y-4.5, a, y+4.5, Text, 1.5)
		b.line(c, y-4.5, c, y+4.5, Text, 1.5)
	}
	for i, f := range r.figures {
		b.text(ends[i], y+4.5, f, End, Text)
	}
}

func (b *bars) columnWidth(i int) float64 {
	w := textWidth(b.columns[i], sizeText)
	for _, r := range b.rows {
		w = max(w, textWidth(r.figures[i], sizeText))
	}
	return w
}

// columnEnds returns the right edge of each column.
func (b *bars) columnEnds() []float64 {
	ends := make([]float64, len(b.columns))
	x := width - margin
	for i := len(ends) - 1; i >= 0; i-- {
		ends[i] = x
		x -= b.columnWidth(i) + 18
	}
	return ends
}

// Categories draws the base cost of each category, in the document's order, as a
// bar with a whisker from its P10 to its P90. Percentiles of categories do not
// add up to those of the total.
func Categories(d document.Document) Drawing {
	b := &bars{Drawing: newDrawing("categories", "Cost by category"),
		note: "Bar: base estimate. Whisker: P10 to P90 of the category; percentiles of categories do not add up."}
	largest := 0.0
	for _, c := range d.Categories {
		for _, v := range []float64{c.Amount.Float64(), float64(c.P10), float64(c.P90)} {
			if finite(v) {
				largest = max(largest, v, -v)
			}
		}
	}
	s := scaleOf(largest)
	unit := strings.TrimPrefix(s.sign+space+d.Job.Currency, space)
	b.columns = []string{"base, " + unit, "P10", "P90"}
	var parts []string
	for _, c := range d.Categories {
		r := bar{label: c.Category, value: c.Amount.Float64(), low: float64(c.P10), high: float64(c.P90)}
		r.figures = []string{ThreeFigures(r.value / s.factor), ThreeFigures(r.low / s.factor), ThreeFigures(r.high / s.factor)}
		parts = append(parts, fmt.Sprintf("%s %s (P10 %s, P90 %s)", c.Category, Money(r.value, d.Job.Currency),
			Money(r.low, d.Job.Currency), Money(r.high, d.Job.Currency)))
		b.rows = append(b.rows, r.drawable())
	}
	b.Description = "Base cost by category: " + strings.Join(parts, "; ") + "."
	return b.layout()
}

// drawable sets what is not a number that can be drawn to zero; its figure says so.
func (r bar) drawable() bar {
	if !finite(r.value) {
		r.value = 0
	}
	if !finite(r.low) || !finite(r.high) {
		r.low, r.high = 0, 0
	}
	return r
}

// maxGroups is the most groups that the tonnage drawing shows one by one.
const maxGroups = 24

// Tonnage draws the delivered tonnage of each group, the heaviest first, with
// the net tonnage as the solid part. Beyond 24 groups the lightest are shown
// as one row.
func Tonnage(d document.Document) Drawing {
	b := &bars{Drawing: newDrawing("tonnage", "Delivered tonnage by group"),
		columns: []string{"net, t", "delivered, t"},
		note:    "Solid: net. Outlined: connections, bolts and growth, which make it the delivered tonnage."}
	groups := slices.DeleteFunc(slices.Clone(d.Groups), func(g document.Group) bool { return g.Delivered.Sign() == 0 && g.Net.Sign() == 0 }) // concrete, lumps
	sort.SliceStable(groups, func(i, j int) bool {
		if c := groups[i].Delivered.Cmp(groups[j].Delivered); c != 0 {
			return c > 0
		}
		return groups[i].Group < groups[j].Group
	})
	groups = foldGroups(groups)
	var parts []string
	for _, g := range groups {
		r := bar{label: g.Group, value: g.Delivered.Float64(), inner: g.Net.Float64()}
		r.figures = []string{ThreeFigures(r.inner), ThreeFigures(r.value)}
		parts = append(parts, fmt.Sprintf("%s %s t", g.Group, ThreeFigures(r.value)))
		b.rows = append(b.rows, r.drawable())
	}
	b.Description = "Delivered tonnage by group: " + strings.Join(parts, "; ") + "."
	return b.layout()
}

// foldGroups joins the groups beyond the limit into a last one.
func foldGroups(groups []document.Group) []document.Group {
	if len(groups) <= maxGroups {
		return groups
	}
	rest := document.Group{Group: fmt.Sprintf("%d other groups", len(groups)-maxGroups+1)}
	for _, g := range groups[maxGroups-1:] {
		rest.Net = rest.Net.Add(g.Net)
		rest.Delivered = rest.Delivered.Add(g.Delivered)
	}
	return append(groups[:maxGroups-1:maxGroups-1], rest)
}
