package cutting

import (
	"errors"
	"fmt"
	"math"
	"math/big"
)

// Check verifies a plan against its problem from the plan's own patterns: every
// piece cut exactly as often as wanted and at its length, no bar overfull, no
// more bars than available, every sum as stated, bound not above the value. It
// returns all that is wrong, joined, or nil.
func Check(plan Plan, p Problem) error {
	if err := p.Validate(); err != nil {
		return err
	}
	var errs []error
	bad := func(format string, a ...any) { errs = append(errs, fmt.Errorf(format, a...)) }
	rows := map[string]Piece{}
	for _, x := range p.Pieces {
		rows[x.Mark] = x
	}
	made := map[string]int64{}
	bars := make([]int64, len(p.Stock))
	for i, x := range plan.Patterns {
		if x.Stock < 0 || x.Stock >= len(p.Stock) || x.Bars < 1 || x.Bars > MaxPieces {
			bad("pattern %d: %d bars of stock %d", i, x.Bars, x.Stock)
			continue
		}
		bars[x.Stock] += x.Bars
		if err := checkPattern(x, p, rows); err != nil {
			bad("pattern %d: %w", i, err)
			continue
		}
		for _, c := range x.Cuts {
			made[c.Mark] += c.Count * x.Bars
		}
	}
	for _, x := range p.Pieces {
		if made[x.Mark] != int64(x.Count) {
			bad("mark %q: %d pieces cut, %d wanted", x.Mark, made[x.Mark], x.Count)
		}
	}
	errs = append(errs, checkSums(plan, p, bars)...)
	return errors.Join(errs...)
}

// checkPattern verifies one bar.
func checkPattern(x Pattern, p Problem, rows map[string]Piece) error {
	var used, pieces int64
	for _, c := range x.Cuts {
		row, known := rows[c.Mark]
		if !known || row.Length != c.Length || c.Count < 1 || c.Count > MaxPieces {
			return fmt.Errorf("%d pieces %q of %s are not asked for", c.Count, c.Mark, millimetres(c.Length))
		}
		used += c.Length * c.Count
		pieces += c.Count
	}
	length := p.Stock[x.Stock].Length
	rest := length - used - (pieces-1)*p.Kerf
	if pieces < 1 || rest < 0 || x.Length != length {
		return fmt.Errorf("%d pieces of %s together with %d cuts of %s do not fit a bar of %s", pieces, millimetres(used), pieces-1, millimetres(p.Kerf), millimetres(length))
	}
	if want := max(0, rest-p.Kerf); x.Offcut != want {
		return fmt.Errorf("offcut of %s, want %s", millimetres(x.Offcut), millimetres(want))
	}
	return nil
}

// checkSums verifies what the plan says of the whole.
func checkSums(plan Plan, p Problem, bars []int64) []error {
	var errs []error
	var value, length, used, pieces int64
	want := []BarCount{}
	for s, n := range bars {
		if limit := int64(p.Stock[s].Available); limit > 0 && n > limit {
			errs = append(errs, fmt.Errorf("stock %d: %d bars, %d available", s, n, limit))
		}
		if n > 0 {
			want = append(want, BarCount{s, p.Stock[s].Length, n})
		}
		value += p.price(p.Stock[s]) * n
		length += p.Stock[s].Length * n
	}
	for _, x := range p.Pieces {
		used += x.Length * int64(x.Count)
		pieces += int64(x.Count)
	}
	equal := len(want) == len(plan.Bars)
	for i := 0; equal && i < len(want); i++ {
		equal = want[i] == plan.Bars[i]
	}
	if !equal {
		errs = append(errs, fmt.Errorf("bars by stock are %v, want %v", plan.Bars, want))
	}
	for _, x := range []struct {
		what      string
		got, want int64
	}{
		{"value", plan.Value, value}, {"stock length", plan.StockLength, length}, {"length used", plan.Used, used}, {"pieces", plan.Pieces, pieces},
		{"used, kerf loss and offcuts", plan.Used + plan.KerfLoss + plan.Offcuts, length}, {"gap", plan.Gap, value - plan.Bound},
	} {
		if x.got != x.want {
			errs = append(errs, fmt.Errorf("%s: %d, want %d", x.what, x.got, x.want))
		}
	}
	if plan.Gap < 0 || plan.Proven != (plan.Gap == 0) || !(math.Abs(plan.Yield*float64(length)-float64(used)) <= 1e-9*float64(length)) {
		errs = append(errs, fmt.Errorf("gap %d, proven %t, yield %g do not agree with the plan", plan.Gap, plan.Proven, plan.Yield))
	}
	return errs
}

// Bound returns the lower bound that a certificate proves for the problem, in
// units of the objective, in exact arithmetic, or Faults. It is not raised to a
// sum of bar prices as Plan.Bound is.
func (p Problem) Bound(c Certificate) (*big.Rat, error) {
	if err := p.Validate(); err != nil {
		return nil, err
	}
	t := newTask(p)
	v := exactValues{denominator: c.Denominator, numerators: make([]int64, len(t.widths))}
	if c.Denominator < 1 || len(c.Values) != len(t.widths) {
		return nil, Faults{{"/values", fmt.Sprintf("%d values over %d", len(c.Values), c.Denominator), "not a certificate of this problem", fmt.Sprintf("%d values over 1 or more", len(t.widths))}}
	}
	for i, x := range c.Values {
		if x.Length+p.Kerf != t.widths[i] || x.Numerator < 0 || !t.sound(x.Numerator, c.Denominator) {
			return nil, Faults{{fmt.Sprintf("/values/%d", i), fmt.Sprintf("%d for %s", x.Numerator, millimetres(x.Length)), "not a certificate of this problem", "a value for " + millimetres(t.widths[i]-p.Kerf)}}
		}
		v.numerators[i] = x.Numerator
	}
	v.items = t.items(v.numerators, t.demand)
	return t.exactBound(v, boundLimit, func() bool { return false }), nil
}
