package ratebook

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"strconv"
	"strings"
	"time"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// Fault is one thing wrong with a book or a multiplier.
type Fault struct {
	Field    string `json:"field"` // JSON pointer within the book or multiplier
	Found    string `json:"found"`
	Accepted string `json:"accepted"`
}

// String writes the fault on one line.
func (f Fault) String() string {
	return fmt.Sprintf("%s: found %s; accepted: %s", f.Field, f.Found, f.Accepted)
}

// InvalidError lists every fault of a book or multiplier.
type InvalidError struct {
	Faults []Fault
}

// Error lists every fault.
func (e *InvalidError) Error() string {
	s := make([]string, len(e.Faults))
	for i, f := range e.Faults {
		s[i] = f.String()
	}
	return "rate book: " + strings.Join(s, "; ")
}

type checker struct {
	faults []Fault
}

func (c *checker) want(ok bool, field, found, accepted string) {
	if !ok {
		c.faults = append(c.faults, Fault{Field: field, Found: strconv.Quote(found), Accepted: accepted})
	}
}

func (c *checker) err() error {
	if len(c.faults) == 0 {
		return nil
	}
	sort.SliceStable(c.faults, func(i, j int) bool { return c.faults[i].Field < c.faults[j].Field })
	return &InvalidError{Faults: c.faults}
}

// Validate reports everything wrong with the book as an *InvalidError.
func (b Book) Validate() error {
	c := &checker{}
	c.want(b.Kind == "ratio", "/kind", b.Kind, "ratio")
	c.want(strings.TrimSpace(b.Name) != "", "/name", b.Name, "a name")
	_, err := money.FindCurrency(b.Currency)
	c.want(err == nil, "/currency", b.Currency, "an ISO 4217 code such as EUR, USD, JPY or KWD")
	c.date("/base_date", b.BaseDate)
	c.want(b.ReferencePrice.Sign() > 0, "/reference_price", b.ReferencePrice.String(), "a price above zero per tonne")
	c.figure("/material_price", b.MaterialPrice, 0, maxPrice)
	c.figures("/ratios", b.Ratios, 0, 1000, ratioCategories())
	c.figures("/connections", b.Connections, 0, maxAllowance, nil)
	c.want(len(b.Connections) > 0, "/connections", "", "at least one connection class")
	c.figure("/bolts", b.Bolts, 0, maxAllowance)
	c.figures("/waste", b.Waste, 0, maxAllowance, []string{WasteSections, WasteTube, WastePlate})
	c.figures("/growth", b.Growth, 0, maxAllowance, classes())
	for _, class := range classes() {
		v, ok := b.Systemic[class]
		c.want(ok && v >= 0 && v <= 2, "/systemic/"+class, strconv.FormatFloat(v, 'g', -1, 64), "a standard deviation of the logarithm from 0 to 2")
	}
	c.figure("/sizing_bias", b.SizingBias, 0.1, 10)
	c.want(b.SizingBias.Spread.Base() == 1, "/sizing_bias/spread/likely", fmt.Sprint(b.SizingBias.Spread.Base()), "1: the bias acts in the range, never in the base")
	for i, m := range b.Multipliers {
		c.multiplier(fmt.Sprintf("/multipliers/%d", i), m)
	}
	c.correlation(b)
	for i, band := range b.Bands {
		p := fmt.Sprintf("/bands/%d", i)
		c.want(band.Measure == "kg/m" || band.Measure == "price/t", p+"/measure", band.Measure, "kg/m or price/t")
		c.want(band.Low >= 0 && band.Low < band.High && band.High < 1e12, p, fmt.Sprintf("%g to %g", band.Low, band.High), "low below high, both finite")
	}
	return c.err()
}

// The limits beyond which a figure is taken for a slip of the hand.
const (
	maxPrice     = 1e9 // per tonne
	maxAllowance = 5   // 500 % of the mass below it
	maxFactor    = 100 // of a multiplier
)

func classes() []string { return []string{"1", "2", "3", "4", "5"} }

// ratioCategories are the categories that a ratio book must price: all but
// material, which has a price of its own, and those it leaves out.
func ratioCategories() []string {
	return []string{Fabrication, Coating, Inspection, Shipping, Erection, Engineering, Indirects}
}

func (c *checker) date(field, text string) {
	_, err := time.Parse(time.DateOnly, text)
	c.want(err == nil, field, text, "a date as yyyy-mm-dd")
}

