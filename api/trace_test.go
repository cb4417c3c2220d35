package api

import (
	"net/url"
	"strings"
	"testing"

	"github.com/google/uuid"

	"spanwright/estimate/engine"
)

// explained is a world whose estimates the engine itself computes, with two of them.
func explained(t *testing.T, change ...func(*world, *Config)) (*world, map[string]string) {
	t.Helper()
	w := newWorld(t, append([]func(*world, *Config){func(w *world, _ *Config) { w.run = engine.Run }}, change...)...)
	_, taken := w.want(201, intakeCall())
	ids := map[string]string{"estimate": id(t, taken, "estimate", "id"), "scheme": id(t, taken, "scheme", "id"), "project": id(t, taken, "project", "id")}
	heavier := intakeCall(filled{"file", "quay.csv", "text/csv", strings.Replace(csvSchedule, ",4,6,", ",5,6,", 1)}, filled{name: "project", data: "Brackwater loading quay"}, filled{name: "scheme", data: "One trestle"})
	_, taken = w.want(201, heavier)
	ids["second"] = id(t, taken, "estimate", "id")
	return w, ids
}

func TestTrace(t *testing.T) {
	w, ids := explained(t)
	path := "/v1/estimates/" + ids["estimate"]
	_, figures := w.want(200, call{method: "GET", path: path + "/figures?prefix=category/"})
	list, _ := figures["items"].([]any)
	if len(list) < 5 {
		t.Fatalf("figures of categories: %v", figures)
	}
	for _, f := range list {
		name, _ := f.(map[string]any)["figure"].(string)
		if !strings.HasPrefix(name, "category/") {
			t.Errorf("%s has another prefix", name)
		}
		_, tree := w.want(200, call{method: "GET", path: path + "/trace?depth=1&figure=" + url.QueryEscape(name)})
		if tree["figure"] != name || tree["value"] != f.(map[string]any)["value"] {
			t.Errorf("%s: the list says %v, the tree %v = %v", name, f, tree["figure"], tree["value"])
		}
	}
	rec, _ := w.want(200, call{method: "GET", path: path + "/trace?figure=base&depth=0"}.with("Accept", "text/plain"))
	if ct := rec.Header().Get("Content-Type"); ct != "text/plain; charset=utf-8" || !strings.HasPrefix(rec.Body.String(), "base = ") || !strings.Contains(rec.Body.String(), "\n  category/material") {
		t.Errorf("%s: %.400s", ct, rec.Body)
	}
	_, shallow := w.want(200, call{method: "GET", path: path + "/trace?figure=base&depth=1"})
	for _, c := range shallow["children"].([]any) {
		if c.(map[string]any)["children"] != nil {
			t.Errorf("deeper than asked: %v", c)
		}
	}
}

func TestTraceRefusals(t *testing.T) {
	w, ids := explained(t)
	path := "/v1/estimates/" + ids["estimate"] + "/trace"
	p := w.refused(422, call{method: "GET", path: path + "?figure=category/materiel"})
	if len(p.Faults) != 1 || p.Faults[0].Found != "category/materiel" || !strings.Contains(p.Faults[0].Remedy, "category/material,") {
		t.Errorf("faults %+v do not name the near miss", p.Faults)
	}
	p = w.refused(422, call{method: "GET", path: path + "?figure=" + strings.Repeat("x", 500)})
	if len(p.Faults) != 1 || len([]rune(p.Faults[0].Found)) > 81 || !strings.Contains(p.Faults[0].Remedy, "/figures") {
		t.Errorf("faults %+v", p.Faults)
	}
	for _, query := range []string{"", "?figure=", "?figure=" + strings.Repeat("x", 501), "?figure=base&depth=-1", "?figure=base&depth=101", "?figure=base&depth=x"} {
		w.refused(422, call{method: "GET", path: path + query})
	}
	w.refused(406, call{method: "GET", path: path + "?figure=base"}.with("Accept", "image/png"))
	w.refused(404, call{method: "GET", path: "/v1/estimates/" + uuid.NewString() + "/trace?figure=base"})
	w.refused(404, call{method: "GET", path: "/v1/estimates/" + uuid.NewString() + "/figures"})
}
