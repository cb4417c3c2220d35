package cutting

import (
	"cmp"
	"slices"
)

// Plan is a cutting plan with what is known of its quality.
type Plan struct {
	Method    string     `json:"method"`
	Objective Objective  `json:"objective"`
	Patterns  []Pattern  `json:"patterns"` // longest stock first
	Bars      []BarCount `json:"bars"`     // in the order of Problem.Stock, those not used left out

	Pieces      int64 `json:"pieces"`      // number of pieces
	StockLength int64 `json:"stockLength"` // 0.1 mm, of all bars = Used + KerfLoss + Offcuts
	Used        int64 `json:"used"`        // 0.1 mm in pieces
	// 0.1 mm cut away: one kerf between two pieces and one, or what there is of
	// it, between the last piece and the offcut.
	KerfLoss int64   `json:"kerfLoss"`
	Offcuts  int64   `json:"offcuts"` // 0.1 mm
	Yield    float64 `json:"yield"`   // Used / StockLength

	// Value, Bound and Gap are in units of the objective: 0.1 mm, bars or minor
	// units. No plan is below Bound, which is the exact bound raised to the next
	// sum that bar prices can make; Gap is Value − Bound; Proven says that Gap is
	// 0, so that no plan is better.
	Value  int64 `json:"value"`
	Bound  int64 `json:"bound"`
	Gap    int64 `json:"gap"`
	Proven bool  `json:"proven"`

	Certificate *Certificate `json:"certificate,omitempty"` // of Optimise
	Hint        *Hint        `json:"hint,omitempty"`
}

// Pattern is a number of bars that are cut alike.
type Pattern struct {
	Stock  int   `json:"stock"`  // index into Problem.Stock
	Length int64 `json:"length"` // 0.1 mm, of the bar
	Cuts   []Cut `json:"cuts"`   // longest first
	Bars   int64 `json:"bars"`
	Offcut int64 `json:"offcut"` // 0.1 mm left of each bar after its last cut
}

// Cut is a number of equal pieces in one bar.
type Cut struct {
	Mark   string `json:"mark"`
	Length int64  `json:"length"` // 0.1 mm
	Count  int64  `json:"count"`
}

// BarCount is a number of bars of one stock.
type BarCount struct {
	Stock  int   `json:"stock"`  // index into Problem.Stock
	Length int64 `json:"length"` // 0.1 mm
	Bars   int64 `json:"bars"`
}

// share is what one mark still wants of a length.
type share struct {
	mark string
	left int64
}

// plan hands the cuts of a task out to the marks and adds up.
func (p Problem) plan(t *task, uses []use, bound int64, method string, c *Certificate) Plan {
	out := Plan{Method: method, Objective: p.objective(), Value: t.total(uses), Bound: bound, Certificate: c}
	out.Gap = out.Value - out.Bound
	out.Proven = out.Gap == 0
	shares := p.shares(t)
	for _, u := range uses {
		for u.bars > 0 {
			pattern := p.handOut(t, u, shares)
			u.bars -= pattern.Bars
			out.Patterns = append(out.Patterns, pattern)
		}
	}
	slices.SortStableFunc(out.Patterns, func(a, b Pattern) int {
		return cmp.Or(cmp.Compare(b.Length, a.Length), cmp.Compare(a.Stock, b.Stock), cmp.Compare(a.Offcut, b.Offcut))
	})
	out.add(p)
	return out
}

// shares lists by width which marks want it, in the order of their rows.
func (p Problem) shares(t *task) [][]share {
	at := map[int64]int{}
	for i, w := range t.widths {
		at[w] = i
	}
	out := make([][]share, len(t.widths))
	for _, x := range p.Pieces {
		i := at[x.Length+p.Kerf]
		out[i] = append(out[i], share{x.Mark, int64(x.Count)})
	}
	return out
}

// handOut takes the cuts of as many bars as get the same marks from the shares.
func (p Problem) handOut(t *task, u use, shares [][]share) Pattern {
	out := Pattern{Stock: u.stock, Length: p.Stock[u.stock].Length, Bars: u.bars}
	rest := t.capacity[u.stock] - t.width(u.cuts)
	out.Offcut = max(0, rest-p.Kerf)
	for _, x := range u.cuts {
		queue := shares[x.width]
		for need := x.count; need > 0; queue = queue[1:] {
			n := min(need, queue[0].left)
			out.Cuts = append(out.Cuts, Cut{queue[0].mark, t.widths[x.width] - p.Kerf, n})
			out.Bars = min(out.Bars, queue[0].left/n) // 1 where the mark changes within the bar
			need -= n
		}
	}
	for _, x := range u.cuts {
		need := x.count * out.Bars
		for need > 0 {
			n := min(need, shares[x.width][0].left)
			shares[x.width][0].left -= n
			need -= n
			if shares[x.width][0].left == 0 {
				shares[x.width] = shares[x.width][1:]
			}
		}
	}
	return out
}

// add sums up the patterns.
func (p *Plan) add(q Problem) {
	bars := make([]int64, len(q.Stock))
	for _, x := range p.Patterns {
		var pieces, used int64
		for _, c := range x.Cuts {
			pieces += c.Count
			used += c.Count * c.Length
		}
		bars[x.Stock] += x.Bars
		p.Pieces += pieces * x.Bars
		p.StockLength += x.Length * x.Bars
		p.Used += used * x.Bars
		p.Offcuts += x.Offcut * x.Bars
		p.KerfLoss += (x.Length - used - x.Offcut) * x.Bars
	}
	for s, n := range bars {
		if n > 0 {
			p.Bars = append(p.Bars, BarCount{s, q.Stock[s].Length, n})
		}
	}
	p.Yield = float64(p.Used) / float64(p.StockLength)
}
