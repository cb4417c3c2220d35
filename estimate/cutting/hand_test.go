package cutting

import (
	"context"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// example is the cutting of the chords of the loading quay's gallery, an invented
// structure: 24 pieces of 6.050 m from bars of 12.1 and 15.1 m, kerf 5 mm.
func example() Problem {
	return Problem{
		Pieces: []Piece{{"C1", 6_0500, 24}},
		Stock:  []Stock{{Length: 12_1000}, {Length: 15_1000}},
		Kerf:   50,
	}
}

// By hand: two pieces need 2 × 6.050 + 0.005 = 12.105 m, which 12.1 m does not
// hold. One a bar: 24 × 12.1 = 290.4 m; two in 15.1 m: 12 × 15.1 = 181.2 m, of
// which 145.2 m are pieces, 80.1 %. Each bar loses two kerfs, 10 mm, and leaves
// 15.1 − 12.1 − 0.01 = 2.99 m. With 2.5 mm less two need 12.1 m exactly: 12 ×
// 12.1 = 145.2 m, 36 m less.
func TestByHand(t *testing.T) {
	p := example()
	got, err := Optimise(context.Background(), p, Limits{HintRange: 200})
	if err != nil {
		t.Fatal(err)
	}
	got.Certificate = nil
	want := Plan{
		Method: "column generation", Objective: LeastLength,
		Patterns: []Pattern{{Stock: 1, Length: 15_1000, Cuts: []Cut{{"C1", 6_0500, 2}}, Bars: 12, Offcut: 2_9900}},
		Bars:     []BarCount{{1, 15_1000, 12}},
		Pieces:   24, StockLength: 181_2000, Used: 145_2000, KerfLoss: 1200, Offcuts: 35_8800, Yield: 1452. / 1812,
		Value: 181_2000, Bound: 181_2000, Proven: true,
		Hint: &Hint{Marks: []string{"C1"}, Length: 6_0500, Shorter: 25, Saves: 36_0000, Text: "2.5 mm less on C1 would save 36 m"},
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("plan (-want +got):\n%s", diff)
	}
	if err := Check(got, p); err != nil {
		t.Error(err)
	}
}

// First fit finds the same bars, with the length bound: 24 widths of 6.055 m are
// 145.32 m, at the cheaper rate 12.1/12.105 worth 145.26 m. Of the sums of 12.1
// and 15.1 m the next is 148 m = 12.1 + 9 × 15.1 (145.2 = 12 × 12.1 is below).
func TestFirstFitByHand(t *testing.T) {
	p := example()
	got, err := FirstFit(context.Background(), p)
	if err != nil {
		t.Fatal(err)
	}
	if err := Check(got, p); err != nil {
		t.Error(err)
	}
	if got.Value != 181_2000 || got.Bound != 148_0000 || got.Proven || got.Method != "first-fit decreasing" {
		t.Errorf("value %d, bound %d, proven %t by %s", got.Value, got.Bound, got.Proven, got.Method)
	}
}

// A hint for the number of bars and for cost; none where nothing is near.
func TestHint(t *testing.T) {
	for _, x := range []struct {
		name string
		p    Problem
		want string
	}{
		// Bars of 6 m: 3.001 m stand alone, 3.000 m by two.
		{"bars", Problem{Pieces: []Piece{{"A", 3_0010, 4}}, Stock: []Stock{{Length: 6_0000}}, Objective: FewestBars}, "1 mm less on A would save 2 bars"},
		{"one bar", Problem{Pieces: []Piece{{"A", 3_0010, 2}}, Stock: []Stock{{Length: 6_0000}}, Objective: FewestBars}, "1 mm less on A would save 1 bar"},
		{"cost", Problem{Pieces: []Piece{{"A", 3_0010, 2}}, Stock: []Stock{{Length: 6_0000, Cost: 4550}}, Objective: LeastCost}, "1 mm less on A would save 4550 minor units"},
		// Five bars with one A and one B, a sixth for five B; five do when two B go with
		// each A: A would have to give 10 mm for that, B only 5 mm.
		{"lesser", Problem{Pieces: []Piece{{"A", 4_0000, 5}, {"B", 1_0050, 10}}, Stock: []Stock{{Length: 6_0000}}, Objective: FewestBars}, "5 mm less on B would save 1 bar"},
		{"marks of one length", Problem{Pieces: []Piece{{"A", 3_0010, 1}, {"B", 3_0010, 1}}, Stock: []Stock{{Length: 6_0000}}}, "1 mm less on A, B would save 6 m"},
		{"none", Problem{Pieces: []Piece{{"A", 3_5000, 4}}, Stock: []Stock{{Length: 6_0000}}}, ""},
		{"just too far", Problem{Pieces: []Piece{{"A", 3_0201, 4}}, Stock: []Stock{{Length: 6_0000}}}, ""},
	} {
		plan, err := Optimise(context.Background(), x.p, Limits{HintRange: 200})
		if err != nil {
			t.Fatalf("%s: %v", x.name, err)
		}
		got := ""
		if plan.Hint != nil {
			got = plan.Hint.Text
		}
		if got != x.want {
			t.Errorf("%s: hint %q, want %q", x.name, got, x.want)
		}
	}
}

// Two marks of one length are cut as one length and handed out again.
func TestMarksOfOneLength(t *testing.T) {
	p := Problem{Pieces: []Piece{{"A", 2_0000, 4}, {"B", 2_0000, 5}}, Stock: []Stock{{Length: 6_0000}}}
	plan, err := Optimise(context.Background(), p, Limits{})
	if err != nil {
		t.Fatal(err)
	}
	if err := Check(plan, p); err != nil {
		t.Error(err)
	}
	want := []Pattern{
		{0, 6_0000, []Cut{{"A", 2_0000, 3}}, 1, 0},
		{0, 6_0000, []Cut{{"A", 2_0000, 1}, {"B", 2_0000, 2}}, 1, 0},
		{0, 6_0000, []Cut{{"B", 2_0000, 3}}, 1, 0},
	}
	if diff := cmp.Diff(want, plan.Patterns); diff != "" {
		t.Errorf("patterns (-want +got):\n%s", diff)
	}
}

// Bars that are few: the long ones are used up, the rest comes from others. By
// hand: 6 pieces of 4 m from two bars of 12 m (3 each) would do; with one
// available 3 must come from bars of 6 m, one each: 12 + 3 × 6 = 30 m.
func TestAvailable(t *testing.T) {
	p := Problem{Pieces: []Piece{{"A", 4_0000, 6}}, Stock: []Stock{{Length: 6_0000}, {Length: 12_0000, Available: 1}}}
	plan, err := Optimise(context.Background(), p, Limits{})
	if err != nil {
		t.Fatal(err)
	}
	if err := Check(plan, p); err != nil {
		t.Error(err)
	}
	if plan.Value != 30_0000 || !plan.Proven {
		t.Errorf("value %d, bound %d, want 300000 proven", plan.Value, plan.Bound)
	}
}

// Check finds what is wrong with a plan that has been tampered with.
func TestCheckFinds(t *testing.T) {
	p := example()
	p.Stock[1].Available = 12
	for _, x := range []struct {
		name string
		do   func(*Plan)
		want string
	}{
		{"a piece too few", func(q *Plan) { q.Patterns[0].Bars = 11 }, "22 pieces cut, 24 wanted"},
		{"more than available", func(q *Plan) { q.Patterns[0].Bars = 13 }, "13 bars, 12 available"},
		{"overfull", func(q *Plan) { q.Patterns[0].Cuts[0].Count = 3 }, "do not fit a bar"},
		{"another length", func(q *Plan) { q.Patterns[0].Cuts[0].Length = 6_0400 }, "not asked for"},
		{"unknown stock", func(q *Plan) { q.Patterns[0].Stock = 2 }, "of stock 2"},
		{"wrong bar", func(q *Plan) { q.Patterns[0].Stock = 0 }, "do not fit a bar of 12100 mm"},
		{"no bars", func(q *Plan) { q.Patterns = nil }, "0 pieces cut, 24 wanted"},
		{"offcut", func(q *Plan) { q.Patterns[0].Offcut = 0 }, "offcut of 0 mm, want 2990 mm"},
		{"sum", func(q *Plan) { q.StockLength++ }, "stock length: 1812001, want 1812000"},
		{"proof", func(q *Plan) { q.Bound-- }, "gap: 0, want 1"},
		{"bound above", func(q *Plan) { q.Bound++; q.Gap-- }, "do not agree"},
	} {
		plan, err := Optimise(context.Background(), p, Limits{})
		if err != nil {
			t.Fatal(err)
		}
		x.do(&plan)
		if err := Check(plan, p); err == nil || !strings.Contains(err.Error(), x.want) {
			t.Errorf("%s: %v, want %q", x.name, err, x.want)
		}
	}
}
