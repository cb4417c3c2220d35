package engine_test

import (
	"context"
	"math/rand/v2"
	"slices"
	"testing"
	"time"

	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
	"spanwright/estimate/workbook"
)

// largeRows is the size of the large job of the benchmarks.
const largeRows = 10_000

// largeBook is a workbook of many rows that can be sized, with its Job sheet.
func largeBook(tb testing.TB) []byte {
	tb.Helper()
	rows := randomRows(rand.New(rand.NewPCG(10, 2026)), largeRows)
	b := sheet.NewBuilder()
	columns := make([]sheet.Column, len(rows[0]))
	for i, h := range rows[0] {
		columns[i] = sheet.Column{Head: h}
	}
	b.Sheet("Schedule", columns...)
	for _, row := range rows[1:] {
		cells := make([]sheet.Value, len(row))
		for i, text := range row {
			cells[i] = sheet.TextOf(text)
		}
		b.Row(cells...)
	}
	b.Sheet("Job", sheet.Column{Head: "Key"}, sheet.Column{Head: "Value"})
	for _, kv := range [][2]string{{"Project", "Brackwater loading quay"}, {"Scheme", "large"}, {"Standard", "allowable"}, {"Estimate class", "4"}, {"Currency", "EUR"}, {"Base date", "2026-06-01"}, {"Coating", "C4 high"}, {"Execution class", "EXC2"}} {
		b.Row(sheet.TextOf(kv[0]), sheet.TextOf(kv[1]))
	}
	data, err := b.Bytes()
	if err != nil {
		tb.Fatal(err)
	}
	return data
}

func largeJob(tb testing.TB, data []byte) job.Job {
	tb.Helper()
	limits := sheet.DefaultLimits()
	limits.Rows = largeRows + 100
	book, err := sheet.Open(data, "large.xlsx", "", limits)
	if err != nil {
		tb.Fatal(err)
	}
	rates := ratebook.UnitRate()
	s, err := schedule.Read(context.Background(), book, schedule.Options{MaxMembers: largeRows, ConnectionClasses: rates.ConnectionClasses()})
	if err != nil {
		tb.Fatal(err)
	}
	return freeze(tb, s, rates, nil, job.DefaultSampling())
}

// A workbook of 10,000 rows from its bytes to the priced workbook, with the share of
// each stage.
func BenchmarkWorkbookToAnswer(b *testing.B) {
	data := largeBook(b)
	b.ResetTimer()
	var spent [5]time.Duration
	lap := func(stage int, since time.Time) time.Time {
		now := time.Now()
		spent[stage] += now.Sub(since)
		return now
	}
	for b.Loop() {
		at := time.Now()
		j := largeJob(b, data)
		at = lap(0, at)
		sized, err := engine.Size(context.Background(), j, nil)
		if err != nil {
			b.Fatal(err)
		}
		at = lap(1, at)
		p, err := sized.Price(context.Background(), j)
		if err != nil {
			b.Fatal(err)
		}
		at = lap(2, at)
		d, err := sized.Estimate(context.Background(), j, nil)
		if err != nil {
			b.Fatal(err)
		}
		at = lap(3, at)
		if !d.Totals.Base.Equal(p.Base) {
			b.Fatalf("the base is %s and %s", d.Totals.Base, p.Base)
		}
		if _, err := workbook.XLSX(d); err != nil {
			b.Fatal(err)
		}
		lap(4, at)
	}
	spent[3] -= spent[2] // the document prices again
	whole := spent[0] + spent[1] + spent[2] + spent[3] + spent[4]
	for i, name := range []string{"read", "size", "price", "range+document", "workbook"} {
		b.ReportMetric(100*float64(spent[i])/float64(whole), name+"-%")
	}
	b.ReportMetric(whole.Seconds()/float64(b.N), "s/workbook")
}

// Pricing a job of 10,000 rows again after one multiplier was changed.
func BenchmarkRepriceLargeJob(b *testing.B) {
	j := largeJob(b, largeBook(b))
	j.Multipliers = append(slices.Clone(j.Multipliers), ratebook.Multiplier{Name: "tides", Scope: ratebook.ProjectScope, Categories: []string{ratebook.Erection},
		Spread: spread.NewFixed(1.1), Reason: "tidal work", Author: "bench"})
	sized, err := engine.Size(context.Background(), j, nil)
	if err != nil {
		b.Fatal(err)
	}
	counted, err := sized.Takeoff(context.Background(), j)
	if err != nil {
		b.Fatal(err)
	}
	lines := 0
	for i := 0; b.Loop(); i++ {
		j.Multipliers[len(j.Multipliers)-1].Spread = spread.NewFixed([]float64{1.1, 1.15, 1.2}[i%3])
		p, err := counted.Price(j)
		if err != nil {
			b.Fatal(err)
		}
		lines = len(p.Lines)
	}
	b.ReportMetric(float64(lines), "lines")
}

// What is priced again from the counted quantities is what a new estimate says.
func TestPricingAgainIsANewEstimate(t *testing.T) {
	j := unitJob(t)
	sized, err := engine.Size(context.Background(), j, nil)
	if err != nil {
		t.Fatal(err)
	}
	counted, err := sized.Takeoff(context.Background(), j)
	if err != nil {
		t.Fatal(err)
	}
	changed := deepCopy(t, j)
	for i := range changed.Multipliers {
		if changed.Multipliers[i].Name == "tides" {
			changed.Multipliers[i].Spread = spread.NewTriangular(1.1, 1.35, 1.8)
		}
	}
	again, err := counted.Price(changed)
	if err != nil {
		t.Fatal(err)
	}
	fresh := run(t, changed)
	if !again.Base.Equal(fresh.Totals.Base) || again.Base.Equal(run(t, j).Totals.Base) {
		t.Errorf("priced again the base is %s, in a new estimate %s", again.Base, fresh.Totals.Base)
	}
	other := deepCopy(t, j)
	other.Members[0].Quantity++
	if _, err := sized.Estimate(context.Background(), other, nil); err == nil {
		t.Error("a job with other members was estimated from the sizing of this one")
	}
}
