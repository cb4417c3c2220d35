// Package document is the estimate as plain data: the one type that is stored,
// answered by the API, printed offline and drawn on pages.
//
//	engine.Run → Document → Canonical (bytes, SHA-256) → store, answer, file
//	             Document → chart, workbook, report, page
//
// It depends on leaves only. Amounts are decimal strings, other numbers are
// printed to 12 significant digits, lists are sorted, and nothing in it depends
// on a clock, a database or the order of the rows.
package document

import (
	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
)

// EngineVersion changes whenever the same job would give another document.
// Each change has an entry in the change list of package engine.
const EngineVersion = 2

// Caution is the sentence shown wherever sizes are shown.
const Caution = "Concept sizing for budgeting only, not for construction or lifting; local codes govern; a licensed engineer must design and check."

// Document is one estimate: immutable, never edited, only superseded.
type Document struct {
	EngineVersion int                `json:"engine_version"`
	Caution       string             `json:"caution"`
	Job           Job                `json:"job"`
	Totals        Totals             `json:"totals"`
	Range         Range              `json:"range"`
	Categories    []Category         `json:"categories"`
	Groups        []Group            `json:"groups"`
	Items         []Item             `json:"items"`
	Lines         []Line             `json:"lines"`
	Members       []Member           `json:"members"`
	Cutting       []CuttingPlan      `json:"cutting,omitempty" doc:"where the purchase follows a cutting plan"`
	Shipping      Shipping           `json:"shipping"`
	Carbon        *Carbon            `json:"carbon,omitempty" doc:"where the rate book has emission factors"`
	Class         Class              `json:"class"`
	Split         *SplitSummary      `json:"split_summary,omitempty" doc:"where the schedule has members that the split method would cut or simplify"`
	Findings      []Finding          `json:"findings"`
	Assumptions   []assumption.Entry `json:"assumptions"`
	Inclusions    []string           `json:"inclusions"`
	Exclusions    []string           `json:"exclusions"`
	Notes         []string           `json:"notes"`
}

// Job is what the reader must know of the frozen inputs.
type Job struct {
	Project         string   `json:"project"`
	Scheme          string   `json:"scheme"`
	Source          string   `json:"source" doc:"name of the posted schedule"`
	SourceSHA256    string   `json:"source_sha256"`
	JobSHA256       string   `json:"job_sha256" doc:"of the frozen job, without its source and build"`
	DesignBasis     string   `json:"design_basis"`
	Factor          Number   `json:"factor" doc:"on yield, design basis allowable; 0 in the others"`
	Coating         string   `json:"coating,omitempty"`
	ExecutionClass  string   `json:"execution_class,omitempty"`
	StockLengths    string   `json:"stock_lengths,omitempty"`
	Purchase        string   `json:"purchase" doc:"how purchased mass is found: waste, first fit or least stock"`
	SpendDate       string   `json:"spend_date,omitempty"`
	SiteConditions  []string `json:"site_conditions,omitempty"`
	RateBookKind    string   `json:"rate_book_kind"`
	EstimateClass   int      `json:"estimate_class" minimum:"1" maximum:"5"`
	Currency        string   `json:"currency"`
	BaseDate        string   `json:"base_date"`
	Money           string   `json:"money" doc:"in which money the totals are stated"`
	RateBook        string   `json:"rate_book"`
	RateBookNote    string   `json:"rate_book_note"`
	RateBookSHA256  string   `json:"rate_book_sha256"`
	ReferencePrice  string   `json:"reference_price,omitempty"`
	CatalogueSHA256 string   `json:"catalogue_sha256"`
	GradesSHA256    string   `json:"grades_sha256"`
	Seed            uint64   `json:"seed"`
	Replicates      int      `json:"replicates"`
	Trials          int      `json:"trials" doc:"per replicate"`
}

// Totals are the figures of the first line.
type Totals struct {
	Base         money.Decimal `json:"base" doc:"sum of the categories at likely values, without contingency"`
	Confidence   Number        `json:"confidence" doc:"percentile that the contingency reaches"`
	AtConfidence money.Decimal `json:"at_confidence" doc:"the cost not exceeded with that probability"`
	Contingency  money.Decimal `json:"contingency" doc:"at_confidence minus base; may be negative"`
	Reserve      money.Decimal `json:"management_reserve,omitzero" doc:"outside the range, held by who approves"`
	Tax          money.Decimal `json:"tax,omitzero" doc:"on the cost at the confidence; outside every other figure"`
	Net          money.Decimal `json:"net_t"`
	Delivered    money.Decimal `json:"delivered_t"`
	Purchased    money.Decimal `json:"purchased_t"`
	Members      int           `json:"members"`
	Pieces       int           `json:"pieces"`
	Unsafe       int           `json:"unsafe_findings"`
}

