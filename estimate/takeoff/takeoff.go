// Package takeoff turns sized members into quantities.
//
//	members with their chosen sections → Piece (net mass, surface)
//	pieces alike in group, family, treatment, connections and overrides → Item
//	item: net → delivered (sizing bias, connections, bolts, growth)
//	          → purchased (delivered less bolts, with waste)
//	floats become decimals here, once, to the kilogram
package takeoff

import (
	"fmt"
	"sort"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// places is the number of decimals of a tonnage: kilograms.
const places = 3

// Piece is one schedule row with what its section adds.
type Piece struct {
	Member   schedule.Member
	Family   string  // of the chosen section; the kind of a row that is not sized
	LineMass float64 // kg/m, nominal, of the chosen section
	Surface  float64 // m²/m, painted
	Waste    string  // which waste allowance its purchase carries
	Split    string  // separates pieces that multipliers treat differently
}

// Net returns the drawn mass of all pieces of the row in kg: nominal mass per
// metre by length, or mass per square metre by area.
func (p Piece) Net() float64 {
	n := float64(p.Member.Quantity)
	if p.Member.Treatment == schedule.ByMass && p.Member.AreaMass > 0 {
		return n * p.Member.AreaMass * p.Member.Area
	}
	return n * p.LineMass * p.Member.Length
}

// Allowance is one factor between two masses: Offset + the value of a spread.
type Allowance struct {
	ID     string // of its register entry
	Spread spread.Spread
	Offset float64 // 1 for an allowance on what is below it, 0 for a factor
}

// Value returns the factor at the likely value.
func (a Allowance) Value() float64 { return a.Offset + a.Spread.Base() }

// Allowances are those of one job, by what they act on.
type Allowances struct {
	SizingBias  Allowance
	Connections map[string]Allowance // by connection class
	Bolts       Allowance
	Growth      Allowance
	Waste       map[string]Allowance // by kind of waste
}

// Item is a number of pieces that are counted and priced together.
type Item struct {
	ID          string
	Group       string
	Family      string
	Treatment   schedule.Treatment
	Connection  string
	Waste       string
	Marks       []string // sorted
	Pieces      int
	Length      float64       // m, all pieces
	Surface     float64       // m², painted
	Net         money.Decimal // t
	Delivered   money.Decimal // t
	Purchased   money.Decimal // t
	ToDelivered []Allowance   // factors from net to delivered
	ToPurchased []Allowance   // factors from net to purchased
}

// Count gathers pieces into items, sorted by id. An unknown connection or waste
// class is an error that names the mark.
func Count(pieces []Piece, a Allowances) ([]Item, error) {
	sums := map[string]*sum{}
	for _, p := range pieces {
		id := itemID(p)
		s, ok := sums[id]
		if !ok {
			item, err := newItem(id, p, a)
			if err != nil {
				return nil, err
			}
			s = &sum{item: item}
			sums[id] = s
		}
		s.add(p)
	}
	ids := make([]string, 0, len(sums))
	for id := range sums {
		ids = append(ids, id)
	}
	sort.Strings(ids)
	items := make([]Item, 0, len(ids))
	for _, id := range ids {
		item, err := sums[id].finish()
		if err != nil {
			return nil, err
		}
		items = append(items, item)
	}
	return items, nil
}

func itemID(p Piece) string {
	parts := []string{p.Member.Group, p.Family, string(p.Member.Treatment), p.Member.ConnectionClass}
	if p.Member.AreaMass > 0 {
		parts = append(parts, "by area") // another waste allowance than rows by length
	}
	if p.Split != "" {
		parts = append(parts, p.Member.Mark)
	}
	for i, s := range parts {
		parts[i] = assumption.Segment(s)
	}
	return strings.Join(parts, "/")
}

type sum struct {
	item Item
	net  float64 // kg
}

func newItem(id string, p Piece, a Allowances) (Item, error) {
	conn, ok := a.Connections[p.Member.ConnectionClass]
	if !ok {
		return Item{}, fmt.Errorf("member %s: the rate book has no connection class %q", p.Member.Mark, p.Member.ConnectionClass)
	}
	waste, ok := a.Waste[p.Waste]
	if !ok {
		return Item{}, fmt.Errorf("member %s: the rate book has no waste allowance for %q", p.Member.Mark, p.Waste)
	}
	var common []Allowance
	if p.Member.Treatment == schedule.SizeFromFamily {
		common = append(common, a.SizingBias)
	}
	common = append(common, conn, a.Growth)
	return Item{
		ID: id, Group: p.Member.Group, Family: p.Family, Treatment: p.Member.Treatment,
		Connection: p.Member.ConnectionClass, Waste: p.Waste,
		ToDelivered: append(append([]Allowance{}, common...), a.Bolts),
		ToPurchased: append(append([]Allowance{}, common...), waste),
	}, nil
}

func (s *sum) add(p Piece) {
	s.item.Marks = append(s.item.Marks, p.Member.Mark)
	s.item.Pieces += p.Member.Quantity
	s.item.Length += float64(p.Member.Quantity) * p.Member.Length
	s.item.Surface += float64(p.Member.Quantity) * p.Member.Length * p.Surface
	s.net += p.Net()
}

func (s *sum) finish() (Item, error) {
	sort.Strings(s.item.Marks)
	tonnes := s.net / 1000
	delivered, purchased := tonnes, tonnes
	for _, f := range s.item.ToDelivered {
		delivered *= f.Value()
	}
	for _, f := range s.item.ToPurchased {
		purchased *= f.Value()
	}
	for _, m := range []struct {
		into *money.Decimal
		t    float64
	}{{&s.item.Net, tonnes}, {&s.item.Delivered, delivered}, {&s.item.Purchased, purchased}} {
		d, err := money.FromFloat(m.t, places)
		if err != nil {
			return Item{}, fmt.Errorf("take-off of %s: %w", s.item.ID, err)
		}
		*m.into = d
	}
	return s.item, nil
}
