package schedule

import (
	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// Treatment says what is done with a row.
type Treatment string

// The treatments.
const (
	SizeFromFamily Treatment = "size"      // the lightest passing section of a family is chosen
	CheckSection   Treatment = "check"     // the section is given; it is checked and priced
	ByMass         Treatment = "not sized" // secondary steel: a mass per metre or square metre
)

// Support is one place where a member is held.
type Support struct {
	Position float64 `json:"position_m"`
	Kind     string  `json:"kind" enum:"pinned,fixed"`
}

// Load is one action of a member at its static value.
type Load struct {
	Nature   string    `json:"nature" enum:"permanent,variable"`
	Kind     string    `json:"kind" enum:"uniform,point,train"`
	Value    float64   `json:"value"` // N/m or N, down positive, horizontal ones to one side; 0 for a train
	Position float64   `json:"position_m"`
	Free     bool      `json:"free"`                 // placed span by span for the worst effect
	Sideways bool      `json:"horizontal,omitempty"` // bends about the weak axis
	Wheels   []float64 `json:"wheels_n,omitempty"`   // N, of a train, from the first to the last
	Spacings []float64 `json:"spacings_m,omitempty"` // m, one fewer than wheels
	Dynamic  float64   `json:"dynamic,omitempty"`    // dynamic factor on the static value; 0 = 1
	Label    string    `json:"label"`
}

// Member is one normalised row: SI units, ten significant digits, every default
// filled in. It is what a job freezes; the row that it came from is kept beside
// it for messages and is no part of the frozen form.
type Member struct {
	Mark            string    `json:"mark"`
	Group           string    `json:"group"`
	Kind            string    `json:"kind"`
	Description     string    `json:"description,omitempty"`
	Quantity        int       `json:"quantity"`
	Length          float64   `json:"length_m"`
	Treatment       Treatment `json:"treatment" enum:"size,check,not sized"`
	Arrangement     string    `json:"arrangement,omitempty"` // the plain word, or "positions"
	Upright         bool      `json:"upright,omitempty"`     // a strut: its own weight acts along it
	Supports        []Support `json:"supports,omitempty"`
	Loads           []Load    `json:"loads,omitempty"`
	Axial           float64   `json:"axial_n,omitempty"` // compression positive
	Family          string    `json:"family,omitempty"`  // the family to size from, or of the section
	Section         string    `json:"section,omitempty"` // the given section
	Grade           string    `json:"grade,omitempty"`
	Restraint       float64   `json:"restraint_m,omitempty"`        // lateral restraint spacing; 0 = full span
	LengthFactor    float64   `json:"length_factor,omitempty"`      // effective length factor K; 0 = 1 for spans, 2 for free ends
	DeflectionLimit float64   `json:"deflection_limit,omitempty"`   // n of length / n; 0 = no limit
	MomentFactor    float64   `json:"moment_factor,omitempty"`      // C1 or Cb; 0 = 1
	NetAreaFactor   float64   `json:"net_area_factor,omitempty"`    // net over gross area in tension; 0 = 1
	FrequencyFloor  float64   `json:"frequency_floor_hz,omitempty"` // 0 = no check
	MaxDepth        float64   `json:"max_depth_m,omitempty"`        // of the section; 0 = no limit
	SameSizeAs      string    `json:"same_size_as,omitempty"`       // mark of another row that gets the same section
	LoadSet         string    `json:"load_set,omitempty"`           // ready loads that filled blank cells
	LineMass        float64   `json:"line_mass_kg_m,omitempty"`     // rows that are not sized
	AreaMass        float64   `json:"area_mass_kg_m2,omitempty"`
	Area            float64   `json:"area_m2,omitempty"`     // of one piece
	Joints          []Joint   `json:"joints,omitempty"`      // of one piece, sorted by kind; they replace the allowance of the connection class
	Concrete        float64   `json:"concrete_m3,omitempty"` // of one piece
	ConnectionClass string    `json:"connection_class"`
	Coating         string    `json:"coating,omitempty"`         // where not that of the job
	ExecutionClass  string    `json:"execution_class,omitempty"` // one of ExecutionClasses, where not that of the job
	Remarks         string    `json:"remarks,omitempty"`

	// Defaults names the register entries whose value this row took, by field.
	Defaults map[string]string `json:"defaults,omitempty"`

	Row sheet.Address `json:"-"`
}

// Settings are the job's own defaults: the Job sheet, with what it leaves blank
// filled in.
type Settings struct {
	Project         string    `json:"project"`
	Scheme          string    `json:"scheme"`
	DesignBasis     string    `json:"design_basis" enum:"allowable,en1993,aisc-asd,aisc-lrfd"`
	Factor          float64   `json:"factor"` // on yield, design basis allowable; 0 in the others
	Grade           string    `json:"grade"`
	DeflectionLimit float64   `json:"deflection_limit"`             // n of length / n
	FrequencyFloor  float64   `json:"frequency_floor_hz,omitempty"` // 0 = no check
	Restraint       float64   `json:"restraint_m"`                  // 0 = full span
	ConnectionClass string    `json:"connection_class,omitempty"`
	Coating         string    `json:"coating,omitempty"`                           // a system of the rate book; the ratio book prices coating as one multiple
	ExecutionClass  string    `json:"execution_class,omitempty"`                   // one of ExecutionClasses; the ratio book prices inspection as one multiple
	StockLengths    []float64 `json:"stock_lengths_m,omitempty"`                   // in which sections are bought, ascending
	Kerf            float64   `json:"kerf_m"`                                      // of a saw cut; of use where there are stock lengths
	Purchase        string    `json:"purchase" enum:"waste,first fit,least stock"` // how purchased mass follows from delivered mass
	EstimateClass   int       `json:"estimate_class"`                              // 5 to 1
	Currency        string    `json:"currency"`
	BaseDate        string    `json:"base_date"` // yyyy-mm-dd
	Confidence      float64   `json:"confidence"`
	WindSpeed       float64   `json:"wind_speed_m_s,omitempty"`   // of the site, for ready loads
	Terrain         string    `json:"terrain,omitempty"`          // category or exposure, for ready loads
	GroundSnow      float64   `json:"ground_snow_n_m2,omitempty"` // for ready loads

	Money             string            `json:"money" enum:"base date,outturn"`
	SpendDate         string            `json:"spend_date,omitempty"`        // yyyy-mm-dd, the mid-point of spending; not before the base date where both are given
	SiteConditions    []string          `json:"site_conditions,omitempty"`   // of SiteConditions, in their order
	HaulDistance      float64           `json:"haul_m,omitempty"`            // from shop to site
	TaxRate           float64           `json:"tax_fraction,omitempty"`      // of the optional tax line, outside the base
	OwnerCosts        bool              `json:"owner_costs,omitempty"`       // the owner's costs are priced
	ManagementReserve money.Decimal     `json:"management_reserve,omitzero"` // in the job's currency, outside the range
	Definition        []DefinitionEntry `json:"definition,omitempty"`        // in the order of DefinitionItems
}

// Echo is what a posted schedule says in total, shown before it is accepted.
type Echo struct {
	Members []EchoMember `json:"members"`
	Groups  []EchoGroup  `json:"groups"`
}

// EchoMember is the load of one member as read, without its own weight.
type EchoMember struct {
	Mark       string  `json:"mark"`
	Permanent  float64 `json:"permanent_kn"`
	Variable   float64 `json:"variable_kn"` // vertical, with dynamic factors, the wheels of a train included
	Horizontal float64 `json:"horizontal_kn,omitempty"`
	Axial      float64 `json:"axial_kn"`
}

// EchoGroup is the tonnage of one group. Sized members are counted when their
// sizes are known.
type EchoGroup struct {
	Group  string  `json:"group"`
	Pieces int     `json:"pieces"`
	Tonnes float64 `json:"tonnes"`
}

// The ways to purchased mass, as they stand in Settings.Purchase.
const (
	PurchaseWaste      = "waste"       // delivered mass with the waste allowance of its form
	PurchaseFirstFit   = "first fit"   // cutting plan: the longest pieces first, each in the first bar that takes it
	PurchaseLeastStock = "least stock" // cutting plan by column generation
)

// The moneys of an estimate, as they stand in Settings.Money.
const (
	MoneyBaseDate = "base date" // prices of the base date
	MoneyOutturn  = "outturn"   // prices carried on to the spend date
)

// Schedule is what was read: members sorted by mark, settings, risks sorted by
// name, the register entries of every default taken, and what may have been
// forgotten.
type Schedule struct {
	Settings  Settings
	Members   []Member
	Risks     []Risk
	Defaults  []assumption.Entry
	Omissions []string
	Echo      Echo
}
