// Package trace answers “why” for every figure of a stored estimate: by what
// formula, of which figures, on whose word.
//
//	Document → New: indexes by figure, line, item, member, register entry
//	figure id → one draft: what it is, its arithmetic, and what it is made of
//	drafts → Tree, breadth first within limits of depth and nodes
//	Node → Text (terminal), JSON (answer)
//
// Only the document is read: nothing is sized, priced or drawn again. The leaves
// of a tree are of three kinds: an input, an assumption, a constant of a cited
// clause. The arithmetic of sums and products is recomputed exactly from the
// numbers shown; where it does not give the value shown a note says so.
package trace
