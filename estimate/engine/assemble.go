package engine

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/takeoff"
	"spanwright/structural/beam"
	"spanwright/structural/sizing"
)

func (r *run) assemble() (document.Document, error) {
	head, err := r.head()
	if err != nil {
		return document.Document{}, err
	}
	plans, err := r.cutting()
	if err != nil {
		return document.Document{}, err
	}
	d := document.Document{
		EngineVersion: document.EngineVersion, Caution: document.Caution, Job: head,
		Items: r.itemList(), Lines: r.lines(), Cutting: plans, Shipping: r.shipping(), Carbon: r.carbonOf(), Class: r.class(),
		Inclusions: r.inclusions(), Exclusions: r.exclusions(), Notes: r.textNotes(),
		Assumptions: withResizing(r.register.Entries()),
	}
	d.Groups = groups(d.Items, d.Lines)
	for _, s := range r.sized.members {
		d.Members = append(d.Members, r.member(s))
	}
	if d.Totals, err = r.totals(d); err != nil {
		return document.Document{}, err
	}
	if d.Range, err = r.rangeOf(d.Totals); err != nil {
		return document.Document{}, err
	}
	d.Categories = r.categories()
	if err := r.allocate(&d); err != nil {
		return document.Document{}, err
	}
	d.Split = r.splitSummary()
	d.Findings = r.findings(d)
	for _, f := range d.Findings {
		if f.Severity == document.Unsafe {
			d.Totals.Unsafe++
		}
	}
	return d, nil
}

func (r *run) head() (document.Job, error) {
	j := r.job
	result := j
	result.Source, result.Build = job.Source{}, ""
	_, sum, err := result.Canonical()
	if err != nil {
		return document.Job{}, err
	}
	set := j.Settings
	return document.Job{
		Project: set.Project, Scheme: set.Scheme, Source: j.Source.Name, SourceSHA256: j.Source.SHA256, JobSHA256: sum,
		Coating: set.Coating, ExecutionClass: set.ExecutionClass, StockLengths: lengths(set.StockLengths), Purchase: set.Purchase,
		DesignBasis: set.DesignBasis, Factor: document.Number(set.Factor), EstimateClass: set.EstimateClass,
		Currency: set.Currency, BaseDate: set.BaseDate, SpendDate: set.SpendDate, SiteConditions: set.SiteConditions, Money: r.moneyWords(),
		RateBook: j.Book.Name, RateBookKind: j.Book.Kind, RateBookNote: j.Book.Note, RateBookSHA256: j.BookSHA256, ReferencePrice: r.referencePrice(),
		CatalogueSHA256: j.Data.Catalogue, GradesSHA256: j.Data.Grades,
		Seed: j.Sampling.Seed, Replicates: j.Sampling.Replicates, Trials: j.Sampling.Trials,
	}, nil
}

// moneyWords say in which money the totals are, and that they are net of taxes.
func (r *run) moneyWords() string {
	s := r.job.Settings
	if s.Money == schedule.MoneyOutturn && !r.escalated() {
		return "base-date money of " + s.BaseDate + ", net of taxes; outturn money was asked for, and the rate book has no index"
	}
	if s.Money == schedule.MoneyOutturn {
		return "outturn money, spent about " + s.SpendDate + ", escalated from " + s.BaseDate + ", net of taxes"
	}
	return "base-date money of " + s.BaseDate + ", net of taxes"
}

// escalated tells whether any price was carried to the spend date.
func (r *run) escalated() bool {
	return slices.ContainsFunc(r.priced.Lines, func(l pricing.Line) bool {
		return slices.ContainsFunc(l.Parts, func(p pricing.Part) bool { return p.Name == pricing.EscalationToSpend })
	})
}

func (r *run) referencePrice() string {
	if r.job.Book.Kind != ratebook.KindRatio {
		return ""
	}
	return r.job.Book.ReferencePrice.String()
}

// lengths writes stock lengths in metres.
func lengths(list []float64) string {
	if len(list) == 0 {
		return ""
	}
	words := make([]string, len(list))
	for i, l := range list {
		words[i] = strconv.FormatFloat(l, 'g', -1, 64)
	}
	return strings.Join(words, "; ") + " m"
}

