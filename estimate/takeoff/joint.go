package takeoff

import (
	"fmt"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// ShopSplice is the joint of bars that are longer than the longest stock length. A
// book without a norm for it has it in the hours of the connection class.
const ShopSplice = "shop splice"

// jointSum is an item of counted joints of one kind: their plates with the hours,
// or their bolts, which are not bought by mass of steel.
type jointSum struct {
	item    Item
	bolts   bool
	count   int
	split   int // of them: those that the length of pieces asks for
	defined JointAllowances
}

// addJoints counts the joints of the row, and those that its length asks for.
func (c *counter) addJoints(p Piece) {
	if c.a.Norms == nil {
		return
	}
	for i, j := range c.a.jointsOf(p, c.s) {
		split := 0
		if i >= len(p.Member.Joints) {
			split = j.Count
		}
		c.addJoint(p, j.Kind, j.Count, split)
	}
}

// jointsOf returns the joints of all pieces of the row as they are counted, and
// last, where its length asks for more site splices than are counted, the missing
// ones, and the joints of the shop where the book has a norm for them.
func (a Allowances) jointsOf(p Piece, s Settings) []schedule.Joint {
	var list []schedule.Joint
	splices := Splices(p, s)
	for _, j := range p.Member.Joints {
		n := p.Member.Quantity * j.Count
		if j.Kind == schedule.JointSiteSplice {
			splices -= n
		}
		list = append(list, schedule.Joint{Kind: j.Kind, Count: n})
	}
	if splices > 0 {
		list = append(list, schedule.Joint{Kind: schedule.JointSiteSplice, Count: splices})
	}
	if _, ok := a.Norms.Joints[ShopSplice]; ok {
		if n := ShopJoints(p, s); n > 0 {
			list = append(list, schedule.Joint{Kind: ShopSplice, Count: n})
		}
	}
	return list
}

func (c *counter) addJoint(p Piece, kind string, count, split int) {
	norm, ok := c.a.Norms.Joints[kind]
	if !ok {
		c.fault(p, fmt.Sprintf("the norms of the rate book have no joint %q", kind), "add it to the book; it has "+names(c.a.Norms.Joints))
		return
	}
	if _, ok := c.a.Waste[ratebook.WastePlate]; !ok {
		c.fault(p, fmt.Sprintf("the rate book has no waste allowance for %q, of which joints are made", ratebook.WastePlate), "one of "+names(c.a.Waste))
		return
	}
	for _, bolts := range []bool{false, true} {
		family := kind
		if bolts {
			family += " bolts"
		}
		id := c.itemID(p, p.Member.Group, family, Joint)
		s, ok := c.sums[id].(*jointSum)
		if !ok {
			item := c.item(id, p)
			item.Family, item.Treatment, item.Connection, item.Waste = family, Joint, CountedJoints, ratebook.WastePlate
			s = &jointSum{item: item, bolts: bolts, defined: norm}
			c.sums[id] = s
		}
		s.count += count
		s.split += split
		if marks := s.item.Marks; len(marks) == 0 || marks[len(marks)-1] != p.Member.Mark {
			s.item.Marks = append(s.item.Marks, p.Member.Mark)
		}
	}
}

func (m *jointSum) finish(b *builder, a Allowances, s Settings) Item {
	var fixed []string
	why := ""
	if m.split > 0 {
		fixed = []string{SplicesID, VehicleID}
		longer := "a vehicle"
		if m.item.Family == ShopSplice || m.item.Family == ShopSplice+" bolts" {
			longer = "the longest stock"
		}
		why = fmt.Sprintf("; %d of them because pieces are longer than %s", m.split, longer)
	}
	n, count := a.Norms, float64(m.count)
	each := m.defined.Mass
	if m.bolts {
		each = m.defined.Bolts
	}
	mass := []Allowance{each, a.Growth}
	b.fixed = fixed
	b.put(ratebook.DeliveredTonnes, count/1000, mass, fmt.Sprintf("%d joints × kg each × growth%s", m.count, why))
	if !m.bolts {
		b.put(ratebook.PurchasedTonnes, count/1000, with(mass, a.Waste[ratebook.WastePlate]), fmt.Sprintf("%d joints × kg of plates each × growth × waste in buying plate%s", m.count, why))
		b.put(ratebook.Pieces, count, nil, "joints"+why)
		b.put(ratebook.ShopHours, count, []Allowance{m.defined.ShopHours, a.Growth}, fmt.Sprintf("%d joints × h each × growth%s", m.count, why))
		b.put(ratebook.SiteHours, count, []Allowance{m.defined.SiteHours, a.Growth}, fmt.Sprintf("%d joints × h each × growth%s", m.count, why))
	}
	if capacity := s.Limits.Vehicle.Mass; capacity > 0 {
		b.put(ratebook.Truckloads, count/capacity, with(mass, n.LoadUse), "vehicles by mass × vehicles needed over vehicles filled", VehicleID)
	}
	b.haul(a, s, count/1000, mass)
	if !m.bolts {
		b.weeks(n, count, []Allowance{m.defined.SiteHours, a.Growth})
	}
	m.item.Net, _ = roundTonnes(0)
	m.item.Delivered, m.item.Purchased = b.value(ratebook.DeliveredTonnes), b.value(ratebook.PurchasedTonnes)
	return m.item
}

// concreteSum is the concrete of one group.
type concreteSum struct {
	item   Item
	volume float64 // m³
}

func (c *counter) addConcrete(p Piece) {
	id := c.itemID(p, p.Member.Group, Concrete, Concrete)
	s, ok := c.sums[id].(*concreteSum)
	if !ok {
		item := c.item(id, p)
		item.Family, item.Treatment = Concrete, Concrete
		s = &concreteSum{item: item}
		c.sums[id] = s
	}
	s.volume += float64(float64(p.Member.Quantity) * p.Member.Concrete)
	s.item.Marks = append(s.item.Marks, p.Member.Mark)
	if p.Net() == 0 { // pieces with steel are counted with it
		s.item.Pieces += p.Member.Quantity
	}
}

func (m *concreteSum) finish(b *builder, _ Allowances, _ Settings) Item {
	b.put(ratebook.CubicMetres, m.volume, nil, "concrete of all pieces")
	zero, _ := roundTonnes(0)
	m.item.Net, m.item.Delivered, m.item.Purchased = zero, zero, zero
	return m.item
}
