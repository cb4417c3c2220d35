package calibration

import (
	"fmt"
	"math/big"
	"slices"
	"strings"

	"spanwright/estimate/money"
)

// Comparable is one job brought to the basis: outturn and estimate in the same
// currency, at the same prices, over the same categories.
type Comparable struct {
	Job       string `json:"job"`
	Completed string `json:"completed"`
	Kind      string `json:"kind"`
	Class     string `json:"class,omitempty"`

	Amounts  []Amount      `json:"amounts" doc:"categories that both sides have, in the order of Categories"`
	Estimate money.Decimal `json:"estimate" doc:"their sum in the past estimate"`
	Outturn  money.Decimal `json:"outturn" doc:"their sum in the outturn"`
	// ScopeShare is the part of the past base estimate that these categories are.
	ScopeShare float64 `json:"scope_share"`
	// Percentiles of the past total, brought to the basis and to these categories
	// in the ratio in which the base was.
	Percentiles []Percentile `json:"percentiles,omitempty"`

	TakeOffMass   float64 `json:"take_off_mass"` // kg
	DrawingMass   float64 `json:"drawing_mass,omitempty"`
	WeighedMass   float64 `json:"weighed_mass"`
	DeliveredMass float64 `json:"delivered_mass,omitempty"`
	ShopHours     float64 `json:"shop_hours,omitempty"`
	SiteHours     float64 `json:"site_hours,omitempty"`

	Notes []string `json:"notes,omitempty" doc:"what was left out of the comparison"`
}

// Amount is one category of a comparable job, rounded to the currency's minor unit.
type Amount struct {
	Category string        `json:"category"`
	Estimate money.Decimal `json:"estimate"`
	Outturn  money.Decimal `json:"outturn"`
}

// Percentile is a cost not exceeded with a probability.
type Percentile struct {
	Percent int           `json:"percent"`
	Amount  money.Decimal `json:"amount"`
}

// Left is a job that is left out, with every reason.
type Left struct {
	Job     string   `json:"job"`
	Reasons []string `json:"reasons"`
}

// Normalise brings outturns to the basis. An amount goes to the base date by the
// index of its category, in its own currency, and then by the exchange rate of the
// base date. Both results are sorted by job; every outturn is in exactly one of them.
// The error is that of an invalid basis.
func Normalise(outturns []Outturn, b Basis) ([]Comparable, []Left, error) {
	if err := b.Validate(); err != nil {
		return nil, nil, fmt.Errorf("the basis of the comparison: %w", err)
	}
	currency, err := money.FindCurrency(b.Currency)
	if err != nil {
		return nil, nil, fmt.Errorf("the basis of the comparison: %w", err)
	}
	var list []Comparable
	left := []Left{}
	sorted := slices.Clone(outturns)
	sortOutturns(sorted)
	times := map[string]int{}
	for _, o := range sorted {
		times[o.Job]++
	}
	for _, o := range sorted {
		n := normaliser{basis: b, currency: currency}
		if times[o.Job] > 1 {
			n.reason("the job stands in the list twice")
		}
		c := n.compare(o)
		if len(n.reasons) > 0 {
			left = append(left, Left{o.Job, n.reasons})
			continue
		}
		list = append(list, c)
	}
	return list, left, nil
}

// normaliser brings one job to the basis and gathers what stands against it.
type normaliser struct {
	basis    Basis
	currency money.Currency
	reasons  []string
}

// reason notes one thing that stands against the job, once.
func (n *normaliser) reason(text string) {
	if !slices.Contains(n.reasons, text) {
		n.reasons = append(n.reasons, text)
	}
}

func (n *normaliser) compare(o Outturn) Comparable {
	c := Comparable{Job: o.Job, Completed: o.Completed, Kind: o.Kind, Class: o.Estimate.Class,
		TakeOffMass: o.TakeOffMass, DrawingMass: o.DrawingMass, WeighedMass: o.WeighedMass, DeliveredMass: o.Estimate.DeliveredMass,
		ShopHours: o.ShopHours, SiteHours: o.SiteHours}
	for _, m := range []float64{o.TakeOffMass, o.WeighedMass} {
		if !(m > 0 && m <= greatestMass) {
			n.reason("the job has no tonnage")
		}
	}
	if o.Kind == "" {
		n.reason("the job has no kind of structure")
	}
	rates := [2]*big.Rat{n.rate(o.Estimate.Currency), n.rate(o.Currency)}
	if len(n.reasons) > 0 {
		return c
	}
	whole, common := n.scope(o, &c, rates)
	n.judge(c)
	if len(n.reasons) == 0 {
		c.ScopeShare, _ = new(big.Rat).Quo(common, whole).Float64()
		c.Percentiles = n.percentiles(o.Estimate, whole, c.Estimate)
	}
	return c
}