func (r *run) totals(d document.Document) (document.Totals, error) {
	t := document.Totals{Base: r.priced.Base, Confidence: document.Number(r.job.Settings.Confidence), Members: len(d.Members)}
	found := false
	for _, p := range r.ranged.Percentiles {
		if p.P == r.job.Settings.Confidence {
			at, err := money.FromFloat(document.Number(p.Value).Rounded(), r.currency.MinorDigits)
			if err != nil {
				return t, fmt.Errorf("percentile %g: %w", p.P, err)
			}
			t.AtConfidence, found = at, true
		}
	}
	if !found {
		return t, fmt.Errorf("the simulation did not return the percentile %g", r.job.Settings.Confidence)
	}
	t.Contingency = t.AtConfidence.Sub(t.Base)
	t.Reserve = r.job.Settings.ManagementReserve
	if rate := r.job.Settings.TaxRate; rate > 0 {
		f, err := money.FromFloat(rate, 6)
		if err != nil {
			return t, fmt.Errorf("tax: %w", err)
		}
		t.Tax = r.currency.Round(t.AtConfidence.Mul(f))
	}
	for _, g := range d.Groups {
		t.Net, t.Delivered, t.Purchased = t.Net.Add(g.Net), t.Delivered.Add(g.Delivered), t.Purchased.Add(g.Purchased)
		t.Pieces += g.Pieces
	}
	return t, nil
}

func (r *run) rangeOf(t document.Totals) (document.Range, error) {
	out := document.Range{
		Mean: document.Number(r.ranged.Mean), MeanSE: document.Number(r.ranged.MeanSE), SD: document.Number(r.ranged.SD),
		BaseAt: document.Number(r.ranged.BasePercentile), Warnings: []string{}, Sensitivities: []document.Sensitivity{}, Risks: []document.RiskRange{},
		SensitivityMethod: ranges.SensitivityMethod,
		Method: fmt.Sprintf("%d replicates of %d trials, seed %d; percentiles by linear interpolation (Hyndman and Fan, type 7) of the pooled totals; standard error: spread of the replicates' percentiles over the square root of their number, widened by Student's t for it",
			r.job.Sampling.Replicates, r.job.Sampling.Trials, r.job.Sampling.Seed),
	}
	for _, p := range r.ranged.Percentiles {
		at, err := money.FromFloat(document.Number(p.Value).Rounded(), r.currency.MinorDigits)
		if err != nil {
			return out, fmt.Errorf("percentile %g: %w", p.P, err)
		}
		out.Percentiles = append(out.Percentiles, document.Percentile{P: document.Number(p.P), Value: document.Number(p.Value), SE: document.Number(p.SE), Contingency: at.Sub(t.Base)})
	}
	for _, v := range r.ranged.Curve {
		out.Curve = append(out.Curve, document.Number(v))
	}
	for _, w := range r.ranged.Warnings {
		out.Warnings = append(out.Warnings, w.Message)
	}
	for _, s := range r.ranged.Sensitivities {
		out.Sensitivities = append(out.Sensitivities, document.Sensitivity{Assumption: s.ID, Share: document.Measured(s.Share), Swing: document.Measured(s.Swing), SwingSE: document.Measured(s.SwingSE),
			Narrowing: document.Measured(s.Narrowing), NarrowingSE: document.Measured(s.NarrowingSE)})
	}
	return out, nil
}

