package main

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"io"
	"log/slog"
	"mime/multipart"
	"net/http"
	"net/http/httptest"
	"testing"

	"spanwright/api"
	"spanwright/api/auth"
	"spanwright/api/dashboard"
	"spanwright/api/pgtest"
	"spanwright/api/service"
	"spanwright/api/store"
)

func TestMain(m *testing.M) { pgtest.Main(m) }

// server is the whole service on a database of its own.
type server struct {
	*httptest.Server
	db    *pgtest.Database
	admin *store.Admin
}

func newServer(t *testing.T) *server {
	t.Helper()
	ctx := context.Background()
	db := pgtest.New(t)
	st, err := store.Open(ctx, db.ServiceURL, store.Options{})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(st.Close)
	a, err := store.OpenAdmin(ctx, db.AdminURL)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(a.Close)
	log := slog.New(slog.DiscardHandler)
	svc := newService(st, service.DefaultLimits(), log)
	pages, err := dashboard.New(dashboard.Config{Service: svc, Logger: log})
	if err != nil {
		t.Fatal(err)
	}
	handler, err := api.New(api.Config{Service: svc, Logger: log, Limits: service.DefaultLimits(), Exports: exports, Pages: pages})
	if err != nil {
		t.Fatal(err)
	}
	s := &server{Server: httptest.NewServer(handler), db: db, admin: a}
	t.Cleanup(s.Close)
	return s
}

// token makes a token of an organisation, which is made where it is missing.
func (s *server) token(t *testing.T, organisation string, role auth.Role) string {
	t.Helper()
	org, err := s.admin.EnsureOrganisation(context.Background(), organisation)
	if err != nil {
		t.Fatal(err)
	}
	text, err := s.admin.CreateToken(context.Background(), org, role, "test "+string(role), nil)
	if err != nil {
		t.Fatal(err)
	}
	return text
}

// answer is a response read to its end.
type answer struct {
	status int
	header http.Header
	body   []byte
}

func (a answer) decode(t *testing.T, into any) {
	t.Helper()
	if err := json.Unmarshal(a.body, into); err != nil {
		t.Fatalf("%v in %s", err, a.body)
	}
}

// do sends a request; headers are pairs.
func (s *server) do(t *testing.T, method, path, token string, body []byte, headers ...string) answer {
	t.Helper()
	r, err := http.NewRequestWithContext(t.Context(), method, s.URL+path, bytes.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	if token != "" {
		r.Header.Set("Authorization", "Bearer "+token)
	}
	for i := 0; i+1 < len(headers); i += 2 {
		r.Header.Set(headers[i], headers[i+1])
	}
	res, err := s.Client().Do(r)
	if err != nil {
		t.Fatal(err)
	}
	defer res.Body.Close()
	data, err := io.ReadAll(res.Body)
	if err != nil {
		t.Fatal(err)
	}
	return answer{res.StatusCode, res.Header, data}
}

// intake posts a file with fields, as a form would; every call has another
// boundary.
func (s *server) intake(t *testing.T, token, name string, data []byte, fields map[string]string, headers ...string) answer {
	t.Helper()
	var b bytes.Buffer
	w := multipart.NewWriter(&b)
	for k, v := range fields {
		if err := w.WriteField(k, v); err != nil {
			t.Fatal(err)
		}
	}
	part, err := w.CreateFormFile("file", name)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := part.Write(data); err != nil {
		t.Fatal(err)
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return s.do(t, http.MethodPost, "/v1/intake", token, b.Bytes(), append([]string{"Content-Type", w.FormDataContentType()}, headers...)...)
}

// taken is what the tests read of an intake's answer.
type taken struct {
	Project  struct{ ID string }
	Scheme   struct{ ID string }
	Schedule struct{ ID string }
	Estimate struct {
		ID             string
		Base           string
		P50            string
		DocumentSHA256 string `json:"document_sha256"`
	}
	Document json.RawMessage
}

func (s *server) take(t *testing.T, token, name string, data []byte, fields map[string]string, headers ...string) taken {
	t.Helper()
	a := s.intake(t, token, name, data, fields, headers...)
	if a.status != http.StatusCreated && a.status != http.StatusOK {
		t.Fatalf("intake: %d %s", a.status, a.body)
	}
	var out taken
	a.decode(t, &out)
	return out
}

// rows counts the rows of every table, as the administrator.
func (s *server) rows(t *testing.T) map[string]int {
	t.Helper()
	ctx := context.Background()
	names, err := s.db.Admin.Query(ctx, "select relname from pg_class where relnamespace = 'spanwright'::regnamespace and relkind = 'r'")
	if err != nil {
		t.Fatal(err)
	}
	var tables []string
	for names.Next() {
		var name string
		if err := names.Scan(&name); err != nil {
			t.Fatal(err)
		}
		tables = append(tables, name)
	}
	if err := names.Err(); err != nil {
		t.Fatal(err)
	}
	if len(tables) < 10 {
		t.Fatalf("found only the tables %v", tables)
	}
	out := map[string]int{}
	for _, name := range tables {
		var n int
		if err := s.db.Admin.QueryRow(ctx, fmt.Sprintf("select count(*) from spanwright.%q", name)).Scan(&n); err != nil {
			t.Fatal(err)
		}
		out[name] = n
	}
	return out
}
