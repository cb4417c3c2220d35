package calibration

import (
	"slices"

	"spanwright/estimate/money"
)

// Category names of an outturn, in the order in which they are shown.
const (
	Material    = "material"
	Fabrication = "fabrication"
	Coating     = "coating"
	Inspection  = "inspection"
	Shipping    = "shipping"
	Erection    = "erection"
	Foundations = "foundations"
	Engineering = "engineering"
	Indirects   = "indirects"
	Margin      = "margin"
	Owner       = "owner"
)

var categories = []string{Material, Fabrication, Coating, Inspection, Shipping, Erection, Foundations, Engineering, Indirects, Margin, Owner}

// Categories returns every category that an outturn may have, in the order in which
// they are shown.
func Categories() []string { return slices.Clone(categories) }

// kinds are the connection classes of the starting rate books.
var kinds = []string{"lattice", "simple beams", "trestles", "tube booms"}

// Kinds returns the kinds of structure that are read where Options name none.
func Kinds() []string { return slices.Clone(kinds) }

// Outturn is what one finished job really weighed and cost, beside what had been
// estimated for it. A category that was not in the contract is absent from Costs; a
// cost of 0 means that it was, and cost nothing.
type Outturn struct {
	Job       string `json:"job" doc:"name of the job, once in the list"`
	Completed string `json:"completed" doc:"day on which the job was finished, yyyy-mm-dd"`
	CostDate  string `json:"cost_date,omitempty" doc:"day at whose prices the costs stand, such as the middle of the spending; blank is the day of completion"`
	Currency  string `json:"currency" doc:"ISO 4217 code of the costs"`
	Kind      string `json:"kind" doc:"kind of structure: a connection class of the rate book"`

	TakeOffMass float64 `json:"take_off_mass" doc:"kg: net mass of the estimate's take-off"`
	DrawingMass float64 `json:"drawing_mass,omitempty" doc:"kg: mass by the shop drawings"`
	WeighedMass float64 `json:"weighed_mass" doc:"kg: mass over the weighbridge"`
	ShopHours   float64 `json:"shop_hours,omitempty" doc:"h: hours booked in the shop"`
	SiteHours   float64 `json:"site_hours,omitempty" doc:"h: hours booked on site"`

	Costs    map[string]money.Decimal `json:"costs" doc:"outturn cost by category; one that was not in the contract is left out"`
	Estimate Past                     `json:"estimate" doc:"the estimate that the job was approved on"`

	Source  string `json:"source" doc:"where the figures come from"`
	Remarks string `json:"remarks,omitempty"`
}

// Past is the estimate that a finished job had been approved on, in money of its
// own base date.
type Past struct {
	Class         string                   `json:"class,omitempty" doc:"estimate class, 5 to 1" enum:"5,4,3,2,1"`
	Currency      string                   `json:"currency" doc:"ISO 4217 code of the estimate"`
	BaseDate      string                   `json:"base_date" doc:"date of the estimate's money, yyyy-mm-dd"`
	DeliveredMass float64                  `json:"delivered_mass,omitempty" doc:"kg: mass with allowances that the estimate was priced on"`
	Base          map[string]money.Decimal `json:"base" doc:"base estimate by category"`

	P10 *money.Decimal `json:"p10,omitempty" doc:"cost of the total not exceeded with probability 10 %"`
	P50 *money.Decimal `json:"p50,omitempty"`
	P80 *money.Decimal `json:"p80,omitempty"`
	P90 *money.Decimal `json:"p90,omitempty"`
}

// priced is the day at whose prices the costs stand.
func (o Outturn) priced() string {
	if o.CostDate != "" {
		return o.CostDate
	}
	return o.Completed
}

// percentiles returns those of the past estimate that are given, lowest first.
func (p Past) percentiles() []percentile {
	var list []percentile
	for _, x := range []percentile{{10, p.P10}, {50, p.P50}, {80, p.P80}, {90, p.P90}} {
		if x.amount != nil {
			list = append(list, x)
		}
	}
	return list
}

type percentile struct {
	percent int
	amount  *money.Decimal
}
