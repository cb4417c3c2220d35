package cutting

import (
	"math"
	"slices"
)

// penalty is the price of a piece from nowhere, in the dearest bar's.
const penalty = 1000

// relaxation is the least price when bars can be cut in fractions.
type relaxation struct {
	price    float64 // in units of the objective
	columns  []column
	amounts  []float64 // bars of each column
	missing  float64   // pieces for which there are no bars
	values   []float64 // of a piece of each width, in the dearest bar's price
	complete bool      // no column was found missing that would lower the price
}

// generator makes relaxations of one task with a growing pool of columns.
type generator struct {
	*task
	dearest float64
	pool    []column
	known   map[string]int // index into the pool by key
	steps   int64          // work done, in steps of a knapsack
	limit   int64
	stop    func() bool
}

// knapsackLimit bounds one search for a column.
const knapsackLimit = 400_000

func newGenerator(t *task, limit int64, stop func() bool) *generator {
	g := &generator{task: t, dearest: float64(slices.Max(t.price)), known: map[string]int{}, limit: limit, stop: stop}
	for i, w := range t.widths {
		for s, room := range t.capacity {
			if n := min(room/w, t.demand[i]); n > 0 {
				g.add(column{s, []cut{{i, n}}})
			}
		}
	}
	return g
}

// add puts a column into the pool; false where it is there already.
func (g *generator) add(c column) bool {
	k := c.key()
	if _, there := g.known[k]; there {
		return false
	}
	g.known[k] = len(g.pool)
	g.pool = append(g.pool, c)
	return true
}

// spent says whether the work allowed is done.
func (g *generator) spent() bool { return g.steps > g.limit || g.stop() }

// program is the linear program of one demand.
type program struct {
	*generator
	*simplex
	demand, available []int64
	pieceRow          []int // by width, -1 where none is wanted
	stockRow          []int // by stock, -1 where it is not limited
	entries           []entry
}

// newProgram sets up rows and the columns of the pool that fit the demand.
func (g *generator) newProgram(demand, available []int64) *program {
	p := &program{generator: g, demand: demand, available: available}
	var right []float64
	var basis []entry
	row := func(b int64, e entry) int {
		n := len(right)
		e.rows = []int{n}
		right, basis = append(right, float64(b)), append(basis, e)
		return n
	}
	for i, d := range demand {
		at := -1
		if d > 0 {
			at = row(d, p.single(i))
			p.entries = append(p.entries, entry{rows: []int{at}, coefs: []float64{-1}, use: surplus})
		}
		p.pieceRow = append(p.pieceRow, at)
	}
	for _, n := range available {
		at := -1
		if n > 0 {
			at = row(n, entry{coefs: []float64{1}, use: slack})
			p.entries = append(p.entries, entry{rows: []int{at}, coefs: []float64{1}, use: slack})
		}
		p.stockRow = append(p.stockRow, at)
	}
	for i := range g.pool {
		p.admit(i)
	}
	p.simplex = newSimplex(right, basis)
	return p
}

// single returns the cheapest entry for one width alone: bars without limit that
// hold nothing else, or a piece from nowhere.
func (p *program) single(width int) entry {
	best := entry{price: penalty, coefs: []float64{1}, use: artificial}
	for s, room := range p.capacity {
		n := min(room/p.widths[width], p.demand[width])
		if n == 0 || p.available[s] != unlimited {
			continue
		}
		price := float64(p.task.price[s]) / p.dearest
		if float64(price*best.coefs[0]) < float64(best.price*float64(n)) {
			c := column{s, []cut{{width, n}}}
			p.add(c)
			best = entry{price: price, coefs: []float64{float64(n)}, use: p.known[c.key()]}
		}
	}
	return best
}

// admit adds a column of the pool where the demand can use all of its pieces.
func (p *program) admit(i int) bool {
	c := p.pool[i]
	if p.available[c.stock] == 0 {
		return false
	}
	e := entry{price: float64(p.task.price[c.stock]) / p.dearest, use: i}
	for _, x := range c.cuts {
		if x.count > p.demand[x.width] {
			return false
		}
		e.rows, e.coefs = append(e.rows, p.pieceRow[x.width]), append(e.coefs, float64(x.count))
	}
	if at := p.stockRow[c.stock]; at >= 0 {
		e.rows, e.coefs = append(e.rows, at), append(e.coefs, 1)
	}
	p.entries = append(p.entries, e)
	return true
}

// relax solves the relaxation for a demand by column generation (Gilmore and
// Gomory, Operations Research 9, 1961).
func (g *generator) relax(demand, available []int64) relaxation {
	p := g.newProgram(demand, available)
	complete := false
	for !g.spent() {
		g.steps += int64(p.n*p.n/8+len(p.entries)/2) + 1
		if at := p.cheapestEntry(); at >= 0 {
			if p.enter(p.entries[at]) {
				continue
			}
			break
		}
		if !p.generate() {
			complete = true
			break
		}
	}
	return p.result(complete && !g.spent())
}

// cheapestEntry returns the entry of least reduced price, -1 where none is below 0.
func (p *program) cheapestEntry() int {
	at, least := -1, -tolerance
	for i := range p.entries {
		if r := p.reduced(&p.entries[i]); r < least {
			at, least = i, r
		}
	}
	return at
}

// generate adds the columns, one for each stock, that most lower the price.
func (p *program) generate() bool {
	v := p.exactValues(p.pieceValues(), p.demand)
	added := false
	for s, room := range p.capacity {
		if p.available[s] == 0 {
			continue
		}
		beat := float64(p.task.price[s])/p.dearest + tolerance
		if at := p.stockRow[s]; at >= 0 {
			beat -= p.duals[at]
		}
		worth := int64(math.Min(beat*p.dearest*float64(v.denominator), 1<<61))
		k := newKnapsack(v.items, room, worth, knapsackLimit, p.stop)
		found := k.run(room)
		p.steps += k.steps
		if found && p.add(column{s, k.cuts()}) {
			added = p.admit(len(p.pool)-1) || added
		}
	}
	return added
}

// pieceValues returns the dual of each width, 0 where none is wanted or the dual
// is no sound number. Any values prove a bound; these prove the best.
func (p *program) pieceValues() []float64 {
	out := make([]float64, len(p.widths))
	for i, at := range p.pieceRow {
		if at >= 0 && 0 < p.duals[at] && p.duals[at] <= 1e6*penalty {
			out[i] = p.duals[at]
		}
	}
	return out
}

// result reads the solution.
func (p *program) result(complete bool) relaxation {
	r := relaxation{values: p.pieceValues(), complete: complete}
	for i, e := range p.basis {
		x := math.Max(0, p.x[i])
		switch {
		case e.use == artificial:
			r.missing += x
		case e.use >= 0:
			r.columns, r.amounts = append(r.columns, p.pool[e.use]), append(r.amounts, x)
			r.price += float64(x * float64(p.task.price[p.pool[e.use].stock]))
		}
	}
	return r
}
