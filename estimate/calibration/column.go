package calibration

import (
	"slices"
	"strings"

	"spanwright/estimate/money"
)

// Column describes one column of a table of outturns, and the JSON field with the
// same content.
type Column struct {
	Header     string `json:"header"`               // as the template writes it
	Field      string `json:"field"`                // path in the JSON form, such as estimate/p10
	Obligatory bool   `json:"obligatory,omitempty"` // no cell of it may be blank
	Accepts    string `json:"accepts"`              // what is read
	Meaning    string `json:"meaning"`
	Example    string `json:"example"`
}

// cellKind is what a cell of a column holds.
type cellKind uint8

const (
	textKind cellKind = iota
	dateKind
	currencyKind
	classKind
	structureKind
	massKind  // kg inside; kg, t, lb in heads and cells
	hoursKind // h
	moneyKind
)

// words is what a cell of each kind accepts, for people.
var words = [...]string{
	textKind: "text", dateKind: "a date such as 2024-03-31", currencyKind: "an ISO 4217 code such as EUR", classKind: "5, 4, 3, 2 or 1",
	structureKind: "a kind of structure", massKind: "a mass above 0, in kg, t or lb", hoursKind: "hours above 0",
	moneyKind: "an amount of 0 or more",
}

// definition is a Column with what the reader has to know of it: where its content
// goes is fixed by one of the pointers.
type definition struct {
	Column
	kind  cellKind
	hints []string // other names in use for it: never accepted, only suggested
	text  func(*Outturn) *string
	float func(*Outturn) *float64
	money func(*Outturn, money.Decimal)
}

func textColumn(k cellKind, header, field, meaning, example string, at func(*Outturn) *string, hints ...string) definition {
	return definition{Column: Column{Header: header, Field: field, Meaning: meaning, Example: example}, kind: k, text: at, hints: hints}
}

func needed(d definition) definition {
	d.Obligatory = true
	return d
}

func numberColumn(k cellKind, header, field, meaning, example string, at func(*Outturn) *float64, hints ...string) definition {
	return definition{Column: Column{Header: header, Field: field, Meaning: meaning, Example: example}, kind: k, float: at, hints: hints}
}

func percentileColumn(header, meaning, example string, set func(*Outturn, *money.Decimal)) definition {
	return definition{Column: Column{Header: header, Field: "estimate/" + strings.ToLower(header), Meaning: meaning, Example: example},
		kind: moneyKind, money: func(o *Outturn, d money.Decimal) { set(o, &d) }}
}

// definitions are the columns in the order of the template.
var definitions = buildDefinitions()