// allocate shares the contingency out by covariance with the total, to categories
// and discrete risks, so that the parts add up to it to the minor unit.
func (r *run) allocate(d *document.Document) error {
	var shares []ranges.Share
	for _, c := range r.ranged.Categories {
		shares = append(shares, ranges.Share{Name: "category/" + c.Category, Share: c.Share})
	}
	for _, k := range r.ranged.Risks {
		shares = append(shares, ranges.Share{Name: k.ID, Share: k.Share})
	}
	parts, err := allot(d.Totals.Contingency, r.currency, shares)
	if err != nil {
		return fmt.Errorf("contingency: %w", err)
	}
	of, share := map[string]money.Decimal{}, map[string]float64{}
	for i, s := range shares {
		of[s.Name], share[s.Name] = parts[i], s.Share
	}
	for i := range d.Categories {
		c := &d.Categories[i]
		c.Share, c.Contingency = document.Measured(share["category/"+c.Category]), of["category/"+c.Category]
	}
	for _, k := range r.ranged.Risks {
		d.Range.Risks = append(d.Range.Risks, document.RiskRange{Assumption: k.ID, Name: r.riskName(k.ID), Probability: document.Number(r.probability(k.ID)),
			Mean: document.Number(k.Mean), Share: document.Measured(k.Share), Contingency: of[k.ID]})
	}
	return nil
}

// allot parts an amount by shares, to the minor unit. Where nothing varies it stays
// whole, with the first.
func allot(amount money.Decimal, c money.Currency, shares []ranges.Share) ([]money.Decimal, error) {
	unit := money.FromInt(1)
	for range c.MinorDigits {
		unit = unit.Mul(money.FromInt(10))
	}
	minor, err := strconv.ParseInt(amount.Mul(unit).Round(0).String(), 10, 64)
	if err != nil {
		return nil, err
	}
	out := make([]money.Decimal, len(shares))
	sum := 0.0
	for _, s := range shares {
		sum += s.Share
	}
	if !(sum > 0) {
		if len(out) > 0 {
			out[0] = amount
		}
		return out, nil
	}
	parts, err := ranges.Allocate(minor, shares)
	if err != nil {
		return nil, err
	}
	one, err := money.FromFloat(math.Pow10(-c.MinorDigits), c.MinorDigits)
	if err != nil {
		return nil, err
	}
	for i, n := range parts {
		out[i] = money.FromInt(n).Mul(one)
	}
	return out, nil
}

func (r *run) riskName(id string) string {
	for _, k := range r.job.Risks {
		if riskID(k.Name) == id {
			return k.Name
		}
	}
	return id
}

func (r *run) probability(id string) float64 {
	for _, k := range r.job.Risks {
		if riskID(k.Name) == id {
			return k.Probability
		}
	}
	return 0
}

func (r *run) categories() []document.Category {
	var out []document.Category
	for _, c := range ratebook.Categories() {
		amount, ok := r.priced.Categories[c]
		if !ok {
			continue
		}
		row := document.Category{Category: c, Amount: amount}
		for _, x := range r.ranged.Categories {
			if x.Category == c {
				row.Mean, row.P10, row.P90 = document.Number(x.Mean), document.Number(x.P10), document.Number(x.P90)
			}
		}
		out = append(out, row)
	}
	return out
}

func (r *run) itemList() []document.Item {
	out := make([]document.Item, len(r.items))
	for i, it := range r.items {
		area := r.byArea(it)
		out[i] = document.Item{
			ID: it.ID, Group: it.Group, Family: it.Family, Treatment: it.Treatment, Connection: it.Connection, Marks: it.Marks,
			Coating: it.Coating, Execution: it.Execution,
			Pieces: it.Pieces, Length: document.Number(it.Length), Surface: document.Number(it.Surface),
			Net: it.Net, Delivered: it.Delivered, Purchased: it.Purchased, Quantities: []document.Quantity{},
		}
		for _, q := range it.Quantities {
			out[i].Quantities = append(out[i].Quantities, quantity(q, dependsOn(it, q, area)))
		}
	}
	return out
}

func quantity(q takeoff.Quantity, depends []string) document.Quantity {
	out := document.Quantity{Driver: string(q.Driver), Value: q.Value, Unit: q.Driver.Unit(), Measured: document.Number(q.Measured),
		Factors: []document.Factor{}, Assumptions: q.Fixed, Formula: q.Formula, Depends: depends}
	for _, a := range q.Factors {
		out.Factors = append(out.Factors, document.Factor{Assumption: a.ID, Value: document.Number(a.Value())})
	}
	return out
}

