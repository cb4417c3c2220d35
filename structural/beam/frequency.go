package beam

import (
	"math"
)

// Mass is a stretch of mass that moves with the member.
type Mass struct {
	From, To float64 // m
	PerMetre float64 // kg/m, 0 or more
}

// frequencyTolerance is the relative width at which the search for the first
// frequency ends.
const frequencyTolerance = 1e-10

// Frequency returns the first natural frequency (Hz) of the member in bending,
// with the masses spread along it: its own and what it carries.
//
// It is exact for the Euler-Bernoulli beam: the dynamic stiffness of each
// uniform stretch (Clough and Penzien, Dynamics of Structures, ch. 20, from
// memory) with the count of Wittrick and Williams (1971), which tells for any
// frequency how many natural frequencies lie below it, so that none is missed.
// Rayleigh's quotient of a static shape would give too much, which is unsafe
// against a floor. Shear flexibility, rotatory inertia and axial force are not
// in it.
//
// Masses must be somewhere where the member can move. Settlements are not read.
// Every error is a *Fault.
func Frequency(b Beam, masses []Mass) (float64, error) {
	v, fault := newVibration(b, masses)
	if fault != nil {
		return 0, fault
	}
	return v.first()
}

// vibration is the member cut into uniform stretches, in lengths of the member,
// the largest EI and the largest mass per metre.
type vibration struct {
	mesh *mesh
	mass []float64 // by piece, of the largest
	unit float64   // rad/s of the frequency 1
	k    *band
}

func newVibration(b Beam, masses []Mass) (*vibration, *Fault) {
	if fault := check(b, nil); fault != nil {
		return nil, fault
	}
	var ends Case // a load on each stretch, to make its ends stations
	for i, s := range masses {
		if fault := checkMass(b, s); fault != nil {
			fault.Part = ordinal("mass", i)
			return nil, fault
		}
		ends = append(ends, Load{Kind: Uniform, From: s.From, To: s.To})
	}
	m := newMesh(b, []Case{ends})
	if _, fault := m.assemble(); fault != nil {
		return nil, fault
	}
	v := &vibration{mesh: m, mass: make([]float64, len(m.ei))}
	most := 0.0
	for _, s := range masses {
		for p := m.station(s.From); p < m.station(s.To); p++ {
			v.mass[p] += s.PerMetre
			most = max(most, v.mass[p])
		}
	}
	if !positive(most) {
		return nil, &Fault{FaultMass, "member", 0, num(most) + " kg/m", "a finite mass above 0 kg/m"}
	}
	for p := range v.mass {
		v.mass[p] /= most
	}
	v.unit = math.Sqrt(m.unitEI/most) / (m.length * m.length)
	v.k = newBand(m.unknowns)
	return v, nil
}

func checkMass(b Beam, s Mass) *Fault {
	if !(s.PerMetre >= 0 && s.PerMetre <= math.MaxFloat64) {
		return &Fault{FaultMass, "", s.From, num(s.PerMetre) + " kg/m", "0 kg/m or more"}
	}
	if !within(b, s.From) {
		return outside(b, "", s.From)
	}
	return checkExtent(b, &Load{Kind: Uniform, From: s.From, To: s.To})
}

// first searches for the frequency below which the count is 0 and above which
// it is not.
func (v *vibration) first() (float64, error) {
	lo, hi := 0.0, 1.0
	for v.below(hi) == 0 {
		lo, hi = hi, 4*hi
		if !(hi < 1e12) {
			return 0, &Fault{FaultMass, "member", 0, "masses only where the member cannot move", "a mass where it can"}
		}
	}
	for lo == 0 {
		if next := hi / 4; v.below(next) == 0 {
			lo = next
		} else if hi = next; !(hi > 1e-12) {
			return 0, unlike(math.Inf(1))
		}
	}
	for hi-lo > frequencyTolerance*lo {
		if mid := 0.5 * (lo + hi); v.below(mid) == 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	return 0.5 * (lo + hi) * v.unit / (2 * math.Pi), nil
}

// below counts the natural frequencies below ω: those of the elements held at
// both ends, and the negative pivots of the dynamic stiffness matrix.
func (v *vibration) below(omega float64) int {
	m := v.mesh
	v.k.reset(m.unknowns)
	count := 0
	for i := range m.elements {
		e := &m.elements[i]
		held, k := v.element(e, omega)
		count += held
		dofs, _ := m.unknownsOf(i)
		v.k.addElement(dofs, k)
	}
	for i := range m.nodes {
		n := &m.nodes[i]
		down, turn := m.springs(n)
		if down > 0 {
			v.k.add(n.deflection, n.deflection, down)
		}
		if turn > 0 {
			v.k.add(n.turn, n.turn, turn)
		}
	}
	return count + v.k.negative()
}

// element returns the dynamic stiffness of an element and its count with both
// ends held. Over several stretches the stiffness comes from the product of their
// transfer matrices, and the count from joining them one by one: as nodes of one
// matrix, short stretches would cost digits.
func (v *vibration) element(e *element, omega float64) (int, [4][4]float64) {
	m := v.mesh
	lambda := func(p int) float64 {
		return (m.x[p+1] - m.x[p]) * math.Sqrt(omega) * math.Pow(v.mass[p]/m.ei[p], 0.25)
	}
	if e.last == e.first+1 {
		l := lambda(e.first)
		return clamped(l), dynamic(l, m.ei[e.first], e.length)
	}
	count, k := 0, [4][4]float64{}
	var through transfer
	for p := e.first; p < e.last; p++ {
		l, h := lambda(p), m.x[p+1]-m.x[p]
		count += clamped(l)
		next := stretchTransfer(l, m.ei[p], h)
		if p == e.first {
			through, k = next, dynamic(l, m.ei[p], h)
			continue
		}
		count += negativeAt(&k, dynamic(l, m.ei[p], h))
		through = next.times(&through)
		k = through.stiffness()
	}
	return count, k
}

// negativeAt counts the negative pivots of the place where two stretches meet.
func negativeAt(left *[4][4]float64, right [4][4]float64) int {
	count := 0
	v := left[2][2] + right[0][0]
	if v < 0 {
		count++
	}
	side := left[3][2] + right[1][0]
	if left[3][3]+right[1][1]-side*side/v < 0 {
		count++
	}
	return count
}

// addElement adds a 4 by 4 matrix to the free ones of its unknowns.
func (m *band) addElement(dofs [4]int, k [4][4]float64) {
	for r, row := range dofs {
		for s, column := range dofs {
			if row >= 0 && column >= 0 {
				m.add(row, column, k[r][s])
			}
		}
	}
}

// negative factorises the matrix and counts the negative pivots (Sylvester's law
// of inertia). A pivot that is zero is taken for a very small positive one.
func (m *band) negative() int {
	count := 0
	for i := range m.n {
		ri := m.row(i)
		diagonal := math.Abs(ri[0])
		for k := min(half, i); k >= 0; k-- {
			j := i - k
			rj := m.row(j)
			s := ri[k]
			for p := max(0, i-half); p < j; p++ {
				s -= ri[i-p] * rj[j-p] * m.row(p)[0]
			}
			if k > 0 {
				s /= rj[0]
			}
			ri[k] = s
		}
		if ri[0] == 0 {
			ri[0] = 1e-30 * (1 + diagonal)
		}
		if ri[0] < 0 {
			count++
		}
	}
	return count
}
