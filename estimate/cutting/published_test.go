package cutting

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"math/big"
	"os"
	"testing"
	"time"
)

// instance is one case of testdata/cutting.json.
type instance struct {
	ID     string  `json:"id"`
	Stock  []int64 `json:"stock_mm"`
	Kerf   int64   `json:"kerf_mm"`
	Pieces []struct {
		Length int64 `json:"length_mm"`
		Count  int   `json:"count"`
	} `json:"pieces"`
	Cost      []int64 `json:"cost"`
	Available []int   `json:"available"`
	Out       struct {
		Objective   float64 `json:"objective"`
		Relaxation  float64 `json:"lp_bound"`
		LengthBound int64   `json:"lower_bound_length"`
		FirstFit    int64   `json:"ffd_bins"`
	} `json:"out"`
}

func instances(t testing.TB) []instance {
	t.Helper()
	b, err := os.ReadFile("testdata/cutting.json")
	if err != nil {
		t.Fatal(err)
	}
	var all struct {
		Cases []instance `json:"cases"`
	}
	if err := json.Unmarshal(b, &all); err != nil {
		t.Fatal(err)
	}
	if len(all.Cases) != 12 {
		t.Fatalf("%d instances, want 12", len(all.Cases))
	}
	return all.Cases
}

func (x instance) problem() Problem {
	p := Problem{Kerf: 10 * x.Kerf, Objective: FewestBars}
	for i, s := range x.Stock {
		stock := Stock{Length: 10 * s}
		if x.Cost != nil {
			p.Objective = LeastCost
			stock.Cost = x.Cost[i]
		}
		if x.Available != nil {
			stock.Available = x.Available[i]
		}
		p.Stock = append(p.Stock, stock)
	}
	for i, y := range x.Pieces {
		p.Pieces = append(p.Pieces, Piece{fmt.Sprintf("P%d", i+1), 10 * y.Length, y.Count})
	}
	return p
}

// The optimum of every instance, proven here by our own bound, which is that of
// the relaxation (bars in fractions), in well under two seconds each. Source:
// testdata/README.md.
func TestInstances(t *testing.T) {
	for _, x := range instances(t) {
		t.Run(x.ID, func(t *testing.T) {
			p := x.problem()
			start := time.Now()
			plan, err := Optimise(context.Background(), p, Limits{})
			took := time.Since(start)
			if err != nil {
				t.Fatal(err)
			}
			if err := Check(plan, p); err != nil {
				t.Error(err)
			}
			if want := int64(x.Out.Objective); plan.Value != want || plan.Bound != want || !plan.Proven {
				t.Errorf("value %d, bound %d, proven %t, want %d proven", plan.Value, plan.Bound, plan.Proven, want)
			}
			bound, err := p.Bound(*plan.Certificate)
			if err != nil {
				t.Fatal(err)
			}
			if got, _ := bound.Float64(); !(math.Abs(got-x.Out.Relaxation) <= 1e-9*x.Out.Relaxation) {
				t.Errorf("exact bound %.12g, relaxation %.12g", got, x.Out.Relaxation)
			}
			if took > 2*time.Second {
				t.Errorf("took %v, want at most 2 s", took)
			}
			t.Logf("%d in %v", plan.Value, took)
		})
	}
}

// First-fit decreasing needs the bars that the check values say (one stock
// length), and its bound is at least the length bound and at most the optimum.
func TestFirstFitInstances(t *testing.T) {
	for _, x := range instances(t) {
		p := x.problem()
		plan, err := FirstFit(context.Background(), p)
		if err != nil {
			t.Fatal(err)
		}
		if err := Check(plan, p); err != nil {
			t.Errorf("%s: %v", x.ID, err)
		}
		if len(x.Stock) == 1 && plan.Value != x.Out.FirstFit {
			t.Errorf("%s: %d bars, want %d", x.ID, plan.Value, x.Out.FirstFit)
		}
		if plan.Bound < x.Out.LengthBound || plan.Bound > int64(x.Out.Objective) {
			t.Errorf("%s: bound %d, want %d to %g", x.ID, plan.Bound, x.Out.LengthBound, x.Out.Objective)
		}
	}
}

// Nine pieces of 70, 60, 50, 3 × 33, 11, 7 and 3 for bars of 100: 300 in all, so
// three by length, but L2 is 4. Martello and Toth, Knapsack Problems (1990),
// example in 8.3, from memory; by hand at α = 33: 70 stands alone, 60 leaves 40,
// 50 + 3 × 33 = 149 need (149 − 40)/100, so two more.
func TestMartelloToth(t *testing.T) {
	p := Problem{Stock: []Stock{{Length: 1000}}, Objective: FewestBars}
	for i, x := range []struct {
		length int64
		count  int
	}{{700, 1}, {600, 1}, {500, 1}, {330, 3}, {110, 1}, {70, 1}, {30, 1}} {
		p.Pieces = append(p.Pieces, Piece{fmt.Sprint("W", i), x.length, x.count})
	}
	if got := newTask(p).lengthBound(); got.Cmp(big.NewRat(3, 1)) != 0 {
		t.Errorf("length bound %v, want 3", got)
	}
	plan, err := FirstFit(context.Background(), p)
	if err != nil || plan.Bound != 4 || plan.Value != 4 {
		t.Errorf("%v: value %d, bound %d, want 4 and 4", err, plan.Value, plan.Bound)
	}
}

// Several stock lengths, some of them limited, for each objective: the optimum,
// and no bound above it; eleven are proven, among them one of 47 bars of 12 m which
// only the bound of the number of bars proves. Source: testdata/README.md.
func TestSeveralStocks(t *testing.T) {
	b, err := os.ReadFile("testdata/severalstocks.json")
	if err != nil {
		t.Fatal(err)
	}
	var all struct {
		Cases []struct {
			Problem
			Optimum int64 `json:"optimum"`
		} `json:"cases"`
	}
	if err := json.Unmarshal(b, &all); err != nil {
		t.Fatal(err)
	}
	if len(all.Cases) != 12 {
		t.Fatalf("%d instances, want 12", len(all.Cases))
	}
	proven := 0
	for i, x := range all.Cases {
		plan, err := Optimise(context.Background(), x.Problem, Limits{})
		if err != nil {
			t.Errorf("instance %d: %v", i, err)
			continue
		}
		if err := Check(plan, x.Problem); err != nil {
			t.Errorf("instance %d: %v", i, err)
		}
		if plan.Value != x.Optimum || plan.Bound > x.Optimum {
			t.Errorf("instance %d: value %d, bound %d, want %d", i, plan.Value, plan.Bound, x.Optimum)
		}
		if plan.Proven {
			proven++
		}
	}
	if proven < 11 {
		t.Errorf("%d proven, want 11", proven)
	}
}
