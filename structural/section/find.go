package section

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// UnknownError is a designation or family that names no section.
type UnknownError struct {
	Found string   // as written by the caller
	Why   string   // what is wrong and what would be accepted
	Near  []string // designations that may have been meant, likeliest first; may be empty
}

// Error says what was found, why it names no section and what is near it.
func (e *UnknownError) Error() string {
	text := fmt.Sprintf("unknown section %q: %s", e.Found, e.Why)
	if len(e.Near) > 0 {
		text += "; did you mean " + strings.Join(e.Near, " or ") + "?"
	}
	return text
}

// Find returns the section of a trade spelling. Letter case, spaces, hyphens,
// the sign between dimensions and a decimal comma don't matter.
//
//   - catalogue: "IPE 300", "heb200", "HE 200 B", "CHS 168.3x6.3", "NPS 20 XS",
//     "PIPE 1-1/2 in SCH 80";
//   - American sizes: "W18x50", "C10x20", "HSS8x8x1/2", "HSS 6.625x0.280", and
//     tees cut from a wide flange, "WT9x25";
//   - by dimensions in mm, or in inches if they say so: "CHS 508x25.4", "RHS
//     200x100x8", "SHS 100x5", "WELDED-I 500x200x10x16" (depth x width x web x
//     flange), "WELDED-I 900x300x10x20x400x25" (lower width x lower flange last),
//     "WELDED-BOX 600x400x12x20", "TEE 150x200x10x15", "CHANNEL 200x80x6x11",
//     "L 110x90x9", "ROUND 50", "FLAT 100x10", "PIPE 20 in x 1 in"; HSS in inches
//     unless mm are named; a size that the catalogue holds is that row. PIPE takes any wall, but only the outside
//     diameters of ASME B36.10M;
//   - a hollow section of the other standard: "SHS 100x5 EN 10210";
//   - a tee cut from an I section: "1/2 IPE 300";
//   - chords built together: "2x UPN 200 @ 600", "4x L 100x100x10 @ 800x600" (mm
//     between chord centroids: depth x width); see Chords.
//
// The designation of the answer finds the same section again. Anything else is
// an *UnknownError.
func Find(designation string) (Section, error) {
	c, err := load()
	if err != nil {
		return Section{}, err
	}
	k := key(designation)
	if s, ok := c.index[k]; ok {
		return s, nil
	}
	if s, ok, err := c.composed(designation, k); ok {
		return s, err
	}
	unknown := &UnknownError{Found: designation}
	family, rest, ok := splitFamily(k)
	if !ok {
		unknown.Near = c.nearAll(k)
		unknown.Why = "no such family or size; families are " + strings.Join(c.familyNames(), ", ")
		return Section{}, unknown
	}
	s, err := c.size(family, rest)
	if err != nil {
		unknown.Near = c.nearIn(family, rest)
		unknown.Why = err.Error()
		return Section{}, unknown
	}
	return s, nil
}

func (c *catalogue) familyNames() []string {
	names := make([]string, len(c.families))
	for i, f := range c.families {
		names[i] = f.Name
	}
	return names
}

// size finds what follows a family's name, all as keys.
func (c *catalogue) size(family, rest string) (Section, error) {
	if rest == "" {
		return Section{}, fmt.Errorf("%s is a family, not a size", family)
	}
	if s, ok := c.index[words[family][0]+rest]; ok {
		return s, nil
	}
	if family == "PIPE" {
		if k, isSchedule := pipeKey(rest); isSchedule {
			s, ok := c.index[k]
			if !ok {
				return Section{}, fmt.Errorf("ASME B36.10M as held here has no such size and schedule")
			}
			return s, nil
		}
	}
	f, ok := formOf(family)
	if !ok {
		return Section{}, fmt.Errorf("%s has no such size", family)
	}
	standard := f.standards[0]
	if m := namedStandard.FindStringSubmatchIndex(rest); m != nil {
		standard = "EN " + rest[m[2]+2:m[3]] + "-2"
		rest = rest[:m[0]]
	}
	d, err := dimensions(rest, f.defaultUnit())
	if err != nil {
		return Section{}, fmt.Errorf("%w; write %s (%s)", err, f.example, f.described())
	}
	if f.family == "HSS" && len(d) == 2 {
		f, _ = formOf("HSS-ROUND")
	}
	return c.byDimensions(f, d, standard)
}

// byDimensions returns the catalogue row of the dimensions, else computes it.
func (c *catalogue) byDimensions(f form, d []float64, standard string) (Section, error) {
	f, d, text, err := f.arrange(d)
	if err != nil {
		return Section{}, err
	}
	if f.family == "PIPE" {
		if s, ok := c.pipeRow(d[0], d[1]); ok {
			return s, nil
		}
		if d[0], err = c.pipeDiameter(d[0]); err != nil {
			return Section{}, err
		}
		text = by(d)
	}
	if s, ok := c.american(f.family, d); ok {
		return s, nil
	}
	designation := f.family + " " + text
	held, inCatalogue := c.index[key(designation)]
	if inCatalogue && standard == f.standards[0] {
		return held, nil
	}
	if !slices.Contains(f.standards, standard) {
		return Section{}, fmt.Errorf("%s is not made to %s; leave the standard out", f.family, standard)
	}
	s, err := f.build(d, standard)
	if err != nil {
		return Section{}, err
	}
	s.Family, s.Designation = f.family, designation
	s.Source = standard + "; properties and mass from dimensions at 7850 kg/m³"
	if standard != f.standards[0] {
		s.Designation += " " + standard
	}
	return s, nil
}

// Pipe given in inches differs from the SI rows of ASME B36.10M by their
// rounding: up to 0.4 mm in diameter (24 in = 609.6, listed 610), 0.005 mm in wall.
const (
	diameterSlack = 0.5e-3
	wallSlack     = 0.006e-3
)

func (c *catalogue) pipeRow(d, t float64) (Section, bool) {
	for _, s := range c.series["PIPE"] {
		if math.Abs(s.H-d) <= diameterSlack && math.Abs(s.Tw-t) <= wallSlack {
			return s, true
		}
	}
	return Section{}, false
}

// pipeDiameter returns the listed outside diameter that d means. Pipe of NPS 12
// measures 323.8 mm: a diameter off the list is likely a nominal size.
func (c *catalogue) pipeDiameter(d float64) (float64, error) {
	for _, s := range c.series["PIPE"] {
		if math.Abs(s.H-d) <= diameterSlack {
			return s.H, nil
		}
	}
	return 0, fmt.Errorf("no nominal pipe size has an outside diameter of %s mm; write NPS and schedule, or CHS for a tube of any diameter", mm(d))
}