// groups sums the rounded items and lines, so that groups add up exactly.
func groups(items []document.Item, lines []document.Line) []document.Group {
	at, counted := map[string]int{}, map[string]bool{}
	var out []document.Group
	for _, it := range items {
		i, ok := at[it.Group]
		if !ok {
			i = len(out)
			at[it.Group] = i
			out = append(out, document.Group{Group: it.Group})
		}
		g := &out[i]
		for _, m := range it.Marks { // a row with joints or concrete is in several items
			if !counted[m] {
				counted[m] = true
				g.Members++
			}
		}
		g.Pieces += it.Pieces
		g.Length += it.Length
		g.Surface += it.Surface
		g.Net, g.Delivered, g.Purchased = g.Net.Add(it.Net), g.Delivered.Add(it.Delivered), g.Purchased.Add(it.Purchased)
	}
	for _, l := range lines {
		i, ok := at[l.Group]
		if !ok { // the whole structure
			i = len(out)
			at[l.Group] = i
			out = append(out, document.Group{Group: l.Group})
		}
		out[i].Amount = out[i].Amount.Add(l.Amount)
	}
	return out
}

func (r *run) lines() []document.Line {
	out := make([]document.Line, len(r.priced.Lines))
	for i, l := range r.priced.Lines {
		out[i] = document.Line{
			ID: l.ID, Item: l.Item, Group: l.Group, Category: l.Category, Driver: string(l.Driver), Quantity: l.Quantity, Unit: l.Unit,
			RateID: l.RateID, RateScope: string(l.RateScope), Rate: l.Rate, RateFormula: l.Formula, RateParts: []document.Part{},
			Multipliers: []document.Multiplier{}, UnitPrice: l.UnitPrice, Amount: l.Amount, Of: l.Of, Assumptions: l.Assumptions, Note: l.Note,
		}
		for _, p := range l.Parts {
			out[i].RateParts = append(out[i].RateParts, document.Part{Name: p.Name, Value: p.Value, Assumption: p.Assumption})
		}
		for _, a := range l.Multipliers {
			out[i].Multipliers = append(out[i].Multipliers, document.Multiplier{
				Name: a.Name, Scope: string(a.Scope), Subject: a.Subject, Value: a.Value, Assumption: a.Assumption})
		}
	}
	return out
}

func (r *run) member(s sizedMember) document.Member {
	m := s.member
	p := takeoff.NewPiece(m, s.chosen())
	out := document.Member{
		Mark: m.Mark, Group: m.Group, Kind: m.Kind, Description: m.Description, Quantity: m.Quantity, Inputs: inputsOf(m),
		Length: document.Number(m.Length), Treatment: string(m.Treatment), Arrangement: m.Arrangement,
		LineMass: document.Number(p.LineMass), Net: document.Number(p.Net()), Passes: true,
	}
	for _, id := range r.itemsOf[m.Mark] {
		switch it := r.items[r.itemAt[id]]; it.Treatment {
		case takeoff.Joint:
			out.JointItems = append(out.JointItems, id)
		case takeoff.Concrete:
			out.ConcreteItem = id
		default:
			out.Item = id
		}
	}
	if s.result == nil {
		return out
	}
	res := s.result
	out.Section, out.Grade, out.Passes = res.Section.Designation, m.Grade, res.Passes
	out.Governing, out.Utilisation, out.Combination = res.Governing, document.Measured(res.Utilisation), res.Combination
	out.SameSizeAs, out.LoadSet, out.Warnings = m.SameSizeAs, m.LoadSet, res.Warnings
	out.TotalLoad, out.SelfWeight = document.Measured(res.TotalLoad/1000), document.Measured(res.SelfWeight/1000)
	out.DeflectionLimit = document.Number(m.DeflectionLimit)
	out.Checks, out.Ratios = checks(res), ratios(res.Ratios)
	if !m.Upright { // its foot carries the axial force, which the beam knows nothing of
		out.Reactions = reactions(res.Envelope.Reactions)
	}
	for _, x := range res.LighterRejected {
		out.Rejected = append(out.Rejected, document.Rejected{Section: x.Section, Check: x.Check, Utilisation: document.Measured(x.Utilisation)})
	}
	return out
}

