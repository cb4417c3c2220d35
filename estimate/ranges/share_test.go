package ranges

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"spanwright/estimate/spread"
)

// Closed form: of independent lines each category's covariance with the total is
// its own variance.
func TestSharesAgainstVariances(t *testing.T) {
	r := simulate(t, sumModel(threeLines, ""), Settings{Seed: 12})
	var variance, total float64
	for _, s := range threeLines {
		variance += s.Variance()
	}
	for i, c := range r.Categories {
		if want := threeLines[i].Variance() / variance; math.Abs(c.Share-want) > 0.005 {
			t.Errorf("%s: share %v, closed form %v", c.Category, c.Share, want)
		}
		total += c.Share
	}
	if math.Abs(total-1) > 1e-12 {
		t.Errorf("shares add to %v", total)
	}
}

// The shares add to 1 whatever the model: overall factor, minimum charges, risks,
// groups, a matrix.
func TestSharesAddToOne(t *testing.T) {
	m := realistic(20, 60)
	mx := symmetric([]string{m.Inputs[3].ID, m.Inputs[9].ID}, nil, []float64{0.4})
	r := simulate(t, m, Settings{Seed: 12, Trials: 100, Correlation: map[string]float64{"g": 0.3}, Matrix: mx})
	var sum float64
	for _, c := range r.Categories {
		sum += c.Share
	}
	for _, c := range r.Risks {
		sum += c.Share
	}
	if math.Abs(sum-1) > 1e-9 || len(r.Risks) != 2 {
		t.Errorf("shares of %d categories and %d risks add to %v", len(r.Categories), len(r.Risks), sum)
	}
	// Var(total) = Σ covariances: the deviation is that of the totals themselves.
	spare := simulate(t, sumModel([]spread.Spread{spread.NewUniform(1, 2)}, ""), Settings{Trials: 100})
	if math.Abs(spare.Categories[0].Share-1) > 1e-12 {
		t.Errorf("one category has the share %v", spare.Categories[0].Share)
	}
}

func TestAllocate(t *testing.T) {
	for name, c := range map[string]struct {
		amount int64
		shares []Share
		want   []int64
	}{
		"even":             {90, []Share{{"a", 1}, {"b", 2}}, []int64{30, 60}},
		"largest left":     {100, []Share{{"a", 0.333}, {"b", 0.333}, {"c", 0.334}}, []int64{33, 33, 34}},
		"ties by name":     {100, []Share{{"z", 1}, {"m", 1}, {"a", 1}}, []int64{33, 33, 34}},
		"two ties":         {200, []Share{{"z", 1}, {"m", 1}, {"a", 1}}, []int64{66, 67, 67}},
		"negative amount":  {-100, []Share{{"z", 1}, {"m", 1}, {"a", 1}}, []int64{-34, -33, -33}},
		"negative share":   {100, []Share{{"a", 1.2}, {"b", -0.2}}, []int64{120, -20}},
		"no share":         {7, []Share{{"a", 0}, {"b", 1}}, []int64{0, 7}},
		"nothing":          {0, []Share{{"a", 0}, {"b", 0}}, []int64{0, 0}},
		"nothing, no one":  {0, nil, []int64{}},
		"beyond a float":   {1<<62 + 1, []Share{{"a", 0.5}, {"b", 0.5}}, []int64{1<<61 + 1, 1 << 61}},
		"far from a sum 1": {10, []Share{{"a", 300}, {"b", 100}}, []int64{8, 2}}, // 7.5 and 2.5: a tie, by name
	} {
		got, err := Allocate(c.amount, c.shares)
		if d := cmp.Diff(c.want, got); err != nil || d != "" {
			t.Errorf("%s: error %v (-want +got):\n%s", name, err, d)
		}
	}
	for name, c := range map[string]struct {
		shares []Share
		part   string
	}{
		"NaN":          {[]Share{{"a", math.NaN()}}, `shares "a": found NaN`},
		"infinite":     {[]Share{{"a", math.Inf(1)}}, `shares "a": found +Inf`},
		"twice":        {[]Share{{"a", 1}, {"a", 2}}, `shares "a": found the name twice`},
		"nobody":       {nil, "whose sum is above 0"},
		"sum negative": {[]Share{{"a", -1}, {"b", 0.5}}, "whose sum is above 0"},
		"cancelling":   {[]Share{{"a", 1e30}, {"b", -1e30}, {"c", 1}}, "within 64 bits"},
	} {
		if _, err := Allocate(100, c.shares); err == nil || !strings.Contains(err.Error(), c.part) {
			t.Errorf("%s: error %v, want %q in it", name, err, c.part)
		}
	}
}

// Properties: the parts add to the amount; each is within one unit of its exact
// part; the order of the shares does not matter.
func TestAllocateAddsUp(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		amount := rapid.Int64Range(-1e15, 1e15).Draw(t, "amount")
		values := rapid.SliceOfN(rapid.Float64Range(0, 1), 1, 12).Draw(t, "shares")
		values[0] += 0.1
		var shares, back []Share
		var whole float64
		for i, v := range values {
			shares = append(shares, Share{string(rune('a' + i)), v})
			back = append([]Share{shares[i]}, back...)
			whole += v
		}
		parts, err := Allocate(amount, shares)
		reversed, err2 := Allocate(amount, back)
		if err != nil || err2 != nil {
			t.Fatal(err, err2)
		}
		var sum int64
		for i, p := range parts {
			sum += p
			if exact := float64(amount) * values[i] / whole; math.Abs(float64(p)-exact) > 1+1e-15*math.Abs(float64(amount)) {
				t.Errorf("part %d of %v is %d", i, exact, p)
			}
			if other := reversed[len(parts)-1-i]; other != p {
				t.Errorf("part %d is %d, in another order %d", i, p, other)
			}
		}
		if sum != amount {
			t.Errorf("parts add to %d of %d", sum, amount)
		}
	})
}
