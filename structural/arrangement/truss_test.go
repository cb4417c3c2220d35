package arrangement

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"spanwright/structural/beam"
)

// frame is a truss as joints and bars, solved joint by joint: the check of the method
// of sections and of its virtual work.
type frame struct {
	x, y []float64
	bars [][2]int
	kind []string // "top", "bottom" or "diagonal"
}

// warren numbers the bottom joints 0 … n, then the top ones.
func warren(t truss) frame {
	var f frame
	for i := range t.panels + 1 {
		f.x, f.y = append(f.x, float64(i)*t.panel), append(f.y, 0)
	}
	bar := func(kind string, a, b int) {
		f.bars, f.kind = append(f.bars, [2]int{a, b}), append(f.kind, kind)
	}
	for i := range t.panels {
		top := t.panels + 1 + i
		f.x, f.y = append(f.x, (float64(i)+0.5)*t.panel), append(f.y, t.depth)
		bar("bottom", i, i+1)
		bar("diagonal", i, top)
		bar("diagonal", top, i+1)
		if i > 0 {
			bar("top", top-1, top)
		}
	}
	return f
}

// forces returns the bar forces (tension +) under forces (down +) on the bottom joints,
// from the equilibrium of every joint with reactions at the two ends.
func (f frame) forces(t *testing.T, down []float64) []float64 {
	t.Helper()
	n, b := len(f.x), len(f.bars)
	if b+3 != 2*n {
		t.Fatalf("%d bars on %d joints are not determinate", b, n)
	}
	a, load := mat.NewDense(2*n, 2*n, nil), mat.NewVecDense(2*n, nil)
	for k, bar := range f.bars {
		i, j := bar[0], bar[1]
		l := f.length(k)
		c, s := (f.x[j]-f.x[i])/l, (f.y[j]-f.y[i])/l
		a.Set(2*i, k, c)
		a.Set(2*i+1, k, s)
		a.Set(2*j, k, -c)
		a.Set(2*j+1, k, -s)
	}
	a.Set(0, b, 1)
	a.Set(1, b+1, 1)
	a.Set(2*(len(down)-1)+1, b+2, 1)
	for i, p := range down {
		load.SetVec(2*i+1, p)
	}
	var x mat.VecDense
	if err := x.SolveVec(a, load); err != nil {
		t.Fatal(err)
	}
	return x.RawVector().Data[:b]
}

func (f frame) length(k int) float64 {
	i, j := f.bars[k][0], f.bars[k][1]
	return math.Hypot(f.x[j]-f.x[i], f.y[j]-f.y[i])
}

// Bar forces and deflections of five trusses under an uneven load, against the joints.
func TestTrussAgainstItsJoints(t *testing.T) {
	const chord, diagonal = 3e-3, 1e-3
	for _, tr := range []truss{{2, 3, 2}, {3, 2, 2.5}, {6, 2.5, 1.8}, {9, 4, 3}, {14, 3, 2.2}} {
		f := warren(tr)
		down := make([]float64, tr.panels+1)
		for i := range down {
			down[i] = 1000 * (1 + float64(i*i%5))
		}
		e := tr.effect(tr.units(), down)
		real := f.forces(t, down)
		d := tr.diagonal()
		top, bottom, web := 0, 0, 0
		for k, kind := range f.kind {
			switch kind {
			case "top":
				top++
				same(t, "top chord", real[k], -e.node[top]/tr.depth, 1e-9)
			case "bottom":
				same(t, "bottom chord", real[k], e.mid[bottom]/tr.depth, 1e-9)
				bottom++
			case "diagonal":
				sign := -1.0 // up from the left: in compression under a positive shear
				if web%2 == 1 {
					sign = 1
				}
				same(t, "diagonal", real[k], sign*e.shear[web/2]*d/tr.depth, 1e-8)
				web++
			}
		}
		for node := 1; node < tr.panels; node++ {
			unit := make([]float64, tr.panels+1)
			unit[node] = 1
			virtual := f.forces(t, unit)
			want := 0.0
			for k, kind := range f.kind {
				area := chord
				if kind == "diagonal" {
					area = diagonal
				}
				want += real[k] * virtual[k] * f.length(k) / (s355E * area)
			}
			same(t, "deflection", e.bend[node]/(s355E*chord)+e.rack[node]/(s355E*diagonal), want, 1e-9)
		}
	}
}

