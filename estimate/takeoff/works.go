package takeoff

import (
	"slices"
	"strings"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

func roundTonnes(t float64) (money.Decimal, error) {
	return money.FromFloat(t, ratebook.NetTonnes.Places())
}

// unique sorts the ids, each once.
func unique(ids []string) []string {
	slices.Sort(ids)
	return slices.Compact(ids)
}

// Uncoated is the name of no coating. An empty one is not settled: its surface is
// counted, and the rates say what becomes of it.
const Uncoated = "none"

// Galvanised tells whether a coating system names galvanising, alone or under
// paint.
func Galvanised(system string) bool {
	system = strings.ToLower(system)
	return strings.Contains(system, "galvani") || strings.Contains(system, "duplex")
}

// coat states the surface to be coated and the zinc on it.
func (m *steelSum) coat(b *builder, a Allowances) {
	if strings.EqualFold(m.item.Coating, Uncoated) {
		return
	}
	if a.Norms == nil {
		b.put(ratebook.SquareMetres, m.item.Surface, nil, "surface of the members")
		return
	}
	surface := []Allowance{a.Norms.Surface}
	b.put(ratebook.SquareMetres, m.item.Surface, surface, "surface of the members × (1 + that of connections)")
	if !Galvanised(m.item.Coating) {
		return
	}
	var used []string
	zinc := m.total(func(p Piece) float64 {
		g, ids := a.Norms.zinc(p)
		used = append(used, ids...)
		return p.length() * p.Surface * g / 1000
	})
	b.put(ratebook.ZincKilograms, zinc, surface, "surface of the members × g/m² of zinc by thickness, mean of the thinnest and the thickest plate × (1 + surface of connections)", used...)
}

// zinc returns the coating mass of the row's section in g/m², and the ids of the
// norms. ISO 1461 states it by thickness of the part: the mean of the thinnest and
// the thickest plate is taken.
func (n *NormAllowances) zinc(p Piece) (float64, []string) {
	thin, thick := n.zincAt(p.Thickness), n.zincAt(p.Thickest)
	if thin == nil || thick == nil {
		return 0, nil
	}
	return (thin.Mass + thick.Mass) / 2, []string{zincID(*thin), zincID(*thick)}
}

// zincAt returns the norm of a thickness in m; nil where there is none.
func (n *NormAllowances) zincAt(t float64) *ratebook.ZincNorm {
	for i, z := range n.Zinc {
		if z.UpTo == 0 || t*1000 <= z.UpTo+1e-9 {
			return &n.Zinc[i]
		}
	}
	return nil
}

// haul states tonne-kilometres of what weighs tonnes times factors.
func (b *builder) haul(a Allowances, s Settings, tonnes float64, factors []Allowance) {
	if s.Haul > 0 {
		b.put(ratebook.TonneKilometres, tonnes*s.Haul, factors, "delivered mass × the job's haul distance", HaulInputID)
		return
	}
	b.put(ratebook.TonneKilometres, tonnes, with(factors, a.Norms.HaulDistance), "delivered mass × haul distance")
}

// weeks states the time on site of hours = measured · Π factors.
func (b *builder) weeks(n *NormAllowances, measured float64, factors []Allowance) {
	if perWeek := n.Crew.Value() * n.WeekHours.Value(); perWeek > 0 {
		b.put(ratebook.Weeks, measured/perWeek, factors, "site hours ÷ (persons × hours of a person per week)", CrewID, WeekHoursID)
	}
}

// painted tells whether a coating system is paint, or paint on zinc; one that is not
// settled is taken as paint.
func painted(system string) bool {
	system = strings.ToLower(system)
	return system != Uncoated && (!Galvanised(system) || strings.Contains(system, "duplex") || strings.Contains(system, "paint"))
}
