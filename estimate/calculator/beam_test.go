package calculator

import (
	"encoding/json"
	"math"
	"os"
	"strings"
	"testing"

	"spanwright/estimate/document"
)

// closer fails where got is farther than tolerance × scale from want.
func closer(t *testing.T, what string, got Number, want, scale, tolerance float64) {
	t.Helper()
	if !(math.Abs(float64(got)-want) <= tolerance*math.Abs(scale)) {
		t.Errorf("%s = %v, want %v", what, got, want)
	}
}

func pinned(xs ...float64) []BeamSupport {
	var out []BeamSupport
	for _, x := range xs {
		out = append(out, BeamSupport{Position: x, Kind: "pinned"})
	}
	return out
}

func analysed(t *testing.T, r BeamRequest) BeamAnswer {
	t.Helper()
	a, err := Beam(r)
	if err != nil {
		t.Fatal(err)
	}
	return a
}

// publishedMember is one of structural/beam/testdata/beams.json: from an independent
// stiffness solver, checked there by a Macaulay solver and by SymPy. SI units.
type publishedMember struct {
	ID       string
	Length   float64
	E        float64
	Self     bool `json:"self_weight"`
	Segments []struct {
		X1 float64
		I  float64
		A  float64
		W  float64 `json:"w_self"`
	}
	Supports []struct {
		X    float64
		Type string
	}
	Loads []struct {
		Type           string
		X, P, M        float64
		X0, X1, W0, W1 float64
	}
	Out struct {
		Reactions []struct{ X, F, M float64 }
		MMax      struct{ Value float64 }  `json:"M_max"`
		MMin      struct{ Value float64 }  `json:"M_min"`
		VMax      struct{ Value float64 }  `json:"V_max"`
		VMin      struct{ Value float64 }  `json:"V_min"`
		Defl      struct{ Signed float64 } `json:"defl_max"`
		Spans     []struct{ Defl float64 }
		Hz        float64 `json:"f1_hz_bare"`
	}
}

// request is the member as one would post it, all loads permanent.
func (m publishedMember) request() BeamRequest {
	r := BeamRequest{Length: m.Length}
	for _, s := range m.Segments {
		b := BeamSegment{To: s.X1, EI: m.E * s.I / 1e3}
		if m.Self {
			b.Mass = s.W / gravity
		}
		r.Segments = append(r.Segments, b)
	}
	for _, s := range m.Supports {
		r.Supports = append(r.Supports, BeamSupport{Position: s.X, Kind: s.Type})
	}
	for _, l := range m.Loads {
		b := BeamLoad{Nature: "permanent"}
		switch l.Type {
		case "point":
			b.Kind, b.Position, b.Force = "point", l.X, l.P/1e3
		case "moment":
			b.Kind, b.Position, b.Moment = "moment", l.X, l.M/1e3
		default:
			b.Kind, b.From, b.To, b.Load, b.EndLoad = "linear", l.X0, l.X1, l.W0/1e3, l.W1/1e3
		}
		r.Loads = append(r.Loads, b)
	}
	return r
}

func TestPublishedBeams(t *testing.T) {
	data, err := os.ReadFile("../../structural/beam/testdata/beams.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Cases []publishedMember }
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Cases) != 49 {
		t.Fatalf("%d members in the file, want 49", len(file.Cases))
	}
	const tolerance = 1e-6 // that of the file
	for _, m := range file.Cases {
		t.Run(m.ID, func(t *testing.T) {
			a := analysed(t, m.request())
			x, out := a.Effects, m.Out
			moment := math.Max(math.Abs(out.MMax.Value), math.Abs(out.MMin.Value)) / 1e3
			shear := math.Max(math.Abs(out.VMax.Value), math.Abs(out.VMin.Value)) / 1e3
			closer(t, "largest moment", x.MomentMax.Value, out.MMax.Value/1e3, moment, tolerance)
			closer(t, "least moment", x.MomentMin.Value, out.MMin.Value/1e3, moment, tolerance)
			closer(t, "largest shear", x.ShearMax.Value, out.VMax.Value/1e3, shear, tolerance)
			closer(t, "least shear", x.ShearMin.Value, out.VMin.Value/1e3, shear, tolerance)
			deflection := x.DeflectionMax.Value
			if -x.DeflectionMin.Value > deflection {
				deflection = x.DeflectionMin.Value
			}
			closer(t, "deflection", deflection, out.Defl.Signed*1e3, out.Defl.Signed*1e3, tolerance)
			for i, r := range out.Reactions {
				closer(t, "reaction", a.Reactions[i].Max, r.F/1e3, shear, tolerance)
				closer(t, "couple", a.Reactions[i].MomentMax, r.M/1e3, moment, tolerance)
			}
			for i, s := range out.Spans {
				got := a.Spans[i].DeflectionMax.Value
				if s.Defl < 0 {
					got = a.Spans[i].DeflectionMin.Value
				}
				closer(t, a.Spans[i].Name, got, s.Defl*1e3, out.Defl.Signed*1e3, tolerance)
			}
			bare := m.request()
			bare.Loads = nil
			for i, s := range m.Segments {
				bare.Segments[i].Mass = s.A * 7850
			}
			f := analysed(t, bare).Frequency
			if f == nil {
				t.Fatal("no frequency")
			}
			closer(t, "frequency", *f, out.Hz, out.Hz, 1e-4) // the file's mesh errs by 1.6e-5 at the most
		})
	}
}

