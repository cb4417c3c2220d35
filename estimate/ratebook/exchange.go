package ratebook

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

// Exchanged is a rate of exchange into the currency of a job.
type Exchanged struct {
	ID    string // exchange/{FROM}/{TO}
	From  string
	To    string
	Value money.Decimal // units of To for one of From, likely, to 6 places
	// Spread has Value as its likely value. A rate taken the other way round has
	// the reciprocal ends. A rate over the book's currency has the logarithmic
	// deviations of both added as the root of their squares.
	Spread     spread.Spread
	Group      string
	Source     string
	Author     string
	Confidence string
	ValidUntil string // the earlier one of two; empty for none
	Date       string // the earlier one of two
	Note       string // rates and dates used
}

// ExchangeTo returns the rates of exchange into the job's currency, by the currency
// that they are from: of every price of the book, and of the book itself. Where the
// job is in the book's currency and all prices too, the map is empty. An unknown
// currency and those without a rate in the book are an error that names them.
// ExchangeTo assumes a book that Validate accepts.
func (b Book) ExchangeTo(job string) (map[string]Exchanged, error) {
	if _, err := money.FindCurrency(job); err != nil {
		return nil, fmt.Errorf("currency of the job: %w", err)
	}
	used := []string{b.Currency}
	for _, r := range b.PricedRates() {
		used = append(used, r.currency(b))
	}
	slices.Sort(used)
	used = slices.DeleteFunc(slices.Compact(used), func(c string) bool { return c == job })
	if len(used) == 0 {
		return map[string]Exchanged{}, nil
	}
	var missing []string
	for _, c := range append([]string{job}, used...) {
		if _, ok := b.rateOf(c); !ok {
			missing = append(missing, c)
		}
	}
	if len(missing) > 0 {
		return nil, fmt.Errorf("the rate book %q has no exchange rate for %s; accepted: a dated rate to %s in /exchange", b.Name, strings.Join(missing, ", "), b.Currency)
	}
	out := map[string]Exchanged{}
	for _, c := range used {
		x, err := b.exchanged(c, job)
		if err != nil {
			return nil, fmt.Errorf("exchange from %s to %s: %w", c, job, err)
		}
		out[c] = x
	}
	return out, nil
}

// rateOf returns the rate of a currency to that of the book, for which it is 1.
func (b Book) rateOf(currency string) (Exchange, bool) {
	if currency == b.Currency {
		return Exchange{Currency: currency, Figure: Figure{Spread: spread.NewFixed(1)}}, true
	}
	i := slices.IndexFunc(b.Exchange, func(x Exchange) bool { return x.Currency == currency })
	if i < 0 {
		return Exchange{}, false
	}
	return b.Exchange[i], true
}

func (b Book) exchanged(from, to string) (Exchanged, error) {
	f, _ := b.rateOf(from)
	t, _ := b.rateOf(to)
	x := Exchanged{ID: "exchange/" + from + "/" + to, From: from, To: to}
	for _, r := range []Exchange{f, t} {
		if r.Currency != b.Currency {
			x.stated(r, b.Currency)
		}
	}
	var err error
	x.Value, x.Spread, err = crossed(f.Spread, t.Spread).spread(datedPlaces)
	return x, err
}

// stated takes over where a rate comes from; of two rates the earlier dates, the
// lower confidence and both sources hold.
func (x *Exchanged) stated(r Exchange, book string) {
	note := fmt.Sprintf("1 %s = %s %s on %s", r.Currency, number(r.Spread.Base()), book, r.Date)
	if x.Date == "" {
		x.Group, x.Source, x.Author, x.Confidence = r.Group, r.Source, r.Author, r.Confidence
		x.ValidUntil, x.Date, x.Note = r.ValidUntil, r.Date, note
		return
	}
	x.Note += "; " + note
	x.Date = min(x.Date, r.Date)
	if x.ValidUntil == "" || r.ValidUntil != "" && r.ValidUntil < x.ValidUntil {
		x.ValidUntil = r.ValidUntil
	}
	grades := []string{"low", "medium", "high"}
	if slices.Index(grades, r.Confidence) < slices.Index(grades, x.Confidence) {
		x.Confidence = r.Confidence
	}
	if r.Source != x.Source {
		x.Source += "; " + r.Source
	}
	if r.Author != x.Author {
		x.Author += "; " + r.Author
	}
}

// crossed is f over t.
func crossed(f, t spread.Spread) carried {
	base := f.Base() / t.Base()
	c := carried{base: base, distribution: f.Distribution, bounds: f.Bounds}
	switch {
	case f.Distribution == spread.Fixed:
		c.distribution, c.bounds = t.Distribution, t.Bounds
	case t.Distribution != spread.Fixed && (t.Distribution != f.Distribution || t.Bounds != f.Bounds):
		c.distribution, c.bounds = spread.PERT, spread.BoundsLimits
	}
	below := math.Hypot(logOver(f.Base(), low(f)), logOver(high(t), t.Base()))
	above := math.Hypot(logOver(high(f), f.Base()), logOver(t.Base(), low(t)))
	c.low, c.high = base*math.Exp(-below), base*math.Exp(above)
	return c
}

func logOver(a, b float64) float64 { return math.Log(a / b) }

func low(s spread.Spread) float64 {
	if s.Distribution == spread.Fixed {
		return s.Likely
	}
	return s.Low
}

func high(s spread.Spread) float64 {
	if s.Distribution == spread.Fixed {
		return s.Likely
	}
	return s.High
}
