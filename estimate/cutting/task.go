package cutting

import (
	"cmp"
	"slices"
	"strconv"
)

// unlimited marks a stock length of which there are as many bars as wanted.
const unlimited = -1

// task is a problem as the methods see it: distinct widths, capacities, prices.
type task struct {
	widths    []int64 // length + kerf, 0.1 mm, decreasing
	demand    []int64 // pieces of each width
	capacity  []int64 // stock length + kerf, by stock
	price     []int64 // of a bar in units of the objective, by stock
	available []int64 // bars, or unlimited, by stock
	step      int64   // divides every price, so every objective
	fewest    int64   // bars that every plan has at least, 0 where not known
}

// newTask reduces a valid problem.
func newTask(p Problem) *task {
	t := &task{}
	count := map[int64]int64{}
	for _, x := range p.Pieces {
		count[x.Length+p.Kerf] += int64(x.Count)
	}
	for w := range count {
		t.widths = append(t.widths, w)
	}
	slices.SortFunc(t.widths, func(a, b int64) int { return cmp.Compare(b, a) })
	for _, w := range t.widths {
		t.demand = append(t.demand, count[w])
	}
	for _, s := range p.Stock {
		left := int64(s.Available)
		if left == 0 {
			left = unlimited
		}
		t.capacity = append(t.capacity, s.Length+p.Kerf)
		t.price = append(t.price, p.price(s))
		t.available = append(t.available, left)
		t.step = divisor(t.step, p.price(s))
	}
	return t
}

// divisor returns the greatest common divisor.
func divisor(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// cut is a number of pieces of one width in a bar.
type cut struct {
	width int // index into the task's widths
	count int64
}

// column is one way to cut one bar.
type column struct {
	stock int
	cuts  []cut // by increasing index of width
}

// key tells equal columns.
func (c column) key() string {
	b := strconv.AppendInt(nil, int64(c.stock), 10)
	for _, x := range c.cuts {
		b = append(b, ' ')
		b = strconv.AppendInt(b, int64(x.width), 10)
		b = append(b, ':')
		b = strconv.AppendInt(b, x.count, 10)
	}
	return string(b)
}

// use is a number of bars cut in one way.
type use struct {
	column
	bars int64
}

// width returns the width that the cuts fill.
func (t *task) width(cuts []cut) int64 {
	var sum int64
	for _, c := range cuts {
		sum += t.widths[c.width] * c.count
	}
	return sum
}

// cheapest returns the stock of least price, then of least length, that holds
// the width and of which a bar is left; -1 where there is none.
func (t *task) cheapest(width int64, left []int64) int {
	best := -1
	for s, room := range t.capacity {
		if room < width || left[s] == 0 {
			continue
		}
		if best < 0 || t.price[s] < t.price[best] || t.price[s] == t.price[best] && room < t.capacity[best] {
			best = s
		}
	}
	return best
}

// take removes n bars of a stock from those left.
func take(left []int64, stock int, n int64) {
	if left[stock] != unlimited {
		left[stock] -= n
	}
}

// total returns the objective of the bars.
func (t *task) total(uses []use) int64 {
	var sum int64
	for _, u := range uses {
		sum += t.price[u.stock] * u.bars
	}
	return sum
}
