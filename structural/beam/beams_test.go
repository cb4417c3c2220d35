package beam

import (
	"encoding/json"
	"math"
	"os"
	"testing"
)

// testdata/beams.json: 49 beams computed outside the project by a numpy
// stiffness solver and checked there by a Macaulay solver and by SymPy. SI;
// loads and deflection down +, couples clockwise +, reactions up +, sagging +.
type checkFile struct{ Cases []checkBeam }

type checkBeam struct {
	ID, Name   string
	Length     float64
	E          float64
	SelfWeight bool `json:"self_weight"`
	Segments   []struct {
		X0, X1, I float64
		W         float64 `json:"w_self"`
	}
	Supports []struct {
		X    float64
		Type string
	}
	Loads []struct {
		Type            string
		X, X0, X1, P, M float64
		W0, W1          float64
	}
	Out checkOut
}

type checkExtreme struct {
	Value, Signed, X float64
	XLast            float64 `json:"x_last"`
}

type checkOut struct {
	Reactions []struct{ X, F, M float64 }
	MMax      checkExtreme `json:"M_max"`
	MMin      checkExtreme `json:"M_min"`
	VMax      checkExtreme `json:"V_max"`
	VMin      checkExtreme `json:"V_min"`
	Defl      checkExtreme `json:"defl_max"`
	Left      float64      `json:"rotation_left"`
	Right     float64      `json:"rotation_right"`
	Spans     []struct {
		X0, X1 float64
		MMax   float64 `json:"M_max"`
		MMin   float64 `json:"M_min"`
		VAbs   float64 `json:"V_abs"`
		Defl   float64
		DeflX  float64 `json:"defl_x"`
	}
	Samples struct{ X, M, Defl []float64 }
}

func readBeams(t *testing.T) []checkBeam {
	t.Helper()
	data, err := os.ReadFile("testdata/beams.json")
	if err != nil {
		t.Fatal(err)
	}
	var f checkFile
	if err := json.Unmarshal(data, &f); err != nil {
		t.Fatal(err)
	}
	if len(f.Cases) != 49 {
		t.Fatalf("%d beams, want 49", len(f.Cases))
	}
	return f.Cases
}

func (b checkBeam) model(t *testing.T) (Beam, Case) {
	out := Beam{Length: b.Length}
	var c Case
	for _, s := range b.Segments {
		out.Segments = append(out.Segments, Segment{To: s.X1, EI: b.E * s.I})
		if b.SelfWeight {
			c = append(c, Load{Kind: Uniform, From: s.X0, To: s.X1, Start: s.W})
		}
	}
	kinds := map[string]SupportKind{"pinned": Pinned, "fixed": Fixed}
	for _, s := range b.Supports {
		out.Supports = append(out.Supports, Support{X: s.X, Kind: kinds[s.Type]})
	}
	for _, l := range b.Loads {
		switch l.Type {
		case "distributed":
			c = append(c, Load{Kind: Linear, From: l.X0, To: l.X1, Start: l.W0, End: l.W1})
		case "point":
			c = append(c, Load{Kind: Point, From: l.X, Start: l.P})
		case "moment":
			c = append(c, Load{Kind: Moment, From: l.X, Start: l.M})
		default:
			t.Fatalf("%s: load type %q", b.ID, l.Type)
		}
	}
	return out, c
}

// closer reports got against want, with an error up to tol of the largest value
// of the quantity.
func closer(t *testing.T, what string, got, want, largest, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*largest) {
		t.Errorf("%s = %.12g, want %.12g (off by %.2g of %.6g)", what, got, want, math.Abs(got-want)/largest, largest)
	}
}

func TestCheckBeams(t *testing.T) {
	for _, b := range readBeams(t) {
		t.Run(b.ID, func(t *testing.T) {
			model, c := b.model(t)
			r, err := Analyse(model, []Case{c})
			if err != nil {
				t.Fatal(err)
			}
			e := r.Envelope([]Term{{Case: 0, Factor: 1}})
			compareExtremes(t, b, e)
			compareStations(t, b, r)
			compareSpans(t, b, e)
		})
	}
}

