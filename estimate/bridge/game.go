package bridge

import (
	"context"
	"fmt"
	"maps"
	"math"
	"math/bits"
	"slices"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
)

// game is the sharing of one change, from a to b.
type game struct {
	a, b     Side
	value    Valuer
	currency money.Currency

	moved      []Cause
	values     []Value // by coalition: bit k set takes moved[k] from b
	ownA, ownB Value   // of the two jobs under their own sampling
}

// play finds the causes that differ and values every coalition of them.
func (g *game) play(ctx context.Context) error {
	sampling := common(g.a.Job.Sampling, g.b.Job.Sampling)
	a, b := g.a.Job, g.b.Job
	a.Sampling, b.Sampling = sampling, sampling
	var err error
	if g.moved, err = moved(a, b); err != nil {
		return err
	}
	g.values = make([]Value, 1<<len(g.moved))
	for coalition := range g.values {
		j, err := mix(a, b, func(c Cause) bool {
			k := slices.Index(g.moved, c)
			return k >= 0 && coalition&(1<<k) != 0
		})
		if err != nil {
			return err
		}
		if g.values[coalition], err = g.value(ctx, j); err != nil {
			return fmt.Errorf("bridge: valuing the job with %v of the other: %w", g.coalition(coalition), err)
		}
	}
	if g.ownA, err = g.own(ctx, g.a.Job, sampling, g.values[0]); err != nil {
		return err
	}
	g.ownB, err = g.own(ctx, g.b.Job, sampling, g.values[len(g.values)-1])
	return err
}

func (g *game) coalition(n int) []Cause {
	out := []Cause{}
	for k, c := range g.moved {
		if n&(1<<k) != 0 {
			out = append(out, c)
		}
	}
	return out
}

// own is the value under the job's own sampling.
func (g *game) own(ctx context.Context, j job.Job, common job.Sampling, known Value) (Value, error) {
	if j.Sampling == common {
		return known, nil
	}
	v, err := g.value(ctx, j)
	if err != nil {
		return Value{}, fmt.Errorf("bridge: valuing a job under its own sampling: %w", err)
	}
	return v, nil
}

// common is the sampling of all coalitions: the larger of the two, by the smaller
// seed where they are as large.
func common(a, b job.Sampling) job.Sampling {
	n, m := a.Replicates*a.Trials, b.Replicates*b.Trials
	if n > m || n == m && a.Seed <= b.Seed {
		return a
	}
	return b
}

// shapley returns the share of player k of n in a game of values by coalition.
func shapley(n, k int, value func(coalition int) float64) float64 {
	total := 0.0
	for s := range 1 << n {
		if s&(1<<k) != 0 {
			continue
		}
		total += float64(weight(n, bits.OnesCount(uint(s))) * (value(s|1<<k) - value(s)))
	}
	return total
}

// weight is s!(n − s − 1)!/n!, the part of all orders in which s given players come
// before one and the rest after it.
func weight(n, s int) float64 {
	w := 1 / float64(n)
	for i := 1; i <= s; i++ { // 1/(n·C(n−1, s))
		w *= float64(i) / float64(n-i)
	}
	return w
}

// shares are those of every cause, for the direction asked.
func (g *game) shares(back bool) []Share {
	n := len(g.moved)
	last := len(g.values) - 1
	exact := make([]float64, n)
	for k := range g.moved {
		exact[k] = shapley(n, k, func(s int) float64 { return g.values[s].Total.Float64() })
	}
	names := make([]string, n)
	for k, c := range g.moved {
		names[k] = string(c)
	}
	amounts := apportion(g.values[last].Total.Sub(g.values[0].Total), exact, names, g.currency.MinorDigits)
	groups := g.groups()
	var out []Share
	for _, c := range Causes() {
		s := Share{Cause: c, Groups: []GroupShare{}, Moved: []string{}}
		switch k := slices.Index(g.moved, c); {
		case c == Engine:
			s.Amount = stored(g.b).Sub(g.ownB.Total).Sub(stored(g.a).Sub(g.ownA.Total))
		case c == Sampling:
			s.Amount = g.ownB.Total.Sub(g.values[last].Total).Sub(g.ownA.Total.Sub(g.values[0].Total))
		case k >= 0:
			s.Amount = amounts[k]
			s.SE = document.Number(g.standardError(k))
			s.Groups = ofCause(groups, k)
		}
		s.Contingency = s.Amount
		for _, x := range s.Groups {
			s.Contingency = s.Contingency.Sub(x.Amount)
		}
		if back {
			s.turn()
		}
		out = append(out, s)
	}
	return out
}

