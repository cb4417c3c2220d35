package beam

import "math"

// crossing moves a train over cells from off the left end to off the right and
// keeps the extremes of several effects, each given by its influence line.
//
// Between two places of the lead at which a wheel passes a cell's end every
// effect is one cubic of the lead; its ends and stationary places are the
// candidates, so that the extremes are exact.
type crossing struct {
	loads   []float64
	offsets [2][]float64 // by direction, 1 then -1; lengths of the member
	oneWay  bool         // the train looks the same from both ends
	at      []int        // by wheel: the next of the cells' ends to pass
	on      []wheel
	best    []PlacedBounds
	size    []float64 // by effect: what counts as rounding
}

func newCrossing(t Train, length float64) *crossing {
	return &crossing{loads: t.Loads, oneWay: t.alike(), at: make([]int, len(t.Loads)),
		offsets: [2][]float64{t.offsets(1, length), t.offsets(-1, length)}}
}

// run finds the extremes of the effects whose lines are given over the cells.
// cut is the cell that ends at the section looked at, from the given side; -1
// without a section. Values and places come in the mesh's units.
func (c *crossing) run(bounds []float64, lines [][]cubic, cut int, side Side) {
	c.best = append(c.best[:0], make([]PlacedBounds, len(lines))...)
	c.size = c.size[:0]
	total := 0.0
	for _, p := range c.loads {
		total += p
	}
	for _, line := range lines {
		size := 0.0
		for i := range line {
			for _, v := range line[i] {
				size = math.Max(size, math.Abs(v))
			}
		}
		c.size = append(c.size, noise*size*total)
	}
	c.cross(bounds, lines, cut, side, 0)
	if !c.oneWay {
		c.cross(bounds, lines, cut, side, 1)
	}
}

// cross is run in one direction.
func (c *crossing) cross(bounds []float64, lines [][]cubic, cut int, side Side, way int) {
	clear(c.at)
	lead, on := math.Inf(-1), 0
	for {
		wheel, next := c.next(bounds, cut, side, way)
		if on > 0 {
			c.interval(bounds, lines, way, lead, math.Max(0, next-lead))
		}
		if wheel < 0 {
			return
		}
		switch c.at[wheel] {
		case 0:
			on++
		case len(bounds) - 1:
			on--
		}
		c.at[wheel]++
		lead = math.Max(lead, next)
	}
}

// next returns the wheel that is the next to pass an end of a cell, and where
// the lead then is; -1 when all are through. Of several at one place those that
// come on go first and those that leave go last, as a wheel on the very end is
// carried; a section's left side is passed before all of them, its right side
// after them.
func (c *crossing) next(bounds []float64, cut int, side Side, way int) (int, float64) {
	wheel, lead, rank := -1, math.Inf(1), 0
	for w, off := range c.offsets[way] {
		at := c.at[w]
		if at == len(bounds) {
			continue
		}
		s, r := bounds[at]-off, 2
		switch {
		case cut >= 0 && at == cut+1 && side == Left:
			r = 0
		case cut >= 0 && at == cut+1:
			r = 4
		case at == 0:
			r = 1
		case at == len(bounds)-1:
			r = 3
		}
		if wheel < 0 || s < lead-near || s <= lead+near && r < rank {
			wheel, lead, rank = w, s, r
		}
	}
	return wheel, lead
}

// interval takes the extremes while the lead goes from lead to lead + width.
func (c *crossing) interval(bounds []float64, lines [][]cubic, way int, lead, width float64) {
	c.on = c.on[:0]
	for w, off := range c.offsets[way] {
		cell := c.at[w] - 1
		if cell < 0 || cell >= len(bounds)-1 {
			continue
		}
		from, part := 0.0, 0.0
		if h := bounds[cell+1] - bounds[cell]; h > 0 {
			from, part = min(max((lead+off-bounds[cell])/h, 0), 1), width/h
		}
		c.on = append(c.on, wheel{cell, from, part, c.loads[w]})
	}
	for q := range lines {
		sum := c.sum(lines[q])
		reach := math.Abs(sum[1]) + math.Abs(sum[2]) + math.Abs(sum[3])
		if b := &c.best[q]; sum[0]+reach <= b.Max.Value && sum[0]-reach >= b.Min.Value {
			continue
		}
		c.take(q, way, lead, sum[0])
		if width == 0 {
			continue
		}
		c.take(q, way, lead+width, sum[0]+sum[1]+sum[2]+sum[3])
		turn := poly{sum[1], 2 * sum[2], 3 * sum[3]}
		var at [5]float64
		for i := range turn.quadratic(0, 1, &at) {
			u := at[i]
			c.take(q, way, lead+u*width, ((sum[3]*u+sum[2])*u+sum[1])*u+sum[0])
		}
	}
}

// wheel is one on the member: its cell, its place there at the start of the
// interval, and what it passes of the cell.
type wheel struct {
	cell       int
	from, part float64
	load       float64
}

// sum returns the effect of all wheels as a polynomial over the interval.
func (c *crossing) sum(line []cubic) cubic {
	var out cubic
	for i := range c.on {
		w := &c.on[i]
		k, f := &line[w.cell], w.from
		p := w.part
		out[0] += w.load * (((k[3]*f+k[2])*f+k[1])*f + k[0])
		out[1] += w.load * p * ((3*k[3]*f+2*k[2])*f + k[1])
		p *= w.part
		out[2] += w.load * p * (3*k[3]*f + k[2])
		out[3] += w.load * p * w.part * k[3]
	}
	return out
}

// take keeps a value of effect q if it is beyond those found.
func (c *crossing) take(q, way int, lead, v float64) {
	b := &c.best[q]
	if v > b.Max.Value+c.size[q] {
		b.Max = Placed{Value: v, Lead: lead, Direction: 1 - 2*way}
	}
	if v < b.Min.Value-c.size[q] {
		b.Min = Placed{Value: v, Lead: lead, Direction: 1 - 2*way}
	}
}
