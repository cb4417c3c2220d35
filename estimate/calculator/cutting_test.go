package calculator

import (
	"context"
	"math"
	"strings"
	"testing"
)

func quayBars(change ...func(*CuttingPlanRequest)) CuttingPlanRequest {
	r := CuttingPlanRequest{Pieces: []CuttingPiece{{Mark: "B1", Length: 6.05, Count: 24}}, Stock: []CuttingStock{{Length: 12.1}, {Length: 15.1}}, Kerf: 5}
	for _, c := range change {
		c(&r)
	}
	return r
}

// By hand (issue 4): 24 pieces of 6.050 m, kerf 5 mm, stock 12.1 and 15.1 m: two do
// not fit 12.1; 12 bars of 15.1, yield 80.1 %; 2.5 mm less would save 36 m.
func TestCuttingPlanByHand(t *testing.T) {
	for _, method := range []string{"", "first fit", "least stock"} {
		a, err := CuttingPlan(context.Background(), quayBars(func(r *CuttingPlanRequest) {
			r.Method = method
			if method == "least stock" {
				r.HintLimit = 10
			}
		}))
		if err != nil {
			t.Fatal(err)
		}
		if len(a.Bars) != 1 || a.Bars[0].Bars != 12 || a.Bars[0].Length != 15.1 || a.Pieces != 24 {
			t.Errorf("%q: bars %+v of %d pieces, want 12 of 15.1 m", method, a.Bars, a.Pieces)
		}
		if math.Abs(float64(a.Yield)-0.801) > 0.0005 || math.Abs(float64(a.Value)-181.2) > 1e-9 || a.Unit != "m" {
			t.Errorf("%q: yield %v, value %v %s", method, a.Yield, a.Value, a.Unit)
		}
		if sum := a.Used + a.KerfLoss + a.Offcuts; math.Abs(float64(sum-a.StockLength)) > 1e-9 {
			t.Errorf("%q: used, kerf and offcuts make %v, the bars %v", method, sum, a.StockLength)
		}
		if method != "least stock" {
			continue
		}
		if h := a.Hint; h == nil || h.Shorter != 2.5 || math.Abs(float64(h.Saves)-36) > 1e-9 || h.Text != "2.5 mm less on B1 would save 36 m" || !a.Proven {
			t.Errorf("hint %+v, proven %v", a.Hint, a.Proven)
		}
	}
}

// Costs are in money, not in hundredths: 12 bars of 15.1 m at 50.25, against 24 of
// 12.1 m at 30, each of which holds one piece.
func TestCuttingPlanByCost(t *testing.T) {
	a, err := CuttingPlan(context.Background(), quayBars(func(r *CuttingPlanRequest) {
		r.Objective, r.Stock[0].Cost, r.Stock[1].Cost = "cost", 30, 50.25
	}))
	if err != nil {
		t.Fatal(err)
	}
	if a.Value != 603 || a.Bound > a.Value || a.Unit != "currency of the costs" {
		t.Errorf("value %v, bound %v %s, want 603", a.Value, a.Bound, a.Unit)
	}
}

func TestCuttingPlanRefusals(t *testing.T) {
	ctx := context.Background()
	for name, row := range map[string]struct {
		change   func(*CuttingPlanRequest)
		pointers []string
	}{
		"nothing":              {func(r *CuttingPlanRequest) { *r = CuttingPlanRequest{} }, []string{"/pieces", "/stock"}},
		"no mark":              {func(r *CuttingPlanRequest) { r.Pieces[0].Mark = "" }, []string{"/pieces/0/mark"}},
		"long mark":            {func(r *CuttingPlanRequest) { r.Pieces[0].Mark = strings.Repeat("B", 81) }, []string{"/pieces/0/mark"}},
		"mark twice":           {func(r *CuttingPlanRequest) { r.Pieces = append(r.Pieces, r.Pieces[0]) }, []string{"/pieces/1/mark"}},
		"length no number":     {func(r *CuttingPlanRequest) { r.Pieces[0].Length = nan }, []string{"/pieces/0/length_m"}},
		"several at once":      {func(r *CuttingPlanRequest) { r.Pieces[0].Count, r.Stock[1].Length, r.Kerf = 0, -1, inf }, []string{"/pieces/0/count", "/stock/1/length_m", "/kerf_mm"}},
		"longer than any bar":  {func(r *CuttingPlanRequest) { r.Pieces[0].Length = 15.2 }, []string{"/pieces/0/length_m"}},
		"too few bars":         {func(r *CuttingPlanRequest) { r.Stock[0].Available, r.Stock[1].Available = 1, 1 }, []string{"/pieces/0"}},
		"cost missing":         {func(r *CuttingPlanRequest) { r.Objective = "cost" }, []string{"/stock/0/cost", "/stock/1/cost"}},
		"cost no number":       {func(r *CuttingPlanRequest) { r.Stock[0].Cost = nan }, []string{"/stock/0/cost"}},
		"unknown objective":    {func(r *CuttingPlanRequest) { r.Objective = "beauty" }, []string{"/objective"}},
		"unknown method":       {func(r *CuttingPlanRequest) { r.Method = "by eye" }, []string{"/method"}},
		"hint of first fit":    {func(r *CuttingPlanRequest) { r.HintLimit = 5 }, []string{"/hint_limit_mm"}},
		"hint no number":       {func(r *CuttingPlanRequest) { r.HintLimit = nan }, []string{"/hint_limit_mm"}},
		"too many rows":        {func(r *CuttingPlanRequest) { r.Pieces = make([]CuttingPiece, 1001) }, []string{"/pieces"}},
		"too many stock sizes": {func(r *CuttingPlanRequest) { r.Stock = make([]CuttingStock, 21) }, []string{"/stock"}},
	} {
		_, err := CuttingPlan(ctx, quayBars(row.change))
		for _, pointer := range row.pointers {
			refusedAt(t, name, err, pointer)
		}
	}
}

// A caller who is gone is not planned for.
func TestCuttingPlanGivesUp(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := CuttingPlan(ctx, quayBars()); err == nil || !strings.Contains(err.Error(), "cancel") {
		t.Errorf("got %v, want that of the context", err)
	}
}
