package arrangement

import (
	"slices"

	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// loading is what acts on a beam in one plane, as cases of the analysis. Every case
// is one that can be factored by itself: permanent loads and own weight are cut at
// the supports, because a part that holds a support down lies beside one that lifts it.
type loading struct {
	cases     []beam.Case
	permanent []int // cases of permanent actions
	own       []int // cases of an own weight of 1 N/m
	variable  []int // cases of variable actions, each of which may be absent
	trains    []beam.Train
	dynamic   []float64 // of each train
}

// load gathers the actions of one direction. Free actions are cut at the supports;
// so is what is permanent, unless cuts is nil, as where the supports still move.
func (h *holding) load(d action.Direction, cuts []beam.Support) loading {
	var l loading
	add := func(to *[]int, loads ...beam.Load) {
		for _, load := range loads {
			*to = append(*to, len(l.cases))
			l.cases = append(l.cases, beam.Case{load})
		}
	}
	for _, a := range h.actions {
		switch {
		case a.Direction != d || a.Value == 0 && a.End == 0 && a.Kind != action.MovingTrain:
		case a.Kind == action.MovingTrain:
			l.trains = append(l.trains, beam.Train{Loads: a.Train.Loads, Spacings: a.Train.Spacings})
			l.dynamic = append(l.dynamic, a.Factor())
		case a.Nature == action.Permanent:
			add(&l.permanent, cut(loadOf(a, h.length), cuts)...)
		case a.Free:
			add(&l.variable, cut(loadOf(a, h.length), cuts)...)
		default:
			add(&l.variable, loadOf(a, h.length))
		}
	}
	if d == action.Vertical {
		add(&l.own, cut(beam.Load{Kind: beam.Uniform, To: h.length, Start: 1}, cuts)...)
	}
	return l
}

// loadOf is the action as the beam analysis takes it, its dynamic factor included.
func loadOf(a action.Action, length float64) beam.Load {
	from, to := a.Extent(length)
	value := a.Value * a.Factor()
	switch a.Kind {
	case action.Point:
		return beam.Load{Kind: beam.Point, From: from, Start: value}
	case action.Moment:
		return beam.Load{Kind: beam.Moment, From: from, Start: value}
	case action.Linear:
		return beam.Load{Kind: beam.Linear, From: from, To: to, Start: value, End: a.End * a.Factor()}
	}
	return beam.Load{Kind: beam.Uniform, From: from, To: to, Start: value}
}

// cut cuts a distributed load at the supports inside it.
func cut(whole beam.Load, supports []beam.Support) []beam.Load {
	if whole.Kind == beam.Point || whole.Kind == beam.Moment {
		return []beam.Load{whole}
	}
	least := near * (whole.To - whole.From)
	at := []float64{whole.From}
	for _, s := range supports {
		if s.X > whole.From+least && s.X < whole.To-least {
			at = append(at, s.X)
		}
	}
	slices.Sort(at)
	at = append(at, whole.To)
	value := func(x float64) float64 {
		return whole.Start + (whole.End-whole.Start)*(x-whole.From)/(whole.To-whole.From)
	}
	var parts []beam.Load
	for i := range len(at) - 1 {
		part := whole
		part.From, part.To = at[i], at[i+1]
		if part.Kind == beam.Linear {
			part.Start, part.End = value(part.From), value(part.To)
		}
		parts = append(parts, part)
	}
	return parts
}

// near is the part of a length within which two places are the same.
const near = 1e-9

// always returns the terms of what is always there, under an own weight, N/m.
func (l *loading) always(weight float64) []beam.Term {
	var terms []beam.Term
	for _, c := range l.permanent {
		terms = append(terms, beam.Term{Case: c, Factor: 1})
	}
	for _, c := range l.own {
		terms = append(terms, beam.Term{Case: c, Factor: weight})
	}
	return terms
}

// characteristic returns all terms with factors of 1; of trains none.
func (l *loading) characteristic(weight float64) []beam.Term {
	return append(l.always(weight), l.freely(nil, 1)...)
}

// freely returns the variable terms with a factor; trains where r holds their cases.
func (l *loading) freely(r *beam.Response, factor float64) []beam.Term {
	var terms []beam.Term
	for _, c := range l.variable {
		terms = append(terms, beam.Term{Case: c, Factor: factor, Free: true})
	}
	if r != nil {
		for i := range l.trains {
			terms = append(terms, beam.Term{Case: r.TrainCase(i), Factor: factor * l.dynamic[i], Free: true})
		}
	}
	return terms
}

// stability returns the terms of a stability rule: what is always there with its
// holding factor, and the rest of its lifting factor only where that is worse.
func (l *loading) stability(r *beam.Response, weight float64, c action.Combination) []beam.Term {
	var terms []beam.Term
	for _, t := range l.always(weight) {
		hold, rest := t, t
		hold.Factor *= c.Favourable()
		rest.Factor *= c.Permanent - c.Favourable()
		rest.Free = true
		terms = append(terms, hold, rest)
	}
	return append(terms, l.freely(r, c.Variable)...)
}
