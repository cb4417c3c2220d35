package calculator

import (
	"context"
	"errors"
	"fmt"
	"slices"

	"spanwright/estimate/document"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
	"spanwright/estimate/spread"
)

// RangeRequest asks for the distribution of a sum of uncertain lines.
type RangeRequest struct {
	Lines       []RangeLine        `json:"lines" nullable:"false" doc:"1 to 400"`
	Correlation map[string]float64 `json:"correlation,omitempty" doc:"by group: Spearman's rank correlation between any two lines of it, at least 0 and below 1"`
	Matrix      *RangeMatrix       `json:"matrix,omitempty" doc:"correlations by line; lines in it leave their group"`
	Risks       []RangeRisk        `json:"risks,omitempty" doc:"events that may add a cost, at most 100"`
	Systemic    float64            `json:"systemic_log_deviation,omitempty" doc:"of one lognormal factor of median 1 on the sum of the lines, 0 to 2; risks are outside of it"`
	Seed        *uint64            `json:"seed,omitempty" doc:"1 when absent"`
	Replicates  int                `json:"replicates,omitempty" doc:"32 (when absent) to 256"`
	Trials      int                `json:"trials,omitempty" doc:"per replicate, 64 to 16384; 4096 when absent"`
	Percentiles []float64          `json:"percentiles,omitempty" doc:"probabilities; 0.1, 0.5, 0.8, 0.9 when absent"`
}

// RangeLine is one uncertain amount.
type RangeLine struct {
	ID     string        `json:"id" doc:"each id once; it keys the line's random numbers"`
	Amount *float64      `json:"amount,omitempty" doc:"what the spread multiplies; when absent the spread is the amount itself"`
	Spread spread.Spread `json:"spread"`
	Group  string        `json:"group,omitempty" doc:"correlation group; empty for a line on its own"`
}

// RangeMatrix holds rank correlations between lines.
type RangeMatrix struct {
	IDs []string    `json:"ids" nullable:"false" doc:"of lines, each once, at most 100"`
	Rho [][]float64 `json:"rho" nullable:"false" doc:"symmetric, 1 on the diagonal, −1 to 1"`
}

// RangeRisk is an event that adds its impact where it occurs.
type RangeRisk struct {
	ID          string        `json:"id"`
	Probability float64       `json:"probability" doc:"0 to 1"`
	Impact      spread.Spread `json:"impact"`
}

// RangeAnswer is the distribution of the total.
type RangeAnswer struct {
	Caution           string             `json:"caution"`
	Base              Number             `json:"base" doc:"sum of the lines at likely values, without risks"`
	Mean              Number             `json:"mean"`
	MeanSE            Number             `json:"mean_standard_error"`
	SD                Number             `json:"standard_deviation"`
	BaseAt            Number             `json:"base_percentile" doc:"the probability that the base is not exceeded"`
	Percentiles       []RangePercentile  `json:"percentiles" nullable:"false"`
	Sensitivities     []RangeSensitivity `json:"sensitivities" nullable:"false" doc:"by narrowing, the largest first"`
	SensitivityMethod string             `json:"sensitivity_method"`
	Risks             []RangeRiskAnswer  `json:"risks" nullable:"false"`
	Warnings          []RangeWarning     `json:"warnings" nullable:"false"`
	MomentCheck       string             `json:"moment_check" doc:"what of the sample was compared with its closed form"`
	Seed              uint64             `json:"seed"`
	Replicates        int                `json:"replicates"`
	Trials            int                `json:"trials" doc:"per replicate"`
}

// RangePercentile is the total not exceeded with probability P.
type RangePercentile struct {
	P           Number `json:"p"`
	Value       Number `json:"value"`
	SE          Number `json:"standard_error"`
	Contingency Number `json:"contingency" doc:"value minus base; may be negative"`
}

// RangeSensitivity is what one line or risk does to the range.
type RangeSensitivity struct {
	ID        string `json:"id"`
	Share     Number `json:"share_of_variance"`
	Swing     Number `json:"swing" doc:"of the mean, from P10 to P90 of it"`
	Narrowing Number `json:"narrowing" doc:"of P90 minus P10, when it is known to be its median"`
}

