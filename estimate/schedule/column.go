package schedule

import (
	"slices"
	"strings"

	"spanwright/structural/material"
	"spanwright/structural/unit"
)

// Column describes one column of the schedule, or one key of the Job sheet.
type Column struct {
	Header     string `json:"header"`               // as the template writes it
	Obligatory bool   `json:"obligatory,omitempty"` // the header must be there
	Unit       string `json:"unit,omitempty"`       // of the template; others are read too
	Accepts    string `json:"accepts,omitempty"`    // units or words that are read
	Meaning    string `json:"meaning"`
	Example    string `json:"example"`

	Blank   string   `json:"blank,omitempty"`   // what is taken where the cell is blank, where the meaning does not say it
	Choices []string `json:"choices,omitempty"` // what the template offers in a drop-down list; other entries may be read too
}

// definition is a Column with what the reader has to know of it.
type definition struct {
	Column
	dimensions []unit.Dimension // of the units that header and cells may name; none for plain numbers and texts
	notes      []string         // texts other than units that the header's brackets may hold
	hints      []string         // other names in use for it: never accepted, only suggested
	choices    func() []string  // of the drop-down list; nil where there is none
}

// columnID is an index into columns.
type columnID int

// The columns of the schedule.
const (
	colMark columnID = iota
	colGroup
	colQuantity
	colLength
	colSupport
	colPermanent
	colVariable
	colProduct
	colGrade
	colKind
	colDescription
	colPoint
	colPointAt
	colAxial
	colHorizontal
	colAreaLoad
	colWidth
	colMoving
	colDynamic
	colLoadSet
	colOverhang
	colPositions
	colRestraint
	colFactor
	colMoment
	colNet
	colLimit
	colFrequency
	colDepth
	colSameSize
	colMass
	colArea
	colConcrete
	colJoints
	colConnection
	colCoating
	colExecution
	colRemarks
	columnCount
)

var pieces = []string{"pcs", "pieces", "no", "nos", "off", "each"}

