package engine_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// unitSchedule has joints, concrete, coatings and execution classes of its own
// beside rows by mass, in quantities that one per cent moves in every driver.
const unitSchedule = `Mark,Group,Kind,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Section or family,Grade,Mass if not sized (kg/m),Area (m²),Joints,Concrete (m³),Coating,Execution class
B1,Gallery,beam,5000,6,simple,2,3,IPE,S275,,,,,,
B2,Gallery,beam,20000,5,simple,1,3,HEA,S275,,,6 pinned; 1 site splice,,C5 high,EXC3
B3,Bridge,boom,9000,12,simple,0.8,1.1,CHS,S355,,,2 flanged tube; 2 moment,,hot-dip galvanised,
B4,Bridge,beam,9000,18,simple,0.8,1.1,HEB,S355,,,,,,
F1,Bridge,foundation,200,,,,,,,,,,4.5,,
G1,Gallery,grating,1000,8,not sized,,,,,28.5 kg/m²,12,,,,
H1,Gallery,handrail,20000,10,not sized,,,,,14.5,,,,none,
`

func unitJob(t *testing.T, pairs ...string) job.Job {
	t.Helper()
	table := table(append([]string{"Project", "P", "Scheme", "S", "Base date", "2026-06-01", "Standard", "en1993", "Coating", "C4 high", "Execution class", "EXC2",
		"Haul distance (km)", "140", "Site conditions", "over water; tidal", "Tax (%)", "19", "Owner's costs", "yes"}, pairs...)...)
	s := readCSV(t, []byte(unitSchedule), table)
	s.Risks = []schedule.Risk{
		{Name: "rock", Probability: 0.5, Impact: spread.NewTriangular(2e8, 5e8, 9e8), Owner: "marine engineer"},
		{Name: "second-hand crane", Probability: 0.4, Impact: spread.NewTriangular(-4e8, -2e8, -1e8)},
	}
	edited := []ratebook.Multiplier{
		{Name: "tides", Scope: ratebook.GroupScope, Subject: "Bridge", Categories: []string{ratebook.Erection, ratebook.Inspection}, Spread: spread.NewTriangular(1, 1.2, 1.6), Reason: "tidal work", Author: "test", Version: 3},
		{Name: "reach", Scope: ratebook.MemberScope, Subject: "B2", Categories: []string{ratebook.Erection}, Spread: spread.NewPERT(1, 1.3, 2), Group: "labour", Reason: "hard to reach", Author: "test", Version: 1},
	}
	book := ratebook.UnitRate()
	for i := range book.Rates {
		if book.Rates[i].ID == "zinc" { // a price in another currency
			book.Rates[i].Currency = "USD"
		}
	}
	return freeze(t, s, book, edited, quick)
}

// figuresOf returns every figure of a book by the id of its register entry.
func figuresOf(j *job.Job) map[string]func(func(*ratebook.Figure)) {
	out := map[string]func(func(*ratebook.Figure)){}
	b := &j.Book
	one := func(id string, f *ratebook.Figure) { out[id] = func(move func(*ratebook.Figure)) { move(f) } }
	many := func(id func(string) string, m map[string]ratebook.Figure) {
		for k := range m {
			out[id(k)] = func(move func(*ratebook.Figure)) {
				f := m[k]
				move(&f)
				m[k] = f
			}
		}
	}
	for i := range b.Rates {
		one(pricing.RateID(b.Rates[i]), &b.Rates[i].Figure)
	}
	for i := range b.Carbon {
		one(pricing.CarbonID(b.Carbon[i]), &b.Carbon[i].Figure)
	}
	one(takeoff.BoltsID, &b.Bolts)
	one(takeoff.BiasID, &b.SizingBias)
	many(takeoff.ConnectionID, b.Connections)
	many(takeoff.WasteID, b.Waste)
	many(takeoff.ShopHoursID, b.Norms.ShopHours)
	many(takeoff.SiteHoursID, b.Norms.SiteHours)
	out[takeoff.GrowthID(j.Settings.EstimateClass)] = func(move func(*ratebook.Figure)) {
		f := b.Growth["5"]
		move(&f)
		b.Growth["5"] = f
	}
	n := b.Norms
	for id, f := range map[string]*ratebook.Figure{takeoff.SurfaceID: &n.Surface, takeoff.RowSurfaceID: n.SurfaceByMass, takeoff.LoadUseID: &n.LoadUse, takeoff.LiftDaysID: &n.LiftDays, takeoff.CrewID: &n.Crew, takeoff.WeekHoursID: &n.WeekHours, takeoff.HaulID: &n.HaulDistance} {
		one(id, f)
	}
	for kind := range n.Joints {
		for what, pick := range map[string]func(*ratebook.JointNorm) *ratebook.Figure{
			"mass": func(x *ratebook.JointNorm) *ratebook.Figure { return &x.Mass }, "bolts": func(x *ratebook.JointNorm) *ratebook.Figure { return &x.Bolts },
			"shop hours": func(x *ratebook.JointNorm) *ratebook.Figure { return &x.ShopHours }, "site hours": func(x *ratebook.JointNorm) *ratebook.Figure { return &x.SiteHours },
		} {
			out[takeoff.JointID(kind, what)] = func(move func(*ratebook.Figure)) {
				x := n.Joints[kind]
				move(pick(&x))
				n.Joints[kind] = x
			}
		}
	}
	for i := range b.Exchange {
		if b.Exchange[i].Currency == "USD" {
			one("exchange/USD/EUR", &b.Exchange[i].Figure)
		}
	}
	return out
}

