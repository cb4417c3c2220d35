package main

import (
	"encoding/json"
	"net/http"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"

	"spanwright/api/auth"
	"spanwright/estimate/calibration"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/sheet"
)

// calibrationFile is one of the 24 invented jobs of estimate/calibration.
func calibrationFile(t *testing.T, name string) []byte {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "estimate", "calibration", "testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// calibratedBook is the unit-rate book with the indices and the exchange rate that
// those jobs come with. Margin has no index, as in the starting book.
func calibratedBook(t *testing.T) ratebook.Book {
	t.Helper()
	var basis calibration.Basis
	if err := json.Unmarshal(calibrationFile(t, "basis.json"), &basis); err != nil {
		t.Fatal(err)
	}
	b := ratebook.UnitRate()
	b.Name, b.BaseDate, b.SpendMonths = "quay rates", basis.BaseDate, nil
	others := slices.DeleteFunc(ratebook.Categories(), func(c string) bool {
		return c == ratebook.Material || c == ratebook.Margin || c == ratebook.Owner
	})
	growth := b.Indices[0].Growth // the demo is of a later date than the jobs' indices
	b.Indices = []ratebook.Index{{Name: "material", Categories: []string{ratebook.Material}, Growth: growth, Source: "invented"},
		{Name: "others", Categories: others, Growth: growth, Source: "invented"}}
	for _, v := range basis.Index {
		at := 1
		if v.Category == ratebook.Material {
			at = 0
		}
		b.Indices[at].Values = append(b.Indices[at].Values, ratebook.IndexValue{Date: v.Date, Value: v.Value})
	}
	for i, x := range b.Exchange {
		if x.Currency == basis.Exchange[0].Currency {
			b.Exchange[i].Date, b.Exchange[i].Spread.Likely = basis.Exchange[0].Date, basis.Exchange[0].Value.Float64()
		}
	}
	return b
}

func (s *server) postBook(t *testing.T, token string, b ratebook.Book) string {
	t.Helper()
	data, err := json.Marshal(b)
	if err != nil {
		t.Fatal(err)
	}
	return s.made(t, s.do(t, http.MethodPost, "/v1/rate-books", token, data, "Content-Type", "application/json"))
}

// made is the id of what a request made.
func (s *server) made(t *testing.T, a answer) string {
	t.Helper()
	var out struct{ ID string }
	if a.status != http.StatusCreated {
		t.Fatalf("%d %s", a.status, a.body)
	}
	a.decode(t, &out)
	return out.ID
}

// calibrated is what the tests read of a calibration.
type calibrated struct {
	ID       string
	Jobs     int
	LeftOut  int `json:"left_out"`
	State    string
	SHA256   string
	Made     int `json:"made_rate_book_version"`
	Decision struct {
		Applied []struct{ Field, Before, After string }
		Left    []struct {
			Change int
			Reason string
		}
	}
	Proposal calibration.Proposal
	Evidence struct {
		Notes    []string
		Outturns []string `json:"outturn_ids"`
		Coverage calibration.Covered
	}
}

const csvType = "text/csv"

// Nineteen jobs are refused with the reason; twenty-four are fitted, and a person's
// acceptance makes version 2 of the rate book.
func TestOutturnsBecomeARateBookVersion(t *testing.T) {
	s := newServer(t)
	estimator, manager := s.token(t, "Brackwater", auth.Estimator), s.token(t, "Brackwater", auth.Manager)
	book := s.postBook(t, estimator, calibratedBook(t))
	lines := strings.SplitAfter(strings.TrimSpace(string(calibrationFile(t, "outturns.csv"))), "\n")
	ask := []byte(`{"rate_book_id":"` + book + `"}`)
	post := func(rows []string) answer {
		return s.do(t, http.MethodPost, "/v1/outturns", estimator, []byte(lines[0]+strings.Join(rows, "")), "Content-Type", csvType, "X-File-Name", "outturns.csv")
	}
	if a := post(lines[1:20]); a.status != http.StatusCreated {
		t.Fatalf("19 jobs: %d %s", a.status, a.body)
	}
	refused := s.do(t, http.MethodPost, "/v1/calibrations", estimator, ask, "Content-Type", "application/json")
	if refused.status != http.StatusUnprocessableEntity || !strings.Contains(string(refused.body), "19 comparable jobs were found and at least 20 are needed") {
		t.Fatalf("19 jobs: %d %s", refused.status, refused.body)
	}
	if a := post(lines[20:]); a.status != http.StatusCreated {
		t.Fatalf("the other jobs: %d %s", a.status, a.body)
	}
	var c, again calibrated
	s.do(t, http.MethodPost, "/v1/calibrations", estimator, ask, "Content-Type", "application/json", "Idempotency-Key", "fit").decode(t, &c)
	s.do(t, http.MethodPost, "/v1/calibrations", estimator, ask, "Content-Type", "application/json", "Idempotency-Key", "fit").decode(t, &again)
	if c.ID == "" || again.ID != c.ID || c.Jobs != 24 || c.LeftOut != 0 || len(c.Evidence.Outturns) != 24 || c.State != "proposed" {
		t.Fatalf("two requests with one key made %+v and %s", c, again.ID)
	}
	if n := s.rows(t)["calibration"]; n != 1 {
		t.Errorf("%d calibrations are stored, want 1", n)
	}
	if len(c.Evidence.Notes) != 2 || !strings.Contains(c.Evidence.Notes[0], "margin") {
		t.Errorf("notes %q, want one on the category without an index", c.Evidence.Notes)
	}
	if _, sum, err := c.Proposal.Canonical(); err != nil || sum != c.SHA256 {
		t.Errorf("the proposal has the hash %s, %v; the record says %s", sum, err, c.SHA256)
	}
	s.acceptCalibration(t, estimator, manager, book, c)
}

// acceptCalibration decides as the wrong and as the right person, and looks at the
// book and at the audit events.
func (s *server) acceptCalibration(t *testing.T, estimator, manager, book string, c calibrated) {
	t.Helper()
	path, yes := "/v1/calibrations/"+c.ID+"/decision", []byte(`{"decision":"accept","reason":"twenty-four jobs agree"}`)
	if a := s.do(t, http.MethodPost, path, estimator, yes, "Content-Type", "application/json"); a.status != http.StatusForbidden {
		t.Errorf("an estimator decided: %d %s", a.status, a.body)
	}
	var done, again calibrated
	first := s.do(t, http.MethodPost, path, manager, yes, "Content-Type", "application/json", "Idempotency-Key", "yes")
	if first.status != http.StatusOK {
		t.Fatalf("accept: %d %s", first.status, first.body)
	}
	first.decode(t, &done)
	s.do(t, http.MethodPost, path, manager, yes, "Content-Type", "application/json", "Idempotency-Key", "yes").decode(t, &again)
	if done.State != "accepted" || done.Made != 2 || again.Made != 2 || len(done.Decision.Applied) == 0 {
		t.Fatalf("accepted: %+v, and again %+v", done.Decision, again.Decision)
	}
	if a := s.do(t, http.MethodPost, path, manager, yes, "Content-Type", "application/json"); a.status != http.StatusConflict {
		t.Errorf("a second decision: %d %s", a.status, a.body)
	}
	var b struct {
		Number  int
		Content ratebook.Book
	}
	s.do(t, http.MethodGet, "/v1/rate-books/"+book, estimator, nil).decode(t, &b)
	if err := b.Content.Validate(); err != nil || b.Number != 2 || !strings.Contains(b.Content.Note, c.ID) {
		t.Errorf("version %d, note %q: %v", b.Number, b.Content.Note, err)
	}
	if changed := differences(calibratedBook(t), b.Content); changed == 0 {
		t.Errorf("no figure of the book changed; applied %+v", done.Decision.Applied)
	}
	s.do(t, http.MethodGet, "/v1/rate-books/"+book+"/versions/1", estimator, nil).decode(t, &b)
	if changed := differences(calibratedBook(t), b.Content); changed != 0 {
		t.Errorf("%d figures of version 1 changed", changed)
	}
	events := string(s.do(t, http.MethodGet, "/v1/audit-events?limit=200", manager, nil).body)
	for _, want := range []string{`"action":"accept","subject_kind":"calibration"`, `"action":"update","subject_kind":"rate book"`, `"action":"post","subject_kind":"outturns"`} {
		if !strings.Contains(events, want) {
			t.Errorf("the audit events lack %s", want)
		}
	}
}

// differences counts the multipliers, connections, norms and deviations that differ.
func differences(a, b ratebook.Book) int {
	n := len(b.Multipliers) - len(a.Multipliers)
	for k, v := range a.Connections {
		n += distinct(v, b.Connections[k])
	}
	for k, v := range a.Norms.ShopHours {
		n += distinct(v, b.Norms.ShopHours[k])
	}
	for k, v := range a.Norms.SiteHours {
		n += distinct(v, b.Norms.SiteHours[k])
	}
	for k, v := range a.Systemic {
		n += distinct(v, b.Systemic[k])
	}
	return n
}

func distinct[T comparable](a, b T) int {
	if a == b {
		return 0
	}
	return 1
}

// The changed book prices the demo: what an acceptance makes is used like any other.
func TestEstimateWithACalibratedBook(t *testing.T) {
	s := newServer(t)
	manager := s.token(t, "Brackwater", auth.Manager)
	book := s.postBook(t, manager, calibratedBook(t))
	fields := map[string]string{"rate_book_id": book}
	before := s.take(t, manager, "brackwater.xlsx", mustRead(t, "brackwater.xlsx"), fields)
	if a := s.do(t, http.MethodPost, "/v1/outturns", manager, calibrationFile(t, "outturns.csv"), "Content-Type", csvType); a.status != http.StatusCreated {
		t.Fatalf("outturns: %d %s", a.status, a.body)
	}
	id := s.made(t, s.do(t, http.MethodPost, "/v1/calibrations", manager, []byte(`{"rate_book_id":"`+book+`"}`), "Content-Type", "application/json"))
	if a := s.do(t, http.MethodPost, "/v1/calibrations/"+id+"/decision", manager, []byte(`{"decision":"accept","reason":"r"}`), "Content-Type", "application/json"); a.status != http.StatusOK {
		t.Fatalf("accept: %d %s", a.status, a.body)
	}
	after := s.take(t, manager, "brackwater.xlsx", mustRead(t, "brackwater.xlsx"), fields)
	if before.Estimate.Base == after.Estimate.Base && before.Estimate.P50 == after.Estimate.P50 {
		t.Errorf("base %s and P50 %s did not change with the book", after.Estimate.Base, after.Estimate.P50)
	}
}

func TestOutturnsOfAnotherOrganisation(t *testing.T) {
	s := newServer(t)
	own, other := s.token(t, "Brackwater", auth.Administrator), s.token(t, "Another quay", auth.Administrator)
	book := s.postBook(t, own, calibratedBook(t))
	var posted struct {
		Outturns []struct{ ID string }
	}
	s.do(t, http.MethodPost, "/v1/outturns", own, calibrationFile(t, "outturns.csv"), "Content-Type", csvType).decode(t, &posted)
	if len(posted.Outturns) != 24 {
		t.Fatalf("%d outturns were added, want 24", len(posted.Outturns))
	}
	id := s.made(t, s.do(t, http.MethodPost, "/v1/calibrations", own, []byte(`{"rate_book_id":"`+book+`"}`), "Content-Type", "application/json"))
	for _, path := range []string{"/v1/outturns/" + posted.Outturns[0].ID, "/v1/calibrations/" + id} {
		if a := s.do(t, http.MethodGet, path, own, nil); a.status != http.StatusOK {
			t.Errorf("%s as its owner: %d %s", path, a.status, a.body)
		}
		if a := s.do(t, http.MethodGet, path, other, nil); a.status != http.StatusNotFound {
			t.Errorf("%s as another organisation: %d %s", path, a.status, a.body)
		}
	}
	for _, path := range []string{"/v1/outturns", "/v1/calibrations"} {
		if a := s.do(t, http.MethodGet, path, other, nil); !strings.Contains(string(a.body), `"items":[]`) {
			t.Errorf("%s as another organisation: %s", path, a.body)
		}
	}
	// Its own jobs are none, whatever the others have.
	a := s.do(t, http.MethodPost, "/v1/calibrations", other, []byte(`{}`), "Content-Type", "application/json")
	if a.status != http.StatusUnprocessableEntity || !strings.Contains(string(a.body), "0 comparable jobs") {
		t.Errorf("a fit of another organisation: %d %s", a.status, a.body)
	}
	if a := s.do(t, http.MethodPost, "/v1/calibrations", other, []byte(`{"rate_book_id":"`+book+`"}`), "Content-Type", "application/json"); a.status != http.StatusNotFound {
		t.Errorf("a fit for another organisation's book: %d %s", a.status, a.body)
	}
	for path, body := range map[string]string{"/v1/calibrations/" + id + "/decision": `{"decision":"decline","reason":"r"}`} {
		if a := s.do(t, http.MethodPost, path, other, []byte(body), "Content-Type", "application/json"); a.status != http.StatusNotFound {
			t.Errorf("%s as another organisation: %d %s", path, a.status, a.body)
		}
	}
}

// Of two managers who decide at the same time one is late.
func TestSimultaneousDecisions(t *testing.T) {
	s := newServer(t)
	manager := s.token(t, "Brackwater", auth.Manager)
	book := s.postBook(t, manager, calibratedBook(t))
	if a := s.do(t, http.MethodPost, "/v1/outturns", manager, calibrationFile(t, "outturns.csv"), "Content-Type", csvType); a.status != http.StatusCreated {
		t.Fatalf("outturns: %d %s", a.status, a.body)
	}
	id := s.made(t, s.do(t, http.MethodPost, "/v1/calibrations", manager, []byte(`{"rate_book_id":"`+book+`"}`), "Content-Type", "application/json"))
	var wg sync.WaitGroup
	statuses := make([]int, 4)
	for i := range statuses {
		wg.Go(func() {
			a := s.do(t, http.MethodPost, "/v1/calibrations/"+id+"/decision", manager, []byte(`{"decision":"accept","reason":"r"}`), "Content-Type", "application/json")
			statuses[i] = a.status
		})
	}
	wg.Wait()
	slices.Sort(statuses)
	if want := []int{http.StatusOK, http.StatusConflict, http.StatusConflict, http.StatusConflict}; !slices.Equal(statuses, want) {
		t.Errorf("statuses %v, want %v", statuses, want)
	}
	var b struct{ Number int }
	s.do(t, http.MethodGet, "/v1/rate-books/"+book, manager, nil).decode(t, &b)
	if b.Number != 2 {
		t.Errorf("the rate book has version %d, want 2", b.Number)
	}
}

// All or nothing, once, by whoever may.
func TestPostingOutturns(t *testing.T) {
	s := newServer(t)
	estimator, viewer := s.token(t, "Brackwater", auth.Estimator), s.token(t, "Brackwater", auth.Viewer)
	data := string(calibrationFile(t, "outturns.csv"))
	if a := s.do(t, http.MethodPost, "/v1/outturns", viewer, []byte(data), "Content-Type", csvType); a.status != http.StatusForbidden {
		t.Errorf("a viewer posted: %d %s", a.status, a.body)
	}
	empty := strings.Replace(data, ",13330,", ",0,", 1) // the first job's weighed mass
	a := s.do(t, http.MethodPost, "/v1/outturns", estimator, []byte(empty), "Content-Type", csvType)
	var p problem
	a.decode(t, &p)
	if a.status != http.StatusUnprocessableEntity || len(p.Faults) != 1 || !strings.HasSuffix(p.Faults[0].Cell, "I2") || !strings.Contains(p.Faults[0].Problem, "without tonnage") {
		t.Errorf("zero tonnage: %d %s", a.status, a.body)
	}
	if n := s.rows(t)["outturn"]; n != 0 {
		t.Errorf("%d outturns of a refused posting are stored", n)
	}
	one := s.do(t, http.MethodPost, "/v1/outturns", estimator, []byte(data), "Content-Type", csvType, "Idempotency-Key", "k")
	two := s.do(t, http.MethodPost, "/v1/outturns", estimator, []byte(data), "Content-Type", csvType, "Idempotency-Key", "k")
	if one.status != http.StatusCreated || two.status != http.StatusCreated || string(one.body) != string(two.body) {
		t.Errorf("two postings with one key: %d and %d, %s and %s", one.status, two.status, one.body[:min(len(one.body), 600)], two.body[:min(len(two.body), 600)])
	}
	if n := s.rows(t)["outturn"]; n != 24 {
		t.Errorf("%d outturns are stored, want 24", n)
	}
	if a := s.do(t, http.MethodPost, "/v1/outturns", estimator, []byte(data), "Content-Type", csvType); a.status != http.StatusConflict {
		t.Errorf("the same jobs again: %d %s", a.status, a.body)
	}
	if a := s.do(t, http.MethodGet, "/v1/outturns?limit=200", viewer, nil); a.status != http.StatusOK || strings.Count(string(a.body), `"posting_id"`) != 24 {
		t.Errorf("a viewer's list: %d %s", a.status, a.body)
	}
}

// The template posted back is read without a fault, amounts to the cent.
func TestOutturnTemplateIsRead(t *testing.T) {
	s := newServer(t)
	estimator := s.token(t, "Brackwater", auth.Estimator)
	template := s.do(t, http.MethodGet, "/v1/outturns/template", estimator, nil)
	if template.status != http.StatusOK || template.header.Get("Content-Type") != sheet.MediaTypeXLSX {
		t.Fatalf("template: %d %s", template.status, template.header.Get("Content-Type"))
	}
	a := s.do(t, http.MethodPost, "/v1/outturns", estimator, template.body, "Content-Type", sheet.MediaTypeXLSX)
	var posted struct {
		Outturns []struct {
			Outturn calibration.Outturn
		}
	}
	a.decode(t, &posted)
	if a.status != http.StatusCreated || len(posted.Outturns) != 1 {
		t.Fatalf("%d %s", a.status, a.body)
	}
	want, err := money.Parse("55100")
	if err != nil {
		t.Fatal(err)
	}
	if got := posted.Outturns[0].Outturn; got.Costs[calibration.Material].Cmp(want) != 0 || got.WeighedMass != 46300 {
		t.Errorf("the example row reads %+v", got)
	}
}
