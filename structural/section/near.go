package section

import (
	"cmp"
	"math"
	"regexp"
	"slices"
	"strconv"

	"spanwright/structural/spelling"
)

// nearest is how many near misses are named at the most.
const nearest = 3

var digits = regexp.MustCompile(`\d+(?:\.\d+)?`)

type candidate struct {
	designation string
	distance    float64
}

// closest returns the designations of the nearest candidates, each once.
func closest(list []candidate) []string {
	slices.SortFunc(list, func(a, b candidate) int {
		return cmp.Or(cmp.Compare(a.distance, b.distance), cmp.Compare(a.designation, b.designation))
	})
	var names []string
	for _, c := range list {
		if !slices.Contains(names, c.designation) {
			names = append(names, c.designation)
		}
		if len(names) == nearest {
			break
		}
	}
	return names
}

// nearAll returns the sizes whose spelling is the fewest letters off, two at the
// most.
func (c *catalogue) nearAll(k string) []string {
	least := 2
	var list []candidate
	for known, s := range c.index {
		if len(k) > len(known)+least {
			continue
		}
		d := spelling.Distance(k, known)
		if d > least || d >= len(k) {
			continue
		}
		if d < least {
			least, list = d, nil
		}
		list = append(list, candidate{s.Designation, float64(d)})
	}
	return closest(list)
}

// nearIn returns the sizes of a family whose numbers are nearest by ratio to
// those in rest, within a factor of 2 over all; without numbers to compare, none.
// What is given by dimensions is compared by these, not by its nominal size.
func (c *catalogue) nearIn(family, rest string) []string {
	want := numbers(rest)
	f, byDimensions := formOf(family)
	d, err := dimensions(rest, f.defaultUnit())
	measured := byDimensions && err == nil && len(d) > 1
	if measured {
		want = d
	}
	if len(want) == 0 {
		return nil
	}
	var list []candidate
	for _, s := range c.series[family] {
		have := numbers(key(s.Designation))
		if measured {
			have = measures(s, len(want))
		} else if len(have) > len(want) {
			have = have[:len(want)] // "W 18": the depth alone
		}
		if off := ratio(have, want); off <= math.Ln2 {
			list = append(list, candidate{s.Designation, off})
		}
	}
	return closest(list)
}

// measures returns n dimensions of a section in the order of its form.
func measures(s Section, n int) []float64 {
	switch {
	case s.Shape == RoundTube || n == 2:
		return []float64{s.H, s.Tw}
	case s.Shape == RectangularTube || s.Shape == Angle:
		return []float64{s.H, s.B, s.Tw}
	}
	return nil
}

// ratio is the sum of |ln(a/b)| over pairs; infinite if the counts differ or a
// number is not above zero.
func ratio(a, b []float64) float64 {
	if len(a) != len(b) {
		return math.Inf(1)
	}
	var sum float64
	for i := range a {
		if !(a[i] > 0 && b[i] > 0) {
			return math.Inf(1)
		}
		sum += math.Abs(math.Log(a[i] / b[i]))
	}
	return sum
}

// numbers returns the numbers above zero in a key.
func numbers(k string) []float64 {
	var list []float64
	for _, text := range digits.FindAllString(k, -1) {
		if x, err := strconv.ParseFloat(text, 64); err == nil && x > 0 {
			list = append(list, x)
		}
	}
	return list
}