// One per cent on each number of the unit-rate book, of its norms, exchange rates
// and emission factors, on each multiplier, risk and input of the new columns
// changes exactly the figures that the register names.
func TestFeedsOfAUnitRateBook(t *testing.T) {
	j := unitJob(t)
	before := run(t, j)
	tested := map[string]bool{}
	judge := func(id, mark string, move func(*job.Job)) {
		t.Helper()
		tested[id] = true
		moved := deepCopy(t, j)
		move(&moved)
		after := run(t, moved)
		sameSections(t, id, before, after)
		var m *document.Member
		for i := range before.Members {
			if before.Members[i].Mark == mark {
				m = &before.Members[i]
			}
		}
		got, want := changed(before, after), before.Fed(entryOf(t, before, id).Feeds, m)
		if !slices.Equal(got, want) {
			t.Errorf("%s of %q:\n changed but not in feeds: %v\n in feeds but unchanged: %v", id, mark, minus(got, want), minus(want, got))
		}
	}
	for _, e := range before.Assumptions {
		if _, ok := figuresOf(&j)[e.ID]; ok {
			judge(e.ID, "", func(j *job.Job) { figuresOf(j)[e.ID](func(f *ratebook.Figure) { f.Spread = nudgeSpread(f.Spread) }) })
		}
	}
	for i, m := range j.Multipliers {
		if id := pricing.MultiplierID(m); slices.ContainsFunc(before.Assumptions, func(e assumption.Entry) bool { return e.ID == id }) {
			judge(id, "", func(j *job.Job) { j.Multipliers[i].Spread = nudgeSpread(j.Multipliers[i].Spread) })
		}
	}
	for i, k := range j.Risks {
		judge("risk/"+k.Name, "", func(j *job.Job) { j.Risks[i].Impact = nudgeSpread(j.Risks[i].Impact) })
		judge("input/risk probability", "", func(j *job.Job) { j.Risks[i].Probability *= 1.3 })
		tested["input/risk amount"] = true // the same number
	}
	judge("input/haul distance", "", func(j *job.Job) { j.Settings.HaulDistance *= 1.01 })
	judge("input/tax", "", func(j *job.Job) { j.Settings.TaxRate *= 1.01 })
	for i, z := range j.Book.Norms.Zinc {
		if id := fmt.Sprintf("%s/up to %g mm", takeoff.ZincID, z.UpTo); slices.ContainsFunc(before.Assumptions, func(e assumption.Entry) bool { return e.ID == id }) {
			judge(id, "", func(j *job.Job) { j.Book.Norms.Zinc[i].Mass *= 1.01 })
		}
	}
	judge("systemic/class 5", "", func(j *job.Job) { j.Book.Systemic["5"] *= 1.01 })
	for g := range j.Book.Correlation {
		if id := "setting/correlation/" + g; slices.ContainsFunc(before.Assumptions, func(e assumption.Entry) bool { return e.ID == id }) {
			judge(id, "", func(j *job.Job) { j.Book.Correlation[g] *= 1.01 })
		}
	}
	for i, m := range j.Members {
		for _, l := range memberLeaves(m, i) {
			if l.id == "input/quantity" || l.id == "input/length" || l.id == "input/area" || l.id == "input/mass if not sized" {
				judge(l.id, l.mark, l.move)
			}
		}
		if m.Concrete > 0 {
			judge("input/concrete", m.Mark, func(j *job.Job) { j.Members[i].Concrete *= 1.01 })
		}
	}
	for _, e := range before.Assumptions {
		if len(e.Feeds) > 0 && !tested[e.ID] && !strings.HasPrefix(e.ID, "input/") && !strings.HasPrefix(e.ID, "default/") && e.ID != "setting/confidence" && e.ID != takeoff.VehicleID { // several numbers in one entry
			t.Errorf("entry %s feeds %v but no leaf of this test moves it", e.ID, e.Feeds)
		}
	}
}

// In outturn money the growth of each index feeds what its categories cost.
func TestFeedsOfEscalation(t *testing.T) {
	j := unitJob(t, "Money", "outturn", "Spend date", "2029-06-01")
	before := run(t, j)
	for i, x := range j.Book.Indices {
		moved := deepCopy(t, j)
		moved.Book.Indices[i].Growth.Spread = moved.Book.Indices[i].Growth.Spread.Scale(2)
		got := changed(before, run(t, moved))
		var want []string
		for _, e := range before.Assumptions {
			if strings.HasPrefix(e.ID, "escalation/"+x.Name+"/") {
				want = append(want, before.Fed(e.Feeds, nil)...)
			}
		}
		slices.Sort(want)
		if growth := before.Fed(entryOf(t, before, "index growth/"+x.Name).Feeds, nil); !slices.Equal(growth, slices.Compact(slices.Clone(want))) {
			t.Errorf("the growth of index %s feeds %v, its escalations %v", x.Name, growth, want)
		}
		if want = slices.Compact(want); len(want) == 0 || !slices.Equal(got, want) {
			t.Errorf("index %s:\n changed but not in feeds: %v\n in feeds but unchanged: %v", x.Name, minus(got, want), minus(want, got))
		}
	}
}