// boom is the tube boom of 50 m held at one end and at two thirds, 508 × 25.4.
func boom() BeamRequest {
	return BeamRequest{Length: 50, Section: "CHS 508x25.4", Grade: "S355", Supports: pinned(0, 100.0/3)}
}

// By hand from the three-moment equation, common practice, no source; the same
// figures as structural/beam checks.
func TestTubeBoom(t *testing.T) {
	a := analysed(t, boom())
	for _, row := range []struct {
		name       string
		got        Number
		want, half float64 // half a unit of the last figure given
	}{
		{"own weight", a.SelfWeight, 148.2, 0.05},
		{"span moment", a.Spans[0].MomentMax.Value, 231.6, 0.05},
		{"overhang moment", a.Spans[1].MomentMin.Value, -411.7, 0.06},
		{"inner reaction", a.Reactions[1].Max, 111.2, 0.05},
		{"span deflection", a.Spans[0].DeflectionMax.Value, 84, 0.5},
		{"tip", a.Spans[1].DeflectionMax.Value, 121, 0.5},
		{"span moment, split", a.Split.Pieces[0].MomentMax.Value, 411.7, 0.06},
		{"inner reaction, split", a.Split.Reactions[1].Max, 98.8, 0.05},
		{"span deflection, split", a.Split.Pieces[0].DeflectionMax.Value, 202, 0.5},
	} {
		closer(t, row.name, row.got, row.want, 1, row.half)
	}
	wantRatio(t, a, "span moment", "span 1", 16.0/9, false)
	wantRatio(t, a, "reaction", "support at 33.333 m", 1/1.125, true)
	wantRatio(t, a, "shear", "span 1", 0.8, true)
	if !a.Split.Unsafe || a.Caution != document.Caution {
		t.Errorf("unsafe %v, caution %q", a.Split.Unsafe, a.Caution)
	}
}

func wantRatio(t *testing.T, a BeamAnswer, effect, where string, want float64, unsafe bool) {
	t.Helper()
	for _, r := range a.Split.Ratios {
		if r.Effect == effect && r.Where == where {
			closer(t, effect, r.Ratio, want, 1, 1e-6)
			if r.Unsafe != unsafe {
				t.Errorf("%s of %s: unsafe %v, want %v", effect, where, r.Unsafe, unsafe)
			}
			return
		}
	}
	t.Errorf("no ratio of %s at %s", effect, where)
}

// With 1.5 kN/m placed by span: 431.3, −620.1 kNm, tip 346 mm exact and 182 split, by
// hand as above.
func TestTubeBoomWithFreeLoad(t *testing.T) {
	r := boom()
	r.Loads = []BeamLoad{{Kind: "uniform", Load: 1.5, Free: true}}
	a := analysed(t, r)
	closer(t, "span", a.Effects.MomentMax.Value, 431.3, 1, 0.05)
	closer(t, "overhang", a.Effects.MomentMin.Value, -620.1, 1, 0.05)
	closer(t, "tip", a.Effects.DeflectionMax.Value, 346, 1, 0.5)
	closer(t, "tip, split", a.Split.Pieces[1].DeflectionMax.Value, 182, 1, 0.5)
	if r := a.Split.Ratios; !a.Split.Unsafe || len(r) == 0 {
		t.Errorf("a tip of 182 mm for 346 mm is unsafe; ratios %+v", r)
	}
}

