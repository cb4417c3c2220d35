package pricing

import "slices"

// pool holds sorted lists of small numbers, each once, so that what thousands of
// lines share (the factors of a product, the entries that a figure depends on) is
// made, joined and compared once. List 0 is the empty one.
type pool struct {
	unique bool // a number stands in a list once
	index  map[string]int32
	lists  [][]int32
	joins  map[[2]int32]int32
	list   []int32 // storage
	key    []byte
}

func newPool(unique bool) *pool {
	return &pool{unique: unique, index: map[string]int32{"": 0}, lists: [][]int32{nil}, joins: map[[2]int32]int32{}}
}

// of returns the list of the numbers, in any order.
func (p *pool) of(numbers ...int32) int32 {
	p.list = append(p.list[:0], numbers...)
	return p.intern()
}

// join returns the list of the numbers of both.
func (p *pool) join(a, b int32) int32 {
	if a == 0 || b == 0 {
		return a + b
	}
	pair := [2]int32{min(a, b), max(a, b)}
	if known, ok := p.joins[pair]; ok {
		return known
	}
	p.list = append(append(p.list[:0], p.lists[a]...), p.lists[b]...)
	joined := p.intern()
	p.joins[pair] = joined
	return joined
}

// intern returns the list of the numbers in p.list.
func (p *pool) intern() int32 {
	slices.Sort(p.list)
	if p.unique {
		p.list = slices.Compact(p.list)
	}
	p.key = p.key[:0]
	for _, n := range p.list {
		p.key = append(p.key, byte(n), byte(n>>8), byte(n>>16), byte(n>>24))
	}
	if known, ok := p.index[string(p.key)]; ok {
		return known
	}
	made := int32(len(p.lists))
	p.lists = append(p.lists, slices.Clone(p.list))
	p.index[string(p.key)] = made
	return made
}

// names numbers texts in the order in which they are first seen.
type names struct {
	number map[string]int32
	texts  []string
}

func (n *names) of(text string) int32 {
	if known, ok := n.number[text]; ok {
		return known
	}
	if n.number == nil {
		n.number = map[string]int32{}
	}
	made := int32(len(n.texts))
	n.texts = append(n.texts, text)
	n.number[text] = made
	return made
}
