package calculator

import (
	"math"
	"slices"

	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
)

// member is a request read and sorted for the analysis, in SI.
type member struct {
	request  BeamRequest
	beam     beam.Beam
	masses   []beam.Mass // own ones
	cases    cases
	strength []action.Combination
	service  action.Combination
	notes    []string
}

const defaultGrade = "S355"

// read checks the request; every fault is in the error.
func read(r BeamRequest) (*member, error) {
	var f Faults
	if !f.above("/length_m", r.Length, maxLength, "m") {
		return nil, f
	}
	m := &member{request: r}
	m.beam = beam.Beam{Length: r.Length, Supports: supports(r.Supports, r.Length, &f)}
	if len(r.Supports) == 0 && r.Place == nil {
		f.add("/supports", "no support", "nothing holds the member", "one fixed support, or two")
	}
	m.stiffness(&f)
	m.hinges(&f)
	loads(r.Loads, r.Length, len(r.Supports)-1, &f)
	for i, l := range r.Loads {
		if l.Direction == "horizontal" {
			f.add(item("/loads", i)+"/direction", `"horizontal"`, "the beam calculator works in one plane", "vertical; horizontal loads as a request of their own, with the stiffness in that plane")
		}
	}
	m.extraMasses(&f)
	m.combinations(&f)
	r.Place.check(r.Loads, len(r.Supports), &f)
	if r.Stations != 0 {
		f.within("/stations", float64(r.Stations), 2, MaxStations, "")
	}
	if len(f) > 0 {
		return nil, f
	}
	return m, nil
}

// stiffness reads section or segments.
func (m *member) stiffness(f *Faults) {
	r := m.request
	segments := r.Segments
	switch {
	case r.Section != "" && len(segments) > 0:
		f.add("/segments", "both section and segments", "the stiffness is given twice", "one of them")
		return
	case r.Section != "":
		segments = []BeamSegment{{To: r.Length, Section: r.Section}}
	case len(segments) == 0:
		f.add("/section", "nothing", "no stiffness", "section, or segments")
		return
	}
	if !f.few("/segments", len(segments), MaxSpans, "segments") {
		return
	}
	grade, ok := m.grade(segments, f)
	if !ok {
		return
	}
	from := 0.0
	for i, s := range segments {
		at := item("/segments", i)
		if r.Section != "" {
			at = ""
		}
		ei, mass := s.read(at, grade, f)
		if !(s.To > from+1e-9*r.Length && s.To <= r.Length*(1+1e-9)) {
			f.add(at+"/to_m", number(s.To)+" m", "the segments are not in order", "above "+number(from)+" m, up to "+number(r.Length)+" m")
			return
		}
		to := min(s.To, r.Length)
		m.beam.Segments = append(m.beam.Segments, beam.Segment{To: to, EI: ei})
		m.masses = append(m.masses, beam.Mass{From: from, To: to, PerMetre: mass})
		from = to
	}
	if !(from >= r.Length*(1-1e-9)) {
		f.add(item("/segments", len(segments)-1)+"/to_m", number(from)+" m", "the last segment ends before the member", number(r.Length)+" m")
	}
}

// grade finds the steel; a request by stiffness alone needs none.
func (m *member) grade(segments []BeamSegment, f *Faults) (material.Grade, bool) {
	name := m.request.Grade
	if name == "" {
		name = defaultGrade
		if slices.ContainsFunc(segments, func(s BeamSegment) bool { return s.Section != "" }) {
			m.notes = append(m.notes, "grade taken as "+defaultGrade+": E and density of the section")
		}
	}
	return gradeOf("/grade", name, f)
}

// read returns EI in N·m² and the mass in kg/m.
func (s BeamSegment) read(at string, grade material.Grade, f *Faults) (ei, mass float64) {
	switch {
	case s.Section != "" && (s.EI != 0 || s.Mass != 0):
		f.add(at+"/section", quoted(s.Section), "the stiffness is given twice", "section, or ei_knm2 with mass_kg_m")
	case s.Section != "":
		if sec, ok := sectionOf(at+"/section", s.Section, f); ok {
			return grade.E * sec.Iy, sec.MassAt(grade.Density)
		}
	default:
		f.within(at+"/ei_knm2", s.EI, minStiffness, maxStiffness, "kNm²")
		f.within(at+"/mass_kg_m", s.Mass, 0, maxMass, "kg/m")
	}
	return s.EI * 1e3, s.Mass
}

func (m *member) hinges(f *Faults) {
	r := m.request
	if !f.few("/hinges_m", len(r.Hinges), MaxSpans, "hinges") {
		return
	}
	for i, x := range r.Hinges {
		if !(x > 1e-9*r.Length && x < r.Length*(1-1e-9)) {
			f.add(item("/hinges_m", i), number(x)+" m", "off the member", "a place inside the member, between 0 and "+number(r.Length)+" m")
		}
	}
	m.beam.Hinges = r.Hinges
}

func (m *member) extraMasses(f *Faults) {
	r := m.request
	if !f.few("/masses", len(r.Masses), MaxMasses, "masses") {
		return
	}
	for i, s := range r.Masses {
		at := item("/masses", i)
		f.within(at+"/mass_kg_m", s.PerMetre, 0, maxMass, "kg/m")
		if f.within(at+"/from_m", s.From, 0, r.Length, "m") && f.within(at+"/to_m", s.To, 0, r.Length, "m") && !(s.To-s.From > 1e-9*r.Length) {
			f.add(at+"/to_m", number(s.To)+" m", "the end does not lie beyond the start", "more than "+number(s.From)+" m")
		}
	}
}

