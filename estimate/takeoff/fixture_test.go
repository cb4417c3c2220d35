package takeoff

import (
	"math/rand/v2"
	"strconv"
	"testing"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
	"spanwright/structural/section"
)

func fixed(id string, v, offset float64) Allowance {
	return Allowance{ID: id, Spread: spread.NewFixed(v), Offset: offset}
}

// allowances are round figures, invented, without norms.
func allowances() Allowances {
	return Allowances{
		SizingBias:  fixed("bias", 1, 0),
		Connections: map[string]Allowance{"simple beams": fixed("c", 0.06, 1), "lattice": fixed("l", 0.15, 1)},
		Bolts:       fixed("b", 0.02, 1), Growth: fixed("g", 0.18, 1),
		Waste: map[string]Allowance{"sections": fixed("ws", 0.07, 1), "tube": fixed("wt", 0.09, 1), "plate": fixed("wp", 0.14, 1)},
	}
}

// withNorms adds norms, invented but for the zinc.
func withNorms() Allowances {
	a := allowances()
	hours := func(v float64) map[string]Allowance {
		return map[string]Allowance{"simple beams": fixed("h", v, 0), "lattice": fixed("hl", 3*v, 0)}
	}
	rows := fixed("row surface", 30, 0)
	a.Norms = &NormAllowances{
		ShopHours: hours(12), SiteHours: hours(9), Joints: map[string]JointAllowances{},
		Surface: fixed("surface", 0.06, 1), RowSurface: &rows, LoadUse: fixed("load use", 1.35, 0), LiftDays: fixed("lift", 0.1, 0),
		Crew: fixed("crew", 6, 0), WeekHours: fixed("week", 40, 0), HaulDistance: fixed("haul", 150, 0),
		// ISO 1461:2009, table 3, mean coating mass (from memory).
		Zinc: []ratebook.ZincNorm{{UpTo: 1.5, Mass: 325}, {UpTo: 3, Mass: 395}, {UpTo: 6, Mass: 505}, {UpTo: 0, Mass: 610}},
	}
	for i, kind := range schedule.JointKinds() {
		k := float64(i)
		a.Norms.Joints[kind] = JointAllowances{
			Mass: fixed(kind+" kg", 40+k, 0), Bolts: fixed(kind+" bolts", 6+k, 0),
			ShopHours: fixed(kind+" shop", 5+k, 0), SiteHours: fixed(kind+" site", 2+k, 0),
		}
	}
	return a
}

func beam(mark string, quantity int, length float64) Piece {
	return Piece{
		Member: schedule.Member{Mark: mark, Group: "Gallery", Quantity: quantity, Length: length, Treatment: schedule.SizeFromFamily, ConnectionClass: "simple beams"},
		Family: "IPE", Designation: "IPE 300", Grade: "S275", LineMass: 42.2, Surface: 1.16,
		Depth: 0.3, Width: 0.15, Thickness: 0.0071, Thickest: 0.0107, Waste: "sections",
	}
}

func limited() Settings { return Settings{Limits: ratebook.DefaultLimits()} }

func count(t *testing.T, pieces []Piece, a Allowances, s Settings) []Item {
	t.Helper()
	items, err := Count(pieces, a, s)
	if err != nil {
		t.Fatal(err)
	}
	return items
}

func byID(t *testing.T, items []Item, id string) Item {
	t.Helper()
	var ids []string
	for _, it := range items {
		if it.ID == id {
			return it
		}
		ids = append(ids, it.ID)
	}
	t.Fatalf("no item %q in %q", id, ids)
	return Item{}
}

// text returns the item's quantity of a driver as printed, "" where it has none.
func text(it Item, d ratebook.Driver) string {
	q, ok := it.Quantity(d)
	if !ok {
		return ""
	}
	return q.Value.String()
}

// randomPieces are rows of every sort, the same for the same seed.
func randomPieces(t *testing.T, seed uint64, n int) []Piece {
	t.Helper()
	r := rand.New(rand.NewPCG(seed, 1))
	sections := []*section.Section{nil}
	for _, name := range []string{"IPE 300", "IPE 200", "CHS 508x25.4", "RHS 200x100x8", "UPN 200", "FLAT 100x10", "WELDED-I 500x200x10x16", "WELDED-BOX 600x400x12x20", "4x L 100x100x10 @ 800x600"} {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		sections = append(sections, &s)
	}
	pick := func(list ...string) string { return list[r.IntN(len(list))] }
	var out []Piece
	for i := range n {
		sec := sections[r.IntN(len(sections))]
		m := schedule.Member{
			Mark: "M" + strconv.Itoa(i), Group: pick("Gallery", "Quay/1", "Brine tower"), Kind: pick("beam", "handrail", "grating"),
			Quantity: 1 + r.IntN(40), Length: float64(1+r.IntN(30000)) / 1000, Grade: pick("S235", "S355"),
			ConnectionClass: pick("simple beams", "lattice"), Coating: pick("", "", "C4 high", "hot-dip galvanised", Uncoated), ExecutionClass: pick("", schedule.EXC3),
			Treatment: schedule.SizeFromFamily,
		}
		switch {
		case sec == nil:
			m.Treatment, m.LineMass = schedule.ByMass, 14.5
			if r.IntN(2) == 0 {
				m.LineMass, m.AreaMass, m.Area = 0, 28.5, 12
			}
			if r.IntN(4) == 0 {
				m.LineMass, m.AreaMass, m.Concrete = 0, 0, 3.75
			}
		case r.IntN(2) == 0:
			m.Treatment = schedule.CheckSection
		}
		if sec != nil && r.IntN(3) == 0 {
			m.Joints = []schedule.Joint{{Kind: schedule.JointMoment, Count: 1 + r.IntN(4)}, {Kind: schedule.JointSiteSplice, Count: 1}}
		}
		p := NewPiece(m, sec)
		if r.IntN(10) == 0 {
			p.Split = "a rate of its own"
		}
		out = append(out, p)
	}
	return out
}