func buildDefinitions() []definition {
	list := []definition{
		needed(textColumn(textKind, "Job", "job", "name of the job, once in the list", "Pan house footbridge", func(o *Outturn) *string { return &o.Job }, "project", "name", "job name", "contract")),
		needed(textColumn(dateKind, "Completed", "completed", "day on which the job was finished", "2023-09-30", func(o *Outturn) *string { return &o.Completed }, "completion date", "finished", "end date", "date")),
		textColumn(dateKind, "Cost date", "cost_date", "day at whose prices the costs stand, such as the middle of the spending; blank is the day of completion", "2023-05-31", func(o *Outturn) *string { return &o.CostDate }, "price date", "spend date"),
		needed(textColumn(currencyKind, "Currency", "currency", "currency of the outturn costs", "EUR", func(o *Outturn) *string { return &o.Currency }, "outturn currency")),
		textColumn(classKind, "Class", "estimate/class", "estimate class of the past estimate", "4", func(o *Outturn) *string { return &o.Estimate.Class }, "estimate class", "accuracy class"),
		needed(textColumn(structureKind, "Kind", "kind", "kind of structure: a connection class of the rate book", "trestles", func(o *Outturn) *string { return &o.Kind }, "structure kind", "connection class", "type", "structure")),
		needed(numberColumn(massKind, "Take-off mass (kg)", "take_off_mass", "net mass of the estimate's take-off", "41800", func(o *Outturn) *float64 { return &o.TakeOffMass }, "estimated mass", "net mass", "estimated weight", "take-off")),
		numberColumn(massKind, "Drawing mass (kg)", "drawing_mass", "mass by the shop drawings", "45100", func(o *Outturn) *float64 { return &o.DrawingMass }, "drawn mass", "drawing weight", "detailed mass"),
		needed(numberColumn(massKind, "Weighed mass (kg)", "weighed_mass", "mass over the weighbridge", "46300", func(o *Outturn) *float64 { return &o.WeighedMass }, "weight", "mass", "tonnage", "actual mass", "weighbridge mass")),
		numberColumn(massKind, "Estimate delivered mass (kg)", "estimate/delivered_mass", "mass with allowances that the estimate was priced on", "44300", func(o *Outturn) *float64 { return &o.Estimate.DeliveredMass }, "delivered mass", "priced mass"),
		numberColumn(hoursKind, "Shop hours", "shop_hours", "hours booked in the shop", "760", func(o *Outturn) *float64 { return &o.ShopHours }, "fabrication hours", "workshop hours"),
		numberColumn(hoursKind, "Site hours", "site_hours", "hours booked on site", "410", func(o *Outturn) *float64 { return &o.SiteHours }, "erection hours", "field hours"),
	}
	list = append(list, categoryColumns()...)
	list = append(list,
		percentileColumn("P10", "cost of the past estimate's total not exceeded with probability 10 %", "150000", func(o *Outturn, d *money.Decimal) { o.Estimate.P10 = d }),
		percentileColumn("P50", "the same with 50 %", "190000", func(o *Outturn, d *money.Decimal) { o.Estimate.P50 = d }),
		percentileColumn("P80", "the same with 80 %", "222000", func(o *Outturn, d *money.Decimal) { o.Estimate.P80 = d }),
		percentileColumn("P90", "the same with 90 %", "241000", func(o *Outturn, d *money.Decimal) { o.Estimate.P90 = d }),
		needed(textColumn(currencyKind, "Estimate currency", "estimate/currency", "currency of the past estimate", "EUR", func(o *Outturn) *string { return &o.Estimate.Currency })),
		needed(textColumn(dateKind, "Estimate base date", "estimate/base_date", "date of the past estimate's money", "2022-06-30", func(o *Outturn) *string { return &o.Estimate.BaseDate }, "base date", "estimate date", "price base")),
		needed(textColumn(textKind, "Source", "source", "where the figures come from", "final account", func(o *Outturn) *string { return &o.Source }, "origin", "reference")),
		textColumn(textKind, "Remarks", "remarks", "anything else", "invented", func(o *Outturn) *string { return &o.Remarks }, "notes", "comments"),
	)
	for i := range list {
		list[i].Accepts = words[list[i].kind]
	}
	return list
}

// categoryColumns are two for each category: the past estimate and the outturn.
func categoryColumns() []definition {
	var list []definition
	for _, c := range categories {
		list = append(list,
			definition{Column: Column{Header: "Estimate " + c, Field: "estimate/base/" + c, Meaning: "base estimate of " + c + "; blank where it was not estimated", Example: "52000"},
				kind: moneyKind, hints: []string{"estimated " + c, "budget " + c}, money: func(o *Outturn, d money.Decimal) { o.Estimate.Base[c] = d }},
			definition{Column: Column{Header: "Outturn " + c, Field: "costs/" + c, Meaning: "outturn cost of " + c + "; blank where it was not in the contract", Example: "55100"},
				kind: moneyKind, hints: []string{"actual " + c, c, c + " cost"}, money: func(o *Outturn, d money.Decimal) { o.Costs[c] = d }})
	}
	return list
}

// Columns returns every column of a table of outturns, in the order of the
// template.
func Columns() []Column {
	out := make([]Column, len(definitions))
	for i, d := range definitions {
		out[i] = d.Column
	}
	return out
}

// name is the header without the unit in brackets.
func (d definition) name() string {
	name, _, _ := strings.Cut(d.Header, " (")
	return name
}

// columnOf returns the index of a field's definition; the field must exist.
func columnOf(field string) int {
	return slices.IndexFunc(definitions, func(d definition) bool { return d.Field == field })
}
