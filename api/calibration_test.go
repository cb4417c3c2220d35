package api

import (
	"fmt"
	"math"
	"net/http"
	"slices"
	"strings"
	"testing"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/service"
	"spanwright/estimate/calibration"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

func TestCalibrationNeedsTwentyJobs(t *testing.T) {
	w := newWorld(t)
	w.want(201, postOutturns(outturnHead+outturnRows(0, 19)))
	// A job at older prices cannot be compared: the starting book has no indices.
	w.want(201, postOutturns(strings.Replace(csvOutturn, "2026-06-01,invented", "2025-06-01,invented", 1)))
	p := w.refused(http.StatusUnprocessableEntity, call{method: "POST", path: "/v1/calibrations", body: `{}`})
	if !strings.Contains(p.Detail, "19 comparable jobs were found and at least 20 are needed; 1 left out") {
		t.Errorf("detail %q", p.Detail)
	}
	if !slices.ContainsFunc(p.Faults, func(f service.Fault) bool {
		return f.Found == "Quay ladder" && strings.Contains(f.Problem, "no price index for fabrication in EUR") && strings.Contains(f.Remedy, "rate book ratio")
	}) {
		t.Errorf("faults %+v do not say why the last was left out", p.Faults)
	}
	if n := len(w.store.tenants[w.own].calibrations); n != 0 {
		t.Errorf("%d calibrations are stored, want none", n)
	}
	w.want(201, postOutturns(outturnHead+outturnRows(19, 20)))
	_, c := w.want(201, call{method: "POST", path: "/v1/calibrations", body: `{}`})
	if c["jobs"] != 20.0 || c["left_out"] != 1.0 || c["state"] != service.Proposed {
		t.Errorf("the calibration %v, want one of 20 jobs without 1", c)
	}
}

// decision is the request to decide on the calibration in stock.
func decision(ids map[string]string, body string) call {
	return call{method: "POST", path: "/v1/calibrations/" + ids["calibration"] + "/decision", body: body}
}

// Costs are about 1.2 times the estimates in stock, by hand: the median of 1.17 to
// 1.23 in seven steps, of which the lower ones are there thrice.
func TestAcceptanceMakesANewVersionOfTheBook(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	rec, c := w.want(200, decision(ids, `{"decision":"accept","reason":"the jobs agree"}`))
	if c["state"] != service.Accepted || c["made_rate_book_version"] != 2.0 || rec.Header().Get("ETag") != `"2"` {
		t.Fatalf("the decision answered %s", rec.Body)
	}
	versions := w.store.tenants[w.own].books[uuid.MustParse(ids["book"])]
	if len(versions) != 2 {
		t.Fatalf("the book has %d versions, want 2", len(versions))
	}
	before, after := versions[0].Content, versions[1].Content
	if err := after.Validate(); err != nil {
		t.Error(err)
	}
	i := slices.IndexFunc(after.Multipliers, func(m ratebook.Multiplier) bool { return m.Name == "calibration of fabrication" })
	if i < 0 {
		t.Fatalf("no multiplier on fabrication in %+v", after.Multipliers)
	}
	if m := after.Multipliers[i]; math.Abs(m.Spread.Base()-1.2) > 0.01 || m.Scope != ratebook.BookScope || !strings.Contains(m.Reason, ids["calibration"]) ||
		m.Author != "administrator token" || !slices.Equal(m.Categories, []string{ratebook.Fabrication}) {
		t.Errorf("the multiplier is %+v", m)
	}
	if !strings.Contains(after.Note, ids["calibration"]) || len(before.Multipliers)+1 != len(after.Multipliers) || before.Note == after.Note {
		t.Errorf("the note %q does not name the calibration, or the earlier version was changed", after.Note)
	}
	checkDecisionEvents(t, w, ids)
	w.refused(http.StatusConflict, decision(ids, `{"decision":"decline","reason":"second thoughts"}`))
}

// checkDecisionEvents looks for both changes with before and after.
func checkDecisionEvents(t *testing.T, w *world, ids map[string]string) {
	t.Helper()
	found := map[string]bool{}
	for _, e := range w.store.tenants[w.own].events {
		if e.SubjectID.String() == ids["calibration"] && e.Action == "accept" {
			found["calibration"] = e.Before.(service.Calibration).State == service.Proposed && e.After.(service.Calibration).State == service.Accepted
		}
		if e.SubjectID.String() == ids["book"] && e.Action == "update" {
			found["book"] = e.Before.(service.RateBook).Number == 1 && e.After.(service.RateBook).Number == 2
		}
	}
	if !found["calibration"] || !found["book"] {
		t.Errorf("events with before and after: %v, want calibration and book", found)
	}
}

func TestDeclinedCalibrationChangesNothing(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	_, c := w.want(200, decision(ids, `{"decision":"decline","reason":"too few kinds"}`))
	if c["state"] != service.Declined || c["reason"] != "too few kinds" || c["decided_by"] != "administrator token" {
		t.Errorf("the decision answered %v", c)
	}
	if n := len(w.store.tenants[w.own].books[uuid.MustParse(ids["book"])]); n != 1 {
		t.Errorf("the book has %d versions, want 1", n)
	}
}

func TestDecisionRefused(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	_, c := w.want(200, call{method: "GET", path: "/v1/calibrations/" + ids["calibration"]})
	n := len(c["proposal"].(map[string]any)["changes"].([]any))
	for body, pointer := range map[string]string{
		`{"decision":"accept","changes":[-1],"reason":"r"}`:                   "/changes/0",
		fmt.Sprintf(`{"decision":"accept","changes":[0,%d],"reason":"r"}`, n): "/changes/1",
		`{"decision":"accept","changes":[0,0],"reason":"r"}`:                  "/changes/1",
		`{"decision":"decline","changes":[0],"reason":"r"}`:                   "/changes",
		`{"decision":"accept","reason":"  "}`:                                 "/reason",
		`{"decision":"accept"}`:                                               "/reason",
		`{"decision":"perhaps","reason":"r"}`:                                 "/decision",
		`{"decision":"accept","reason":"` + strings.Repeat("x", 2001) + `"}`:  "/reason",
	} {
		p := w.refused(http.StatusUnprocessableEntity, decision(ids, body))
		if !slices.ContainsFunc(p.Faults, func(f service.Fault) bool { return f.Pointer == pointer }) {
			t.Errorf("%.80s: faults %+v, want one at %s", body, p.Faults, pointer)
		}
	}
	c2 := decision(ids, `{"decision":"accept","reason":"r"}`)
	c2.token = w.tokens[auth.Estimator]
	w.refused(http.StatusForbidden, c2)
	w.want(200, call{method: "PUT", path: "/v1/rate-books/" + ids["book"], body: bookJSON(t, "ratio")}.with("If-Match", "*"))
	if p := w.refused(http.StatusConflict, decision(ids, `{"decision":"accept","reason":"r"}`)); !strings.Contains(p.Detail, "version 2 by now") {
		t.Errorf("the newer version of the book is not named: %q", p.Detail)
	}
}

// proposed puts a calibration of given changes on the unit-rate book into the store.
func proposed(w *world, changes ...calibration.Change) (map[string]string, uuid.UUID) {
	w.t.Helper()
	book, made := uuid.New(), uuid.New()
	tenant := w.store.tenants[w.own]
	tenant.books[book] = []service.RateBook{{ID: book, Name: "unit-rate", Version: 1, Number: 1, Content: ratebook.UnitRate()}}
	tenant.calibrations[made] = service.Calibration{ID: made, RateBook: book, RateBookNumber: 1, State: service.Proposed, Version: 1, Jobs: 24,
		Proposal: &calibration.Proposal{Changes: changes}, Evidence: &service.CalibrationEvidence{GrowthClass: "4"}}
	return map[string]string{"calibration": made.String()}, book
}

func lognormal(median, ratio float64) spread.Spread {
	return spread.NewLognormal(median/ratio, median*ratio)
}

// Each target reaches its place in the book. By hand, with the book's growth of class
// 4 (0.12) and bolts (0.02): 1.3 / (1.12 · 1.02) − 1 = 0.1380; ln of P90 over the median, 1.1, over
// 1.28155 is a deviation of 0.0744. Of the factor's deviation ln 1.15 / 1.28155 = 0.1091
// growth (variance 0.00204 over 1.1333²) and bolts (0.0000167 over 1.02²) leave 0.1014,
// so that P10 is below no connections at all, and the range reaches from 0 to
// 1.13796 · exp(2 · 1.28155 · 0.1014) − 1 = 0.476.
func TestEveryTargetReachesTheBook(t *testing.T) {
	w := newWorld(t)
	ids, book := proposed(w,
		calibration.Change{Target: calibration.TargetAllowance, Name: calibration.FigureMass, SubjectKind: "trestles", New: lognormal(1.3, 1.15), Recommended: true},
		calibration.Change{Target: calibration.TargetRate, Name: calibration.FigureShop, SubjectKind: "trestles", New: lognormal(17.234, 1.2), Recommended: true},
		calibration.Change{Target: calibration.TargetRate, Name: calibration.FigureSite, SubjectKind: "lattice", New: lognormal(20, 1.2), Recommended: true},
		calibration.Change{Target: calibration.TargetSystemic, Name: calibration.TargetSystemic, Class: "4", New: lognormal(1, 1.1), Recommended: true},
		calibration.Change{Target: calibration.TargetMultiplier, Name: "coating", Categories: []string{"coating"}, New: lognormal(1.23456, 1.1), Recommended: true},
		calibration.Change{Target: calibration.TargetMultiplier, Name: "erection", Categories: []string{"erection"}, New: lognormal(1.1, 1.1), Recommended: true},
		calibration.Change{Target: calibration.TargetMultiplier, Name: "coating", Categories: []string{"coating"}, SubjectKind: "trestles", New: lognormal(1.2, 1.1), Recommended: true},
		calibration.Change{Target: calibration.TargetMultiplier, Name: "shipping", Categories: []string{"shipping"}, New: lognormal(1.2, 1.1)},
		calibration.Change{Target: calibration.TargetAllowance, Name: calibration.FigureMass, SubjectKind: "lattice", New: lognormal(1.05, 1.15), Recommended: true},
	)
	rec, _ := w.want(200, decision(ids, `{"decision":"accept","reason":"r"}`))
	b := w.store.tenants[w.own].books[book][1].Content
	near := func(name string, got, want, tolerance float64) {
		if !(math.Abs(got-want) <= tolerance) {
			t.Errorf("%s: got %v, want %v", name, got, want)
		}
	}
	near("connections of trestles", b.Connections["trestles"].Spread.Likely, 0.138, 1e-9)
	if f := b.Connections["trestles"]; f.Spread.Low != 0 || !strings.Contains(f.Source, ids["calibration"]) {
		t.Errorf("connections of trestles are %+v", f)
	}
	near("highest connections of trestles", b.Connections["trestles"].Spread.High, 0.4759, 1e-3)
	near("shop hours of trestles", b.Norms.ShopHours["trestles"].Spread.Likely, 17.23, 1e-9)
	near("systemic deviation of class 4", b.Systemic["4"], 0.0744, 1e-9)
	near("systemic deviation of class 5", b.Systemic["5"], ratebook.UnitRate().Systemic["5"], 0)
	near("site hours of lattice", b.Norms.SiteHours["lattice"].Spread.Base(), ratebook.UnitRate().Norms.SiteHours["lattice"].Spread.Base(), 0)
	near("connections of lattice", b.Connections["lattice"].Spread.Base(), 0.15, 0)
	near("multiplier of coating", b.Multipliers[4].Spread.Likely, 1.235, 1e-9)
	if len(b.Multipliers) != 6 {
		t.Errorf("%d multipliers, want the book's 4 and 2", len(b.Multipliers))
	}
	d := w.store.tenants[w.own].calibrations[uuid.MustParse(ids["calibration"])].Decision
	var left []int
	for _, l := range d.Left {
		left = append(left, l.Change)
	}
	slices.Sort(left)
	// 2: the multiplier on erection holds the site hours; 6: of one kind; 8: below growth and bolts.
	if !slices.Equal(left, []int{2, 6, 8}) || len(d.Applied) != 5 {
		t.Errorf("left %v and %d applied, want 2, 6, 8 and 5: %s", left, len(d.Applied), rec.Body)
	}
}

func TestNamedChangesMustFit(t *testing.T) {
	w := newWorld(t)
	ids, book := proposed(w,
		calibration.Change{Target: calibration.TargetMultiplier, Name: "fabrication", Categories: []string{"fabrication"}, New: lognormal(1.2, 1.1), Excludes: []string{calibration.TargetAllowance}},
		calibration.Change{Target: calibration.TargetAllowance, Name: calibration.FigureMass, SubjectKind: "trestles", New: lognormal(1.3, 1.15)},
		calibration.Change{Target: calibration.TargetRate, Name: calibration.FigureShop, SubjectKind: "trestles", New: lognormal(17, 1.2)},
		calibration.Change{Target: calibration.TargetRate, Name: calibration.FigureShop, SubjectKind: "jetties", New: lognormal(17, 1.2)},
		calibration.Change{Target: calibration.TargetMultiplier, Name: "fabrication", Categories: []string{"fabrication"}, SubjectKind: "trestles", New: lognormal(1.2, 1.1)},
		calibration.Change{Target: calibration.TargetRate, Name: calibration.FigureShop, New: lognormal(17, 1.2)},
	)
	for changes, words := range map[string]string{"[0,1]": "same effect as change 0", "[2,0]": "same effect as change 2", "[3]": "no connection class jetties",
		"[4]": "for trestles alone", "[5]": "nothing of the other kinds"} {
		p := w.refused(http.StatusUnprocessableEntity, decision(ids, `{"decision":"accept","changes":`+changes+`,"reason":"r"}`))
		if len(p.Faults) != 1 || !strings.Contains(p.Faults[0].Problem, words) {
			t.Errorf("%s: faults %+v, want %q", changes, p.Faults, words)
		}
	}
	// Nothing is recommended here, so that nothing is made without naming it.
	if p := w.refused(http.StatusUnprocessableEntity, decision(ids, `{"decision":"accept","reason":"r"}`)); !strings.Contains(p.Detail, "no recommended change") {
		t.Errorf("detail %q", p.Detail)
	}
	w.want(200, decision(ids, `{"decision":"accept","changes":[2,1],"reason":"r"}`))
	if n := len(w.store.tenants[w.own].books[book]); n != 2 {
		t.Errorf("%d versions, want 2", n)
	}
}

// A second acceptance takes the place of the first one's multiplier.
func TestMultiplierOfAnEarlierCalibrationIsReplaced(t *testing.T) {
	w := newWorld(t)
	change := calibration.Change{Target: calibration.TargetMultiplier, Name: "coating", Categories: []string{"coating"}, New: lognormal(1.2, 1.1), Recommended: true}
	ids, book := proposed(w, change)
	w.want(200, decision(ids, `{"decision":"accept","reason":"r"}`))
	tenant := w.store.tenants[w.own]
	second := uuid.New()
	change.New = lognormal(1.3, 1.1)
	tenant.calibrations[second] = service.Calibration{ID: second, RateBook: book, RateBookNumber: 2, State: service.Proposed, Version: 1,
		Proposal: &calibration.Proposal{Changes: []calibration.Change{change}}, Evidence: &service.CalibrationEvidence{GrowthClass: "4"}}
	_, c := w.want(200, decision(map[string]string{"calibration": second.String()}, `{"decision":"accept","reason":"r"}`))
	applied := c["decision"].(map[string]any)["applied"].([]any)[0].(map[string]any)
	if b := w.store.tenants[w.own].books[book][2].Content; len(b.Multipliers) != 5 || b.Multipliers[4].Spread.Likely != 1.3 || !strings.HasPrefix(applied["before"].(string), "1.2,") {
		t.Errorf("multipliers %+v, applied %v", b.Multipliers[4:], applied)
	}
}
