package cutting

import (
	"cmp"
	"math/bits"
	"slices"
)

// item is one width that a bar may hold.
type item struct {
	width int   // index into the task's widths
	w     int64 // 0.1 mm
	value int64 // above 0
	most  int64 // pieces at the most
}

// denser orders items by decreasing value per width, exactly.
func denser(a, b item) int {
	ah, al := bits.Mul64(uint64(a.value), uint64(b.w))
	bh, bl := bits.Mul64(uint64(b.value), uint64(a.w))
	if c := cmp.Compare(bh, ah); c != 0 {
		return c
	}
	if c := cmp.Compare(bl, al); c != 0 {
		return c
	}
	return cmp.Compare(a.width, b.width)
}

// knapsack looks for the most valuable pieces that a bar holds, in whole numbers:
// depth first by decreasing density, cut off by the bound of the fractional
// knapsack. The values must be such that no bar's worth exceeds 2^62.
type knapsack struct {
	items  []item // by denser
	slim   []int64
	counts []int64
	best   []int64 // counts of the best found
	value  int64   // of the best found, at first the value to beat
	upper  int64   // no bar is worth more than the greater of value and upper
	steps  int64
	limit  int64
	stop   func() bool // asked every few thousand steps
	halted bool
}

// newKnapsack returns a search over the items that fit into the room and beat
// the value; limit is the number of steps after which it only bounds.
func newKnapsack(items []item, room, beat, limit int64, stop func() bool) *knapsack {
	k := &knapsack{value: beat, limit: limit, stop: stop}
	for _, x := range items {
		if x.w <= room {
			k.items = append(k.items, x)
		}
	}
	k.counts = make([]int64, len(k.items))
	k.slim = make([]int64, len(k.items))
	for i := len(k.items) - 1; i >= 0; i-- {
		k.slim[i] = k.items[i].w
		if i+1 < len(k.items) {
			k.slim[i] = min(k.slim[i], k.slim[i+1])
		}
	}
	return k
}

// run searches; found is false where nothing beats the value.
func (k *knapsack) run(room int64) (found bool) {
	k.visit(0, room, 0)
	return k.best != nil
}

// cuts returns the best found.
func (k *knapsack) cuts() []cut {
	var out []cut
	for i, n := range k.best {
		if n > 0 {
			out = append(out, cut{k.items[i].width, n})
		}
	}
	slices.SortFunc(out, func(a, b cut) int { return cmp.Compare(a.width, b.width) })
	return out
}

// bound returns what the items from i on could add in the room if the last of
// them could be cut anywhere, rounded down.
func (k *knapsack) bound(i int, room int64) int64 {
	var sum int64
	for ; i < len(k.items); i++ {
		x := &k.items[i]
		if x.most*x.w > room {
			h, l := bits.Mul64(uint64(x.value), uint64(room))
			q, _ := bits.Div64(h, l, uint64(x.w))
			return sum + int64(q)
		}
		sum += x.most * x.value
		room -= x.most * x.w
	}
	return sum
}

// visit decides the items from i on.
func (k *knapsack) visit(i int, room, value int64) {
	k.steps++
	if value > k.value {
		k.value = value
		k.best = append(k.best[:0], k.counts...)
	}
	if i == len(k.items) || room < k.slim[i] {
		return
	}
	if k.steps&8191 == 0 && k.stop() {
		k.halted = true
	}
	if k.halted || k.steps > k.limit {
		k.upper = max(k.upper, value+k.bound(i, room))
		return
	}
	x := k.items[i]
	for n := min(x.most, room/x.w); n >= 0; n-- {
		rest, worth := room-n*x.w, value+n*x.value
		if worth+k.bound(i+1, rest) <= k.value {
			break // fewer of the densest are worth no more
		}
		k.counts[i] = n
		k.visit(i+1, rest, worth)
	}
	k.counts[i] = 0
}
