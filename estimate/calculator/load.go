package calculator

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// BeamLoad is one characteristic action on a member.
type BeamLoad struct {
	Label        string    `json:"label,omitempty" maxLength:"100" doc:"what you call it"`
	Kind         string    `json:"kind" enum:"uniform,linear,point,moment,curvature,train"`
	Nature       string    `json:"nature,omitempty" enum:"permanent,variable" doc:"variable when absent: a variable load may also be absent where that is worse"`
	Free         bool      `json:"free,omitempty" doc:"of a variable uniform load: placed span by span for the worst effect"`
	Direction    string    `json:"direction,omitempty" enum:"vertical,horizontal" doc:"vertical when absent; horizontal in sizing alone"`
	From         float64   `json:"from_m,omitempty" doc:"start of a uniform, linear or curvature load"`
	To           float64   `json:"to_m,omitempty" doc:"its end; the whole member when both are absent"`
	Position     float64   `json:"position_m,omitempty" doc:"of a point load or moment"`
	Load         float64   `json:"load_kn_m,omitempty" doc:"uniform, or linear at its start; down positive"`
	EndLoad      float64   `json:"end_load_kn_m,omitempty" doc:"linear, at its end"`
	Force        float64   `json:"force_kn,omitempty" doc:"point; down positive"`
	Moment       float64   `json:"moment_knm,omitempty" doc:"moment; clockwise positive"`
	Curvature    float64   `json:"curvature_per_m,omitempty" doc:"imposed curvature, sagging positive: of a temperature gradient α·ΔT/depth, warm below positive"`
	EndCurvature *float64  `json:"end_curvature_per_m,omitempty" doc:"at its end; the same when absent"`
	Wheels       []float64 `json:"wheels_kn,omitempty" doc:"of a train that crosses in both directions, leading wheel first"`
	Spacings     []float64 `json:"spacings_m,omitempty" doc:"between the wheels, one fewer than wheels"`
	Dynamic      float64   `json:"dynamic_factor,omitempty" doc:"on the static value, 1 to 10; 1 when absent"`
}

const distributed = "uniform linear curvature"

// fields are the numbers of a load with the kinds that they belong to.
func (l *BeamLoad) fields() []struct {
	name, unit, kinds string
	value, most       float64
} {
	end := 0.0
	if l.EndCurvature != nil {
		end = *l.EndCurvature
	}
	return []struct {
		name, unit, kinds string
		value, most       float64
	}{
		{"from_m", "m", distributed, l.From, maxLength},
		{"to_m", "m", distributed, l.To, maxLength},
		{"position_m", "m", "point moment", l.Position, maxLength},
		{"load_kn_m", "kN/m", "uniform linear", l.Load, maxForce},
		{"end_load_kn_m", "kN/m", "linear", l.EndLoad, maxForce},
		{"force_kn", "kN", "point", l.Force, maxForce},
		{"moment_knm", "kNm", "moment", l.Moment, maxForce},
		{"curvature_per_m", "1/m", "curvature", l.Curvature, 1e3},
		{"end_curvature_per_m", "1/m", "curvature", end, 1e3},
	}
}

// check refuses a load that does not fit a member of the length.
func (l *BeamLoad) check(at string, length float64, f *Faults) {
	if !f.oneOf(at+"/kind", l.Kind, "uniform", "linear", "point", "moment", "curvature", "train") {
		return
	}
	f.oneOf(at+"/nature", l.Nature, "permanent", "variable", "")
	f.oneOf(at+"/direction", l.Direction, "vertical", "horizontal", "")
	for _, x := range l.fields() {
		switch {
		case x.value != 0 && !slices.Contains(strings.Fields(x.kinds), l.Kind):
			f.add(at+"/"+x.name, number(x.value)+space(x.unit), "does not belong to a "+l.Kind+" load", "the field absent, or the kind "+strings.ReplaceAll(x.kinds, " ", " or "))
		default:
			f.signed(at+"/"+x.name, x.value, x.most, x.unit)
		}
	}
	if l.Dynamic != 0 {
		f.within(at+"/dynamic_factor", l.Dynamic, 1, 10, "")
	}
	if l.Free && (l.Kind != "uniform" || l.Nature == "permanent") {
		f.add(at+"/free", "true", "only a variable uniform load can be placed span by span", "false")
	}
	l.place(at, length, f)
	l.wheels(at, f)
}

func (l *BeamLoad) place(at string, length float64, f *Faults) {
	switch l.Kind {
	case "point", "moment":
		f.within(at+"/position_m", l.Position, 0, length, "m")
	case "uniform", "linear", "curvature":
		from, to := l.extent(length)
		if f.within(at+"/from_m", from, 0, length, "m") && f.within(at+"/to_m", to, 0, length, "m") && !(to-from > 1e-9*length) {
			f.add(at+"/to_m", number(to)+" m", "the end does not lie beyond the start", "more than "+number(from)+" m, or both absent for the whole member")
		}
	}
}

