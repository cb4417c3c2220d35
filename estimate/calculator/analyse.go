package calculator

import (
	"cmp"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/structural/action"
	"spanwright/structural/beam"
)

// Beam analyses one member: extremes, reactions, diagrams, first frequency, the split
// method beside the exact envelope, positions of trains, and the best places of
// supports where they are asked for. The error is Faults.
func Beam(r BeamRequest) (BeamAnswer, error) {
	m, err := read(r)
	if err != nil {
		return BeamAnswer{}, err
	}
	placement, err := m.place()
	if err != nil {
		return BeamAnswer{}, err
	}
	if err := m.sort(true); err != nil {
		return BeamAnswer{}, err
	}
	a, err := m.analyse()
	if err != nil {
		return BeamAnswer{}, err
	}
	out := BeamAnswer{
		Caution: document.Caution, Length: Number(r.Length), Service: combinationOf(m.service), Placement: placement,
		Effects: effectsOf(memberSpan(a.envelope), 0), Spans: spansOf(a.envelope), Reactions: a.reactions(a.envelope.Reactions),
		Stations: a.stations(),
	}
	for _, k := range m.strength {
		out.Combinations = append(out.Combinations, combinationOf(k))
	}
	for _, s := range m.masses {
		out.SelfWeight += Number(s.PerMetre * (s.To - s.From) * gravity / 1e3)
	}
	for _, x := range slices.Sorted(slices.Values(r.Hinges)) {
		out.Hinges = append(out.Hinges, Number(x))
	}
	if out.Trains, err = m.trains(); err != nil {
		return BeamAnswer{}, err
	}
	out.Frequency = m.frequency()
	out.Split = a.split()
	out.Notes = append([]string{}, m.notes...)
	return guarded(out)
}

// analysis is an analysed member with the sets of terms of its combinations.
type analysis struct {
	*member
	response          *beam.Response
	strength, service [][]beam.Term
	envelope          beam.Envelope // worst of all sets, deflections of service
}

func (m *member) analyse() (*analysis, error) {
	r, err := beam.AnalyseTrains(m.beam, m.cases.list, m.cases.trains)
	if err != nil {
		return nil, m.faults(err)
	}
	a := &analysis{member: m, response: r}
	for _, k := range m.strength {
		a.strength = append(a.strength, a.terms(k)...)
	}
	a.service = a.terms(m.service)
	for i, set := range a.strength {
		e := r.Envelope(set)
		if i == 0 {
			a.envelope = e
			continue
		}
		widenForces(&a.envelope, &e)
	}
	for i, set := range a.service {
		e := r.Envelope(set)
		if i == 0 {
			takeDeflections(&a.envelope, &e)
			continue
		}
		widenDeflections(&a.envelope, &e)
	}
	return a, nil
}

func (a *analysis) terms(k action.Combination) [][]beam.Term {
	return a.cases.terms(k, a.response.SettlementCase(), a.response.TrainCase)
}

// faults places an error of the beam analysis in the request.
func (m *member) faults(err error) Faults {
	var b *beam.Fault
	if !errors.As(err, &b) {
		return Faults{{"", "the member", err.Error(), "another member"}}
	}
	return Faults{{beamPointer(b.Part), b.Found, string(b.Kind) + " at " + number(b.Where) + " m", b.Accepted}}
}

// beamPointer turns "support 2" into /supports/1.
func beamPointer(part string) string {
	what, rest, _ := strings.Cut(part, " ")
	n, err := strconv.Atoi(strings.TrimSuffix(rest, " "))
	lists := map[string]string{"support": "/supports", "segment": "/segments", "hinge": "/hinges_m"}
	if list, ok := lists[what]; ok && err == nil {
		return item(list, n-1)
	}
	switch what {
	case "case", "train":
		return "/loads"
	case "free", "symmetric", "goal":
		return "/place_supports"
	}
	return ""
}

func widenForces(into, e *beam.Envelope) {
	higher(&into.MomentMax, e.MomentMax)
	lower(&into.MomentMin, e.MomentMin)
	higher(&into.ShearMax, e.ShearMax)
	lower(&into.ShearMin, e.ShearMin)
	for i := range into.Reactions {
		r, x := &into.Reactions[i], e.Reactions[i]
		r.FMax, r.FMin, r.MMax, r.MMin = max(r.FMax, x.FMax), min(r.FMin, x.FMin), max(r.MMax, x.MMax), min(r.MMin, x.MMin)
	}
	for i := range into.Spans {
		s, x := &into.Spans[i], &e.Spans[i]
		higher(&s.MomentMax, x.MomentMax)
		lower(&s.MomentMin, x.MomentMin)
		higher(&s.ShearMax, x.ShearMax)
		lower(&s.ShearMin, x.ShearMin)
	}
}

func takeDeflections(into, e *beam.Envelope) {
	into.DeflectionMax, into.DeflectionMin = e.DeflectionMax, e.DeflectionMin
	for i := range into.Spans {
		into.Spans[i].DeflectionMax, into.Spans[i].DeflectionMin = e.Spans[i].DeflectionMax, e.Spans[i].DeflectionMin
	}
}