// Range is the distribution of the total.
type Range struct {
	Mean        Number       `json:"mean"`
	MeanSE      Number       `json:"mean_standard_error"`
	SD          Number       `json:"standard_deviation"`
	Percentiles []Percentile `json:"percentiles"`
	BaseAt      Number       `json:"base_percentile" doc:"the probability that the base is not exceeded"`
	Curve       []Number     `json:"curve" doc:"the cumulative curve: values at 0, 1, …, 100 %"`
	Method      string       `json:"method"`
	Warnings    []string     `json:"warnings"`

	Sensitivities     []Sensitivity `json:"sensitivities" doc:"by narrowing, the largest first"`
	SensitivityMethod string        `json:"sensitivity_method"`
	Risks             []RiskRange   `json:"risks" doc:"discrete risks, outside the base and every category"`
}

// Sensitivity is what one assumption does to the range.
type Sensitivity struct {
	Assumption string `json:"assumption"`
	Share      Number `json:"share_of_variance"`
	Swing      Number `json:"swing" doc:"of the mean, from the assumption's P10 to its P90"`
	SwingSE    Number `json:"swing_standard_error"`
	Narrowing  Number `json:"narrowing" doc:"of P90 minus P10, when the assumption is known to be its median"`

	NarrowingSE Number `json:"narrowing_standard_error" doc:"a narrowing within two of these is not told from 0"`
}

// RiskRange is one discrete risk in the range.
type RiskRange struct {
	Assumption  string        `json:"assumption"`
	Name        string        `json:"name"`
	Probability Number        `json:"probability"`
	Mean        Number        `json:"mean" doc:"probability times mean cost"`
	Share       Number        `json:"share" doc:"of the variance of the total, by covariance"`
	Contingency money.Decimal `json:"contingency" doc:"share of the contingency"`
}

// Percentile is the cost not exceeded with probability P.
type Percentile struct {
	P           Number        `json:"p"`
	Value       Number        `json:"value"`
	SE          Number        `json:"standard_error"`
	Contingency money.Decimal `json:"contingency" doc:"value minus base, to the minor unit"`
}

// Category is the cost of one category.
type Category struct {
	Category string        `json:"category"`
	Amount   money.Decimal `json:"amount"`
	Mean     Number        `json:"mean"`
	P10      Number        `json:"p10"`
	P90      Number        `json:"p90"`

	Share       Number        `json:"share" doc:"of the variance of the total, by covariance; with those of the risks they sum to 1"`
	Contingency money.Decimal `json:"contingency" doc:"share of the contingency; with those of the risks they sum to it"`
}

// Group is the tonnage and cost of one group of members.
type Group struct {
	Group     string        `json:"group"`
	Members   int           `json:"members"`
	Pieces    int           `json:"pieces"`
	Length    Number        `json:"length_m"`
	Surface   Number        `json:"surface_m2"`
	Net       money.Decimal `json:"net_t"`
	Delivered money.Decimal `json:"delivered_t"`
	Purchased money.Decimal `json:"purchased_t"`
	Amount    money.Decimal `json:"amount"`
}

// Item is one counted quantity: pieces alike in all that take-off and rates ask.
type Item struct {
	ID         string        `json:"id"`
	Group      string        `json:"group"`
	Family     string        `json:"family"`
	Treatment  string        `json:"treatment" enum:"size,check,not sized,joint,concrete"`
	Connection string        `json:"connection_class"`
	Coating    string        `json:"coating,omitempty"`
	Execution  string        `json:"execution_class,omitempty"`
	Marks      []string      `json:"marks"`
	Pieces     int           `json:"pieces"`
	Length     Number        `json:"length_m"`
	Surface    Number        `json:"surface_m2"`
	Net        money.Decimal `json:"net_t"`
	Delivered  money.Decimal `json:"delivered_t"`
	Purchased  money.Decimal `json:"purchased_t"`
	Quantities []Quantity    `json:"quantities" doc:"by driver"`
}

