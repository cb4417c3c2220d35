package cutting

import (
	"context"
	"slices"
)

// FirstFit makes a plan by first-fit decreasing: pieces by decreasing length, each
// into the first bar that still holds it, else into a new one. With several
// stock lengths this is done once with each of them preferred for new bars (the
// cheapest that holds the piece where the preferred one does not) and once with
// the cheapest; every bar is then changed for the cheapest that holds its pieces;
// the best of these plans is returned. Its bound is the greatest of the length
// bound, the bound of pieces longer than half a bar, and L2 of Martello and Toth
// (Knapsack Problems, 1990, 8.3), rounded up to a sum of prices (see Plan.Bound).
//
// The error is Faults for a bad problem, also where the bars available did not
// suffice, or that of the context.
func FirstFit(ctx context.Context, p Problem) (Plan, error) {
	if err := p.Validate(); err != nil {
		return Plan{}, err
	}
	if err := ctx.Err(); err != nil {
		return Plan{}, err
	}
	t := newTask(p)
	uses, ok := t.firstFit(t.demand, t.available)
	if !ok {
		return Plan{}, shortage("first fit found no way with the bars available; optimising may")
	}
	bound := t.reach(t.simpleBound(), t.total(uses))
	return p.plan(t, uses, bound, "first-fit decreasing", nil), nil
}

// shortage is the fault of too few bars.
func shortage(found string) error {
	return Faults{{"/stock", found, "not enough bars available", "more bars, or a longer stock length"}}
}

// batch is a number of equal bars being filled.
type batch struct {
	use
	left int64 // width left of each
}

// firstFit returns the best plan over the rules for new bars, false where none
// finds bars enough.
func (t *task) firstFit(demand, available []int64) ([]use, bool) {
	var best []use
	found := false
	for prefer := -1; prefer < len(t.capacity); prefer++ {
		bars, ok := t.fill(demand, available, prefer)
		if !ok {
			continue
		}
		uses := t.gather(bars, available)
		if !found || t.total(uses) < t.total(best) {
			best, found = uses, true
		}
	}
	return best, found
}

// fill is first-fit decreasing with one stock preferred, -1 for the cheapest.
func (t *task) fill(demand, available []int64, prefer int) ([]batch, bool) {
	left := slices.Clone(available)
	var bars, full []batch
	least := t.least(demand)
	for i, w := range t.widths {
		need := demand[i]
		if need == 0 {
			continue
		}
		bars, need = put(bars, i, w, need)
		for need > 0 {
			s := prefer
			if s < 0 || t.capacity[s] < w || left[s] == 0 {
				s = t.cheapest(w, left)
			}
			if s < 0 {
				return nil, false
			}
			each := t.capacity[s] / w
			n := (need + each - 1) / each
			if left[s] != unlimited {
				n = min(n, left[s])
			}
			take(left, s, n)
			var fresh []batch
			fresh, need = put([]batch{{use{column{stock: s}, n}, t.capacity[s]}}, i, w, need)
			bars = append(bars, fresh...)
		}
		open := bars[:0]
		for _, b := range bars {
			if b.left < least {
				full = append(full, b)
			} else {
				open = append(open, b)
			}
		}
		bars = open
	}
	return append(full, bars...), true
}

// least returns the least width that is wanted.
func (t *task) least(demand []int64) int64 {
	for i := len(demand) - 1; i >= 0; i-- {
		if demand[i] > 0 {
			return t.widths[i]
		}
	}
	return 0
}

// put cuts up to need pieces of one width from the bars in their order, as many
// from each as it holds; it returns the bars and the pieces still wanted. Equal
// bars that no longer are get apart.
func put(bars []batch, width int, w, need int64) ([]batch, int64) {
	var out []batch
	for _, b := range bars {
		each := b.left / w
		if each == 0 || need == 0 {
			out = append(out, b)
			continue
		}
		full := min(b.bars, need/each)
		if full > 0 {
			out = append(out, b.with(width, w, each, full))
			need -= each * full
		}
		if full < b.bars && need > 0 {
			out = append(out, b.with(width, w, need, 1))
			need, full = 0, full+1
		}
		if b.bars -= full; b.bars > 0 {
			out = append(out, b)
		}
	}
	return out, need
}

// with returns that many of the bars with pieces more.
func (b batch) with(width int, w, pieces, bars int64) batch {
	b.bars = bars
	b.left -= w * pieces
	b.cuts = append(slices.Clip(b.cuts), cut{width, pieces})
	return b
}

// gather changes each bar for the cheapest that holds its pieces and counts
// equal bars, in the order of their first.
func (t *task) gather(bars []batch, available []int64) []use {
	left := slices.Clone(available)
	for _, b := range bars {
		take(left, b.stock, b.bars)
	}
	at := map[string]int{}
	var uses []use
	for _, b := range bars {
		width := t.capacity[b.stock] - b.left
		take(left, b.stock, -b.bars)
		for b.bars > 0 {
			u := b.use
			u.stock = t.cheapest(width, left)
			if n := left[u.stock]; n != unlimited {
				u.bars = min(u.bars, n)
			}
			take(left, u.stock, u.bars)
			b.bars -= u.bars
			k := u.key()
			if i, seen := at[k]; seen {
				uses[i].bars += u.bars
				continue
			}
			at[k] = len(uses)
			uses = append(uses, u)
		}
	}
	return uses
}
