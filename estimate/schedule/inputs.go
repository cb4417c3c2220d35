package schedule

import "spanwright/estimate/assumption"

// Figures that vary with mass: from the row to the total.
var (
	massFigures = []string{
		"member/{mark}/net", "item/{item}/net", "item/{item}/delivered", "item/{item}/purchased",
		"group/{group}/net", "group/{group}/delivered", "group/{group}/purchased", "group/{group}/amount",
		"line/{item}/*", "category/*", "base", "range", "contingency",
	}
	bendingFigures = checkFigures("bending", "lateral-torsional buckling", "shear", "interaction", "deflection")
)

func checkFigures(names ...string) []string {
	ids := make([]string, len(names))
	for i, n := range names {
		ids[i] = "member/{mark}/check/" + n
	}
	return ids
}

// InputFeeds returns a register entry for each number that a schedule or its Job
// sheet gives, with the figures that change with it; {mark}, {group} and {item}
// stand for those of the members concerned, * for any one segment. A member has
// only some of the checks named: those of its shape and its loads.
func InputFeeds() []assumption.Entry {
	list := []assumption.Entry{
		input("length", "Lengths are as posted.", "m", append(checkFigures("bending", "lateral-torsional buckling", "shear", "axial", "interaction", "deflection"), massFigures...)),
		input("quantity", "Quantities are as posted.", "", massFigures),
		input("permanent load", "Permanent loads are as posted; own weight is added.", "kN/m", bendingFigures),
		input("variable load", "Variable loads are as posted.", "kN/m", bendingFigures),
		input("area load", "Area loads are as posted.", "kN/m²", bendingFigures),
		input("tributary width", "Tributary widths are as posted.", "m", bendingFigures),
		input("point load", "Point loads are as posted.", "kN", bendingFigures),
		input("point position", "Point loads stand where posted.", "m", bendingFigures),
		input("axial load", "Axial loads are as posted.", "kN", checkFigures("axial", "interaction")),
		input("overhang", "Overhangs are as posted.", "m", bendingFigures),
		input("support positions", "Supports stand where posted.", "m", bendingFigures),
		input("restraint spacing", "Lateral restraints are as posted.", "m", checkFigures("lateral-torsional buckling", "interaction")),
		input("effective length factor", "Effective length factors are as posted.", "", checkFigures("axial", "interaction")),
		input("deflection limit", "Deflection limits are as posted.", "", checkFigures("deflection")),
		input("mass if not sized", "Masses of rows that are not sized are as posted.", "kg/m or kg/m²", massFigures),
		input("area", "Areas of rows that are not sized are as posted.", "m²", massFigures),
		input("factor", "The factor on yield is as posted.", "", checkFigures("bending", "lateral-torsional buckling", "shear", "axial", "interaction")),
		input("confidence", "The confidence is as posted.", "", []string{"contingency"}),
	}
	return list
}

func input(name, statement, unit string, feeds []string) assumption.Entry {
	return assumption.Entry{
		ID: "input/" + name, Kind: assumption.Input, Statement: statement, Unit: unit,
		Source: "posted schedule", Owner: "schedule", Confidence: assumption.Medium, Feeds: append([]string{}, feeds...),
	}
}