// Under w everywhere the chord force is w·L²/(8h) and, with ever more panels, the
// deflection 5wL⁴/(384·E·I) with I = A·h²/2 from the chords, and w·L²/(8·Sv) with
// Sv = E·Ad·a·h²/(2·d³) from the diagonals (EN 1993-1-1:2005 Figure 6.9, V lacing).
func TestTrussTendsToTheBeam(t *testing.T) {
	const w, length, depth = 2000.0, 40.0, 2.0
	tr := truss{panels: 60, panel: length / 60, depth: depth}
	e := tr.effect(tr.units(), tr.forces(beam.Load{Kind: beam.Uniform, To: length, Start: w}))
	same(t, "chord", e.node[30]/depth, w*length*length/(8*depth), 1e-12)
	same(t, "chords' part", e.bend[30], 5*w*math.Pow(length, 4)/(384*depth*depth/2), 1e-3)
	d := tr.diagonal()
	same(t, "diagonals' part", e.rack[30], w*length*length/8*2*d*d*d/(tr.panel*depth*depth), 1e-9)
}

// The closed forms for 4 panels under equal forces P at the inner panel points, by
// virtual work written out by hand: M = 1.5, 2, 1.5 P·a at the points and 0.75, 1.75 P·a
// in the panels; m under 1 at the middle = a/2, a, a/2 and a/4, 3a/4.
func TestFourPanelsByHand(t *testing.T) {
	const p, a, h = 1000.0, 3.0, 2.0
	tr := truss{panels: 4, panel: a, depth: h}
	e := tr.effect(tr.units(), []float64{0, p, p, p, 0})
	same(t, "chords", e.bend[2], p*a*a*a/(h*h)*(2*1.5*0.5+2*1+2*(0.75*0.25+1.75*0.75)), 1e-12)
	d := math.Sqrt(1.5*1.5 + 4)
	same(t, "diagonals", e.rack[2], 2*d*d*d/(h*h)*2*(1.5*p*0.5+0.5*p*0.5), 1e-12)
}

// What goes to the panel points keeps the sum of forces and their moment.
func TestLoadsOnPanelPointsKeepTheirResultant(t *testing.T) {
	tr := truss{panels: 7, panel: 3, depth: 2}
	for _, tc := range []struct {
		name          string
		load          beam.Load
		force, moment float64 // N, N·m about the left end
	}{
		{"point", beam.Load{Kind: beam.Point, From: 10, Start: 500}, 500, 5000},
		{"point at the end", beam.Load{Kind: beam.Point, From: 21, Start: 500}, 500, 10500},
		{"couple", beam.Load{Kind: beam.Moment, From: 8, Start: 900}, 0, 900},
		{"uniform", beam.Load{Kind: beam.Uniform, From: 2, To: 11, Start: 100}, 900, 900 * 6.5},
		{"ramp", beam.Load{Kind: beam.Linear, From: 0, To: 12, Start: 0, End: 100}, 600, 600 * 8},
		{"ramp through zero", beam.Load{Kind: beam.Linear, From: 6, To: 12, Start: -100, End: 100}, 0, 150*11 - 150*7},
	} {
		force, moment := 0.0, 0.0
		for i, p := range tr.forces(tc.load) {
			force += p
			moment += p * float64(i) * tr.panel
		}
		if math.Abs(force-tc.force) > 1e-9 || math.Abs(moment-tc.moment) > 1e-9 {
			t.Errorf("%s: %v N, %v N·m, want %v, %v", tc.name, force, moment, tc.force, tc.moment)
		}
	}
}

// A train's bounds against its positions in small steps: never exceeded, and reached.
func TestTrainOnATruss(t *testing.T) {
	tr := truss{panels: 6, panel: 2.5, depth: 2}
	train := beam.Train{Loads: []float64{8000, 3000, 6000}, Spacings: []float64{1.7, 2.9}}
	units := tr.units()
	most, least := tr.pass(units, train)
	seen := tr.blank()
	for _, direction := range []float64{1, -1} {
		for x := -5.0; x <= 20; x += 0.01 {
			e := tr.effect(units, tr.wheels(train, x, direction))
			for i, m := range e.node {
				if m > most.node[i]*(1+1e-9)+1e-6 || m < least.node[i]-1e-6 {
					t.Fatalf("lead at %v: %v N·m at point %d, bounds %v to %v", x, m, i, least.node[i], most.node[i])
				}
			}
			for i, v := range e.shear {
				if v > most.shear[i]+1e-6 || v < least.shear[i]-1e-6 {
					t.Fatalf("lead at %v: %v N in panel %d, bounds %v to %v", x, v, i+1, least.shear[i], most.shear[i])
				}
			}
			seen.add(e, math.Max)
		}
	}
	for i := 1; i < tr.panels; i++ {
		same(t, "moment reached", seen.node[i], most.node[i], 5e-3)
		same(t, "deflection reached", seen.bend[i], most.bend[i], 5e-3)
	}
	for i := range seen.shear {
		if seen.shear[i] < most.shear[i]-0.01*most.shear[0] {
			t.Errorf("panel %d: %v N reached, bound %v N", i+1, seen.shear[i], most.shear[i])
		}
	}
}