// The factors of EN 1990 (6.10) on a simple span: 1.35 G + 1.5 Q gives the largest,
// 1.0 G alone the least, deflections stay characteristic. G = 4, Q = 6 kN/m, 8 m: M =
// (1.35·4 + 1.5·6)·8²/8 = 115.2 and 4·8 = 32; δ = 5·10·8⁴/(384·EI).
func TestFactors(t *testing.T) {
	r := BeamRequest{Length: 8, Segments: []BeamSegment{{To: 8, EI: 20000}}, Supports: pinned(0, 8), Basis: "en1993",
		Loads: []BeamLoad{{Kind: "uniform", Nature: "permanent", Load: 4}, {Kind: "uniform", Load: 6}}, Stations: 3}
	a := analysed(t, r)
	closer(t, "moment", a.Effects.MomentMax.Value, 115.2, 1, 1e-9)
	closer(t, "at", a.Effects.MomentMax.Position, 4, 1, 1e-9)
	closer(t, "middle, least", a.Stations[1].MomentMin, 32, 1, 1e-9)
	closer(t, "reaction", a.Reactions[0].Max, 57.6, 1, 1e-9)
	closer(t, "least reaction", a.Reactions[0].Min, 16, 1, 1e-9)
	closer(t, "deflection", a.Effects.DeflectionMax.Value, 5*10*math.Pow(8, 4)/(384*20000)*1e3, 1, 1e-6)
	r.Basis, r.Factors = "", &LoadFactors{Permanent: 1.35, Favourable: 1, Variable: 1.5, Accompanying: 0.7}
	r.Loads = append(r.Loads, BeamLoad{Kind: "uniform", Load: 2})
	// 1.35·4 + 1.5·(6 + 0.7·2) = 16.5 kN/m, with 6 leading.
	closer(t, "leading and accompanying", analysed(t, r).Effects.MomentMax.Value, 16.5*8, 1, 1e-9)
}

// A train of 2 × 100 kN, 2 m apart, on 10 m: M = P/2L·(L − d/2)² = 405 kNm under a
// wheel half a metre from the middle (handbook case, e.g. AISC Manual table 3-23, case
// 44; from memory).
func TestTrain(t *testing.T) {
	a := analysed(t, BeamRequest{Length: 10, Segments: []BeamSegment{{To: 10, EI: 1e5}}, Supports: pinned(0, 10),
		Loads: []BeamLoad{{Label: "trolley", Kind: "train", Wheels: []float64{100, 100}, Spacings: []float64{2}}}})
	closer(t, "moment", a.Effects.MomentMax.Value, 405, 405, 1e-5)
	if len(a.Trains) != 1 {
		t.Fatalf("%d trains", len(a.Trains))
	}
	x := a.Trains[0]
	closer(t, "alone", x.MomentMax.Value, 405, 405, 1e-6)
	if p := float64(x.MomentMax.Position); math.Abs(math.Abs(p-5)-0.5) > 1e-6 || x.Label != "trolley" {
		t.Errorf("stands at %v m, want 4.5 or 5.5", p)
	}
	closer(t, "reaction", x.Reactions[0].Value, 180, 180, 1e-9)
}

// Airy points 0.2113 L and the points of least peak moment 0.2071 L.
func TestPlacement(t *testing.T) {
	for goal, want := range map[string]float64{"parallel ends": 0.2113, "least moment": 0.2071, "least deflection": 0.2232, "least shortening": 0.2203} {
		a := analysed(t, BeamRequest{Length: 10, Segments: []BeamSegment{{To: 10, EI: 1e4, Mass: 100}}, Place: &BeamPlace{Count: 2, Symmetric: true, Goal: goal}})
		closer(t, goal, a.Placement.Positions[0], want*10, 1, 0.001)
		if len(a.Reactions) != 2 || a.Reactions[0].Position != a.Placement.Positions[0] {
			t.Errorf("%s: the answer is not for the member on the supports placed: %+v", goal, a.Reactions)
		}
	}
}

