package section

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// table is one catalogue file: "# name: value" lines, then CSV with a header.
//
//	# family, title, standard, source, making, shape: of all rows
//	# units: "mm kg/m" or "in lb/ft"; the column slope has none
//	# corners: of rectangular tubes, the standard whose corner radii hold
//	designation … j: the printed torsion constant, where no formula is near enough
//	# torsion: "El Darwish" where J of I sections is by that formula
//	designation, the shape's dimensions, mass[, aliases parted by |]
//
// A new shape needs a builder; a new unit needs a line in scales.
type table struct {
	head map[string]string
	rows []row
}

type row struct {
	designation string
	aliases     []string
	mass        float64 // kg/m
	value       map[string]float64
}

// scales turn file units into m and kg/m.
var scales = map[string][2]float64{
	"mm kg/m":  {1e-3, 1},
	"in lb/ft": {inch, poundPerFoot},
}

// Exact by the international yard and pound agreement of 1959.
const (
	inch         = 0.0254                 // m
	poundPerFoot = 0.45359237 / 12 / inch // kg/m
)

// Values of the head lines corners and torsion.
const (
	americanCorners = "2t"
	elDarwish       = "El Darwish"
)

// builders turn a row's dimensions, in m, into a section.
var builders = map[string]struct {
	columns []string
	build   func(t table, v map[string]float64) (Section, error)
}{
	"I section": {[]string{"h", "b", "tw", "tf", "r"}, func(_ table, v map[string]float64) (Section, error) {
		return iSection(v["h"], v["b"], v["tw"], v["tf"], v["r"])
	}},
	"I section by k": {[]string{"h", "b", "tw", "tf", "k"}, func(_ table, v map[string]float64) (Section, error) {
		return iSection(v["h"], v["b"], v["tw"], v["tf"], v["k"]-v["tf"])
	}},
	"channel": {[]string{"h", "b", "tw", "tf", "r"}, func(_ table, v map[string]float64) (Section, error) {
		return channel(channelSize{h: v["h"], b: v["b"], tw: v["tw"], tf: v["tf"], r: v["r"]})
	}},
	"tapered channel": {[]string{"h", "b", "tw", "tf", "r", "toe", "slope", "at"}, func(_ table, v map[string]float64) (Section, error) {
		return channel(channelSize{v["h"], v["b"], v["tw"], v["tf"], v["r"], v["toe"], v["slope"], v["at"]})
	}},
	"angle": {[]string{"h", "b", "t", "r", "toe"}, func(_ table, v map[string]float64) (Section, error) {
		return angle(v["h"], v["b"], v["t"], v["r"], v["toe"])
	}},
	"round tube": {[]string{"d", "t"}, func(_ table, v map[string]float64) (Section, error) {
		return roundTube(v["d"], v["t"])
	}},
	"rectangular tube": {[]string{"h", "b", "t"}, func(t table, v map[string]float64) (Section, error) {
		outer, inner, err := corners(t.head["corners"], v["t"])
		if err != nil {
			return Section{}, err
		}
		return rectangularTube(v["h"], v["b"], v["t"], outer, inner)
	}},
}

var makings = map[string]Making{"hot rolled": HotRolled, "cold formed": ColdFormed, "welded": Welded}

// corners returns the outer and inner corner radius of a rectangular tube of
// wall t for the calculation of properties: EN 10219-2 annex B by wall, EN
// 10210-2 annex A 1.5t and 1.0t; 2t is the rule behind the American HSS tables
// (2t and 1t of the wall that they reckon with).
func corners(standard string, t float64) (outer, inner float64, err error) {
	switch standard {
	case "EN 10210-2":
		return 1.5 * t, t, nil
	case americanCorners:
		return 2 * t, t, nil
	case "EN 10219-2":
		// Walls come through a decimal text, so 6 mm may be a hair above 0.006.
		switch {
		case t <= 6e-3+1e-9:
			return 2 * t, t, nil
		case t <= 10e-3+1e-9:
			return 2.5 * t, 1.5 * t, nil
		}
		return 3 * t, 2 * t, nil
	}
	return 0, 0, fmt.Errorf("corner radii by %q; want EN 10219-2, EN 10210-2 or 2t", standard)
}

func readTable(text []byte) (table, error) {
	t := table{head: map[string]string{}}
	for line := range strings.Lines(string(text)) {
		note, ok := strings.CutPrefix(line, "#")
		if !ok {
			break
		}
		name, value, _ := strings.Cut(note, ":")
		t.head[strings.TrimSpace(name)] = strings.TrimSpace(value)
	}
	for _, name := range []string{"family", "title", "standard", "source", "making", "shape", "units"} {
		if t.head[name] == "" {
			return table{}, fmt.Errorf("no %q line at the head", "# "+name+":")
		}
	}
	scale, ok := scales[t.head["units"]]
	if !ok {
		return table{}, fmt.Errorf("units %q; want mm kg/m or in lb/ft", t.head["units"])
	}
	r := csv.NewReader(bytes.NewReader(text))
	r.Comment = '#'
	records, err := r.ReadAll()
	if err != nil {
		return table{}, err
	}
	if len(records) < 2 {
		return table{}, fmt.Errorf("no rows")
	}
	for _, record := range records[1:] {
		parsed, err := readRow(records[0], record, scale)
		if err != nil {
			return table{}, fmt.Errorf("row %s: %w", record[0], err)
		}
		t.rows = append(t.rows, parsed)
	}
	return t, nil
}

func readRow(header, record []string, scale [2]float64) (row, error) {
	r := row{value: map[string]float64{}}
	for i, name := range header {
		switch name {
		case "designation":
			r.designation = record[i]
		case "aliases":
			if record[i] != "" {
				r.aliases = strings.Split(record[i], "|")
			}
		default:
			x, err := strconv.ParseFloat(record[i], 64)
			if err != nil {
				return row{}, fmt.Errorf("column %s: %q is not a number", name, record[i])
			}
			switch name {
			case "mass":
				r.mass = x * scale[1]
			case "slope":
				r.value[name] = x
			case "j":
				r.value[name] = x * math.Pow(scale[0], 4)
			default:
				r.value[name] = x * scale[0]
			}
		}
	}
	if !(r.mass > 0) {
		return row{}, fmt.Errorf("no mass above zero")
	}
	return r, nil
}

// section builds the section of a row; its mass is the row's.
func (t table) section(r row) (Section, error) {
	b, ok := builders[t.head["shape"]]
	if !ok {
		return Section{}, fmt.Errorf("shape %q has no formulas", t.head["shape"])
	}
	for _, c := range b.columns {
		if _, ok := r.value[c]; !ok {
			return Section{}, fmt.Errorf("row %s: no column %q", r.designation, c)
		}
	}
	s, err := b.build(t, r.value)
	if err != nil {
		return Section{}, fmt.Errorf("row %s: %w", r.designation, err)
	}
	if t.head["torsion"] == elDarwish {
		s.J = torsionI(s.H, s.B, s.Tw, s.Tf, s.R)
	}
	if printed, ok := r.value["j"]; ok {
		s.J = printed
	}
	s.Designation, s.Family, s.Source, s.Mass = r.designation, t.head["family"], t.head["source"], r.mass
	if s.Making, ok = makings[t.head["making"]]; !ok {
		return Section{}, fmt.Errorf("making %q; want hot rolled, cold formed or welded", t.head["making"])
	}
	return s, nil
}
