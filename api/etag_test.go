package api

import (
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// The grammar of RFC 9110, 8.8.3 and 13.1.1: a list of quoted tags, each perhaps
// weak, with optional white space and empty elements (5.6.1.2), or “*”.
func TestParseTags(t *testing.T) {
	for _, c := range []struct {
		header string
		want   []tag
		star   bool
		ok     bool
	}{
		{`"3"`, []tag{{"3", false}}, false, true},
		{`W/"3"`, []tag{{"3", true}}, false, true},
		{`"xyzzy", "r2d2xxxx", "c3piozzzz"`, []tag{{"xyzzy", false}, {"r2d2xxxx", false}, {"c3piozzzz", false}}, false, true}, // the RFC's own example, 13.1.1
		{`W/"xyzzy", W/"r2d2xxxx",W/"c3piozzzz"`, []tag{{"xyzzy", true}, {"r2d2xxxx", true}, {"c3piozzzz", true}}, false, true},
		{"  \"1\"\t,, \"2\" , ", []tag{{"1", false}, {"2", false}}, false, true},
		{`"a,b"`, []tag{{"a,b", false}}, false, true},
		{`""`, []tag{{"", false}}, false, true},
		{"*", nil, true, true},
		{" * ", nil, true, true},
		{"", nil, false, false},
		{" , ", nil, false, false},
		{"3", nil, false, false},
		{`"3`, nil, false, false},
		{`"3" "4"`, nil, false, false},
		{`w/"3"`, nil, false, false},
		{`W/ "3"`, nil, false, false},
		{`"1", *`, nil, false, false},
		{`"a b"`, nil, false, false},
	} {
		tags, star, ok := parseTags(c.header)
		if ok != c.ok || star != c.star {
			t.Errorf("%q: star %v, ok %v; want %v, %v", c.header, star, ok, c.star, c.ok)
		}
		if d := cmp.Diff(c.want, tags, cmp.AllowUnexported(tag{})); d != "" {
			t.Errorf("%q: %s", c.header, d)
		}
	}
}

func conditionalCalls(t *testing.T, w *world) map[string]call {
	t.Helper()
	ids, out := stock(w), map[string]call{}
	for _, e := range endpoints(t) {
		if e.method == "PUT" || e.operation == "delete-multiplier" {
			c := e.call(ids)
			c.header = nil
			out[e.operation] = c
		}
	}
	return out
}

func TestEveryConditionalWrite(t *testing.T) {
	for _, c := range []struct {
		name, header string
		status       int
	}{
		{"none", "", 428}, {"blank", " ", 428}, {"commas", ", ,", 428},
		{"unquoted", "1", 400}, {"open", `"1`, 400},
		{"stale", `"2"`, 412}, {"weak", `W/"1"`, 412}, {"foreign", `"abc"`, 412}, {"padded", `"01x"`, 412}, {"list of stale", `"7", "8"`, 412}, {"empty tag", `""`, 412},
		{"negative", `"-1"`, 412},
		{"current", `"1"`, 200}, {"list", ` "9" , "1" `, 200}, {"list with weak", `W/"9", "1"`, 200}, {"any", "*", 200},
	} {
		w := newWorld(t)
		for operation, put := range conditionalCalls(t, w) {
			if c.header != "" {
				put = put.with("If-Match", c.header)
			}
			status := c.status
			if status == 200 && operation == "delete-multiplier" || status == 200 && operation == "update-multiplier" {
				continue // they share a multiplier; see TestRoundTrip and TestDeleteMultiplier
			}
			if rec := w.do(put); rec.Code != status {
				t.Errorf("%s, %s: status %d, want %d: %s", operation, c.name, rec.Code, status, rec.Body)
			} else if status >= 400 {
				w.checkProblem(rec)
			}
		}
	}
}

// A condition is looked at before the body.
func TestConditionBeforeBody(t *testing.T) {
	w := newWorld(t)
	for _, c := range conditionalCalls(t, w) {
		c.body = "nonsense"
		w.refused(http.StatusPreconditionRequired, c)
	}
}

// What is read can be changed and sent back; the tag then moves on.
func TestRoundTrip(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for path, body := range map[string]string{
		"/v1/projects/" + ids["project"]:       `{"name":"Renamed quay","currency":"EUR","display_units":"US"}`,
		"/v1/rate-books/" + ids["book"]:        bookJSON(t, "ratio"),
		"/v1/multipliers/" + ids["multiplier"]: strings.Replace(multiplierBody, `"likely":1.2`, `"likely":1.3`, 1),
	} {
		read, _ := w.want(200, call{method: "GET", path: path})
		first := read.Header().Get("ETag")
		put := call{method: "PUT", path: path, body: body}.with("If-Match", first)
		written, changed := w.want(200, put)
		second := written.Header().Get("ETag")
		again, now := w.want(200, call{method: "GET", path: path})
		if first != `"1"` || second != `"2"` || again.Header().Get("ETag") != second {
			t.Errorf("%s: tags %s, %s, %s; want \"1\", \"2\", \"2\"", path, first, second, again.Header().Get("ETag"))
		}
		if d := cmp.Diff(changed, now); d != "" {
			t.Errorf("%s: the answer to the write and what is read differ: %s", path, d)
		}
		w.refused(http.StatusPreconditionFailed, put)
	}
}

// The multiplier that GET answers, author and version included, can be put back.
func TestMultiplierPutBack(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	path := "/v1/multipliers/" + ids["multiplier"]
	_, m := w.want(200, call{method: "GET", path: path})
	value, err := marshal(map[string]any{"multiplier": m["multiplier"]})
	if err != nil {
		t.Fatal(err)
	}
	c := call{method: "PUT", path: path, body: string(value), token: w.tokens["estimator"]}.with("If-Match", `"1"`)
	_, after := w.want(200, c)
	if got := after["multiplier"].(map[string]any)["author"]; got != "estimator token" {
		t.Errorf("author %v, want the one who sent it, not the one in the body", got)
	}
}

func TestDeleteMultiplier(t *testing.T) {
	w := newWorld(t)
	path := "/v1/multipliers/" + stock(w)["multiplier"]
	c := call{method: "DELETE", path: path}
	rec, _ := w.want(204, c.with("If-Match", `"5", "1"`))
	if rec.Body.Len() != 0 {
		t.Errorf("204 with a body: %s", rec.Body)
	}
	w.refused(404, call{method: "GET", path: path})
	w.refused(404, c.with("If-Match", "*"))
	w.refused(404, c.with("If-Match", `"1", "2"`))
}
