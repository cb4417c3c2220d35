package engine

import (
	"fmt"
	"slices"
	"time"

	"spanwright/estimate/assumption"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// rates gathers what the job prices with: its rates and multipliers, and the
// exchange and escalation that bring prices to the money of the estimate.
func (r *run) rates() (pricing.Rates, error) {
	b, s := r.job.Book, r.job.Settings
	out := pricing.Rates{
		Rates: b.PricedRates(), Reference: b.ReferencePrice, Book: b.Currency, Multipliers: r.job.Multipliers,
		Currency: r.currency, Systemic: r.systemic, BaseDate: s.BaseDate, Facts: r.facts,
		Exchange: map[string]pricing.Conversion{}, Escalation: map[string][]pricing.Conversion{},
		Whole: ratebook.Place{Coating: s.Coating, Execution: s.ExecutionClass},
	}
	for _, c := range ratebook.Categories() {
		if c != ratebook.Owner || s.OwnerCosts {
			out.Categories = append(out.Categories, c)
		}
	}
	exchanges, err := b.ExchangeTo(s.Currency)
	if err != nil {
		return out, &RatesError{err}
	}
	r.exchanged = 1
	if x, ok := exchanges[b.Currency]; ok {
		r.exchanged = x.Value.Float64()
	}
	for _, from := range sortedKeys(exchanges) {
		x := exchanges[from]
		if x.ValidUntil != "" && x.ValidUntil < s.BaseDate {
			r.stale = append(r.stale, fmt.Sprintf("The exchange rate of %s into %s was valid until %s, before the base date %s.", from, s.Currency, x.ValidUntil, s.BaseDate))
		}
		out.Exchange[from] = pricing.Conversion{Name: pricing.ExchangeRate, ID: x.ID, Value: x.Value, Spread: x.Spread, Group: x.Group}
		r.conversions = append(r.conversions, assumption.Entry{
			ID: x.ID, Kind: assumption.Rate, Statement: fmt.Sprintf("One %s in %s: %s", from, s.Currency, x.Note), Unit: s.Currency + "/" + from,
			Spread: &x.Spread, Group: x.Group, Source: x.Source, Owner: x.Author, Confidence: assumption.Confidence(x.Confidence),
		})
	}
	for _, c := range out.Categories {
		if out.Escalation[c], err = r.escalation(c); err != nil {
			return out, &RatesError{err}
		}
	}
	for _, k := range r.job.Risks {
		out.Risks = append(out.Risks, pricing.DiscreteRisk{ID: riskID(k.Name), Probability: k.Probability, Impact: k.Impact})
	}
	return out, nil
}

// escalation brings the prices of a category from the base date of the book to
// that of the job and, in outturn money, to when the category is spent.
func (r *run) escalation(category string) ([]pricing.Conversion, error) {
	b, s := r.job.Book, r.job.Settings
	var out []pricing.Conversion
	step := func(name, from, to string) error {
		e, err := b.Escalation(category, from, to)
		if err != nil {
			return err
		}
		if !e.OK {
			r.unescalated = append(r.unescalated, category)
			return nil
		}
		c := pricing.Conversion{Name: name, ID: e.ID, Value: e.Value, Spread: e.Spread, Group: e.Group}
		if e.Spread.Distribution != spread.Fixed {
			c.Stream = growthID(e.Index) // one belief about growth is one draw, whatever the dates
		}
		out = append(out, c)
		owner, confidence := e.Author, e.Confidence
		if owner == "" {
			owner, confidence = "rate book "+b.Name, string(assumption.High)
		}
		r.conversions = append(r.conversions, assumption.Entry{
			ID: e.ID, Kind: assumption.Rate, Statement: fmt.Sprintf("Index “%s”, prices of %s in those of %s: %s", e.Index, from, to, e.Note), Spread: &e.Spread, Group: e.Group,
			Source: e.Source, Owner: owner, Confidence: assumption.Confidence(confidence),
		})
		return nil
	}
	if b.BaseDate != s.BaseDate {
		if err := step(pricing.EscalationToBase, b.BaseDate, s.BaseDate); err != nil {
			return nil, err
		}
	}
	if s.Money != schedule.MoneyOutturn {
		return out, nil
	}
	spent, err := r.spentOn(category)
	if err != nil {
		return nil, err
	}
	if spent == s.BaseDate {
		return out, nil
	}
	return out, step(pricing.EscalationToSpend, s.BaseDate, spent)
}

// growthID is the register entry of the growth of an index, which every escalation
// by it draws from.
func growthID(index string) string { return "index growth/" + assumption.Segment(index) }

// growthEntries are the register entries of the growths that escalations rest on.
func (r *run) growthEntries() []assumption.Entry {
	var out []assumption.Entry
	for _, x := range r.job.Book.Indices {
		if x.Growth != nil {
			e := r.entryOf(growthID(x.Name), assumption.Rate, fmt.Sprintf("Growth of the index “%s” after its last value; every escalation by it is one draw", x.Name), "fraction per year", *x.Growth)
			out = append(out, e)
		}
	}
	return out
}

// spentOn is the date on which a category is spent: the job's spend date and the
// months of the book after it, never before the base date.
func (r *run) spentOn(category string) (string, error) {
	at, err := time.Parse(time.DateOnly, r.job.Settings.SpendDate)
	if err != nil {
		return "", fmt.Errorf("spend date: found %q; accepted: yyyy-mm-dd", r.job.Settings.SpendDate)
	}
	return max(at.AddDate(0, r.job.Book.SpendMonths[category], 0).Format(time.DateOnly), r.job.Settings.BaseDate), nil
}

func riskID(name string) string { return "risk/" + assumption.Segment(name) }

// askedFacts are what the triggers of lumps ask.
func (r *run) askedFacts() pricing.Facts {
	f := pricing.Facts{SiteConditions: r.job.Settings.SiteConditions}
	for _, s := range r.sized.members {
		f.Kinds = append(f.Kinds, s.member.Kind)
		class := s.member.ExecutionClass
		if class == "" {
			class = r.job.Settings.ExecutionClass
		}
		f.Executions = append(f.Executions, class)
	}
	for _, list := range []*[]string{&f.Kinds, &f.Executions} {
		slices.Sort(*list)
		*list = slices.DeleteFunc(slices.Compact(*list), func(s string) bool { return s == "" })
	}
	for _, it := range r.items {
		f.Delivered = f.Delivered.Add(it.Delivered)
	}
	for _, b := range r.breaches {
		if b.Envelope == takeoff.OnRoad {
			f.Permits++
		}
	}
	return f
}
