package dashboard_test

import (
	"cmp"
	"context"
	"net/http"
	"net/http/httptest"
	"os"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/dashboard"
	"spanwright/api/service"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// token is the only one that the fixture's organisation has, secret the only
// session.
const (
	token  = "swt_00000000000000000000_AAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAA"
	secret = "a-session-secret"
)

// fixture is a service in memory. Lists are newest first, as the service's are.
type fixture struct {
	projects  []service.Project
	schemes   []service.Scheme
	estimates []service.Estimate
	documents map[uuid.UUID][]byte
	sessions  map[string]bool
	name      string
	fail      error // of every reading use case, where set
	ids       int
}

var _ dashboard.Service = (*fixture)(nil)

func (f *fixture) Export(_ context.Context, work func() ([]byte, error)) ([]byte, error) {
	return work()
}

func newFixture() *fixture {
	return &fixture{documents: map[uuid.UUID][]byte{}, sessions: map[string]bool{secret: true}, name: "quay desk"}
}

// id returns ids that grow, as those of the service do.
func (f *fixture) id() uuid.UUID {
	f.ids++
	return uuid.UUID{6: 0x70, 8: 0x80, 14: byte(f.ids >> 8), 15: byte(f.ids)}
}

func (f *fixture) at() time.Time {
	return time.Date(2026, 6, 1, 8, 0, 0, 0, time.UTC).Add(time.Duration(f.ids) * time.Minute)
}

func (f *fixture) addProject(name, currency string) service.Project {
	p := service.Project{ID: f.id(), Name: name, Currency: currency, BaseDate: "2026-06-01", DisplayUnits: "SI", Version: 1, CreatedAt: f.at()}
	f.projects = slices.Insert(f.projects, 0, p)
	return p
}

func (f *fixture) addScheme(p service.Project, name string) service.Scheme {
	s := service.Scheme{ID: f.id(), Project: p.ID, Name: name, Version: 1, CreatedAt: f.at()}
	f.schemes = slices.Insert(f.schemes, 0, s)
	return s
}

// addEstimate stores a document as the service would.
func (f *fixture) addEstimate(t *testing.T, s service.Scheme, d document.Document) service.Estimate {
	t.Helper()
	data, sum, err := d.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	e, err := service.Head(d)
	if err != nil {
		t.Fatal(err)
	}
	e.ID, e.Scheme, e.DocumentSHA256, e.CreatedAt, e.CreatedBy = f.id(), s.ID, sum, f.at(), "quay desk"
	f.estimates = slices.Insert(f.estimates, 0, e)
	f.documents[e.ID] = data
	return e
}

func (f *fixture) SignIn(_ context.Context, text, _ string) (string, time.Time, error) {
	if text != token {
		return "", time.Time{}, &service.Error{Kind: service.Unauthenticated, Message: "secret detail: token unknown"}
	}
	f.sessions[secret] = true
	return secret, time.Now().Add(service.SessionLife), nil
}

func (f *fixture) SignOut(_ context.Context, s, _ string) error {
	delete(f.sessions, s)
	return nil
}

func (f *fixture) Session(_ context.Context, s, requestID string) (service.Actor, error) {
	if !f.sessions[s] {
		return service.Actor{}, &service.Error{Kind: service.Unauthenticated, Message: "secret detail: session unknown"}
	}
	return service.Actor{Name: f.name, Role: auth.Viewer, RequestID: requestID}, nil
}

// Projects pages by name of the first project of the page.
func (f *fixture) Projects(_ context.Context, _ service.Actor, p service.Page) (service.List[service.Project], error) {
	from := 0
	if p.Cursor != "" {
		from = slices.IndexFunc(f.projects, func(x service.Project) bool { return x.Name == p.Cursor })
	}
	if f.fail != nil || from < 0 {
		return service.List[service.Project]{}, cmp.Or[error](f.fail, &service.Error{Kind: service.Invalid, Message: "secret detail: cursor"})
	}
	to := min(from+p.Limit, len(f.projects))
	l := service.List[service.Project]{Items: f.projects[from:to]}
	if to < len(f.projects) {
		l.Next = f.projects[to].Name
	}
	return l, nil
}

var errNone = &service.Error{Kind: service.NotFound, Message: "secret detail: no such row"}

func (f *fixture) Project(_ context.Context, _ service.Actor, id uuid.UUID) (service.Project, error) {
	i := slices.IndexFunc(f.projects, func(p service.Project) bool { return p.ID == id })
	if f.fail != nil || i < 0 {
		return service.Project{}, cmp.Or[error](f.fail, errNone)
	}
	return f.projects[i], nil
}

func (f *fixture) Schemes(_ context.Context, _ service.Actor, project uuid.UUID, p service.Page) (service.List[service.Scheme], error) {
	var l service.List[service.Scheme]
	for _, s := range f.schemes {
		if s.Project == project && len(l.Items) < p.Limit {
			l.Items = append(l.Items, s)
		}
	}
	return l, nil
}

func (f *fixture) NewestEstimate(_ context.Context, _ service.Actor, scheme uuid.UUID) (service.Estimate, error) {
	i := slices.IndexFunc(f.estimates, func(e service.Estimate) bool { return e.Scheme == scheme })
	if i < 0 {
		return service.Estimate{}, errNone
	}
	return f.estimates[i], nil
}

func (f *fixture) Document(_ context.Context, _ service.Actor, id uuid.UUID) ([]byte, error) {
	d, ok := f.documents[id]
	if f.fail != nil || !ok {
		return nil, cmp.Or[error](f.fail, errNone)
	}
	return d, nil
}

// demo is an estimate of the invented loading quay, as the engine made it.
func demo(t *testing.T) document.Document {
	t.Helper()
	data, err := os.ReadFile("testdata/document.json")
	if err != nil {
		t.Fatal(err)
	}
	d, err := document.Parse(data)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// serve serves the pages of a fixture.
func serve(t *testing.T, f *fixture) *httptest.Server {
	t.Helper()
	h, err := dashboard.New(dashboard.Config{Service: f})
	if err != nil {
		t.Fatal(err)
	}
	s := httptest.NewServer(h)
	t.Cleanup(s.Close)
	return s
}

// answer is a finished answer.
type answer struct {
	status int
	header http.Header
	body   string
}

// ask sends a request to the pages without following redirects; a cookie of the
// session goes along where signed is set.
func ask(t *testing.T, h http.Handler, method, path, body string, signed bool, headers ...string) answer {
	t.Helper()
	r := httptest.NewRequest(method, path, strings.NewReader(body))
	if body != "" {
		r.Header.Set("Content-Type", "application/x-www-form-urlencoded")
	}
	if signed {
		r.AddCookie(&http.Cookie{Name: "spanwright_session", Value: secret})
	}
	for i := 0; i+1 < len(headers); i += 2 {
		r.Header.Set(headers[i], headers[i+1])
	}
	w := httptest.NewRecorder()
	h.ServeHTTP(w, r)
	return answer{w.Code, w.Header(), w.Body.String()}
}

func handler(t *testing.T, f *fixture) http.Handler {
	t.Helper()
	h, err := dashboard.New(dashboard.Config{Service: f, SecureCookies: true})
	if err != nil {
		t.Fatal(err)
	}
	return h
}

func decimal(t *testing.T, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}
