package api

import (
	"bytes"
	"cmp"
	"context"
	"encoding/json"
	"fmt"
	"io"
	"log/slog"
	"mime/multipart"
	"net/http"
	"net/http/httptest"
	"net/textproto"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/service"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
)

const csvSchedule = "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Section or family,Grade\nB1,4,6,simple,8,2,IPE,S355\n"

// world is a server over the fake store, with a token for each role in the own
// organisation and an administrator of another one.
type world struct {
	t       *testing.T
	handler http.Handler
	service *service.Service
	store   *fakeStore
	own     uuid.UUID
	tokens  map[auth.Role]string
	foreign string
	log     *syncBuffer
	run     service.RunFunc
	limits  service.Limits
	now     time.Time
}

type syncBuffer struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (s *syncBuffer) Write(p []byte) (int, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.b.Write(p)
}

func (s *syncBuffer) String() string {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.b.String()
}

func newWorld(t *testing.T, change ...func(*world, *Config)) *world {
	t.Helper()
	var ids atomic.Int64
	newID := func() (uuid.UUID, error) {
		return uuid.MustParse(fmt.Sprintf("01980000-0000-7000-8000-%012x", ids.Add(1))), nil
	}
	w := &world{t: t, own: uuid.New(), tokens: map[auth.Role]string{}, log: &syncBuffer{}, limits: service.DefaultLimits(),
		now: time.Date(2026, 6, 1, 12, 0, 0, 0, time.UTC)}
	w.store = &fakeStore{tenants: map[uuid.UUID]*tenant{}}
	w.run = func(_ context.Context, j job.Job, _ engine.Progress) (document.Document, error) {
		d := exampleDocument()
		d.Job.Project, d.Job.Currency, d.Totals.Members = j.Settings.Project, j.Settings.Currency, len(j.Members)
		return d, nil
	}
	c := Config{Version: "1.2.3", Exports: Exports{
		Workbook: func(document.Document) ([]byte, error) { return []byte("PK workbook"), nil },
		CSV:      func(document.Document) ([]byte, error) { return []byte("id,amount\n"), nil },
	}}
	for _, f := range change {
		f(w, &c)
	}
	w.service = service.New(service.Config{Store: w.store, Limits: w.limits, Build: "test", NewID: newID, Logger: slog.New(slog.DiscardHandler),
		Now: func() time.Time { return w.now },
		Run: func(ctx context.Context, j job.Job, p engine.Progress) (document.Document, error) {
			return w.run(ctx, j, p)
		}})
	for _, role := range auth.Roles() {
		w.tokens[role] = w.token(w.own, role, newID)
	}
	w.foreign = w.token(uuid.New(), auth.Administrator, newID)
	c.Service, c.Limits = w.service, w.limits
	c.Logger = slog.New(slog.NewJSONHandler(w.log, &slog.HandlerOptions{Level: slog.LevelDebug}))
	e, err := New(c)
	if err != nil {
		t.Fatal(err)
	}
	w.handler = e
	return w
}

func (w *world) token(organisation uuid.UUID, role auth.Role, newID func() (uuid.UUID, error)) string {
	if w.store.tenants[organisation] == nil {
		w.store.tenants[organisation] = newTenant()
		book, _ := newID()
		w.store.tenants[organisation].books[book] = []service.RateBook{{ID: book, Name: service.StartingBook, Version: 1, Number: 1, Content: ratebook.Ratio()}}
	}
	s := auth.NewToken()
	id, _ := newID()
	t := w.store.tenants[organisation]
	t.tokens[id] = service.Token{ID: id, PublicID: s.PublicID, Name: string(role) + " token", Role: role, Version: 1}
	t.hashes[id] = s.SHA256
	return s.Text
}

// call is one request of a test; the token is the administrator's unless set.
type call struct {
	method, path string
	body         string
	contentType  string // JSON where there is a body
	token        string
	header       map[string]string
}

func (c call) with(name, value string) call {
	h := map[string]string{name: value}
	for k, v := range c.header {
		if k != name {
			h[k] = v
		}
	}
	c.header = h
	return c
}

func (w *world) do(c call) *httptest.ResponseRecorder {
	r := httptest.NewRequest(c.method, c.path, strings.NewReader(c.body))
	if c.body != "" {
		r.Header.Set("Content-Type", mediaJSON)
	}
	if c.contentType != "" {
		r.Header.Set("Content-Type", c.contentType)
	}
	if c.token == "" {
		c.token = w.tokens[auth.Administrator]
	}
	if c.token != "none" {
		r.Header.Set("Authorization", "Bearer "+c.token)
	}
	for k, v := range c.header {
		r.Header.Set(k, v)
	}
	rec := httptest.NewRecorder()
	w.handler.ServeHTTP(rec, r)
	return rec
}

