package dashboard_test

import (
	"bytes"
	"errors"
	"log/slog"
	"net/http"
	"net/url"
	"strings"
	"testing"

	"spanwright/api/dashboard"
	"spanwright/api/service"
)

func TestSignIn(t *testing.T) {
	f := full(t)
	f.sessions = map[string]bool{}
	h := handler(t, f)
	id := f.projects[0].ID.String()
	for _, c := range []struct{ name, form, location string }{
		{"plain", url.Values{"token": {token}}.Encode(), "/"},
		{"with the blanks of a copied line", url.Values{"token": {"  " + token + "\n"}}.Encode(), "/"},
		{"to a project", url.Values{"token": {token}, "project": {id}}.Encode(), "/projects/" + id},
		{"to another site", url.Values{"token": {token}, "project": {"https://example.org/"}}.Encode(), "/"},
		{"to another site without a scheme", url.Values{"token": {token}, "project": {"//example.org/" + id}}.Encode(), "/"},
	} {
		a := ask(t, h, "POST", "/sign-in", c.form, false)
		if a.status != http.StatusSeeOther || a.header.Get("Location") != c.location {
			t.Errorf("%s: %d to %q, want 303 to %q", c.name, a.status, a.header.Get("Location"), c.location)
		}
		got := a.header.Get("Set-Cookie")
		for _, part := range []string{"spanwright_session=" + secret + ";", "Path=/;", "Expires=", "HttpOnly", "Secure", "SameSite=Lax"} {
			if !strings.Contains(got, part) {
				t.Errorf("%s: the cookie %q lacks %s", c.name, got, part)
			}
		}
	}
}

func TestCookieWithoutHTTPS(t *testing.T) {
	h, err := dashboard.New(dashboard.Config{Service: newFixture()})
	if err != nil {
		t.Fatal(err)
	}
	got := ask(t, h, "POST", "/sign-in", "token="+token, false).header.Get("Set-Cookie")
	if got == "" || strings.Contains(got, "Secure") {
		t.Errorf("cookie %q, want one without Secure", got)
	}
}

func TestSignInRefused(t *testing.T) {
	h := handler(t, newFixture())
	for _, wrong := range []string{"", "swt_wrong", strings.Repeat("x", 300), `"><script>`} {
		a := ask(t, h, "POST", "/sign-in", url.Values{"token": {wrong}}.Encode(), false)
		if a.status != http.StatusUnauthorized || a.header.Get("Set-Cookie") != "" || a.header.Get("WWW-Authenticate") == "" {
			t.Errorf("%.20q: %d, cookie %q", wrong, a.status, a.header.Get("Set-Cookie"))
		}
		if !strings.Contains(a.body, "the token is not valid") || strings.Contains(a.body, "secret detail") || wrong != "" && strings.Contains(a.body, wrong) {
			t.Errorf("%.20q: the answer says too little or too much:\n%s", wrong, a.body)
		}
	}
	if a := ask(t, h, "POST", "/sign-in", "token="+strings.Repeat("x", 9000), false); a.status != http.StatusBadRequest {
		t.Errorf("a form of 9 kB: %d, want 400", a.status)
	}
	// A token in the address would end in logs and histories.
	if a := ask(t, h, "POST", "/sign-in?token="+token, "x=1", false); a.status != http.StatusUnauthorized {
		t.Errorf("a token in the address: %d, want 401", a.status)
	}
}

func TestSignOut(t *testing.T) {
	f := newFixture()
	a := ask(t, handler(t, f), "POST", "/sign-out", "", true)
	if a.status != http.StatusSeeOther || a.header.Get("Location") != "/sign-in" || !strings.Contains(a.header.Get("Set-Cookie"), "Max-Age=0") {
		t.Errorf("%d to %q, cookie %q", a.status, a.header.Get("Location"), a.header.Get("Set-Cookie"))
	}
	if len(f.sessions) != 0 {
		t.Error("the session is still on the server")
	}
	if a := ask(t, handler(t, f), "GET", "/sign-out", "", true); a.status != http.StatusNotFound {
		t.Errorf("GET /sign-out: %d, want 404", a.status)
	}
}

