package api

import (
	"encoding/json"
	"fmt"
	"math"
	"net/http"
	"strings"
	"testing"

	"spanwright/estimate/document"
)

// exampleBody is the JSON of an example.
func exampleBody(t *testing.T, name string) string {
	t.Helper()
	data, err := marshal(examples()[name])
	if err != nil {
		t.Fatal(err)
	}
	return strings.TrimSpace(string(data))
}

func calculatorCall(name, body string) call {
	return call{method: "POST", path: "/v1/calculators/" + name, body: body}
}

// titleOf is the name of a calculator's types.
func titleOf(name string) string {
	var title strings.Builder
	for word := range strings.SplitSeq(name, "-") {
		title.WriteString(strings.ToUpper(word[:1]) + word[1:])
	}
	return title.String()
}

// at reads a number of an answer by its path.
func at(t *testing.T, answer map[string]any, path ...any) float64 {
	t.Helper()
	var v any = answer
	for _, step := range path {
		switch s := step.(type) {
		case string:
			m, _ := v.(map[string]any)
			v = m[s]
		case int:
			l, _ := v.([]any)
			if s >= len(l) {
				t.Fatalf("%v: the list has %d entries", path, len(l))
			}
			v = l[s]
		}
	}
	n, ok := v.(float64)
	if !ok {
		t.Fatalf("%v is %v, no number", path, v)
	}
	return n
}

// The tube boom of 50 m held at its root and at two thirds, own weight alone: by hand
// from the three-moment equation, common practice, no source. Beside it a
// propped cantilever of the handbooks.
func TestBeamValues(t *testing.T) {
	w := newWorld(t)
	_, boom := w.want(200, calculatorCall("beam", `{"length_m":50,"section":"CHS 508x25.4","grade":"S355",
		"supports":[{"position_m":0,"kind":"pinned"},{"position_m":33.333333333333336,"kind":"pinned"}]}`))
	_, fixed := w.want(200, calculatorCall("beam", `{"length_m":6,"segments":[{"to_m":6,"ei_knm2":17547.6}],"supports":[{"position_m":0,"kind":"fixed"},{"position_m":6,"kind":"pinned"}],
		"loads":[{"kind":"uniform","nature":"permanent","load_kn_m":12}]}`))
	for _, row := range []struct {
		name            string
		got, want, half float64
	}{
		{"span moment", at(t, boom, "spans", 0, "moment_max_knm", "value"), 231.6, 0.05},
		{"overhang moment", at(t, boom, "extremes", "moment_min_knm", "value"), -411.7, 0.06},
		{"inner reaction", at(t, boom, "reactions", 1, "max_kn"), 111.2, 0.05},
		{"tip", at(t, boom, "extremes", "deflection_max_mm", "value"), 121, 0.5},
		{"inner reaction, split", at(t, boom, "split_method", "reactions", 1, "max_kn"), 98.8, 0.05},
		{"propped cantilever, wL²/8", at(t, fixed, "extremes", "moment_min_knm", "value"), -54, 1e-6},
		{"9wL²/128", at(t, fixed, "extremes", "moment_max_knm", "value"), 30.375, 1e-6},
		{"at 5L/8 from the fixed end", at(t, fixed, "extremes", "moment_max_knm", "position_m"), 3.75, 1e-6},
		{"wL⁴/185EI", at(t, fixed, "extremes", "deflection_max_mm", "value"), 4.800, 0.001},
	} {
		if !(math.Abs(row.got-row.want) <= row.half) {
			t.Errorf("%s = %v, want %v", row.name, row.got, row.want)
		}
	}
	if boom["caution"] != document.Caution {
		t.Errorf("caution %v", boom["caution"])
	}
}

// AISC Steel Construction Manual table 3-2, W18x50 in A992: φbMpx = 379 kip-ft, from
// memory; HE 200 B in S235, 5 m, about z: case C010 of structural/resistance.
func TestResistanceValues(t *testing.T) {
	w := newWorld(t)
	for _, row := range []struct {
		body, check string
		want        float64 // kN, kNm
	}{
		{`{"section":"W18x50","grade":"A992","design_basis":"aisc-lrfd","demand":{"moment_knm":100,"lateral_spacing_m":0.5}}`, "bending", 379 * 1.3558179},
		{`{"section":"HEB 200","grade":"S235","design_basis":"en1993","demand":{"axial_kn":500,"buckling_length_y_m":5}}`, "axial", 937.318},
	} {
		_, a := w.want(200, calculatorCall("resistance", row.body))
		found := false
		for i, c := range a["checks"].([]any) {
			if c.(map[string]any)["id"] == row.check {
				found = true
				if got := at(t, a, "checks", i, "resistance") / 1e3; !(math.Abs(got-row.want) <= 0.005*row.want) {
					t.Errorf("%s: %s = %v, want %v", row.body, row.check, got, row.want)
				}
			}
		}
		if !found || a["caution"] != document.Caution {
			t.Errorf("%s: no check %s, or no caution: %v", row.body, row.check, a)
		}
	}
}

