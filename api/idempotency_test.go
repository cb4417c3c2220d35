package api

import (
	"encoding/hex"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"
)

// SHA-256 of the concatenation of 8-byte big-endian lengths and fields, computed
// with Python: hashlib.sha256((1).to_bytes(8, "big")+b"a"+(2).to_bytes(8, "big")+b"bc").
func TestFingerprint(t *testing.T) {
	const want = "3fafa1cf2f19a7c1129beb20cf0983f73a489a221fc0dd2f16d1be292d089205"
	if got := hex.EncodeToString(fingerprint([]byte("a"), []byte("bc"))); got != want {
		t.Errorf("fingerprint %s, want %s", got, want)
	}
	if a, b := fingerprint([]byte("ab"), []byte("c")), fingerprint([]byte("a"), []byte("bc")); string(a) == string(b) {
		t.Error("fields that read alike when joined have the same fingerprint")
	}
}

// creating are the operations that take a key, with two different bodies.
func creating(w *world) map[string][2]call {
	ids := stock(w)
	post := func(path, a, b string) [2]call {
		return [2]call{{method: "POST", path: path, body: a}, {method: "POST", path: path, body: b}}
	}
	csv := func(a, b string) [2]call {
		out := post("/v1/schemes/"+ids["scheme"]+"/schedules", a, b)
		out[0].contentType, out[1].contentType = "text/csv", "text/csv"
		return out
	}
	fields := func(project string) []filled {
		return []filled{{"file", "q.csv", "text/csv", csvSchedule}, {name: "project", data: project}, {name: "scheme", data: "S"}}
	}
	return map[string][2]call{
		"project":    post("/v1/projects", `{"name":"A"}`, `{"name":"B"}`),
		"scheme":     post("/v1/projects/"+ids["project"]+"/schemes", `{"name":"A"}`, `{"name":"B"}`),
		"multiplier": post("/v1/projects/"+ids["project"]+"/multipliers", strings.Replace(multiplierBody, "tidal", "a", 1), strings.Replace(multiplierBody, "tidal", "b", 1)),
		"book":       post("/v1/rate-books", bookJSON(w.t, "a"), bookJSON(w.t, "b")),
		"schedule":   csv(csvSchedule, csvSchedule+"B2,1,5,simple,8,2,IPE,S355\n"),
		"estimate":   post("/v1/schemes/"+ids["scheme"]+"/estimates", `{}`, `{"seed":2}`),
		"outturns":   {postOutturns(outturnHead + outturnRows(20, 21)), postOutturns(outturnHead + outturnRows(21, 22))},
		"fit":        post("/v1/calibrations", `{}`, `{"rate_book_id":"`+ids["book"]+`"}`),
		"intake":     {intakeCall(fields("IA")...), intakeCall(fields("IB")...)},
	}
}

func TestIdempotencyKey(t *testing.T) {
	w := newWorld(t)
	for name, calls := range creating(w) {
		first, firstBody := w.want(201, calls[0].with("Idempotency-Key", "key-"+name))
		status := 201
		if name == "intake" {
			status = 200
		}
		again, againBody := w.want(status, calls[0].with("Idempotency-Key", "key-"+name))
		if first.Body.String() != again.Body.String() || first.Header().Get("Location") != again.Header().Get("Location") {
			t.Errorf("%s: the repeated request answered %v at %s, the first %v at %s", name, againBody, again.Header().Get("Location"), firstBody, first.Header().Get("Location"))
		}
		p := w.refused(http.StatusConflict, calls[1].with("Idempotency-Key", "key-"+name))
		if !strings.Contains(p.Detail, "Idempotency-Key") {
			t.Errorf("%s: the conflict %q does not name the key", name, p.Detail)
		}
		w.want(201, calls[1].with("Idempotency-Key", "other-"+name))
	}
}

// A key belongs to the token that used it.
func TestIdempotencyKeyOfAnotherToken(t *testing.T) {
	w := newWorld(t)
	c := call{method: "POST", path: "/v1/projects", body: `{"name":"A"}`}.with("Idempotency-Key", "k")
	w.want(201, c)
	c.token = w.tokens["estimator"]
	w.refused(http.StatusConflict, c) // the name is taken: it was not taken for a repetition
	c.token = w.foreign
	w.want(201, c)
}

