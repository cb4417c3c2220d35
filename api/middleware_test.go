package api

import (
	"bufio"
	"compress/gzip"
	"context"
	"encoding/json"
	"fmt"
	"io"
	"net"
	"net/http"
	"net/http/httptest"
	"slices"
	"strings"
	"testing"
	"time"

	"spanwright/api/auth"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
)

func sorted(list string) string {
	if list == "" {
		return ""
	}
	parts := strings.Split(list, ", ")
	slices.Sort(parts)
	return strings.Join(parts, ", ")
}

func TestRequestID(t *testing.T) {
	w := newWorld(t)
	for sent, kept := range map[string]bool{
		"quay-42": true, "a.b_c:9": true, strings.Repeat("a", 100): true, strings.Repeat("a", 101): false, "": false, "two words": false, "<script>": false, "ü": false,
	} {
		rec, _ := w.want(200, call{method: "GET", path: "/v1/projects"}.with("X-Request-Id", sent))
		got := rec.Header().Get("X-Request-Id")
		if (got == sent) != kept || got == "" {
			t.Errorf("sent %q, answered %q", sent, got)
		}
		if !strings.Contains(w.log.String(), `"request_id":"`+got+`"`) {
			t.Errorf("the log has no request %q", got)
		}
	}
	w.want(201, call{method: "POST", path: "/v1/projects", body: `{"name":"A"}`}.with("X-Request-Id", "made-a"))
	_, events := w.want(200, call{method: "GET", path: "/v1/audit-events"})
	event := events["items"].([]any)[0].(map[string]any)
	if event["request_id"] != "made-a" || event["actor_name"] != "administrator token" || event["action"] != "create" {
		t.Errorf("the audit event %v does not name the request", event)
	}
}

func TestAccessLog(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	rec := w.do(call{method: "GET", path: "/v1/projects/" + ids["project"], token: w.tokens[auth.Viewer]}.with("X-Request-Id", "the-one"))
	var line map[string]any
	for text := range strings.Lines(w.log.String()) {
		if strings.Contains(text, "the-one") {
			if err := json.Unmarshal([]byte(text), &line); err != nil {
				t.Fatal(err)
			}
		}
	}
	if d, ok := line["duration"].(float64); !ok || d <= 0 {
		t.Errorf("duration %v", line["duration"])
	}
	delete(line, "time")
	delete(line, "duration")
	want := map[string]any{"level": "INFO", "msg": "request", "method": "GET", "route": "/v1/projects/:id", "status": 200.0, "bytes": float64(rec.Body.Len()),
		"request_id": "the-one", "actor": "viewer token"}
	if fmt.Sprint(line) != fmt.Sprint(want) {
		t.Errorf("logged %v, want %v", line, want)
	}
}

// No token, cookie, query, body or name of a thing comes into the log, whatever
// is asked and refused.
func TestNoSecretInLogs(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	_, made := w.want(201, call{method: "POST", path: "/v1/tokens", body: `{"name":"spare","role":"viewer"}`})
	secret := made["secret"].(string)
	for _, e := range endpoints(t) {
		for _, token := range []string{secret, w.tokens[auth.Administrator], "swt_malformed"} {
			c := e.call(ids).with("Cookie", "session=cookie-secret").with("X-Other", "header-secret")
			c.token = token
			c.path += "?q=query-secret"
			w.do(c)
		}
	}
	w.store.broken = errDatabase
	w.do(call{method: "GET", path: "/v1/projects"})
	log := w.log.String()
	for _, s := range []string{secret, w.tokens[auth.Administrator], "swt_", "cookie-secret", "query-secret", "header-secret", "Bearer", ids["project"]} {
		if strings.Contains(log, s) {
			t.Errorf("the log has %q", s)
		}
	}
}

// A token's secret is answered once and is in no record of the store.
func TestTokenSecretIsNowhereElse(t *testing.T) {
	w := newWorld(t)
	rec, made := w.want(201, call{method: "POST", path: "/v1/tokens", body: `{"name":"spare","role":"viewer"}`})
	secret := made["secret"].(string)
	if rec.Header().Get("Cache-Control") != "no-store" {
		t.Errorf("the answer with the secret may be stored: %q", rec.Header().Get("Cache-Control"))
	}
	for _, path := range []string{"/v1/tokens", "/v1/audit-events"} {
		if rec, _ := w.want(200, call{method: "GET", path: path}); strings.Contains(rec.Body.String(), secret[24:]) {
			t.Errorf("%s tells the secret", path)
		}
	}
	w.want(200, call{method: "GET", path: "/v1/projects", token: secret})
	w.want(200, call{method: "DELETE", path: "/v1/tokens/" + id(t, made, "token", "id")})
	w.want(401, call{method: "GET", path: "/v1/projects", token: secret})
}

func TestHeaders(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for path, cache := range map[string]string{
		"/v1/projects": "no-store", "/v1/projects/" + ids["project"]: "no-store", "/v1/nothing": "no-store", "/healthz": "no-store", "/openapi.json": "no-cache",
		"/v1/estimates/" + ids["estimate"] + "/document": "private, no-cache", "/v1/estimates/" + ids["estimate"] + "/lines": "private, no-cache",
		"/v1/schedules/" + ids["schedule"] + "/source": "private, no-cache",
	} {
		h := w.do(call{method: "GET", path: path}).Header()
		if h.Get("X-Content-Type-Options") != "nosniff" || h.Get("Referrer-Policy") != "same-origin" || !strings.Contains(h.Get("Content-Security-Policy"), "frame-ancestors 'none'") {
			t.Errorf("%s: headers %v", path, h)
		}
		if got := h.Get("Cache-Control"); got != cache {
			t.Errorf("%s: Cache-Control %q, want %q", path, got, cache)
		}
	}
}

