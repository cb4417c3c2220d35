// Package comparison sets schemes side by side by their whole range.
//
//	documents with their frozen jobs → Joint (handed in: one simulation of all on
//	common draws) → probabilities that one is cheaper, differences
//	documents → what each scheme weighs, costs, emits, and what is unsafe in it
//
// An assumption that two schemes share has the same draw in both, so that what they
// have in common cancels in their difference: two schemes with wide ranges can still
// be told apart.
package comparison

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ranges"
)

// Side is one estimate of a comparison.
type Side struct {
	ID       string // as the caller knows it
	Job      job.Job
	Document document.Document

	shown string // name in texts, where the scheme's is not enough
}

// name is the scheme, or where it has no name or shares it the caller's own.
func (s Side) name() string { return cmp.Or(s.shown, s.Document.Job.Scheme, s.ID) }

// toldApart tells schemes of one name apart.
func toldApart(sides []Side) []Side {
	out := slices.Clone(sides)
	times := map[string]int{}
	for _, s := range sides {
		times[s.Document.Job.Scheme]++
	}
	for i, s := range out {
		if times[s.Document.Job.Scheme] > 1 {
			out[i].shown = strings.TrimSpace(s.Document.Job.Scheme + " (" + s.ID + ")")
		}
	}
	return out
}

// Probability is an estimated probability with its standard error.
type Probability struct {
	Value document.Number `json:"value"`
	SE    document.Number `json:"standard_error"`
}

// Difference is the distribution of one total less another, trial by trial.
type Difference struct {
	Mean        document.Number `json:"mean"`
	MeanSE      document.Number `json:"mean_standard_error"`
	Percentiles []Percentile    `json:"percentiles"`
}

// Percentile is the difference not exceeded with probability P.
type Percentile struct {
	P     document.Number `json:"p"`
	Value document.Number `json:"value"`
	SE    document.Number `json:"standard_error"`
}

// Joint simulates jobs on common draws, on the engine at hand, with the sampling
// of the first: engine.Joint.
type Joint func(ctx context.Context, jobs []job.Job) (ranges.Comparison, error)

// Scheme is one estimate as it stands in the comparison.
type Scheme struct {
	ID          string                `json:"id"`
	Project     string                `json:"project"`
	Scheme      string                `json:"scheme"`
	Base        money.Decimal         `json:"base"`
	Contingency money.Decimal         `json:"contingency"`
	Total       money.Decimal         `json:"total" doc:"base and contingency at the scheme's own confidence"`
	Confidence  document.Number       `json:"confidence"`
	Mean        document.Number       `json:"mean" doc:"of the range"`
	Percentiles []document.Percentile `json:"percentiles"`
	Categories  []document.Category   `json:"categories"`
	Net         money.Decimal         `json:"net_t"`
	Delivered   money.Decimal         `json:"delivered_t"`
	Carbon      money.Decimal         `json:"carbon_kg,omitzero"`
	Cheapest    Probability           `json:"cheapest" doc:"probability that it is the cheapest"`
	Premium     *money.Decimal        `json:"split_premium,omitempty" doc:"what sizing by the split method would add to the base; negative where it saves too much"`
	Unsafe      []string              `json:"unsafe_members" doc:"marks whose section by the split method fails the exact checks"`
	UnsafeCost  *money.Decimal        `json:"unsafe_members_amount,omitempty" doc:"what of the premium comes from these alone"`
	Findings    int                   `json:"unsafe_findings"`
	Class       int                   `json:"estimate_class"`
}

// Pair is one scheme against another.
type Pair struct {
	First      string        `json:"first"`
	Second     string        `json:"second"`
	Cheaper    Probability   `json:"first_cheaper" doc:"probability that the first is cheaper"`
	Dearer     Probability   `json:"first_dearer" doc:"probability that the first is dearer; what is left of 1 is the probability of equal totals"`
	Base       money.Decimal `json:"base_difference" doc:"base of the first less base of the second"`
	Difference Difference    `json:"difference" doc:"total of the first less total of the second"`
	Sentence   string        `json:"sentence"`
}

// Comparison is several schemes side by side.
type Comparison struct {
	Caution  string   `json:"caution"`
	Currency string   `json:"currency"`
	Money    string   `json:"money"`
	Schemes  []Scheme `json:"schemes" doc:"in the order asked"`
	Pairs    []Pair   `json:"pairs"`
	Method   string   `json:"method"`
	Notes    []string `json:"notes"`
}

// Limits of a comparison.
const (
	Fewest = 2
	Most   = 16
)

