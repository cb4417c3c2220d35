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
	hinged   []bool    // by station
	held     []int     // by station: the support, -1 without
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
	m := new(mesh)
	m.set(b, cases)
	return m
}

// set cuts up another member, in the memory of the last.
func (m *mesh) set(b Beam, cases []Case) {
	m.length = b.Length
	m.supports = order(append(m.supports[:0], b.Supports...))
	m.stations(b, cases)
	m.stiffness(b)
	m.number(b)
}

// stations collects every place where a polynomial can change. The first to
// name a place wins, so that a load end beside a support moves to the support.
func (m *mesh) stations(b Beam, cases []Case) {
	m.x = append(m.x[:0], 0, 1)
	for i := range m.supports {
		m.add(m.supports[i].X)
	}
	for _, x := range b.Hinges {
		m.add(x)
	}
	for _, s := range b.Segments {
		m.add(s.To)
	}
	for _, c := range cases {
		for i := range c {
			m.add(c[i].From)
			if c[i].Kind.distributed() {
				m.add(c[i].To)
			}
		}
	}
}

// add adds a station at x (m) unless there is one.
func (m *mesh) add(x float64) {
	x = min(max(x/m.length, 0), 1)
	i := m.after(x)
	if m.x[i]-x <= near || i > 0 && x-m.x[i-1] <= near {
		return
	}
	m.x = slices.Insert(m.x, i, x)
}

// after returns the first station at or beyond x (0 to 1), the last one at the most.
func (m *mesh) after(x float64) int {
	lo, hi := 0, len(m.x)-1
	for lo < hi {
		if mid := (lo + hi) / 2; m.x[mid] < x {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}

// station returns the index of the station nearest to x (m).
func (m *mesh) station(x float64) int {
	x /= m.length
	i := m.after(x)
	if i > 0 && x-m.x[i-1] < m.x[i]-x {
		i--
	}
	return i
}

func (m *mesh) stiffness(b Beam) {
	m.unitEI = 0
	for _, s := range b.Segments {
		m.unitEI = math.Max(m.unitEI, s.EI)
	}
	m.ei = sized(m.ei, len(m.x)-1)
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
	m.hinged, m.held = sized(m.hinged, len(m.x)), sized(m.held, len(m.x))
	m.nodes, m.elements, m.unknowns = m.nodes[:0], m.elements[:0], 0
	for i := range m.held {
		m.held[i] = -1
	}
	for _, x := range b.Hinges {
		m.hinged[m.station(x)] = true
	}
	for i := range m.supports {
		m.held[m.station(m.supports[i].X)] = i
	}
	for st := range m.x {
		if st == 0 || st == len(m.x)-1 || m.hinged[st] || m.held[st] >= 0 {
			m.nodes = append(m.nodes, m.node(st, m.held[st], m.hinged[st]))
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
	if kind != Pinned && kind != Fixed {
		n.deflection = m.unknown()
	}
	if kind != Fixed && kind != Guided {
		n.left = m.unknown()
		n.turn = n.left
	}
	if hinged {
		n.turn = m.unknown()
	}
	return n
}

// unknown numbers one more free displacement.
func (m *mesh) unknown() int {
	m.unknowns++
	return m.unknowns - 1
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
func (e *element) ends(turnLeft, turnRight, loadLeft, loadRight float64) (left, right float64) {
	l, r := turnLeft-loadLeft, -turnRight-loadRight
	return e.inverse[0]*l + e.inverse[1]*r, e.inverse[1]*l + e.inverse[2]*r
}

// sized returns s with n zeros, in its own memory if that is enough.
func sized[T any](s []T, n int) []T {
	if cap(s) < n {
		return make([]T, n)
	}
	s = s[:n]
	clear(s)
	return s
}

func cube(v float64) float64 { return v * v * v }
