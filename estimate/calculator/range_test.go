package calculator

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"spanwright/estimate/spread"
)

// tenLines are ten lines of 100,000 with tri(0.8, 1, 1.5).
func tenLines(group string) RangeRequest {
	amount := 100_000.0
	r := RangeRequest{Correlation: map[string]float64{}}
	for i := range 10 {
		r.Lines = append(r.Lines, RangeLine{ID: fmt.Sprint("line ", i), Amount: &amount, Spread: spread.NewTriangular(0.8, 1, 1.5), Group: group})
	}
	return r
}

func ranged(t *testing.T, r RangeRequest) RangeAnswer {
	t.Helper()
	a, err := Range(context.Background(), r)
	if err != nil {
		t.Fatal(err)
	}
	return a
}

func closeTo(t *testing.T, name string, a RangeAnswer, want [4]float64, half float64) {
	t.Helper()
	for i, p := range a.Percentiles {
		if got := float64(p.Value); !(math.Abs(got-want[i]) <= 4*float64(p.SE)+half) {
			t.Errorf("%s: P%g = %.0f ± %.0f, want %.0f", name, 100*float64(p.P), got, float64(p.SE), want[i])
		}
		if got, want := float64(p.Contingency), float64(p.Value-a.Base); got != want {
			t.Errorf("%s: contingency %v, want %v", name, got, want)
		}
	}
}

// Issue 4: at ρ = 1 (here one line of the sum) in closed form, independent lines
// within their errors of the values given there, which are of whole thousands.
func TestRangeOfTenLines(t *testing.T) {
	amount := 1e6
	one := ranged(t, RangeRequest{Lines: []RangeLine{{ID: "sum", Amount: &amount, Spread: spread.NewTriangular(0.8, 1, 1.5)}}})
	closeTo(t, "one line", one, [4]float64{918_300, 1_081_700, 1_235_400, 1_312_900}, 50)
	closeTo(t, "independent", ranged(t, tenLines("")), [4]float64{1_041_000, 1_099_000, 1_139_000, 1_161_000}, 500)
	r := tenLines("")
	r.Matrix = &RangeMatrix{}
	for i := range 10 {
		row := make([]float64, 10)
		for k := range row {
			row[k] = 1
		}
		r.Matrix.IDs, r.Matrix.Rho = append(r.Matrix.IDs, fmt.Sprint("line ", i)), append(r.Matrix.Rho, row)
	}
	closeTo(t, "matrix of ones", ranged(t, r), [4]float64{918_300, 1_081_700, 1_235_400, 1_312_900}, 50)
	if one.Base != 1e6 || one.Caution == "" || len(one.Sensitivities) != 1 || one.MomentCheck == "" {
		t.Errorf("answer %+v", one)
	}
}

// The mean of a discrete risk is probability times mean impact; the systemic factor
// multiplies the lines alone, by exp(σ²/2) in the mean (lognormal of median 1).
func TestRangeOfRiskAndSystemicFactor(t *testing.T) {
	r := RangeRequest{Systemic: 0.2, Lines: []RangeLine{{ID: "steel", Spread: spread.NewFixed(1000)}},
		Risks: []RangeRisk{{ID: "late access", Probability: 0.25, Impact: spread.NewUniform(100, 300)}}}
	a := ranged(t, r)
	if want := 1000*math.Exp(0.02) + 0.25*200; math.Abs(float64(a.Mean)-want) > 4*float64(a.MeanSE) {
		t.Errorf("mean %v ± %v, want %v", a.Mean, a.MeanSE, want)
	}
	if a.Base != 1000 || len(a.Risks) != 1 || math.Abs(float64(a.Risks[0].Frequency)-0.25) > 0.01 {
		t.Errorf("base %v, risks %+v", a.Base, a.Risks)
	}
	again := ranged(t, r)
	if a.Mean != again.Mean || a.Percentiles[2] != again.Percentiles[2] {
		t.Error("the same request gives another answer")
	}
}

