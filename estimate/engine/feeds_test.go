package engine_test

import (
	"encoding/json"
	"fmt"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// feedsSchedule has every numeric column in use, quantities large enough that
// one per cent of any allowance moves a kilogram, and utilisations far enough
// below 1 that one per cent moves no section.
const feedsSchedule = `Mark,Group,Kind,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Point load (kN),Point position (m),Axial load (kN),Area load (kN/m²),Tributary width (m),Overhang (m),Support positions (m),Restraint spacing (m),Effective length factor,Deflection limit (L/n),Section or family,Grade,Mass if not sized (kg/m),Area (m²),Horizontal load (kN/m),Moving load (kN),Dynamic factor,Moment factor,Net area factor,Frequency floor (Hz),Load set
B1,Gallery,beam,500,6,simple,2,3,,,,,,,,2,,300,IPE,S275,,,,,,,,,
B2,Gallery,beam,400,5,simple,1,,,,,3,2,,,,,,HEA,S275,,,,,,,,,
B3,Gallery,boom,300,12,overhang,0.8,1.1,3,11.5,,,,4,,,,100,CHS,S355,,,,,,,,,
B4,Bridge,beam,700,9,,1,2,,,,,,,0; 4; 9,,,,HEB,S275,,,,,,,,,
B5,Bridge,post,900,4,strut,,,,,80,,,,,,0.9,,CHS,S275,,,,,,,,,
B6,Bridge,beam,800,5,simple,0.5,0.7,,,30,,,,,,0.95,,RHS,S355,,,,,,,,,
B7,Bridge,beam,600,6,simple,1,2,,,,,,,,,,,IPE 300,S275,,,,,,1.13,,,
B8,Bridge,beam,500,5,simple,1,2,,,,,,,,,,none,HEA,S275,,,0.6,,1.2 horizontal,,,3,
B9,Gallery,beam,300,6,simple,1,0,,,,,,,,,,,HEB,S275,,,,30; 20 @ 1.5,1.15,,,,
B10,Bridge,beam,400,5,simple,0.4,0.6,,,-130,,,,,,,,RHS,S355,,,,,,,0.5,,
B11,Gallery,beam,400,5,simple,,,,,,,1.2,,,,,,HEA,S275,,,,,,,,,walkway
B12,Bridge,beam,500,6,simple,1,1,,,60,,,,,,,,IPE 400,S355,,,,,,,,,
G1,Gallery,grating,1000,8,not sized,,,,,,,,,,,,,,,28.5 kg/m²,12,,,,,,,
H1,Gallery,handrail,2000,10,not sized,,,,,,,,,,,,,,,14.5,,,,,,,,
`

func feedsJob(t *testing.T, basis string) job.Job {
	t.Helper()
	s := readCSV(t, []byte(feedsSchedule), table("Project", "P", "Scheme", "S", "Base date", "2026-06-01", "Standard", basis))
	edited := []ratebook.Multiplier{
		{Name: "tides", Scope: ratebook.GroupScope, Subject: "Bridge", Categories: []string{ratebook.Erection}, Spread: spread.NewTriangular(1, 1.2, 1.6), Reason: "tidal work", Author: "test", Version: 3},
		{Name: "site difficulty", Scope: ratebook.MemberScope, Subject: "B2", Categories: []string{ratebook.Erection}, Spread: spread.NewPERT(1, 1.3, 2), Group: "labour", Reason: "hard to reach", Author: "test", Version: 1},
		{Name: "shop difficulty", Scope: ratebook.FamilyScope, Subject: "CHS", Categories: []string{ratebook.Fabrication}, Spread: spread.NewPERT(1, 1.1, 1.5), Group: "labour", Reason: "tube profiling", Author: "test", Version: 1},
	}
	return freeze(t, s, ratebook.Ratio(), edited, quick)
}

// deepCopy goes through the job's own canonical bytes.
func deepCopy(t *testing.T, j job.Job) job.Job {
	t.Helper()
	data, err := json.Marshal(j)
	if err != nil {
		t.Fatal(err)
	}
	return reread(t, data)
}

func changed(before, after document.Document) []string {
	a, b := before.Figures(), after.Figures()
	var out []string
	for id, v := range a {
		if b[id] != v {
			out = append(out, id)
		}
	}
	slices.Sort(out)
	return out
}

func entryOf(t *testing.T, d document.Document, id string) assumption.Entry {
	t.Helper()
	for _, e := range d.Assumptions {
		if e.ID == id {
			return e
		}
	}
	t.Fatalf("the register has no entry %q", id)
	return assumption.Entry{}
}

func sameSections(t *testing.T, what string, a, b document.Document) {
	t.Helper()
	for i := range a.Members {
		if a.Members[i].Section != b.Members[i].Section {
			t.Fatalf("%s: one per cent moved the section of %s from %s to %s; choose other loads for this test", what, a.Members[i].Mark, a.Members[i].Section, b.Members[i].Section)
		}
	}
}

// nudge adds one per cent; of a value of zero it makes a hundredth.
func nudge(x float64) float64 {
	if x == 0 {
		return 0.01
	}
	return x * 1.01
}

func nudgeSpread(s spread.Spread) spread.Spread {
	if s.Distribution == spread.Fixed {
		return spread.NewFixed(nudge(s.Base()))
	}
	return s.Scale(1.01)
}

// leaf is one number of a job that the register has an entry for.
type leaf struct {
	id   string
	mark string // of an input of one member
	move func(*job.Job)
}

func bookLeaves(j job.Job) []leaf {
	move := func(m map[string]ratebook.Figure, k string) {
		f := m[k]
		f.Spread = nudgeSpread(f.Spread)
		m[k] = f
	}
	out := []leaf{
		{id: "rate/material", move: func(j *job.Job) { j.Book.MaterialPrice.Spread = nudgeSpread(j.Book.MaterialPrice.Spread) }},
		{id: "allowance/bolts", move: func(j *job.Job) { j.Book.Bolts.Spread = nudgeSpread(j.Book.Bolts.Spread) }},
		{id: "allowance/sizing bias", move: func(j *job.Job) { j.Book.SizingBias.Spread = nudgeSpread(j.Book.SizingBias.Spread) }},
		{id: "allowance/growth/class 5", move: func(j *job.Job) { move(j.Book.Growth, "5") }},
		{id: "systemic/class 5", move: func(j *job.Job) { j.Book.Systemic["5"] *= 1.01 }},
		{id: "setting/reference price", move: func(j *job.Job) { j.Book.ReferencePrice = j.Book.ReferencePrice.Add(money.FromInt(9)) }},
		{id: "setting/correlation/labour", move: func(j *job.Job) { j.Book.Correlation["labour"] *= 1.01 }},
		{id: "setting/correlation/supply", move: func(j *job.Job) { j.Book.Correlation["supply"] *= 1.01 }},
		{id: "setting/confidence", move: func(j *job.Job) { j.Settings.Confidence *= 1.01 }},
	}
	for c := range j.Book.Ratios {
		out = append(out, leaf{id: "rate/" + c, move: func(j *job.Job) { move(j.Book.Ratios, c) }})
	}
	for _, c := range []string{"simple beams", "trestles", "tube booms"} {
		out = append(out, leaf{id: "allowance/connections/" + c, move: func(j *job.Job) { move(j.Book.Connections, c) }})
	}
	for _, w := range []string{"sections", "tube", "plate"} {
		out = append(out, leaf{id: "allowance/waste/" + w, move: func(j *job.Job) { move(j.Book.Waste, w) }})
	}
	for i, m := range j.Multipliers {
		out = append(out, leaf{id: pricing.MultiplierID(m), move: func(j *job.Job) { j.Multipliers[i].Spread = nudgeSpread(j.Multipliers[i].Spread) }})
	}
	return out
}

// memberLeaves are the numbers of one row that are given (not defaults).
func memberLeaves(m schedule.Member, i int) []leaf {
	var out []leaf
	add := func(id string, ok bool, move func(*schedule.Member)) {
		if ok {
			out = append(out, leaf{id: "input/" + id, mark: m.Mark, move: func(j *job.Job) { move(&j.Members[i]) }})
		}
	}
	byArea := m.AreaMass > 0
	given := func(field string) bool { return m.Defaults[field] == "" }
	add("length", !byArea, func(m *schedule.Member) { scaleLength(m) })
	add("quantity", true, func(m *schedule.Member) { m.Quantity += m.Quantity / 100 })
	for k, l := range m.Loads {
		id := l.Nature + " load"
		if m.Defaults["load "+l.Label] != "" {
			continue // a ready load, moved as a default
		}
		struck := "dynamic factor"
		if l.Sideways {
			struck = "dynamic factor, horizontal"
		}
		add(struck, l.Dynamic > 1, func(m *schedule.Member) { m.Loads[k].Dynamic *= 1.01 })
		switch {
		case l.Kind == "train":
			add("moving load", true, func(m *schedule.Member) {
				for w := range m.Loads[k].Wheels {
					m.Loads[k].Wheels[w] *= 1.01
				}
			})
		case l.Sideways:
			id = "horizontal load"
		case l.Kind == "point":
			id = "point load"
			add("point position", true, func(m *schedule.Member) { m.Loads[k].Position *= 1.01 })
		case strings.Contains(strings.ToLower(l.Label), "area"):
			id = "area load"
		}
		add(id, l.Value != 0, func(m *schedule.Member) { m.Loads[k].Value *= 1.01 })
	}
	add("axial load", m.Axial != 0, func(m *schedule.Member) { m.Axial *= 1.01 })
	add("overhang", m.Arrangement == "overhang", func(m *schedule.Member) {
		m.Supports[1].Position -= 0.01 * (m.Length - m.Supports[1].Position)
	})
	add("support positions", m.Arrangement == "positions", func(m *schedule.Member) { m.Supports[1].Position *= 1.01 })
	add("restraint spacing", m.Restraint > 0, func(m *schedule.Member) { m.Restraint *= 1.01 })
	add("effective length factor", m.LengthFactor > 0 && given("length_factor") && m.Axial != 0, func(m *schedule.Member) { m.LengthFactor *= 1.01 })
	add("deflection limit", m.DeflectionLimit > 0 && given("deflection_limit"), func(m *schedule.Member) { m.DeflectionLimit *= 1.01 })
	add("frequency floor", m.FrequencyFloor > 0, func(m *schedule.Member) { m.FrequencyFloor *= 1.01 })
	add("moment factor", m.MomentFactor > 0, func(m *schedule.Member) { m.MomentFactor *= 1.01 })
	add("net area factor", m.NetAreaFactor > 0, func(m *schedule.Member) { m.NetAreaFactor *= 1.01 })
	add("mass if not sized", m.Treatment == schedule.ByMass, func(m *schedule.Member) { m.LineMass *= 1.01; m.AreaMass *= 1.01 })
	add("area", byArea, func(m *schedule.Member) { m.Area *= 1.01 })
	return out
}

// scaleLength lengthens a member by one per cent; its far support goes with it.
func scaleLength(m *schedule.Member) {
	old := m.Length
	m.Length *= 1.01
	for k := range m.Supports {
		if m.Supports[k].Position == old {
			m.Supports[k].Position = m.Length
		}
	}
}

func TestFeedsNamesExactlyTheFiguresThatChange(t *testing.T) {
	j := feedsJob(t, "allowable")
	before := run(t, j)
	tested := map[string]bool{}
	moveAll(t, j, before, func(l leaf, got, want []string) {
		tested[l.id] = true
		if l.mark == "B10" && l.id == "input/length" { // in tension: no length in the axial check
			want = minus(want, []string{"member/B10/check/axial"})
		}
		if !slices.Equal(got, want) && l.id != "input/moment factor" { // allowable takes 1 whatever it is
			t.Errorf("%s of %q:\n changed but not in feeds: %v\n in feeds but unchanged: %v", l.id, l.mark, minus(got, want), minus(want, got))
		}
	})
	for _, e := range before.Assumptions {
		if len(e.Feeds) > 0 && !tested[e.ID] && !untestable[e.ID] {
			t.Errorf("entry %s feeds %v but no leaf of this test moves it", e.ID, e.Feeds)
		}
	}
}

// In the other bases a check may stand still where a plateau of its clause holds it,
// such as a slenderness below which nothing buckles; but nothing changes that the
// register does not name.
func TestFeedsMissNothingInOtherBases(t *testing.T) {
	for _, basis := range []string{"en1993", "aisc-asd", "aisc-lrfd"} {
		j := feedsJob(t, basis)
		moved := map[string]bool{}
		moveAll(t, j, run(t, j), func(l leaf, got, want []string) {
			moved[l.id] = moved[l.id] || len(got) > 0
			if extra := minus(got, want); len(extra) > 0 {
				t.Errorf("%s: %s of %q: changed but not in feeds: %v", basis, l.id, l.mark, extra)
			}
		})
		for _, id := range []string{"input/moment factor", "input/net area factor", "input/frequency floor", "input/dynamic factor", "input/dynamic factor, horizontal", "input/horizontal load", "input/moving load"} {
			if !moved[id] {
				t.Errorf("%s: %s changes nothing", basis, id)
			}
		}
	}
}

// moveAll moves each leaf by one per cent and hands over what changed and what the
// register says should.
func moveAll(t *testing.T, j job.Job, before document.Document, judge func(l leaf, got, want []string)) {
	t.Helper()
	members := map[string]*document.Member{}
	for i := range before.Members {
		members[before.Members[i].Mark] = &before.Members[i]
	}
	leaves := append(bookLeaves(j), defaultLeaves(j)...)
	for i, m := range j.Members {
		leaves = append(leaves, memberLeaves(m, i)...)
	}
	for _, l := range leaves {
		moved := deepCopy(t, j)
		l.move(&moved)
		after := run(t, moved)
		sameSections(t, fmt.Sprintf("%s of %q", l.id, l.mark), before, after)
		judge(l, changed(before, after), before.Fed(entryOf(t, before, l.id).Feeds, members[l.mark]))
	}
}

// untestable are entries that this job has no member for, or that another entry
// stands for here.
var untestable = map[string]bool{
	"input/tributary width": true, // the load is frozen as area load × width
	"input/factor":          true, // this job takes the default factor
	"input/confidence":      true, // moved as setting/confidence
}

// defaultLeaves are the values that rows or the job took by default.
func defaultLeaves(j job.Job) []leaf {
	var out []leaf
	for _, e := range j.Defaults {
		if len(e.Feeds) == 0 {
			continue
		}
		out = append(out, leaf{id: e.ID, move: func(j *job.Job) {
			if strings.HasPrefix(e.ID, "default/factor") {
				j.Settings.Factor *= 1.01
			}
			if e.ID == "default/confidence" {
				j.Settings.Confidence *= 1.01
			}
			for i := range j.Members {
				for field, id := range j.Members[i].Defaults {
					if id != e.ID {
						continue
					}
					for k := range j.Members[i].Loads {
						if l := &j.Members[i].Loads[k]; field == "load "+l.Label {
							l.Value *= 1.01
						}
					}
					switch field {
					case "deflection_limit":
						j.Members[i].DeflectionLimit *= 1.01
					case "length_factor":
						j.Members[i].LengthFactor = nudgeFrom(j.Members[i].LengthFactor, 1)
					case "restraint_m":
						j.Members[i].Restraint = 1.01 * longestSpan(j.Members[i])
					}
				}
			}
		}})
	}
	return out
}

func nudgeFrom(x, fallback float64) float64 {
	if x == 0 {
		x = fallback
	}
	return x * 1.01
}

// longestSpan is what an absent restraint spacing means.
func longestSpan(m schedule.Member) float64 {
	at := []float64{0, m.Length}
	for _, s := range m.Supports {
		at = append(at, s.Position)
	}
	slices.Sort(at)
	longest := 0.0
	for i := 1; i < len(at); i++ {
		longest = max(longest, at[i]-at[i-1])
	}
	return longest
}

func minus(a, b []string) []string {
	var out []string
	for _, x := range a {
		if !slices.Contains(b, x) {
			out = append(out, x)
		}
	}
	return out
}
