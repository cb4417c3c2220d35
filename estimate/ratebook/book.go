// Package ratebook holds versioned rates, allowances and multipliers.
//
//	starting book or a posted book file → Parse, Validate → frozen in the job
//	rates → ResolveRates, CategoryOrder: which one prices an item, and when
//	book + multipliers edited in the service → Resolve: which scope wins for
//	each member and category, with its author and reason
//	indices, exchange rates → Escalation, ExchangeTo → factors on prices
//
// The starting book `ratio` prices each category as a multiple of a frozen
// reference price per delivered tonne, so that labour does not move with the
// price of steel; `unit-rate` prices what the take-off counts. All their prices
// are invented and say so. Beside them stand published tables: extents of
// inspection, coating systems, masses of zinc, typical ranges by class.
package ratebook

import (
	"bytes"
	"crypto/sha256"
	_ "embed" // the starting books
	"encoding/hex"
	"encoding/json"
	"fmt"
	"io"
	"maps"
	"slices"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// The categories of cost, in the order in which they are shown.
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
	Owner       = "owner" // off unless a job asks for it, listed as excluded
)

// The kinds of books.
const (
	KindRatio    = "ratio"     // categories as multiples of a reference price
	KindUnitRate = "unit-rate" // prices per unit of drivers
)

// Categories returns every category in the order in which it is shown.
func Categories() []string {
	return []string{Material, Fabrication, Coating, Inspection, Shipping, Erection, Foundations, Engineering, Indirects, Margin, Owner}
}

// The kinds of waste, by what is bought.
const (
	WasteSections = "sections"
	WasteTube     = "tube"
	WastePlate    = "plate"
)

// Figure is one number of the book: a spread with its provenance.
type Figure struct {
	Spread     spread.Spread `json:"spread"`
	Group      string        `json:"group,omitempty" doc:"correlation group; empty for an independent one"`
	Source     string        `json:"source"`
	Author     string        `json:"author"`
	Confidence string        `json:"confidence" enum:"low,medium,high"`
	ValidUntil string        `json:"valid_until,omitempty" doc:"yyyy-mm-dd"`
}

// Book is one version of a rate book.
type Book struct {
	Name     string `json:"name"`
	Kind     string `json:"kind" enum:"ratio,unit-rate"`
	Currency string `json:"currency"`
	BaseDate string `json:"base_date" doc:"the date of its money, yyyy-mm-dd"`
	Note     string `json:"note"`

	// ReferencePrice is the frozen price per delivered tonne that the ratios
	// multiply. It is a definition, not a belief, and has no spread.
	ReferencePrice money.Decimal `json:"reference_price,omitzero"`
	// MaterialPrice is the price of steel per purchased tonne, kind ratio.
	MaterialPrice *Figure `json:"material_price,omitempty"`
	// Ratios are the categories as multiples of the reference price per delivered
	// tonne, kind ratio.
	Ratios map[string]Figure `json:"ratios,omitempty"`
	// Rates are the prices of the kind unit-rate.
	Rates []Rate `json:"rates,omitempty"`
	// Norms make hours, loads and weeks of masses, kind unit-rate.
	Norms *Norms `json:"norms,omitempty"`
	// Limits are the envelopes of shop, bath, paint bay and road; nil takes DefaultLimits.
	Limits *Limits `json:"limits,omitempty"`
	// Carbon are the emission factors; without any, no carbon is stated.
	Carbon []CarbonFactor `json:"carbon,omitempty"`
	// Exchange are the rates of the other currencies that prices are in.
	Exchange []Exchange `json:"exchange,omitempty"`
	// Indices escalate prices from the base date of the book to later dates.
	Indices []Index `json:"indices,omitempty"`
	// SpendMonths is when a category is spent: months after the job's spend date,
	// negative for before.
	SpendMonths map[string]int `json:"spend_months,omitempty"`
	// Site is the multipliers that the site conditions of a job put in force.
	Site []SiteMultiplier `json:"site_multipliers,omitempty"`

	// Connections is the allowance on net mass by connection class.
	Connections map[string]Figure `json:"connections"`
	// Bolts is the allowance for bolts on net mass with connections and growth.
	Bolts Figure `json:"bolts"`
	// Waste is the allowance from delivered (less bolts) to purchased mass.
	Waste map[string]Figure `json:"waste"`
	// Growth is the allowance for growth by estimate class, "5" to "1".
	Growth map[string]Figure `json:"growth"`
	// Systemic is the standard deviation of the logarithm of the factor on the
	// whole base, by estimate class.
	Systemic map[string]float64 `json:"systemic"`
	// SizingBias is the belief about real over sized mass: the conservatism of
	// the checks. Its likely value is 1, so that it acts in the range and never in
	// the base.
	SizingBias Figure `json:"sizing_bias"`

	Multipliers []Multiplier `json:"multipliers"`
	Bands       []Band       `json:"bands"`
	// Correlation is Spearman's ρ within each group. All groups share one common
	// factor, so that between two groups it is about √(ρ₁·ρ₂).
	Correlation map[string]float64 `json:"correlation"`
}

