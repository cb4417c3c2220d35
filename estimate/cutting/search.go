package cutting

import (
	"cmp"
	"math"
	"slices"
)

// search makes whole bars from relaxations: it fixes the whole part of a
// relaxation, then one more bar, relaxes what remains, and so on down, with the
// best plan of first fit at each stage. Where that does not reach the bound, it
// starts again with more and more freedom to pass over the likeliest bar
// (limited discrepancy search, Harvey and Ginsberg, IJCAI 1995), and when that
// is used up fixes less of the whole part.
type search struct {
	*generator
	best   []use
	value  int64 // of the best, math.MaxInt64 where there is none
	target int64 // no plan is below it
	nodes  int
	limit  int
	passed bool  // something was left out for want of freedom
	hold   int64 // bars held back from each whole part
}

// node is a part of a plan: what is still wanted, what bars are left.
type node struct {
	demand, left []int64
	value        int64
	uses         []use
}

func (n node) clone() node {
	return node{slices.Clone(n.demand), slices.Clone(n.left), n.value, slices.Clip(n.uses)}
}

// run searches until the target or a limit is reached. Once nothing more is left
// out for want of freedom, it holds back one more bar of each whole part.
func (s *search) run(root relaxation) {
	var most int64
	for _, x := range root.amounts {
		most = max(most, whole(x))
	}
	for ; s.hold <= most && !s.over(); s.hold++ {
		s.passed = true
		for spare := 0; s.passed && !s.over(); spare++ {
			s.passed = false
			s.explore(node{s.demand, s.available, 0, nil}, &root, spare)
		}
	}
}

// whole returns the whole bars of an amount.
func whole(amount float64) int64 { return int64(amount + 1e-6) }

func (s *search) over() bool {
	return s.value <= s.target || s.nodes >= s.limit || s.spent()
}

// explore completes the node; spare is how often the likeliest may be passed over.
func (s *search) explore(n node, known *relaxation, spare int) {
	if s.over() {
		return
	}
	s.nodes++
	r := known
	if r == nil {
		fresh := s.relax(n.demand, n.left)
		r = &fresh
	}
	if r.missing > 1e-6 || n.value+s.raise(r.price) >= s.value && r.complete {
		return
	}
	n, free := s.settle(n, r)
	s.complete(n)
	if done(n.demand) {
		return
	}
	for k, c := range free {
		if k > spare || s.over() {
			s.passed = true
			return
		}
		child := n.clone()
		if s.fix(&child, c, 1) {
			s.explore(child, nil, spare-k)
		}
	}
}

// raise rounds a price up to the next step of the objective.
func (s *search) raise(price float64) int64 {
	step := float64(s.step)
	return int64(math.Ceil(price/step-1e-6)) * s.step
}

// settle fixes the whole part of a relaxation, less what is held back, and
// returns the columns to go on with, the likeliest first: those with bars held
// back, then by their fractions. Where there are no fractions all is fixed.
func (s *search) settle(n node, r *relaxation) (node, []column) {
	type part struct {
		column
		share float64
	}
	n = n.clone()
	var parts []part
	hold := int64(0)
	for _, x := range r.amounts {
		if x-float64(whole(x)) > 1e-5 {
			hold = s.hold
		}
	}
	for i, x := range r.amounts {
		fixed := max(0, whole(x)-hold)
		s.fix(&n, r.columns[i], fixed)
		if rest := x - float64(fixed); rest > 1e-5 {
			parts = append(parts, part{r.columns[i], math.Min(1, rest)})
		}
	}
	slices.SortStableFunc(parts, func(a, b part) int { return cmp.Compare(b.share, a.share) })
	free := make([]column, len(parts))
	for i, p := range parts {
		free[i] = p.column
	}
	return n, free
}

// fix adds up to n bars of a column to the node, without the pieces that are no
// longer wanted. A bar with fewer pieces, or of which none is left, becomes the
// cheapest that holds them.
func (s *search) fix(n *node, c column, bars int64) (some bool) {
	for bars > 0 {
		full := bars
		part := column{stock: c.stock}
		for _, x := range c.cuts {
			if k := min(x.count, n.demand[x.width]); k > 0 {
				part.cuts = append(part.cuts, cut{x.width, k})
				full = min(full, n.demand[x.width]/k)
			}
		}
		if s.width(part.cuts) < s.width(c.cuts) || n.left[c.stock] == 0 {
			part.stock = s.cheapest(s.width(part.cuts), n.left)
		}
		if len(part.cuts) == 0 || part.stock < 0 {
			return some
		}
		if left := n.left[part.stock]; left != unlimited {
			full = min(full, left)
		}
		for _, x := range part.cuts {
			n.demand[x.width] -= x.count * full
		}
		take(n.left, part.stock, full)
		n.value += s.task.price[part.stock] * full
		n.uses = append(n.uses, use{part, full})
		bars -= full
		some = true
	}
	return some
}

// complete finishes the node by first fit and keeps the plan if it is better.
func (s *search) complete(n node) {
	rest, ok := s.firstFit(n.demand, n.left)
	s.steps += int64(len(s.widths) * (len(rest) + 1) * len(s.capacity))
	if !ok {
		return
	}
	uses := s.exchange(append(slices.Clone(n.uses), rest...))
	if value := s.total(uses); value < s.value {
		s.value, s.best = value, uses
	}
}

// exchange changes each bar for the cheapest that holds its pieces.
func (s *search) exchange(uses []use) []use {
	bars := make([]batch, len(uses))
	for i, u := range uses {
		bars[i] = batch{u, s.capacity[u.stock] - s.width(u.cuts)}
	}
	return s.gather(bars, s.available)
}

func done(demand []int64) bool {
	return !slices.ContainsFunc(demand, func(d int64) bool { return d > 0 })
}
