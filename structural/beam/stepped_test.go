package beam

import (
	"fmt"
	"math"
	"testing"
)

// A member of two stiffnesses, EI₁ over a from the fixed end and EI₂ over b = L − a,
// by virtual work (any text on the strength of materials), distances from the tip:
//
//	tip load P:  δ = P·(b³/EI₂ + (L³ − b³)/EI₁)/3
//	uniform w:   δ = w·(b⁴/EI₂ + (L⁴ − b⁴)/EI₁)/8
//	a prop at the tip carries R = δ(w)/δ(1)
func TestStiffnessRatiosUpToAMillion(t *testing.T) {
	const L, a, w, P, EI1 = 9.0, 4.0, 5e3, 12e3, 2e7
	const b = L - a
	for _, ratio := range []float64{1e-6, 1e-3, 0.5, 2, 1e3, 1e6} {
		t.Run(fmt.Sprint(ratio), func(t *testing.T) {
			EI2 := EI1 * ratio
			unit := (b*b*b/EI2 + (L*L*L-b*b*b)/EI1) / 3
			load := w * (math.Pow(b, 4)/EI2 + (math.Pow(L, 4)-math.Pow(b, 4))/EI1) / 8
			segments := []Segment{{To: a, EI: EI1}, {To: L, EI: EI2}}
			free, err := Analyse(Beam{Length: L, Segments: segments, Supports: []Support{{Kind: Fixed}}},
				[]Case{{{Kind: Point, From: L, Start: P}}, {{Kind: Uniform, To: L, Start: w, End: w}}})
			if err != nil {
				t.Fatal(err)
			}
			for c, want := range []float64{P * unit, load} {
				_, _, _, got := free.At(c, L, Left)
				if math.Abs(got-want) > 1e-9*want {
					t.Errorf("tip deflection of case %d: %.15g, want %.15g", c, got, want)
				}
			}
			propped, err := Analyse(Beam{Length: L, Segments: segments, Supports: []Support{{Kind: Fixed}, {X: L, Kind: Pinned}}},
				[]Case{{{Kind: Uniform, To: L, Start: w, End: w}}})
			if err != nil {
				t.Fatal(err)
			}
			if got, want := propped.Reactions(0)[1].F, load/unit; math.Abs(got-want) > 1e-9*w*L {
				t.Errorf("prop: %.15g, want %.15g", got, want)
			}
		})
	}
}
