package pricing

import (
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// WholeStructure is the group of lines that belong to no group of members: lumps,
// what minimum orders and charges lack, and percentages upon them.
const WholeStructure = "whole structure"

// Applied is one multiplier on a line, with the scope that won.
type Applied struct {
	Name       string
	Scope      ratebook.Scope
	Subject    string
	Value      money.Decimal
	Assumption string
}

// Part is one factor that a price is made of: the price of the book itself, a
// multiple of the reference price, a fraction of other lines, a price break, an
// exchange rate, an escalation.
type Part struct {
	Name       string // price, reference price, ratio, fraction, MinimumShortfall, price break, exchange, escalation to base date, escalation to spend date
	Value      money.Decimal
	Assumption string // id of its register entry; empty for a definition such as the reference price
}

// Line is one priced quantity:
//
//	UnitPrice = Π Parts · Π Multipliers, rounded to UnitPlaces
//	Amount    = Quantity · UnitPrice, rounded to the currency's minor unit
//
// both half away from zero. UnitPlaces is two more than the currency's minor unit
// has, six for a percentage and four for carbon. The quantity of a percentage is
// the sum of the rounded lines in Of.
//
// A line that ends in /minimum order or /minimum charge is what the lines of its rate
// lack to a minimum: a quantity at the rate of the whole structure, or an amount. The
// total of a rate of equal multipliers does not move within its minimum, although
// each of the lines does. Lines share Parts, Multipliers and
// Assumptions: they are read, never changed.
type Line struct {
	ID          string // line/{item}/{rate}, line/whole structure/{rate}, and line/whole structure/{rate}/minimum order or /minimum charge
	Item        string // empty for the whole structure
	Group       string
	Category    string
	Driver      ratebook.Driver
	Quantity    money.Decimal
	Unit        string
	RateID      string // register entry of the rate
	RateScope   ratebook.Scope
	Rate        money.Decimal // Π Parts, exact; what the quantity costs before multipliers
	Parts       []Part
	Formula     string // in words: how the rate is made
	Multipliers []Applied
	UnitPrice   money.Decimal
	Amount      money.Decimal
	Of          []string // ids of the lines that a percentage is taken of
	Assumptions []string // ids of every entry that Quantity, Rate or Multipliers depend on, sorted, unique
	Note        string   // what the reader must know: a minimum that binds, a break that holds
}

// Priced is a priced job.
type Priced struct {
	Lines      []Line // by place (items, then the whole structure), category, rate id
	Categories map[string]money.Decimal
	Base       money.Decimal
	Model      Model
	Notes      []Note
}

// Note is something that the pricing saw and that the reader must know.
type Note struct {
	Code     string // expired, minimum-charge, minimum-order, price-break, not-triggered, no-quantity, no-rate
	Category string
	Subject  string // register entry of the rate; empty for no-rate
	Message  string
}

// Rates is what a job prices with.
type Rates struct {
	Rates       []ratebook.Rate // in force
	Reference   money.Decimal   // reference price of a ratio book
	Book        string          // currency of the book
	Multipliers []ratebook.Multiplier
	Categories  []string // those priced, in the order in which lines are made
	Currency    money.Currency
	Systemic    takeoff.Allowance       // the factor on the whole base, in the range only
	Exchange    map[string]Conversion   // by currency of a price: units of the job's currency for one
	Escalation  map[string][]Conversion // by category: to the base date, then to the spend date
	BaseDate    string                  // of the job: prices that ended before it are noted
	Facts       Facts
	Risks       []DiscreteRisk

	// Whole is the place of the lines of the whole structure and of percentages upon
	// them: the job's coating and execution class. Its other fields are not looked at.
	Whole ratebook.Place
}

// MinimumShortfall is the name of the price of what the lines of a rate lack to its
// minimum charge.
const MinimumShortfall = "minimum charge less the lines"

// The names of conversions.
const (
	ExchangeRate      = "exchange"
	EscalationToBase  = "escalation to base date"
	EscalationToSpend = "escalation to spend date"
)

// Conversion is a factor on prices with its register entry: an exchange rate or
// an escalation.
type Conversion struct {
	Name   string // ExchangeRate, EscalationToBase or EscalationToSpend
	ID     string
	Value  money.Decimal // at most 6 places
	Spread spread.Spread // its likely value is Value
	Group  string        // correlation group; empty for an independent one
	Stream string        // key of the random numbers, as Input.Stream
}

// Facts are what the triggers of lumps ask of a job.
type Facts struct {
	Kinds          []string // of the members
	Executions     []string // execution classes of the members
	SiteConditions []string
	Permits        int           // pieces that need a permit load
	Delivered      money.Decimal // t, all items
}

// DiscreteRisk is an event that adds its cost when it occurs. It is no part of
// the base.
type DiscreteRisk struct {
	ID          string // register entry
	Probability float64
	Impact      spread.Spread
}
