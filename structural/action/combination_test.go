package action

import (
	"math"
	"strings"
	"testing"
)

func TestCharacteristicCombination(t *testing.T) {
	// EN 1990:2002 6.5.3 (6.14b): partial factors are 1.0 in serviceability combinations.
	c := Characteristic()
	if err := c.Validate(); err != nil {
		t.Fatal(err)
	}
	if c.Factor(Permanent) != 1 || c.Factor(Variable) != 1 || c.Favourable() != 1 || c.Beside() != 1 {
		t.Errorf("%+v, want all factors 1", c)
	}
	if !strings.Contains(c.Clause, "6.14b") {
		t.Errorf("clause %q lacks the expression", c.Clause)
	}
}

// factors is what a combination does to a permanent and a variable action.
type factors struct{ permanent, favourable, variable float64 }

// EN 1990:2002 tables A1.2(A) and A1.2(B), ASCE 7-22 2.3.1 and 2.4.1.
func TestPublishedFactors(t *testing.T) {
	for _, tc := range []struct {
		basis   string
		want    []factors
		service factors
	}{
		{"allowable", []factors{{1, 1, 1}}, factors{1, 1, 1}},
		{"en1993", []factors{{1.35, 1, 1.5}}, factors{1, 1, 1}},
		{"aisc-asd", []factors{{1, 1, 0}, {1, 1, 1}, {0.6, 0.6, 1}}, factors{1, 1, 1}},
		{"aisc-lrfd", []factors{{1.4, 1.4, 0}, {1.2, 1.2, 1.6}, {0.9, 0.9, 1.6}}, factors{1, 1, 1}},
	} {
		strength, service, err := Sets(tc.basis)
		if err != nil || len(strength) != len(tc.want) {
			t.Errorf("%s: %+v, %v", tc.basis, strength, err)
			continue
		}
		for i, c := range append(strength, service) {
			want := tc.service
			if i < len(tc.want) {
				want = tc.want[i]
			}
			if got := (factors{c.Permanent, c.Favourable(), c.Variable}); got != want {
				t.Errorf("%s, %s: %+v, want %+v", tc.basis, c.Name, got, want)
			}
			if err := c.Validate(); err != nil || c.Clause == "" || c.Name == "" {
				t.Errorf("%s: %+v, %v", tc.basis, c, err)
			}
		}
	}
	if c := EN1990Equilibrium(); (factors{c.Permanent, c.Favourable(), c.Variable}) != (factors{1.1, 0.9, 1.5}) {
		t.Errorf("EQU %+v, want 1.10, 0.90, 1.50", c)
	}
	if _, _, err := Sets("timber"); err == nil || !strings.Contains(err.Error(), "aisc-lrfd") {
		t.Errorf("error %v, want one that lists the bases", err)
	}
}

func TestCombinationRefuses(t *testing.T) {
	nan := math.NaN()
	for _, tc := range []struct {
		c    Combination
		want string
	}{
		{Combination{Name: "a"}, "nothing would act"},
		{Combination{Name: "a", Permanent: -1, Variable: 1}, "permanent actions is -1"},
		{Combination{Name: "a", Permanent: 1, Variable: nan}, "variable actions is NaN"},
		{Combination{Name: "a", Permanent: math.Inf(1), Variable: 1}, "+Inf"},
		{Combination{Name: "a", Permanent: 1, PermanentFavourable: 1.1}, "favourable permanent actions is 1.1"},
		{Combination{Name: "a", Permanent: 1, PermanentFavourable: nan}, "favourable permanent actions is NaN"},
		{Combination{Name: "a", Permanent: 1, Accompanying: 1.2}, "accompanying variable actions is 1.2"},
		{Combination{Name: "a", Permanent: 1, Accompanying: nan}, "accompanying variable actions is NaN"},
	} {
		err := tc.c.Validate()
		if err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%+v: error %v, want one with %q", tc.c, err, tc.want)
		}
	}
}

func TestUsersOwnFactors(t *testing.T) {
	c, err := Custom("crane", 1.25, 0.9, 1.4)
	if err != nil || c.Favourable() != 0.9 || c.Factor(Permanent) != 1.25 || c.Factor(Variable) != 1.4 || c.Clause != "factors of the user" {
		t.Errorf("%+v, %v", c, err)
	}
	if _, err := Custom("crane", 1, 1.5, 1); err == nil {
		t.Error("a favourable factor over the unfavourable one is accepted")
	}
	c.Accompanying = 0.7
	if got := c.Beside(); math.Abs(got-0.98) > 1e-15 {
		t.Errorf("beside the leading one %v, want 0.7 × 1.4", got)
	}
}
