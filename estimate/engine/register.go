package engine

import (
	"fmt"
	"sort"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// totalFigures are the figures that every priced line ends in.
var totalFigures = []string{"base", "range", "contingency"}

// fillRegister writes every entry with the figures that it feeds. What a line
// depends on is read from the line itself, so that the register cannot say
// otherwise than the arithmetic.
func (r *run) fillRegister() error {
	steps := []func() error{r.addSchedule, r.addBook, r.addMultipliers, r.addCorrelation, r.addSettings, r.addStructural, r.feedMasses, r.feedLines}
	for _, step := range steps {
		if err := step(); err != nil {
			return fmt.Errorf("register: %w", err)
		}
	}
	return nil
}

func (r *run) addSchedule() error {
	for _, e := range r.job.Defaults {
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	for _, e := range schedule.InputFeeds() {
		if e.ID == "input/factor" && r.job.Settings.DesignBasis != "allowable" {
			continue // the other bases have no such input
		}
		if !occurs(e.ID, r.job) {
			continue
		}
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	return nil
}

func (r *run) figure(id string, kind assumption.Kind, statement, unit string, f ratebook.Figure) error {
	s := f.Spread
	return r.register.Add(assumption.Entry{
		ID: id, Kind: kind, Statement: statement, Unit: unit, Spread: &s, Group: f.Group,
		Scope: string(ratebook.BookScope), Subject: r.job.Book.Name,
		Source: f.Source, Owner: f.Author, Confidence: assumption.Confidence(f.Confidence),
	})
}

// addBook adds the figures of the book that this job uses, and no others.
func (r *run) addBook() error {
	b := r.job.Book
	per := r.currency.Code + "/t"
	if err := r.figure(pricing.RateID(ratebook.Material), assumption.Rate, "Price of steel, per purchased tonne", per, b.MaterialPrice); err != nil {
		return err
	}
	for _, c := range sortedKeys(b.Ratios) {
		what := fmt.Sprintf("Cost of %s as a multiple of the reference price, per delivered tonne", c)
		if err := r.figure(pricing.RateID(c), assumption.Rate, what, "", b.Ratios[c]); err != nil {
			return err
		}
	}
	used := r.usedAllowances()
	class := strconv.Itoa(r.job.Settings.EstimateClass)
	add := func(id, statement string, f ratebook.Figure) error {
		if !used[id] {
			return nil
		}
		return r.figure(id, assumption.Allowance, statement, "fraction", f)
	}
	for _, c := range sortedKeys(b.Connections) {
		if err := add(connectionID(c), "Connections, on net mass, for "+c, b.Connections[c]); err != nil {
			return err
		}
	}
	for _, w := range sortedKeys(b.Waste) {
		if err := add(wasteID(w), "Waste in buying "+w+", on delivered mass less bolts", b.Waste[w]); err != nil {
			return err
		}
	}
	if err := add(boltsID, "Bolts, on net mass with connections and growth", b.Bolts); err != nil {
		return err
	}
	if err := add(growthID(r.job.Settings.EstimateClass), "Growth of the design until it is built, estimate class "+class, b.Growth[class]); err != nil {
		return err
	}
	return add(biasID, "Mass as it will be designed over mass as sized here, for the conservatism of the checks", b.SizingBias)
}

func (r *run) usedAllowances() map[string]bool {
	used := map[string]bool{}
	for _, it := range r.items {
		for _, a := range it.ToDelivered {
			used[a.ID] = true
		}
		for _, a := range it.ToPurchased {
			used[a.ID] = true
		}
	}
	return used
}

// addMultipliers adds those that act on at least one line.
func (r *run) addMultipliers() error {
	used := map[string]bool{}
	for _, l := range r.priced.Lines {
		for _, a := range l.Multipliers {
			used[a.Assumption] = true
		}
	}
	for _, m := range r.job.Multipliers {
		id := pricing.MultiplierID(m)
		if !used[id] {
			continue
		}
		used[id] = false
		s := r.winner(m).Spread
		m = r.winner(m)
		e := assumption.Entry{
			ID: id, Kind: assumption.Multiplier, Statement: "Multiplier “" + m.Name + "”: " + m.Reason, Spread: &s, Group: m.Group,
			Scope: string(m.Scope), Subject: m.Subject, Source: "set by hand", Owner: m.Author, Confidence: assumption.Medium,
		}
		if m.Version == 0 {
			e.Source = "rate book " + r.job.Book.Name
		} else {
			e.Value = fmt.Sprintf("version %d", m.Version)
		}
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	return nil
}

// winner returns the last multiplier with the name, scope and subject of m, the
// one that Resolve takes.
func (r *run) winner(m ratebook.Multiplier) ratebook.Multiplier {
	for _, o := range r.job.Multipliers {
		if o.Name == m.Name && o.Scope == m.Scope && o.Subject == m.Subject {
			m = o
		}
	}
	return m
}

// addCorrelation adds the rank correlation of each group that has a spread in the
// model.
func (r *run) addCorrelation() error {
	used := map[string]bool{}
	for _, in := range r.priced.Model.Inputs {
		used[in.Group] = true
	}
	for _, g := range sortedKeys(r.job.Book.Correlation) {
		if !used[g] {
			continue
		}
		if err := r.register.Add(assumption.Entry{
			ID: correlationID(g), Kind: assumption.Setting, Value: strconv.FormatFloat(r.job.Book.Correlation[g], 'g', -1, 64),
			Statement: "Rank correlation of costs within the group " + g + "; between two groups it is about the geometric mean of theirs",
			Source:    "rate book " + r.job.Book.Name, Owner: "starting book", Confidence: assumption.Low, Feeds: []string{"range", "contingency"},
		}); err != nil {
			return err
		}
	}
	return nil
}

func (r *run) addSettings() error {
	s := r.job.Settings
	sys := r.systemic.Spread
	entries := []assumption.Entry{
		{ID: confID, Kind: assumption.Setting, Statement: "The percentile that base and contingency together reach",
			Value: strconv.FormatFloat(s.Confidence, 'g', -1, 64), Source: "job", Owner: "estimator", Confidence: assumption.High,
			Feeds: []string{"contingency"}},
		{ID: refPriceID, Kind: assumption.Setting, Statement: "Frozen reference price per delivered tonne that the ratios multiply, so that labour does not move with the price of steel",
			Value: r.job.Book.ReferencePrice.String(), Unit: r.currency.Code + "/t", Source: "rate book " + r.job.Book.Name, Owner: "starting book", Confidence: assumption.High},
		{ID: r.systemic.ID, Kind: assumption.Systemic, Statement: fmt.Sprintf("Systemic factor on the whole base for estimate class %d: what the class leaves undefined; in the range, never in the base", s.EstimateClass),
			Spread: &sys, Scope: string(ratebook.BookScope), Subject: r.job.Book.Name,
			Source: "rate book " + r.job.Book.Name, Owner: "starting book", Confidence: assumption.Low, Feeds: []string{"range", "contingency"}},
	}
	for _, e := range entries {
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	return nil
}

// feedMasses says which masses the allowances feed.
func (r *run) feedMasses() error {
	for _, it := range r.items {
		group := "group/" + assumption.Segment(it.Group)
		for _, a := range it.ToDelivered {
			if err := r.register.Feed(a.ID, "item/"+it.ID+"/delivered", group+"/delivered"); err != nil {
				return err
			}
		}
		for _, a := range it.ToPurchased {
			if err := r.register.Feed(a.ID, "item/"+it.ID+"/purchased", group+"/purchased"); err != nil {
				return err
			}
		}
	}
	return nil
}

func (r *run) feedLines() error {
	for _, l := range r.priced.Lines {
		figures := append([]string{l.ID, "group/" + assumption.Segment(l.Group) + "/amount", "category/" + l.Category}, totalFigures...)
		ids := l.Assumptions
		if l.Category != ratebook.Material {
			ids = append(ids[:len(ids):len(ids)], refPriceID)
		}
		for _, id := range ids {
			if err := r.register.Feed(id, figures...); err != nil {
				return err
			}
		}
	}
	return nil
}

func sortedKeys[V any](m map[string]V) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}
