package comparison

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/schedule"
	"spanwright/structural/arrangement"
	"spanwright/structural/beam"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
	"spanwright/structural/unit"
)

// The groups of an arrangement's rows: what is priced and summed together.
const (
	mainGroup       = "Main member"
	towerGroup      = "Towers"
	foundationGroup = "Foundations"
)

// The words of the schedule for what holds a member.
const (
	atPositions = "positions"
	aStrut      = "strut"
	aCantilever = "cantilever"
	notSized    = "not sized"
	pinned      = "pinned"
	fixed       = "fixed"
)

// Connection classes of the starting books, by the trade.
const (
	boomClass    = "tube booms"
	plainClass   = "simple beams"
	towerClass   = "trestles"
	latticeClass = "lattice"
	noClass      = "none"
)

// members are the rows of a candidate, sorted by mark: the main member or the lattice,
// each tower, the footings and the ballast.
func (s *ArrangementStudy) members(c *arrangement.Candidate) []schedule.Member {
	var out []schedule.Member
	if c.Truss != nil {
		out = s.lattice(c)
	} else {
		out = []schedule.Member{s.main(c)}
	}
	for i := range c.Towers {
		out = append(out, s.tower(c, i)...)
	}
	for i, f := range c.Footings {
		m := concrete(fmt.Sprintf("FOOTING-%d", i+1), f.Count, f.Volume)
		m.Description = fmt.Sprintf("footing at %.2f m, %.2f × %.2f × %.2f m, by %s", f.X, f.Width, f.Width, f.Depth, f.Governs)
		out = append(out, m)
	}
	if b := c.Ballast; b != nil && b.Volume > 0 {
		m := concrete("BALLAST", 1, b.Volume)
		m.Description = fmt.Sprintf("counterweight of %.1f t with an arm of %.2f m", b.Mass/1e3, b.Arm)
		out = append(out, m)
	}
	slices.SortFunc(out, func(a, b schedule.Member) int { return strings.Compare(a.Mark, b.Mark) })
	return out
}

// given is a row with a given section, which the estimate checks and prices.
func (s *ArrangementStudy) given(mark, group, class string, sec section.Section, length float64) schedule.Member {
	return schedule.Member{Mark: mark, Group: group, Quantity: 1, Length: rounded(length), Treatment: schedule.CheckSection,
		Family: sec.Family, Section: sec.Designation, Grade: s.Study.Setup.Grade.Name, ConnectionClass: class}
}

// byMass is a row of steel by its mass, one metre for each row's whole kilograms.
func byMass(mark, group, kind, class, description string, length, kilograms float64) schedule.Member {
	return schedule.Member{Mark: mark, Group: group, Kind: kind, Description: description, Quantity: 1, Length: rounded(length),
		Treatment: schedule.ByMass, Arrangement: notSized, LineMass: rounded(kilograms / length), ConnectionClass: class}
}

// concrete is a row of concrete alone; volume is that of one, m³.
func concrete(mark string, count int, volume float64) schedule.Member {
	return schedule.Member{Mark: mark, Group: foundationGroup, Kind: schedule.KindFoundation, Quantity: count,
		Treatment: schedule.ByMass, Arrangement: notSized, Concrete: rounded(volume), ConnectionClass: noClass}
}

// rounded keeps as many digits as the schedule does.
func rounded(v float64) float64 { return unit.Round(v, unit.Digits) }

// main is the main member on its supports under the study's loads.
func (s *ArrangementStudy) main(c *arrangement.Candidate) schedule.Member {
	root := rootOf(c)
	class := plainClass
	if isBoom(s.Kind) {
		class = boomClass
	}
	m := s.given("MAIN", mainGroup, class, c.Result.Section, root+s.Study.Member.Length)
	m.Kind, m.Arrangement, m.Description = s.Kind, atPositions, c.Name
	for _, u := range c.Supports {
		kind := pinned
		if u.Kind == beam.Fixed {
			kind = fixed
		}
		m.Supports = append(m.Supports, schedule.Support{Position: rounded(u.X + root), Kind: kind})
	}
	limits := s.Study.Member
	m.Restraint, m.LengthFactor, m.MomentFactor = limits.RestraintSpacing, limits.LengthFactor, limits.MomentFactor
	m.NetAreaFactor, m.DeflectionLimit, m.FrequencyFloor = limits.NetAreaFactor, limits.DeflectionLimit, limits.FrequencyFloor
	m.Loads = s.loads(c, root)
	return m
}

// rootOf is how far the root lies from the member's left end: the tail, m.
func rootOf(c *arrangement.Candidate) float64 {
	root := 0.0
	for _, u := range c.Supports {
		root = max(root, -u.X)
	}
	return root
}

func isBoom(kind string) bool { return strings.Contains(strings.ToLower(kind), "boom") }

// lattice are the chords, the diagonals and the plan bracing. The kind of the chords is
// that of the main member, so that lumps which ask for it are priced alike.
func (s *ArrangementStudy) lattice(c *arrangement.Candidate) []schedule.Member {
	t := c.Truss
	n, d := t.Panels, t.Diagonals/float64(2*t.Panels)
	axial := s.latticeAxial(&t.Chord, sizing.Member{Length: t.Panel, Supports: ends(t.Panel)})
	chord := func(mark, description string, panels int, force float64) schedule.Member {
		m := s.given(mark, mainGroup, latticeClass, t.Chord.Section, float64(panels)*t.Panel)
		m.Kind, m.Description, m.Arrangement, m.Axial, m.LengthFactor = s.Kind, description, atPositions, rounded(force), 1
		for i := range panels + 1 {
			m.Supports = append(m.Supports, schedule.Support{Position: rounded(float64(i) * t.Panel), Kind: pinned})
		}
		m.Loads = s.localLoads(m.Length)
		return m
	}
	web := s.given("DIAGONAL", mainGroup, latticeClass, t.Diagonal.Section, d)
	web.Kind, web.Description, web.Arrangement, web.LengthFactor = "diagonal", "the diagonal with the greatest force", aStrut, 1
	web.Supports = supportsAt(d)
	web.Axial = rounded(s.latticeAxial(&t.Diagonal, sizing.Member{Length: d, Supports: ends(d)}))
	out := []schedule.Member{
		chord("CHORD-BOTTOM", "bottom chord", n, -axial),
		chord("CHORD-TOP", "top chord", n-1, axial),
		web,
		byMass("DIAGONALS-OTHER", mainGroup, "diagonal", latticeClass, fmt.Sprintf("the other %d diagonals", 2*n-1),
			t.Diagonals-d, (t.Diagonals-d)*t.Diagonal.Section.Mass),
	}
	if kg := planBracing(c, &s.Study); kg > 0 {
		out = append(out, byMass("PLAN-BRACING", mainGroup, "bracing", latticeClass, "plan bracing and gussets, as the study lets the lattice carry them", s.Study.Member.Length, kg))
	}
	return out
}

// planBracing is the mass that a lattice carries beside its bars, kg: the study counts
// it in the own weight and not in the mass.
func planBracing(c *arrangement.Candidate, s *arrangement.Study) float64 {
	if c.Truss == nil {
		return 0
	}
	return max(0, c.Truss.OwnWeight*s.Member.Length/s.Setup.Gravity-c.Truss.Mass)
}

func ends(length float64) []beam.Support {
	return []beam.Support{{X: 0, Kind: beam.Pinned}, {X: length, Kind: beam.Pinned}}
}

func supportsAt(length float64) []schedule.Support {
	return []schedule.Support{{Position: 0, Kind: pinned}, {Position: rounded(length), Kind: pinned}}
}
