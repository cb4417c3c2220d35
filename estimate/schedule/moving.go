package schedule

import (
	"fmt"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// train is a row of wheels as posted.
type train struct {
	wheels   []float64 // N, from the first to the last
	spacings []float64 // m, one fewer
}

// mostWheels is what the beam analysis takes: its work grows with their square.
const mostWheels = 32

const trainExample = `wheels and their distances such as "40; 40 @ 2.0"`

// train reads Moving load: wheels parted by ";", then "@" and the distances, one
// for all or one fewer than wheels. Each number may carry its unit.
func (r *row) train() (train, state) {
	c := r.cells[colMoving]
	if r.layout.lost[colMoving] {
		return train{}, bad
	}
	if c.Kind != sheet.Text && c.Kind != sheet.Number {
		n := r.quantity(colMoving, unit.Force, wheelLoads)
		return train{}, n.state
	}
	if strings.TrimSpace(c.Text) == "" {
		return train{}, blank
	}
	heads, tails, apart := strings.Cut(c.Text, "@")
	var t train
	var ok bool
	if t.wheels, ok = r.list(c, heads, unit.Force, r.layout.units[colMoving], wheelLoads); !ok {
		return train{}, bad
	}
	if apart {
		if t.spacings, ok = r.list(c, tails, unit.Length, r.layout.units[colLength], spacings); !ok {
			return train{}, bad
		}
	}
	if wrong := t.fit(c); wrong != nil {
		r.judge(colMoving, wrong)
		return train{}, bad
	}
	return t, given
}

// list reads numbers parted by ";"; a fault is reported.
func (r *row) list(c sheet.Cell, text string, d unit.Dimension, implied unit.Unit, s span) ([]float64, bool) {
	var values []float64
	for part := range strings.SplitSeq(text, ";") {
		one := c
		one.Text = strings.TrimSpace(part)
		n, wrong := readQuantity(one, r.comma, d, implied, trainExample)
		switch {
		case wrong != nil && d == unit.Force && r.bare(colMoving, d, one):
			return nil, false
		case wrong == nil && n.state == blank:
			wrong = &complaint{shorten(c.Text), "has an empty place", trainExample}
		case wrong == nil && !s.holds(n.value):
			wrong = &complaint{shorten(c.Text), "is out of bounds: " + one.Text, s.words}
		}
		if wrong != nil {
			r.judge(colMoving, wrong)
			return nil, false
		}
		values = append(values, n.value)
	}
	return values, true
}

// fit holds the number of distances against that of the wheels; one distance
// stands for all.
func (t *train) fit(c sheet.Cell) *complaint {
	wheels, given := len(t.wheels), len(t.spacings)
	if wheels > mostWheels {
		return &complaint{shorten(c.Text), fmt.Sprintf("has %d wheels", wheels), fmt.Sprintf("at most %d wheels", mostWheels)}
	}
	if given == 1 && wheels > 2 {
		for range wheels - 2 {
			t.spacings = append(t.spacings, t.spacings[0])
		}
		return nil
	}
	if given != wheels-1 {
		return &complaint{shorten(c.Text), fmt.Sprintf("has %d wheels and %d distances", wheels, given), trainExample + ": one distance for all, or one fewer than wheels"}
	}
	return nil
}
