package ratebook

import "spanwright/estimate/money"

// Rate is a price per unit of a driver. Rates of one id override each other by
// scope, the most specific winning; those of different ids add up.
type Rate struct {
	ID       string `json:"id" doc:"name of the rate, such as shop labour; its register entry is rate/{id}"`
	Category string `json:"category"`
	Driver   Driver `json:"driver"`
	Figure
	Currency      string        `json:"currency,omitempty" doc:"of the price; blank is that of the book"`
	OfReference   bool          `json:"of_reference,omitempty" doc:"the figure is a multiple of the reference price"`
	Scope         Scope         `json:"scope,omitempty" doc:"member, group, family or rate book; blank is rate book"`
	Subject       string        `json:"subject,omitempty" doc:"the mark, group or family that the scope names"`
	Select        Selection     `json:"select,omitzero" doc:"the items that it prices; blank is all"`
	Of            []string      `json:"of,omitempty" doc:"categories whose rounded lines it is a fraction of, driver cost of categories"`
	Trigger       Trigger       `json:"trigger,omitzero" doc:"when a lump applies; blank is always"`
	Breaks        []Break       `json:"breaks,omitempty" doc:"factors on the price by the quantity of the whole job, rising"`
	MinimumCharge money.Decimal `json:"minimum_charge,omitzero" doc:"least amount for all lines of the rate together, in the currency of the price"`
	MinimumOrder  money.Decimal `json:"minimum_order,omitzero" doc:"least quantity that can be bought, all lines together"`
	Note          string        `json:"note,omitempty"`
}

// Selection names the items that a rate prices. Each list that is not empty must
// hold the item's own value; a blank text in coatings or executions stands for items
// that name none.
type Selection struct {
	Treatments  []string `json:"treatments,omitempty" enum:"size,check,not sized,joint,concrete"`
	Families    []string `json:"families,omitempty"`
	Connections []string `json:"connections,omitempty"`
	Wastes      []string `json:"wastes,omitempty" enum:"sections,tube,plate"`
	Coatings    []string `json:"coatings,omitempty"`
	Executions  []string `json:"executions,omitempty"`
}

// Break is a factor on a price from a quantity on.
type Break struct {
	From   money.Decimal `json:"from" doc:"quantity of the driver over the whole job"`
	Factor money.Decimal `json:"factor"`
}

// Trigger says when a lump applies: every condition that is given must hold.
type Trigger struct {
	Kinds          []string      `json:"kinds,omitempty" doc:"a member of one of these kinds"`
	Executions     []string      `json:"executions,omitempty" doc:"a member of one of these execution classes"`
	SiteConditions []string      `json:"site_conditions,omitempty" doc:"one of these holds"`
	Permits        bool          `json:"permits,omitempty" doc:"a piece needs a permit load"`
	DeliveredAbove money.Decimal `json:"delivered_above_t,omitzero"`
}

// Place is where a rate or multiplier may apply: one item with one of its marks.
type Place struct {
	Mark, Group, Family                              string
	Treatment, Connection, Waste, Coating, Execution string
}

// CarbonFactor is an emission in kg of CO₂ equivalent per unit of a driver, by module of EN 15978 and EN
// 17472.
type CarbonFactor struct {
	ID     string `json:"id"`
	Module string `json:"module" enum:"A1-A3,A4,A5"`
	Driver Driver `json:"driver"`
	Figure
	Select Selection `json:"select,omitzero"`
}

// Exchange is a dated rate of exchange.
type Exchange struct {
	Currency string `json:"currency" doc:"ISO 4217"`
	Figure          // units of the book's currency for one unit of Currency
	Date     string `json:"date" doc:"yyyy-mm-dd"`
}

// Index is a dated series of prices.
type Index struct {
	Name       string       `json:"name"`
	Categories []string     `json:"categories" doc:"that follow it"`
	Values     []IndexValue `json:"values" doc:"by rising date"`
	Growth     *Figure      `json:"growth,omitempty" doc:"fraction per year after the last value; without it the index ends there"`
	Source     string       `json:"source"`
}

// IndexValue is the level of an index at a date.
type IndexValue struct {
	Date  string        `json:"date" doc:"yyyy-mm-dd"`
	Value money.Decimal `json:"value"`
}
