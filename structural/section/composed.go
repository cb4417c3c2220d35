package section

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

var (
	chordSet = regexp.MustCompile(`(?i)^\s*(\d)\s*[x×*]?\s*(\pL.*?)\s*(?:@|\bat\b)\s*(\S.*)$`)
	halfOf   = regexp.MustCompile(`^\s*(?:1/2|½)\s*(\pL.*)$`)
	cutTee   = regexp.MustCompile(`^WT(\d+(?:\.\d+)?)X(\d+(?:\.\d+)?)$`)
)

// composed finds what is made from another section: chord sets and tees cut from
// I sections; ok says that the spelling asks for one.
func (c *catalogue) composed(designation, k string) (Section, bool, error) {
	if m := chordSet.FindStringSubmatch(designation); m != nil {
		s, err := chordsOf(m[1], m[2], m[3])
		if err != nil {
			err = &UnknownError{Found: designation, Why: err.Error()}
		}
		return s, true, err
	}
	if m := cutTee.FindStringSubmatch(k); m != nil {
		return c.wideFlangeTee(designation, m[1], m[2])
	}
	if m := halfOf.FindStringSubmatch(designation); m != nil {
		parent, held := c.index[key(m[1])]
		if held && parent.Shape == ISection {
			s, err := cut(parent, "1/2 "+parent.Designation)
			return s, true, err
		}
	}
	return Section{}, false, nil
}

// chordsOf builds "n x chord @ depth[xwidth]".
func chordsOf(count, chord, spacing string) (Section, error) {
	one, err := Find(chord)
	if err != nil {
		return Section{}, fmt.Errorf("chord of the set: %w", err)
	}
	n, err := strconv.Atoi(count)
	if err != nil {
		return Section{}, fmt.Errorf("%q is not a number of chords; want 2 or 4", count)
	}
	d, err := dimensions(key(spacing), "MM")
	if err != nil || len(d) > 2 {
		return Section{}, fmt.Errorf("spacing %q; want one in the depth, or depth x width, in mm, as in 4x L 100x100x10 @ 800x600", spacing)
	}
	var width float64
	if len(d) == 2 {
		width = d[1]
	}
	s, err := Chords(one, n, d[0], width)
	if err != nil {
		return Section{}, err
	}
	s.Designation = fmt.Sprintf("%dx %s @ %s", n, one.Designation, by(d))
	s.Source = one.Source + "; chords by parallel axes, without lacing or battens"
	return s, nil
}

// wideFlangeTee returns the WT of half the depth and weight of a W.
func (c *catalogue) wideFlangeTee(designation, depth, weight string) (Section, bool, error) {
	h, errDepth := strconv.ParseFloat(depth, 64)
	w, errWeight := strconv.ParseFloat(weight, 64)
	double := func(x float64) string { return strconv.FormatFloat(2*x, 'f', -1, 64) }
	parent, held := c.index["W"+double(h)+"X"+double(w)]
	if errDepth != nil || errWeight != nil || !held {
		return Section{}, true, &UnknownError{Found: designation,
			Why:  fmt.Sprintf("WT is half of a W; there is no W%sx%s", double(h), double(w)),
			Near: c.nearIn("W", double(h)+"X"+double(w))}
	}
	s, err := cut(parent, "WT"+depth+"x"+weight)
	return s, true, err
}

// cut returns the tee that a cut along the middle of the web leaves. Its family
// is the parent's: it comes in the same grades.
func cut(i Section, designation string) (Section, error) {
	s, err := tee(i.H/2, i.B, i.Tw, i.Tf, i.R)
	if err != nil {
		return Section{}, err
	}
	s.Designation, s.Family, s.Making, s.Mass = designation, i.Family, i.Making, i.Mass/2
	s.Source = "half of " + i.Designation + ": " + i.Source
	return s, nil
}

// americanSlack covers walls written as three decimals of a fraction: 0.188 for
// 3/16, 0.313 for 5/16.
const americanSlack = 0.02e-3

// american returns the HSS row of the dimensions.
func (c *catalogue) american(family string, d []float64) (Section, bool) {
	if !strings.HasPrefix(family, "HSS") {
		return Section{}, false
	}
	for _, s := range c.series[family] {
		off := 0.0
		for i, have := range measures(s, len(d)) {
			off = max(off, math.Abs(have-d[i]))
		}
		if off <= americanSlack {
			return s, true
		}
	}
	return Section{}, false
}
