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
	{family: "WELDED-I", title: "I sections welded from plates", standard: "by dimensions",
		example: "WELDED-I 500x200x10x16", counts: []int{4}, meaning: "depth x width x web x flange",
		standards: []string{"by dimensions, weld metal not counted"},
		build:     func(d []float64, _ string) (Section, error) { return iSection(d[0], d[1], d[2], d[3], 0) }},
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
	case "FLAT":
		d = []float64{max(d[0], d[1]), min(d[0], d[1])}
	}
	return f, d, by(d), nil
}