// Quantity is how much of a driver an item has: the measured quantity times the
// factors at likely values, rounded once.
type Quantity struct {
	Driver      string        `json:"driver"`
	Value       money.Decimal `json:"value"`
	Unit        string        `json:"unit"`
	Measured    Number        `json:"measured" doc:"before the factors"`
	Factors     []Factor      `json:"factors"`
	Assumptions []string      `json:"assumptions,omitempty" doc:"register entries without a spread that the measured quantity depends on"`
	Formula     string        `json:"formula"`
	Depends     []string      `json:"depends_on" doc:"inputs of the schedule that move it"`
}

// Factor is one factor of a quantity at its likely value.
type Factor struct {
	Assumption string `json:"assumption"`
	Value      Number `json:"value"`
}

// Line is one priced quantity: unit price = the parts × the multipliers, rounded
// to two places beyond the minor unit, to six for a fraction of other lines; amount =
// quantity × unit price, rounded to the minor unit; both half away from zero.
type Line struct {
	ID          string        `json:"id"`
	Item        string        `json:"item,omitempty" doc:"empty for the whole structure"`
	Group       string        `json:"group"`
	Category    string        `json:"category"`
	Driver      string        `json:"driver"`
	Quantity    money.Decimal `json:"quantity"`
	Unit        string        `json:"unit"`
	RateID      string        `json:"rate_id" doc:"register entry of the rate"`
	RateScope   string        `json:"rate_scope"`
	Rate        money.Decimal `json:"rate" doc:"product of the parts"`
	RateFormula string        `json:"rate_formula"`
	RateParts   []Part        `json:"rate_parts"`
	Multipliers []Multiplier  `json:"multipliers"`
	UnitPrice   money.Decimal `json:"unit_price"`
	Amount      money.Decimal `json:"amount"`
	Of          []string      `json:"of,omitempty" doc:"lines that a percentage is taken of"`
	Assumptions []string      `json:"assumptions"`
	Note        string        `json:"note,omitempty"`
}

// Part is one factor that a price is made of.
type Part struct {
	Name       string        `json:"name"`
	Value      money.Decimal `json:"value"`
	Assumption string        `json:"assumption,omitempty"`
}

// Multiplier is one factor on a line and the scope that won.
type Multiplier struct {
	Name       string        `json:"name"`
	Scope      string        `json:"scope"`
	Subject    string        `json:"subject,omitempty"`
	Value      money.Decimal `json:"value"`
	Assumption string        `json:"assumption"`
}

// Member is one row with its sizing.
type Member struct {
	Mark            string     `json:"mark"`
	Group           string     `json:"group"`
	Kind            string     `json:"kind"`
	Description     string     `json:"description,omitempty"`
	Item            string     `json:"item"`
	JointItems      []string   `json:"joint_items,omitempty" doc:"items of its counted joints and site splices"`
	ConcreteItem    string     `json:"concrete_item,omitempty"`
	Quantity        int        `json:"quantity"`
	Length          Number     `json:"length_m"`
	Treatment       string     `json:"treatment"`
	Arrangement     string     `json:"arrangement,omitempty"`
	Section         string     `json:"section,omitempty"`
	Grade           string     `json:"grade,omitempty"`
	LineMass        Number     `json:"mass_kg_m,omitempty"`
	Net             Number     `json:"net_kg"`
	Passes          bool       `json:"passes"`
	Governing       string     `json:"governing_check,omitempty"`
	Combination     string     `json:"combination,omitempty" doc:"of actions, under which the governing check is highest"`
	Utilisation     Number     `json:"utilisation,omitempty"`
	TotalLoad       Number     `json:"total_load_kn,omitempty" doc:"permanent, variable and own weight of one piece"`
	SelfWeight      Number     `json:"self_weight_kn,omitempty"`
	Inputs          []Measure  `json:"inputs,omitempty" doc:"what the row states"`
	Checks          []Check    `json:"checks,omitempty"`
	Rejected        []Rejected `json:"lighter_rejected,omitempty"`
	Reactions       []Reaction `json:"reactions,omitempty"`
	Ratios          []Ratio    `json:"split_ratios,omitempty"`
	DeflectionLimit Number     `json:"deflection_limit,omitempty"`
	SameSizeAs      string     `json:"same_size_as,omitempty" doc:"mark of another row that has the same section"`
	LoadSet         string     `json:"load_set,omitempty" doc:"ready loads that filled blank cells"`
	Warnings        []string   `json:"warnings,omitempty" doc:"what is doubtful about the section in its grade"`
}