func TestGzip(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	document := "/v1/estimates/" + ids["estimate"] + "/document"
	for _, c := range []struct {
		path, accept string
		zipped       bool
	}{
		{document, "", true}, {"/v1/rate-books/starting", "", true}, {"/openapi.json", "", true},
		{"/v1/projects/" + ids["project"], "", false}, {document, mediaXLSX, false}, {"/v1/nothing", "", false},
	} {
		r := call{method: "GET", path: c.path}.with("Accept-Encoding", "gzip").with("Accept", c.accept)
		rec := w.do(r)
		if got := rec.Header().Get("Content-Encoding") == "gzip"; got != c.zipped {
			t.Errorf("%s, Accept %q: gzip %v, want %v", c.path, c.accept, got, c.zipped)
			continue
		}
		if !c.zipped {
			continue
		}
		z, err := gzip.NewReader(rec.Body)
		if err != nil {
			t.Fatal(err)
		}
		got, err := io.ReadAll(z)
		if err != nil {
			t.Fatal(err)
		}
		if want := w.do(call{method: "GET", path: c.path}).Body.String(); string(got) != want {
			t.Errorf("%s: unzipped, the answer differs from the plain one", c.path)
		}
	}
}

func TestPages(t *testing.T) {
	pages := http.NewServeMux()
	pages.HandleFunc("GET /portfolio/{name}", func(w http.ResponseWriter, r *http.Request) {
		_, _ = io.WriteString(w, r.PathValue("name")+" "+r.Header.Get("X-Request-Id"))
	})
	pages.HandleFunc("/", func(http.ResponseWriter, *http.Request) { panic("page") })
	w := newWorld(t, func(_ *world, c *Config) { c.Pages = pages })
	rec := w.do(call{method: "GET", path: "/portfolio/quay", token: "none"}.with("X-Request-Id", "page-1"))
	if rec.Code != 200 || rec.Body.String() != "quay page-1" || rec.Header().Get("X-Content-Type-Options") != "nosniff" {
		t.Errorf("page: %d %q %v", rec.Code, rec.Body, rec.Header())
	}
	if !strings.Contains(w.log.String(), `"route":"GET /portfolio/{name}"`) {
		t.Errorf("the log has no route of the page: %s", w.log)
	}
	w.refused(500, call{method: "GET", path: "/other"})
	for _, path := range []string{"/v1", "/v1/nothing", "/v1/portfolio/quay"} {
		w.refused(404, call{method: "GET", path: path})
	}
	w.refused(405, call{method: "DELETE", path: "/v1/projects"})
}

// A computation may last longer than the time for reading the request: neither
// the server's deadline nor huma's ends its context.
func TestLongComputation(t *testing.T) {
	w := newWorld(t)
	stub := w.run
	var ended error
	w.run = func(ctx context.Context, j job.Job, p engine.Progress) (document.Document, error) {
		select {
		case <-ctx.Done():
			ended = ctx.Err()
		case <-time.After(400 * time.Millisecond):
		}
		return stub(ctx, j, p)
	}
	s := httptest.NewUnstartedServer(w.handler)
	s.Config.ReadTimeout = 100 * time.Millisecond
	s.Start()
	defer s.Close()
	c := intakeCall()
	r, err := http.NewRequest(c.method, s.URL+c.path, strings.NewReader(c.body))
	if err != nil {
		t.Fatal(err)
	}
	r.Header.Set("Content-Type", c.contentType)
	r.Header.Set("Authorization", "Bearer "+w.tokens[auth.Estimator])
	resp, err := s.Client().Do(r)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = resp.Body.Close() }()
	if resp.StatusCode != 201 || ended != nil {
		t.Errorf("status %d, context %v", resp.StatusCode, ended)
	}
}

// A body that does not arrive ends with 408, not with a hanging connection.
func TestSlowBody(t *testing.T) {
	w := newWorld(t)
	s := httptest.NewUnstartedServer(w.handler)
	s.Config.ReadTimeout = 200 * time.Millisecond
	s.Start()
	defer s.Close()
	conn, err := net.Dial("tcp", s.Listener.Addr().String())
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = conn.Close() }()
	_, _ = fmt.Fprintf(conn, "POST /v1/projects HTTP/1.1\r\nHost: quay\r\nAuthorization: Bearer %s\r\nContent-Type: application/json\r\nContent-Length: 20\r\n\r\n{", w.tokens[auth.Estimator])
	_ = conn.SetReadDeadline(time.Now().Add(5 * time.Second))
	resp, err := http.ReadResponse(bufio.NewReader(conn), nil)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = resp.Body.Close() }()
	if resp.StatusCode != http.StatusRequestTimeout {
		t.Errorf("status %d, want 408", resp.StatusCode)
	}
}

func TestServer(t *testing.T) {
	s := Server("127.0.0.1:0", http.NotFoundHandler())
	if s.ReadHeaderTimeout <= 0 || s.ReadTimeout <= s.ReadHeaderTimeout || s.IdleTimeout <= 0 || s.MaxHeaderBytes <= 0 || s.Addr != "127.0.0.1:0" || s.Handler == nil {
		t.Errorf("server %+v", s)
	}
}

func TestNewWithoutService(t *testing.T) {
	if _, err := New(Config{}); err == nil {
		t.Error("an API without a service was made")
	}
}
