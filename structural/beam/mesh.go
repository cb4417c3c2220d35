package beam

import (
	"math"
	"slices"
)

// mesh is the member cut up, in lengths of the member. Stations cut it into
// pieces, each with one polynomial per case; nodes (supports, hinges, ends) cut
// it into elements. Steps and load ends are stations only: as nodes they would
// make the stiffness matrix worse, and an element integrates over them exactly.
type mesh struct {
	length   float64
	unitEI   float64   // N.m², the largest EI: the unit of stiffness
	x        []float64 // stations, 0 … 1
	ei       []float64 // per piece, in unitEI
	nodes    []node
	elements []element
	unknowns int
	supports []Support // left to right
}

// node is a place where elements meet. Unknown -1 is a held displacement.
type node struct {
	station                int
	support                int // index in supports, -1 without
	deflection, left, turn int // unknowns: v, θ on the left and on the right side
	settled                float64
}

// element is the stretch between node i and node i+1.
type element struct {
	first, last int // stations
	length      float64
	condition   float64    // 4/3 if prismatic; large where a soft step acts as a hinge
	inverse     [3]float64 // (11, 12, 22) of the inverse of the end flexibility
}

func newMesh(b Beam, cases []Case) *mesh {
	m := &mesh{length: b.Length, supports: b.ordered()}
	m.stations(b, cases)
	m.stiffness(b)
	m.number(b)
	return m
}

// stations collects every place where a polynomial can change. The first to
// name a place wins, so that a load end beside a support moves to the support.
func (m *mesh) stations(b Beam, cases []Case) {
	xs := []float64{0, 1}
	add := func(x float64) {
		x = min(max(x/m.length, 0), 1)
		i, _ := slices.BinarySearch(xs, x)
		if i < len(xs) && xs[i]-x <= near || i > 0 && x-xs[i-1] <= near {
			return
		}
		xs = slices.Insert(xs, i, x)
	}
	for _, s := range m.supports {
		add(s.X)
	}
	for _, x := range b.Hinges {
		add(x)
	}
	for _, s := range b.Segments {
		add(s.To)
	}
	for _, c := range cases {
		for _, l := range c {
			add(l.From)
			if l.Kind.distributed() {
				add(l.To)
			}
		}
	}
	m.x = xs
}

// station returns the index of the station nearest to x (m).
func (m *mesh) station(x float64) int {
	x /= m.length
	i, _ := slices.BinarySearch(m.x, x)
	if i == len(m.x) || i > 0 && x-m.x[i-1] < m.x[i]-x {
		i--
	}
	return i
}

func (m *mesh) stiffness(b Beam) {
	for _, s := range b.Segments {
		m.unitEI = math.Max(m.unitEI, s.EI)
	}
	m.ei = make([]float64, len(m.x)-1)
	from := 0
	for _, s := range b.Segments {
		to := m.station(s.To)
		for p := from; p < to; p++ {
			m.ei[p] = s.EI / m.unitEI
		}
		from = to
	}
}

// number makes nodes and elements and gives each free displacement its place
// in the system of equations, left to right.
func (m *mesh) number(b Beam) {
	hinged := make([]bool, len(m.x))
	held := make([]int, len(m.x))
	for i := range held {
		held[i] = -1
	}
	for _, x := range b.Hinges {
		hinged[m.station(x)] = true
	}
	for i, s := range m.supports {
		held[m.station(s.X)] = i
	}
	for st := range m.x {
		if st == 0 || st == len(m.x)-1 || hinged[st] || held[st] >= 0 {
			m.nodes = append(m.nodes, m.node(st, held[st], hinged[st]))
		}
	}
	for i := range len(m.nodes) - 1 {
		m.elements = append(m.elements, m.element(m.nodes[i].station, m.nodes[i+1].station))
	}
}

func (m *mesh) node(station, support int, hinged bool) node {
	n := node{station: station, support: support, deflection: -1, left: -1, turn: -1}
	kind := SupportKind(0)
	if support >= 0 {
		kind = m.supports[support].Kind
		n.settled = m.supports[support].Settlement * m.unitEI / cube(m.length)
	}
	next := func() int { m.unknowns++; return m.unknowns - 1 }
	if kind != Pinned && kind != Fixed {
		n.deflection = next()
	}
	if kind != Fixed {
		n.left = next()
		n.turn = n.left
	}
	if hinged {
		n.turn = next()
	}
	return n
}

// element integrates the flexibility of a simple span between two stations:
// (∫(1-ξ)²/EI, ∫ξ(1-ξ)/EI, ∫ξ²/EI) dx, by unit end moments (principle of
// virtual forces), and inverts it.
func (m *mesh) element(first, last int) element {
	a := m.x[first]
	l := m.x[last] - a
	var f11, f12, f22 float64
	for p := first; p < last; p++ {
		h := (m.x[p+1] - m.x[p]) / l
		mid := (0.5*(m.x[p+1]+m.x[p]) - a) / l
		w := l * h / m.ei[p]
		f11 += w * ((1-mid)*(1-mid) + h*h/12)
		f12 += w * (mid*(1-mid) - h*h/12)
		f22 += w * (mid*mid + h*h/12)
	}
	det := f11*f22 - f12*f12
	return element{first: first, last: last, length: l, condition: f11 * f22 / det,
		inverse: [3]float64{f22 / det, -f12 / det, f11 / det}}
}

// ends returns the end moments (sagging +) of the element from its end turns
// against the chord, clockwise +, less the turns that its own loads give.
func (e element) ends(turnLeft, turnRight, loadLeft, loadRight float64) (left, right float64) {
	l, r := turnLeft-loadLeft, -turnRight-loadRight
	return e.inverse[0]*l + e.inverse[1]*r, e.inverse[1]*l + e.inverse[2]*r
}

func cube(v float64) float64 { return v * v * v }