// Multiplier is an editable factor on categories.
type Multiplier struct {
	Name       string        `json:"name" doc:"multipliers of one name override each other by scope; those of different names multiply"`
	Scope      Scope         `json:"scope" enum:"member,group,family,scheme,project,rate book"`
	Subject    string        `json:"subject,omitempty" doc:"the mark, group or family that the scope names"`
	Categories []string      `json:"categories"`
	Spread     spread.Spread `json:"spread"`
	Group      string        `json:"group,omitempty" doc:"correlation group"`
	Reason     string        `json:"reason"`
	Author     string        `json:"author"`
	Version    int64         `json:"version,omitempty" doc:"version of the edited multiplier, 0 for one of the book"`
}

// SiteMultiplier is a multiplier that holds where a job names a site condition.
type SiteMultiplier struct {
	Condition string `json:"condition" enum:"over water,tidal,live plant,height,weather"`
	Multiplier
}

// Band is a range of what is usual for a kind of structure, against which each
// group is held before anybody sees the total.
type Band struct {
	Measure string  `json:"measure" enum:"kg/m,price/t,shop h/t"`
	Class   string  `json:"class" doc:"connection class that the band is for"`
	Low     float64 `json:"low"`
	High    float64 `json:"high"`
	Source  string  `json:"source"`
}

//go:embed ratio.json
var ratioJSON []byte

//go:embed unit-rate.json
var unitRateJSON []byte

// Ratio returns the starting book of the kind ratio.
func Ratio() Book { return embedded(ratioJSON) }

// UnitRate returns the starting book of the kind unit-rate.
func UnitRate() Book { return embedded(unitRateJSON) }

func embedded(data []byte) Book {
	b, err := Parse(data)
	if err != nil {
		panic("ratebook: the embedded book is broken: " + err.Error())
	}
	return b
}

// Parse reads a book from JSON, refusing unknown fields and anything that
// Validate refuses.
func Parse(data []byte) (Book, error) {
	var b Book
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(&b); err != nil {
		return Book{}, fmt.Errorf("reading the rate book: %w", err)
	}
	if _, err := d.Token(); err != io.EOF {
		return Book{}, fmt.Errorf("reading the rate book: something follows the closing brace")
	}
	if err := b.Validate(); err != nil {
		return Book{}, err
	}
	return b, nil
}

// ConnectionClasses returns the classes that the book has an allowance for, sorted.
func (b Book) ConnectionClasses() []string { return slices.Sorted(maps.Keys(b.Connections)) }

// Canonical returns the book's canonical bytes and their SHA-256 in hex.
func (b Book) Canonical() ([]byte, string, error) {
	data, err := json.Marshal(b)
	if err != nil {
		return nil, "", fmt.Errorf("writing the rate book: %w", err)
	}
	sum := sha256.Sum256(data)
	return data, hex.EncodeToString(sum[:]), nil
}