func TestWithoutASession(t *testing.T) {
	f := full(t)
	h := handler(t, f)
	id := f.projects[0].ID.String()
	for path, want := range map[string]string{
		"/":                                   "/sign-in",
		"/?cursor=x":                          "/sign-in",
		"/projects/" + id:                     "/sign-in?project=" + id,
		"/projects/" + id + "?scheme=x":       "/sign-in?project=" + id,
		"/projects/x":                         "/sign-in",
		"/estimates/" + id + "/document.json": "/sign-in",
	} {
		for name, cookie := range map[string]string{"no cookie": "", "an old cookie": "spanwright_session=gone"} {
			a := ask(t, h, "GET", path, "", false, "Cookie", cookie)
			if a.status != http.StatusSeeOther || a.header.Get("Location") != want {
				t.Errorf("%s with %s: %d to %q, want 303 to %q", path, name, a.status, a.header.Get("Location"), want)
			}
			if strings.Contains(a.body, "Brackwater") {
				t.Errorf("%s with %s: the answer shows a project", path, name)
			}
		}
	}
	n := read(t, ask(t, h, "GET", "/sign-in?project="+id, "", false).body)
	if got := find(n, "input[name=project]"); len(got) != 1 || get(got[0], "value") != id {
		t.Errorf("the form does not keep the project")
	}
	n = read(t, ask(t, h, "GET", "/sign-in?project=//example.org", "", false).body)
	if got := find(n, "input[name=project]"); len(got) != 0 {
		t.Errorf("the form keeps %q", get(got[0], "value"))
	}
}

// TestCrossOrigin sends what browsers send: Sec-Fetch-Site (Fetch Metadata) or,
// older ones, Origin.
func TestCrossOrigin(t *testing.T) {
	f := newFixture()
	h := handler(t, f)
	for _, c := range []struct {
		name, key, value string
		want             int
	}{
		{"same origin", "Sec-Fetch-Site", "same-origin", http.StatusSeeOther},
		{"typed by the reader", "Sec-Fetch-Site", "none", http.StatusSeeOther},
		{"another site", "Sec-Fetch-Site", "cross-site", http.StatusForbidden},
		{"a sibling", "Sec-Fetch-Site", "same-site", http.StatusForbidden},
		{"own origin", "Origin", "http://example.com", http.StatusSeeOther},
		{"another origin", "Origin", "https://evil.example", http.StatusForbidden},
		{"no origin", "Origin", "null", http.StatusForbidden},
	} {
		for _, path := range []string{"/sign-in", "/sign-out"} {
			a := ask(t, h, "POST", path, "token="+token, true, c.key, c.value)
			if a.status != c.want {
				t.Errorf("%s to %s: %d, want %d", c.name, path, a.status, c.want)
			}
			if c.want == http.StatusForbidden && a.header.Get("Set-Cookie") != "" {
				t.Errorf("%s to %s: a refused post sets a cookie", c.name, path)
			}
		}
	}
}

func TestHeaders(t *testing.T) {
	f := full(t)
	h := handler(t, f)
	for _, path := range []string{"/", "/sign-in", "/nowhere", "/projects/" + f.projects[0].ID.String()} {
		got := ask(t, h, "GET", path, "", true).header
		for key, want := range map[string]string{
			"Content-Security-Policy":    "default-src 'none'; style-src 'self'; img-src 'self' data:; form-action 'self'; frame-ancestors 'none'; base-uri 'none'",
			"X-Content-Type-Options":     "nosniff",
			"X-Frame-Options":            "DENY",
			"Referrer-Policy":            "same-origin",
			"Cross-Origin-Opener-Policy": "same-origin",
			"Cache-Control":              "no-store",
			"Content-Type":               "text/html; charset=utf-8",
		} {
			if got.Get(key) != want {
				t.Errorf("%s: %s is %q, want %q", path, key, got.Get(key), want)
			}
		}
	}
}

func TestStatic(t *testing.T) {
	h := handler(t, newFixture())
	n := read(t, ask(t, h, "GET", "/sign-in", "", false).body)
	for _, link := range find(n, "link") {
		a := ask(t, h, "GET", get(link, "href"), "", false)
		if a.status != http.StatusOK || a.header.Get("Cache-Control") != "public, max-age=31536000, immutable" {
			t.Errorf("%s: %d, %q", get(link, "href"), a.status, a.header.Get("Cache-Control"))
		}
	}
	for _, path := range []string{"/static/style.css", "/static/", "/static/style.000000000000.css", "/static/..%2fpage.go"} {
		if a := ask(t, h, "GET", path, "", false); a.status != http.StatusNotFound {
			t.Errorf("%s: %d, want 404", path, a.status)
		}
	}
}

