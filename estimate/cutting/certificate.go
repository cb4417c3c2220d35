package cutting

import (
	"math"
	"math/big"
	"slices"
)

// Certificate proves a lower bound: values of the pieces, in units of the
// objective, at which no bar without a limit holds pieces worth more than its
// price. Bars of which only some are available may hold more; the surplus is
// taken off for each of them. See Problem.Bound.
type Certificate struct {
	Denominator int64        `json:"denominator"` // of all values
	Values      []PieceValue `json:"values"`      // by decreasing length
}

// PieceValue is the value of a piece of one length.
type PieceValue struct {
	Length    int64 `json:"length"`    // 0.1 mm
	Numerator int64 `json:"numerator"` // over the certificate's denominator
}

// exactValues are values of pieces as whole numbers over one denominator.
type exactValues struct {
	denominator int64
	numerators  []int64 // by width
	items       []item  // of value above 0 and wanted, by density
}

// exactValues rounds values given in the dearest bar's price down. The
// denominator is as large as leaves every bar's worth below 2^60.
func (g *generator) exactValues(values []float64, demand []int64) exactValues {
	most := 1.0
	for _, v := range values {
		most = math.Max(most, v)
	}
	perBar := float64(slices.Max(g.capacity)/slices.Min(g.widths) + 1)
	v := exactValues{denominator: int64(math.Max(1, math.Exp2(math.Min(50, math.Floor(math.Log2(math.Exp2(60)/(most*perBar)))))/g.dearest))}
	for _, x := range values {
		n := int64(math.Floor(x * g.dearest * float64(v.denominator) * (1 - 1e-13)))
		v.numerators = append(v.numerators, n)
	}
	v.items = g.items(v.numerators, demand)
	return v
}

// items lists the widths of value above 0 that are wanted, by density.
func (t *task) items(numerators, demand []int64) []item {
	var out []item
	for i, n := range numerators {
		if n > 0 && demand[i] > 0 {
			out = append(out, item{i, t.widths[i], n, demand[i]})
		}
	}
	slices.SortFunc(out, denser)
	return out
}

// sound says whether no bar's worth can overflow at such a value.
func (t *task) sound(numerator, denominator int64) bool {
	perBar := float64(slices.Max(t.capacity)/slices.Min(t.widths) + 1)
	return float64(numerator)*perBar <= 1<<61 && float64(slices.Max(t.price))*float64(denominator) <= 1<<61
}

// boundLimit is the number of steps for one exact search for the bound.
const boundLimit = 2_000_000

// exactBound returns the lower bound that the values prove, in exact arithmetic.
// With z the most that a bar of stock s can hold: all values are scaled down
// until z ≤ price for each unlimited stock (Farley, Operations Research 38, 1990),
// and each of the limited bars costs what its z is above its price.
func (t *task) exactBound(v exactValues, limit int64, stop func() bool) *big.Rat {
	worth := make([]*big.Rat, len(t.capacity))
	scale := big.NewRat(1, 1)
	for s, room := range t.capacity {
		price := t.price[s] * v.denominator
		k := newKnapsack(v.items, room, price, limit, stop)
		k.run(room)
		z := max(k.value, k.upper)
		worth[s] = big.NewRat(z, v.denominator)
		if f := big.NewRat(price, z); t.available[s] == unlimited && f.Cmp(scale) < 0 {
			scale = f
		}
	}
	sum := new(big.Rat)
	for i, n := range v.numerators {
		part := new(big.Rat).SetFrac(new(big.Int).Mul(big.NewInt(n), big.NewInt(t.demand[i])), big.NewInt(v.denominator))
		sum.Add(sum, part.Mul(part, scale))
	}
	for s, n := range t.available {
		over := new(big.Rat).Mul(worth[s], scale)
		over.Sub(over, new(big.Rat).SetInt64(t.price[s]))
		if n != unlimited && over.Sign() > 0 {
			sum.Sub(sum, over.Mul(over, new(big.Rat).SetInt64(n)))
		}
	}
	return sum
}

// certificate names the values by length.
func (t *task) certificate(v exactValues, kerf int64) *Certificate {
	c := &Certificate{Denominator: v.denominator}
	for i, n := range v.numerators {
		c.Values = append(c.Values, PieceValue{t.widths[i] - kerf, n})
	}
	return c
}
