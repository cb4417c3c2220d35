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
		{"linear", Action{Kind: Linear, Value: 2000, End: 4000, From: 1, To: 5}, 12000},
		{"couple", Action{Kind: Moment, Value: 4000, From: 2}, 0},
		{"train", Action{Kind: MovingTrain, Train: Train{Loads: []float64{3000, 5000}, Spacings: []float64{1}}}, 8000},
		{"with a dynamic factor", Action{Kind: Point, Value: 4000, From: 2, Dynamic: 1.25}, 5000},
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
		{Kind: Moment, Value: -5000, From: 3, Direction: Horizontal},
		{Kind: Linear, Value: 0, End: 3000, From: 1, To: 6, Free: true},
		{Kind: MovingTrain, Dynamic: 1.4, Train: Train{Loads: []float64{1, 0, 2}, Spacings: []float64{9, 0.5}}},
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
		{"kind", Action{Kind: 9}, 6, []string{"kind 9", "uniform, point"}},
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
		{"direction", Action{Direction: 4}, 6, []string{"direction 4", "vertical and horizontal"}},
		{"dynamic below 1", Action{Dynamic: 0.9}, 6, []string{"dynamic factor 0.9", "1 to 10"}},
		{"dynamic not a number", Action{Dynamic: nan}, 6, []string{"dynamic factor NaN"}},
		{"end value of a uniform action", Action{Value: 1, End: 2}, 6, []string{"end value 2"}},
		{"end value not a number", Action{Kind: Linear, End: nan}, 6, []string{"end value NaN"}},
		{"couple off the member", Action{Kind: Moment, From: 7}, 6, []string{"7 m", "0 to 6 m"}},
		{"linear runs backwards", Action{Kind: Linear, From: 4, To: 3}, 6, []string{"4 m to 3 m"}},
		{"wheels on a point action", Action{Kind: Point, Train: Train{Loads: []float64{1}}}, 6, []string{"has wheels"}},
		{"train without wheels", Action{Kind: MovingTrain}, 6, []string{"0 wheels"}},
		{"train with a spacing too many", Action{Kind: MovingTrain, Train: Train{Loads: []float64{1}, Spacings: []float64{1}}}, 6, []string{"1 wheels with 1 spacings"}},
		{"wheel pulls up", Action{Kind: MovingTrain, Train: Train{Loads: []float64{-1}}}, 6, []string{"wheel 1 weighs -1"}},
		{"spacing not a number", Action{Kind: MovingTrain, Train: Train{Loads: []float64{1, 1}, Spacings: []float64{nan}}}, 6, []string{"spacing 1 is NaN"}},
		{"permanent train", Action{Kind: MovingTrain, Nature: Permanent, Train: Train{Loads: []float64{1}}}, 6, []string{"permanent vertical train"}},
		{"sideways train", Action{Kind: MovingTrain, Direction: Horizontal, Train: Train{Loads: []float64{1}}}, 6, []string{"variable horizontal train"}},
		{"train with a value", Action{Kind: MovingTrain, Value: 3, Train: Train{Loads: []float64{1}}}, 6, []string{"value 3"}},
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
			Kind:  Kind(rapid.SampledFrom([]int{int(Uniform), int(Point), int(Moment), int(Linear)}).Draw(t, "kind")),
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
		if a.Kind.distributed() && from == to {
			t.Fatalf("%+v is a distributed action without extent", a)
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

func TestNames(t *testing.T) {
	for _, tc := range []struct{ got, want string }{
		{Variable.String(), "variable"}, {Permanent.String(), "permanent"}, {Nature(5).String(), "nature 5"},
		{Uniform.String(), "uniform"}, {Point.String(), "point"}, {Kind(5).String(), "kind 5"},
		{Moment.String(), "moment"}, {Linear.String(), "linear"}, {MovingTrain.String(), "moving train"},
		{Vertical.String(), "vertical"}, {Horizontal.String(), "horizontal"}, {Direction(5).String(), "direction 5"},
	} {
		if tc.got != tc.want {
			t.Errorf("got %q, want %q", tc.got, tc.want)
		}
	}
}
