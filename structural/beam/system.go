package beam

import "fmt"

const (
	smallestPivot    = 1e-12 // of the scaled matrix; a mechanism's pivot is rounding
	largestCondition = 1e10  // leaves six digits of sixteen
)

// unknownsOf returns the places of the element's displacements v, θ, v, θ and,
// for held ones, their values.
func (m *mesh) unknownsOf(e int) (dofs [4]int, held [4]float64) {
	i, j := &m.nodes[e], &m.nodes[e+1]
	return [4]int{i.deflection, i.turn, j.deflection, j.left}, [4]float64{i.settled, 0, j.settled, 0}
}

// matrix returns the 4 by 4 stiffness of an element on v, θ, v, θ (down and
// clockwise +), from the stiffness of its ends against the chord.
func (e *element) matrix() [4][4]float64 {
	A, B, C := e.inverse[0], -e.inverse[1], e.inverse[2]
	l, r := (A+B)/e.length, (B+C)/e.length
	s := (l + r) / e.length
	return [4][4]float64{{s, l, -s, r}, {l, A, -l, B}, {-s, -l, s, -r}, {r, B, -r, C}}
}

// springs returns the stiffnesses of the node's support in the mesh's units.
func (m *mesh) springs(n *node) (deflection, turn float64) {
	if n.support < 0 {
		return 0, 0
	}
	s := &m.supports[n.support]
	return s.Stiffness * cube(m.length) / m.unitEI, s.RotationalStiffness * m.length / m.unitEI
}

// assemble builds and factorises the stiffness matrix.
func (m *mesh) assemble() (*band, *Fault) {
	k := new(band)
	return k, m.assembleInto(k)
}

// assembleInto is assemble in the memory of k.
func (m *mesh) assembleInto(k *band) *Fault {
	k.reset(m.unknowns)
	for i := range m.elements {
		dofs, _ := m.unknownsOf(i)
		k.addElement(dofs, m.elements[i].matrix())
	}
	for i := range m.nodes {
		n := &m.nodes[i]
		down, turn := m.springs(n)
		if down > 0 {
			k.add(n.deflection, n.deflection, down)
		}
		if turn > 0 {
			k.add(n.turn, n.turn, turn)
		}
	}
	return m.factorise(k)
}

// factorise factorises k, refuses a mechanism and what is too badly
// conditioned to trust.
func (m *mesh) factorise(k *band) *Fault {
	norm := k.equilibrate()
	if !finite(norm) {
		return unlike(norm)
	}
	if row := k.factorise(smallestPivot); row >= 0 {
		return &Fault{FaultMechanism, "member", m.placeOf(row), "a part that moves without bending",
			"supports that hold the member: one fixed, or two, and one more for each hinge"}
	}
	condition := norm * k.inverseNorm()
	for i := range m.elements {
		if e := &m.elements[i]; !(e.condition > 0 && e.condition <= condition) {
			condition = e.condition
		}
	}
	if !(condition >= 0 && condition <= largestCondition) {
		return unlike(condition)
	}
	return nil
}

func unlike(condition float64) *Fault {
	return &Fault{FaultCondition, "member", 0, fmt.Sprintf("a condition number of %.2g", condition),
		fmt.Sprintf("%.0g at the most: stiffnesses nearer to each other, supports farther apart", largestCondition)}
}

// placeOf returns the place (m) of an unknown.
func (m *mesh) placeOf(unknown int) float64 {
	for _, n := range m.nodes {
		if n.deflection == unknown || n.left == unknown || n.turn == unknown {
			return m.x[n.station] * m.length
		}
	}
	return 0
}
