package ratebook

import (
	"encoding/json"
	"errors"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/spread"
)

func TestTheStartingBookIsValidAndSaysThatItIsInvented(t *testing.T) {
	b := Ratio()
	if err := b.Validate(); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(strings.ToLower(b.Note), "invented") {
		t.Errorf("the note %q does not say that the figures are invented", b.Note)
	}
	for _, f := range b.Ratios {
		if !strings.Contains(f.Source, "invented") {
			t.Errorf("source %q does not say that the figure is invented", f.Source)
		}
	}
}

func TestCanonicalBytesReadBack(t *testing.T) {
	data, sum, err := Ratio().Canonical()
	if err != nil {
		t.Fatal(err)
	}
	b, err := Parse(data)
	if err != nil {
		t.Fatal(err)
	}
	if _, again, err := b.Canonical(); err != nil || again != sum {
		t.Errorf("read back the hash is %s, %v; want %s", again, err, sum)
	}
}

// Each change makes exactly one fault, at the field that was changed.
func TestValidateNamesTheField(t *testing.T) {
	cases := map[string]func(*Book){
		"/kind":                  func(b *Book) { b.Kind = "unit" },
		"/name":                  func(b *Book) { b.Name = " " },
		"/currency":              func(b *Book) { b.Currency = "EUX" },
		"/base_date":             func(b *Book) { b.BaseDate = "1.6.2026" },
		"/reference_price":       func(b *Book) { b.ReferencePrice = b.ReferencePrice.Neg() },
		"/material_price/spread": func(b *Book) { b.MaterialPrice.Spread = spread.NewPERT(900, 800, 1000) },
		"/ratios/erection":       func(b *Book) { delete(b.Ratios, "erection") },
		"/ratios/roofing":        func(b *Book) { b.Ratios["roofing"] = b.Ratios["erection"] },
		"/ratios/coating/spread": func(b *Book) {
			f := b.Ratios["coating"]
			f.Spread = spread.NewTriangular(-0.1, 0.5, 0.8)
			b.Ratios["coating"] = f
		},
		"/waste/plate":           func(b *Book) { delete(b.Waste, "plate") },
		"/growth/3":              func(b *Book) { delete(b.Growth, "3") },
		"/systemic/4":            func(b *Book) { b.Systemic["4"] = -1 },
		"/bolts/source":          func(b *Book) { b.Bolts.Source = "" },
		"/bolts/confidence":      func(b *Book) { b.Bolts.Confidence = "sure" },
		"/bolts/valid_until":     func(b *Book) { b.Bolts.ValidUntil = "soon" },
		"/correlation/labour":    func(b *Book) { b.Correlation["labour"] = 1 },
		"/material_price/group":  func(b *Book) { b.MaterialPrice.Group = "weather" },
		"/multipliers/0/scope":   func(b *Book) { b.Multipliers[0].Scope = "galaxy" },
		"/multipliers/0/subject": func(b *Book) { b.Multipliers[0].Scope = GroupScope },
		"/multipliers/1/reason":  func(b *Book) { b.Multipliers[1].Reason = "" },
		"/bands/0":               func(b *Book) { b.Bands[0].Low = b.Bands[0].High },
	}
	for field, change := range cases {
		b := Ratio()
		change(&b)
		var bad *InvalidError
		if err := b.Validate(); !errors.As(err, &bad) {
			t.Errorf("%s: got %v, want an *InvalidError", field, err)
			continue
		}
		if len(bad.Faults) != 1 || bad.Faults[0].Field != field || bad.Faults[0].Accepted == "" {
			t.Errorf("%s: got faults %+v", field, bad.Faults)
		}
	}
}

func TestParseRefusesUnknownFieldsAndTails(t *testing.T) {
	data, err := json.Marshal(Ratio())
	if err != nil {
		t.Fatal(err)
	}
	for name, text := range map[string]string{
		"unknown field": strings.Replace(string(data), `"name"`, `"title":"x","name"`, 1),
		"a tail":        string(data) + "{}",
		"not JSON":      "name: ratio",
	} {
		if _, err := Parse([]byte(text)); err == nil {
			t.Errorf("%s was accepted", name)
		}
	}
}

func TestTheMostSpecificScopeWins(t *testing.T) {
	place := Place{Mark: "B1", Group: "Boom", Family: "CHS"}
	all := []Multiplier{
		{Name: "difficulty", Scope: BookScope},
		{Name: "difficulty", Scope: ProjectScope},
		{Name: "difficulty", Scope: SchemeScope},
		{Name: "difficulty", Scope: FamilyScope, Subject: "CHS"},
		{Name: "difficulty", Scope: GroupScope, Subject: "Boom"},
		{Name: "difficulty", Scope: MemberScope, Subject: "B1"},
	}
	for i := range all {
		all[i].Categories = []string{Erection}
	}
	for n := 1; n <= len(all); n++ {
		for _, ms := range [][]Multiplier{all[:n], reversed(all[:n])} {
			got := Resolve(ms, Erection, place)
			if len(got) != 1 || ms[got[0]].Scope != all[n-1].Scope {
				t.Errorf("of the first %d scopes %v won, want %s", n, got, all[n-1].Scope)
			}
		}
	}
	elsewhere := Resolve(all, Erection, Place{Mark: "B2", Group: "Tower", Family: "HEB"})
	if len(elsewhere) != 1 || all[elsewhere[0]].Scope != SchemeScope {
		t.Errorf("elsewhere %v won, want the scheme's", elsewhere)
	}
	if got := Resolve(all, Shipping, place); len(got) != 0 {
		t.Errorf("shipping: got %v, want none", got)
	}
}

func TestMultipliersOfOtherNamesMultiplyAndTheLaterOfEqualsWins(t *testing.T) {
	ms := []Multiplier{
		{Name: "tides", Scope: ProjectScope, Categories: []string{Erection}},
		{Name: "height", Scope: ProjectScope, Categories: []string{Erection}},
		{Name: "tides", Scope: ProjectScope, Categories: []string{Erection}},
	}
	if got := Resolve(ms, Erection, Place{}); !slices.Equal(got, []int{1, 2}) {
		t.Errorf("got %v, want height then the later tides", got)
	}
}

func reversed(ms []Multiplier) []Multiplier {
	out := slices.Clone(ms)
	slices.Reverse(out)
	return out
}
