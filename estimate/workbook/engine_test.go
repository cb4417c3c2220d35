package workbook

import (
	"context"
	"os"
	"strconv"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
)

// demoJob prices the demo's schedule with a rate book by the engine.
func demoJob(t *testing.T, book ratebook.Book) document.Document {
	t.Helper()
	data, err := os.ReadFile("../../testdata/brackwater.xlsx")
	if err != nil {
		t.Fatal(err)
	}
	b, err := sheet.Open(data, "brackwater.xlsx", "", sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	s, err := schedule.Read(context.Background(), b, schedule.Options{MaxMembers: 20_000})
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Freeze(s, job.Source{Name: "brackwater.xlsx"}, book, nil, job.Sampling{Seed: 7, Replicates: 32, Trials: 64})
	if err != nil {
		t.Fatal(err)
	}
	j.EngineVersion, j.Data = document.EngineVersion, engine.Data()
	d, err := engine.Run(context.Background(), j, nil)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// The demo by the engine with both starting books: LibreOffice reaches the
// engine's figures, and after one multiplier or allowance is changed in the sheet
// those that the engine gives after the same change of the book. Every figure of
// the document is in the trace.
func TestTheEnginesEstimateAfterAChange(t *testing.T) {
	books := map[string]recalculated{}
	for name, book := range map[string]func() ratebook.Book{"ratio": ratebook.Ratio, "unit-rate": ratebook.UnitRate} {
		d := demoJob(t, book())
		data := write(t, d)
		books[name] = recalculated{data, d, d.Totals.Base}
		traced := map[string]bool{}
		for _, r := range rowsOf(t, data, traceSheet, 1) {
			traced[r[0]] = true
		}
		for id := range d.Figures() {
			if !traced[id] {
				t.Errorf("%s: the figure %s is not in the trace", name, id)
			}
		}
		class := strconv.Itoa(d.Job.EstimateClass)
		b := book()
		growth := b.Growth[class]
		growth.Spread.Likely += 0.03
		b.Growth[class] = growth
		after := demoJob(t, b)
		to := strconv.FormatFloat(growth.Spread.Likely, 'g', 15, 64)
		books[name+" growth"] = recalculated{changeCell(t, data, "allowance_growth_class_"+class, to), after, d.Totals.Base}
		b = book()
		m := &b.Multipliers[len(b.Multipliers)-1]
		m.Spread.Likely *= 1.15
		after = demoJob(t, b)
		to = strconv.FormatFloat(m.Spread.Likely, 'g', 15, 64)
		books[name+" multiplier"] = recalculated{changeCell(t, data, newNamer().name("multiplier", "multiplier/"+m.Name+"/"+string(m.Scope)), to), after, d.Totals.Base}
		if after.Totals.Base.Equal(d.Totals.Base) {
			t.Errorf("%s: the multiplier %s moves nothing", name, m.Name)
		}
	}
	bytes := map[string][]byte{}
	for name, b := range books {
		bytes[name] = b.data
	}
	calculated := recalculate(t, bytes)
	for name, b := range books {
		t.Run(name, func(t *testing.T) { compare(t, b, calculated[name]) })
	}
}
