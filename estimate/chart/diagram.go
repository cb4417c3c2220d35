package chart

import (
	"cmp"
	"math"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
)

// MemberDiagram is an analysed member as plain data, lengths in m from the left end.
type MemberDiagram struct {
	Title    string
	Length   float64
	Supports []DiagramSupport
	Hinges   []float64
	Spans    []DiagramSpan // what is dimensioned, left to right

	Moment     DiagramLane // kNm, sagging positive
	Shear      DiagramLane // kN, positive where the part to the left is pushed up
	Deflection DiagramLane // mm, down positive

	Note string // under which combinations the figures stand
}

// DiagramSupport is a support: pinned, fixed, spring or guided.
type DiagramSupport struct {
	X    float64
	Kind string
}

// DiagramSpan is a span or overhang.
type DiagramSpan struct{ From, To float64 }

// DiagramLane is one quantity along the member.
type DiagramLane struct {
	Points []DiagramPoint // left to right; two at a jump
	Marks  []DiagramMark  // extremes that may be labelled, as many as there is room for
}

// DiagramPoint are the greatest and the least value at a place.
type DiagramPoint struct{ X, Max, Min float64 }

// DiagramMark is one extreme.
type DiagramMark struct{ X, Value float64 }

// Heights and places of the drawing.
const (
	diagramFrom = 46.0 // the member's left end
	diagramTo   = width - 46.0
	beamLine    = 62.0
	dimLine     = 106.0
	laneTop     = 140.0
	laneHeight  = 118.0
	laneHead    = 24.0 // above a lane
	laneRoom    = 20.0 // inside a lane, for labels beyond the curve
)

// diagram is a drawing under construction.
type diagram struct {
	*Drawing
	member MemberDiagram
	x      ruler
}

// Diagrams draws the member on its supports, with its spans dimensioned, above its
// bending moment (on the tension side: sagging below the line), shear and
// deflection, each as the band between its greatest and its least values.
func Diagrams(m MemberDiagram) Drawing {
	d := &diagram{Drawing: newDrawing("diagrams", m.Title), member: m, x: newRuler(0, m.Length, diagramFrom, diagramTo)}
	if !(m.Length > 0 && finite(m.Length)) {
		d.Height = 70
		d.text(margin, 48, "Nothing to show.", Start, Muted)
		return *d.Drawing
	}
	d.guides()
	d.beam()
	d.dimensions()
	parts := []string{d.held()}
	for i, l := range []struct {
		lane             DiagramLane
		name, unit, says string
		down             bool
	}{
		{m.Moment, "Bending moment", "kNm", "drawn on the tension side, sagging below the line", true},
		{m.Shear, "Shear", "kN", "positive above the line", false},
		{m.Deflection, "Deflection", "mm", "down positive, exaggerated", true},
	} {
		top := laneTop + float64(i)*(laneHeight+laneHead)
		d.text(margin, top-9, l.name+", "+l.unit+": "+l.says, Start, Muted)
		parts = append(parts, d.lane(l.lane, l.name, l.unit, top, l.down))
	}
	bottom := d.bottom()
	if m.Note != "" {
		d.text(margin, bottom+18, shorten(m.Note, sizeText, width-2*margin), Start, Muted)
		bottom += 18
	}
	first, rest, _ := strings.Cut(document.Caution, "; ")
	d.text(margin, bottom+20, first+";", Start, Text)
	d.text(margin, bottom+36, rest, Start, Text)
	d.Height = bottom + 46
	d.Description = strings.Join(parts, " ")
	return *d.Drawing
}

// bottom is the lower edge of the last lane.
func (d *diagram) bottom() float64 { return laneTop + 3*laneHeight + 2*laneHead }

// guides are thin lines from the supports through all lanes.
func (d *diagram) guides() {
	for _, s := range d.member.Supports {
		d.line(d.x.at(s.X), dimLine+6, d.x.at(s.X), d.bottom(), Rule, 1, 2, 3)
	}
}

// held says in words how the member is held.
func (d *diagram) held() string {
	var parts []string
	for _, s := range d.member.Supports {
		parts = append(parts, s.Kind+" at"+space+metres(s.X))
	}
	text := "Member of " + metres(d.member.Length) + "; supports: " + strings.Join(parts, ", ") + "."
	if len(d.member.Hinges) > 0 {
		var at []string
		for _, x := range d.member.Hinges {
			at = append(at, metres(x))
		}
		text += " Hinges at " + strings.Join(at, ", ") + "."
	}
	return text
}

