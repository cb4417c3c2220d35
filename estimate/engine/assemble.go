package engine

import (
	"fmt"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
	"spanwright/structural/beam"
	"spanwright/structural/sizing"
)

func (r *run) assemble() (document.Document, error) {
	head, err := r.head()
	if err != nil {
		return document.Document{}, err
	}
	d := document.Document{
		EngineVersion: document.EngineVersion, Caution: document.Caution, Job: head,
		Range: r.rangeOf(), Categories: r.categories(), Items: items(r.items), Lines: r.lines(),
		Inclusions: r.inclusions(), Exclusions: r.exclusions(), Notes: r.textNotes(),
		Assumptions: withResizing(r.register.Entries()),
	}
	d.Groups = groups(d.Items, d.Lines)
	for _, s := range r.sized {
		d.Members = append(d.Members, r.member(s))
	}
	if d.Totals, err = r.totals(d); err != nil {
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
	return document.Job{
		Project: j.Settings.Project, Scheme: j.Settings.Scheme, Source: j.Source.Name, SourceSHA256: j.Source.SHA256, JobSHA256: sum,
		Coating: j.Settings.Coating, ExecutionClass: j.Settings.ExecutionClass, StockLengths: j.Settings.StockLengths,
		DesignBasis: j.Settings.DesignBasis, Factor: document.Number(j.Settings.Factor), EstimateClass: j.Settings.EstimateClass,
		Currency: j.Settings.Currency, BaseDate: j.Settings.BaseDate,
		Money:    "base-date money of " + j.Settings.BaseDate + ", net of taxes",
		RateBook: j.Book.Name, RateBookNote: j.Book.Note, RateBookSHA256: j.BookSHA256, ReferencePrice: j.Book.ReferencePrice.String(),
		CatalogueSHA256: j.Data.Catalogue, GradesSHA256: j.Data.Grades,
		Seed: j.Sampling.Seed, Replicates: j.Sampling.Replicates, Trials: j.Sampling.Trials,
	}, nil
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
	for _, g := range d.Groups {
		t.Net, t.Delivered, t.Purchased = t.Net.Add(g.Net), t.Delivered.Add(g.Delivered), t.Purchased.Add(g.Purchased)
		t.Pieces += g.Pieces
	}
	return t, nil
}

func (r *run) rangeOf() document.Range {
	out := document.Range{
		Mean: document.Number(r.ranged.Mean), MeanSE: document.Number(r.ranged.MeanSE), SD: document.Number(r.ranged.SD),
		BaseAt: document.Number(r.ranged.BasePercentile), Warnings: []string{},
		Method: fmt.Sprintf("%d replicates of %d trials, seed %d; percentiles by linear interpolation (Hyndman and Fan, type 7) of the pooled totals; standard error: spread of the replicates' percentiles over the square root of their number",
			r.job.Sampling.Replicates, r.job.Sampling.Trials, r.job.Sampling.Seed),
	}
	for _, p := range r.ranged.Percentiles {
		out.Percentiles = append(out.Percentiles, document.Percentile{P: document.Number(p.P), Value: document.Number(p.Value), SE: document.Number(p.SE)})
	}
	for _, v := range r.ranged.Curve {
		out.Curve = append(out.Curve, document.Number(v))
	}
	for _, w := range r.ranged.Warnings {
		out.Warnings = append(out.Warnings, w.Message)
	}
	return out
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

func items(in []takeoff.Item) []document.Item {
	out := make([]document.Item, len(in))
	for i, it := range in {
		out[i] = document.Item{
			ID: it.ID, Group: it.Group, Family: it.Family, Treatment: string(it.Treatment), Connection: it.Connection, Marks: it.Marks,
			Pieces: it.Pieces, Length: document.Number(it.Length), Surface: document.Number(it.Surface),
			Net: it.Net, Delivered: it.Delivered, Purchased: it.Purchased,
		}
	}
	return out
}

// groups sums the rounded items and lines, so that groups add up exactly.
func groups(items []document.Item, lines []document.Line) []document.Group {
	at := map[string]int{}
	var out []document.Group
	for _, it := range items {
		i, ok := at[it.Group]
		if !ok {
			i = len(out)
			at[it.Group] = i
			out = append(out, document.Group{Group: it.Group})
		}
		g := &out[i]
		g.Members += len(it.Marks)
		g.Pieces += it.Pieces
		g.Length += it.Length
		g.Surface += it.Surface
		g.Net, g.Delivered, g.Purchased = g.Net.Add(it.Net), g.Delivered.Add(it.Delivered), g.Purchased.Add(it.Purchased)
	}
	for _, l := range lines {
		g := &out[at[l.Group]]
		g.Amount = g.Amount.Add(l.Amount)
	}
	return out
}

func (r *run) lines() []document.Line {
	out := make([]document.Line, len(r.priced.Lines))
	for i, l := range r.priced.Lines {
		out[i] = document.Line{
			ID: l.ID, Item: l.Item, Group: l.Group, Category: l.Category, Driver: l.Driver, Quantity: l.Quantity, Unit: "t",
			Rate: l.Rate, RateFormula: l.Formula, Multipliers: []document.Multiplier{}, Amount: l.Amount, Assumptions: l.Assumptions,
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
	p := s.piece()
	out := document.Member{
		Mark: m.Mark, Group: m.Group, Kind: m.Kind, Description: m.Description, Item: r.itemOf[m.Mark], Quantity: m.Quantity,
		Length: document.Number(m.Length), Treatment: string(m.Treatment), Arrangement: m.Arrangement,
		LineMass: document.Number(p.LineMass), Net: document.Number(p.Net()), Passes: true,
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
	for _, s := range r.sized {
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
	return &sum
}

func checks(res *sizing.Result) []document.Check {
	var out []document.Check
	for i, c := range res.Checks {
		if c.Demand == 0 && !c.PassFail {
			continue // nothing acts that this check is about
		}
		d := document.Check{ID: c.ID, Clause: c.Clause, Formula: c.Formula, Demand: document.Measured(c.Demand), Resistance: document.Measured(c.Resistance),
			Unit: c.Unit, Utilisation: document.Measured(c.Utilisation), PassFail: c.PassFail, Note: noteOf(res, i), Combination: res.Combinations[i], Inputs: []document.Quantity{}}
		for _, q := range c.Inputs {
			d.Inputs = append(d.Inputs, document.Quantity{Symbol: q.Symbol, Value: document.Measured(q.Value), Unit: q.Unit})
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
