package calculator

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"testing"
)

// sane fails unless a calculator refused with faults or answered numbers alone.
func sane(t *testing.T, answer any, err error) {
	t.Helper()
	var f Faults
	switch {
	case err == nil:
	case errors.As(err, &f) && len(f) > 0:
		return
	default:
		t.Fatalf("error %v, want faults", err)
	}
	data, err := json.Marshal(answer) // refuses NaN and infinity
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Contains(data, []byte(`"caution":"Concept`)) {
		t.Fatalf("no caution in %s", data)
	}
}

// FuzzJSON gives any text to every calculator.
func FuzzJSON(f *testing.F) {
	for _, seed := range []any{simple(), boom(), sizedRequest(), SectionRequest{Designation: "IPE 300"}, SectionRequest{Family: "CHS", Dimensions: []float64{500, 20}},
		ResistanceRequest{Section: "IPE 300", Grade: "S355", Basis: Basis{DesignBasis: "aisc-lrfd"}, Demand: ResistanceDemand{Moment: 50, Axial: 5, LateralSpacing: 3, LengthY: 4}},
		ArrangementsRequest{Length: 20, Kinds: []string{"equal spans"}, Steel: Steel{Candidates: []string{"CHS 508x25.4", "CHS 323.9x10"}, Grade: "S355", Basis: Basis{DesignBasis: "allowable"}}}} {
		data, err := json.Marshal(seed)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(data)
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		var b BeamRequest
		if Decode(data, &b) == nil {
			a, err := Beam(b)
			sane(t, a, err)
		}
		var s SectionRequest
		if Decode(data, &s) == nil {
			a, err := Section(s)
			sane(t, a, err)
		}
		var r ResistanceRequest
		if Decode(data, &r) == nil {
			a, err := Resistance(r)
			sane(t, a, err)
		}
		var z SizingRequest
		if Decode(data, &z) == nil {
			a, err := Size(z)
			sane(t, a, err)
		}
		var g ArrangementsRequest
		if Decode(data, &g) == nil && len(g.Kinds) < 3 {
			a, err := Arrangements(context.Background(), g)
			sane(t, a, err)
		}
	})
}

var kindsOfLoad = []string{"uniform", "linear", "point", "moment", "curvature", "train"}

// FuzzBeam gives any numbers to the beam calculator: supports, stiffnesses, places and
// sizes of loads.
func FuzzBeam(f *testing.F) {
	f.Add(10.0, 0.0, 10.0, 1e4, 5.0, 2.0, 8.0, uint8(0), uint8(0), false)
	f.Add(10.0, 3.0, 9.0, 1e-3, -5e8, 0.0, 10.0, uint8(5), uint8(2), true)
	f.Add(1e-3, 0.0, 1e-3, 1e15, 1e9, 0.0, 1e-4, uint8(4), uint8(3), false)
	f.Add(1e4, 0.0, 1e4, 1e-9, 1e9, 0.0, 1e4, uint8(1), uint8(1), true)
	f.Add(nan, inf, -inf, nan, inf, nan, 0.0, uint8(2), uint8(0), false)
	f.Fuzz(func(t *testing.T, length, x1, x2, stiffness, size, from, to float64, kind, held uint8, free bool) {
		kinds := []string{"pinned", "fixed", "spring", "guided"}
		r := BeamRequest{Length: length, Segments: []BeamSegment{{To: length / 2, EI: stiffness}, {To: length, EI: 2 * stiffness, Mass: 50}}, Stations: 11,
			Supports: []BeamSupport{{Position: x1, Kind: kinds[held%4]}, {Position: x2, Kind: "pinned", Settlement: from}}}
		if held%4 == 2 {
			r.Supports[0].Stiffness = stiffness
		}
		l := BeamLoad{Kind: kindsOfLoad[kind%6], Free: free && kind%6 == 0}
		switch l.Kind {
		case "point":
			l.Position, l.Force = from, size
		case "moment":
			l.Position, l.Moment = from, size
		case "train":
			l.Wheels, l.Spacings = []float64{size, size / 2}, []float64{to}
		case "curvature":
			l.From, l.To, l.Curvature = from, to, size
		default:
			l.From, l.To, l.Load = from, to, size
			if l.Kind == "linear" {
				l.EndLoad = -size
			}
		}
		r.Loads = []BeamLoad{l, {Kind: "uniform", Nature: "permanent", Load: 1}}
		a, err := Beam(r)
		sane(t, a, err)
	})
}

// FuzzResistance gives any demand to every basis, on one section of each shape.
func FuzzResistance(f *testing.F) {
	f.Add(50.0, 20.0, 100.0, 3.0, 6.0, 1.0, 1.0, uint8(0), uint8(1))
	f.Add(-1e9, 1e9, -1e9, 1e-9, 1e4, 0.1, 0.01, uint8(3), uint8(2))
	f.Add(nan, inf, 0.0, 0.0, 0.0, 0.0, 0.0, uint8(5), uint8(3))
	shapes := []string{"IPE 300", "CHS 508x25.4", "SHS 100x5", "UPN 200", "L 100x100x10", "TEE 150x200x10x15", "WELDED-I 900x300x10x20x400x25", "WELDED-BOX 600x400x12x20", "ROUND 50", "FLAT 100x10", "2x UPN 200 @ 600"}
	f.Fuzz(func(t *testing.T, moment, shear, axial, spacing, length, factor, net float64, shape, basis uint8) {
		a, err := Resistance(ResistanceRequest{Section: shapes[int(shape)%len(shapes)], Grade: "S355", Basis: Basis{DesignBasis: bases[basis%4]},
			Demand: ResistanceDemand{Moment: moment, Shear: shear, Axial: axial, LateralSpacing: spacing, LengthY: length, MomentFactor: factor, NetAreaFactor: net,
				MomentZ: moment / 7, ShearY: shear / 3}})
		sane(t, a, err)
	})
}
