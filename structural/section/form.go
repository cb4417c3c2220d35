package section

import (
	"fmt"
	"slices"
)

// form is how a family is given by dimensions.
type form struct {
	family, title, standard string
	example                 string
	counts                  []int  // how many dimensions it takes
	meaning                 string // the dimensions in order
	standards               []string
	unit                    string // of dimensions without one; mm where empty
	build                   func(d []float64, standard string) (Section, error)
}

// forms are the families that Find takes by dimensions. The first of its
// standards holds where none is named.
var forms = []form{
	{family: "CHS", example: "CHS 508x25.4", counts: []int{2}, meaning: "diameter x wall",
		standards: []string{"EN 10210-2", "EN 10219-2"}, build: chsForm},
	{family: "PIPE", example: "PIPE 508x25.4", counts: []int{2}, meaning: "outside diameter x wall",
		standards: []string{"ASME B36.10M"},
		build:     func(d []float64, _ string) (Section, error) { return roundTube(d[0], d[1]) }},
	{family: "SHS", example: "SHS 100x5", counts: []int{2, 3}, meaning: "side x wall",
		standards: []string{"EN 10219-2", "EN 10210-2"}, build: rectangularForm},
	{family: "RHS", example: "RHS 200x100x8", counts: []int{3}, meaning: "depth x width x wall",
		standards: []string{"EN 10219-2", "EN 10210-2"}, build: rectangularForm},
	{family: "L", example: "L 100x100x10", counts: []int{2, 3, 4}, meaning: "leg x leg x thickness, root radius if known",
		standards: []string{"EN 10056-1"}, build: angleForm},
	{family: "HSS", example: "HSS8x8x1/2", counts: []int{3}, meaning: "depth x width x nominal wall, in inches unless mm are named",
		standards: []string{"ASTM A500/A500M"}, unit: "IN", build: hssForm},
	{family: "HSS-ROUND", example: "HSS6.625x0.280", counts: []int{2}, meaning: "diameter x nominal wall, in inches unless mm are named",
		standards: []string{"ASTM A500/A500M"}, unit: "IN", build: roundHSSForm},
	{family: "WELDED-I", title: "I sections welded from plates", standard: "by dimensions",
		example: "WELDED-I 500x200x10x16", counts: []int{4, 6},
		meaning:   "depth x width x web x flange, or with x lower width x lower flange,",
		standards: []string{byPlates}, build: weldedForm},
	{family: "WELDED-BOX", title: "Boxes welded from plates", standard: "by dimensions",
		example: "WELDED-BOX 600x400x12x20", counts: []int{4}, meaning: "depth x width x web x flange",
		standards: []string{byPlates},
		build:     func(d []float64, _ string) (Section, error) { return weldedBox(d[0], d[1], d[2], d[3]) }},
	{family: "TEE", title: "Tees, flange on top", standard: "by dimensions",
		example: "TEE 150x200x10x15", counts: []int{4, 5}, meaning: "depth x width x stem x flange, root fillet if rolled",
		standards: []string{byPlates},
		build:     func(d []float64, _ string) (Section, error) { return tee(d[0], d[1], d[2], d[3], fifth(d)) }},
	{family: "CHANNEL", title: "Channels with parallel flanges", standard: "by dimensions",
		example: "CHANNEL 200x80x6x11", counts: []int{4, 5}, meaning: "depth x width x web x flange, root fillet if rolled",
		standards: []string{byPlates},
		build: func(d []float64, _ string) (Section, error) {
			return channel(channelSize{h: d[0], b: d[1], tw: d[2], tf: d[3], r: fifth(d)})
		}},
	{family: "ROUND", title: "Solid rounds", standard: "EN 10060",
		example: "ROUND 50", counts: []int{1}, meaning: "diameter", standards: []string{"EN 10060"},
		build: func(d []float64, _ string) (Section, error) { return solidRound(d[0]) }},
	{family: "FLAT", title: "Flats, bent on edge", standard: "EN 10058",
		example: "FLAT 100x10", counts: []int{2}, meaning: "width x thickness", standards: []string{"EN 10058"},
		build: func(d []float64, _ string) (Section, error) { return flat(d[0], d[1]) }},
}

