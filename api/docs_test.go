package api

import (
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"os"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/document"
)

var update = flag.Bool("update", false, "write testdata/openapi.json anew")

// TestSpec holds the generated document to the committed one, so that a change of
// the API is seen in the diff. Regenerate with go test ./api -run TestSpec -update.
func TestSpec(t *testing.T) {
	got, err := Spec()
	if err != nil {
		t.Fatal(err)
	}
	again, err := Spec()
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, again) {
		t.Error("the document is another one each time")
	}
	const file = "testdata/openapi.json"
	if *update {
		if err := os.WriteFile(file, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(strings.Split(string(want), "\n"), strings.Split(string(got), "\n")); d != "" {
		t.Errorf("the OpenAPI document differs from %s; run go test ./api -run TestSpec -update: %s", file, d)
	}
}

func TestSpecIsServed(t *testing.T) {
	w := newWorld(t)
	want, err := Spec()
	if err != nil {
		t.Fatal(err)
	}
	rec, doc := w.want(200, call{method: "GET", path: "/openapi.json", token: "none"})
	if rec.Body.String() != string(want) || doc["openapi"] != "3.1.0" {
		t.Errorf("the document served (%v) is not that of Spec", doc["openapi"])
	}
	_, old := w.want(200, call{method: "GET", path: "/openapi-3.0.json", token: "none"})
	if v, _ := old["openapi"].(string); !strings.HasPrefix(v, "3.0") || len(old["paths"].(map[string]any)) != len(doc["paths"].(map[string]any)) {
		t.Errorf("the older document says %v", old["openapi"])
	}
}

func operations(a *api) map[string]*huma.Operation {
	out := map[string]*huma.Operation{}
	for _, item := range a.huma.OpenAPI().Paths {
		for _, o := range []*huma.Operation{item.Get, item.Post, item.Put, item.Delete} {
			if o != nil {
				out[o.OperationID] = o
			}
		}
	}
	return out
}

// Every operation says what it is, and every JSON body and answer has an example
// that its own schema accepts.
func TestSpecIsComplete(t *testing.T) {
	a, _ := build(Config{Exports: offered})
	for id, o := range operations(a) {
		if o.Summary == "" || len(o.Tags) != 1 || strings.HasPrefix(o.Path, "/v1/") != (len(o.Security) == 1) {
			t.Errorf("%s: summary %q, tags %v, security %v", id, o.Summary, o.Tags, o.Security)
		}
		if o.RequestBody != nil {
			checkExamples(t, a, id, o.RequestBody.Content)
		}
		for status, r := range o.Responses {
			if r.Description == "" || status == "default" {
				t.Errorf("%s: response %s is not described", id, status)
			}
			checkExamples(t, a, id+" "+status, r.Content)
		}
	}
}

func checkExamples(t *testing.T, a *api, where string, content map[string]*huma.MediaType) {
	t.Helper()
	for media, m := range content {
		if media != mediaJSON && media != mediaProblem {
			continue
		}
		data, err := json.Marshal(m.Example)
		if err != nil {
			t.Fatal(err)
		}
		var v any
		if err := json.Unmarshal(data, &v); err != nil || v == nil {
			t.Errorf("%s: no example of %s", where, media)
			continue
		}
		fits(t, a, where+", example", m.Schema, v)
	}
}

// fits checks a value against a schema of the document.
func fits(t *testing.T, a *api, where string, s *huma.Schema, v any) {
	t.Helper()
	var r huma.ValidateResult
	huma.Validate(a.huma.OpenAPI().Components.Schemas, s, huma.NewPathBuffer(nil, 0), huma.ModeReadFromServer, v, &r)
	for _, err := range r.Errors {
		t.Errorf("%s: %v", where, err)
	}
}

// What is answered fits its schema: every successful call of the endpoint table.
func TestAnswersFitTheSpec(t *testing.T) {
	a, _ := build(Config{Exports: offered})
	all := operations(a)
	for _, e := range endpoints(t) {
		w := newWorld(t)
		rec := w.do(e.call(stock(w)))
		r := all[e.operation].Responses[fmt.Sprint(rec.Code)]
		if r == nil {
			t.Errorf("%s: status %d is not in the document", e.operation, rec.Code)
			continue
		}
		media, _, _ := strings.Cut(rec.Header().Get("Content-Type"), ";")
		if m := r.Content[media]; m != nil && media == mediaJSON {
			checkAnswer(t, a, e.operation, rec.Code, rec.Body.Bytes())
		} else if m == nil && rec.Code != 204 {
			t.Errorf("%s: %q is not in the document", e.operation, media)
		}
	}
}

func TestSchemaOfNumbers(t *testing.T) {
	a, _ := build(Config{})
	s := a.huma.OpenAPI().Components.Schemas
	for name, want := range map[string]string{"base": huma.TypeString, "contingency": huma.TypeString, "confidence": huma.TypeNumber, "members": huma.TypeInteger} {
		if got := s.Map()["DocumentTotals"].Properties[name].Type; got != want {
			t.Errorf("%s has type %s, want %s", name, got, want)
		}
	}
	if got := s.Schema(reflect.TypeFor[document.Number](), true, ""); got.Type != huma.TypeNumber {
		t.Errorf("document.Number has type %s", got.Type)
	}
	pattern := regexp.MustCompile(s.Map()["DocumentTotals"].Properties["base"].Pattern)
	for text, want := range map[string]bool{"1": true, "-1.50": true, "+0.5": true, ".5": true, "5.": true, "": false, ".": false, "1e3": false, "1,5": false, "NaN": false, "1.2.3": false, "-": false} {
		if got := pattern.MatchString(text); got != want {
			t.Errorf("pattern of decimals on %q: %v, want %v", text, got, want)
		}
	}
}

// The pages load nothing from elsewhere: every address in them is relative.
func TestDocsAreOffline(t *testing.T) {
	w := newWorld(t)
	rec, _ := w.want(301, call{method: "GET", path: "/docs", token: "none"})
	if got := rec.Header().Get("Location"); got != "/docs/" {
		t.Errorf("/docs leads to %q", got)
	}
	rec, _ = w.want(200, call{method: "GET", path: "/docs/", token: "none"})
	page := rec.Body.String()
	if !strings.Contains(page, "/openapi.json") {
		t.Error("the page does not name the document")
	}
	addresses := regexp.MustCompile(`(?:src|href)="([^"]+)"`).FindAllStringSubmatch(page, -1)
	if len(addresses) < 3 {
		t.Fatalf("%d addresses in the page", len(addresses))
	}
	for _, a := range addresses {
		if strings.Contains(a[1], "//") {
			t.Errorf("the page loads %s", a[1])
			continue
		}
		if rec := w.do(call{method: "GET", path: a[1], token: "none"}); rec.Code != 200 || rec.Body.Len() == 0 {
			t.Errorf("%s: status %d, %d bytes", a[1], rec.Code, rec.Body.Len())
		}
	}
	policy := rec.Header().Get("Content-Security-Policy")
	if strings.Contains(policy, "http") || slices.Contains(strings.Fields(policy), "*") || !strings.Contains(policy, "default-src 'none'") {
		t.Errorf("policy %q lets the page load from elsewhere", policy)
	}
}
