package schedule

import (
	"slices"

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
}

// definition is a Column with what the reader has to know of it.
type definition struct {
	Column
	dimensions []unit.Dimension // of the units that header and cells may name; none for plain numbers and texts
	notes      []string         // texts other than units that the header's brackets may hold
	hints      []string         // other names in use for it: never accepted, only suggested
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
	colAreaLoad
	colWidth
	colOverhang
	colPositions
	colRestraint
	colFactor
	colLimit
	colConnection
	colMass
	colArea
	colRemarks
	columnCount
)

var pieces = []string{"pcs", "pieces", "no", "nos", "off", "each"}

// columns is indexed by columnID.
var columns = [columnCount]definition{
	colMark: {Column: Column{Header: "Mark", Obligatory: true, Meaning: "name of the row, once in the schedule", Example: "B1"},
		hints: []string{"name", "tag", "id", "member", "item", "piece mark", "ref", "position"}},
	colGroup: {Column: Column{Header: "Group", Meaning: "part of the structure that is summed and priced together", Example: "Loading boom"},
		hints: []string{"assembly", "area", "module", "zone", "structure"}},
	colQuantity: {Column: Column{Header: "Quantity", Obligatory: true, Meaning: "number of pieces alike, a whole number above 0", Example: "4"},
		notes: pieces, hints: []string{"qty", "pcs", "count", "number", "no", "nos", "pieces"}},
	colLength: {Column: Column{Header: "Length (m)", Obligatory: true, Unit: "m", Meaning: "whole length of one piece, overhangs included", Example: "6.5"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"span", "l", "total length"}},
	colSupport: {Column: Column{Header: "Support", Accepts: supportWords(), Meaning: "how the member is held; blank is simple", Example: "simple"},
		hints: []string{"arrangement", "supports", "boundary", "type"}},
	colPermanent: {Column: Column{Header: "Permanent load (kN/m)", Unit: "kN/m", Meaning: "uniform permanent load without the member's own weight, down positive; 0 if there is none", Example: "2.5"},
		dimensions: []unit.Dimension{unit.LineLoad}, hints: []string{"dead load", "dl", "g", "permanent"}},
	colVariable: {Column: Column{Header: "Variable load (kN/m)", Unit: "kN/m", Meaning: "uniform variable load, placed span by span for the worst effect; 0 if there is none", Example: "4"},
		dimensions: []unit.Dimension{unit.LineLoad}, hints: []string{"live load", "imposed load", "ll", "q", "variable", "load"}},
	colProduct: {Column: Column{Header: "Section or family", Obligatory: true, Meaning: "a family to size from, a section to check, or the product of a row that is not sized", Example: "IPE"},
		hints: []string{"section", "family", "profile", "size", "member size", "shape"}},
	colGrade: {Column: Column{Header: "Grade", Meaning: "steel grade; blank takes that of the Job sheet", Example: "S355"},
		hints: []string{"material", "steel", "steel grade", "quality"}},
	colKind: {Column: Column{Header: "Kind", Meaning: "what the member is: beam, boom, column, bracing, handrail", Example: "boom"},
		hints: []string{"category", "member type", "function"}},
	colDescription: {Column: Column{Header: "Description", Meaning: "free text", Example: "main girder, axis 3"},
		hints: []string{"text", "title", "desc"}},
	colPoint: {Column: Column{Header: "Point load (kN)", Unit: "kN", Meaning: "one force on the member, variable, down positive", Example: "12"},
		dimensions: []unit.Dimension{unit.Force}, hints: []string{"concentrated load", "p", "force"}},
	colPointAt: {Column: Column{Header: "Point position (m)", Unit: "m", Meaning: "where the point load stands, from the left end", Example: "3.2"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"load position", "point load position"}},
	colAxial: {Column: Column{Header: "Axial load (kN, compression +)", Unit: "kN", Meaning: "force along the member, compression positive, tension negative", Example: "180"},
		dimensions: []unit.Dimension{unit.Force}, notes: []string{"compression", "compression positive", "tension"}, hints: []string{"axial force", "normal force", "axial", "n"}},
	colAreaLoad: {Column: Column{Header: "Area load (kN/m²)", Unit: "kN/m²", Meaning: "variable load per area, taken over the tributary width", Example: "5"},
		dimensions: []unit.Dimension{unit.AreaLoad}, hints: []string{"surface load", "floor load", "pressure"}},
	colWidth: {Column: Column{Header: "Tributary width (m)", Unit: "m", Meaning: "width from which the member collects the area load", Example: "1.8"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"load width", "width", "spacing"}},
	colOverhang: {Column: Column{Header: "Overhang (m)", Unit: "m", Meaning: "length beyond the far support, part of Length", Example: "2"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"cantilever length", "projection"}},
	colPositions: {Column: Column{Header: "Support positions (m)", Unit: "m", Meaning: `places of the supports from the left end, parted by ";", each with "fixed" or "pinned" (pinned if nothing is said)`, Example: "0 fixed; 28; 42"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"support position", "support locations"}},
	colRestraint: {Column: Column{Header: "Restraint spacing (m)", Unit: "m", Accepts: "full span", Meaning: "distance between lateral restraints of the compression flange; blank is the full span", Example: "2"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"restraint", "lateral restraint", "unbraced length", "lb"}},
	colFactor: {Column: Column{Header: "Effective length factor", Meaning: "K of the buckling length K·L", Example: "1"},
		hints: []string{"k", "length factor", "buckling factor", "effective length"}},
	colLimit: {Column: Column{Header: "Deflection limit (L/n)", Accepts: "250, L/250, 1/250, none", Meaning: "greatest deflection as span over n", Example: "L/250"},
		notes: []string{"ln", "1n", "n", "spann"}, hints: []string{"deflection", "limit", "deflection criterion"}},
	colConnection: {Column: Column{Header: "Connection class", Meaning: "class of the allowance for connections", Example: "simple beams"},
		hints: []string{"connection", "connections", "connection type"}},
	colMass: {Column: Column{Header: "Mass if not sized (kg/m or kg/m²)", Unit: "kg/m or kg/m²", Meaning: "mass per length, or per area, of a row that is not sized; the value carries its unit where the header names both", Example: "25 kg/m²"},
		dimensions: []unit.Dimension{unit.LineMass, unit.AreaMass}, hints: []string{"mass", "weight", "unit mass", "unit weight", "kg/m"}},
	colArea: {Column: Column{Header: "Area (m²)", Unit: "m²", Meaning: "area of one piece of a row that is not sized and has its mass per area", Example: "36"},
		dimensions: []unit.Dimension{unit.Area}, hints: []string{"surface"}},
	colRemarks: {Column: Column{Header: "Remarks", Meaning: "free text", Example: "loads from the process engineer"},
		hints: []string{"notes", "comment", "comments", "note", "remark"}},
}

