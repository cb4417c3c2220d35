package cutting

import (
	"context"
	"math"
	"math/big"
	"slices"
)

// Limits bound the work of Optimise; 0 takes the default.
type Limits struct {
	Steps     int64 `json:"steps,omitempty"`     // counted steps of work, some 10 ns each; default 10 million
	Nodes     int   `json:"nodes,omitempty"`     // relaxations on the way to whole bars; default 600
	HintRange int64 `json:"hintRange,omitempty"` // 0.1 mm by which the hint may shorten a piece; 0 = no hint
}

// Optimise makes a plan by column generation: it relaxes the problem to
// fractions of bars, proves a bound from the values of the pieces, and makes
// whole bars of the relaxation (see search). The plan is never worse than that
// of FirstFit. The bound is the greatest of that of the values (Certificate), of
// what the number of bars costs at least, bounded likewise, and those of FirstFit.
// All are exact: Proven is true only where the bound equals the objective. Limits that run out leave a valid plan with a valid bound.
//
// The error is Faults for a bad problem, also where the bars available did not
// suffice, or that of the context.
func Optimise(ctx context.Context, p Problem, l Limits) (Plan, error) {
	if err := p.Validate(); err != nil {
		return Plan{}, err
	}
	if err := ctx.Err(); err != nil {
		return Plan{}, err
	}
	t := newTask(p)
	o := t.optimise(l, func() bool { return ctx.Err() != nil })
	if err := ctx.Err(); err != nil {
		return Plan{}, err
	}
	if o.uses == nil {
		return Plan{}, shortage(o.failure)
	}
	plan := p.plan(t, o.uses, o.bound, "column generation", t.certificate(o.values, p.Kerf))
	if l.HintRange > 0 {
		hint, err := shorten(ctx, p, plan, l.HintRange)
		if err != nil {
			return Plan{}, err
		}
		plan.Hint = hint
	}
	return plan, nil
}

// outcome is what optimising found.
type outcome struct {
	uses    []use // nil where no plan was found
	value   int64
	bound   int64
	values  exactValues
	failure string
}

func (t *task) optimise(l Limits, stop func() bool) outcome {
	steps, nodes := l.Steps, l.Nodes
	if steps <= 0 {
		steps = 10_000_000
	}
	if nodes <= 0 {
		nodes = 600
	}
	g := newGenerator(t, steps, stop)
	s := &search{generator: g, value: math.MaxInt64, limit: nodes}
	if uses, ok := t.firstFit(t.demand, t.available); ok {
		s.best, s.value = uses, t.total(uses)
		for _, u := range uses {
			g.add(u.column)
		}
	}
	g.limit = steps / 2 // the other half is for whole bars
	root := g.relax(t.demand, t.available)
	g.limit = steps
	out := outcome{values: g.exactValues(root.values, t.demand)}
	bound := t.exactBound(out.values, boundLimit, stop)
	if simple := t.simpleBound(); simple.Cmp(bound) > 0 {
		bound = simple
	}
	s.target = t.reach(bound, s.value)
	if s.target < s.value {
		t.fewest = g.fewestBars()
		s.target = t.reach(bound, s.value)
	}
	s.run(root)
	out.uses, out.value = s.best, s.value
	if out.uses == nil {
		out.failure = t.failure(bound)
		return out
	}
	out.bound = t.reach(bound, s.value)
	return out
}

// fewestBars returns the exact bound of the number of bars. With several stock
// lengths it can say more of the objective than the objective's own bound does,
// as with bars of 12 and 12.1 m, 47 of which cost at least 47 × 12.
func (g *generator) fewestBars() int64 {
	if slices.Min(g.price) == slices.Max(g.price) {
		return 0
	}
	t := *g.task
	t.step, t.price = 1, make([]int64, len(g.price))
	for s := range t.price {
		t.price[s] = 1
	}
	n := newGenerator(&t, g.limit/4, g.stop)
	for _, c := range g.pool {
		n.add(c)
	}
	r := n.relax(t.demand, t.available)
	g.steps += n.steps
	return ceiling(t.exactBound(n.exactValues(r.values, t.demand), boundLimit, g.stop))
}

// failure says whether the bound proves that there are too few bars.
func (t *task) failure(bound *big.Rat) string {
	var all int64
	for s, n := range t.available {
		if n == unlimited {
			return "no plan was found with the bars available within the limits of work"
		}
		all += n * t.price[s]
	}
	if bound.Cmp(new(big.Rat).SetInt64(all)) > 0 {
		return "the bars available cannot hold the pieces (proven)"
	}
	return "no plan was found with the bars available within the limits of work"
}
