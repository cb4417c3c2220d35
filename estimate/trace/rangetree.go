package trace

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// Ids of figures that the register's feeds do not name.
const (
	atConfidence = "at confidence"
	reserve      = "management reserve"
)

// contingency is the cost at the confidence less the base.
func (t *Tracer) contingency() draft {
	o, cur := t.doc.Totals, t.doc.Job.Currency
	d := draft{Node: Node{Figure: "contingency", What: "Contingency: what the cost at the chosen confidence exceeds the base by; outside every category.",
		Value: o.Contingency.String(), Unit: cur, Kind: Sum, Formula: "cost at the confidence − base", Rounding: "none: a decimal subtraction"}}
	d.Arithmetic = fmt.Sprintf("%s − %s = %s", with(o.AtConfidence.String(), cur), with(o.Base.String(), cur), with(d.Value, cur))
	d.recheck(of(exact(o.AtConfidence)).add(of(exact(o.Base)), -1), exact(o.Contingency))
	if o.Contingency.Sign() < 0 {
		d.Notes = append(d.Notes, "negative: the base lies above the percentile chosen")
	}
	for _, c := range t.doc.Categories {
		d.Notes = append(d.Notes, fmt.Sprintf("of it %s, by covariance share: %s", c.Category, with(c.Contingency.String(), cur)))
	}
	for _, k := range t.doc.Range.Risks {
		d.Notes = append(d.Notes, fmt.Sprintf("of it the risk “%s”, by covariance share: %s", k.Name, with(k.Contingency.String(), cur)))
	}
	d.kids = []kid{t.kid(atConfidence), t.kid("base")}
	return d
}

// atConfidence is the percentile that the contingency reaches.
func (t *Tracer) atConfidence() draft {
	o, cur := t.doc.Totals, t.doc.Job.Currency
	d := draft{Node: Node{Figure: atConfidence, What: fmt.Sprintf("The cost not exceeded with a probability of %s.", text(o.Confidence)), Value: o.AtConfidence.String(), Unit: cur,
		Kind: Percentile, Formula: "percentile of the simulated totals", Rounding: fmt.Sprintf("to %s, once, %s", placed(places(o.AtConfidence)), halfAway)}}
	found := false
	for _, p := range t.doc.Range.Percentiles {
		if p.P == o.Confidence {
			found = true
			d.Arithmetic = fmt.Sprintf("P%s %s = %s", percent(p.P), with(text(p.Value), cur), with(d.Value, cur))
			d.Notes = append(d.Notes, "standard error "+short(p.SE)+" "+cur)
			d.recheck(of(printed(p.Value)).rounded(places(o.AtConfidence)), exact(o.AtConfidence))
		}
	}
	if !found {
		d.Notes = append(d.Notes, "does not recompute: the range holds no percentile of this confidence")
	}
	d.kids = append(t.listed("setting/confidence"), t.kid("range"))
	return d
}

// percent is a probability as the number of its percentile.
func percent(p document.Number) string {
	return strconv.FormatFloat(math.Round(p.Rounded()*1e8)/1e6, 'f', -1, 64)
}

func threeDigits(x float64) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 3, 64), 64)
	if err != nil {
		return x
	}
	return r
}

// rangeFigure is the distribution of the total. Its children are the base and all
// that is drawn, what narrows the range most first.
func (t *Tracer) rangeFigure() draft {
	r, j, cur := t.doc.Range, t.doc.Job, t.doc.Job.Currency
	d := draft{Node: Node{Figure: "range", What: "Range of the total over all trials: mean, P10, P50, P80 and P90.", Unit: cur, Kind: Percentile,
		Formula: "total of a trial = Σ lines at the values drawn × systemic factor + discrete risks that occur; one draw for each assumption and trial, shared by every line that uses it; sections held",
		Source:  r.Method, Version: fmt.Sprintf("engine version %d, seed %d, %d replicates of %d trials", t.doc.EngineVersion, j.Seed, j.Replicates, j.Trials),
		Rounding: "12 significant digits; percentiles are read to three"}}
	d.Value = rangeText(r)
	d.Notes = append(d.Notes, fmt.Sprintf("mean %s %s, standard error %s, standard deviation %s", short(r.Mean), cur, short(r.MeanSE), short(r.SD)))
	for _, p := range r.Percentiles {
		d.Notes = append(d.Notes, fmt.Sprintf("P%s %s %s, standard error %s, contingency there %s", percent(p.P), short(p.Value), cur, short(p.SE), grouped(p.Contingency.String())))
	}
	d.Notes = append(d.Notes, "the base lies at P"+percent(document.Number(threeDigits(r.BaseAt.Rounded()))))
	d.Notes = append(d.Notes, r.Warnings...)
	d.kids = append([]kid{t.kid("base")}, t.drawn("range")...)
	d.kids = append(d.kids, constant("Where the draws start and how many there are.", fmt.Sprintf("%d", j.Seed), "", "sampling of the frozen job: a draw is a function of seed, assumption, replicate and trial",
		"job", hash(j.JobSHA256)))
	return d
}

