package api

import (
	"encoding/json"
	"fmt"
	"strings"
	"testing"

	"github.com/google/uuid"

	"spanwright/estimate/document"
)

const tidalPreview = `{"multipliers":[{"name":"tidal work","scope":"project","categories":["erection"],"spread":{"distribution":"fixed","likely":1.2}}]}`

// A preview says what an estimate with the multiplier stored says, to the cent.
func TestPreviewIsWhatAnEstimateWillSay(t *testing.T) {
	w, ids := explained(t)
	c := call{method: "POST", path: "/v1/estimates/" + ids["estimate"] + "/preview", body: tidalPreview}
	_, p := w.want(200, c)
	w.want(201, call{method: "POST", path: "/v1/projects/" + ids["project"] + "/multipliers", body: multiplierBody})
	_, e := w.want(201, call{method: "POST", path: "/v1/schemes/" + ids["scheme"] + "/estimates", body: `{}`})
	after, _ := p["after"].(map[string]any)
	if after["base"] != e["base"] {
		t.Errorf("the preview says a base of %v, the estimate %v", after["base"], e["base"])
	}
	if p["caution"] != document.Caution || p["stored_draws"] != false || !strings.Contains(fmt.Sprint(p["method"]), "8192 trials") {
		t.Errorf("preview %v", p)
	}
	_, again := w.want(200, c)
	if again["stored_draws"] != true || fmt.Sprint(again["after"]) != fmt.Sprint(after) {
		t.Errorf("the second preview differs: %v", again)
	}
	if n := len(w.store.tenants[w.own].estimates); n != 3 {
		t.Errorf("%d estimates are stored, want 3", n)
	}
}

func TestPreviewRefusals(t *testing.T) {
	w, ids := explained(t)
	path := "/v1/estimates/" + ids["estimate"] + "/preview"
	many := make([]string, 101)
	for i := range many {
		many[i] = fmt.Sprintf(`{"name":"m%d","scope":"project","categories":["erection"],"spread":{"distribution":"fixed","likely":1}}`, i)
	}
	for name, row := range map[string]struct{ body, pointer string }{
		"none":                 {`{"multipliers":[]}`, "/multipliers"},
		"too many":             {`{"multipliers":[` + strings.Join(many, ",") + `]}`, "/multipliers"},
		"unknown scope":        {strings.Replace(tidalPreview, `"project"`, `"river"`, 1), "/multipliers/0/scope"},
		"member without mark":  {strings.Replace(tidalPreview, `"project"`, `"member"`, 1), "/multipliers/0/subject"},
		"project with subject": {strings.Replace(tidalPreview, `"project"`, `"project","subject":"B1"`, 1), "/multipliers/0/subject"},
		"unknown category":     {strings.Replace(tidalPreview, `"erection"`, `"tea"`, 1), "/multipliers/0/categories/0"},
		"negative":             {strings.Replace(tidalPreview, `1.2`, `-1.2`, 1), "/multipliers/0/spread"},
		"unknown group":        {strings.Replace(tidalPreview, `"spread"`, `"group":"tea","spread"`, 1), "/multipliers/0/group"},
		"twice":                {`{"multipliers":[` + many[0] + `,` + many[0] + `]}`, "/multipliers/1"},
	} {
		p := w.refused(422, call{method: "POST", path: path, body: row.body})
		found := false
		for _, f := range p.Faults {
			found = found || strings.HasPrefix(f.Pointer, row.pointer)
			if f.Problem == "" || f.Remedy == "" {
				t.Errorf("%s: fault %+v is silent about something", name, f)
			}
		}
		if !found {
			t.Errorf("%s: no fault at %s in %+v", name, row.pointer, p.Faults)
		}
	}
	var digits []string
	for i := range 6 {
		digits = append(digits, strings.Replace(many[i], `"likely":1`, `"likely":99`, 1))
	}
	p := w.refused(422, call{method: "POST", path: path, body: `{"multipliers":[` + strings.Join(digits, ",") + `]}`})
	if len(p.Faults) != 1 || !strings.Contains(p.Faults[0].Problem, "digits") || p.Faults[0].Remedy == "" {
		t.Errorf("a product of too many digits: %+v", p)
	}
	w.refused(404, call{method: "POST", path: "/v1/estimates/" + uuid.NewString() + "/preview", body: tidalPreview})
	c := call{method: "POST", path: path, body: tidalPreview, token: w.foreign}
	w.want(200, call{method: "POST", path: path, body: tidalPreview}) // now it is kept
	w.refused(404, c)
}

// An estimate of another engine is not previewed, and the answer says what to do.
func TestPreviewOfAnotherEngine(t *testing.T) {
	w, ids := explained(t)
	key := uuid.MustParse(ids["estimate"])
	jobs := w.store.tenants[w.own].jobs
	for _, change := range []func(map[string]any){
		func(j map[string]any) { j["engine_version"], j["colour"] = 1, "a field of then" },
		func(j map[string]any) { j["data"].(map[string]any)["catalogue"] = "0000" },
	} {
		var j map[string]any
		if err := json.Unmarshal(jobs[key], &j); err != nil {
			t.Fatal(err)
		}
		change(j)
		kept := jobs[key]
		var err error
		if jobs[key], err = json.Marshal(j); err != nil {
			t.Fatal(err)
		}
		p := w.refused(409, call{method: "POST", path: "/v1/estimates/" + ids["estimate"] + "/preview", body: tidalPreview})
		if !strings.Contains(p.Detail, "make a new estimate") {
			t.Errorf("detail %q does not say what to do", p.Detail)
		}
		jobs[key] = kept
	}
}

// Whatever computes is refused while all places are taken; what was kept is not.
func TestExplanationsBusy(t *testing.T) {
	w, ids := explained(t, func(w *world, _ *Config) { w.limits.Heavy = 1 })
	preview := call{method: "POST", path: "/v1/estimates/" + ids["estimate"] + "/preview", body: tidalPreview}
	w.want(200, preview)
	entered, release := make(chan struct{}), make(chan struct{})
	w.run = blocking(entered, release, w.run)
	done := make(chan int)
	go func() { done <- w.do(intakeCall()).Code }()
	<-entered
	for _, c := range []call{
		{method: "POST", path: "/v1/estimates/" + ids["second"] + "/preview", body: tidalPreview},
		{method: "POST", path: preview.path, body: strings.Replace(tidalPreview, "tidal", "night", 1)},
		{method: "POST", path: "/v1/comparisons", body: `{"estimates":["` + ids["estimate"] + `","` + ids["second"] + `"]}`},
		{method: "POST", path: "/v1/bridges", body: `{"from":"` + ids["estimate"] + `","to":"` + ids["second"] + `"}`},
	} {
		rec, _ := w.want(429, c)
		if rec.Header().Get("Retry-After") == "" {
			t.Errorf("%s: no Retry-After", c.path)
		}
	}
	w.want(200, preview)
	close(release)
	if got := <-done; got != 201 {
		t.Errorf("the request that was first: status %d, want 201", got)
	}
	w.want(200, call{method: "POST", path: "/v1/estimates/" + ids["second"] + "/preview", body: tidalPreview})
}
