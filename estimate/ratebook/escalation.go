package ratebook

import (
	"fmt"
	"math"
	"slices"
	"time"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// escalationPlaces are the decimals of an escalation's likely value.
const escalationPlaces = 4

// yearDays is the mean length of a year of the Julian calendar, in days.
const yearDays = 365.25

// Escalated is the factor on a category's prices between two dates.
type Escalated struct {
	OK    bool   // whether an index covers the category; if not, the rest is zero
	ID    string // escalation/{index}/{from}/{to}, the same for all categories of the index
	Index string
	Value money.Decimal // likely, to 4 places
	// Spread is that of the growth, carried over by the factor, which is monotone in
	// it: low, likely and high at the growth's low, likely and high (turned round
	// where prices are taken back in time), distribution and bounds as those of the
	// growth. It is fixed where both dates have values. Its likely value is Value.
	Spread     spread.Spread
	Group      string // correlation group of the growth
	Source     string
	Author     string // of the growth; empty where no growth acts
	Confidence string
	Note       string // values and dates used
}

// Escalation returns the factor on prices of a category from one date to another
// (yyyy-mm-dd, either order): level(to) / level(from) of the index that the
// category follows. Between two dated values the level is interpolated linearly by
// days; after the last value it is
//
//	level = last · (1 + growth)^(days after the last value / 365.25)
//
// A date before the first value, or after the last of an index without growth, is
// an error that names index and date; the factor from a date to itself is 1 whatever
// the index has. Escalation assumes a book that Validate accepts.
func (b Book) Escalation(category, from, to string) (Escalated, error) {
	i := slices.IndexFunc(b.Indices, func(x Index) bool { return slices.Contains(x.Categories, category) })
	if i < 0 {
		return Escalated{}, nil
	}
	x := b.Indices[i]
	if _, err := time.Parse(time.DateOnly, from); err == nil && from == to {
		return x.unmoved(from), nil
	}
	lf, err := x.level(from)
	if err != nil {
		return Escalated{}, err
	}
	lt, err := x.level(to)
	if err != nil {
		return Escalated{}, err
	}
	e := Escalated{
		OK: true, Index: x.Name, ID: x.id(from, to), Source: x.Source, Confidence: "medium",
		Note: fmt.Sprintf("index “%s”: %s, over %s", x.Name, lt.note, lf.note),
	}
	if lt.years != lf.years {
		e.Group, e.Author, e.Confidence = x.Growth.Group, x.Growth.Author, x.Growth.Confidence
		e.Source = x.Source + "; growth: " + x.Growth.Source
	}
	e.Value, e.Spread, err = x.factor(lf, lt)
	if err != nil {
		return Escalated{}, fmt.Errorf("index %q from %s to %s: %w", x.Name, from, to, err)
	}
	return e, nil
}

func (x Index) id(from, to string) string {
	return "escalation/" + assumption.Segment(x.Name) + "/" + from + "/" + to
}

// unmoved is the factor between a date and itself, for which no value is needed.
func (x Index) unmoved(date string) Escalated {
	return Escalated{
		OK: true, Index: x.Name, ID: x.id(date, date), Value: money.FromInt(1), Spread: spread.NewFixed(1),
		Source: x.Source, Confidence: "high", Note: "both dates are " + date,
	}
}

// level is an index at a date: value · (1 + growth)^years.
type level struct {
	value, years float64
	note         string
}

func (x Index) level(date string) (level, error) {
	t, err := time.Parse(time.DateOnly, date)
	if err != nil {
		return level{}, fmt.Errorf("index %q: found the date %q; accepted: a date as yyyy-mm-dd", x.Name, date)
	}
	if len(x.Values) == 0 || date < x.Values[0].Date {
		return level{}, fmt.Errorf("index %q has no value for %s; accepted: a date from %s on", x.Name, date, x.first())
	}
	i := slices.IndexFunc(x.Values, func(v IndexValue) bool { return v.Date >= date })
	if i < 0 {
		return x.grown(t)
	}
	v := x.Values[i]
	if v.Date == date {
		return level{value: v.Value.Float64(), note: v.Value.String() + " on " + date}, nil
	}
	u := x.Values[i-1]
	span, err := u.days(v.Date)
	if err != nil {
		return level{}, fmt.Errorf("index %q: %w", x.Name, err)
	}
	into, err := u.days(date)
	if err != nil {
		return level{}, fmt.Errorf("index %q: %w", x.Name, err)
	}
	a, z := u.Value.Float64(), v.Value.Float64()
	value := a + float64((z-a)*(into/span))
	return level{value: value, note: fmt.Sprintf("%.6g on %s (between %s on %s and %s on %s)", value, date, u.Value, u.Date, v.Value, v.Date)}, nil
}

// first is the first date, for a message.
func (x Index) first() string {
	if len(x.Values) == 0 {
		return "its first value, which it lacks,"
	}
	return x.Values[0].Date
}

// days counts the days from the value to a date.
func (v IndexValue) days(date string) (float64, error) {
	from, err := time.Parse(time.DateOnly, v.Date)
	if err != nil {
		return 0, err
	}
	to, err := time.Parse(time.DateOnly, date)
	if err != nil {
		return 0, err
	}
	return float64((to.Unix() - from.Unix()) / 86_400), nil // a Duration ends after 292 years
}

func (x Index) grown(t time.Time) (level, error) {
	last, date := x.Values[len(x.Values)-1], t.Format(time.DateOnly)
	if x.Growth == nil {
		return level{}, fmt.Errorf("index %q has no value for %s; accepted: a date up to %s, or an index with growth", x.Name, date, last.Date)
	}
	days, err := last.days(date)
	if err != nil {
		return level{}, fmt.Errorf("index %q: %w", x.Name, err)
	}
	g := x.Growth.Spread.Base()
	return level{
		value: last.Value.Float64(), years: days / yearDays,
		note: fmt.Sprintf("%s on %s grown by %s %% a year to %s", last.Value, last.Date, number(100*g), date),
	}, nil
}

// factor returns lt over lf, likely and as a spread.
func (x Index) factor(lf, lt level) (money.Decimal, spread.Spread, error) {
	ratio, years := lt.value/lf.value, lt.years-lf.years
	f := func(growth float64) float64 { return float64(ratio * math.Pow(1+growth, years)) }
	if years == 0 {
		return fixedFactor(ratio, escalationPlaces)
	}
	g := x.Growth.Spread
	ends := carried{base: f(g.Base()), low: f(g.Low), high: f(g.High), distribution: g.Distribution, bounds: g.Bounds}
	return ends.spread(escalationPlaces)
}

// carried is a spread carried over by a monotone function.
type carried struct {
	base, low, high float64
	distribution    spread.Distribution
	bounds          string
}

// spread returns the value to so many places, and a spread with it as likely value.
// The ends are rounded to 4 places more, so that they print alike on every machine.
func (c carried) spread(places int) (money.Decimal, spread.Spread, error) {
	d, s, err := fixedFactor(c.base, places)
	if err != nil || c.distribution == spread.Fixed {
		return d, s, err
	}
	low, high := min(c.low, c.high), max(c.low, c.high)
	for _, end := range []*float64{&low, &high} {
		r, err := money.FromFloat(*end, places+4)
		if err != nil {
			return money.Zero, spread.Spread{}, err
		}
		*end = r.Float64()
	}
	if low == high {
		return d, s, nil
	}
	s = spread.Spread{Distribution: c.distribution, Low: min(low, s.Likely), Likely: s.Likely, High: max(high, s.Likely), Bounds: c.bounds}
	return d, s, s.Validate()
}

func fixedFactor(x float64, places int) (money.Decimal, spread.Spread, error) {
	if !(x > 0 && x <= 1e9) {
		return money.Zero, spread.Spread{}, fmt.Errorf("found the factor %v; accepted: above 0 to 1e9", x)
	}
	d, err := money.FromFloat(x, places)
	if err != nil {
		return money.Zero, spread.Spread{}, err
	}
	if d.Sign() <= 0 {
		return money.Zero, spread.Spread{}, fmt.Errorf("found the factor %v, which is 0 to %d decimals", x, places)
	}
	return d, spread.NewFixed(d.Float64()), nil
}