// metres writes a length with at most two decimals.
func metres(x float64) string {
	return strconv.FormatFloat(math.Round(x*100)/100+0, 'f', -1, 64) + space + "m"
}

// lane draws one quantity and returns its extremes in words.
func (d *diagram) lane(l DiagramLane, name, unit string, top float64, down bool) string {
	points := slices.DeleteFunc(slices.Clone(l.Points), func(p DiagramPoint) bool { return !finite(p.X) || !finite(p.Max) || !finite(p.Min) })
	low, high := 0.0, 0.0
	for _, p := range points {
		low, high = min(low, p.Min), max(high, p.Max)
	}
	y := newRuler(low, high, top+laneHeight-laneRoom, top+laneRoom)
	if down {
		y.from, y.to = y.to, y.from
	}
	if low == 0 && high == 0 {
		d.line(diagramFrom, y.at(0), diagramTo, y.at(0), Muted, 1)
		d.text((diagramFrom+diagramTo)/2, y.at(0)-6, "zero everywhere", Middle, Muted)
		return name + " is zero."
	}
	d.band(points, y)
	d.line(diagramFrom, y.at(0), diagramTo, y.at(0), Text, 1)
	d.marks(l.Marks, y, unit, max(high, -low), top, down)
	return name + " from " + ThreeFigures(low) + " to " + ThreeFigures(high) + space + unit + "."
}

// band fills what lies between the line and the values, and draws both edges.
func (d *diagram) band(points []DiagramPoint, y ruler) {
	var upper, lower, fill []Point
	for _, p := range points {
		upper = append(upper, Point{d.x.at(p.X), y.at(p.Max)})
		lower = append(lower, Point{d.x.at(p.X), y.at(p.Min)})
		fill = append(fill, Point{d.x.at(p.X), y.at(max(p.Max, 0))})
	}
	for _, p := range slices.Backward(points) {
		fill = append(fill, Point{d.x.at(p.X), y.at(min(p.Min, 0))})
	}
	d.add(Path{Points: fill, Closed: true, Fill: Soft})
	d.add(Path{Points: lower, Stroke: Accent, Width: 1.75})
	if !slices.Equal(upper, lower) {
		d.add(Path{Points: upper, Stroke: Accent, Width: 1.75})
	}
}

// rect is the place that a label takes.
type rect struct{ x1, y1, x2, y2 float64 }

func (r rect) meets(o rect) bool { return r.x1 < o.x2 && o.x1 < r.x2 && r.y1 < o.y2 && o.y1 < r.y2 }

// ranked is the size of a value without its last digits: equal extremes are labelled
// from the left on every machine.
func ranked(v float64) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(math.Abs(v), 'e', 8, 64), 64)
	if err != nil {
		return math.Abs(v)
	}
	return r
}

// marks labels extremes, the greatest first, where they do not meet others; those
// below a fiftieth of the greatest are left out.
func (d *diagram) marks(list []DiagramMark, y ruler, unit string, largest, top float64, down bool) {
	list = slices.DeleteFunc(slices.Clone(list), func(m DiagramMark) bool {
		return !finite(m.X) || !(math.Abs(m.Value) >= largest/50) || !finite(m.Value)
	})
	slices.SortStableFunc(list, func(a, b DiagramMark) int {
		return cmp.Compare(ranked(b.Value), ranked(a.Value))
	})
	var taken []rect
	for _, m := range list {
		text := ThreeFigures(m.Value) + space + unit + " at" + space + metres(m.X)
		w := textWidth(text, sizeText)
		x, v := d.x.at(m.X), y.at(m.Value)
		left := min(max(x-w/2, margin), width-margin-w)
		base := v - 6
		if (m.Value > 0) == down {
			base = v + 16
		}
		base = min(max(base, top+10), top+laneHeight)
		r := rect{left - 4, base - 11, left + w + 4, base + 3}
		if slices.ContainsFunc(taken, r.meets) {
			continue
		}
		taken = append(taken, r)
		d.add(Dot{Centre: Point{x, v}, Radius: 3, Fill: Accent, Stroke: Paper})
		d.add(Label{At: Point{left, base}, Text: text, Size: sizeText, Anchor: Start, Ink: Text, Halo: true})
	}
}
