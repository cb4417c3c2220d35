package comparison_test

import (
	"context"
	"errors"
	"strings"
	"testing"

	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ranges"
	"spanwright/estimate/spread"
)

func TestBuildRefuses(t *testing.T) {
	one := sides(t, byHand(t, spread.NewFixed(2000), spread.NewFixed(400)))
	other := one[1]
	other.Job.Settings.Currency = "USD"
	broken := errors.New("the draws broke")
	never := func(context.Context, []job.Job) (ranges.Comparison, error) {
		t.Error("simulated what is refused")
		return ranges.Comparison{}, nil
	}
	for _, c := range []struct {
		name  string
		sides []comparison.Side
		joint comparison.Joint
		want  string
	}{
		{"none", nil, never, "found 0 estimates; accepted: 2 to 16"},
		{"one estimate", one[:1], never, "found 1 estimates; accepted: 2 to 16"},
		{"too many", make([]comparison.Side, comparison.Most+1), never, "found 17 estimates"},
		{"two currencies", []comparison.Side{one[0], other}, never, "EUR and USD; accepted: estimates in one currency"},
		{"a failing simulation", one, func(context.Context, []job.Job) (ranges.Comparison, error) { return ranges.Comparison{}, broken }, "the draws broke"},
	} {
		_, err := comparison.Build(context.Background(), c.sides, c.joint)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v, want %q", c.name, err, c.want)
		}
	}
	if _, err := comparison.Build(context.Background(), one, func(context.Context, []job.Job) (ranges.Comparison, error) { return ranges.Comparison{}, broken }); !errors.Is(err, broken) {
		t.Errorf("the cause is lost in %v", err)
	}
}

// A scheme against itself: the difference is exactly 0, each is the cheapest in half of
// the trials, and neither is called cheaper.
func TestAgainstItself(t *testing.T) {
	s := sides(t, byHand(t, spread.NewTriangular(2000, 4000, 6000), spread.NewTriangular(300, 400, 600)))[0]
	c, err := comparison.Build(context.Background(), []comparison.Side{s, s}, engine.Joint)
	if err != nil {
		t.Fatal(err)
	}
	p := c.Pairs[0]
	if p.Difference.Mean != 0 || p.Difference.MeanSE != 0 || p.Base.Sign() != 0 || p.Cheaper.Value != 0 || p.Dearer.Value != 0 {
		t.Errorf("against itself %+v", p)
	}
	for _, q := range p.Difference.Percentiles {
		if q.Value != 0 || q.SE != 0 {
			t.Errorf("P%v of the difference is %v ± %v, want 0", q.P, q.Value, q.SE)
		}
	}
	for _, x := range c.Schemes {
		if x.Cheapest.Value != 0.5 {
			t.Errorf("the cheapest with %v, want 0.5", x.Cheapest.Value)
		}
	}
	if p.Sentence != "A (A) and A (A) cost the same in every trial." {
		t.Errorf("sentence %q", p.Sentence)
	}
}

// Two made-up schemes at different confidence, in different money, with the split
// premium of one: the text shows each percentile under its own probability.
func TestText(t *testing.T) {
	amount := func(text string) money.Decimal {
		d, err := money.Parse(text)
		if err != nil {
			t.Fatal(err)
		}
		return d
	}
	premium, unsafe := amount("-1250.00"), amount("-400.00")
	side := func(name, base string, confidence document.Number, p ...document.Percentile) comparison.Side {
		var d document.Document
		d.Job.Scheme, d.Job.Money, d.Job.RateBook, d.Job.DesignBasis = name, "base-date money of 2026-06-01", "unit-rate", "en1993"
		d.Totals.Base, d.Totals.Contingency, d.Totals.Confidence, d.Totals.Delivered = amount(base), amount("100.00"), confidence, amount("12.500")
		d.Range.Percentiles, d.Class.Stated = p, 4
		return comparison.Side{ID: name, Job: job.Job{}, Document: d}
	}
	a := side("two trestles", "1000.00", 0.8, document.Percentile{P: 0.5, Value: 1049.6}, document.Percentile{P: 0.8, Value: 123456})
	b := side("one trestle", "1100.00", 0.7, document.Percentile{P: 0.5, Value: 1150}, document.Percentile{P: 0.7, Value: 1200}, document.Percentile{P: 0.8, Value: 1300})
	b.Document.Job.Money = "outturn money of 2027-06-01"
	b.Document.Split = &document.SplitSummary{Difference: &premium, UnsafeDifference: &unsafe, UnsafeMembers: []string{"LB1"}}
	joint := func(context.Context, []job.Job) (ranges.Comparison, error) {
		none := ranges.Difference{}
		d := ranges.Difference{Mean: -123.4, Percentiles: []ranges.Percentile{{P: 0.1, Value: -250}, {P: 0.9, Value: 10}}}
		return ranges.Comparison{Cheapest: []ranges.Probability{{Value: 0.9981}, {Value: 0.0019}},
			Less: [][]ranges.Probability{{{}, {Value: 0.9981}}, {{Value: 0.0019}, {}}}, Differences: [][]ranges.Difference{{none, d}, {d, none}}}, nil
	}
	c, err := comparison.Build(context.Background(), []comparison.Side{a, b}, joint)
	if err != nil {
		t.Fatal(err)
	}
	golden(t, "testdata/comparison.txt", comparison.Text(c))
	if text := comparison.Text(comparison.Comparison{}); text == "" {
		t.Error("an empty comparison has no text")
	}
}
