package cutting

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"strings"
)

// Hint is a small change of one length that makes the plan cheaper.
type Hint struct {
	Marks   []string `json:"marks"`   // the pieces of that length
	Length  int64    `json:"length"`  // 0.1 mm, as asked for
	Shorter int64    `json:"shorter"` // 0.1 mm off each of them
	Saves   int64    `json:"saves"`   // units of the objective, at the least
	Text    string   `json:"text"`    // 2.5 mm less on B1 would save 36 m
}

// Work allowed for a hint: the lengths that take most of the stock are tried.
const (
	hintLengths = 30
	hintSteps   = 600_000 // of each variant
	hintNodes   = 12
)

// shorten looks for the length whose shortening by at most far (0.1 mm) saves
// most, and for the least shortening that saves as much; where two save as much,
// the one with the lesser shortening. A saving is counted from
// the plan's bound, so that it is real also where the plan is not proven. It
// returns nil where nothing is saved.
func shorten(ctx context.Context, p Problem, plan Plan, far int64) (*Hint, error) {
	h := hinter{ctx, p, plan.Bound}
	var best *Hint
	for _, length := range h.lengths() {
		reach := min(far, length-MinLength)
		saves := h.saves(length, reach)
		if saves <= 0 || best != nil && saves < best.Saves {
			continue
		}
		if best != nil && saves == best.Saves {
			reach = min(reach, best.Shorter-1)
			if h.saves(length, reach) < saves {
				continue
			}
		}
		low, high := int64(0), reach // saves less at low, as much at high
		for high-low > 1 {
			mid := (low + high) / 2
			if h.saves(length, mid) >= saves {
				high = mid
			} else {
				low = mid
			}
		}
		best = &Hint{Marks: p.marks(length), Length: length, Shorter: high, Saves: saves}
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	if best != nil {
		best.Text = fmt.Sprintf("%s less on %s would save %s", millimetres(best.Shorter), some(best.Marks), p.amount(best.Saves))
	}
	return best, nil
}

// marks returns the marks of a length in the order of their rows.
func (p Problem) marks(length int64) []string {
	var out []string
	for _, x := range p.Pieces {
		if x.Length == length {
			out = append(out, x.Mark)
		}
	}
	return out
}

// some lists marks, the first three where there are many.
func some(marks []string) string {
	if n := len(marks); n > 4 {
		return fmt.Sprintf("%s and %d more", strings.Join(marks[:3], ", "), n-3)
	}
	return strings.Join(marks, ", ")
}

// hinter solves variants of one problem.
type hinter struct {
	ctx   context.Context
	p     Problem
	bound int64
}

// lengths returns the lengths that take most of the stock, at most hintLengths.
func (h hinter) lengths() []int64 {
	total := map[int64]int64{}
	var out []int64
	for _, x := range h.p.Pieces {
		if total[x.Length] == 0 {
			out = append(out, x.Length)
		}
		total[x.Length] += x.Length * int64(x.Count)
	}
	slices.SortStableFunc(out, func(a, b int64) int { return cmp.Or(cmp.Compare(total[b], total[a]), cmp.Compare(b, a)) })
	return out[:min(len(out), hintLengths)]
}

// saves returns what is certainly saved when all pieces of a length are shorter
// by so much.
func (h hinter) saves(length, shorter int64) int64 {
	if shorter <= 0 || h.ctx.Err() != nil {
		return 0
	}
	q := h.p
	q.Pieces = slices.Clone(h.p.Pieces)
	for i := range q.Pieces {
		if q.Pieces[i].Length == length {
			q.Pieces[i].Length -= shorter
		}
	}
	o := newTask(q).optimise(Limits{Steps: hintSteps, Nodes: hintNodes}, func() bool { return h.ctx.Err() != nil })
	if o.uses == nil {
		return 0
	}
	return h.bound - o.value
}

// amount prints a value of the objective.
func (p Problem) amount(v int64) string {
	switch {
	case p.objective() == LeastLength:
		return metres(v)
	case p.objective() == LeastCost:
		return fmt.Sprintf("%d minor units", v)
	case v == 1:
		return "1 bar"
	default:
		return fmt.Sprintf("%d bars", v)
	}
}