// columns is indexed by columnID.
var columns = [columnCount]definition{
	colMark: {Column: Column{Header: "Mark", Obligatory: true, Meaning: "name of the row, once in the schedule", Example: "B1"},
		hints: []string{"name", "tag", "id", "member", "item", "piece mark", "ref", "position"}},
	colGroup: {Column: Column{Header: "Group", Meaning: "part of the structure that is summed and priced together", Blank: "ungrouped", Example: "Loading boom"},
		hints: []string{"assembly", "area", "module", "zone", "structure"}},
	colQuantity: {Column: Column{Header: "Quantity", Obligatory: true, Meaning: "number of pieces alike, a whole number above 0", Example: "4"},
		notes: pieces, hints: []string{"qty", "pcs", "count", "number", "no", "nos", "pieces"}},
	colLength: {Column: Column{Header: "Length (m)", Obligatory: true, Unit: "m", Meaning: "whole length of one piece, overhangs included", Example: "6.5"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"span", "l", "total length"}},
	colSupport: {Column: Column{Header: "Support", Accepts: supportWords(), Meaning: "how the member is held; blank is simple", Blank: "simple, or the support positions", Example: "simple"},
		hints: []string{"arrangement", "supports", "boundary", "type"}, choices: supportNames},
	colPermanent: {Column: Column{Header: "Permanent load (kN/m)", Unit: "kN/m", Meaning: "uniform permanent load without the member's own weight, down positive; 0 if there is none", Example: "2.5"},
		dimensions: []unit.Dimension{unit.LineLoad}, hints: []string{"dead load", "dl", "g", "permanent"}},
	colVariable: {Column: Column{Header: "Variable load (kN/m)", Unit: "kN/m", Meaning: "uniform variable load, placed span by span for the worst effect; 0 if there is none", Example: "4"},
		dimensions: []unit.Dimension{unit.LineLoad}, hints: []string{"live load", "imposed load", "ll", "q", "variable", "load"}},
	colProduct: {Column: Column{Header: "Section or family", Obligatory: true, Meaning: "a family to size from, a section to check, or the product of a row that is not sized", Example: "IPE"},
		hints: []string{"section", "family", "profile", "size", "member size", "shape"}, choices: families},
	colGrade: {Column: Column{Header: "Grade", Meaning: "steel grade; blank takes that of the Job sheet", Blank: "that of the Job sheet, else the usual one of the family", Example: "S355"},
		hints: []string{"material", "steel", "steel grade", "quality"}, choices: material.Names},
	colKind: {Column: Column{Header: "Kind", Meaning: "what the member is: beam, boom, column, bracing, handrail", Blank: "by the support: beam, cantilever, strut", Example: "boom"},
		hints: []string{"category", "member type", "function"}, choices: kinds},
	colDescription: {Column: Column{Header: "Description", Meaning: "free text", Example: "main girder, axis 3"},
		hints: []string{"text", "title", "desc"}},
	colPoint: {Column: Column{Header: "Point load (kN)", Unit: "kN", Meaning: "one force on the member, variable, down positive", Example: "12"},
		dimensions: []unit.Dimension{unit.Force}, hints: []string{"concentrated load", "p", "force"}},
	colPointAt: {Column: Column{Header: "Point position (m)", Unit: "m", Meaning: "where the point load stands, from the left end", Example: "3.2"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"load position", "point load position"}},
	colAxial: {Column: Column{Header: "Axial load (kN, compression +)", Unit: "kN", Meaning: "force along the member, compression positive, tension negative", Example: "180"},
		dimensions: []unit.Dimension{unit.Force}, notes: []string{"compression", "compression positive", "tension"}, hints: []string{"axial force", "normal force", "axial", "n"}},
	colHorizontal: {Column: Column{Header: "Horizontal load (kN/m)", Unit: "kN/m", Meaning: "uniform variable load to the side, such as wind on the member; it bends the member about its weak axis and acts span by span for the worst effect", Example: "0.6"},
		dimensions: []unit.Dimension{unit.LineLoad}, hints: []string{"wind load", "lateral load", "side load", "horizontal"}},
	colAreaLoad: {Column: Column{Header: "Area load (kN/m²)", Unit: "kN/m²", Meaning: "variable load per area, taken over the tributary width", Example: "5"},
		dimensions: []unit.Dimension{unit.AreaLoad}, hints: []string{"surface load", "floor load", "pressure"}},
	colWidth: {Column: Column{Header: "Tributary width (m)", Unit: "m", Meaning: "width from which the member collects the area load", Example: "1.8"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"load width", "width", "spacing"}},
	colMoving: {Column: Column{Header: "Moving load (kN)", Unit: "kN", Accepts: `wheels from the first to the last, parted by ";", then "@" and the distances between them: one for all, or one fewer than wheels`,
		Meaning: "wheels that cross the whole member in both directions; a distance without a unit takes that of Length", Example: "40; 40 @ 2.0"},
		dimensions: []unit.Dimension{unit.Force}, hints: []string{"wheel load", "wheel loads", "crane load", "train", "moving loads"}},
	colDynamic: {Column: Column{Header: "Dynamic factor", Accepts: `a factor from 1 to 10; or factors with the load that each is for, such as "1.3 point; 1.2 variable": variable, area, point, horizontal, moving`,
		Meaning: "factor on the static value of loads that move or strike; without a name it stands on the moving load and the point load", Example: "1.25"},
		hints: []string{"impact factor", "impact", "dynamic", "daf"}},
	colLoadSet: {Column: Column{Header: "Load set", Accepts: loadSetWords(), Meaning: "ready loads of a use; they fill load cells that are blank and enter the register with their source", Example: "walkway"},
		hints: []string{"loads", "use", "load case", "load type", "usage"}, choices: useNames},
	colOverhang: {Column: Column{Header: "Overhang (m)", Unit: "m", Meaning: "length beyond the far support, part of Length", Example: "2"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"cantilever length", "projection"}},
	colPositions: {Column: Column{Header: "Support positions (m)", Unit: "m", Meaning: `places of the supports from the left end, parted by ";", each with "fixed" or "pinned" (pinned if nothing is said)`, Example: "0 fixed; 28; 42"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"support position", "support locations"}},
	colRestraint: {Column: Column{Header: "Restraint spacing (m)", Unit: "m", Accepts: "full span", Meaning: "distance between lateral restraints of the compression flange; blank is the full span", Blank: "that of the Job sheet, else the full span", Example: "2"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"restraint", "lateral restraint", "unbraced length", "lb"}, choices: list("full span")},
	colFactor: {Column: Column{Header: "Effective length factor", Meaning: "K of the buckling length K·L", Blank: "1 for spans, 2 for free ends", Example: "1"},
		hints: []string{"k", "length factor", "buckling factor", "effective length"}},
	colMoment: {Column: Column{Header: "Moment factor", Accepts: "1 to 3", Meaning: "C1 of EN 1993, or Cb of AISC 360, for the shape of the moments between lateral restraints; blank is 1, which is safe; allowable takes 1 whatever it is", Blank: "1", Example: "1.13"},
		hints: []string{"c1", "cb", "moment gradient factor"}},
	colNet: {Column: Column{Header: "Net area factor", Accepts: "above 0 to 1", Meaning: "net over gross area of a member in tension, for its holes; blank is 1, no holes", Blank: "1", Example: "0.85"},
		hints: []string{"net section factor", "net area", "net section"}},
	colLimit: {Column: Column{Header: "Deflection limit (L/n)", Accepts: "250, L/250, 1/250, none", Meaning: "greatest deflection as span over n", Blank: "that of the Job sheet, else L/250, for booms L/100", Example: "L/250"},
		notes: []string{"ln", "1n", "n", "spann"}, hints: []string{"deflection", "limit", "deflection criterion"}, choices: limitChoices},
	colFrequency: {Column: Column{Header: "Frequency floor (Hz)", Unit: "Hz", Accepts: "none", Meaning: "least natural frequency of the member with its permanent loads; blank takes that of the Job sheet, which is none where it says nothing", Blank: "that of the Job sheet, else none", Example: "4"},
		dimensions: []unit.Dimension{unit.Frequency}, hints: []string{"frequency", "natural frequency", "vibration", "minimum frequency"}, choices: list("none", "3", "4", "5")},
	colDepth: {Column: Column{Header: "Max depth (mm)", Unit: "mm", Meaning: "greatest depth of the section in the direction of its loads", Example: "400"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"depth", "maximum depth", "depth limit", "height limit", "max height"}},
	colSameSize: {Column: Column{Header: "Same size as", Meaning: "mark of another row: both get the section that the more heavily loaded one needs", Example: "B1"},
		hints: []string{"same as", "same size", "like", "size group"}},
	colMass: {Column: Column{Header: "Mass if not sized (kg/m or kg/m²)", Unit: "kg/m or kg/m²", Meaning: "mass per length, or per area, of a row that is not sized; the value carries its unit where the header names both", Example: "25 kg/m²"},
		dimensions: []unit.Dimension{unit.LineMass, unit.AreaMass}, hints: []string{"mass", "weight", "unit mass", "unit weight", "kg/m"}},
	colArea: {Column: Column{Header: "Area (m²)", Unit: "m²", Meaning: "area of one piece of a row that is not sized and has its mass per area", Example: "36"},
		dimensions: []unit.Dimension{unit.Area}, hints: []string{"surface"}},
	colConcrete: {Column: Column{Header: "Concrete (m³)", Unit: "m³", Meaning: "volume of concrete of one piece: footings, plinths, ballast blocks; a row of kind foundation may have it alone, without mass, section and length", Example: "2.4"},
		dimensions: []unit.Dimension{unit.Volume}, hints: []string{"concrete volume", "volume", "footing"}},
	colJoints: {Column: Column{Header: "Joints", Accepts: `numbers with their kinds, parted by ";": ` + strings.Join(JointKinds(), ", "),
		Meaning: "joints of one piece, counted by kind; they replace the allowance of the connection class of the row", Blank: "the allowance of the connection class", Example: "2 moment; 4 pinned; 1 site splice"},
		hints: []string{"joint", "end joints", "joint type", "joint count"}},
	colConnection: {Column: Column{Header: "Connection class", Meaning: "class of the allowance for connections", Blank: "that of the Job sheet, else by the kind", Example: "simple beams"},
		hints: []string{"connection", "connections", "connection type"}, choices: connectionClasses},
	colCoating: {Column: Column{Header: "Coating", Meaning: "coating system of the row, where it is not that of the Job sheet; a rate book that prices systems names them", Blank: "that of the Job sheet", Example: "hot-dip galvanised"},
		hints: []string{"paint", "painting", "coating system"}},
	colExecution: {Column: Column{Header: "Execution class", Accepts: strings.Join(ExecutionClasses(), ", "), Meaning: "execution class of the row, where it is not that of the Job sheet: EN 1090-2, or AISC 360 chapter N with AWS D1.1, statically or cyclically loaded", Blank: "that of the Job sheet", Example: "EXC3"},
		hints: []string{"exc", "inspection class"}, choices: ExecutionClasses},
	colRemarks: {Column: Column{Header: "Remarks", Meaning: "free text", Example: "loads from the process engineer"},
		hints: []string{"notes", "comment", "comments", "note", "remark"}},
}