// unavailable are columns of the full schedule that this version does not read.
// They are refused by name, so that nothing they say is lost unseen.
var unavailable = []string{"Horizontal load", "Moving load", "Dynamic factor", "Same size as", "Joints", "Coating", "Execution class"}

// jobID is an index into jobKeys.
type jobID int

// The keys of the Job sheet.
const (
	jobProject jobID = iota
	jobScheme
	jobStandard
	jobGrade
	jobLimit
	jobFactor
	jobRestraint
	jobConnection
	jobCoating
	jobExecution
	jobStock
	jobClass
	jobCurrency
	jobBaseDate
	jobConfidence
	jobCount
)

// jobKeys is indexed by jobID.
var jobKeys = [jobCount]definition{
	jobProject: {Column: Column{Header: "Project", Meaning: "name of the project", Example: "Brackwater loading quay"}},
	jobScheme:  {Column: Column{Header: "Scheme", Meaning: "name of the alternative", Example: "tower at the end"}, hints: []string{"alternative", "option", "variant"}},
	jobStandard: {Column: Column{Header: "Standard", Accepts: "allowable", Meaning: "design basis of the checks; blank is allowable", Example: "allowable"},
		hints: []string{"design basis", "code", "basis"}},
	jobGrade: {Column: Column{Header: "Grade", Meaning: "steel grade of rows that name none", Example: "S355"}, hints: []string{"material", "steel grade", "steel"}},
	jobLimit: {Column: Column{Header: "Deflection limit (L/n)", Accepts: "250, L/250, 1/250, none", Meaning: "greatest deflection as span over n", Example: "L/250"},
		notes: []string{"ln", "1n", "n", "spann"}, hints: []string{"deflection"}},
	jobFactor: {Column: Column{Header: "Factor", Accepts: "1.5 to 10", Meaning: "factor on yield of design basis allowable: 1.5 to 1.67 for known loads, 3 to 4 for a first pass", Example: "3"},
		hints: []string{"safety factor", "factor of safety", "factor on yield"}},
	jobRestraint: {Column: Column{Header: "Restraint (m)", Unit: "m", Accepts: "full span", Meaning: "distance between lateral restraints; blank is the full span", Example: "full span"},
		dimensions: []unit.Dimension{unit.Length}, hints: []string{"restraint spacing", "lateral restraint"}},
	jobConnection: {Column: Column{Header: "Connection class", Meaning: "class of the allowance for connections of rows that name none", Example: "simple beams"}, hints: []string{"connections", "connection"}},
	jobCoating:    {Column: Column{Header: "Coating", Meaning: "coating system; recorded", Example: "C5, three coats"}, hints: []string{"paint", "painting"}},
	jobExecution:  {Column: Column{Header: "Execution class", Meaning: "execution class of EN 1090-2; recorded", Example: "EXC2"}, hints: []string{"exc"}},
	jobStock:      {Column: Column{Header: "Stock lengths", Meaning: "lengths in which sections are bought; recorded", Example: "12 m; 15 m"}, notes: []string{"m", "ft", "mm"}, hints: []string{"stock"}},
	jobClass:      {Column: Column{Header: "Estimate class", Accepts: "5 to 1", Meaning: "class by maturity of definition, 5 the least defined; blank is 5", Example: "5"}, hints: []string{"class"}},
	jobCurrency:   {Column: Column{Header: "Currency", Accepts: "an ISO 4217 code", Meaning: "currency of the estimate; blank is EUR", Example: "EUR"}},
	jobBaseDate:   {Column: Column{Header: "Base date", Accepts: "yyyy-mm-dd or a date cell", Meaning: "date of the money; blank takes that of the rate book", Example: "2026-01-01"}, hints: []string{"date", "price date"}},
	jobConfidence: {Column: Column{Header: "Confidence", Accepts: "0.8, 80 % or P80", Meaning: "probability that the contingency reaches; blank is 0.8", Example: "P80"},
		dimensions: []unit.Dimension{unit.Percent}, hints: []string{"percentile", "confidence level", "p"}},
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