// Three lines that are each −0.52 to the others are just impossible (the least is
// −0.5) and repaired with a warning; at −0.9 they are refused by name.
func TestRangeRepairsAMatrix(t *testing.T) {
	asked := func(rho float64) RangeRequest {
		r := RangeRequest{Matrix: &RangeMatrix{IDs: []string{"a", "b", "c"}, Rho: [][]float64{{1, rho, rho}, {rho, 1, rho}, {rho, rho, 1}}}}
		for _, id := range r.Matrix.IDs {
			r.Lines = append(r.Lines, RangeLine{ID: id, Spread: spread.NewUniform(1, 2)})
		}
		return r
	}
	a := ranged(t, asked(-0.52))
	repaired := false
	for _, w := range a.Warnings {
		repaired = repaired || w.Code == "repaired" && strings.Contains(w.Message, `"a"`)
	}
	if !repaired {
		t.Errorf("warnings %+v do not tell of the repair", a.Warnings)
	}
	_, err := Range(context.Background(), asked(-0.9))
	refusedAt(t, "impossible matrix", err, "/matrix/rho/0/1")
	if err != nil && (!strings.Contains(err.Error(), `"a" and "b"`) || !strings.Contains(err.Error(), "0.05")) {
		t.Errorf("the error names neither lines nor limit: %v", err)
	}
}

