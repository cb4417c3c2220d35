package cutting

import (
	"math/big"
	"slices"
)

// simpleBound returns a lower bound of the objective from lengths and counts.
func (t *task) simpleBound() *big.Rat {
	best := t.lengthBound()
	cheapest := slices.Min(t.price)
	for _, b := range []int64{t.longPieces(), t.martelloToth() * cheapest} {
		if r := new(big.Rat).SetInt64(b); r.Cmp(best) > 0 {
			best = r
		}
	}
	return best
}

// room returns the width of all pieces.
func (t *task) room() int64 {
	var sum int64
	for i, w := range t.widths {
		sum += w * t.demand[i]
	}
	return sum
}

// lengthBound fills the width of all pieces, as if they could be cut anywhere,
// with the bars that are cheapest by width.
func (t *task) lengthBound() *big.Rat {
	order := make([]int, len(t.price))
	for s := range order {
		order[s] = s
	}
	rate := func(s int) *big.Rat { return big.NewRat(t.price[s], t.capacity[s]) }
	slices.SortStableFunc(order, func(a, b int) int { return rate(a).Cmp(rate(b)) })
	sum, rest := new(big.Rat), t.room()
	for _, s := range order {
		part := rest
		if t.available[s] != unlimited {
			part = min(part, t.capacity[s]*t.available[s])
		}
		sum.Add(sum, new(big.Rat).Mul(rate(s), new(big.Rat).SetInt64(part)))
		rest -= part
	}
	return sum
}

// longPieces gives each piece of more than half the longest bar the cheapest bar
// that holds it: no two share one.
func (t *task) longPieces() int64 {
	longest := slices.Max(t.capacity)
	free := make([]int64, len(t.capacity))
	for s := range free {
		free[s] = unlimited
	}
	var sum int64
	for i, w := range t.widths {
		if 2*w > longest {
			sum += t.demand[i] * t.price[t.cheapest(w, free)]
		}
	}
	return sum
}

// martelloToth returns L2 of Martello and Toth (Knapsack Problems, 1990, 8.3),
// the number of bars if all were of the longest stock length.
func (t *task) martelloToth() int64 {
	room := slices.Max(t.capacity)
	best := t.levelBound(room, 0)
	for _, w := range t.widths {
		if 2*w <= room {
			best = max(best, t.levelBound(room, w))
		}
	}
	return best
}

// levelBound is L(α): pieces over room − α stand alone, those over half have
// each a bar of their own, and those from α to half fill what the latter leave.
func (t *task) levelBound(room, level int64) int64 {
	var alone, half, halfWidth, small int64
	for i, w := range t.widths {
		switch n := t.demand[i]; {
		case w > room-level:
			alone += n
		case 2*w > room:
			half += n
			halfWidth += n * w
		case w >= level:
			small += n * w
		}
	}
	over := small - (half*room - halfWidth)
	return alone + half + max(0, (over+room-1)/room)
}

// reach returns the least sum of bar prices that is not below the bound, whose
// bars are long enough together and as many as the task's fewest, at most the
// value of a known plan. Every plan's objective is such a sum.
func (t *task) reach(bound *big.Rat, known int64) int64 {
	low := ceiling(new(big.Rat).Quo(bound, new(big.Rat).SetInt64(t.step)))
	low = max(low, t.fewest*slices.Min(t.price)/t.step)
	const most = 200_000 // longer tables seldom have a gap near their end
	high := known / t.step
	if high > most || low >= high {
		return min(low, high) * t.step
	}
	need := t.room()
	longest := make([]int64, high+1) // greatest capacity for a sum, -1 where it is none
	bars := make([]int64, high+1)    // most bars for a sum
	for v := int64(1); v <= high; v++ {
		longest[v] = -1
		for s, p := range t.price {
			if p /= t.step; p <= v && longest[v-p] >= 0 {
				longest[v] = max(longest[v], longest[v-p]+t.capacity[s])
				bars[v] = max(bars[v], bars[v-p]+1)
			}
		}
		if v >= low && longest[v] >= need && bars[v] >= t.fewest {
			return v * t.step
		}
	}
	return known
}

// ceiling rounds up.
func ceiling(r *big.Rat) int64 {
	q, m := new(big.Int).DivMod(r.Num(), r.Denom(), new(big.Int))
	if m.Sign() > 0 {
		q.Add(q, big.NewInt(1))
	}
	return q.Int64()
}
