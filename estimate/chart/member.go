package chart

import (
	"math"
	"strconv"
)

// beam draws the member, its hinges and its supports.
func (d *diagram) beam() {
	for _, s := range d.member.Supports {
		d.support(s)
	}
	d.line(diagramFrom, beamLine, diagramTo, beamLine, Text, 3.5)
	for _, x := range d.member.Hinges {
		d.add(Dot{Centre: Point{d.x.at(x), beamLine}, Radius: 4.5, Fill: Paper, Stroke: Text})
	}
}

// support draws one support by its kind.
func (d *diagram) support(s DiagramSupport) {
	x := d.x.at(s.X)
	switch s.Kind {
	case "fixed":
		d.wall(x, s.X)
	case "guided":
		d.guide(x, s.X)
	case "spring":
		points := []Point{{x, beamLine}, {x, beamLine + 5}}
		for k := range 6 {
			points = append(points, Point{x + 6*float64(1-2*(k%2)), beamLine + 7 + 3*float64(k)})
		}
		d.add(Path{Points: append(points, Point{x, beamLine + 25}, Point{x, beamLine + 28}), Stroke: Text, Width: 1.5})
		d.ground(x, beamLine+28)
	default:
		half := 9 * d.room()
		d.add(Path{Points: []Point{{x, beamLine + 1}, {x - half, beamLine + 17}, {x + half, beamLine + 17}}, Closed: true, Fill: Paper, Stroke: Text, Width: 1.5})
		d.ground(x, beamLine+17)
	}
}

// room is 1, or less where supports stand so close that they would overlap.
func (d *diagram) room() float64 {
	least := 1.0
	for i, s := range d.member.Supports {
		for _, o := range d.member.Supports[:i] {
			least = min(least, math.Abs(d.x.at(s.X)-d.x.at(o.X))/28)
		}
	}
	return max(least, 0.2)
}

// ground draws the ground under a support.
func (d *diagram) ground(x, y float64) {
	half := 12 * d.room()
	d.line(x-half, y, x+half, y, Text, 1.5)
	if half < 12 {
		return
	}
	for k := range 5 {
		d.line(x-8+float64(k)*5, y, x-12+float64(k)*5, y+5, Muted, 1)
	}
}

// side is the direction away from the member: −1 at its left end, 1 at its right
// end, 0 inside.
func (d *diagram) side(at float64) float64 {
	switch {
	case at <= 1e-6*d.member.Length:
		return -1
	case at >= d.member.Length*(1-1e-6):
		return 1
	}
	return 0
}

// wall is a fixed support: a wall at an end, a clamp inside.
func (d *diagram) wall(x, at float64) {
	side := d.side(at)
	if side == 0 {
		d.add(Path{Points: []Point{{x - 9, beamLine - 9}, {x + 9, beamLine - 9}, {x + 9, beamLine + 17}, {x - 9, beamLine + 17}}, Closed: true, Fill: Soft, Stroke: Text, Width: 1.5})
		d.ground(x, beamLine+17)
		return
	}
	d.line(x, beamLine-18, x, beamLine+18, Text, 2)
	for k := range 7 {
		y := beamLine - 12 + float64(k)*5
		d.line(x, y, x+6*side, y-6, Muted, 1)
	}
}

// guide is a guided support: a plate that slides along a wall.
func (d *diagram) guide(x, at float64) {
	side := d.side(at)
	if side == 0 {
		side = 1
	}
	d.line(x, beamLine-13, x, beamLine+13, Text, 2)
	for _, y := range []float64{beamLine - 8, beamLine + 8} {
		d.add(Dot{Centre: Point{x + 4.5*side, y}, Radius: 3, Fill: Paper, Stroke: Text})
	}
	d.line(x+9*side, beamLine-16, x+9*side, beamLine+16, Text, 1.5)
}

// run is one or several equal spans under one dimension.
type run struct {
	from, to float64
	count    int
}

// label is the length, or the number of equal lengths.
func (r run) label() string {
	if r.count > 1 {
		return strconv.Itoa(r.count) + space + "×" + space + metres((r.to-r.from)/float64(r.count))
	}
	return metres(r.to - r.from)
}

// dimensions draws the chain of spans. Where a length has no room, equal neighbours
// are joined; what still has none is left without a text.
func (d *diagram) dimensions() {
	var runs []run
	for _, s := range d.member.Spans {
		if finite(s.From) && finite(s.To) {
			runs = append(runs, run{s.From, s.To, 1})
		}
	}
	fits := func(r run) bool {
		return textWidth(r.label(), sizeText)+8 <= d.x.at(r.to)-d.x.at(r.from)
	}
	crowded := false
	for _, r := range runs {
		crowded = crowded || !fits(r)
	}
	if crowded {
		runs = joined(runs, d.member.Length)
	}
	for i, r := range runs {
		a, b := d.x.at(r.from), d.x.at(r.to)
		d.line(a, dimLine, b, dimLine, Muted, 1)
		if i == 0 {
			d.tick(a)
		}
		for k := range r.count {
			d.tick(a + (b-a)*float64(k+1)/float64(r.count))
		}
		if fits(r) {
			d.add(Label{At: Point{(a + b) / 2, dimLine - 5}, Text: r.label(), Size: sizeText, Anchor: Middle, Ink: Muted})
		}
	}
}

// tick is the oblique stroke at the end of a dimension.
func (d *diagram) tick(x float64) { d.line(x-3.5, dimLine+3.5, x+3.5, dimLine-3.5, Text, 1.25) }

// joined makes one run of equal neighbours.
func joined(runs []run, length float64) []run {
	var out []run
	for _, r := range runs {
		n := len(out) - 1
		if n >= 0 && math.Abs((r.to-r.from)-(out[n].to-out[n].from)/float64(out[n].count)) <= 1e-6*length {
			out[n].to = r.to
			out[n].count++
			continue
		}
		out = append(out, r)
	}
	return out
}
