package ratebook

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// The decimal places that a likely value may have: products of prices must stay
// within 15 digits.
const (
	figurePlaces = 4
	datedPlaces  = 6 // of exchange rates and indices
)

// at joins a JSON pointer and a key (RFC 6901).
func at(field, key string) string {
	return field + "/" + strings.NewReplacer("~", "~0", "/", "~1").Replace(key)
}

func number(x float64) string { return strconv.FormatFloat(x, 'g', 12, 64) }

// short is the beginning of a text, for a message.
func short(text string) string {
	if r := []rune(text); len(r) > 60 {
		return string(r[:60]) + "…"
	}
	return text
}

const (
	maxName    = 80
	maxDecimal = 1_000_000_000_000
)

// text wants a name or a source that is not blank.
func (c *checker) text(field, found string) {
	c.want(strings.TrimSpace(found) != "", field, found, "a text that is not blank")
}

// name wants a short text without spaces at its ends.
func (c *checker) name(field, found string) {
	ok := found != "" && found == strings.TrimSpace(found) && len([]rune(found)) <= maxName
	c.want(ok, field, found, "a name of 1 to 80 characters without spaces at its ends")
}

// date reports whether the text is a date, and notes a fault where not.
func (c *checker) date(field, text string) bool {
	_, err := time.Parse(time.DateOnly, text)
	c.want(err == nil, field, text, "a date as yyyy-mm-dd")
	return err == nil
}

// decimal wants a number from zero up with at most so many places.
func (c *checker) decimal(field string, d money.Decimal, places int) {
	ok := d.Sign() >= 0 && d.Cmp(money.FromInt(maxDecimal)) <= 0 && d.Round(places).Equal(d)
	c.want(ok, field, d.String(), fmt.Sprintf("from zero to 1e12, with at most %d decimals", places))
}

func (c *checker) figures(field string, m map[string]Figure, low, high float64, wanted []string) {
	for _, k := range wanted {
		_, ok := m[k]
		c.want(ok, at(field, k), "", "a figure for each of "+strings.Join(wanted, ", "))
	}
	for _, k := range slices.Sorted(maps.Keys(m)) {
		if wanted != nil {
			c.oneOf(at(field, k), k, wanted)
		}
		c.figure(at(field, k), m[k], low, high)
	}
}

// figure checks a figure whose values lie from low to high.
func (c *checker) figure(field string, f Figure, low, high float64) {
	c.figureTo(field, f, low, high, figurePlaces)
}

func (c *checker) figureTo(field string, f Figure, low, high float64, places int) {
	c.spread(field+"/spread", f.Spread, low, high, places)
	c.want(f.Source != "", field+"/source", f.Source, "where the figure comes from")
	c.oneOf(field+"/confidence", f.Confidence, []string{"low", "medium", "high"})
	if f.ValidUntil != "" {
		c.date(field+"/valid_until", f.ValidUntil)
	}
	c.group(field+"/group", f.Group)
}

func (c *checker) group(field, g string) {
	if g == "" || !c.grouped {
		return
	}
	_, ok := c.groups[g]
	c.want(ok, field, g, "a group that /correlation names")
}

func (c *checker) spread(field string, s spread.Spread, low, high float64, places int) {
	if err := s.Validate(); err != nil {
		c.faults = append(c.faults, Fault{Field: field, Found: fmt.Sprintf("%.40s %s / %s / %s", s.Distribution, stated(s.Low), stated(s.Likely), stated(s.High)), Accepted: err.Error()})
		return
	}
	base, unit := s.Base(), math.Pow10(places)
	found := number(base)
	if s.Likely == 0 && s.Distribution != spread.Fixed {
		found = "no likely value, and " + found + " as the middle of low and high"
	}
	c.want(math.Abs(base*unit-math.Round(base*unit)) <= 1e-7*math.Max(1, math.Abs(base*unit)), field, found,
		fmt.Sprintf("a likely value of at most %d decimals (for a lognormal: state its median as likely)", places))
	lo, hi := limits(s)
	c.want(lo >= low && hi <= high, field, number(lo)+" to "+number(hi), "values from "+number(low)+" to "+number(high))
}

// limits returns what the values of a valid spread lie between, P10 and P90 of a
// lognormal one, which has no upper limit.
func limits(s spread.Spread) (float64, float64) {
	switch s.Distribution {
	case spread.Fixed:
		return s.Likely, s.Likely
	case spread.Lognormal:
		return s.Low, s.High
	}
	return s.Quantile(0), s.Quantile(1)
}

// stated writes a number of a spread; one that is not there is NaN.
func stated(x float64) string {
	if math.IsNaN(x) {
		return "nothing"
	}
	return fmt.Sprintf("%g", x)
}
