package job

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

func settings() schedule.Settings {
	return schedule.Settings{Project: "P", Scheme: "S", DesignBasis: "allowable", Factor: 3, EstimateClass: 5, Currency: "EUR", Confidence: 0.8}
}

func TestFreezeTakesTheBaseDateOfTheBookAndSaysSo(t *testing.T) {
	j, err := Freeze(schedule.Schedule{Settings: settings()}, Source{}, ratebook.Ratio(), nil, DefaultSampling())
	if err != nil {
		t.Fatal(err)
	}
	if want := ratebook.Ratio().BaseDate; j.Settings.BaseDate != want {
		t.Errorf("base date: got %q, want the book's %q", j.Settings.BaseDate, want)
	}
	if len(j.Defaults) != 1 || j.Defaults[0].ID != "default/base date" {
		t.Errorf("the default is not in the register: %+v", j.Defaults)
	}
	given := settings()
	given.BaseDate = "2025-01-31"
	j, err = Freeze(schedule.Schedule{Settings: given}, Source{}, ratebook.Ratio(), nil, DefaultSampling())
	if err != nil || j.Settings.BaseDate != "2025-01-31" || len(j.Defaults) != 0 {
		t.Errorf("a given base date was replaced: %q, %+v, %v", j.Settings.BaseDate, j.Defaults, err)
	}
}

func TestFreezeRefuses(t *testing.T) {
	yen := settings()
	yen.Currency = "JPY"
	bad := ratebook.Multiplier{Name: "x", Scope: ratebook.ProjectScope, Categories: []string{"roofing"}, Spread: spread.NewFixed(1), Reason: "r"}
	early := settings()
	early.SpendDate = "2020-01-01"
	for name, c := range map[string]struct {
		s        schedule.Settings
		edited   []ratebook.Multiplier
		sampling Sampling
		want     string
	}{
		"another currency": {yen, nil, DefaultSampling(), "JPY"},
		"spent too early":  {early, nil, DefaultSampling(), "2020-01-01"},
		"few replicates":   {settings(), nil, Sampling{Replicates: 31, Trials: 4096}, "31"},
		"few trials":       {settings(), nil, Sampling{Replicates: 32, Trials: 63}, "63"},
		"too many trials":  {settings(), nil, Sampling{Replicates: 4000, Trials: 4096}, "4000 × 4096"},
		"a bad multiplier": {settings(), []ratebook.Multiplier{bad}, DefaultSampling(), "roofing"},
	} {
		_, err := Freeze(schedule.Schedule{Settings: c.s}, Source{}, ratebook.Ratio(), c.edited, c.sampling)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error that names %q", name, err, c.want)
		}
	}
}

func TestTheOrderOfMultipliersDoesNotMatter(t *testing.T) {
	a := ratebook.Multiplier{Name: "tides", Scope: ratebook.ProjectScope, Categories: []string{"erection"}, Spread: spread.NewFixed(1.2), Reason: "r"}
	b := ratebook.Multiplier{Name: "height", Scope: ratebook.ProjectScope, Categories: []string{"erection"}, Spread: spread.NewFixed(1.1), Reason: "r"}
	var sums []string
	for _, edited := range [][]ratebook.Multiplier{{a, b}, {b, a}} {
		j, err := Freeze(schedule.Schedule{Settings: settings()}, Source{}, ratebook.Ratio(), edited, DefaultSampling())
		if err != nil {
			t.Fatal(err)
		}
		_, sum, err := j.Canonical()
		if err != nil {
			t.Fatal(err)
		}
		sums = append(sums, sum)
	}
	if sums[0] != sums[1] {
		t.Error("the same multipliers in another order give another job")
	}
}

func TestCanonicalRoundTrip(t *testing.T) {
	j, err := Freeze(schedule.Schedule{Settings: settings(), Members: []schedule.Member{{Mark: "<B1> & co", Quantity: 2, Length: 6.1}}}, Source{Name: "x.csv"}, ratebook.Ratio(), nil, DefaultSampling())
	if err != nil {
		t.Fatal(err)
	}
	data, sum, err := j.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	back, err := Parse(data)
	if err != nil {
		t.Fatal(err)
	}
	again, sum2, err := back.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	if sum != sum2 {
		t.Errorf("read and written again it differs: %s", cmp.Diff(string(data), string(again)))
	}
	for _, bad := range []string{"{}{}", `{"unknown": 1}`, "[]", ""} {
		if _, err := Parse([]byte(bad)); err == nil {
			t.Errorf("Parse(%q) was accepted", bad)
		}
	}
}

// A unit-rate book prices a blank coating as one of its systems; the job says which.
func TestFreezeTakesTheSystemsOfTheBookAndSaysSo(t *testing.T) {
	j, err := Freeze(schedule.Schedule{Settings: settings()}, Source{}, ratebook.UnitRate(), nil, DefaultSampling())
	if err != nil {
		t.Fatal(err)
	}
	ids := map[string]string{}
	for _, d := range j.Defaults {
		ids[d.ID] = d.Value
	}
	if j.Settings.Coating == "" || ids["default/coating"] != j.Settings.Coating || j.Settings.ExecutionClass == "" || ids["default/execution class"] != j.Settings.ExecutionClass {
		t.Errorf("coating %q and class %q were taken; the register says %v", j.Settings.Coating, j.Settings.ExecutionClass, ids)
	}
	given := settings()
	given.Coating, given.ExecutionClass = "none", "EXC3"
	if j, err = Freeze(schedule.Schedule{Settings: given}, Source{}, ratebook.UnitRate(), nil, DefaultSampling()); err != nil || j.Settings.Coating != "none" || j.Settings.ExecutionClass != "EXC3" {
		t.Errorf("what was given was replaced: %q, %q, %v", j.Settings.Coating, j.Settings.ExecutionClass, err)
	}
}

// The conditions of a site put the book's multipliers for them in force, no others.
func TestSiteConditionsPutMultipliersInForce(t *testing.T) {
	s := settings()
	s.SiteConditions = []string{"tidal"}
	book := ratebook.UnitRate()
	j, err := Freeze(schedule.Schedule{Settings: s}, Source{}, book, nil, DefaultSampling())
	if err != nil {
		t.Fatal(err)
	}
	if got, want := len(j.Multipliers), len(book.Multipliers)+1; got != want {
		t.Errorf("%d multipliers are in force, want %d: those of the book and that of the tide", got, want)
	}
}