// RangeRiskAnswer is what a risk adds.
type RangeRiskAnswer struct {
	ID        string `json:"id"`
	Mean      Number `json:"mean" doc:"of its cost over all trials"`
	Frequency Number `json:"frequency" doc:"share of the trials in which it occurs"`
	Share     Number `json:"share_of_variance" doc:"by covariance with the total"`
}

// RangeWarning is a note about the result.
type RangeWarning struct {
	Code    string `json:"code"`
	Message string `json:"message"`
}

// Limits of a range.
const (
	MaxRangeLines  = 400
	MaxRangeRisks  = 100
	MaxRangeMatrix = 100
	maxReplicates  = 256
	maxTrials      = 16384
	maxAmount      = 1e15
	maxDeviation   = 2
	systemicID     = "systemic factor"
)

// Range simulates the sum of uncertain lines. The error is Faults, or that of the
// context. A matrix that is not positive definite is replaced by the nearest that is,
// with a warning; where that changes an entry by more than 0.05 it is a fault.
func Range(ctx context.Context, r RangeRequest) (RangeAnswer, error) {
	var f Faults
	s := r.settings(&f)
	m := r.model(&f)
	r.checkGroups(&f)
	r.checkMatrix(&f)
	if len(f) > 0 {
		if err := r.tryMatrix(ctx, &f); err != nil {
			return RangeAnswer{}, err
		}
		return RangeAnswer{}, f
	}
	res, err := ranges.Simulate(ctx, m, s, nil)
	if err != nil {
		return RangeAnswer{}, r.fromRanges(err)
	}
	return guarded(r.answer(res, s))
}

func (r RangeRequest) settings(f *Faults) ranges.Settings {
	s := ranges.Settings{Seed: 1, Replicates: ranges.DefaultReplicates, Trials: ranges.DefaultTrials, Correlation: r.Correlation, Sensitivities: true}
	if r.Seed != nil {
		s.Seed = *r.Seed
	}
	if r.Replicates != 0 && f.within("/replicates", float64(r.Replicates), ranges.MinReplicates, maxReplicates, "") {
		s.Replicates = r.Replicates
	}
	if r.Trials != 0 && f.within("/trials", float64(r.Trials), 64, maxTrials, "") {
		s.Trials = r.Trials
	}
	if n := s.Replicates * s.Trials; n > 1<<20 {
		f.add("/trials", fmt.Sprintf("%d × %d trials", s.Replicates, s.Trials), "too many", fmt.Sprintf("at most %d in all", 1<<20))
	}
	if f.few("/percentiles", len(r.Percentiles), 50, "percentiles") {
		for i, p := range r.Percentiles {
			if !(0 < p && p < 1) {
				f.add(item("/percentiles", i), number(p), "out of range", "a probability between 0 and 1, such as 0.8 for P80")
			}
		}
	}
	if len(r.Percentiles) > 0 {
		s.Percentiles = r.Percentiles
	}
	if r.Matrix != nil {
		s.Matrix = &ranges.Matrix{IDs: r.Matrix.IDs, Rho: r.Matrix.Rho}
	}
	return s
}

// model is the request as a cost model: each line a term of its own.
func (r RangeRequest) model(f *Faults) pricing.Model {
	var m pricing.Model
	known := map[string]string{}
	input := func(at, id, field string, s spread.Spread, group string) int {
		switch first, twice := known[id]; {
		case id == "":
			f.add(at+"/id", "nothing", "no id", "an id that no other line or risk has")
		case len([]rune(id)) > 120:
			f.add(at+"/id", quoted(id), "too long", "at most 120 letters")
		case id == systemicID:
			f.add(at+"/id", quoted(id), "the name of the factor on the sum", "another id")
		case twice:
			f.add(at+"/id", quoted(id), "already stands at "+first, "an id that no other line or risk has")
		default:
			known[id] = at
		}
		f.spread(at+field, s)
		m.Inputs = append(m.Inputs, pricing.Input{ID: id, Spread: s, Group: group})
		return len(m.Inputs) - 1
	}
	if len(r.Lines) == 0 {
		f.add("/lines", "nothing", "no lines", fmt.Sprintf("1 to %d lines", MaxRangeLines))
	}
	if f.few("/lines", len(r.Lines), MaxRangeLines, "lines") {
		for i, l := range r.Lines {
			at, amount := item("/lines", i), 1.0
			if l.Amount != nil && f.signed(at+"/amount", *l.Amount, maxAmount, "") {
				amount = *l.Amount
			}
			k := input(at, l.ID, "/spread", l.Spread, l.Group)
			m.Terms = append(m.Terms, pricing.Term{Category: "total", Coefficient: amount, Factors: []pricing.Factor{{Input: k}}})
		}
	}
	if f.few("/risks", len(r.Risks), MaxRangeRisks, "risks") {
		for i, x := range r.Risks {
			at := item("/risks", i)
			f.within(at+"/probability", x.Probability, 0, 1, "")
			m.Risks = append(m.Risks, pricing.Risk{ID: x.ID, Probability: x.Probability, Impact: input(at, x.ID, "/impact", x.Impact, "")})
		}
	}
	if f.within("/systemic_log_deviation", r.Systemic, 0, maxDeviation, "") && r.Systemic > 0 {
		m.Inputs = append(m.Inputs, pricing.Input{ID: systemicID, Spread: spread.LogDeviation(r.Systemic)})
		m.Overall = []pricing.Factor{{Input: len(m.Inputs) - 1}}
	}
	return sortedModel(m)
}

