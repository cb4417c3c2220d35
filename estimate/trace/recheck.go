package trace

import (
	"math/big"

	"spanwright/estimate/money"
)

// between is what a computation from printed numbers leaves open.
type between struct{ low, high *big.Rat }

func of(v value) between {
	if v.open.Sign() == 0 {
		one := new(big.Rat).Set(v.rat)
		return between{one, one}
	}
	return between{new(big.Rat).Sub(v.rat, v.open), new(big.Rat).Add(v.rat, v.open)}
}

// add returns a + sign·b.
func (a between) add(b between, sign int) between {
	if sign < 0 {
		b = between{new(big.Rat).Neg(b.high), new(big.Rat).Neg(b.low)}
	}
	return between{new(big.Rat).Add(a.low, b.low), new(big.Rat).Add(a.high, b.high)}
}

func (a between) times(b between) between {
	return hull(new(big.Rat).Mul(a.low, b.low), new(big.Rat).Mul(a.low, b.high), new(big.Rat).Mul(a.high, b.low), new(big.Rat).Mul(a.high, b.high))
}

// over returns a / b; ok is false where b may be zero.
func (a between) over(b between) (between, bool) {
	if b.low.Sign()*b.high.Sign() <= 0 {
		return a, false
	}
	return a.times(between{new(big.Rat).Inv(b.high), new(big.Rat).Inv(b.low)}), true
}

func hull(list ...*big.Rat) between {
	out := between{list[0], list[0]}
	for _, x := range list[1:] {
		if x.Cmp(out.low) < 0 {
			out.low = x
		}
		if x.Cmp(out.high) > 0 {
			out.high = x
		}
	}
	return out
}

// rounded applies roundings to decimal places one after another, half away from
// zero.
func (a between) rounded(places ...int) between {
	for _, p := range places {
		a = between{round(a.low, p), round(a.high, p)}
	}
	return a
}

// round rounds to decimal places, half away from zero.
func round(x *big.Rat, places int) *big.Rat {
	y := new(big.Rat).Mul(x, power(places))
	half := oneHalf
	if x.Sign() < 0 {
		half = new(big.Rat).Neg(oneHalf)
	}
	y.Add(y, half)
	n := new(big.Int).Quo(y.Num(), y.Denom())
	return new(big.Rat).Mul(new(big.Rat).SetInt(n), power(-places))
}

// holds tells whether the value shown may be what was computed.
func (a between) holds(v value) bool {
	b := of(v)
	return a.low.Cmp(b.high) <= 0 && b.low.Cmp(a.high) <= 0
}

func product(list ...value) between {
	out := of(whole(1))
	for _, v := range list {
		out = out.times(of(v))
	}
	return out
}

func sum(list ...value) between {
	out := of(exact(money.Zero))
	for _, v := range list {
		out.include(v)
	}
	return out
}

// include adds a value to a sum that nothing else holds.
func (a *between) include(v value) {
	if v.open.Sign() == 0 && a.low == a.high {
		a.low.Add(a.low, v.rat)
		return
	}
	if a.low == a.high {
		a.high = new(big.Rat).Set(a.low)
	}
	b := of(v)
	a.low.Add(a.low, b.low)
	a.high.Add(a.high, b.high)
}

// recheck notes where the numbers shown do not give the value shown.
func (d *draft) recheck(got between, shown value) {
	if got.holds(shown) {
		return
	}
	d.Notes = append(d.Notes, "does not recompute: the numbers shown give "+grouped(got.low.FloatString(6)))
}
