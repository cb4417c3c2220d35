package engine

import (
	"fmt"
	"slices"
	"sort"
	"strconv"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/takeoff"
)

// totalFigures are the figures that every priced line ends in.
var totalFigures = []string{"base", "range", "contingency"}

// fillRegister writes every entry with the figures that it feeds. What a line
// depends on is read from the line itself, so that the register cannot say
// otherwise than the arithmetic.
func (r *run) fillRegister() error {
	steps := []func() error{r.addSchedule, r.addBook, r.addMultipliers, r.addRisks, r.addCorrelation, r.addSettings, r.addStructural, r.feedMasses, r.feedLines}
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
		e.Value = inputValue(e.ID, r.job.Settings)
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	return nil
}

// entryOf is the register entry of a figure of the book.
func (r *run) entryOf(id string, kind assumption.Kind, statement, unit string, f ratebook.Figure) assumption.Entry {
	s := f.Spread
	return assumption.Entry{
		ID: id, Kind: kind, Statement: statement, Unit: unit, Spread: &s, Group: f.Group,
		Scope: string(ratebook.BookScope), Subject: r.job.Book.Name,
		Source: f.Source, Owner: f.Author, Confidence: assumption.Confidence(f.Confidence),
	}
}

// addBook adds the figures of the book that this job uses, and no others.
func (r *run) addBook() error {
	used := r.usedEntries()
	var all []assumption.Entry
	for _, e := range takeoff.Entries(r.job.Book, r.job.Settings) {
		all = append(all, r.takeoffEntry(e))
	}
	all = append(all, r.rateEntries()...)
	all = append(all, r.conversions...)
	all = append(all, r.growthEntries()...)
	all = append(all, r.carbonEntries()...)
	for _, e := range all {
		if !used[e.ID] {
			continue
		}
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	return nil
}

// takeoffEntry is the register entry of an allowance, a norm, a limit or a default
// of the take-off.
func (r *run) takeoffEntry(e takeoff.Entry) assumption.Entry {
	if e.Figure.Source == "" {
		return assumption.Entry{ID: e.ID, Kind: e.Kind, Statement: e.Statement, Value: e.Value, Unit: e.Unit,
			Source: "common practice, no source", Owner: "Spanwright", Confidence: assumption.Medium}
	}
	out := r.entryOf(e.ID, e.Kind, e.Statement, e.Unit, e.Figure)
	if out.Value = e.Value; e.Value != "" && e.Figure.Spread.Distribution == "" {
		out.Spread = nil
	}
	return out
}

// usedEntries are the ids that quantities, lines and models name.
func (r *run) usedEntries() map[string]bool {
	used := takeoff.Used(r.items)
	for _, lines := range [][]pricing.Line{r.priced.Lines, r.carbon.Lines} {
		for _, l := range lines {
			for _, id := range l.Assumptions {
				used[id] = true
			}
		}
	}
	for _, m := range []pricing.Model{r.priced.Model, r.carbon.Model} {
		for _, in := range m.Inputs {
			used[in.ID] = true
			if in.Stream != "" {
				used[in.Stream] = true
			}
		}
	}
	return used
}

// rateEntries are the register entries of the rates in force.
func (r *run) rateEntries() []assumption.Entry {
	var out []assumption.Entry
	for _, rate := range r.job.Book.PricedRates() {
		currency := rate.Currency
		if currency == "" {
			currency = r.job.Book.Currency
		}
		what, unit := fmt.Sprintf("Rate “%s” of %s", rate.ID, rate.Category), currency+"/"+perUnit(rate.Driver)
		switch {
		case rate.OfReference:
			what, unit = fmt.Sprintf("Cost of %s as a multiple of the reference price, per delivered tonne", rate.Category), ""
		case r.job.Book.Kind == ratebook.KindRatio:
			what = "Price of steel, per purchased tonne"
		case rate.Driver == ratebook.CostOf:
			what, unit = fmt.Sprintf("Rate “%s” of %s as a fraction of %s", rate.ID, rate.Category, strings.Join(rate.Of, ", ")), "fraction"
		case rate.Driver == ratebook.Lump:
			unit = currency
		}
		e := r.entryOf(pricing.RateID(rate), assumption.Rate, what, unit, rate.Figure)
		if rate.Scope != "" {
			e.Scope, e.Subject = string(rate.Scope), rate.Subject
		}
		if rate.ValidUntil != "" {
			e.Value = "valid until " + rate.ValidUntil
		}
		out = append(out, e)
	}
	return out
}

// perUnit is the unit of a driver in a price.
func perUnit(d ratebook.Driver) string {
	if one, ok := map[string]string{"days": "day", "weeks": "week", "loads": "load", "pcs": "piece"}[d.Unit()]; ok {
		return one
	}
	return d.Unit()
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

// addRisks adds the discrete risks.
func (r *run) addRisks() error {
	for _, k := range r.job.Risks {
		s := k.Impact
		source, owner := k.Source, k.Owner
		if source == "" {
			source = "schedule"
		}
		if owner == "" {
			owner = "estimator"
		}
		if err := r.register.Add(assumption.Entry{
			ID: riskID(k.Name), Kind: assumption.Risk, Statement: "Discrete risk “" + k.Name + "”: cost when it occurs", Unit: r.currency.Code, Spread: &s,
			Value: fmt.Sprintf("probability %g", k.Probability), Source: source, Owner: owner, Confidence: assumption.Low, Feeds: []string{"range", "contingency"},
		}); err != nil {
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
	feeds := map[string][]string{}
	for _, in := range r.priced.Model.Inputs {
		feeds[in.Group] = []string{"range", "contingency"}
	}
	for _, in := range r.carbon.Model.Inputs {
		if !slices.Contains(feeds[in.Group], "carbon/range") {
			feeds[in.Group] = append(feeds[in.Group], "carbon/range")
		}
	}
	for _, g := range sortedKeys(r.job.Book.Correlation) {
		if len(feeds[g]) == 0 {
			continue
		}
		if err := r.register.Add(assumption.Entry{
			ID: correlationID(g), Kind: assumption.Setting, Value: strconv.FormatFloat(r.job.Book.Correlation[g], 'g', -1, 64),
			Statement: "Rank correlation of costs within the group " + g + "; between two groups it is about the geometric mean of theirs",
			Source:    "rate book " + r.job.Book.Name, Owner: "starting book", Confidence: assumption.Low, Feeds: feeds[g],
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
		{ID: r.systemic.ID, Kind: assumption.Systemic, Statement: fmt.Sprintf("Systemic factor on the whole base for estimate class %d: what the class leaves undefined; in the range, never in the base", s.EstimateClass),
			Spread: &sys, Scope: string(ratebook.BookScope), Subject: r.job.Book.Name,
			Source: "rate book " + r.job.Book.Name, Owner: "starting book", Confidence: assumption.Low, Feeds: []string{"range", "contingency"}},
	}
	if r.job.Book.Kind == ratebook.KindRatio {
		entries = append(entries, assumption.Entry{ID: refPriceID, Kind: assumption.Setting, Statement: "Frozen reference price per delivered tonne that the ratios multiply, so that labour does not move with the price of steel",
			Value: r.job.Book.ReferencePrice.String(), Unit: r.job.Book.Currency + "/t", Source: "rate book " + r.job.Book.Name, Owner: "starting book", Confidence: assumption.High})
	}
	for _, e := range entries {
		if err := r.register.Add(e); err != nil {
			return err
		}
	}
	return nil
}

// feedMasses says which quantities the allowances and norms feed.
func (r *run) feedMasses() error {
	masses := map[ratebook.Driver]string{ratebook.DeliveredTonnes: "delivered", ratebook.PurchasedTonnes: "purchased"}
	for _, it := range r.items {
		for _, q := range it.Quantities {
			if q.Driver == ratebook.NetTonnes {
				continue // the figure is the drawn mass, which no allowance moves
			}
			figures := []string{"item/" + it.ID + "/" + string(q.Driver)}
			if m, ok := masses[q.Driver]; ok {
				figures = []string{"item/" + it.ID + "/" + m, "group/" + assumption.Segment(it.Group) + "/" + m}
			}
			ids := slices.Clone(q.Fixed)
			for _, a := range q.Factors {
				ids = append(ids, a.ID)
			}
			for _, id := range ids {
				if err := r.register.Feed(id, figures...); err != nil {
					return err
				}
			}
		}
	}
	return nil
}

// feedLines says which lines an entry feeds, and through them which sums. What
// moves in the range alone, such as a price under a minimum charge, is read from
// the model.
func (r *run) feedLines() error {
	for _, l := range r.priced.Lines {
		figures := append([]string{l.ID, "group/" + assumption.Segment(l.Group) + "/amount", "category/" + l.Category}, totalFigures...)
		ids := l.Assumptions
		if slices.ContainsFunc(l.Parts, func(p pricing.Part) bool { return p.Name == "reference price" }) {
			ids = append(ids[:len(ids):len(ids)], refPriceID)
		}
		for _, id := range r.withStreams(ids) {
			if err := r.register.Feed(id, figures...); err != nil {
				return err
			}
		}
	}
	for _, in := range r.priced.Model.Inputs {
		if err := r.register.Feed(in.ID, "range", "contingency"); err != nil {
			return err
		}
	}
	for _, l := range r.carbon.Lines {
		for _, id := range l.Assumptions {
			if err := r.register.Feed(id, l.ID, "carbon/module/"+l.Category, "carbon/total", "carbon/range"); err != nil {
				return err
			}
		}
	}
	for _, in := range r.carbon.Model.Inputs {
		if err := r.register.Feed(in.ID, "carbon/range"); err != nil {
			return err
		}
	}
	return nil
}

// withStreams adds to ids the beliefs that some of them are drawn from.
func (r *run) withStreams(ids []string) []string {
	out := slices.Clone(ids)
	for _, in := range r.priced.Model.Inputs {
		if in.Stream != "" && slices.Contains(ids, in.ID) {
			out = append(out, in.Stream)
		}
	}
	return out
}

func sortedKeys[V any](m map[string]V) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}
