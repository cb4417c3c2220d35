package beam

import (
	"errors"
	"math"
	"testing"
)

// stiffnesses run from 1e-6 to 1e12 N/m (or N.m/rad), ten a decade.
func stiffnesses() []float64 {
	var out []float64
	for i := range 181 {
		out = append(out, math.Pow(10, -6+float64(i)/10))
	}
	return out
}

// A spring goes from no support to a pinned one: the force method by hand,
// R = v0 / (1/k + f), with v0 the deflection without it and f that of a unit
// force there (simple span 5wL⁴/384EI and L³/48EI; cantilever wL⁴/8EI and
// L³/3EI), and the same for a rotational spring at an end (wL³/24EI, L/3EI).
func TestSpringFromFreeToPinned(t *testing.T) {
	const L, EI, w = 8.0, 2.5e7, 6e3
	load := Case{{Kind: Uniform, To: L, Start: w}}
	for _, row := range []struct {
		name   string
		beam   func(k float64) Beam
		v0, f  float64
		of     func(Envelope) float64
		pinned Beam // the limit
	}{
		{"in mid-span", func(k float64) Beam {
			return Prismatic(L, EI, Support{Kind: Pinned}, Support{X: L, Kind: Pinned}, Support{X: L / 2, Kind: Spring, Stiffness: k})
		}, 5 * w * math.Pow(L, 4) / (384 * EI), L * L * L / (48 * EI), func(e Envelope) float64 { return e.Reactions[1].FMax },
			Prismatic(L, EI, Support{Kind: Pinned}, Support{X: L, Kind: Pinned}, Support{X: L / 2, Kind: Pinned})},
		{"under a tip", func(k float64) Beam {
			return Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Spring, Stiffness: k})
		}, w * math.Pow(L, 4) / (8 * EI), L * L * L / (3 * EI), func(e Envelope) float64 { return e.Reactions[1].FMax },
			Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Pinned})},
		{"against turning", func(k float64) Beam {
			return Prismatic(L, EI, Support{Kind: Pinned, RotationalStiffness: k}, Support{X: L, Kind: Pinned})
		}, w * L * L * L / (24 * EI), L / (3 * EI), func(e Envelope) float64 { return -e.Reactions[0].MMin },
			Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Pinned})},
	} {
		full, last := row.v0/row.f, -1.0
		for _, k := range stiffnesses() {
			got := row.of(envelopeOf(t, row.beam(k), load))
			closer(t, row.name, got, row.v0/(1/k+row.f), full, 1e-9)
			if !(got >= last-1e-12*full) {
				t.Errorf("%s: %g N with %g, less than %g with a softer spring", row.name, got, k, last)
			}
			last = got
		}
		closer(t, row.name+", stiff", last, row.of(envelopeOf(t, row.pinned, load)), full, 1e-4)
	}
}

// Where a spring alone holds the member the answer is right or refused as
// ill-conditioned: a soft spring lets the member move farther than its bending
// can be told from rounding.
func TestSpringAlone(t *testing.T) {
	const L, EI, w = 8.0, 2.5e7, 6e3
	solved, refused := 0, 0
	for _, k := range stiffnesses() {
		b := Prismatic(L, EI, Support{Kind: Spring, Stiffness: k}, Support{X: L, Kind: Spring, Stiffness: k})
		r, err := Analyse(b, []Case{{{Kind: Uniform, To: L, Start: w}}})
		var fault *Fault
		if errors.As(err, &fault) && (fault.Kind == FaultCondition || fault.Kind == FaultMechanism) {
			refused++
			if k > 1 {
				t.Errorf("%g N/m is refused: %v", k, err)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		solved++
		e := r.Envelope([]Term{{Case: 0, Factor: 1}})
		closer(t, "moment", e.MomentMax.Value, w*L*L/8, w*L*L/8, 1e-9)
		want := w*L/2/k + 5*w*math.Pow(L, 4)/(384*EI)
		closer(t, "deflection", e.DeflectionMax.Value, want, want, 1e-6)
	}
	if solved < 120 || refused == 0 {
		t.Errorf("%d springs solved, %d refused", solved, refused)
	}
}

// A guided end is the middle of a symmetrical member: half of the fixed and of the
// simple span, w L² / 24, w L² / 8 and their deflections.
func TestGuided(t *testing.T) {
	const L, EI, w = 8.0, 2.5e7, 6e3
	for _, row := range []struct {
		kind               SupportKind
		middle, deflection float64
	}{
		{Fixed, w * L * L / 24, w * math.Pow(L, 4) / (384 * EI)},
		{Pinned, w * L * L / 8, 5 * w * math.Pow(L, 4) / (384 * EI)},
	} {
		e := envelopeOf(t, Prismatic(L/2, EI, Support{Kind: row.kind}, Support{X: L / 2, Kind: Guided}), Case{{Kind: Uniform, To: L / 2, Start: w}})
		closer(t, "moment", e.MomentMax.Value, row.middle, w*L*L/8, 1e-9)
		closer(t, "deflection", e.DeflectionMax.Value, row.deflection, row.deflection, 1e-9)
		if r := e.Reactions[1]; r.FMax != 0 || !(math.Abs(-r.MMin-row.middle) <= 1e-9*w*L*L) {
			t.Errorf("guided reaction %+v, want no force and a couple of %g", r, -row.middle)
		}
	}
	_, err := Analyse(Prismatic(L, EI, Support{Kind: Guided}, Support{X: L, Kind: Guided}), nil)
	var fault *Fault
	if !errors.As(err, &fault) || fault.Kind != FaultMechanism {
		t.Errorf("two guided supports: %v, want a mechanism", err)
	}
	if _, err := Analyse(Prismatic(L, EI, Support{Kind: Fixed}, Support{X: L, Kind: Guided, Settlement: 0.1}), nil); err == nil {
		t.Error("a settling guided support is analysed")
	}
}
