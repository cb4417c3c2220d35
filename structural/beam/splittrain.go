package beam

// cross adds the largest reactions under a train times factor: each support has
// the influence lines that its two pieces give it, over the whole member.
func (r *SplitResult) cross(b Beam, cuts []stretch, t Train, factor float64) error {
	if factor == 0 {
		return nil
	}
	var bounds []float64
	of := make([][]cubic, 2*len(r.Reactions)) // force and couple of each support
	for _, s := range cuts {
		ln, fault := newLines(s.beam(b))
		if fault != nil {
			return fault
		}
		m := ln.mesh
		for _, x := range m.x[:len(m.x)-1] {
			bounds = append(bounds, (s.from+x*(s.to-s.from))/b.Length)
		}
		for i := range of {
			of[i] = append(of[i], make([]cubic, len(m.ei))...)
		}
		for n := range m.nodes {
			if at := s.supportOf(n); m.nodes[n].support >= 0 {
				F, M := ln.reaction(n)
				copy(of[2*at][len(of[2*at])-len(F):], F)
				for p := range M {
					if holdsCouple(b, at) {
						of[2*at+1][len(of[2*at+1])-len(M)+p].add(m.length, &M[p])
					}
				}
			}
		}
	}
	bounds = append(bounds, 1)
	c := newCrossing(t, b.Length)
	c.run(bounds, of, -1, Left)
	for i := range r.Reactions {
		r.Reactions[i].F += c.most(2*i, factor)
		r.Reactions[i].M += c.most(2*i+1, factor)
	}
	return nil
}

// supportOf returns the support at node n of the piece as a member of its own.
func (s stretch) supportOf(n int) int {
	if n == 0 && s.left >= 0 {
		return s.left
	}
	return s.right
}

// holdsCouple tells whether the split method gives a support a couple.
func holdsCouple(b Beam, support int) bool {
	return len(b.Supports) == 1 || b.ordered()[support].Kind == Fixed
}

// most returns the largest value of factor times effect q.
func (c *crossing) most(q int, factor float64) float64 {
	if factor < 0 {
		return factor * c.best[q].Min.Value
	}
	return factor * c.best[q].Max.Value
}
