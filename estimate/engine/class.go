package engine

import (
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// class says what the estimate class rests on, and puts the band beside published
// ones. The class never follows from the band.
func (r *run) class() document.Class {
	s := r.job.Settings
	c := document.Class{Stated: s.EstimateClass, Why: "as stated by the job; no checklist of what is defined was given"}
	if len(s.Definition) > 0 {
		suggested, _, why := schedule.ClassFromDefinition(s.Definition)
		c.Suggested, c.Why = suggested, why
		for _, d := range s.Definition {
			c.Definition = append(c.Definition, document.Definition{Item: d.Item, State: d.State})
		}
	}
	p10, p50, p90 := r.at(0.1), r.at(0.5), r.at(0.9)
	if p50 > 0 {
		c.Low, c.High = document.Number(p10/p50-1), document.Number(p90/p50-1)
	}
	for _, t := range ratebook.TypicalBands(s.EstimateClass) {
		c.Typical = append(c.Typical, document.Typical{Industry: t.Industry, LowFrom: document.Number(t.LowFrom), LowTo: document.Number(t.LowTo),
			HighFrom: document.Number(t.HighFrom), HighTo: document.Number(t.HighTo), Source: t.Source})
	}
	return c
}

// at is a percentile of the range.
func (r *run) at(p float64) float64 {
	for _, q := range r.ranged.Percentiles {
		if q.P == p {
			return q.Value
		}
	}
	return 0
}

// classFindings says where the checklist suggests another class, and where the
// band lies outside every published one.
func classFindings(c document.Class) []document.Finding {
	var out []document.Finding
	if c.Suggested != 0 && c.Suggested != c.Stated {
		out = append(out, document.Finding{Severity: document.Doubtful, Code: "class-differs", Subject: "total", Figures: []string{"range", "contingency"},
			Message: fmt.Sprintf("The job states estimate class %d; what is defined suggests class %d. %s", c.Stated, c.Suggested, sentence(c.Why))})
	}
	if len(c.Typical) == 0 || c.Low == 0 && c.High == 0 {
		return out // no band, or none about a P50 at or below zero
	}
	narrow, wide := true, true
	for _, t := range c.Typical {
		narrow = narrow && c.High < t.HighFrom && c.Low > max(t.LowFrom, t.LowTo)
		wide = wide && (c.High > t.HighTo || c.Low < min(t.LowFrom, t.LowTo))
	}
	var word string
	switch {
	case narrow:
		word = "narrower"
	case wide:
		word = "wider"
	default:
		return out
	}
	return append(out, document.Finding{Severity: document.Notice, Code: "band-untypical", Subject: "total", Figures: []string{"range"},
		Message: fmt.Sprintf("The band of %+.0f %% to %+.0f %% about P50 is %s than is typical for class %d (%s). The class never follows from the band.",
			100*float64(c.Low), 100*float64(c.High), word, c.Stated, c.Typical[0].Source)})
}