func formOf(family string) (form, bool) {
	for _, f := range forms {
		if f.family == family {
			return f, true
		}
	}
	return form{}, false
}

const byPlates = "by dimensions, weld metal not counted"

func fifth(d []float64) float64 {
	if len(d) > 4 {
		return d[4]
	}
	return 0
}

func weldedForm(d []float64, _ string) (Section, error) {
	if len(d) == 6 {
		return unequalI(d[0], d[1], d[2], d[3], d[4], d[5])
	}
	return iSection(d[0], d[1], d[2], d[3], 0)
}

// angleForm leaves the root fillet out where it isn't given, which is safe.
func angleForm(d []float64, _ string) (Section, error) {
	if len(d) == 3 {
		return angle(d[0], d[1], d[2], 0, 0)
	}
	return angle(d[0], d[1], d[2], d[3], min(d[3]/2, d[2]))
}

func hssForm(d []float64, _ string) (Section, error) {
	outer, inner, err := corners(americanCorners, d[2])
	if err != nil {
		return Section{}, err
	}
	return rectangularTube(d[0], d[1], d[2], outer, inner)
}

func roundHSSForm(d []float64, _ string) (Section, error) {
	s, err := roundTube(d[0], d[1])
	s.Making = ColdFormed
	return s, err
}

func chsForm(d []float64, standard string) (Section, error) {
	s, err := roundTube(d[0], d[1])
	if standard == "EN 10219-2" {
		s.Making = ColdFormed
	}
	return s, err
}

func rectangularForm(d []float64, standard string) (Section, error) {
	outer, inner, err := corners(standard, d[2])
	if err != nil {
		return Section{}, err
	}
	s, err := rectangularTube(d[0], d[1], d[2], outer, inner)
	if standard == "EN 10210-2" {
		s.Making = HotRolled
	}
	return s, err
}

// arrange puts dimensions into the order and number that build takes, and a
// rectangular tube with equal sides into SHS. It returns the family that the
// dimensions belong to and the text of them for the designation.
func (f form) arrange(d []float64) (form, []float64, string, error) {
	if !slices.Contains(f.counts, len(d)) {
		return form{}, nil, "", fmt.Errorf("%s takes %s, such as %s; found %d dimensions", f.family, f.meaning, f.example, len(d))
	}
	switch f.family {
	case "SHS":
		if len(d) == 3 && d[0] != d[1] {
			return form{}, nil, "", fmt.Errorf("SHS has equal sides; write RHS %s", by(d))
		}
		wall := d[len(d)-1]
		return f, []float64{d[0], d[0], wall}, by([]float64{d[0], wall}), nil
	case "RHS":
		if d[0] == d[1] {
			square, _ := formOf("SHS")
			return square.arrange(d)
		}
		d = []float64{max(d[0], d[1]), min(d[0], d[1]), d[2]}
	case "L":
		if len(d) == 2 {
			d = []float64{d[0], d[0], d[1]}
		}
		d = slices.Clone(d)
		d[0], d[1] = max(d[0], d[1]), min(d[0], d[1])
	case "HSS":
		d = []float64{max(d[0], d[1]), min(d[0], d[1]), d[2]}
		return f, d, by(d) + " mm", nil
	case "HSS-ROUND":
		return f, d, by(d) + " mm", nil
	case "WELDED-I":
		if len(d) == 6 && d[1] == d[4] && d[3] == d[5] {
			d = d[:4]
		}
	case "FLAT":
		d = []float64{max(d[0], d[1]), min(d[0], d[1])}
	}
	return f, d, by(d), nil
}

func (f form) defaultUnit() string {
	if f.unit == "" {
		return "MM"
	}
	return f.unit
}

func (f form) described() string {
	if f.unit == "" {
		return f.meaning + " in mm"
	}
	return f.meaning
}
