package schedule

import (
	"slices"

	"spanwright/estimate/assumption"
	"spanwright/structural/resistance"
)

var (
	bendingFigures  = checkFigures(resistance.Bending, resistance.LateralBuckling, resistance.Shear, resistance.WebBuckling, resistance.Interaction, resistance.Deflecting)
	sideFigures     = checkFigures(resistance.BendingZ, resistance.ShearY, resistance.Interaction, resistance.Deflecting)
	frequencyFigure = checkFigures(resistance.Vibrating)
	riskFigures     = []string{"range", "contingency"}
)

// quantityFigures are everything that follows from the quantities of the take-off
// that depend on an input: group masses, lines, categories, totals, carbon.
func quantityFigures(input string) []string { return []string{"quantities[" + input + "]"} }

// netFigures are those of an input that moves the drawn mass of a row.
func netFigures(input string) []string {
	return append([]string{"member/{mark}/net"}, quantityFigures(input)...)
}

func checkFigures(names ...string) []string {
	ids := make([]string, len(names))
	for i, n := range names {
		ids[i] = "member/{mark}/check/" + n
	}
	return ids
}

// InputFeeds returns a register entry for each number that a schedule or its Job
// sheet gives, with the figures that change with it; {mark}, {group} and {item}
// stand for those of the members concerned, quantities[…] for all that follows from
// the quantities that depend on the input. A member has
// only some of the checks named: those of its shape and its loads; of a member in
// tension no length enters the axial check.
func InputFeeds() []assumption.Entry {
	join := func(lists ...[]string) []string {
		all := slices.Concat(lists...)
		slices.Sort(all)
		return slices.Compact(all)
	}
	axial := checkFigures(resistance.Axial, resistance.Interaction)
	return []assumption.Entry{
		input("length", "Lengths are as posted.", "m", join(bendingFigures, sideFigures, frequencyFigure, axial, netFigures("length"))),
		input("quantity", "Quantities are as posted.", "", netFigures("quantity")),
		input("permanent load", "Permanent loads are as posted; own weight is added.", "kN/m", join(bendingFigures, frequencyFigure)),
		input("variable load", "Variable loads are as posted.", "kN/m", bendingFigures),
		input("area load", "Area loads are as posted.", "kN/m²", bendingFigures),
		input("tributary width", "Tributary widths are as posted.", "m", bendingFigures),
		input("point load", "Point loads are as posted.", "kN", bendingFigures),
		input("point position", "Point loads stand where posted.", "m", bendingFigures),
		input("axial load", "Axial loads are as posted.", "kN", axial),
		input("horizontal load", "Horizontal loads are as posted and bend members about their weak axis.", "kN/m", sideFigures),
		input("moving load", "Wheels and their distances are as posted; they cross the whole member in both directions.", "kN", bendingFigures),
		input("dynamic factor", "Dynamic factors of vertical loads are as posted and stand on the static loads that they name.", "", bendingFigures),
		input("dynamic factor, horizontal", "Dynamic factors of horizontal loads are as posted and stand on the static loads.", "", sideFigures),
		input("overhang", "Overhangs are as posted.", "m", join(bendingFigures, sideFigures, frequencyFigure)),
		input("support positions", "Supports stand where posted.", "m", join(bendingFigures, sideFigures, frequencyFigure)),
		input("restraint spacing", "Lateral restraints are as posted.", "m", checkFigures(resistance.LateralBuckling, resistance.Interaction)),
		input("effective length factor", "Effective length factors are as posted.", "", axial),
		input("moment factor", "Moment factors C1 or Cb are as posted.", "", checkFigures(resistance.LateralBuckling, resistance.Interaction)),
		input("net area factor", "Net area factors of members in tension are as posted.", "", axial),
		input("deflection limit", "Deflection limits are as posted.", "", checkFigures(resistance.Deflecting)),
		input("frequency floor", "Frequency floors are as posted.", "Hz", frequencyFigure),
		input("max depth", "Sections are no deeper than posted; the limit bounds the choice and enters no figure.", "mm", nil),
		input("same size as", "Rows of one size get the section that the most heavily used of them needs.", "", nil),
		input("mass if not sized", "Masses of rows that are not sized are as posted.", "kg/m or kg/m²", netFigures("mass if not sized")),
		input("area", "Areas of rows that are not sized are as posted.", "m²", netFigures("area")),
		input("joints", "Joints are counted as posted, by kind.", "", quantityFigures("joints")),
		input("concrete", "Volumes of concrete are as posted.", "m³", quantityFigures("concrete")),
		input("stock lengths", "Sections are bought in the stock lengths posted; the cutting plan moves in whole bars.", "m", nil),
		input("kerf", "A saw cut is as wide as posted; the cutting plan moves in whole bars.", "mm", nil),
		input("haul distance", "The way from shop to site is as posted.", "km", quantityFigures("haul distance")),
		input("spend date", "The mid-point of spending is as posted; it is a date and enters figures by the index of its time.", "", nil),
		input("tax", "The tax is as posted; its line is outside the base.", "%", []string{"tax"}),
		input("management reserve", "The management reserve is as posted; it is outside the range.", "", nil),
		input("risk probability", "Probabilities of risks are as posted.", "%", riskFigures),
		input("risk amount", "Amounts of risks are as posted.", "", riskFigures),
		input("factor", "The factor on yield is as posted.", "", checkFigures(resistance.Bending, resistance.BendingZ, resistance.LateralBuckling, resistance.Shear, resistance.ShearY, resistance.Axial, resistance.Interaction)),
		input("confidence", "The confidence is as posted.", "", []string{"contingency"}),
	}
}

func input(name, statement, unit string, feeds []string) assumption.Entry {
	return assumption.Entry{
		ID: "input/" + name, Kind: assumption.Input, Statement: statement, Unit: unit,
		Source: "posted schedule", Owner: "schedule", Confidence: assumption.Medium, Feeds: append([]string{}, feeds...),
	}
}
