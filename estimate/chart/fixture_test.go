package chart

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

func amount(t testing.TB, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// lognormal fills a range with the exact quantiles of a lognormal total, the
// ends cut at one in ten thousand as a simulation would.
func lognormal(median, deviation float64, base float64, confidence float64) document.Range {
	d := distuv.LogNormal{Mu: math.Log(median), Sigma: deviation}
	r := document.Range{
		Mean: document.Number(d.Mean()), SD: document.Number(d.StdDev()), BaseAt: document.Number(d.CDF(base)),
		Method: "exact quantiles, for tests",
	}
	for i := 0; i <= 100; i++ {
		p := min(max(float64(i)/100, 0.0001), 0.9999)
		r.Curve = append(r.Curve, document.Number(d.Quantile(p)))
	}
	levels := []float64{0.1, 0.5, 0.8, 0.9}
	if confidence != 0.8 {
		levels = append(levels, confidence)
	}
	for _, p := range levels {
		r.Percentiles = append(r.Percentiles, document.Percentile{
			P: document.Number(p), Value: document.Number(d.Quantile(p)), SE: document.Number(0.001 * d.Quantile(p)),
		})
	}
	return r
}

// brackwater is an estimate of the size of the demo's: an invented loading quay.
func brackwater(t testing.TB) document.Document {
	d := document.Document{EngineVersion: 1, Caution: document.Caution}
	d.Job = document.Job{
		Project: "Brackwater salt works, loading quay", Scheme: "inner support", Currency: "EUR",
		BaseDate: "2026-06-01", Money: "base-date money", EstimateClass: 4,
	}
	d.Totals.Base = amount(t, "1053482.17")
	d.Totals.Confidence = 0.8
	d.Range = lognormal(1.13e6, 0.21, 1053482.17, 0.8)
	at := amount(t, "1348406.12")
	d.Totals.AtConfidence, d.Totals.Contingency = at, at.Sub(d.Totals.Base)
	for _, c := range []struct {
		name, amount string
		low, high    float64
	}{
		{"material", "214381.20", 186e3, 251e3}, {"fabrication", "469120.55", 361e3, 640e3},
		{"coating", "98120.00", 71e3, 139e3}, {"inspection", "39248.11", 21e3, 61e3},
		{"shipping", "38012.31", 20e3, 60e3}, {"erection", "145600.00", 96e3, 254e3},
		{"engineering", "49000.00", 41e3, 70e3},
	} {
		d.Categories = append(d.Categories, document.Category{
			Category: c.name, Amount: amount(t, c.amount), P10: document.Number(c.low), P90: document.Number(c.high),
		})
	}
	for _, g := range []struct{ name, net, delivered string }{
		{"boom", "61.240", "78.203"}, {"conveyor gallery, salt store to quay", "44.100", "52.011"},
		{"trestles", "31.877", "36.590"}, {"stairs and rails", "4.310", "5.102"}, {"walkway", "12.940", "14.803"},
	} {
		d.Groups = append(d.Groups, document.Group{Group: g.name, Net: amount(t, g.net), Delivered: amount(t, g.delivered)})
	}
	return d
}