// splitSummary says what the split method would have chosen, nil where it would
// have cut or simplified nothing.
func (r *run) splitSummary() *document.SplitSummary {
	sum := document.SplitSummary{Members: []document.SplitMember{}, UnsafeMembers: []string{}}
	for _, s := range r.sized.members {
		if s.split == nil {
			continue
		}
		metres := float64(s.member.Quantity) * s.member.Length / 1000
		exact := float64(metres * s.result.Section.Mass)
		split := exact
		m := document.SplitMember{Mark: s.member.Mark, Exact: s.result.Section.Designation, Utilisation: document.Measured(s.split.utilisation), Check: s.split.check, Unsafe: s.split.unsafe()}
		if s.split.passes {
			m.Split, split = s.split.section.Designation, float64(metres*s.split.section.Mass)
		}
		m.DifferenceT = document.Number(split - exact)
		if amount, ok := r.split.members[m.Mark]; ok {
			m.Difference = &amount
		}
		if m.Unsafe {
			sum.UnsafeMembers = append(sum.UnsafeMembers, m.Mark)
		}
		sum.Members = append(sum.Members, m)
		sum.TonnesExact += document.Number(exact)
		sum.TonnesSplit += document.Number(split)
	}
	if len(sum.Members) == 0 {
		return nil
	}
	sum.DifferenceT = sum.TonnesSplit - sum.TonnesExact
	if r.split.priced {
		sum.Difference, sum.UnsafeDifference = &r.split.total, &r.split.unsafe
	}
	return &sum
}

func checks(res *sizing.Result) []document.Check {
	var out []document.Check
	for i, c := range res.Checks {
		if c.Demand == 0 && !c.PassFail {
			continue // nothing acts that this check is about
		}
		d := document.Check{ID: c.ID, Clause: c.Clause, Formula: c.Formula, Demand: document.Measured(c.Demand), Resistance: document.Measured(c.Resistance),
			Unit: c.Unit, Utilisation: document.Measured(c.Utilisation), PassFail: c.PassFail, Note: noteOf(res, i), Combination: res.Combinations[i], Inputs: []document.Measure{}}
		for _, q := range c.Inputs {
			d.Inputs = append(d.Inputs, document.Measure{Symbol: q.Symbol, Value: document.Measured(q.Value), Unit: q.Unit})
		}
		out = append(out, d)
	}
	return out
}

// noteOf is the note of a check without its combination, which stands by itself.
func noteOf(res *sizing.Result, i int) string {
	return strings.TrimSuffix(strings.TrimSuffix(res.Checks[i].Note, "under "+res.Combinations[i]), "; ")
}

func reactions(in []beam.ReactionEnvelope) []document.Reaction {
	var out []document.Reaction
	for _, x := range in {
		moment := x.MMax
		if -x.MMin > moment {
			moment = x.MMin
		}
		out = append(out, document.Reaction{Position: document.Measured(x.X), Max: document.Measured(x.FMax / 1000), Min: document.Measured(x.FMin / 1000), Moment: document.Measured(moment / 1000)})
	}
	return out
}

func ratios(in []beam.Ratio) []document.Ratio {
	var out []document.Ratio
	for _, x := range in {
		scale, unit := 1e-3, "kN"
		if (x.Effect == beam.EffectPeakMoment || x.Effect == beam.EffectShear) && x.Exact < 0 {
			x.Split, x.Exact = -x.Split, -x.Exact // magnitudes: of ± the same either may come first
		}
		switch {
		case strings.HasSuffix(x.Effect, "moment"):
			unit = "kNm"
		case x.Effect == "deflection":
			scale, unit = 1e3, "mm"
		}
		out = append(out, document.Ratio{Effect: x.Effect, Where: x.Where, Split: document.Measured(x.Split * scale), Exact: document.Measured(x.Exact * scale),
			Unit: unit, Ratio: document.Measured(x.Ratio), Unsafe: x.Unsafe})
	}
	return out
}
