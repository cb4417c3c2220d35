package api

import (
	"cmp"
	"context"
	"fmt"
	"net/http"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/service"
	"spanwright/estimate/calibration"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

func (x fakeTx) InsertOutturns(_ context.Context, list []service.Outturn) error {
	for _, o := range list {
		x.t.outturns[o.ID] = o
	}
	return nil
}

func (x fakeTx) Outturn(_ context.Context, id uuid.UUID) (service.Outturn, error) {
	o, err := get(x.t.outturns, id, "outturn")
	if err == nil && o.WithdrawnAt != nil {
		err = missing("outturn")
	}
	return o, err
}

func inForce(o service.Outturn) bool { return o.WithdrawnAt == nil }

func (x fakeTx) Outturns(_ context.Context, p service.Page) (service.List[service.Outturn], error) {
	return page(x.t.outturns, p, inForce)
}

func (x fakeTx) OutturnsInForce(context.Context) ([]service.Outturn, error) {
	return x.outturns(inForce), nil
}

func (x fakeTx) OutturnsOfPosting(_ context.Context, posting uuid.UUID) ([]service.Outturn, error) {
	return x.outturns(func(o service.Outturn) bool { return o.Posting == posting }), nil
}

func (x fakeTx) outturns(fits func(service.Outturn) bool) []service.Outturn {
	var list []service.Outturn
	for _, o := range x.t.outturns {
		if fits(o) {
			list = append(list, o)
		}
	}
	slices.SortFunc(list, func(a, b service.Outturn) int { return cmp.Compare(a.Value.Job, b.Value.Job) })
	return list
}

func (x fakeTx) WithdrawOutturn(_ context.Context, id uuid.UUID, _ int64, at time.Time) error {
	o := x.t.outturns[id]
	o.WithdrawnAt, o.Version = &at, o.Version+1
	x.t.outturns[id] = o
	return nil
}

func (x fakeTx) InsertCalibration(_ context.Context, c service.Calibration) error {
	x.t.calibrations[c.ID] = c
	return nil
}

func (x fakeTx) Calibration(_ context.Context, id uuid.UUID) (service.Calibration, error) {
	return get(x.t.calibrations, id, "calibration")
}

func (x fakeTx) Calibrations(_ context.Context, p service.Page) (service.List[service.Calibration], error) {
	l, err := page(x.t.calibrations, p, all)
	for i := range l.Items {
		l.Items[i].Proposal, l.Items[i].Evidence = nil, nil
	}
	return l, err
}

func (x fakeTx) DecideCalibration(_ context.Context, c service.Calibration) error {
	x.t.calibrations[c.ID] = c
	return nil
}

const outturnHead = "Job,Completed,Currency,Kind,Take-off mass (kg),Weighed mass (kg),Estimate fabrication,Outturn fabrication,Estimate currency,Estimate base date,Source\n"

// csvOutturn is one more job than those in stock.
const csvOutturn = outturnHead + "Quay ladder,2026-06-01,EUR,trestles,1000,1100,1000,1100,EUR,2026-06-01,invented\n"

// outturnRows are jobs from..to−1 at prices of the starting book's base date, so that
// no index is needed; costs are 20 % over the estimates, give or take 3 %.
func outturnRows(from, to int) string {
	var b strings.Builder
	for i := from; i < to; i++ {
		fmt.Fprintf(&b, "J%02d,2026-06-01,EUR,trestles,1000,%d,1000,%d,EUR,2026-06-01,invented\n", i, 1300+7*(i%5), 1170+10*(i%7))
	}
	return b.String()
}

func postOutturns(body string) call {
	return call{method: http.MethodPost, path: "/v1/outturns", body: body, contentType: "text/csv"}
}

// stockOutturns adds twenty jobs, in two postings that stay below the least limit of
// these tests, and a calibration of the book.
func stockOutturns(w *world, ids map[string]string) {
	w.t.Helper()
	w.want(201, postOutturns(outturnHead+outturnRows(0, 10)))
	_, p := w.want(201, postOutturns(outturnHead+outturnRows(10, 20)))
	first, _ := p["outturns"].([]any)
	if len(first) != 10 {
		w.t.Fatalf("%d outturns were answered, want 10", len(first))
	}
	ids["outturn"] = id(w.t, first[0].(map[string]any), "id")
	_, c := w.want(201, call{method: "POST", path: "/v1/calibrations", body: `{}`})
	ids["calibration"] = id(w.t, c, "id")
}

func TestOutturnForms(t *testing.T) {
	w := newWorld(t)
	_, form := w.want(201, func() call {
		body, contentType := formOf(filled{"file", "a.csv", "text/csv", outturnHead + outturnRows(0, 2)})
		return call{method: "POST", path: "/v1/outturns", body: body, contentType: contentType}
	}())
	if n := len(form["outturns"].([]any)); n != 2 {
		t.Errorf("a form with two jobs added %d", n)
	}
	data, err := calibration.Template()
	if err != nil {
		t.Fatal(err)
	}
	w.want(201, call{method: "POST", path: "/v1/outturns", body: string(data), contentType: sheet.MediaTypeXLSX})
	w.want(201, call{method: "POST", path: "/v1/outturns", contentType: mediaJSON, body: `{"outturns":[{"job":"In JSON","completed":"2026-06-01","currency":"EUR","kind":"trestles",
		"take_off_mass":"12.4 t","weighed_mass":13000,"costs":{"erection":"100.50"},"estimate":{"currency":"EUR","base_date":"2026-06-01","base":{"erection":"90"}},"source":"invented"}]}`})
	rec, _ := w.want(200, call{method: "GET", path: "/v1/outturns/template"})
	if rec.Body.String() != string(data) && !strings.HasPrefix(rec.Body.String(), "PK") {
		t.Error("the template is no workbook")
	}
	_, l := w.want(200, call{method: "GET", path: "/v1/outturns?limit=200"})
	if n := len(l["items"].([]any)); n != 4 {
		t.Errorf("%d outturns are listed, want 4", n)
	}
}

func TestOutturnsRefused(t *testing.T) {
	w := newWorld(t)
	w.want(201, postOutturns(csvOutturn))
	bad := strings.Replace(csvOutturn, "Quay ladder", "Quay stair", 1)
	for _, test := range []struct {
		name   string
		c      call
		status int
		where  string // cell or pointer of the fault
		words  string
	}{
		{"zero tonnage", postOutturns(strings.Replace(bad, ",1100,1000", ",0,1000", 1)), 422, "F2", "without tonnage"},
		{"unknown kind", postOutturns(strings.Replace(bad, "trestles", "trestle", 1)), 422, "D2", "no kind of structure"},
		{"a job in force, in other letters", postOutturns(strings.Replace(csvOutturn, "Quay ladder", "quay LADDER", 1)), 409, "", "in force already"},
		{"zero tonnage in JSON", call{method: "POST", path: "/v1/outturns", body: `{"outturns":[{"job":"A","weighed_mass":0}]}`}, 422, "/outturns/0/weighed_mass", "without tonnage"},
		{"unknown key", call{method: "POST", path: "/v1/outturns", body: `{"jobs":[]}`}, 400, "", "outturns"},
		{"no workbook", call{method: "POST", path: "/v1/outturns", body: "PK\x03\x04 nothing", contentType: sheet.MediaTypeXLSX}, 422, "", ""},
		{"another part of the form", func() call {
			body, contentType := formOf(filled{"file", "a.csv", "text/csv", csvOutturn}, filled{name: "job", data: "x"})
			return call{method: "POST", path: "/v1/outturns", body: body, contentType: contentType}
		}(), 422, "", "unknown part"},
	} {
		p := w.refused(test.status, test.c)
		if !slices.ContainsFunc(p.Faults, func(f service.Fault) bool {
			return (strings.HasSuffix(f.Cell, test.where) || f.Pointer == test.where) && strings.Contains(f.Problem, test.words) && f.Remedy != ""
		}) {
			t.Errorf("%s: faults %+v, want one at %q with %q", test.name, p.Faults, test.where, test.words)
		}
	}
	if n := len(w.store.tenants[w.own].outturns); n != 1 {
		t.Errorf("%d outturns are stored, want the first alone", n)
	}
}

func TestWithdrawnOutturnIsGone(t *testing.T) {
	w := newWorld(t)
	_, p := w.want(201, postOutturns(csvOutturn))
	path := "/v1/outturns/" + id(t, p["outturns"].([]any)[0].(map[string]any), "id")
	rec, _ := w.want(200, call{method: "GET", path: path})
	if got := rec.Header().Get("ETag"); got != `"1"` {
		t.Errorf("ETag %q, want the version", got)
	}
	w.refused(http.StatusPreconditionRequired, call{method: "DELETE", path: path})
	w.refused(http.StatusPreconditionFailed, call{method: "DELETE", path: path}.with("If-Match", `"2"`))
	w.want(204, call{method: "DELETE", path: path}.with("If-Match", `"1"`))
	w.refused(http.StatusNotFound, call{method: "GET", path: path})
	w.want(201, postOutturns(csvOutturn)) // the job is free again
}

func TestTooManyOutturns(t *testing.T) {
	w := newWorld(t)
	tenant := w.store.tenants[w.own]
	for i := range calibration.MostOutturns {
		o := service.Outturn{ID: uuid.New(), Value: calibration.Outturn{Job: fmt.Sprint("old ", i)}}
		tenant.outturns[o.ID] = o
	}
	if p := w.refused(http.StatusUnprocessableEntity, postOutturns(csvOutturn)); !strings.Contains(p.Faults[0].Remedy, "2000") {
		t.Errorf("faults %+v do not name the limit", p.Faults)
	}
}

// The posted figures are kept as they came: 12.4 t is 12,400 kg, amounts keep places.
func TestOutturnKeepsFigures(t *testing.T) {
	w := newWorld(t)
	w.want(201, postOutturns(strings.Replace(csvOutturn, "1000,1100,EUR", "1000.10,1100.00,EUR", 1)))
	for _, o := range w.store.tenants[w.own].outturns {
		want, err := money.Parse("1100.00")
		if err != nil {
			t.Fatal(err)
		}
		if got := o.Value.Costs[calibration.Fabrication]; got.String() != want.String() || o.Value.TakeOffMass != 1000 {
			t.Errorf("outturn %s from %g kg, want %s from 1000 kg", got, o.Value.TakeOffMass, want)
		}
		if o.Author == uuid.Nil || o.CreatedBy != string(auth.Administrator)+" token" {
			t.Errorf("the outturn is by %q", o.CreatedBy)
		}
	}
}
