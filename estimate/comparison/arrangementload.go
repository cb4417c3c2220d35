package comparison

import (
	"math"
	"slices"

	"spanwright/estimate/schedule"
	"spanwright/structural/action"
	"spanwright/structural/arrangement"
	"spanwright/structural/resistance"
)

const axialCheck = resistance.Axial

// mostForces bounds the forces that stand for all loads that a row cannot bear as such.
const mostForces = 160

// loads are the actions of the study on the main member of a candidate. A row of the
// schedule bears loads over its whole length, forces and trains: a load on a part of
// the member, and one that is not uniform, becomes forces (see forces). Couples are
// left out, and a note says so.
func (s *ArrangementStudy) loads(c *arrangement.Candidate, root float64) []schedule.Load {
	length := s.Study.Member.Length
	partly := 0
	for _, a := range s.Study.Member.Actions {
		if partial(a, root, length) {
			partly++
		}
	}
	var cuts []float64
	for _, u := range c.Supports {
		cuts = append(cuts, u.X)
	}
	var out []schedule.Load
	for _, a := range s.Study.Member.Actions {
		l := loadOf(a)
		switch {
		case a.Kind == action.Moment:
			continue
		case a.Kind == action.MovingTrain:
			l.Kind, l.Free, l.Wheels, l.Spacings, l.Value = "train", true, a.Train.Loads, a.Train.Spacings, 0
		case a.Kind == action.Point:
			l.Kind, l.Position = "point", rounded(a.From+root)
		case partial(a, root, length):
			out = append(out, forces(a, l, length, root, cuts, max(8, mostForces/partly))...)
			continue
		}
		if l.Value != 0 || l.Kind == "train" {
			out = append(out, l)
		}
	}
	return out
}

// loadOf is a load of the whole length with what it takes from the action.
func loadOf(a action.Action) schedule.Load {
	l := schedule.Load{Nature: "variable", Kind: "uniform", Value: rounded(a.Value), Free: a.Free, Sideways: a.Direction == action.Horizontal,
		Label: a.Label}
	if a.Nature == action.Permanent {
		l.Nature = "permanent"
	}
	if a.Factor() > 1 {
		l.Dynamic = a.Factor()
	}
	if l.Label == "" {
		l.Label = l.Nature + " load"
	}
	return l
}

// partial tells whether a distributed action is no uniform one over the whole row.
func partial(a action.Action, root, length float64) bool {
	if a.Kind != action.Uniform && a.Kind != action.Linear {
		return false
	}
	from, to := a.Extent(length)
	return root > 0 || from > 0 || to < length || a.Kind == action.Linear && a.End != a.Value
}

// forces stands for a distributed action by n forces or a few more: cut at the supports
// into equal parts, each with its resultant at its centroid. Moments at the cuts are
// exact; inside a part of length a they are too great by w·a²/8 at the most.
func forces(a action.Action, l schedule.Load, length, root float64, cuts []float64, n int) []schedule.Load {
	from, to := a.Extent(length)
	end := a.Value
	if a.Kind == action.Linear {
		end = a.End
	}
	value := func(x float64) float64 { return a.Value + (end-a.Value)*(x-from)/(to-from) }
	at := []float64{from, to}
	for _, x := range cuts {
		if x > from && x < to {
			at = append(at, x)
		}
	}
	slices.Sort(at)
	var out []schedule.Load
	for i := range len(at) - 1 {
		whole := at[i+1] - at[i]
		parts := int(math.Ceil(float64(n) * whole / (to - from)))
		for k := range parts {
			x, y := at[i]+whole*float64(k)/float64(parts), at[i]+whole*float64(k+1)/float64(parts)
			p, q := value(x), value(y)
			f := l
			f.Kind, f.Free, f.Value = "point", false, rounded((p+q)/2*(y-x))
			centre := (x + y) / 2
			if p+q != 0 {
				centre = min(max(x+(y-x)/3*(p+2*q)/(p+q), x), y)
			}
			f.Position = rounded(centre + root)
			if f.Value != 0 {
				out = append(out, f)
			}
		}
	}
	return out
}

// localLoads are what bends a chord between panel points, as the study has it: every
// distributed action at its greatest over the whole chord, forces where they stand,
// trains; nothing where all loads enter at panel points.
func (s *ArrangementStudy) localLoads(length float64) []schedule.Load {
	if s.Study.Lattice.AtPanelPoints {
		return nil
	}
	var out []schedule.Load
	for _, a := range s.Study.Member.Actions {
		l := loadOf(a)
		switch {
		case a.Direction == action.Horizontal || a.Kind == action.Moment:
			continue
		case a.Kind == action.MovingTrain:
			l.Kind, l.Free, l.Wheels, l.Spacings, l.Value = "train", true, a.Train.Loads, a.Train.Spacings, 0
		case a.Kind == action.Point:
			l.Kind, l.Position = "point", rounded(min(a.From, length))
		case math.Abs(a.End) > math.Abs(a.Value):
			l.Value = rounded(a.End)
		}
		if l.Value != 0 || l.Kind == "train" {
			out = append(out, l)
		}
	}
	return out
}