// sortedModel puts inputs and risks in the order of their ids.
func sortedModel(m pricing.Model) pricing.Model {
	order := make([]int, len(m.Inputs))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return compare(m.Inputs[a].ID, m.Inputs[b].ID) })
	place := make([]int, len(order))
	inputs := make([]pricing.Input, len(order))
	for to, from := range order {
		place[from], inputs[to] = to, m.Inputs[from]
	}
	m.Inputs = inputs
	for i := range m.Terms {
		m.Terms[i].Factors[0].Input = place[m.Terms[i].Factors[0].Input]
	}
	for i := range m.Overall {
		m.Overall[i].Input = place[m.Overall[i].Input]
	}
	for i := range m.Risks {
		m.Risks[i].Impact = place[m.Risks[i].Impact]
	}
	slices.SortStableFunc(m.Risks, func(a, b pricing.Risk) int { return compare(a.ID, b.ID) })
	return m
}

func compare(a, b string) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// spread refuses a spread by its field.
func (f *Faults) spread(pointer string, s spread.Spread) {
	var bad *spread.Error
	err := s.Validate()
	switch {
	case err == nil:
		for _, v := range []float64{s.Low, s.Likely, s.High} {
			if !f.signed(pointer, v, maxAmount, "") {
				return
			}
		}
	case errors.As(err, &bad):
		f.add(pointer+"/"+bad.Field, bad.Found, "a spread that no distribution fits", bad.Accepted)
	default:
		f.add(pointer, "a spread", err.Error(), "a spread that a distribution fits")
	}
}

func (r RangeRequest) answer(res ranges.Result, s ranges.Settings) RangeAnswer {
	out := RangeAnswer{Caution: document.Caution, Base: Number(res.Base), Mean: Number(res.Mean), MeanSE: Number(res.MeanSE), SD: Number(res.SD),
		BaseAt: Number(res.BasePercentile), Percentiles: []RangePercentile{}, Sensitivities: []RangeSensitivity{}, SensitivityMethod: ranges.SensitivityMethod,
		Risks: []RangeRiskAnswer{}, Warnings: []RangeWarning{}, MomentCheck: res.MomentMethod, Seed: s.Seed, Replicates: res.Replicates, Trials: res.Trials}
	for _, p := range res.Percentiles {
		out.Percentiles = append(out.Percentiles, RangePercentile{P: Number(p.P), Value: Number(p.Value), SE: Number(p.SE), Contingency: Number(p.Value - res.Base)})
	}
	for _, x := range res.Sensitivities {
		out.Sensitivities = append(out.Sensitivities, RangeSensitivity{ID: x.ID, Share: Number(x.Share), Swing: Number(x.Swing), Narrowing: Number(x.Narrowing)})
	}
	for _, x := range res.Risks {
		out.Risks = append(out.Risks, RangeRiskAnswer{ID: x.ID, Mean: Number(x.Mean), Frequency: Number(x.Frequency), Share: Number(x.Share)})
	}
	for _, w := range res.Warnings {
		out.Warnings = append(out.Warnings, RangeWarning{Code: w.Code, Message: w.Message})
	}
	return out
}
