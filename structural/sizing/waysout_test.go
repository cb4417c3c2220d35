package sizing

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

func TestNearestMissNamesWaysOut(t *testing.T) {
	m := Member{Length: 12, Supports: pinned(0, 12), Actions: []action.Action{{Value: 40e3}}, DeflectionLimit: 500, MaxDepth: 0.9, MaxWidth: 0.4}
	s := setup(t, 1.5, "S235")
	r := lightest(t, m, s, series(t, "IPE"))
	if r.Passes {
		t.Fatalf("%s passes", r.Section.Designation)
	}
	text := strings.Join(r.WaysOut, "\n")
	for _, want := range []string{"closed tube", "another support", "Wel of at least", "Iy of at least", "instead of L/500", "more than 900 mm of depth", "more than 400 mm of width"} {
		if !strings.Contains(text, want) {
			t.Errorf("ways out lack %q:\n%s", want, text)
		}
	}
	if _, id := resistance.Governing(r.Checks); id != r.Governing || r.Utilisation <= 1 {
		t.Errorf("governing %s at %v", r.Governing, r.Utilisation)
	}
	p := prepare(t, m, s)
	for _, c := range series(t, "IPE") {
		if u, _, err := p.Utilisation(&c); err != nil || u < r.Utilisation {
			t.Errorf("%s misses by less: %v, %v", c.Designation, u, err)
		}
	}
}

func TestRestraintWayOutWorks(t *testing.T) {
	m := Member{Length: 12, Supports: pinned(0, 12), Actions: []action.Action{{Value: 12e3}}}
	s := setup(t, 1.5, "S355")
	only := []section.Section{*named(t, "IPE 400")}
	r := lightest(t, m, s, only)
	i := slices.IndexFunc(r.WaysOut, func(w string) bool { return strings.HasPrefix(w, "lateral restraint every") })
	if r.Passes || i < 0 {
		t.Fatalf("passes %v, ways out %q", r.Passes, r.WaysOut)
	}
	if _, err := fmt.Sscanf(r.WaysOut[i], "lateral restraint every %f m", &m.RestraintSpacing); err != nil {
		t.Fatal(err)
	}
	if r = lightest(t, m, s, only); !r.Passes {
		t.Errorf("with restraints every %v m: %v by %s", m.RestraintSpacing, r.Utilisation, r.Governing)
	}
}

func TestGradeDecidesWhatCanBeHad(t *testing.T) {
	m := Member{Length: 6, Supports: pinned(0, 6), Actions: []action.Action{{Value: 8e3}}}
	pipes := setup(t, 1.5, "A106 B")
	if _, err := Lightest(prepare(t, m, pipes), series(t, "IPE")); err == nil || !strings.Contains(err.Error(), "A106 B") || !strings.Contains(err.Error(), "IPE") {
		t.Errorf("IPE in A106 B: error %v, want one that names both", err)
	}
	r := lightest(t, m, pipes, series(t, "SHS", "PIPE"))
	if r.Section.Family != "PIPE" || !r.Passes {
		t.Errorf("chose %s, want a pipe", r.Section.Designation)
	}
	if len(r.Skipped) == 0 || !strings.Contains(r.Skipped[0].Reason, "pipe") {
		t.Errorf("skipped %+v, want square tubes with the reason", r.Skipped)
	}
	if _, _, err := prepare(t, m, pipes).Utilisation(named(t, "IPE 200")); err == nil {
		t.Error("IPE 200 in A106 B has a utilisation")
	}
	if _, err := prepare(t, m, pipes).Explain(named(t, "IPE 200")); err == nil {
		t.Error("IPE 200 in A106 B is explained")
	}
	doubtful := setup(t, 1.5, "S355")
	if r := lightest(t, m, doubtful, series(t, "PIPE")); len(r.Warnings) != 1 || !strings.Contains(r.Warnings[0], "made to order") {
		t.Errorf("pipe in S355: warnings %q", r.Warnings)
	}
}

func TestSectionTooThickForTheGradeIsSkipped(t *testing.T) {
	thin := setup(t, 1.5, "S355")
	thin.Grade.Bands = thin.Grade.Bands[:1] // to 16 mm
	m := Member{Length: 14, Supports: pinned(0, 14), Actions: []action.Action{{Value: 30e3}}, RestraintSpacing: 1}
	r := lightest(t, m, thin, series(t, "HEB"))
	if r.Section.Thickness > 0.016 {
		t.Errorf("chose %s, %v m thick", r.Section.Designation, r.Section.Thickness)
	}
	p, thick := prepare(t, m, thin), named(t, "HE 300 B")
	if _, ok := p.available(thick); ok {
		t.Error("HE 300 B with 19 mm flanges is available to 16 mm")
	}
	if _, err := p.steel(thick); err == nil || !strings.Contains(err.Error(), "16 mm") {
		t.Errorf("error %v, want one with the limit", err)
	}
}