// Accept chooses between figures and the drawing, which is the same each time.
func TestBeamDrawing(t *testing.T) {
	w := newWorld(t)
	c := calculatorCall("beam", exampleBody(t, "BeamRequest"))
	first, _ := w.want(200, c.with("Accept", mediaSVG))
	again, _ := w.want(200, c.with("Accept", "text/html, image/*"))
	if got := first.Header().Get("Content-Type"); got != mediaSVG || first.Body.String() != again.Body.String() {
		t.Errorf("%s; the same bytes: %v", got, first.Body.String() == again.Body.String())
	}
	for _, want := range []string{"<svg ", "Bending moment, kNm: drawn on the tension side", "local codes govern"} {
		if !strings.Contains(first.Body.String(), want) {
			t.Errorf("the drawing does not hold %q", want)
		}
	}
	rec, _ := w.want(200, c.with("Accept", "application/json, image/svg+xml;q=0.5"))
	if got := rec.Header().Get("Content-Type"); got != mediaJSON || rec.Header().Get("Vary") == "" || rec.Header().Get("Cache-Control") != "no-store" {
		t.Errorf("Content-Type %q, header %v", got, rec.Header())
	}
	p := w.refused(http.StatusNotAcceptable, c.with("Accept", "image/png"))
	if len(p.Faults) != 1 || !strings.Contains(p.Faults[0].Remedy, mediaSVG) {
		t.Errorf("faults %+v do not name what can be answered", p.Faults)
	}
}

// Faults come all at once, by pointer, with what was found and would be accepted.
func TestCalculatorFaults(t *testing.T) {
	w := newWorld(t)
	for _, row := range []struct {
		name, body string
		pointers   []string
	}{
		{"beam", `{"length_m":-1,"supports":[]}`, []string{"/length_m"}},
		{"beam", `{"length_m":6,"section":"IPE 301","supports":[{"position_m":7,"kind":"pinned"}]}`, []string{"/supports/0/position_m", "/section"}},
		{"beam", `{"length_m":6,"section":"IPE 300","supports":[{"position_m":0,"kind":"glued"}]}`, []string{"/supports/0/kind"}},
		{"beam", `{"length_m":6,"section":"IPE 300","supports":[{"position_m":0,"kind":"pinned"}]}`, []string{""}},
		{"section", `{"designation":"HEB 210"}`, []string{"/designation"}},
		{"resistance", `{"section":"IPE 300","grade":"A53 B","design_basis":"en1993","demand":{"moment_knm":5}}`, []string{"/demand/lateral_spacing_m", "/grade"}},
		{"sizing", `{"length_m":6,"candidates":["QQ"],"grade":"S355","design_basis":"en1993"}`, []string{"/supports", "/candidates/0"}},
		{"arrangements", `{"length_m":6,"kinds":["sky hook"],"candidates":["IPE"],"grade":"S355","design_basis":"en1993"}`, []string{"/kinds/0"}},
		{"cutting-plan", `{"pieces":[{"mark":"B1","length_m":16,"count":0}],"stock":[{"length_m":12}],"kerf_mm":60}`, []string{"/kerf_mm", "/pieces/0/length_m", "/pieces/0/count"}},
		{"range", `{"lines":[{"id":"a","spread":{"distribution":"triangular","low":2,"likely":1,"high":3},"group":"g"}],"trials":1}`, []string{"/trials", "/lines/0/spread/likely", "/lines/0/group"}},
		{"range", `{"lines":[{"id":"a","spread":{"distribution":"fixed","likely":1}},{"id":"b","spread":{"distribution":"fixed","likely":1}}],"matrix":{"ids":["a","b"],"rho":[[1,0.2],[0.3,1]]}}`, []string{"/matrix/rho/0/1"}},
	} {
		p := w.refused(http.StatusUnprocessableEntity, calculatorCall(row.name, row.body))
		var got []string
		for _, f := range p.Faults {
			got = append(got, f.Pointer)
			if f.Found == "" || f.Problem == "" || f.Remedy == "" {
				t.Errorf("%s: fault %+v is silent about something", row.name, f)
			}
		}
		if fmt.Sprint(got) != fmt.Sprint(row.pointers) {
			t.Errorf("%s %s: faults at %q, want %q", row.name, row.body, got, row.pointers)
		}
	}
}

// A calculation takes a place among the heavy requests, and is refused when none is free.
func TestCalculatorsBusy(t *testing.T) {
	w := newWorld(t, func(w *world, _ *Config) { w.limits.Heavy = 1 })
	entered, release := make(chan struct{}), make(chan struct{})
	w.run = blocking(entered, release, w.run)
	done := make(chan int)
	go func() { done <- w.do(intakeCall()).Code }()
	<-entered
	for _, name := range []string{"beam", "section", "resistance", "sizing", "arrangements", "cutting-plan", "range"} {
		title := titleOf(name)
		rec, _ := w.want(http.StatusTooManyRequests, calculatorCall(name, exampleBody(t, title+"Request")))
		if rec.Header().Get("Retry-After") == "" {
			t.Errorf("%s: no Retry-After", name)
		}
	}
	close(release)
	if got := <-done; got != 201 {
		t.Errorf("the request that was first: status %d, want 201", got)
	}
}

// The examples of the documentation are what the calculators answer, and nothing is
// stored by them.
func TestCalculatorExamples(t *testing.T) {
	w := newWorld(t)
	before := len(w.store.tenants[w.own].projects)
	for _, name := range []string{"beam", "section", "resistance", "sizing", "arrangements", "cutting-plan", "range"} {
		title := titleOf(name)
		rec, _ := w.want(200, calculatorCall(name, exampleBody(t, title+"Request")))
		var got, want any
		if err := json.Unmarshal(rec.Body.Bytes(), &got); err != nil {
			t.Fatal(err)
		}
		if err := json.Unmarshal([]byte(exampleBody(t, title+"Answer")), &want); err != nil {
			t.Fatal(err)
		}
		if fmt.Sprint(got) != fmt.Sprint(want) {
			t.Errorf("%s: the example is not what is answered: %v", name, got)
		}
	}
	if after := len(w.store.tenants[w.own].projects); after != before {
		t.Errorf("%d projects after the calculations, %d before", after, before)
	}
}
