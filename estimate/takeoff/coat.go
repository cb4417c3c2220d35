package takeoff

import (
	"strings"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// Uncoated is the name of no coating. An empty one is not settled: its surface is
// counted, and the rates say what becomes of it.
const Uncoated = "none"

// Galvanised tells whether a coating system names galvanising, alone or under
// paint.
func Galvanised(system string) bool {
	system = strings.ToLower(system)
	return strings.Contains(system, "galvani") || strings.Contains(system, "duplex")
}

// painted tells whether a coating system is paint, or paint on zinc; one that is not
// settled is taken as paint.
func painted(system string) bool {
	system = strings.ToLower(system)
	return system != Uncoated && (!Galvanised(system) || strings.Contains(system, "duplex") || strings.Contains(system, "paint"))
}

// coat states the surface to be coated and the zinc on it.
func (m *steelSum) coat(b *builder, a Allowances) {
	switch {
	case strings.EqualFold(m.item.Coating, Uncoated):
	case a.Norms == nil:
		b.put(ratebook.SquareMetres, m.item.Surface, []Allowance{a.Growth}, "surface of the members × growth")
	case m.rows[0].Member.Treatment != schedule.ByMass:
		m.coatMembers(b, a)
	case a.Norms.RowSurface != nil && m.item.Connection != ReadyMade:
		m.coatRows(b, a)
	}
}

// coatMembers coats sized rows: paint goes on the outside, the bath wets tubes and
// boxes inside too.
func (m *steelSum) coatMembers(b *builder, a Allowances) {
	factors := []Allowance{a.Norms.Surface, a.Growth}
	b.put(ratebook.SquareMetres, m.item.Surface, factors, "surface of the members × (1 + that of connections) × growth")
	m.zinc(b, a, factors, func(p Piece) float64 { return p.length() * (p.Surface + p.Inside) },
		"surface of the members, of tubes and boxes the inside too, × g/m² of zinc by thickness, mean of the thinnest and the thickest plate × (1 + surface of connections) × growth")
}

// coatRows coats rows by mass: both faces of an area, else the norm by net tonne.
func (m *steelSum) coatRows(b *builder, a Allowances) {
	factors := []Allowance{a.Growth}
	dipped := func(p Piece) float64 { return 2 * float64(p.Member.Quantity) * p.Member.Area }
	words := "2 × area of the rows"
	if m.rows[0].Member.AreaMass == 0 {
		factors = []Allowance{*a.Norms.RowSurface, a.Growth}
		dipped = func(p Piece) float64 { return p.Net() / 1000 }
		words = "net mass × m²/t of rows by mass"
	}
	b.put(ratebook.SquareMetres, m.total(dipped), factors, words+" × growth; rows of connection class "+ReadyMade+" are delivered coated")
	m.zinc(b, a, factors, dipped, words+" × g/m² of zinc on a plate of that surface and mass × growth")
}

// zinc states the zinc on what each row has dipped, where the coating names it.
func (m *steelSum) zinc(b *builder, a Allowances, factors []Allowance, dipped func(Piece) float64, words string) {
	if !Galvanised(m.item.Coating) {
		return
	}
	var used []string
	kilograms := m.total(func(p Piece) float64 {
		g, ids := a.Norms.zinc(p)
		used = append(used, ids...)
		return dipped(p) * g / 1000
	})
	b.put(ratebook.ZincKilograms, kilograms, factors, words, used...)
}

// zinc returns the coating mass of the row in g/m², and the ids of the norms. ISO
// 1461 states it by thickness of the part: the mean of the thinnest and the thickest
// plate is taken.
func (n *NormAllowances) zinc(p Piece) (float64, []string) {
	thinnest, thickest := p.Thickness, p.Thickest
	if !p.sized() {
		thinnest = n.plateOf(p)
		thickest = thinnest
	}
	thin, thick := n.zincAt(thinnest), n.zincAt(thickest)
	if thin == nil || thick == nil {
		return 0, nil
	}
	return (thin.Mass + thick.Mass) / 2, []string{zincID(*thin), zincID(*thick)}
}

// plateOf returns the thickness, m, of a plate with two faces that has the mass and
// the surface of a row by mass.
func (n *NormAllowances) plateOf(p Piece) float64 {
	if p.Member.AreaMass > 0 {
		return p.Member.AreaMass / steelDensity
	}
	return 2 * 1000 / (n.RowSurface.Value() * steelDensity)
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