// SplitSummary sets the sections that the split method would give beside those
// of the exact envelope, over all members that it would cut or simplify. Members
// with a given section are not in it. Supports are never sized from the method.
type SplitSummary struct {
	Members       []SplitMember `json:"members"`
	TonnesExact   Number        `json:"exact_t" doc:"net mass of these members as sized"`
	TonnesSplit   Number        `json:"split_t" doc:"net mass of the same members by the split method"`
	DifferenceT   Number        `json:"difference_t" doc:"split_t minus exact_t: what the shortcut costs; negative where it saves too much"`
	UnsafeMembers []string      `json:"unsafe_members" doc:"marks whose section by the split method fails the exact checks"`

	Difference       *money.Decimal `json:"difference_amount,omitempty" doc:"of the base, split minus exact: the premium of the shortcut"`
	UnsafeDifference *money.Decimal `json:"unsafe_difference_amount,omitempty" doc:"what of it comes from the unsafe sections alone"`
}

// SplitMember is one member sized twice.
type SplitMember struct {
	Mark        string `json:"mark"`
	Exact       string `json:"exact_section"`
	Split       string `json:"split_section" doc:"empty where nothing passes by the split method; the member then counts as sized exactly"`
	DifferenceT Number `json:"difference_t" doc:"of all pieces, split minus exact"`
	Utilisation Number `json:"utilisation" doc:"of the split method's section under the exact envelope"`
	Check       string `json:"check" doc:"that governs there"`
	Unsafe      bool   `json:"unsafe"`

	Difference *money.Decimal `json:"difference_amount,omitempty" doc:"of the base, this member alone changed"`
}

// Check is one check of the chosen section, with the inputs that it used.
type Check struct {
	ID          string    `json:"id"`
	Clause      string    `json:"clause"`
	Formula     string    `json:"formula"`
	Demand      Number    `json:"demand"`
	Resistance  Number    `json:"resistance"`
	Unit        string    `json:"unit"`
	Utilisation Number    `json:"utilisation"`
	PassFail    bool      `json:"pass_fail,omitempty" doc:"a limit that is met or not; it governs only where it is not met"`
	Inputs      []Measure `json:"inputs"`
	Note        string    `json:"note,omitempty"`
	Combination string    `json:"combination,omitempty" doc:"of actions, under which the check is highest"`
}

// Measure is one named value, such as an input of a check.
type Measure struct {
	Symbol string `json:"symbol"`
	Value  Number `json:"value"`
	Unit   string `json:"unit"`
}

// Rejected is a lighter section and why it fails.
type Rejected struct {
	Section     string `json:"section"`
	Check       string `json:"check"`
	Utilisation Number `json:"utilisation"`
}

// Reaction is the exact envelope of one support under the service combination,
// without factors, in the vertical plane, up positive.
type Reaction struct {
	Position Number `json:"position_m"`
	Max      Number `json:"max_kn"`
	Min      Number `json:"min_kn"`
	Moment   Number `json:"moment_knm,omitempty" doc:"of a fixed support, largest by size"`
}

// Ratio compares the split method with the exact envelope.
type Ratio struct {
	Effect string `json:"effect"`
	Where  string `json:"where"`
	Split  Number `json:"split"`
	Exact  Number `json:"exact"`
	Unit   string `json:"unit"`
	Ratio  Number `json:"ratio" doc:"split / exact, signed; below 1 the shortcut is unsafe"`
	Unsafe bool   `json:"unsafe"`
}

// Severity grades findings.
type Severity string

// The severities, gravest first.
const (
	Unsafe   Severity = "unsafe"
	Doubtful Severity = "doubtful"
	Notice   Severity = "notice"
)

// Finding is a doubt that travels with the figures.
type Finding struct {
	Severity Severity `json:"severity" enum:"unsafe,doubtful,notice"`
	Code     string   `json:"code" doc:"stable id of the kind of finding"`
	Subject  string   `json:"subject" doc:"a mark, a group or the total"`
	Message  string   `json:"message"`
	Figures  []string `json:"figures,omitempty" doc:"ids of the figures that are in doubt"`
}