func (c *checker) figures(field string, m map[string]Figure, low, high float64, wanted []string) {
	for _, k := range wanted {
		_, ok := m[k]
		c.want(ok, field+"/"+k, "", "a figure for each of "+strings.Join(wanted, ", "))
	}
	for k, f := range m {
		if wanted != nil {
			c.want(slices.Contains(wanted, k), field+"/"+k, k, "one of "+strings.Join(wanted, ", "))
		}
		c.figure(field+"/"+k, f, low, high)
	}
}

func (c *checker) figure(field string, f Figure, low, high float64) {
	c.spread(field+"/spread", f.Spread, low, high)
	c.want(f.Source != "", field+"/source", f.Source, "where the figure comes from")
	c.want(slices.Contains([]string{"low", "medium", "high"}, f.Confidence), field+"/confidence", f.Confidence, "low, medium or high")
	if f.ValidUntil != "" {
		c.date(field+"/valid_until", f.ValidUntil)
	}
}

func (c *checker) spread(field string, s spread.Spread, low, high float64) {
	if err := s.Validate(); err != nil {
		c.faults = append(c.faults, Fault{Field: field, Found: fmt.Sprintf("%s %g / %g / %g", s.Distribution, s.Low, s.Likely, s.High), Accepted: err.Error()})
		return
	}
	lo, hi := s.Base(), s.Base()
	if s.Distribution != spread.Fixed {
		lo, hi = s.Low, s.High
	}
	base := s.Base()
	c.want(math.Abs(base*1e4-math.Round(base*1e4)) <= 1e-7*math.Max(1, math.Abs(base*1e4)), field, fmt.Sprint(base),
		"a likely value of at most four decimals (for a lognormal: state its median as likely)")
	c.want(lo >= low && hi <= high, field, fmt.Sprintf("%g to %g", lo, hi), fmt.Sprintf("values from %g to %g", low, high))
}

// short is the beginning of a text, for a message.
func short(text string) string {
	if r := []rune(text); len(r) > 60 {
		return string(r[:60]) + "…"
	}
	return text
}

func (c *checker) correlation(b Book) {
	for g, rho := range b.Correlation {
		c.want(rho >= 0 && rho < 1, "/correlation/"+g, strconv.FormatFloat(rho, 'g', -1, 64), "a rank correlation from 0 to below 1")
	}
	known := func(field, g string) {
		if g == "" {
			return
		}
		_, ok := b.Correlation[g]
		c.want(ok, field+"/group", g, "a group that /correlation names")
	}
	known("/material_price", b.MaterialPrice.Group)
	for k, f := range b.Ratios {
		known("/ratios/"+k, f.Group)
	}
	for i, m := range b.Multipliers {
		known(fmt.Sprintf("/multipliers/%d", i), m.Group)
	}
}

// Validate reports everything wrong with one multiplier as an *InvalidError.
func (m Multiplier) Validate() error {
	c := &checker{}
	c.multiplier("", m)
	return c.err()
}

func (c *checker) multiplier(field string, m Multiplier) {
	c.want(strings.TrimSpace(m.Name) != "" && len(m.Name) <= 80, field+"/name", m.Name, "a name of 1 to 80 characters")
	c.want(m.Scope.valid(), field+"/scope", string(m.Scope), "member, group, family, scheme, project or rate book")
	if m.Scope.named() {
		c.want(m.Subject != "", field+"/subject", m.Subject, "the "+string(m.Scope)+" that it is for")
	} else {
		c.want(m.Subject == "", field+"/subject", m.Subject, "nothing: the scope "+string(m.Scope)+" needs no subject")
	}
	c.want(len(m.Categories) > 0, field+"/categories", "", "at least one category")
	for i, cat := range m.Categories {
		c.want(slices.Contains(Categories(), cat), fmt.Sprintf("%s/categories/%d", field, i), cat, strings.Join(Categories(), ", "))
	}
	c.spread(field+"/spread", m.Spread, 0, maxFactor)
	c.want(m.Reason != "" && len([]rune(m.Reason)) <= 2000, field+"/reason", short(m.Reason), "why it is so, in 1 to 2000 characters")
	c.want(len([]rune(m.Subject)) <= 200, field+"/subject", short(m.Subject), "at most 200 characters")
}
