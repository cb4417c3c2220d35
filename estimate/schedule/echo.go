package schedule

import (
	"slices"
	"strings"

	"spanwright/structural/section"
	"spanwright/structural/unit"
)

// echo sums what was read: loads in kN of one piece of each member, without own
// weight; pieces of each group, and tonnes as far as masses are known before
// sizing.
func echo(members []Member) Echo {
	e := Echo{Members: make([]EchoMember, 0, len(members)), Groups: []EchoGroup{}}
	groups := map[string]*EchoGroup{}
	masses := map[string]float64{} // kg/m by designation
	for i := range members {
		m := &members[i]
		e.Members = append(e.Members, echoOf(m))
		g, ok := groups[m.Group]
		if !ok {
			g = &EchoGroup{Group: m.Group}
			groups[m.Group] = g
		}
		g.Pieces += m.Quantity
		g.Tonnes += float64(m.Quantity) * pieceMass(m, masses) / 1000
	}
	for _, g := range groups {
		g.Tonnes = unit.Round(g.Tonnes, unit.Digits)
		e.Groups = append(e.Groups, *g)
	}
	slices.SortFunc(e.Groups, func(a, b EchoGroup) int { return naturalCompare(a.Group, b.Group) })
	return e
}

func echoOf(m *Member) EchoMember {
	out := EchoMember{Mark: m.Mark, Axial: unit.Round(m.Axial/1000, unit.Digits)}
	for _, l := range m.Loads {
		total := l.total(m.Length) / 1000
		switch {
		case l.Sideways:
			out.Horizontal += total
		case l.Nature == "permanent":
			out.Permanent += total
		default:
			out.Variable += total
		}
	}
	for _, sum := range []*float64{&out.Permanent, &out.Variable, &out.Horizontal} {
		*sum = unit.Round(*sum, unit.Digits)
	}
	return out
}

// total is the whole load on a member of a length in m, N, with its dynamic factor.
func (l Load) total(length float64) float64 {
	sum := l.Value
	if l.Kind == "uniform" {
		sum *= length
	}
	for _, w := range l.Wheels {
		sum += w
	}
	return sum * max(1, l.Dynamic)
}

// pieceMass is the mass of one piece in kg, 0 where it is not known before sizing.
func pieceMass(m *Member, masses map[string]float64) float64 {
	switch m.Treatment {
	case ByMass:
		return m.LineMass*m.Length + m.AreaMass*m.Area
	case CheckSection:
		mass, ok := masses[m.Section]
		if !ok {
			if s, err := section.Find(m.Section); err == nil {
				mass = s.Mass
			}
			masses[m.Section] = mass
		}
		return mass * m.Length
	}
	return 0
}

// expected are the kinds of secondary steel that most structures have, with the
// words that name them.
var expected = []struct {
	name  string
	words []string
}{
	{"grating", []string{"grating", "floor plate", "chequer", "checker"}},
	{"handrail", []string{"handrail", "hand rail", "railing", "guardrail"}},
	{"stair", []string{"stair"}},
	{"ladder", []string{"ladder"}},
	{"bracing", []string{"bracing", "brace", "diagonal"}},
	{"base plate", []string{"base plate", "baseplate"}},
}

// omissions lists what one would expect and what no row names.
func omissions(members []Member) []string {
	found := make([]bool, len(expected))
	for i := range members {
		m := &members[i]
		for _, text := range []string{m.Kind, m.Description, m.Group} {
			low := strings.ToLower(text)
			for k, e := range expected {
				found[k] = found[k] || low != "" && slices.ContainsFunc(e.words, func(w string) bool { return strings.Contains(low, w) })
			}
		}
	}
	list := []string{}
	for k, e := range expected {
		if !found[k] {
			list = append(list, "No "+e.name+" rows: add them, as rows that are not sized with their mass, or make sure that there are none.")
		}
	}
	return list
}