func TestRangeRefusals(t *testing.T) {
	two := func(change func(*RangeRequest)) RangeRequest {
		r := RangeRequest{Correlation: map[string]float64{"labour": 0.5}, Lines: []RangeLine{{ID: "a", Spread: spread.NewPERT(1, 2, 4), Group: "labour"}, {ID: "b", Spread: spread.NewUniform(1, 2)}}}
		change(&r)
		return r
	}
	matrix := func(ids []string, rho ...[]float64) func(*RangeRequest) {
		return func(r *RangeRequest) { r.Matrix = &RangeMatrix{ids, rho} }
	}
	ab := []string{"a", "b"}
	for name, row := range map[string]struct {
		change   func(*RangeRequest)
		pointers []string
	}{
		"no lines":             {func(r *RangeRequest) { r.Lines = nil }, []string{"/lines"}},
		"too many lines":       {func(r *RangeRequest) { r.Lines = make([]RangeLine, 401) }, []string{"/lines"}},
		"no id":                {func(r *RangeRequest) { r.Lines[0].ID = "" }, []string{"/lines/0/id"}},
		"long id":              {func(r *RangeRequest) { r.Lines[0].ID = strings.Repeat("a", 121) }, []string{"/lines/0/id"}},
		"id twice":             {func(r *RangeRequest) { r.Lines[1].ID = "a" }, []string{"/lines/1/id"}},
		"reserved id":          {func(r *RangeRequest) { r.Lines[1].ID = "systemic factor" }, []string{"/lines/1/id"}},
		"amount no number":     {func(r *RangeRequest) { r.Lines[0].Amount = &nan }, []string{"/lines/0/amount"}},
		"spread out of order":  {func(r *RangeRequest) { r.Lines[0].Spread.Low = 3 }, []string{"/lines/0/spread/likely"}},
		"spread no number":     {func(r *RangeRequest) { r.Lines[0].Spread.High = nan }, []string{"/lines/0/spread/high"}},
		"spread too large":     {func(r *RangeRequest) { r.Lines[0].Spread.High = 1e20 }, []string{"/lines/0/spread"}},
		"unknown distribution": {func(r *RangeRequest) { r.Lines[0].Spread.Distribution = "guess" }, []string{"/lines/0/spread/distribution"}},
		"group without ρ":      {func(r *RangeRequest) { r.Lines[1].Group = "steel" }, []string{"/lines/1/group"}},
		"ρ of 1":               {func(r *RangeRequest) { r.Correlation["labour"] = 1 }, []string{"/correlation/labour"}},
		"ρ no number, escaped": {func(r *RangeRequest) { r.Correlation["a/b"] = nan }, []string{"/correlation/a~1b"}},
		"risk":                 {func(r *RangeRequest) { r.Risks = []RangeRisk{{ID: "a", Probability: 2, Impact: spread.NewFixed(1)}} }, []string{"/risks/0/id", "/risks/0/probability"}},
		"too many risks":       {func(r *RangeRequest) { r.Risks = make([]RangeRisk, 101) }, []string{"/risks"}},
		"systemic":             {func(r *RangeRequest) { r.Systemic = nan }, []string{"/systemic_log_deviation"}},
		"replicates":           {func(r *RangeRequest) { r.Replicates = 31 }, []string{"/replicates"}},
		"trials":               {func(r *RangeRequest) { r.Trials = -1 }, []string{"/trials"}},
		"trials in all":        {func(r *RangeRequest) { r.Replicates, r.Trials = 256, 16384 }, []string{"/trials"}},
		"percentile":           {func(r *RangeRequest) { r.Percentiles = []float64{0.5, 80} }, []string{"/percentiles/1"}},
		"too many percentiles": {func(r *RangeRequest) { r.Percentiles = make([]float64, 51) }, []string{"/percentiles"}},
		"matrix not square":    {matrix(ab, []float64{1, 0.2}), []string{"/matrix/rho"}},
		"matrix row short":     {matrix(ab, []float64{1, 0.2}, []float64{1}), []string{"/matrix/rho/1"}},
		"matrix not symmetric": {matrix(ab, []float64{1, 0.2}, []float64{0.3, 1}), []string{"/matrix/rho/0/1"}},
		"matrix diagonal":      {matrix(ab, []float64{0.9, 0.2}, []float64{0.2, 1}), []string{"/matrix/rho/0/0"}},
		"matrix over 1":        {matrix(ab, []float64{1, 1.2}, []float64{1.2, 1}), []string{"/matrix/rho/0/1"}},
		"matrix no number":     {matrix(ab, []float64{1, nan}, []float64{nan, 1}), []string{"/matrix/rho/0/1"}},
		"matrix unknown line":  {matrix([]string{"a", "z"}, []float64{1, 0}, []float64{0, 1}), []string{"/matrix/ids/1"}},
		"matrix line twice":    {matrix([]string{"a", "a"}, []float64{1, 0}, []float64{0, 1}), []string{"/matrix/ids/1"}},
		"matrix too large":     {matrix(make([]string, 101)), []string{"/matrix/ids"}},
		"matrix and other ones": {func(r *RangeRequest) {
			matrix(ab, []float64{1, 0.2}, []float64{0.3, 1})(r)
			r.Lines[0].Spread.Low = 3
			r.Trials = 1
		}, []string{"/matrix/rho/0/1", "/lines/0/spread/likely", "/trials"}},
	} {
		_, err := Range(context.Background(), two(row.change))
		for _, pointer := range row.pointers {
			refusedAt(t, name, err, pointer)
		}
	}
	if _, err := Range(context.Background(), two(func(*RangeRequest) {})); err != nil {
		t.Error(err)
	}
}

func TestRangeGivesUp(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Range(ctx, tenLines("")); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v, want that of the context", err)
	}
}

// FuzzCuttingAndRange gives any text to the two calculators.
func FuzzCuttingAndRange(f *testing.F) {
	f.Add([]byte(`{"pieces":[{"mark":"B1","length_m":6.05,"count":24}],"stock":[{"length_m":15.1}],"kerf_mm":5}`))
	f.Add([]byte(`{"lines":[{"id":"a","amount":5,"spread":{"distribution":"pert","low":1,"likely":2,"high":4},"group":"g"}],"correlation":{"g":0.4},"trials":64}`))
	f.Add([]byte(`{"lines":[{"id":"a","spread":{"distribution":"lognormal","low":1e-9,"high":1e9}}],"matrix":{"ids":["a"],"rho":[[1]]},"trials":64}`))
	f.Fuzz(func(t *testing.T, data []byte) {
		var c CuttingPlanRequest
		if Decode(data, &c) == nil {
			a, err := CuttingPlan(context.Background(), c)
			sane(t, a, err)
		}
		var r RangeRequest
		if Decode(data, &r) == nil {
			r.Replicates, r.Trials = 32, 64
			a, err := Range(context.Background(), r)
			sane(t, a, err)
		}
	})
}