// Build compares estimates. They must be in one currency; where they are in the
// money of different dates, a note says so.
func Build(ctx context.Context, sides []Side, joint Joint) (Comparison, error) {
	if len(sides) < Fewest || len(sides) > Most {
		return Comparison{}, fmt.Errorf("comparison: found %d estimates; accepted: %d to %d", len(sides), Fewest, Most)
	}
	sides = toldApart(sides)
	jobs := make([]job.Job, len(sides))
	for i, s := range sides {
		if c, first := s.Job.Settings.Currency, sides[0].Job.Settings.Currency; c != first {
			return Comparison{}, fmt.Errorf("comparison: found estimates in %s and %s; accepted: estimates in one currency", first, c)
		}
		jobs[i] = s.Job
	}
	r, err := joint(ctx, jobs)
	if err != nil {
		return Comparison{}, fmt.Errorf("comparison: %w", err)
	}
	out := Comparison{Caution: document.Caution, Currency: sides[0].Job.Settings.Currency, Money: sides[0].Document.Job.Money,
		Method: "All schemes simulated with the seed and sampling of the first, so that assumptions of the same id share their draws; probabilities and differences trial by trial, with the standard error between replicates. Discrete risks of the same name are one event.",
		Notes:  notes(sides)}
	for i, s := range sides {
		out.Schemes = append(out.Schemes, scheme(s, probability(r.Cheapest[i])))
	}
	for i := range sides {
		for j := i + 1; j < len(sides); j++ {
			out.Pairs = append(out.Pairs, pair(sides[i], sides[j], probability(r.Less[i][j]), probability(r.Less[j][i]), difference(r.Differences[i][j])))
		}
	}
	return out, nil
}

func probability(p ranges.Probability) Probability {
	return Probability{Value: document.Number(p.Value), SE: document.Number(p.SE)}
}

func difference(d ranges.Difference) Difference {
	out := Difference{Mean: document.Number(d.Mean), MeanSE: document.Number(d.MeanSE)}
	for _, p := range d.Percentiles {
		out.Percentiles = append(out.Percentiles, Percentile{P: document.Number(p.P), Value: document.Number(p.Value), SE: document.Number(p.SE)})
	}
	return out
}

func scheme(s Side, cheapest Probability) Scheme {
	d := s.Document
	out := Scheme{
		ID: s.ID, Project: d.Job.Project, Scheme: s.name(), Base: d.Totals.Base, Contingency: d.Totals.Contingency, Total: d.Totals.AtConfidence,
		Confidence: d.Totals.Confidence, Mean: d.Range.Mean, Percentiles: d.Range.Percentiles, Categories: d.Categories, Net: d.Totals.Net, Delivered: d.Totals.Delivered,
		Cheapest: cheapest, Unsafe: []string{}, Findings: d.Totals.Unsafe, Class: d.Class.Stated,
	}
	if d.Carbon != nil {
		out.Carbon = d.Carbon.Total
	}
	if d.Split != nil {
		out.Premium, out.Unsafe, out.UnsafeCost = d.Split.Difference, d.Split.UnsafeMembers, d.Split.UnsafeDifference
	}
	return out
}

// decisive is the probability from which one scheme is called the cheaper one.
const decisive = 0.6

func pair(a, b Side, cheaper, dearer Probability, diff Difference) Pair {
	return Pair{First: a.ID, Second: b.ID, Cheaper: cheaper, Dearer: dearer, Difference: diff, Base: a.Document.Totals.Base.Sub(b.Document.Totals.Base),
		Sentence: sentence(a.name(), b.name(), float64(cheaper.Value), float64(dearer.Value))}
}

// sentence says which of two is cheaper and how surely. Totals that are equal make
// neither cheaper.
func sentence(first, second string, cheaper, dearer float64) string {
	if cheaper < dearer {
		first, second, cheaper = second, first, dearer
	}
	switch {
	case cheaper == 0:
		return fmt.Sprintf("%s and %s cost the same in every trial.", first, second)
	case cheaper < decisive:
		return fmt.Sprintf("%s is cheaper than %s with a probability of %.0f %%; that is no decision on cost.", first, second, 100*cheaper)
	case cheaper > 0.995:
		return fmt.Sprintf("%s is cheaper than %s with a probability of more than 99 %%.", first, second)
	}
	return fmt.Sprintf("%s is cheaper than %s with a probability of %.0f %%.", first, second, 100*cheaper)
}

func notes(sides []Side) []string {
	out := []string{"Percentiles of two schemes do not subtract: the percentiles of the difference are those of trials, not of totals."}
	first := sides[0]
	for _, s := range sides[1:] {
		say := func(what, x, y string) {
			if x != y {
				out = append(out, fmt.Sprintf("%s and %s differ in %s: %s and %s.", first.name(), s.name(), what, x, y))
			}
		}
		say("the money of their totals", first.Document.Job.Money, s.Document.Job.Money)
		say("rate book", first.Document.Job.RateBook+" "+first.Document.Job.RateBookSHA256, s.Document.Job.RateBook+" "+s.Document.Job.RateBookSHA256)
		say("estimate class", fmt.Sprint(first.Document.Class.Stated), fmt.Sprint(s.Document.Class.Stated))
		say("confidence of their totals", confidence(first), confidence(s))
		say("design basis", first.Document.Job.DesignBasis, s.Document.Job.DesignBasis)
	}
	return out
}

func confidence(s Side) string {
	return fmt.Sprintf("P%.3g", 100*float64(s.Document.Totals.Confidence))
}