// The same key on another resource of the same kind is another request.
func TestIdempotencyKeyOnAnotherPath(t *testing.T) {
	w := newWorld(t)
	first := stock(w)["project"]
	_, p := w.want(201, call{method: "POST", path: "/v1/projects", body: `{"name":"Other"}`})
	at := func(project string) call {
		return call{method: "POST", path: "/v1/projects/" + project + "/schemes", body: `{"name":"Same"}`}.with("Idempotency-Key", "k")
	}
	w.want(201, at(first))
	w.refused(http.StatusConflict, at(id(t, p, "id")))
}

func TestIdempotencyKeyForm(t *testing.T) {
	w := newWorld(t)
	for key, status := range map[string]int{
		strings.Repeat("k", 200): 201, strings.Repeat("k", 201): 422, "with space": 422, "tab\tin": 422, "ümlaut": 422, "!~": 201,
	} {
		c := call{method: "POST", path: "/v1/projects", body: `{"name":"` + strings.ReplaceAll(key, "\t", " ") + `"}`}
		if len(key) > 200 {
			c.body = `{"name":"long"}`
		}
		w.want(status, c.with("Idempotency-Key", key))
	}
}

func TestIdempotencyKeyOnce(t *testing.T) {
	w := newWorld(t)
	for _, keys := range [][]string{{""}, {"a", "b"}, {"a", "a"}} {
		r := httptest.NewRequest("POST", "/v1/projects", strings.NewReader(`{"name":"A"}`))
		r.Header.Set("Content-Type", mediaJSON)
		r.Header.Set("Authorization", "Bearer "+w.tokens["estimator"])
		r.Header["Idempotency-Key"] = keys
		rec := httptest.NewRecorder()
		w.handler.ServeHTTP(rec, r)
		if p := w.checkProblem(rec); p.Status != http.StatusUnprocessableEntity || !strings.Contains(p.Detail, "Idempotency-Key") {
			t.Errorf("keys %q: %+v", keys, p)
		}
	}
}

// Another boundary, another order of parts and another Accept are the same request.
func TestIntakeIdempotency(t *testing.T) {
	w := newWorld(t)
	parts := []filled{{"file", "q.csv", "text/csv", csvSchedule}, {name: "project", data: "P"}, {name: "scheme", data: "S"}}
	_, first := w.want(201, intakeCall(parts...).with("Idempotency-Key", "k"))
	for range 3 {
		_, again := w.want(200, intakeCall(parts[2], parts[0], parts[1]).with("Idempotency-Key", "k"))
		if got, want := id(t, again, "estimate", "id"), id(t, first, "estimate", "id"); got != want {
			t.Errorf("another estimate: %s, want %s", got, want)
		}
	}
	rec, _ := w.want(200, intakeCall(parts...).with("Idempotency-Key", "k").with("Accept", mediaXLSX))
	if got := rec.Header().Get("Location"); got != "/v1/estimates/"+id(t, first, "estimate", "id") || rec.Header().Get("Content-Type") != mediaXLSX {
		t.Errorf("as a workbook: %s of %s", rec.Header().Get("Content-Type"), got)
	}
	if n := len(w.store.tenants[w.own].estimates); n != 1 {
		t.Errorf("%d estimates stored, want 1", n)
	}
	for name, other := range map[string][]filled{
		"file name": {{"file", "r.csv", "text/csv", csvSchedule}, parts[1], parts[2]},
		"content":   {{"file", "q.csv", "text/csv", csvSchedule + "\n"}, parts[1], parts[2]},
		"scheme":    {parts[0], parts[1], {name: "scheme", data: "T"}},
		"a part":    {parts[0], parts[1], parts[2], {name: "rate_book_id", data: ""}},
	} {
		if p := w.refused(http.StatusConflict, intakeCall(other...).with("Idempotency-Key", "k")); p.Detail == "" {
			t.Errorf("another %s: no detail", name)
		}
	}
}

// A refused request leaves its key free.
func TestIdempotencyAfterRefusal(t *testing.T) {
	w := newWorld(t)
	c := call{method: "POST", path: "/v1/projects", body: `{"name":"A","currency":"XXX"}`}.with("Idempotency-Key", "k")
	w.refused(422, c)
	c.body = `{"name":"A","currency":"EUR"}`
	w.want(201, c)
}

func TestTokenTakesNoKey(t *testing.T) {
	w := newWorld(t)
	c := call{method: "POST", path: "/v1/tokens", body: `{"name":"a","role":"viewer"}`}
	before := len(w.store.tenants[w.own].tokens)
	w.refused(422, c.with("Idempotency-Key", "k"))
	if got := len(w.store.tenants[w.own].tokens); got != before {
		t.Errorf("%d tokens, want %d: a refused request made one", got, before)
	}
}
