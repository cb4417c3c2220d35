package action

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestZeroValueIsAVariableUniformActionOnTheWholeMember(t *testing.T) {
	var a Action
	if a.Nature != Variable || a.Kind != Uniform {
		t.Errorf("zero action is %v %v, want variable uniform", a.Nature, a.Kind)
	}
	from, to := a.Extent(7.5)
	if from != 0 || to != 7.5 {
		t.Errorf("extent %v to %v, want 0 to 7.5", from, to)
	}
}

func TestTotal(t *testing.T) {
	// Sums worked by hand: 4 kN/m over 7.5 m, over 2 m; a point load counts once.
	for _, tc := range []struct {
		name string
		a    Action
		want float64
	}{
		{"whole member", Action{Value: 4000}, 30000},
		{"part", Action{Value: 4000, From: 1, To: 3}, 8000},
		{"from the start to a point", Action{Value: 4000, To: 3}, 12000},
		{"uplift", Action{Value: -4000, To: 3}, -12000},
		{"point", Action{Kind: Point, Value: 4000, From: 2}, 4000},
	} {
		if got := tc.a.Total(7.5); got != tc.want {
			t.Errorf("%s: total %v N, want %v N", tc.name, got, tc.want)
		}
	}
}

func TestValidateAccepts(t *testing.T) {
	for _, a := range []Action{
		{},
		{Value: -3000, Free: true},
		{Nature: Permanent, Value: 3000, From: 1, To: 6},
		{Kind: Point, Value: 5000},
		{Kind: Point, Value: 5000, From: 6},
	} {
		if err := a.Validate(6); err != nil {
			t.Errorf("%+v refused: %v", a, err)
		}
	}
}

func TestValidateRefusesByName(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, tc := range []struct {
		name   string
		a      Action
		length float64
		want   []string
	}{
		{"free permanent", Action{Nature: Permanent, Free: true, Label: "grating"}, 6, []string{`"grating"`, "permanent", "free"}},
		{"nature", Action{Nature: 7}, 6, []string{"nature 7", "variable and permanent"}},
		{"kind", Action{Kind: 9}, 6, []string{"kind 9", "uniform and point"}},
		{"value not a number", Action{Value: nan}, 6, []string{"value NaN", "finite"}},
		{"value infinite", Action{Value: -inf}, 6, []string{"value -Inf"}},
		{"runs past the end", Action{From: 2, To: 7}, 6, []string{"2 m to 7 m", "≤ 6 m"}},
		{"runs backwards", Action{From: 4, To: 3}, 6, []string{"4 m to 3 m"}},
		{"starts before the member", Action{From: -1, To: 3}, 6, []string{"-1 m"}},
		{"start given, end missing", Action{From: 2}, 6, []string{"2 m to 0 m"}},
		{"start not a number", Action{From: nan, To: 3}, 6, []string{"NaN"}},
		{"end not a number", Action{To: nan}, 6, []string{"NaN"}},
		{"point off the member", Action{Kind: Point, From: 6.1}, 6, []string{"6.1 m", "0 to 6 m"}},
		{"point position not a number", Action{Kind: Point, From: nan}, 6, []string{"NaN"}},
		{"member without length", Action{}, 0, []string{"length is 0 m"}},
		{"member length not a number", Action{}, nan, []string{"NaN"}},
		{"member length infinite", Action{}, inf, []string{"+Inf"}},
	} {
		err := tc.a.Validate(tc.length)
		if err == nil {
			t.Errorf("%s: accepted", tc.name)
			continue
		}
		for _, want := range tc.want {
			if !strings.Contains(err.Error(), want) {
				t.Errorf("%s: error %q lacks %q", tc.name, err, want)
			}
		}
	}
}

func TestValidExtentLiesOnTheMember(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		length := rapid.Float64Range(0.1, 100).Draw(t, "length")
		a := Action{
			Kind:  Kind(rapid.IntRange(0, 1).Draw(t, "kind")),
			From:  rapid.Float64Range(-10, 110).Draw(t, "from"),
			To:    rapid.Float64Range(-10, 110).Draw(t, "to"),
			Value: rapid.Float64Range(-1e6, 1e6).Draw(t, "value"),
		}
		if a.Validate(length) != nil {
			return
		}
		from, to := a.Extent(length)
		if !(0 <= from && from <= to && to <= length) {
			t.Fatalf("%+v on %v m extends from %v to %v", a, length, from, to)
		}
		if a.Kind == Uniform && from == to {
			t.Fatalf("%+v is a uniform action without extent", a)
		}
	})
}

func TestTributary(t *testing.T) {
	// 5 kN/m² on beams at 3 m: 15 kN/m, by hand.
	got, err := Tributary(5000, 3)
	if err != nil || got != 15000 {
		t.Errorf("got %v, %v, want 15000 N/m", got, err)
	}
	if got, err = Tributary(-800, 2.5); err != nil || got != -2000 {
		t.Errorf("uplift: got %v, %v, want -2000 N/m", got, err)
	}
	for _, bad := range [][2]float64{
		{math.NaN(), 3}, {math.Inf(1), 3}, {5000, 0}, {5000, -3}, {5000, math.NaN()}, {5000, math.Inf(1)}, {1e300, 1e300},
	} {
		if got, err := Tributary(bad[0], bad[1]); err == nil {
			t.Errorf("Tributary(%v, %v) = %v, want an error", bad[0], bad[1], got)
		}
	}
}

func TestCharacteristicCombination(t *testing.T) {
	// EN 1990:2002 6.5.3 (6.14b): partial factors are 1.0 in serviceability combinations.
	c := Characteristic()
	if err := c.Validate(); err != nil {
		t.Fatal(err)
	}
	if c.Factor(Permanent) != 1 || c.Factor(Variable) != 1 {
		t.Errorf("factors %v and %v, want 1 and 1", c.Factor(Permanent), c.Factor(Variable))
	}
	if !strings.Contains(c.Clause, "6.14b") {
		t.Errorf("clause %q lacks the expression", c.Clause)
	}
}

func TestCombinationFactorFollowsNature(t *testing.T) {
	c := Combination{Permanent: 1.35, Variable: 1.5}
	if c.Factor(Permanent) != 1.35 || c.Factor(Variable) != 1.5 {
		t.Errorf("factors %v and %v, want 1.35 and 1.5", c.Factor(Permanent), c.Factor(Variable))
	}
}

func TestCombinationRefuses(t *testing.T) {
	for _, tc := range []struct {
		c    Combination
		want string
	}{
		{Combination{Name: "a"}, "nothing would act"},
		{Combination{Name: "a", Permanent: -1, Variable: 1}, "permanent actions is -1"},
		{Combination{Name: "a", Permanent: 1, Variable: math.NaN()}, "variable actions is NaN"},
		{Combination{Name: "a", Permanent: math.Inf(1), Variable: 1}, "+Inf"},
	} {
		err := tc.c.Validate()
		if err == nil || !strings.Contains(err.Error(), tc.want) {
			t.Errorf("%+v: error %v, want one with %q", tc.c, err, tc.want)
		}
	}
}

func TestNames(t *testing.T) {
	for _, tc := range []struct{ got, want string }{
		{Variable.String(), "variable"}, {Permanent.String(), "permanent"}, {Nature(5).String(), "nature 5"},
		{Uniform.String(), "uniform"}, {Point.String(), "point"}, {Kind(5).String(), "kind 5"},
	} {
		if tc.got != tc.want {
			t.Errorf("got %q, want %q", tc.got, tc.want)
		}
	}
}
