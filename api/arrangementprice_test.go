package api

import (
	"strings"
	"testing"

	"spanwright/api/auth"
	"spanwright/estimate/engine"
)

// quayWays is a study of the loading quay's boom with two ways; loads invented.
const quayWays = `"study":{"length_m":24,"loads":[{"kind":"uniform","nature":"permanent","load_kn_m":0.9},{"kind":"uniform","load_kn_m":1.2},
 {"kind":"uniform","direction":"horizontal","load_kn_m":0.4}],"kinds":["tower at the end","equal spans"],"equal_spans":[2],"towers":{"height_m":8,"wind_kn_m":0.3},
 "deflection_limit":100,"candidates":["CHS"],"grade":"S355","design_basis":"en1993"},"replicates":32,"trials":64`

func TestArrangementPrices(t *testing.T) {
	w := newWorld(t, func(w *world, _ *Config) { w.run = engine.Run })
	ask := call{method: "POST", path: "/v1/comparisons/arrangements", body: "{" + quayWays + `,"job":{"Estimate class":4}}`, token: w.tokens[auth.Viewer]}
	_, got := w.want(200, ask)
	if n := at(t, got, "comparison", "schemes", 0, "cheapest", "value") + at(t, got, "comparison", "schemes", 1, "cheapest", "value"); n < 1-1e-9 || n > 1+1e-9 {
		t.Errorf("probabilities of the cheapest add to %v", n)
	}
	list := got["arrangements"].([]any)
	if len(list) != 2 || at(t, got, "arrangements", 0, "steel_kg") <= 0 || at(t, got, "arrangements", 0, "footings_m3") <= 0 {
		t.Errorf("arrangements %v", list)
	}
	if class := at(t, got, "comparison", "schemes", 0, "estimate_class"); class != 4 {
		t.Errorf("estimate class %v, want that of job", class)
	}
	rec, _ := w.want(200, ask.with("Accept", "text/plain"))
	if text := rec.Body.String(); !strings.Contains(text, "2 equal spans") || !strings.Contains(text, "cheapest") {
		t.Errorf("text %.300s", text)
	}

	// A multiplier on the third footing, which one of the ways has, makes that way dearer
	// and leaves the other as it was.
	dearer := ask
	dearer.body = "{" + quayWays + `,"job":{"Estimate class":4},"multipliers":[{"name":"tidal footing","scope":"member","subject":"FOOTING-3","categories":["foundations"],"spread":{"distribution":"fixed","likely":3}}]}`
	_, changed := w.want(200, dearer)
	before, after := meansOf(t, got), meansOf(t, changed)
	if !(after["2 equal spans"] > before["2 equal spans"]) || after["tower at the end"] != before["tower at the end"] || len(after) != 2 {
		t.Errorf("means under a dearer footing %v, before %v", after, before)
	}
}

// meansOf are the means of the schemes by their ids.
func meansOf(t *testing.T, answer map[string]any) map[string]float64 {
	t.Helper()
	out := map[string]float64{}
	for i, s := range answer["comparison"].(map[string]any)["schemes"].([]any) {
		out[s.(map[string]any)["id"].(string)] = at(t, answer, "comparison", "schemes", i, "mean")
	}
	return out
}

func TestArrangementPriceRefusals(t *testing.T) {
	w := newWorld(t, func(w *world, _ *Config) { w.run = engine.Run })
	swap := func(old, now string) string { return "{" + strings.Replace(quayWays, old, now, 1) + "}" }
	for _, c := range []struct {
		name, body string
		status     int
		pointers   []string
	}{
		{"length", swap(`"length_m":24`, `"length_m":-1`), 422, []string{"/study/length_m"}},
		{"keys", "{" + quayWays + `,"job":{"Grade":"S235","Currency":"XXQ","Estimate clas":3}}`, 422, []string{"/job/Grade", "/job/Currency", "/job/Estimate clas"}},
		{"one way", swap(`"kinds":["tower at the end","equal spans"]`, `"kinds":["tower at the end"]`), 422, []string{"/study/kinds"}},
		{"nothing passes", swap(`"candidates":["CHS"]`, `"candidates":["CHS 60.3x4"]`), 422, []string{"/study/kinds"}},
		{"book", "{" + quayWays + `,"rate_book":"no such rates"}`, 404, []string{"/rate_book"}},
		{"trials", "{" + strings.Replace(quayWays, `"trials":64`, `"trials":1`, 1) + "}", 422, []string{"/trials"}},
		{"multiplier", "{" + quayWays + `,"multipliers":[{"name":"x","scope":"member","subject":"MAIN","categories":["gold"],"spread":{"distribution":"fixed","likely":1}}]}`, 422, []string{"/multipliers/0"}},
		{"unknown field", swap(`"length_m":24`, `"length_m":24,"span":3`), 422, []string{"/study/span"}},
	} {
		rec, _ := w.want(c.status, call{method: "POST", path: "/v1/comparisons/arrangements", body: c.body})
		for _, p := range c.pointers {
			if !strings.Contains(rec.Body.String(), `"pointer":"`+p) {
				t.Errorf("%s: no fault at %s in %s", c.name, p, rec.Body.String())
			}
		}
	}
}
