package takeoff

import (
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/assumption"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// The ids of the first engine version, which key the random streams of old jobs.
func TestIDsOfAllowancesStay(t *testing.T) {
	a, err := FromBook(ratebook.Ratio(), schedule.Settings{EstimateClass: 4})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		got  Allowance
		id   string
		base float64
	}{
		{a.SizingBias, "allowance/sizing bias", 1}, {a.Bolts, "allowance/bolts", 1.02}, {a.Growth, "allowance/growth/class 4", 1.12},
		{a.Connections["tube booms"], "allowance/connections/tube booms", 1.12}, {a.Waste["plate"], "allowance/waste/plate", 1.14},
	} {
		if c.got.ID != c.id || !near(c.got.Value(), c.base) {
			t.Errorf("got %s = %g, want %s = %g", c.got.ID, c.got.Value(), c.id, c.base)
		}
	}
	if a.Norms != nil {
		t.Error("the ratio book has norms")
	}
	if _, err := FromBook(ratebook.Ratio(), schedule.Settings{EstimateClass: 6}); err == nil || !strings.Contains(err.Error(), "class 6") {
		t.Errorf("class 6: %v", err)
	}
}

// Every id that a quantity depends on stands in the entries, with the same spread;
// the haul distance of the job is entered by the schedule.
func TestEveryIDHasAnEntry(t *testing.T) {
	for _, book := range []ratebook.Book{ratebook.Ratio(), ratebook.UnitRate()} {
		for _, haul := range []float64{0, 80_000} {
			job := schedule.Settings{EstimateClass: 3, Coating: "galvanised and painted C5 high", HaulDistance: haul}
			a, err := FromBook(book, job)
			if err != nil {
				t.Fatal(err)
			}
			entries := map[string]Entry{}
			ids := []string{}
			for _, e := range Entries(book, job) {
				entries[e.ID] = e
				ids = append(ids, e.ID)
				if e.Statement == "" || e.Figure.Source == "" || e.Figure.Author == "" || e.Figure.Confidence == "" {
					t.Errorf("%s is incomplete: %+v", e.ID, e)
				}
				if e.Kind == assumption.Default == (e.Value == "") {
					t.Errorf("%s of kind %s has the value %q", e.ID, e.Kind, e.Value)
				}
			}
			if !slices.IsSorted(ids) || len(entries) != len(ids) {
				t.Errorf("ids are not sorted or not unique: %v", ids)
			}
			items := count(t, append(randomPieces(t, 1, 200), block(30, 3, 3, 90_000)), a, SettingsOf(book, job))
			for id := range Used(items) {
				if _, ok := entries[id]; !ok && id != HaulInputID {
					t.Errorf("book %s: %s has no entry", book.Name, id)
				}
			}
			for _, it := range items {
				for _, q := range it.Quantities {
					for _, f := range q.Factors {
						if entries[f.ID].Figure.Spread != f.Spread {
							t.Errorf("%s: the entry has another spread", f.ID)
						}
					}
				}
			}
			if got := Used(items)[HaulInputID]; got != (haul > 0 && book.Norms != nil) {
				t.Errorf("book %s, haul %g m: the job's distance is used: %v", book.Name, haul, got)
			}
		}
	}
}

func TestSettingsOfAJob(t *testing.T) {
	book, job := ratebook.Ratio(), schedule.Settings{Coating: "C4 high", ExecutionClass: schedule.EXC3, HaulDistance: 80_000, StockLengths: []float64{12}, Kerf: 0.004, Purchase: schedule.PurchaseFirstFit}
	limits := ratebook.AmericanLimits()
	limits.Vehicle.Source = ""
	book.Limits = &limits
	want := Settings{Coating: "C4 high", Execution: schedule.EXC3, Haul: 80, Limits: limits, Stock: []float64{12}, Kerf: 0.004, Purchase: schedule.PurchaseFirstFit}
	if diff := cmp.Diff(want, SettingsOf(book, job)); diff != "" {
		t.Errorf("settings (-want +got):\n%s", diff)
	}
	for _, e := range Entries(book, job) {
		if e.ID == VehicleID && (e.Value != "14.63 × 2.591 × 2.591 m, 21.772 t; 0 is no limit" || e.Figure.Source != "rate book ratio") {
			t.Errorf("vehicle %q by %q", e.Value, e.Figure.Source)
		}
	}
	book.Limits = nil
	if diff := cmp.Diff(ratebook.DefaultLimits(), SettingsOf(book, job).Limits); diff != "" {
		t.Errorf("limits of a book without any (-want +got):\n%s", diff)
	}
}