const beamsTolerance = 1e-9 // the file's own two solvers differ by 3e-10

func (o checkOut) largest() (V, M, d float64) {
	return math.Max(o.VMax.Value, -o.VMin.Value), math.Max(o.MMax.Value, -o.MMin.Value), o.Defl.Value
}

func compareExtremes(t *testing.T, b checkBeam, e Envelope) {
	V, M, d := b.Out.largest()
	defl := larger(e.DeflectionMax, e.DeflectionMin)
	for _, row := range []struct {
		name    string
		got     Extreme
		want    checkExtreme
		value   float64
		largest float64
	}{
		{"M max", e.MomentMax, b.Out.MMax, b.Out.MMax.Value, M},
		{"M min", e.MomentMin, b.Out.MMin, b.Out.MMin.Value, M},
		{"V max", e.ShearMax, b.Out.VMax, b.Out.VMax.Value, V},
		{"V min", e.ShearMin, b.Out.VMin, b.Out.VMin.Value, V},
		{"deflection", defl, b.Out.Defl, b.Out.Defl.Signed, d},
	} {
		closer(t, row.name, row.got.Value, row.value, row.largest, beamsTolerance)
		if row.want.X == row.want.XLast {
			closer(t, row.name+" x", row.got.X, row.want.X, b.Length, beamsTolerance)
		}
	}
	if len(e.Reactions) != len(b.Out.Reactions) {
		t.Fatalf("%d reactions, want %d", len(e.Reactions), len(b.Out.Reactions))
	}
	var F, C float64
	for _, w := range b.Out.Reactions {
		F, C = math.Max(F, math.Abs(w.F)), math.Max(C, math.Abs(w.M))
	}
	for i, w := range b.Out.Reactions {
		closer(t, "reaction", e.Reactions[i].FMax, w.F, F, beamsTolerance)
		closer(t, "reaction couple", e.Reactions[i].MMax, w.M, math.Max(C, 1), beamsTolerance)
	}
}

func compareStations(t *testing.T, b checkBeam, r *Response) {
	_, M, d := b.Out.largest()
	for i, x := range b.Out.Samples.X {
		_, gotM, _, gotD := r.At(0, x, Right)
		closer(t, "M at station", gotM, b.Out.Samples.M[i], M, beamsTolerance)
		closer(t, "deflection at station", gotD, b.Out.Samples.Defl[i], d, beamsTolerance)
	}
	_, _, left, _ := r.At(0, 0, Right)
	_, _, right, _ := r.At(0, b.Length, Left)
	turn := math.Max(math.Max(math.Abs(b.Out.Left), math.Abs(b.Out.Right)), d/b.Length) // some slope is at least d/L
	closer(t, "rotation left", left, b.Out.Left, turn, beamsTolerance)
	closer(t, "rotation right", right, b.Out.Right, turn, beamsTolerance)
}

func compareSpans(t *testing.T, b checkBeam, e Envelope) {
	V, M, d := b.Out.largest()
	if len(e.Spans) != len(b.Out.Spans) {
		t.Fatalf("%d spans, want %d", len(e.Spans), len(b.Out.Spans))
	}
	for i, w := range b.Out.Spans {
		s := e.Spans[i]
		closer(t, "span from", s.From, w.X0, b.Length, 1e-12)
		closer(t, "span to", s.To, w.X1, b.Length, 1e-12)
		closer(t, "span M max", s.MomentMax.Value, w.MMax, M, beamsTolerance)
		closer(t, "span M min", s.MomentMin.Value, w.MMin, M, beamsTolerance)
		closer(t, "span V", math.Max(s.ShearMax.Value, -s.ShearMin.Value), w.VAbs, V, beamsTolerance)
		closer(t, "span deflection", larger(s.DeflectionMax, s.DeflectionMin).Value, w.Defl, d, beamsTolerance)
	}
}