// want makes a request and checks its status; it decodes a JSON answer.
func (w *world) want(status int, c call) (*httptest.ResponseRecorder, map[string]any) {
	w.t.Helper()
	rec := w.do(c)
	if rec.Code != status {
		w.t.Fatalf("%s %s: status %d, want %d: %s", c.method, c.path, rec.Code, status, rec.Body)
	}
	if status >= 400 {
		w.checkProblem(rec)
	}
	var body map[string]any
	if strings.HasPrefix(rec.Header().Get("Content-Type"), "application/") && rec.Body.Len() > 0 && rec.Body.Bytes()[0] == '{' {
		if err := json.Unmarshal(rec.Body.Bytes(), &body); err != nil {
			w.t.Fatalf("%s %s: %v in %s", c.method, c.path, err, rec.Body)
		}
	}
	return rec, body
}

// checkProblem checks what every refusal has: RFC 9457 and the request's id.
func (w *world) checkProblem(rec *httptest.ResponseRecorder) Problem {
	w.t.Helper()
	if got := rec.Header().Get("Content-Type"); got != "application/problem+json" {
		w.t.Errorf("status %d: Content-Type %q, want application/problem+json: %s", rec.Code, got, rec.Body)
	}
	d := json.NewDecoder(bytes.NewReader(rec.Body.Bytes()))
	d.DisallowUnknownFields()
	var p Problem
	if err := d.Decode(&p); err != nil {
		w.t.Fatalf("status %d: no problem document: %v: %s", rec.Code, err, rec.Body)
	}
	if p.Type != "about:blank" || p.Status != rec.Code || p.Title != http.StatusText(rec.Code) {
		w.t.Errorf("problem %+v does not say status %d", p, rec.Code)
	}
	if p.RequestID == "" || p.RequestID != rec.Header().Get("X-Request-Id") {
		w.t.Errorf("problem has request id %q, the header %q", p.RequestID, rec.Header().Get("X-Request-Id"))
	}
	return p
}

// refused makes a request that must be refused and returns the problem.
func (w *world) refused(status int, c call) Problem {
	w.t.Helper()
	rec, _ := w.want(status, c)
	var p Problem
	if err := json.Unmarshal(rec.Body.Bytes(), &p); err != nil {
		w.t.Fatal(err)
	}
	return p
}

// filled is a form field or file.
type filled struct{ name, file, contentType, data string }

// formOf writes a multipart body; another boundary each time.
func formOf(parts ...filled) (body, contentType string) {
	var b bytes.Buffer
	m := multipart.NewWriter(&b)
	for _, p := range parts {
		h := textproto.MIMEHeader{}
		disposition := fmt.Sprintf("form-data; name=%q", p.name)
		if p.file != "" {
			disposition += fmt.Sprintf("; filename=%q", p.file)
		}
		h.Set("Content-Disposition", disposition)
		if p.contentType != "" {
			h.Set("Content-Type", p.contentType)
		}
		part, _ := m.CreatePart(h)
		_, _ = part.Write([]byte(p.data))
	}
	_ = m.Close()
	return b.String(), m.FormDataContentType()
}

func intakeCall(parts ...filled) call {
	if len(parts) == 0 {
		parts = []filled{{"file", "quay.csv", "text/csv", csvSchedule}, {name: "project", data: "Brackwater loading quay"}, {name: "scheme", data: "Two trestles"}}
	}
	body, contentType := formOf(parts...)
	return call{method: http.MethodPost, path: "/v1/intake", body: body, contentType: contentType}
}

// id is a member of an answer that is an id, by path.
func id(t *testing.T, body map[string]any, path ...string) string {
	t.Helper()
	for _, p := range path[:len(path)-1] {
		body, _ = body[p].(map[string]any)
	}
	text, _ := body[path[len(path)-1]].(string)
	if _, err := uuid.Parse(text); err != nil {
		t.Fatalf("no id at %v in %v", path, body)
	}
	return text
}

// refusedStreaming sends a body whose length is not declared.
func (w *world) refusedStreaming(c call) Problem {
	w.t.Helper()
	r := httptest.NewRequest(c.method, c.path, struct{ io.Reader }{strings.NewReader(c.body)})
	r.Header.Set("Content-Type", cmp.Or(c.contentType, mediaJSON))
	r.Header.Set("Authorization", "Bearer "+w.tokens[auth.Administrator])
	for k, v := range c.header {
		r.Header.Set(k, v)
	}
	rec := httptest.NewRecorder()
	w.handler.ServeHTTP(rec, r)
	return w.checkProblem(rec)
}

// blocking tells when a computation has begun and waits for its release.
func blocking(entered chan<- struct{}, release <-chan struct{}, next service.RunFunc) service.RunFunc {
	return func(ctx context.Context, j job.Job, p engine.Progress) (document.Document, error) {
		entered <- struct{}{}
		<-release
		return next(ctx, j, p)
	}
}
