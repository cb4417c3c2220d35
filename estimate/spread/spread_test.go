package spread

import (
	"encoding/json"
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// everyShape has a spread of every distribution, skew and kind of bounds.
func everyShape() map[string]Spread {
	percentiles := func(s Spread) Spread { s.Bounds = BoundsPercentiles; return s }
	return map[string]Spread{
		"fixed":                  NewFixed(42),
		"uniform":                NewUniform(-3, 9),
		"uniform p10-p90":        percentiles(NewUniform(10, 18)),
		"triangular":             NewTriangular(0.8, 1, 1.5),
		"triangular at low":      NewTriangular(2, 2, 5),
		"triangular at high":     NewTriangular(2, 5, 5),
		"triangular p10-p90":     percentiles(NewTriangular(0.8, 1, 1.5)),
		"triangular p10 is mode": percentiles(NewTriangular(1, 1, 2)),
		"pert":                   NewPERT(18, 28, 42),
		"pert symmetric":         NewPERT(-1, 0, 1),
		"pert at low":            NewPERT(0, 0, 10),
		"pert at high":           NewPERT(0, 10, 10),
		"pert skewed":            NewPERT(1e6, 1.01e6, 3e6),
		"pert p10-p90":           percentiles(NewPERT(18, 28, 42)),
		"pert p90 is mode":       percentiles(NewPERT(1, 2, 2)),
		"lognormal":              NewLognormal(50, 200),
		"lognormal by median":    {Distribution: Lognormal, Low: 80, Likely: 90, High: 160},
		"log deviation":          LogDeviation(0.25),
		"log deviation wide":     LogDeviation(1),
	}
}

func TestValidateAccepts(t *testing.T) {
	for name, s := range everyShape() {
		if err := s.Validate(); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestValidateNamesTheField(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		s     Spread
		field string
	}{
		{Spread{}, "distribution"}, {Spread{Distribution: "normal"}, "distribution"},
		{NewTriangular(nan, 1, 2), "low"}, {NewTriangular(0, nan, 2), "likely"}, {NewTriangular(0, 1, inf), "high"},
		{NewTriangular(2, 1, 3), "likely"}, {NewTriangular(0, 4, 3), "likely"}, {NewTriangular(3, 2, 1), "high"},
		{NewPERT(2, 1, 3), "likely"}, {NewPERT(0, 0, -1), "high"}, {NewUniform(2, 1), "high"},
		{Spread{Distribution: Uniform, Low: 1, Likely: 3, High: 2}, "likely"},
		{Spread{Distribution: Fixed, Low: 1, Likely: 2, High: 3}, "low"},
		{Spread{Distribution: Fixed, Likely: 2, High: 3}, "high"}, {NewFixed(nan), "likely"},
		{NewLognormal(0, 3), "low"}, {NewLognormal(-1, 3), "low"}, {NewLognormal(3, 1), "high"},
		{Spread{Distribution: Lognormal, Low: 1, Likely: 5, High: 2}, "likely"},
		{Spread{Distribution: Lognormal, Low: 1, High: 2, Bounds: BoundsLimits}, "bounds"},
		{Spread{Distribution: PERT, Likely: 1, High: 2, Bounds: "p5-p95"}, "bounds"},
		{LogDeviation(-0.1), "high"}, {LogDeviation(nan), "low"}, {LogDeviation(1000), "high"},
		{NewLognormal(1, 2).Scale(-1), "low"}, {NewTriangular(0, 1, 2).Scale(nan), "low"},
	} {
		err := c.s.Validate()
		var e *Error
		if !errors.As(err, &e) || e.Field != c.field || e.Found == "" || e.Accepted == "" {
			t.Errorf("%+v: error %v, want one on %s with finding and remedy", c.s, err, c.field)
			continue
		}
		if _, err := c.s.Sampler(); err == nil {
			t.Errorf("%+v: a sampler of an invalid spread", c.s)
		}
		for _, x := range []float64{c.s.Base(), c.s.Mean(), c.s.Variance(), c.s.Quantile(0.5), c.s.CDF(1)} {
			if !math.IsNaN(x) {
				t.Errorf("%+v: a number %v from an invalid spread", c.s, x)
			}
		}
	}
}

// A mode outside of the percentiles, or one value for both with another mode.
func TestPercentilesThatNothingFits(t *testing.T) {
	for _, c := range []struct {
		s    Spread
		want string
	}{
		{NewTriangular(10, 7, 15), "likely: found 7 with P10 10 and P90 15, which no triangular distribution fits with its mode between its P10 and P90; accepted: a likely value (the mode) from 10 to 15; or low and high as limits"},
		{NewPERT(10, 16, 15), "likely: found 16 with P10 10 and P90 15, which no pert distribution fits"},
		{NewPERT(10, 12, 10), "likely: found 12 with P10 10 and P90 10, which no pert"},
		{NewTriangular(15, 12, 10), "high: found 10; accepted: at least low, 15"},
	} {
		c.s.Bounds = BoundsPercentiles
		err := c.s.Validate()
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%+v: error %v, want %q in it", c.s, err, c.want)
		}
	}
}

// Property: percentiles of any size and skew give limits that have them, or an
// error; never a NaN.
func TestPercentilesOfAnySize(t *testing.T) {
	for _, d := range []Distribution{Triangular, PERT} {
		for _, scale := range []float64{1e-90, 1e-9, 1, 1e9, 1e99} {
			for _, mode := range []float64{0, 1e-12, 0.3, 1 - 1e-12, 1} {
				s := Spread{Distribution: d, Low: scale, Likely: scale * (1 + mode*1e-3), High: scale * (1 + 1e-3), Bounds: BoundsPercentiles}
				if err := s.Validate(); err != nil {
					t.Errorf("%+v: %v", s, err)
					continue
				}
				if p10, p90 := s.CDF(s.Low), s.CDF(s.High); !(math.Abs(p10-0.1) < 1e-6 && math.Abs(p90-0.9) < 1e-6) {
					t.Errorf("%+v: probabilities %v and %v", s, p10, p90)
				}
			}
		}
	}
}

func TestDegenerateIsFixed(t *testing.T) {
	for _, s := range []Spread{NewUniform(3, 3), NewTriangular(3, 3, 3), NewPERT(3, 3, 3), NewLognormal(3, 3), NewFixed(3), {Distribution: PERT, Low: 3, Likely: 3, High: 3, Bounds: BoundsPercentiles}} {
		r, err := s.Sampler()
		if err != nil {
			t.Fatal(err)
		}
		got := []float64{s.Base(), s.Mean(), s.Quantile(0.1), r.FromUniform(0.9), r.FromNormal(-2), s.Variance(), s.CDF(2.9), s.CDF(3)}
		if d := cmp.Diff([]float64{3, 3, 3, 3, 3, 0, 0, 1}, got); d != "" || !r.Fixed() {
			t.Errorf("%v (-want +got):\n%s", s, d)
		}
	}
}

func TestBase(t *testing.T) {
	for _, c := range []struct {
		s    Spread
		want float64
	}{
		{NewTriangular(0.8, 1, 1.5), 1}, {NewPERT(1, 2, 9), 2}, {NewUniform(2, 5), 3.5}, {NewLognormal(50, 200), 100},
		{Spread{Distribution: Uniform, Low: 2, Likely: 3, High: 5}, 3},
		{Spread{Distribution: Lognormal, Low: 50, Likely: 80, High: 200}, 80},
		{Spread{Distribution: Triangular, Low: 2, Likely: 3, High: 5, Bounds: BoundsPercentiles}, 3},
		{LogDeviation(0.25), 1}, {LogDeviation(0), 1},
	} {
		if got := c.s.Base(); math.Abs(got-c.want) > 1e-13*c.want {
			t.Errorf("%+v: base %v, want %v", c.s, got, c.want)
		}
	}
}

// Property: scaling the spread scales every quantile.
func TestScale(t *testing.T) {
	for name, s := range everyShape() {
		for _, f := range []float64{2.5, 1e-6, 0, -3} {
			scaled := s.Scale(f)
			if f < 0 && s.Distribution == Lognormal {
				continue // refused, see TestValidateNamesTheField
			}
			for _, u := range []float64{0.01, 0.1, 0.5, 0.77, 0.999} {
				from := u
				if f < 0 {
					from = 1 - u
				}
				got, want := scaled.Quantile(u), f*s.Quantile(from)
				if !(math.Abs(got-want) <= 1e-9*math.Abs(f)*(1+math.Abs(s.High))) {
					t.Errorf("%s × %v: quantile of %v = %v, want %v", name, f, u, got, want)
				}
			}
		}
	}
}

func TestJSON(t *testing.T) {
	for name, s := range everyShape() {
		text, err := json.Marshal(s)
		if err != nil {
			t.Fatal(err)
		}
		var back Spread
		if err := json.Unmarshal(text, &back); err != nil || back != s {
			t.Errorf("%s: %s reads back as %+v, %v", name, text, back, err)
		}
	}
	text, _ := json.Marshal(NewTriangular(0, 1, 2))
	if want := `{"distribution":"triangular","low":0,"likely":1,"high":2}`; string(text) != want {
		t.Errorf("got %s, want %s", text, want)
	}
	if msg := NewTriangular(2, 1, 3).Validate().Error(); !strings.Contains(msg, "likely: found 1; accepted: from low, 2, to high, 3") {
		t.Errorf("message %q", msg)
	}
}