// TestErrors checks each kind's status, and that the reader sees the request id
// and nothing of the cause, which goes to the log.
func TestErrors(t *testing.T) {
	const cause = "dial tcp 10.0.0.7: password=hunter2"
	for _, c := range []struct {
		name   string
		fail   error
		status int
		logged bool
	}{
		{"unknown", errors.New(cause), http.StatusInternalServerError, true},
		{"internal", &service.Error{Message: cause}, http.StatusInternalServerError, true},
		{"forbidden", &service.Error{Kind: service.Forbidden, Message: cause}, http.StatusForbidden, false},
		{"not found", &service.Error{Kind: service.NotFound, Message: cause}, http.StatusNotFound, false},
		{"invalid", &service.Error{Kind: service.Invalid, Message: cause}, http.StatusBadRequest, false},
		{"busy", &service.Error{Kind: service.Busy, Message: cause}, http.StatusServiceUnavailable, true},
		{"session ended meanwhile", &service.Error{Kind: service.Unauthenticated, Message: cause}, http.StatusSeeOther, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			f := newFixture()
			f.fail = c.fail
			var log bytes.Buffer
			h, err := dashboard.New(dashboard.Config{Service: f, Logger: slog.New(slog.NewTextHandler(&log, nil))})
			if err != nil {
				t.Fatal(err)
			}
			a := ask(t, h, "GET", "/", "", true)
			id := a.header.Get("X-Request-Id")
			if a.status != c.status || id == "" {
				t.Fatalf("status %d, request id %q, want %d", a.status, id, c.status)
			}
			if a.status != http.StatusSeeOther && !strings.Contains(a.body, id) || strings.Contains(a.body, "hunter2") {
				t.Errorf("the page lacks the request id or shows the cause:\n%s", a.body)
			}
			if got := strings.Contains(log.String(), "hunter2") && strings.Contains(log.String(), id); got != c.logged {
				t.Errorf("logged: %v, want %v: %s", got, c.logged, log.String())
			}
		})
	}
}

// TestRequestID takes the id that the server in front has set, not the client's.
func TestRequestID(t *testing.T) {
	inner := handler(t, newFixture())
	outer := http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		w.Header().Set("X-Request-Id", "from-the-server")
		inner.ServeHTTP(w, r)
	})
	a := ask(t, outer, "GET", "/nowhere", "", true, "X-Request-Id", "from-the-client")
	if !strings.Contains(a.body, "from-the-server") || strings.Contains(a.body, "from-the-client") {
		t.Errorf("the page shows another request id:\n%s", a.body)
	}
	if a := ask(t, inner, "GET", "/nowhere", "", true, "X-Request-Id", "from-the-client"); a.header.Get("X-Request-Id") == "from-the-client" {
		t.Error("the client chose the request id")
	}
}

func TestNotFound(t *testing.T) {
	f := full(t)
	h := handler(t, f)
	id := f.estimates[0].ID.String()
	for _, path := range []string{"/nowhere", "/projects/x", "/projects/" + id, "/estimates/x/document.json", "/estimates/" + id + "/document.pdf",
		"/estimates/" + f.projects[0].ID.String() + "/document.csv", "/v1/projects"} {
		a := ask(t, h, "GET", path, "", true)
		if a.status != http.StatusNotFound || !strings.Contains(a.body, "Nothing here") || strings.Contains(a.body, "secret detail") {
			t.Errorf("%s: %d", path, a.status)
		}
	}
	if a := ask(t, h, "GET", "/?cursor=unknown", "", true); a.status != http.StatusBadRequest {
		t.Errorf("an unknown cursor: %d, want 400", a.status)
	}
}

func TestDamagedDocument(t *testing.T) {
	f, path := one(t, demo(t))
	f.documents[f.estimates[0].ID] = []byte(`{"engine_version":`)
	for _, p := range []string{path, "/estimates/" + f.estimates[0].ID.String() + "/document.xlsx"} {
		if a := ask(t, handler(t, f), "GET", p, "", true); a.status != http.StatusInternalServerError {
			t.Errorf("%s: %d, want 500", p, a.status)
		}
	}
}

func TestNewNeedsAService(t *testing.T) {
	if _, err := dashboard.New(dashboard.Config{}); err == nil {
		t.Error("no error without a service")
	}
}
