package dashboard

import (
	"strings"

	"spanwright/estimate/chart"
	"spanwright/estimate/document"
)

// firmest is the number of assumptions shown that would narrow the range most.
const firmest = 8

// sensitivityRow is what one assumption does to the range.
type sensitivityRow struct {
	Statement, ID, Share, Swing, Narrowing, Error string
	Noise                                         bool // the narrowing is not told from nothing
}

// riskRow is one discrete risk.
type riskRow struct{ Name, Probability, Mean, Share, Contingency string }

// carbonRow is the embodied carbon of one module, or of all.
type carbonRow struct{ Name, Amount string }

// sensitivities are those that would narrow the range most, the largest first.
func sensitivities(d document.Document) []sensitivityRow {
	statements := map[string]string{}
	for _, e := range d.Assumptions {
		statements[e.ID] = e.Statement
	}
	money := func(n document.Number) string { return chart.Money(float64(n), d.Job.Currency) }
	var out []sensitivityRow
	for _, s := range d.Range.Sensitivities[:min(firmest, len(d.Range.Sensitivities))] {
		out = append(out, sensitivityRow{Statement: brief(statements[s.Assumption]), ID: s.Assumption, Share: places(100*float64(s.Share), 0) + space + "%",
			Swing: money(s.Swing), Narrowing: money(s.Narrowing), Error: money(s.NarrowingSE), Noise: !(s.Narrowing > 2*s.NarrowingSE)})
	}
	return out
}

// brief is what a statement is about: the register below has it whole.
func brief(statement string) string {
	for _, end := range []string{": ", "; "} {
		statement, _, _ = strings.Cut(statement, end)
	}
	return statement
}

// risks are the discrete risks with what they add to the range.
func risks(d document.Document) []riskRow {
	var out []riskRow
	for _, k := range d.Range.Risks {
		out = append(out, riskRow{Name: k.Name, Probability: places(100*float64(k.Probability), 0) + space + "%", Mean: chart.Money(float64(k.Mean), d.Job.Currency),
			Share: places(100*float64(k.Share), 1) + space + "%", Contingency: exact(k.Contingency)})
	}
	return out
}

// carbon is the embodied carbon by module, in tonnes of CO₂ equivalent; none where
// the rate book has no factors.
func carbon(d document.Document) []carbonRow {
	if d.Carbon == nil {
		return nil
	}
	tonnes := func(kg float64) string { return places(kg/1000, 1) + space + "t" }
	var out []carbonRow
	for _, m := range d.Carbon.Modules {
		out = append(out, carbonRow{"module " + m.Module, tonnes(m.Amount.Float64())})
	}
	out = append(out, carbonRow{"at likely values", tonnes(d.Carbon.Total.Float64())})
	for _, p := range d.Carbon.Percentiles {
		out = append(out, carbonRow{percentile(float64(p.P)), tonnes(float64(p.Value))})
	}
	return out
}