// rangeText is the mean and the percentiles that document.Figures names.
func rangeText(r document.Range) string {
	words := []string{text(r.Mean)}
	for _, p := range r.Percentiles {
		if p.P == 0.1 || p.P == 0.5 || p.P == 0.8 || p.P == 0.9 {
			words = append(words, text(p.Value))
		}
	}
	return strings.Join(words, " ")
}

// drawn are the entries that feed a range and no line of it alone: sensitive ones
// first, then by id.
func (t *Tracer) drawn(figure string) []kid {
	ids := slices.Clone(t.fed[figure])
	rank := map[string]int{}
	for i, s := range t.doc.Range.Sensitivities {
		rank[s.Assumption] = i - len(t.doc.Range.Sensitivities)
	}
	slices.SortStableFunc(ids, func(a, b string) int { return rank[a] - rank[b] })
	var out []kid
	for _, id := range slices.Compact(ids) {
		e := t.entries[id]
		if e.Kind == assumption.Input && e.Spread == nil && !strings.HasPrefix(id, "input/risk") {
			continue // it moves the range through the base, where it is explained
		}
		out = append(out, t.risk(e))
	}
	return out
}

// risk is the leaf of a drawn entry; of a discrete risk with what it adds.
func (t *Tracer) risk(e *assumption.Entry) kid {
	if e.Kind != assumption.Risk {
		return t.entry(e, "")
	}
	return kid{e.ID, func() draft {
		d := draft{Node: t.entryNode(e, "")}
		for _, k := range t.doc.Range.Risks {
			if k.Assumption == e.ID {
				d.Notes = append(d.Notes, fmt.Sprintf("probability %s; adds %s to the mean and %s of the variance", text(k.Probability), short(k.Mean), short(k.Share)))
			}
		}
		return d
	}}
}

// tax is a rate on the cost at the confidence.
func (t *Tracer) tax() draft {
	o, cur := t.doc.Totals, t.doc.Job.Currency
	d := draft{Node: Node{Figure: "tax", What: "Tax on the cost at the confidence; outside every other figure.", Value: o.Tax.String(), Unit: cur, Kind: Product,
		Formula: "cost at the confidence × rate of tax", Rounding: fmt.Sprintf("to %s, %s", placed(places(o.Tax)), halfAway)}}
	d.kids = append([]kid{t.kid(atConfidence)}, t.listed("input/tax")...)
	e, ok := t.entries["input/tax"]
	if !ok {
		d.Notes = append(d.Notes, "the register does not hold the rate of tax")
		return d
	}
	number, isPercent := strings.CutSuffix(strings.TrimSpace(e.Value), "%")
	rate, err := money.Parse(strings.TrimSpace(number))
	if err != nil {
		d.Notes = append(d.Notes, "the document does not state the rate itself; tax over cost is about "+quotient(o.Tax, o.AtConfidence))
		return d
	}
	r := exact(rate)
	shown := with(rate.String(), "")
	if isPercent || e.Unit == "%" {
		r.rat.Quo(r.rat, whole(100).rat)
		shown += " ÷ 100"
	}
	d.Arithmetic = fmt.Sprintf("%s × %s = %s", with(o.AtConfidence.String(), cur), shown, with(d.Value, cur))
	d.recheck(product(exact(o.AtConfidence), r).rounded(places(o.Tax)), exact(o.Tax))
	return d
}

// quotient writes a over b to four places.
func quotient(a, b money.Decimal) string {
	q, ok := of(exact(a)).over(of(exact(b)))
	if !ok {
		return "not known"
	}
	return q.low.FloatString(4)
}

// reserve is money that was stated, outside the range.
func (t *Tracer) reserve() draft {
	d := draft{Node: Node{Figure: reserve, What: "Management reserve: outside the range, held by who approves.", Value: t.doc.Totals.Reserve.String(), Unit: t.doc.Job.Currency,
		Kind: Input, Source: "job", Owner: "who approves", Version: hash(t.doc.Job.JobSHA256)}}
	return d
}