// scope fills in the categories that both sides have, and notes the others. It
// returns the whole past base and the part of it that is compared, in its own money;
// rates are those of the estimate's and of the outturn's currency.
func (n *normaliser) scope(o Outturn, c *Comparable, rates [2]*big.Rat) (whole, common *big.Rat) {
	whole, common = new(big.Rat), new(big.Rat)
	var alone, zero []string
	for _, category := range categories {
		estimate, inEstimate := o.Estimate.Base[category]
		cost, inOutturn := o.Costs[category]
		if inEstimate {
			whole.Add(whole, estimate.Rat())
		}
		switch {
		case inEstimate && inOutturn:
			common.Add(common, estimate.Rat())
			a := Amount{category, n.bring(estimate, category, o.Estimate.Currency, o.Estimate.BaseDate, rates[0]),
				n.bring(cost, category, o.Currency, o.priced(), rates[1])}
			c.Amounts = append(c.Amounts, a)
			c.Estimate, c.Outturn = c.Estimate.Add(a.Estimate), c.Outturn.Add(a.Outturn)
			if a.Estimate.Sign() < 0 || a.Outturn.Sign() < 0 {
				n.reason("the cost of " + category + " is negative")
			} else if a.Estimate.IsZero() || a.Outturn.IsZero() {
				zero = append(zero, category)
			}
		case inEstimate:
			alone = append(alone, category+" (in the estimate alone)")
		case inOutturn:
			alone = append(alone, category+" (in the outturn alone)")
		}
	}
	if len(alone) > 0 {
		c.Notes = append(c.Notes, "not compared: "+strings.Join(alone, ", "))
	}
	if len(zero) > 0 {
		c.Notes = append(c.Notes, "in the total alone, being 0 on one side: "+strings.Join(zero, ", "))
	}
	return whole, common
}

// judge gives the reasons that the amounts themselves give.
func (n *normaliser) judge(c Comparable) {
	switch {
	case len(n.reasons) > 0:
	case len(c.Amounts) == 0:
		n.reason("no category is both in the estimate and in the outturn")
	case c.Estimate.Sign() <= 0:
		n.reason("the estimate of the common categories is not above 0")
	case c.Outturn.Sign() <= 0:
		n.reason("the outturn of the common categories is not above 0")
	}
}

func (n *normaliser) rate(currency string) *big.Rat {
	r, err := n.basis.rate(currency)
	if err != nil {
		n.reason(err.Error())
	}
	return r
}

// bring returns an amount at the basis; a reason is noted where it cannot be.
func (n *normaliser) bring(amount money.Decimal, category, currency, day string, rate *big.Rat) money.Decimal {
	factor, err := n.basis.escalation(category, currency, day)
	if err != nil {
		n.reason(err.Error())
		return money.Zero
	}
	return n.round(factor.Mul(factor, rate).Mul(factor, amount.Rat()))
}

// percentiles scales those of the past total as the base was scaled: from the whole
// past base, in its own money, to the common categories at the basis. Within a job
// that is exact for index and currency where all categories rise alike; for a part of
// the scope it supposes that the part spreads as the whole does.
func (n *normaliser) percentiles(p Past, whole *big.Rat, common money.Decimal) []Percentile {
	var list []Percentile
	for _, x := range p.percentiles() {
		scaled := new(big.Rat).Mul(x.amount.Rat(), common.Rat())
		list = append(list, Percentile{x.percent, n.round(scaled.Quo(scaled, whole))})
	}
	return list
}

// round makes an exact amount a decimal of the currency, half away from zero.
func (n *normaliser) round(r *big.Rat) money.Decimal {
	d, err := money.Parse(r.FloatString(n.currency.MinorDigits))
	if err != nil {
		n.reason("an amount is too large to compare: " + err.Error())
	}
	return d
}
