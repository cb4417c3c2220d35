package calibration

import (
	"cmp"
	"fmt"
	"math/big"
	"slices"
	"time"

	"spanwright/estimate/money"
)

// ValidDays is how long an index value or an exchange rate holds from its date on:
// the longest quarter. A date that no value covers is a reason to leave a job out.
const ValidDays = 92

// Basis is what outturns are brought to before they are compared: one currency, the
// prices of one day.
type Basis struct {
	Currency string         `json:"currency" doc:"ISO 4217 code"`
	BaseDate string         `json:"base_date" doc:"yyyy-mm-dd"`
	Exchange []ExchangeRate `json:"exchange,omitempty"`
	Index    []IndexValue   `json:"index,omitempty"`
}

// ExchangeRate is what one unit of a foreign currency is worth in that of the
// basis, from its date on for ValidDays.
type ExchangeRate struct {
	Currency string        `json:"currency" doc:"ISO 4217 code of the foreign currency"`
	Date     string        `json:"date"`
	Value    money.Decimal `json:"value" doc:"units of the basis currency for one unit"`
	Source   string        `json:"source"`
}

// IndexValue is a point of a price index, which holds from its date on for
// ValidDays. Of the series that suit an amount, that of its category goes before one
// for all categories, then that of its currency before one for all currencies.
type IndexValue struct {
	Category string        `json:"category,omitempty" doc:"empty for every category without a series of its own"`
	Currency string        `json:"currency,omitempty" doc:"whose prices it follows; empty for every currency without a series of its own"`
	Date     string        `json:"date"`
	Value    money.Decimal `json:"value"`
	Source   string        `json:"source"`
}

// Validate returns nil or Faults with JSON pointers into the basis.
func (b Basis) Validate() error {
	var list Faults
	add := func(pointer string, wrong *complaint) {
		if wrong != nil {
			list = append(list, Fault{pointer, wrong.found, wrong.problem, wrong.remedy})
		}
	}
	seen := map[string]string{}
	once := func(pointer, key string) {
		if first, twice := seen[key]; twice {
			add(pointer, &complaint{key, "stands at " + first + " already", "leave one of them out"})
			return
		}
		seen[key] = pointer
	}
	add("/currency", wrongCurrency(b.Currency))
	add("/base_date", wrongDate(b.BaseDate))
	for i, r := range b.Exchange {
		p := fmt.Sprintf("/exchange/%d", i)
		add(p+"/currency", wrongCurrency(r.Currency))
		add(p+"/date", wrongDate(r.Date))
		add(p+"/value", wrongValue(r.Value))
		add(p+"/source", wrongSource(r.Source))
		once(p, fmt.Sprintf("rate of %s on %s", r.Currency, r.Date))
	}
	for i, v := range b.Index {
		p := fmt.Sprintf("/index/%d", i)
		if v.Category != "" && !slices.Contains(categories, v.Category) {
			add(p+"/category", &complaint{shorten(v.Category), "is no category", didYouMean(nearMisses(v.Category, categories), fmt.Sprint("accepted are ", categories))})
		}
		if v.Currency != "" {
			add(p+"/currency", wrongCurrency(v.Currency))
		}
		add(p+"/date", wrongDate(v.Date))
		add(p+"/value", wrongValue(v.Value))
		add(p+"/source", wrongSource(v.Source))
		once(p, fmt.Sprintf("index of %q, %q on %s", v.Category, v.Currency, v.Date))
	}
	if len(list) > 0 {
		return list
	}
	return nil
}

func wrongCurrency(code string) *complaint {
	_, wrong := readWord(code, definition{kind: currencyKind}, options{})
	return wrong
}

func wrongDate(day string) *complaint {
	if got, wrong := readDate(day); wrong != nil || got != day {
		return &complaint{shorten(day), "is no date", "enter " + words[dateKind]}
	}
	return nil
}

// Bounds of index values and rates: wide enough for any series in use, narrow
// enough that products of amounts stay readable.
var leastValue, greatestValue = big.NewRat(1, 1_000_000), big.NewRat(1_000_000_000, 1)

func wrongValue(v money.Decimal) *complaint {
	if r := v.Rat(); r.Cmp(leastValue) < 0 || r.Cmp(greatestValue) > 0 {
		return &complaint{shorten(v.String()), "is out of range", "a value from 0.000001 to 1000000000"}
	}
	return nil
}

func wrongSource(text string) *complaint {
	if text == "" {
		return &complaint{"", "has no source", "say where the value comes from"}
	}
	return nil
}

// rate is the exact worth of one unit of a currency on the base date.
func (b Basis) rate(currency string) (*big.Rat, error) {
	if currency == b.Currency {
		return big.NewRat(1, 1), nil
	}
	var last *ExchangeRate
	for _, r := range b.Exchange {
		if r.Currency == currency && r.Date <= b.BaseDate && (last == nil || r.Date > last.Date) {
			last = &r
		}
	}
	if last == nil || !covers(last.Date, b.BaseDate) {
		return nil, fmt.Errorf("no exchange rate from %s to %s holds on %s%s", currency, b.Currency, b.BaseDate, lastWords(last == nil, func() string { return last.Date }))
	}
	return last.Value.Rat(), nil
}

// escalation is the exact factor from prices of a day to those of the base date.
func (b Basis) escalation(category, currency, from string) (*big.Rat, error) {
	if from == b.BaseDate {
		return big.NewRat(1, 1), nil
	}
	c, k, found := b.series(category, currency)
	if !found {
		return nil, fmt.Errorf("no price index for %s in %s", category, currency)
	}
	early, err := b.index(c, k, category, from)
	if err != nil {
		return nil, err
	}
	late, err := b.index(c, k, category, b.BaseDate)
	if err != nil {
		return nil, err
	}
	return new(big.Rat).Quo(late, early), nil
}

// series chooses the most specific index series for an amount.
func (b Basis) series(category, currency string) (c, k string, found bool) {
	for _, s := range [][2]string{{category, currency}, {category, ""}, {"", currency}, {"", ""}} {
		if slices.ContainsFunc(b.Index, func(v IndexValue) bool { return v.Category == s[0] && v.Currency == s[1] }) {
			return s[0], s[1], true
		}
	}
	return "", "", false
}

func (b Basis) index(c, k, category, day string) (*big.Rat, error) {
	var last *IndexValue
	for _, v := range b.Index {
		if v.Category == c && v.Currency == k && v.Date <= day && (last == nil || v.Date > last.Date) {
			last = &v
		}
	}
	if last == nil || !covers(last.Date, day) {
		return nil, fmt.Errorf("the price index for %s has no value that holds on %s%s", category, day, lastWords(last == nil, func() string { return last.Date }))
	}
	return last.Value.Rat(), nil
}

func lastWords(none bool, date func() string) string {
	if none {
		return ": none is dated before"
	}
	return fmt.Sprintf(": the last before is of %s, and one holds for %d days", date(), ValidDays)
}

// covers tells whether a value of one day still holds on another, not earlier one.
func covers(from, day string) bool {
	a, err1 := time.Parse(time.DateOnly, from)
	b, err2 := time.Parse(time.DateOnly, day)
	return cmp.Or(err1, err2) == nil && b.Sub(a) <= ValidDays*24*time.Hour
}
