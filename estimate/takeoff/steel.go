package takeoff

import (
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// steelSum is an item of rows with their steel.
type steelSum struct {
	item  Item
	rows  []Piece
	apart bool // rows differ in how they are bought: by a plan, or by another waste
}

func (c *counter) addSteel(p Piece) {
	class := c.a.class(p)
	segments := []string{p.Member.Group, p.Family, string(p.Member.Treatment), class}
	if p.Member.AreaMass > 0 {
		segments = append(segments, "by area") // another waste allowance than rows by length
	}
	id := c.itemID(p, segments...)
	s, ok := c.sums[id].(*steelSum)
	if !ok {
		item := c.item(id, p)
		item.Family, item.Treatment, item.Connection, item.Waste = p.Family, string(p.Member.Treatment), class, p.Waste
		s = &steelSum{item: item}
		c.sums[id] = s
	}
	s.rows = append(s.rows, p)
	_, planned := c.s.plan(p)
	s.apart = s.apart || planned || p.Waste != s.item.Waste
	s.item.Marks = append(s.item.Marks, p.Member.Mark)
	s.item.Pieces += p.Member.Quantity
	s.item.Length += p.length()
	s.item.Surface += float64(p.length() * p.Surface)
}

// total sums a measure over the rows.
func (m *steelSum) total(measure func(Piece) float64) float64 {
	t := 0.0
	for _, p := range m.rows {
		t += float64(measure(p))
	}
	return t
}

func (m *steelSum) finish(b *builder, a Allowances, s Settings) Item {
	tonnes := m.total(Piece.Net) / 1000
	first := m.rows[0] // of all rows the same factors hold
	delivered := a.delivered(first)
	var bias []Allowance
	if first.Member.Treatment == schedule.SizeFromFamily {
		bias = []Allowance{a.SizingBias}
	}
	b.put(ratebook.NetTonnes, tonnes, bias, "drawn mass at nominal kg/m or kg/m²")
	b.put(ratebook.DeliveredTonnes, tonnes, delivered, "net mass × ("+factorWords(a, first)+")")
	m.purchase(b, a, s, tonnes)
	b.put(ratebook.Metres, m.item.Length, nil, "length of all pieces")
	b.put(ratebook.Pieces, float64(m.item.Pieces), nil, "pieces of the schedule")
	m.coat(b, a)
	if a.Norms != nil {
		m.work(b, a, s, tonnes, delivered)
	}
	m.item.Net, _ = roundTonnes(tonnes) // an error would stand in the net quantity already
	m.item.Delivered, m.item.Purchased = b.value(ratebook.DeliveredTonnes), b.value(ratebook.PurchasedTonnes)
	return m.item
}

// work states what norms make of the mass: weld metal, hours, transport, lifts.
// Without norms of hours for steel between counted joints, the hours are those of
// the joints alone.
func (m *steelSum) work(b *builder, a Allowances, s Settings, tonnes float64, delivered []Allowance) {
	n, class := a.Norms, m.item.Connection
	b.put(ratebook.WeldKilograms, m.total(func(p Piece) float64 { return p.Weld * p.length() }), []Allowance{a.Growth},
		"fillets along sections welded from plates, throat half the web, a² × 7850 kg/m³ each, × growth", WeldID)
	if perTonne, ok := n.ShopHours[class]; ok {
		b.put(ratebook.ShopHours, tonnes, with(delivered, perTonne), "delivered mass × h/t of the class")
	}
	perTonne, erected := n.SiteHours[class]
	if erected {
		b.put(ratebook.SiteHours, tonnes, with(delivered, perTonne), "delivered mass × h/t of the class")
	}
	m.ship(b, a, s, delivered)
	b.haul(a, s, tonnes, delivered)
	b.put(ratebook.CraneDays, m.total(func(p Piece) float64 { return float64(parts(p, s)) }), []Allowance{a.Growth, n.LiftDays},
		"lifts, one for each delivered part, × growth × days per lift", m.splitIDs(s)...)
	if erected {
		b.weeks(n, tonnes, with(delivered, perTonne))
	}
}

// factorWords names the factors of delivered mass.
func factorWords(a Allowances, p Piece) string {
	words := ""
	if p.Member.Treatment == schedule.SizeFromFamily {
		words = "sizing bias, "
	}
	if a.Counted(p) {
		return words + "growth; joints are counted apart"
	}
	return words + "connections, growth, bolts"
}

// splitIDs is what the number of delivered parts depends on.
func (m *steelSum) splitIDs(s Settings) []string {
	for _, p := range m.rows {
		if Parts(p, s) > 1 {
			return []string{SplicesID, VehicleID}
		}
	}
	return nil
}

// purchase states what is bought: by the waste allowance, or by the cutting plan,
// of which each row has its share by net mass. Where rows are bought in several
// ways, waste at its likely value is in the measured mass. Connections, growth and
// bias act on all.
func (m *steelSum) purchase(b *builder, a Allowances, s Settings, tonnes float64) {
	designed, waste := a.designed(m.rows[0]), a.Waste[m.item.Waste]
	if !m.apart {
		b.put(ratebook.PurchasedTonnes, tonnes, with(designed, waste), "net mass × (the factors of delivered mass, less bolts, with waste in buying "+m.item.Waste+")")
		return
	}
	var fixed []string
	plans := false
	bought := m.total(func(p Piece) float64 {
		if plan, ok := s.plan(p); ok {
			plans = true
			return p.Net() * (plan.Purchased / plan.Net)
		}
		w := a.Waste[p.Waste]
		fixed = append(fixed, w.ID)
		return p.Net() * w.Value()
	})
	const rest = " × (the factors of delivered mass, less bolts)"
	words := "net mass of each row with the waste of its form"
	switch {
	case plans && fixed == nil:
		words = "share of the stock in the cutting plans of its sections by net mass, without a waste allowance,"
	case plans:
		words = "share of the stock in the cutting plans of its sections by net mass, rows without a plan with the waste of their form,"
	}
	b.put(ratebook.PurchasedTonnes, bought/1000, designed, words+rest, fixed...)
}
