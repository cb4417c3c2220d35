// Package pricing turns quantities into decimal lines, and compiles the same
// structure into a cost model for the range.
//
//	take-off items × rates resolved at each item's place → Line = quantity ×
//	    unit price, exact decimals, each line rounded to the minor unit
//	lines of one rate → price break, what a minimum order or charge lacks
//	lines of a category → percentages upon them, in the order of dependence
//	lines → categories → base, sums that are exact
//	the same lines → Model, a sum of products over assumptions
//
// Carbon takes the same way: emission factors for rates, modules for categories.
package pricing

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
)

// MultiplierID is the id of the register entry of a multiplier.
func MultiplierID(m ratebook.Multiplier) string {
	return "multiplier/" + assumption.Segment(m.Name) + "/" + scoped(m.Scope, m.Subject)
}

// RateID is the id of the register entry of a rate: rate/{id}, with scope and
// subject where the rate is not that of the whole book.
func RateID(r ratebook.Rate) string {
	id := "rate/" + assumption.Segment(r.ID)
	if r.Scope == "" || r.Scope == ratebook.BookScope {
		return id
	}
	return id + "/" + scoped(r.Scope, r.Subject)
}

// CarbonID is the id of the register entry of an emission factor.
func CarbonID(f ratebook.CarbonFactor) string { return "carbon/" + assumption.Segment(f.ID) }

func scoped(s ratebook.Scope, subject string) string {
	id := assumption.Segment(string(s))
	if subject != "" {
		id += "/" + assumption.Segment(subject)
	}
	return id
}

// Price prices items. The result does not depend on the order of items or of
// rates. Whatever is wrong with rates, conversions and products is reported at
// once, each fault with the rate or line that it concerns.
//
// The whole structure is a place of its own: its lines are lumps, what minimum
// orders and charges lack, and percentages upon those. It is in no group and of the
// coating and execution class of r.Whole, so that rates without a selection, or with
// one that names those, and multipliers of the scheme, the project or the book act
// there. Any other percentage leaves the lines of the whole structure out of its
// base.
//
// A minimum never makes the base fall: the lines of the items keep their rates and
// multipliers, and what they lack is a line beside them. Only a price break that the
// minimum order reaches can make it cheaper.
//
// A job of which no line is made is an error that names the items and says why.
//
// Price breaks and minimum orders go by the quantity of a rate id over the whole
// job at likely values: a trial of the range crosses no break, and a minimum that
// does not bind at likely values binds in no trial.
func Price(items []takeoff.Item, r Rates) (Priced, error) {
	p := newPricer(items, r.Rates, r.Multipliers, r.Categories, ratebook.Place{Coating: r.Whole.Coating, Execution: r.Whole.Execution})
	p.line, p.entry = "line/", RateID
	p.places, p.minor = r.Currency.MinorDigits+extraPlaces, r.Currency.MinorDigits
	p.currency, p.book, p.reference = r.Currency.Code, r.Book, r.Reference
	p.exchange, p.escalation = r.Exchange, r.Escalation
	p.baseDate, p.facts = r.BaseDate, r.Facts
	order, err := ratebook.CategoryOrder(p.rates)
	if err != nil {
		return Priced{}, fmt.Errorf("pricing: %w", err)
	}
	if err := p.run(order); err != nil {
		return Priced{}, err
	}
	if p.count == 0 {
		return Priced{}, p.nothing()
	}
	model, err := p.compiler.model(r.Systemic, r.Risks)
	if err != nil {
		return Priced{}, err
	}
	out := Priced{Lines: p.ordered(), Categories: p.sums, Model: model, Notes: p.sortedNotes()}
	for _, c := range p.categories {
		out.Base = out.Base.Add(p.sums[c])
	}
	return out, nil
}

// pricer prices one take-off with rates or with emission factors.
type pricer struct {
	line          string                     // before the ids of lines
	entry         func(ratebook.Rate) string // id of a rate's register entry
	places, minor int                        // of unit prices, of amounts
	currency      string
	book          string
	reference     money.Decimal
	exchange      map[string]Conversion
	escalation    map[string][]Conversion
	baseDate      string
	facts         Facts

	items       []takeoff.Item // by id
	rates       []ratebook.Rate
	multipliers []ratebook.Multiplier
	categories  []string
	spots       []*spot // of the items, then of the whole structure
	has         map[ratebook.Driver]bool
	compiler    *compiler
	lists       *pool // of multipliers
	prices      map[priceKey]*unitPrice

	at     map[string]*shelf // the lines, by category
	count  int               // of the lines
	sums   map[string]money.Decimal
	notes  []Note
	faults []error

	terms   []term // storage, as the next ones
	found   []detailed
	details []detail
	drafts  [][]draft
}