// jobID is an index into jobKeys.
type jobID int

// The keys of the Job sheet.
const (
	jobProject jobID = iota
	jobScheme
	jobStandard
	jobGrade
	jobLimit
	jobFrequency
	jobFactor
	jobRestraint
	jobConnection
	jobCoating
	jobExecution
	jobStock
	jobKerf
	jobPurchase
	jobClass
	jobCurrency
	jobBaseDate
	jobConfidence
	jobWindSpeed
	jobTerrain
	jobGroundSnow
	jobMoney
	jobSpendDate
	jobConditions
	jobHaul
	jobTax
	jobOwner
	jobReserve
	jobCount
)

// jobKeys is indexed by jobID.
var jobKeys = [jobCount]definition{
	jobProject: {Column: Column{Header: "Project", Meaning: "name of the project", Example: "Brackwater loading quay"}},
	jobScheme:  {Column: Column{Header: "Scheme", Meaning: "name of the alternative", Example: "tower at the end"}, hints: []string{"alternative", "option", "variant"}},
	jobStandard: {Column: Column{Header: "Standard", Accepts: basisWords(), Meaning: "design basis of the checks; blank is allowable", Blank: "allowable", Example: "allowable"},
		hints: []string{"design basis", "code", "basis"}, choices: basisNames},
	jobGrade: {Column: Column{Header: "Grade", Meaning: "steel grade of rows that name none", Blank: "S235, A992 for W, A36 for C, A500 C for HSS, A53 B for PIPE", Example: "S355"}, hints: []string{"material", "steel grade", "steel"}, choices: material.Names},
	jobLimit: {Column: Column{Header: "Deflection limit (L/n)", Accepts: "250, L/250, 1/250, none", Meaning: "greatest deflection as span over n", Blank: "L/250, for booms L/100", Example: "L/250"},
		notes: []string{"ln", "1n", "n", "spann"}, hints: []string{"deflection"}, choices: limitChoices},
	jobFrequency: {Column: Column{Header: "Frequency floor (Hz)", Unit: "Hz", Accepts: "none", Meaning: "least natural frequency of members whose row names none; blank is none", Blank: "none", Example: "none"},
		dimensions: []unit.Dimension{unit.Frequency}, hints: []string{"frequency", "natural frequency", "vibration"}, choices: list("none", "3", "4", "5")},
	jobFactor: {Column: Column{Header: "Factor", Accepts: "1.5 to 10", Meaning: "factor on yield of design basis allowable alone: 1.5 to 1.67 for known loads, 3 to 4 for a first pass", Blank: "3, design basis allowable alone", Example: "3"},
		hints: []string{"safety factor", "factor of safety", "factor on yield"}},
	jobRestraint: {Column: Column{Header: "Restraint (m)", Unit: "m", Accepts: "full span", Meaning: "distance between lateral restraints; blank is the full span", Blank: "full span", Example: "full span"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"restraint spacing", "lateral restraint"}, choices: list("full span")},
	jobConnection: {Column: Column{Header: "Connection class", Meaning: "class of the allowance for connections of rows that name none", Blank: "by the kind of the member", Example: "simple beams"}, hints: []string{"connections", "connection"}, choices: connectionClasses},
	jobCoating:    {Column: Column{Header: "Coating", Meaning: "coating system; a rate book that prices systems names them", Example: "C5, three coats"}, hints: []string{"paint", "painting"}},
	jobExecution:  {Column: Column{Header: "Execution class", Accepts: strings.Join(ExecutionClasses(), ", "), Meaning: "execution class: EN 1090-2, or AISC 360 chapter N with AWS D1.1, statically or cyclically loaded", Example: "EXC2"}, hints: []string{"exc", "inspection class"}, choices: ExecutionClasses},
	jobStock: {Column: Column{Header: "Stock lengths (m)", Unit: "m", Meaning: `lengths in which sections are bought, parted by ";"`, Blank: "none: no cutting plan", Example: "12; 15"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"stock", "bar lengths", "stock bars"}},
	jobKerf: {Column: Column{Header: "Kerf (mm)", Unit: "mm", Meaning: "width of a saw cut in the cutting plan", Blank: "5 mm where there are stock lengths", Example: "5"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"saw cut", "cut width", "blade"}},
	jobPurchase: {Column: Column{Header: "Purchase", Accepts: strings.Join(purchases(), ", "), Meaning: "how purchased mass follows: by the waste allowance, or by a cutting plan from the stock lengths, first fit or the least stock", Blank: "waste", Example: "first fit"},
		hints: []string{"cutting plan", "buying", "waste"}, choices: purchases},
	jobClass:    {Column: Column{Header: "Estimate class", Accepts: "5 to 1", Meaning: "class by maturity of definition, 5 the least defined; blank is that of the sheet Definition, else 5", Blank: "by the sheet Definition, else 5", Example: "5"}, hints: []string{"class"}, choices: list("5", "4", "3", "2", "1")},
	jobCurrency: {Column: Column{Header: "Currency", Accepts: "an ISO 4217 code", Meaning: "currency of the estimate; blank is EUR", Blank: "EUR", Example: "EUR"}},
	jobBaseDate: {Column: Column{Header: "Base date", Accepts: "yyyy-mm-dd or a date cell", Meaning: "date of the money; blank takes that of the rate book", Blank: "that of the rate book", Example: "2026-01-01"}, hints: []string{"date", "price date"}},
	jobConfidence: {Column: Column{Header: "Confidence", Accepts: "0.8, 80 % or P80", Meaning: "probability that the contingency reaches; blank is 0.8", Blank: "P80", Example: "P80"},
		dimensions: []unit.Dimension{unit.Percent}, hints: []string{"percentile", "confidence level", "p"}, choices: list("P50", "P70", "P80", "P90")},
	jobWindSpeed: {Column: Column{Header: "Wind speed (m/s)", Unit: "m/s", Accepts: "m/s or mph", Meaning: "basic wind speed of the site for the load set wind: 10 min mean (EN 1991), 3 s gust (ASCE 7) in the AISC bases", Example: "26"},
		notes: []string{"ms"}, hints: []string{"wind", "basic wind speed", "wind velocity"}},
	jobTerrain: {Column: Column{Header: "Terrain", Accepts: "0, I, II, III, IV (EN 1991); B, C, D (ASCE 7)", Meaning: "terrain category or exposure of the site for the load set wind", Example: "II"},
		hints: []string{"terrain category", "exposure", "exposure category"}, choices: terrainNames},
	jobGroundSnow: {Column: Column{Header: "Ground snow (kN/m²)", Unit: "kN/m²", Meaning: "characteristic snow load on the ground for the load set snow", Example: "1.2"},
		dimensions: []unit.Dimension{unit.AreaLoad}, hints: []string{"snow", "snow load"}},
	jobMoney: {Column: Column{Header: "Money", Accepts: strings.Join(moneys(), ", "), Meaning: "money of the estimate: that of the base date, or outturn, escalated to the spend date", Blank: "base date", Example: "base date"},
		hints: []string{"price basis", "money basis", "escalation"}, choices: moneys},
	jobSpendDate: {Column: Column{Header: "Spend date", Accepts: "yyyy-mm-dd or a date cell", Meaning: "mid-point of spending, for outturn money; not before the base date", Example: "2027-06-30"},
		hints: []string{"spending date", "midpoint", "mid-point of spending"}},
	jobConditions: {Column: Column{Header: "Site conditions", Accepts: "one or more of " + strings.Join(SiteConditions(), ", ") + `, parted by ";"`, Meaning: "what makes erection dearer on this site", Blank: "none", Example: "over water; tidal"},
		hints: []string{"site", "conditions", "erection conditions"}, choices: SiteConditions},
	jobHaul: {Column: Column{Header: "Haul distance (km)", Unit: "km", Accepts: "km, mi or m", Meaning: "way from shop to site", Example: "120"},
		notes: []string{"km"}, hints: []string{"haul", "distance", "transport distance", "freight distance"}},
	jobTax: {Column: Column{Header: "Tax (%)", Unit: "%", Meaning: "rate of a tax line beside the estimate, outside the base", Blank: "no tax line", Example: "20"},
		dimensions: []unit.Dimension{unit.Percent}, hints: []string{"vat", "sales tax", "tax rate"}},
	jobOwner: {Column: Column{Header: "Owner's costs", Accepts: "yes, no", Meaning: "whether the owner's own costs are priced; else they are listed as excluded", Blank: "no", Example: "no"},
		hints: []string{"owner", "client costs"}, choices: list("no", "yes")},
	jobReserve: {Column: Column{Header: "Management reserve", Accepts: "an amount of 0 or more", Meaning: "money in the job's currency, outside the range, held by who approves", Blank: "none", Example: "150000"},
		hints: []string{"reserve"}},
}

// name is the header without its brackets.
func (d definition) name() string {
	name, _ := cutBrackets(d.Header)
	return name
}

// Columns returns every column of the schedule, in the order of the template.
func Columns() []Column { return described(columns[:]) }

// JobKeys returns every key of the Job sheet, in the order of the template.
func JobKeys() []Column { return described(jobKeys[:]) }

func described(list []definition) []Column {
	out := make([]Column, len(list))
	for i, d := range list {
		out[i] = d.Column
		if d.choices != nil {
			out[i].Choices = d.choices()
		}
		if len(d.dimensions) > 0 && d.Unit != "" {
			out[i].Accepts = d.accepts()
		}
	}
	return out
}

// accepts lists the units, and the words, that a cell of the column may hold.
func (d definition) accepts() string {
	text := ""
	for i, dim := range d.dimensions {
		if i > 0 {
			text += "; "
		}
		text += unit.Symbols(dim)
	}
	if d.Accepts != "" {
		text += "; " + d.Accepts
	}
	return text
}

// takes tells whether a unit may stand in the column's header.
func (d definition) takes(u unit.Unit) bool {
	return slices.ContainsFunc(d.dimensions, func(e unit.Dimension) bool { return e.Accepts(u.Dimension) })
}