func (m *member) combinations(f *Faults) {
	r := m.request
	m.strength, m.service = []action.Combination{action.Characteristic()}, action.Characteristic()
	switch {
	case r.Basis != "" && r.Factors != nil:
		f.add("/factors", "both design_basis and factors", "the combination is given twice", "one of them")
	case r.Basis != "":
		if f.oneOf("/design_basis", r.Basis, bases...) {
			m.strength, m.service, _ = action.Sets(r.Basis) // of a basis in the list there is no error
		}
	case r.Factors != nil:
		m.strength = []action.Combination{r.Factors.combination("/factors", "request", f)}
	}
	if r.Service != nil {
		m.service = r.Service.combination("/service_factors", "request, service", f)
	}
}

// Caps of the work of one analysis.
const (
	maxCases   = 1000    // load cases, free loads counted by span
	maxTracks  = 100_000 // load cases × places where something changes
	maxLeading = 24      // variable loads that lead in turn
)

// sort makes load cases of the loads; free ones are cut at the supports unless these
// are still to be placed.
func (m *member) sort(cut bool) error {
	r := m.request
	m.cases = cases{}
	var permanent beam.Case
	for _, s := range m.masses {
		if s.PerMetre > 0 {
			permanent = append(permanent, beam.Load{Kind: beam.Uniform, From: s.From, To: s.To, Start: s.PerMetre * gravity})
		}
	}
	for i := range r.Loads {
		if l := &r.Loads[i]; l.Nature == "permanent" {
			permanent = append(permanent, l.beamLoad(r.Length))
		}
	}
	if len(permanent) > 0 {
		m.cases.permanent, m.cases.list = true, []beam.Case{permanent}
	}
	for i := range r.Loads {
		if r.Loads[i].Nature != "permanent" {
			m.variable(i, cut)
		}
	}
	return m.bounded()
}

func (m *member) variable(i int, cut bool) {
	l := &m.request.Loads[i]
	v := variable{load: i, train: -1}
	parts := []beam.Load{l.beamLoad(m.beam.Length)}
	switch {
	case l.Kind == "train":
		v.train, parts = len(m.cases.trains), nil
		m.cases.trains = append(m.cases.trains, l.train())
	case l.Free && cut:
		parts = bySpan(parts[0], m.beam)
	}
	for _, p := range parts {
		v.cases = append(v.cases, len(m.cases.list))
		m.cases.list = append(m.cases.list, beam.Case{p})
	}
	m.cases.variable = append(m.cases.variable, v)
}

// bySpan cuts a uniform load at the supports.
func bySpan(l beam.Load, b beam.Beam) []beam.Load {
	least := 1e-9 * b.Length
	cuts := []float64{l.From}
	for _, s := range b.Supports {
		if s.X > l.From+least && s.X < l.To-least {
			cuts = append(cuts, s.X)
		}
	}
	slices.Sort(cuts)
	cuts = append(cuts, l.To)
	var out []beam.Load
	for i := range len(cuts) - 1 {
		if cuts[i+1]-cuts[i] > least {
			part := l
			part.From, part.To = cuts[i], cuts[i+1]
			out = append(out, part)
		}
	}
	return out
}

// bounded refuses what would take too long or too much memory.
func (m *member) bounded() error {
	var f Faults
	places := len(m.beam.Supports) + len(m.beam.Hinges) + 2*len(m.request.Loads) + len(m.beam.Segments)
	if n := len(m.cases.list); f.few("/loads", n, maxCases, "load cases, each free load counted once for every span") {
		f.few("/loads", n*places, maxTracks, "load cases times places where something changes")
	}
	for _, c := range append(slices.Clone(m.strength), m.service) {
		if c.Beside() != c.Variable && !f.few("/loads", len(m.cases.variable), maxLeading, "variable loads beside an accompanying factor below 1") {
			break
		}
	}
	return f.err()
}

// vibrating returns the masses that move with the member: its own, those of permanent
// downward loads, those of the request. A point load's is spread over a thousandth of
// the length; a linear load's is stepped at its greater end in twenty parts, which
// lowers the frequency.
func (m *member) vibrating() []beam.Mass {
	out := slices.Clone(m.masses)
	L := m.request.Length
	for i := range m.request.Loads {
		l := &m.request.Loads[i]
		if l.Nature != "permanent" {
			continue
		}
		from, to := l.extent(L)
		switch l.Kind {
		case "uniform":
			out = append(out, beam.Mass{From: from, To: to, PerMetre: max(0, l.Load) * 1e3 / gravity})
		case "linear":
			out = append(out, stepped(from, to, l.Load*1e3/gravity, l.EndLoad*1e3/gravity)...)
		case "point":
			a, b := max(0, l.Position-L/2000), min(L, l.Position+L/2000)
			out = append(out, beam.Mass{From: a, To: b, PerMetre: max(0, l.Force) * 1e3 / gravity / (b - a)})
		}
	}
	for _, s := range m.request.Masses {
		out = append(out, beam.Mass{From: s.From, To: s.To, PerMetre: s.PerMetre})
	}
	return slices.DeleteFunc(out, func(s beam.Mass) bool { return s.PerMetre == 0 })
}

func stepped(from, to, start, end float64) []beam.Mass {
	const parts = 20
	var out []beam.Mass
	for k := range parts {
		a, b := float64(k)/parts, float64(k+1)/parts
		most := math.Max(start+a*(end-start), start+b*(end-start))
		out = append(out, beam.Mass{From: from + a*(to-from), To: from + b*(to-from), PerMetre: max(0, most)})
	}
	return out
}