func (l *BeamLoad) extent(length float64) (from, to float64) {
	if l.From == 0 && l.To == 0 {
		return 0, length
	}
	return l.From, l.To
}

func (l *BeamLoad) wheels(at string, f *Faults) {
	if l.Kind != "train" {
		if len(l.Wheels)+len(l.Spacings) > 0 {
			f.add(at+"/wheels_kn", fmt.Sprintf("%d wheels", len(l.Wheels)), "only a train has wheels", "the field absent, or the kind train")
		}
		return
	}
	if l.Nature == "permanent" {
		f.add(at+"/nature", quoted(l.Nature), "a train is variable", "variable")
	}
	if len(l.Wheels) == 0 {
		f.add(at+"/wheels_kn", "no wheel", "a train without wheels", fmt.Sprintf("1 to %d wheel loads", MaxWheels))
	}
	if !f.few(at+"/wheels_kn", len(l.Wheels), MaxWheels, "wheels") {
		return
	}
	if len(l.Wheels) > 0 && len(l.Spacings) != len(l.Wheels)-1 {
		f.add(at+"/spacings_m", fmt.Sprintf("%d spacings for %d wheels", len(l.Spacings), len(l.Wheels)), "spacings and wheels do not fit", "one spacing fewer than wheels")
		return
	}
	for i, p := range l.Wheels {
		f.within(item(at+"/wheels_kn", i), p, 0, maxForce, "kN")
	}
	for i, d := range l.Spacings {
		f.above(item(at+"/spacings_m", i), d, maxPlace, "m")
	}
}

// loads checks every load and their number on a member of so many spans.
func loads(list []BeamLoad, length float64, spans int, f *Faults) {
	if !f.few("/loads", len(list), MaxLoads, "loads") {
		return
	}
	wheels := 0
	for i := range list {
		list[i].check(item("/loads", i), length, f)
		wheels += len(list[i].Wheels)
	}
	if f.few("/loads", wheels, MaxWheels, "wheels of all trains together") {
		f.few("/loads", wheels*max(spans, 1), MaxWheelSpans, fmt.Sprintf("wheels times spans (%d × %d)", wheels, spans))
	}
}

func (l *BeamLoad) factor() float64 {
	if l.Dynamic == 0 {
		return 1
	}
	return l.Dynamic
}

// beamLoad is the load for the analysis, dynamic factor included; none for a train.
func (l *BeamLoad) beamLoad(length float64) beam.Load {
	from, to := l.extent(length)
	k := l.factor()
	switch l.Kind {
	case "point":
		return beam.Load{Kind: beam.Point, From: l.Position, Start: l.Force * 1e3 * k}
	case "moment":
		return beam.Load{Kind: beam.Moment, From: l.Position, Start: l.Moment * 1e3 * k}
	case "curvature":
		end := l.Curvature
		if l.EndCurvature != nil {
			end = *l.EndCurvature
		}
		return beam.Load{Kind: beam.Curvature, From: from, To: to, Start: l.Curvature * k, End: end * k}
	case "linear":
		return beam.Load{Kind: beam.Linear, From: from, To: to, Start: l.Load * 1e3 * k, End: l.EndLoad * 1e3 * k}
	}
	return beam.Load{Kind: beam.Uniform, From: from, To: to, Start: l.Load * 1e3 * k}
}

func (l *BeamLoad) train() beam.Train {
	t := beam.Train{Spacings: slices.Clone(l.Spacings)}
	for _, p := range l.Wheels {
		t.Loads = append(t.Loads, p*1e3*l.factor())
	}
	return t
}

var actionKinds = map[string]action.Kind{
	"uniform": action.Uniform, "linear": action.Linear, "point": action.Point, "moment": action.Moment, "train": action.MovingTrain,
}

// action is the load for sizing.
func (l *BeamLoad) action() action.Action {
	a := action.Action{Label: l.Label, Kind: actionKinds[l.Kind], Free: l.Free, From: l.From, To: l.To, Dynamic: l.Dynamic}
	if l.Nature == "permanent" {
		a.Nature = action.Permanent
	}
	if l.Direction == "horizontal" {
		a.Direction = action.Horizontal
	}
	switch l.Kind {
	case "point":
		a.From, a.To, a.Value = l.Position, l.Position, l.Force*1e3
	case "moment":
		a.From, a.To, a.Value = l.Position, l.Position, l.Moment*1e3
	case "train":
		for _, p := range l.Wheels {
			a.Train.Loads = append(a.Train.Loads, p*1e3)
		}
		a.Train.Spacings = slices.Clone(l.Spacings)
	default:
		a.Value, a.End = l.Load*1e3, l.EndLoad*1e3
	}
	return a
}
