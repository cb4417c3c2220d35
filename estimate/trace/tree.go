package trace

import "spanwright/estimate/document"

// MostNodes is how many nodes a tree has unless asked otherwise.
const MostNodes = 2000

// mostNext is how many ids a node names of the children left out.
const mostNext = 12

// Limits bound a tree. A zero stands for no limit.
type Limits struct {
	Depth int // levels below the figure asked for
	Nodes int // children of one node that do not fit are left out and counted
}

// draft is a node whose children are made when they are needed.
type draft struct {
	Node
	kids []kid
}

// kid is a child to be made. Of kids with the same figure id the tree explains the
// first alone.
type kid struct {
	figure string
	make   func() draft
}

// branch is a draft in its place in the tree.
type branch struct {
	draft
	depth int
	below []*branch
}

// Build returns the tree of one figure of a document to a depth, 0 or less for the whole
// tree, in MostNodes nodes at the most. An unknown figure is an *UnknownError.
func Build(d document.Document, figure string, depth int) (Node, error) {
	return New(d).Tree(figure, Limits{Depth: depth, Nodes: MostNodes})
}

// Tree returns the tree of one figure. It grows breadth first, so that a limit on
// nodes leaves the upper levels whole; a figure that occurs several times is
// explained once, where it stands highest. An unknown figure is an *UnknownError.
func (t *Tracer) Tree(figure string, l Limits) (Node, error) {
	first, ok := t.resolve(figure)
	if !ok {
		return Node{}, t.unknown(figure)
	}
	root := &branch{draft: first}
	seen := map[string]bool{first.Figure: true}
	count := 1
	for queue := []*branch{root}; len(queue) > 0; queue = queue[1:] {
		b := queue[0]
		for i, k := range b.kids {
			if l.Depth > 0 && b.depth >= l.Depth || l.Nodes > 0 && count >= l.Nodes {
				b.cut(b.kids[i:])
				break
			}
			child := &branch{draft: k.make(), depth: b.depth + 1}
			count++
			b.below = append(b.below, child)
			if id := child.Figure; id != "" && len(child.kids) > 0 {
				if seen[id] {
					child.Repeated, child.kids = true, nil
					continue
				}
				seen[id] = true
			}
			queue = append(queue, child)
		}
	}
	return root.node(), nil
}

// cut leaves children out and says which figures can be asked for.
func (b *branch) cut(kids []kid) {
	b.Cut = len(kids)
	for _, k := range kids {
		if k.figure != "" && len(b.Next) < mostNext {
			b.Next = append(b.Next, k.figure)
		}
	}
}

func (b *branch) node() Node {
	n := b.Node
	for _, c := range b.below {
		n.Children = append(n.Children, c.node())
	}
	return n
}
