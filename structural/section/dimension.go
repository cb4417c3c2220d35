package section

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

// Least and greatest dimension that is taken for a section part, in m; beyond
// them a unit has slipped.
const (
	leastPart    = 0.1e-3
	greatestPart = 20.0
)

var (
	dimension  = regexp.MustCompile(`^(?:(\d+)\+)?(\d+(?:\.\d+)?|\.\d+)(?:/(\d+))?(MM|CM|M|INCH|IN)?$`)
	partScales = map[string]float64{"MM": 1e-3, "CM": 1e-2, "M": 1, "IN": 0.0254, "INCH": 0.0254}
)

// dimensions reads "508X25.4", "20INX1IN" or "20X1IN" in m. Without a unit the
// given one is meant; a unit after the last dimension alone holds for all.
func dimensions(text, unit string) ([]float64, error) {
	parts := strings.Split(text, "X")
	values := make([]float64, len(parts))
	units := make([]string, len(parts))
	named := 0
	for i, p := range parts {
		m := dimension.FindStringSubmatch(p)
		if m == nil {
			return nil, fmt.Errorf("%q is not a dimension", p)
		}
		x, err := number(m[1], m[2], m[3])
		if err != nil {
			return nil, fmt.Errorf("%q is not a dimension", p)
		}
		values[i], units[i] = x, m[4]
		if m[4] != "" {
			named++
		}
	}
	last := units[len(units)-1]
	if named > 0 && named < len(parts) && !(named == 1 && last != "") {
		return nil, fmt.Errorf("only some dimensions have a unit; give every one its unit, or only the last")
	}
	for i, u := range units {
		if u == "" {
			u = last
		}
		if u == "" {
			u = unit
		}
		// Rounded to 0.1 µm so that the designation tells the exact size.
		values[i] = math.Round(values[i]*partScales[u]*1e7) / 1e7
	}
	return values, nil
}

// number is whole + top/bottom; whole and bottom may be empty.
func number(whole, top, bottom string) (float64, error) {
	x, err := strconv.ParseFloat(top, 64)
	if err != nil {
		return 0, err
	}
	if bottom != "" {
		d, err := strconv.ParseFloat(bottom, 64)
		if err != nil || !(d > 0) {
			return 0, fmt.Errorf("fraction over %s", bottom)
		}
		x /= d
	}
	if whole != "" {
		w, err := strconv.ParseFloat(whole, 64)
		if err != nil {
			return 0, err
		}
		x += w
	}
	return x, nil
}

// part is a named dimension in m.
type part struct {
	name string
	size float64
}

// sizes refuses dimensions outside leastPart to greatestPart, NaN included.
func sizes(parts ...part) error {
	for _, p := range parts {
		if !(leastPart <= p.size && p.size <= greatestPart) {
			return fmt.Errorf("%s of %s mm; want %s to %s mm", p.name, mm(p.size), mm(leastPart), mm(greatestPart))
		}
	}
	return nil
}

// mm prints a length in m as mm, without trailing zeros.
func mm(x float64) string {
	return strconv.FormatFloat(math.Round(x*1e7)/1e4, 'f', -1, 64)
}

// by joins dimensions as in a designation.
func by(d []float64) string {
	parts := make([]string, len(d))
	for i, x := range d {
		parts[i] = mm(x)
	}
	return strings.Join(parts, "x")
}