// A settlement δ of the middle of two spans L: M = 3·EI·δ/L² (three-moment equation).
// Springs, guided supports and imposed curvature: a member fixed left and guided right
// under curvature κ bends freely of moment −EI·κ.
func TestSupportsOfEveryKind(t *testing.T) {
	two := BeamRequest{Length: 10, Segments: []BeamSegment{{To: 10, EI: 1e4}}, Supports: pinned(0, 5, 10)}
	two.Supports[1].Settlement = 10
	closer(t, "settlement", analysed(t, two).Effects.MomentMax.Value, 3*1e4*0.010/25, 12, 1e-9)
	guided := BeamRequest{Length: 10, Segments: []BeamSegment{{To: 10, EI: 1e4}},
		Supports: []BeamSupport{{Kind: "fixed"}, {Position: 10, Kind: "guided"}}, Loads: []BeamLoad{{Kind: "curvature", Nature: "permanent", Curvature: 1e-3}}}
	a := analysed(t, guided)
	closer(t, "curvature held", a.Effects.MomentMin.Value, -10, 10, 1e-9)
	if a.Split != nil || !strings.Contains(strings.Join(a.Notes, " "), "no split method") {
		t.Errorf("split %v, notes %v: a guided support cannot be split, and a note says so", a.Split, a.Notes)
	}
	sprung := BeamRequest{Length: 4, Segments: []BeamSegment{{To: 4, EI: 1e9}}, Supports: []BeamSupport{{Kind: "pinned"}, {Position: 4, Kind: "spring", Stiffness: 100}},
		Loads: []BeamLoad{{Kind: "point", Position: 4, Force: 20, Nature: "permanent"}}}
	closer(t, "spring", analysed(t, sprung).Effects.DeflectionMax.Value, 200, 200, 1e-9)
	hinged := BeamRequest{Length: 6, Segments: []BeamSegment{{To: 6, EI: 1e4}}, Supports: []BeamSupport{{Kind: "fixed"}, {Position: 6, Kind: "pinned"}}, Hinges: []float64{2},
		Loads: []BeamLoad{{Kind: "uniform", Nature: "permanent", Load: 3}}}
	closer(t, "hinged, at the wall: 3·4/2·2 + 3·2²/2", analysed(t, hinged).Effects.MomentMin.Value, -18, 18, 1e-9)
}

// Stations rise, hold the extremes and both sides of jumps, and keep to the limit.
func TestStations(t *testing.T) {
	crowd := BeamRequest{Length: 100, Segments: []BeamSegment{{To: 100, EI: 1e6}}, Stations: MaxStations}
	for i := range 51 {
		crowd.Supports = append(crowd.Supports, pinned(2*float64(i))...)
	}
	for i := range MaxLoads {
		crowd.Loads = append(crowd.Loads, BeamLoad{Kind: "point", Nature: "permanent", Position: 0.25 + 0.49*float64(i), Force: 5})
	}
	for name, r := range map[string]BeamRequest{"boom": boom(), "crowd": crowd} {
		a := analysed(t, r)
		if n := len(a.Stations); n > MaxStations || n < 3 {
			t.Errorf("%s: %d stations", name, n)
		}
		found, jump := false, false
		for i, s := range a.Stations {
			found = found || s.MomentMin == a.Effects.MomentMin.Value && s.Position == a.Effects.MomentMin.Position
			if i == 0 {
				continue
			}
			if s.Position < a.Stations[i-1].Position {
				t.Errorf("%s: station %d lies before the one before it", name, i)
			}
			jump = jump || s.Position == a.Stations[i-1].Position && s.ShearMax != a.Stations[i-1].ShearMax
		}
		if !found || !jump || a.Stations[len(a.Stations)-1].Position != Number(r.Length) {
			t.Errorf("%s: extreme %v, jump %v, end %v", name, found, jump, a.Stations[len(a.Stations)-1].Position)
		}
	}
}

// What is asked in JSON and what is answered in JSON: twelve digits, no NaN.
func TestBeamJSON(t *testing.T) {
	var r BeamRequest
	text := `{"length_m": 6, "segments": [{"to_m": 6, "ei_knm2": 17548}], "supports": [{"position_m": 0, "kind": "pinned"}, {"position_m": 6, "kind": "pinned"}],
		"loads": [{"kind": "uniform", "nature": "permanent", "load_kn_m": 12}], "stations": 3}`
	if err := Decode([]byte(text), &r); err != nil {
		t.Fatal(err)
	}
	data, err := json.Marshal(analysed(t, r))
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{`"moment_max_knm":{"value":54,"position_m":3}`, `"max_kn":36`, `"caution":"Concept sizing`} {
		if !strings.Contains(string(data), want) {
			t.Errorf("the answer %s does not hold %s", data, want)
		}
	}
}