func newPricer(items []takeoff.Item, rates []ratebook.Rate, multipliers []ratebook.Multiplier, categories []string, whole ratebook.Place) *pricer {
	p := &pricer{
		items: slices.Clone(items), multipliers: slices.Clone(multipliers), compiler: newCompiler(), lists: newPool(false),
		has: map[ratebook.Driver]bool{}, prices: map[priceKey]*unitPrice{}, at: map[string]*shelf{}, sums: map[string]money.Decimal{},
	}
	for _, c := range categories {
		if !slices.Contains(p.categories, c) {
			p.categories = append(p.categories, c)
		}
	}
	slices.SortStableFunc(p.items, func(a, b takeoff.Item) int { return strings.Compare(a.ID, b.ID) })
	slices.SortStableFunc(p.multipliers, func(a, b ratebook.Multiplier) int { return strings.Compare(a.Name, b.Name) }) // lists of them are by name
	for _, r := range rates {
		if slices.Contains(categories, r.Category) {
			p.rates = append(p.rates, r)
		}
	}
	atlas := newAtlas(p.rates, p.multipliers, p.categories, p.lists)
	for _, it := range p.items {
		p.spots = append(p.spots, atlas.at(it.Place()))
		for _, q := range it.Quantities {
			p.has[q.Driver] = p.has[q.Driver] || q.Value.Sign() > 0
		}
	}
	p.spots = append(p.spots, atlas.at(whole))
	return p
}

// run makes the lines, category by category in the order given, each after those
// that its percentages are taken of.
func (p *pricer) run(order []string) error {
	p.checkRates()
	if err := p.err(); err != nil {
		return err
	}
	for _, c := range p.categories {
		if !slices.Contains(order, c) {
			p.fault(fmt.Errorf("found the category %.40q; accepted: %s", c, strings.Join(order, ", ")))
		}
	}
	for _, c := range order {
		if slices.Contains(p.categories, c) {
			p.priceCategory(c)
		}
	}
	return p.err()
}

// priceCategory prices one category.
func (p *pricer) priceCategory(category string) {
	charges := p.collect(category)
	if len(charges) == 0 {
		p.note("no-rate", category, "", "no rate of the book is for "+category)
		return
	}
	s := &shelf{}
	for _, id := range sortedKeys(charges) {
		c := charges[id]
		if err := p.settle(c, s); err != nil {
			p.fault(err)
		}
		if c.drafts != nil {
			p.drafts = append(p.drafts, c.drafts[:0])
		}
	}
	s.sort(len(p.spots))
	p.at[category] = s
	p.count += len(s.lines)
}

// ordered returns the lines by place, category and rate id.
func (p *pricer) ordered() []Line {
	out := make([]Line, 0, p.count)
	for i := range p.spots {
		for _, c := range p.categories {
			for _, d := range p.at[c].of(i) {
				out = append(out, *d.line)
			}
		}
	}
	return out
}

func (p *pricer) fault(err error) { p.faults = append(p.faults, err) }

// err joins the faults, sorted.
func (p *pricer) err() error {
	slices.SortFunc(p.faults, func(a, b error) int { return strings.Compare(a.Error(), b.Error()) })
	p.faults = slices.CompactFunc(p.faults, func(a, b error) bool { return a.Error() == b.Error() })
	if len(p.faults) == 0 {
		return nil
	}
	return faults(p.faults)
}

// faults are errors on one line.
type faults []error

// Error lists every fault.
func (f faults) Error() string {
	texts := make([]string, len(f))
	for i, err := range f {
		texts[i] = err.Error()
	}
	return "pricing: " + strings.Join(texts, "; ")
}

// Unwrap lets errors.Is look at each fault.
func (f faults) Unwrap() []error { return f }

func (p *pricer) note(code, category, subject, message string) {
	p.notes = append(p.notes, Note{Code: code, Category: category, Subject: subject, Message: message})
}

// sortedNotes returns the notes by category, subject and code.
func (p *pricer) sortedNotes() []Note {
	slices.SortStableFunc(p.notes, func(a, b Note) int {
		if a.Category != b.Category {
			return slices.Index(p.categories, a.Category) - slices.Index(p.categories, b.Category)
		}
		return strings.Compare(a.Subject+"\x00"+a.Code+"\x00"+a.Message, b.Subject+"\x00"+b.Code+"\x00"+b.Message)
	})
	return p.notes
}

func sortedKeys[V any](m map[string]V) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}
