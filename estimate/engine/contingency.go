package engine

import (
	"fmt"
	"math"
	"strconv"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/ranges"
)

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
