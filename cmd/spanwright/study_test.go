package main

import (
	"bytes"
	"encoding/json"
	"errors"
	"net/http"
	"testing"

	"spanwright/api/auth"
)

// demoBoom is row LB1 of the demo as an arrangement study.
const demoBoom = `{"length_m":42,"loads":[{"label":"conveyor","kind":"uniform","nature":"permanent","load_kn_m":0.9},
 {"label":"bulk","kind":"uniform","nature":"variable","load_kn_m":1.2}],"towers":{"height_m":8},
 "deflection_limit":100,"candidates":["CHS"],"grade":"S355","design_basis":"allowable","factor":3}`

type study struct {
	Caution    string
	Candidates []struct {
		Name      string
		Feasible  bool
		Reason    string
		Governing string  `json:"governing_check"`
		Deflect   float64 `json:"deflection_mm"`
		Mass      struct {
			Member  float64 `json:"member_kg"`
			Steel   float64 `json:"steel_kg"`
			Ballast float64 `json:"ballast_kg"`
		}
		Supports []struct {
			Max       float64 `json:"max_kn"`
			Permanent float64 `json:"permanent_kn"`
		}
	}
}

// The arrangement study of the demo's boom, over the API and offline: mass,
// ballast, reactions, deflection and governing check of each candidate.
func TestArrangementStudyOfTheDemosBoom(t *testing.T) {
	s := newServer(t)
	a := s.do(t, http.MethodPost, "/v1/calculators/arrangements", s.token(t, "Brackwater", auth.Viewer), []byte(demoBoom), "Content-Type", "application/json")
	if a.status != http.StatusOK {
		t.Fatalf("%d %.300s", a.status, a.body)
	}
	code, out, errs := runProgram(t, []byte(demoBoom), "calculate", "arrangements", "-")
	var compact, answered bytes.Buffer
	if err := errors.Join(json.Compact(&compact, []byte(out)), json.Compact(&answered, a.body)); code != 0 || err != nil || compact.String() != answered.String() {
		t.Errorf("offline and over the API the answers differ: %d %v %s", code, err, errs)
	}
	var st study
	a.decode(t, &st)
	if len(st.Candidates) < 8 || st.Caution == "" {
		t.Fatalf("%d candidates, caution %q", len(st.Candidates), st.Caution)
	}
	for _, c := range st.Candidates {
		if c.Governing == "" || !(c.Deflect > 0) || !(c.Mass.Steel > 0) || len(c.Supports) == 0 {
			t.Errorf("%s is incomplete: %+v", c.Name, c)
		}
		// Equilibrium: the permanent reactions carry 0.9 kN/m and the member's own
		// weight, mass × 9.80665 (a lattice has its weight in its bars).
		sum := 0.0
		for _, r := range c.Supports {
			sum += r.Permanent
		}
		want := 42*0.9 + c.Mass.Member*9.80665/1000
		if c.Name != "cantilever with counterweight" && c.Name != "lattice" && (sum < 0.98*want || sum > 1.02*want) {
			t.Errorf("%s: permanent reactions sum to %.2f kN, the loads to %.2f", c.Name, sum, want)
		}
		// Common practice, no source: a boom held only at its root needs many times
		// its own mass in ballast, or no tube carries it at all.
		if c.Name == "cantilever with counterweight" && c.Mass.Ballast < 2*c.Mass.Member {
			t.Errorf("ballast %.0f kg for a boom of %.0f kg", c.Mass.Ballast, c.Mass.Member)
		}
	}
}