func stored(s Side) money.Decimal { return s.Document.Totals.AtConfidence }

// turn gives a share the other sign.
func (s *Share) turn() {
	s.Amount, s.Contingency = s.Amount.Neg(), s.Contingency.Neg()
	for i := range s.Groups {
		s.Groups[i].Amount = s.Groups[i].Amount.Neg()
	}
}

// standardError is that of a share between the replicates of common draws.
func (g *game) standardError(k int) float64 {
	n := len(g.values[0].Replicates)
	for _, v := range g.values {
		n = min(n, len(v.Replicates))
	}
	if n < 2 {
		return 0
	}
	each := make([]float64, n)
	mean := 0.0
	for r := range each {
		each[r] = shapley(len(g.moved), k, func(s int) float64 { return g.values[s].Replicates[r] })
		mean += each[r] / float64(n)
	}
	squares := 0.0
	for _, x := range each {
		squares += (x - mean) * (x - mean)
	}
	return math.Sqrt(squares / float64(n-1) / float64(n))
}

// groups parts the change of each group's base among the causes that moved.
func (g *game) groups() map[string][]money.Decimal {
	names := map[string]bool{}
	for _, v := range g.values {
		for n := range v.Groups {
			names[n] = true
		}
	}
	causes := make([]string, len(g.moved))
	for k, c := range g.moved {
		causes[k] = string(c)
	}
	last := len(g.values) - 1
	out := map[string][]money.Decimal{}
	for _, n := range slices.Sorted(maps.Keys(names)) {
		exact := make([]float64, len(g.moved))
		for k := range exact {
			exact[k] = shapley(len(g.moved), k, func(s int) float64 { return g.values[s].Groups[n].Float64() })
		}
		out[n] = apportion(g.values[last].Groups[n].Sub(g.values[0].Groups[n]), exact, causes, g.currency.MinorDigits)
	}
	return out
}

// ofCause are the parts of one cause that are not nothing.
func ofCause(groups map[string][]money.Decimal, k int) []GroupShare {
	out := []GroupShare{}
	for _, n := range slices.Sorted(maps.Keys(groups)) {
		if d := groups[n][k]; d.Sign() != 0 {
			out = append(out, GroupShare{Group: n, Amount: d})
		}
	}
	return out
}

// apportion rounds parts to the minor unit so that they add up to the whole:
// everything is cut towards zero, what is left goes to the parts that lost most, by
// name where two lost the same.
func apportion(whole money.Decimal, parts []float64, names []string, places int) []money.Decimal {
	out := make([]money.Decimal, len(parts))
	unit := math.Pow10(-places)
	lost := make([]float64, len(parts))
	left := whole
	for i, x := range parts {
		cut := math.Trunc(x/unit + math.Copysign(1e-6, x)) // a share that is whole but for noise stays whole
		d, err := money.FromFloat(cut*unit, places)
		if err != nil {
			d = money.Zero
		}
		out[i], lost[i] = d, x/unit-cut
		left = left.Sub(d)
	}
	one, err := money.FromFloat(unit, places)
	if err != nil {
		return out
	}
	order := make([]int, len(parts))
	for i := range order {
		order[i] = i
	}
	sign := float64(left.Sign())
	slices.SortFunc(order, func(i, j int) int {
		if d := sign * (lost[j] - lost[i]); math.Abs(d) > 1e-6 {
			return int(math.Copysign(1, d))
		}
		if names[i] < names[j] {
			return -1
		}
		return 1
	})
	for i := 0; left.Sign() != 0 && len(order) > 0; i++ {
		k := order[i%len(order)]
		if left.Sign() > 0 {
			out[k], left = out[k].Add(one), left.Sub(one)
		} else {
			out[k], left = out[k].Sub(one), left.Add(one)
		}
	}
	return out
}

func sumGroups(shares []Share) []GroupShare {
	sum := map[string]money.Decimal{}
	for _, s := range shares {
		for _, g := range s.Groups {
			sum[g.Group] = sum[g.Group].Add(g.Amount)
		}
	}
	out := []GroupShare{}
	for _, n := range slices.Sorted(maps.Keys(sum)) {
		out = append(out, GroupShare{Group: n, Amount: sum[n]})
	}
	return out
}