func widenDeflections(into, e *beam.Envelope) {
	higher(&into.DeflectionMax, e.DeflectionMax)
	lower(&into.DeflectionMin, e.DeflectionMin)
	for i := range into.Spans {
		higher(&into.Spans[i].DeflectionMax, e.Spans[i].DeflectionMax)
		lower(&into.Spans[i].DeflectionMin, e.Spans[i].DeflectionMin)
	}
}

func higher(into *beam.Extreme, e beam.Extreme) {
	if e.Value > into.Value {
		*into = e
	}
}

func lower(into *beam.Extreme, e beam.Extreme) {
	if e.Value < into.Value {
		*into = e
	}
}

// memberSpan is the whole member as one stretch.
func memberSpan(e beam.Envelope) beam.SpanEnvelope {
	return beam.SpanEnvelope{MomentMax: e.MomentMax, MomentMin: e.MomentMin, ShearMax: e.ShearMax, ShearMin: e.ShearMin,
		DeflectionMax: e.DeflectionMax, DeflectionMin: e.DeflectionMin}
}

func effectsOf(s beam.SpanEnvelope, from float64) BeamEffects {
	x := func(e beam.Extreme, scale float64) BeamExtreme {
		return BeamExtreme{Number(e.Value * scale), Number(from + e.X)}
	}
	return BeamEffects{
		MomentMax: x(s.MomentMax, 1e-3), MomentMin: x(s.MomentMin, 1e-3), ShearMax: x(s.ShearMax, 1e-3), ShearMin: x(s.ShearMin, 1e-3),
		DeflectionMax: x(s.DeflectionMax, 1e3), DeflectionMin: x(s.DeflectionMin, 1e3),
	}
}

func spansOf(e beam.Envelope) []BeamSpan {
	out := []BeamSpan{}
	n := 0
	for i, s := range e.Spans {
		name := "left overhang"
		switch {
		case !s.Overhang:
			n++
			name = fmt.Sprintf("span %d", n)
		case i > 0 || s.From >= e.Reactions[0].X:
			name = "right overhang"
		}
		out = append(out, BeamSpan{Name: name, From: Number(s.From), To: Number(s.To), Overhang: s.Overhang, BeamEffects: effectsOf(s, 0)})
	}
	return out
}

// kinds are the supports' kinds from left to right.
func (m *member) kinds() []string {
	s := slices.Clone(m.beam.Supports)
	slices.SortFunc(s, func(a, b beam.Support) int { return cmp.Compare(a.X, b.X) })
	out := make([]string, len(s))
	for i := range s {
		out[i] = s[i].Kind.String()
	}
	return out
}

func (m *member) reactions(list []beam.ReactionEnvelope) []BeamReaction {
	out := []BeamReaction{}
	kinds := m.kinds()
	for i, r := range list {
		out = append(out, BeamReaction{Position: Number(r.X), Kind: kinds[i], Max: Number(r.FMax / 1e3), Min: Number(r.FMin / 1e3),
			MomentMax: Number(r.MMax / 1e3), MomentMin: Number(r.MMin / 1e3)})
	}
	return out
}

// frequency is that of the member with its masses; a note says why there is none.
func (m *member) frequency() *Number {
	masses := m.vibrating()
	if len(masses) == 0 {
		m.notes = append(m.notes, "no frequency: the member carries no mass")
		return nil
	}
	hz, err := beam.Frequency(m.beam, masses)
	if err != nil {
		m.notes = append(m.notes, "no frequency: "+err.Error())
		return nil
	}
	m.notes = append(m.notes, "first frequency with own mass, the masses of permanent downward loads and those of the request; variable loads, shear flexibility and axial force are not in it")
	out := Number(hz)
	return &out
}

// trains says where each train stands for its extremes.
func (m *member) trains() ([]BeamTrain, error) {
	var out []BeamTrain
	for _, v := range m.cases.variable {
		if v.train < 0 {
			continue
		}
		p, err := beam.MoveTrain(m.beam, m.cases.trains[v.train])
		if err != nil {
			return nil, m.faults(err)
		}
		x := p.Extremes()
		t := BeamTrain{Load: v.load, Label: m.request.Loads[v.load].Label, Reactions: []BeamTrainExtreme{},
			MomentMax: trainExtreme(x.Moment.Max, 1e-3), MomentMin: trainExtreme(x.Moment.Min, 1e-3),
			ShearMax: trainExtreme(x.Shear.Max, 1e-3), ShearMin: trainExtreme(x.Shear.Min, 1e-3),
			DeflectionMax: trainExtreme(x.Deflection.Max, 1e3)}
		for _, r := range x.Reactions {
			t.Reactions = append(t.Reactions, trainExtreme(r.F.Max, 1e-3))
		}
		out = append(out, t)
	}
	return out, nil
}

func trainExtreme(p beam.Placed, scale float64) BeamTrainExtreme {
	return BeamTrainExtreme{Number(p.Value * scale), Number(p.X), Number(p.Lead), p.Direction}
}
