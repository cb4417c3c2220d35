package document

import "spanwright/estimate/money"

// CuttingPlan is how the bars of one section and grade are cut.
type CuttingPlan struct {
	Section   string        `json:"section"`
	Grade     string        `json:"grade"`
	Method    string        `json:"method"`
	Kerf      Number        `json:"kerf_m"`
	Bars      []Bars        `json:"bars"`
	Patterns  []Pattern     `json:"patterns"`
	Stock     Number        `json:"stock_m" doc:"length bought"`
	Used      Number        `json:"used_m" doc:"length of the pieces"`
	Yield     Number        `json:"yield" doc:"used over stock"`
	Bound     Number        `json:"bound_m" doc:"no plan needs less"`
	Proven    bool          `json:"proven" doc:"the plan reaches a bound that was checked exactly"`
	Purchased money.Decimal `json:"purchased_t"`
	Split     []string      `json:"split,omitempty" doc:"pieces that were first cut into parts"`
	Hint      string        `json:"hint,omitempty"`
}

// Bars is a number of bars of one stock length.
type Bars struct {
	Length Number `json:"length_m"`
	Count  int    `json:"count"`
}

// Pattern is one way to cut a bar, and how often.
type Pattern struct {
	Stock Number `json:"stock_m"`
	Count int    `json:"count"`
	Cuts  []Cut  `json:"cuts"`
}

// Cut is a number of pieces of one mark out of one bar.
type Cut struct {
	Mark   string `json:"mark"`
	Length Number `json:"length_m"`
	Count  int    `json:"count"`
}

// Shipping is how the pieces travel.
type Shipping struct {
	Breaches []Breach `json:"breaches" doc:"pieces that do not fit an envelope"`
	Loads    []Load   `json:"loads" doc:"by group"`
	Limits   []string `json:"limits" doc:"the envelopes, with their source"`
}

// Breach is one piece outside one envelope, and what it needs.
type Breach struct {
	Mark     string `json:"mark"`
	Envelope string `json:"envelope" enum:"shop crane,site crane,galvanising bath,paint bay,vehicle,permit"`
	Measure  string `json:"measure" enum:"length,width,height,mass"`
	Value    Number `json:"value"`
	Limit    Number `json:"limit"`
	Unit     string `json:"unit"`
	Needs    string `json:"needs"`
}

// Load is the vehicles of one group.
type Load struct {
	Group     string `json:"group"`
	Pieces    int    `json:"pieces"`
	Splices   int    `json:"site_splices"`
	ByMass    Number `json:"by_mass" doc:"vehicles filled by mass"`
	ByLength  Number `json:"by_length" doc:"deck length"`
	ByVolume  Number `json:"by_volume"`
	Vehicles  int    `json:"vehicles" doc:"whole ones, with the allowance for their use"`
	Permits   int    `json:"permit_loads"`
	Governing string `json:"governing" enum:"mass,length,volume"`
}

// Carbon is embodied carbon on the same quantities as the money, in kg of CO₂
// equivalent.
type Carbon struct {
	Total       money.Decimal  `json:"total_kg"`
	Modules     []CarbonModule `json:"modules"`
	Lines       []CarbonLine   `json:"lines"`
	Mean        Number         `json:"mean_kg"`
	Percentiles []CarbonPoint  `json:"percentiles"`
	PerTonne    Number         `json:"per_delivered_tonne_kg"`
	Method      string         `json:"method"`
	Exclusions  []string       `json:"exclusions"`
}

// CarbonPoint is the mass of CO₂ equivalent not exceeded with probability P.
type CarbonPoint struct {
	P     Number `json:"p"`
	Value Number `json:"value_kg"`
	SE    Number `json:"standard_error_kg"`
}

// CarbonModule is the sum of one module.
type CarbonModule struct {
	Module string        `json:"module" enum:"A1-A3,A4,A5"`
	Amount money.Decimal `json:"amount_kg"`
}

// CarbonLine is one quantity times one factor, rounded to the kilogram.
type CarbonLine struct {
	ID          string        `json:"id"`
	Item        string        `json:"item"`
	Group       string        `json:"group"`
	Module      string        `json:"module"`
	Driver      string        `json:"driver"`
	Quantity    money.Decimal `json:"quantity"`
	Unit        string        `json:"unit"`
	FactorID    string        `json:"factor_id"`
	Factor      money.Decimal `json:"factor_kg"`
	Amount      money.Decimal `json:"amount_kg"`
	Assumptions []string      `json:"assumptions"`
}

// Class is the estimate class, what it rests on, and how the band compares with
// published ones. Class never follows from the band.
type Class struct {
	Stated     int          `json:"stated" minimum:"1" maximum:"5"`
	Definition []Definition `json:"definition,omitempty"`
	Suggested  int          `json:"suggested,omitempty" doc:"by the checklist; 0 without one"`
	Why        string       `json:"why"`
	Low        Number       `json:"low" doc:"P10 over P50, minus 1"`
	High       Number       `json:"high" doc:"P90 over P50, minus 1"`
	Typical    []Typical    `json:"typical"`
}

// Definition is the state of one item of the checklist.
type Definition struct {
	Item  string `json:"item"`
	State string `json:"state" enum:"none,preliminary,defined"`
}

// Typical is the published band of the class for one industry.
type Typical struct {
	Industry string `json:"industry"`
	LowFrom  Number `json:"low_from"`
	LowTo    Number `json:"low_to"`
	HighFrom Number `json:"high_from"`
	HighTo   Number `json:"high_to"`
	Source   string `json:"source"`
}
