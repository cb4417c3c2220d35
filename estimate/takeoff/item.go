package takeoff

import (
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

// Allowance is one factor of a quantity: Offset + the value of a spread.
type Allowance struct {
	ID     string // of its register entry
	Spread spread.Spread
	Offset float64 // 1 for an allowance on what is below it, 0 for a factor
	Group  string  // correlation group; empty for an independent one
}

// Value returns the factor at the likely value.
func (a Allowance) Value() float64 { return a.Offset + a.Spread.Base() }

// Quantity is how much of a driver an item has: Value = a measured quantity times
// the factors, rounded once to the driver's places. What is known without a spread
// (a crew, a distance, the mass of the drawing) is in the measured quantity; the
// ids of such entries are Fixed.
type Quantity struct {
	Driver   ratebook.Driver
	Value    money.Decimal
	Measured float64     // before the factors, in the driver's unit
	Factors  []Allowance // at likely values Value = Measured · Π Factors, rounded
	Fixed    []string    // register ids that Measured depends on, schedule inputs aside
	Formula  string      // in words: how it is made
}

// The treatments of items that are no rows of the schedule: counted joints, and
// concrete.
const (
	Joint    = "joint"
	Concrete = "concrete"
)

// Item is a number of pieces that are counted and priced together.
type Item struct {
	ID         string
	Group      string
	Family     string
	Treatment  string // that of the rows, or Joint or Concrete
	Connection string // class; CountedJoints where the joints are items of their own
	Waste      string
	Coating    string   // system; that of the rows or of the job
	Execution  string   // class; that of the rows or of the job
	Marks      []string // sorted
	Pieces     int
	Length     float64 // m, all pieces
	Surface    float64 // m², painted, of the sections as drawn
	Net        money.Decimal
	Delivered  money.Decimal
	Purchased  money.Decimal
	Quantities []Quantity // by driver, in the order of ratebook.Drivers; those above zero
}

// CountedJoints is the connection class of rows whose joints are counted.
const CountedJoints = "counted joints"

// ReadyMade is the connection class of rows that are bought with their connections
// and delivered coated.
const ReadyMade = "none"

// Quantity returns the item's quantity of a driver.
func (it Item) Quantity(d ratebook.Driver) (Quantity, bool) {
	for _, q := range it.Quantities {
		if q.Driver == d {
			return q, true
		}
	}
	return Quantity{}, false
}

// Place is where the item's rates and multipliers are looked up. The first mark
// stands for all: rows that a rate or multiplier treats by mark are items of their
// own.
func (it Item) Place() ratebook.Place {
	p := ratebook.Place{Group: it.Group, Family: it.Family, Treatment: it.Treatment, Connection: it.Connection,
		Waste: it.Waste, Coating: it.Coating, Execution: it.Execution}
	if len(it.Marks) > 0 {
		p.Mark = it.Marks[0]
	}
	return p
}
