package resistance

import (
	"math"
	"strings"
	"testing"

	"spanwright/structural/section"
)

// The seam of weak axis, shear along the width, net section and frequency: worked by
// hand from the clause of each check for IPE 300 in S235, n = 1.5.
func TestAllowableOtherEffects(t *testing.T) {
	b := basisOf(t, 1.5)
	for _, tc := range []struct {
		name, id   string
		d          Demand
		resistance float64
		use        float64
	}{
		{"Wel,z·fy/n", BendingZ, Demand{MomentZ: 5e3}, 12611.66667, 5e3 / 12611.66667},
		{"Av,y·fy/√3/n", ShearY, Demand{ShearY: 5e4}, 32.1e-4 * 235e6 / math.Sqrt(3) / 1.5, 5e4 * 1.5 * math.Sqrt(3) / (32.1e-4 * 235e6)},
		{"net section: Anet·fu/(1.2·n)", Axial, Demand{Axial: -1e5, NetAreaFactor: 0.7}, 0.7 * 53.81e-4 * 360e6 / 1.8, 1e5 * 1.8 / (0.7 * 53.81e-4 * 360e6)},
		{"few holes: gross yield", Axial, Demand{Axial: -1e5, NetAreaFactor: 0.95}, 53.81e-4 * 235e6 / 1.5, 1e5 * 1.5 / (53.81e-4 * 235e6)},
		{"frequency", Vibrating, Demand{Frequency: 4, FrequencyFloor: 5}, 4, 1.25},
		{"both axes", Interaction, Demand{Moment: 30e3, MomentZ: 5e3, LateralSpacing: 3}, 1, 30e3/75895.88987 + 5e3/12611.66667},
		{"tension and both axes", Interaction, Demand{Moment: 30e3, MomentZ: 5e3, Axial: -1e5, LateralSpacing: 3}, 1, 1e5*1.5/(53.81e-4*235e6) + 30e3/75895.88987 + 5e3/12611.66667},
		// NEz = π²·E·Iz/L² = 1390.4956 kN (columns.json C001 at 3 m); n·N/NEz = 0.1618128; N/Na = 0.2302783944 with λ = 89.552
		{"compression and weak axis", Interaction, Demand{MomentZ: 5e3, Axial: 150e3, LengthY: 3, LengthZ: 3}, 1, 0.2302783944 + 5e3/12611.66667/(1-0.16181280215)},
	} {
		c, ok := find(b.Explain(&ipe300, s235, &tc.d), tc.id)
		if !ok || !near(c.Resistance, tc.resistance, 1e-8) || !near(c.Utilisation, tc.use, 1e-6) {
			t.Errorf("%s: %s resistance %.10g, utilisation %.10g, want %.10g, %.10g (checked: %v)", tc.name, tc.id, c.Resistance, c.Utilisation, tc.resistance, tc.use, ok)
		}
	}
	for _, id := range []string{BendingZ, ShearY, Vibrating, Interaction} {
		if c, ok := find(b.Explain(&ipe300, s235, &Demand{Moment: 1, Shear: 1, LateralSpacing: 1}), id); ok {
			t.Errorf("%s is checked without its effect: %+v", id, c)
		}
	}
}

func TestAllowableRefusesByName(t *testing.T) {
	b := basisOf(t, 1.5)
	angle, chords := section.Section{Shape: section.Angle, A: 1}, section.Section{Shape: section.ChordSet, A: 1}
	for _, tc := range []struct {
		s    section.Section
		d    Demand
		want string
	}{
		{angle, Demand{Moment: 1, LateralSpacing: 1}, "angles"}, {angle, Demand{MomentZ: 1}, "angles"},
		{chords, Demand{Axial: 1}, "6.4"}, {chords, Demand{MomentZ: 1}, "6.4"},
	} {
		u, id := b.Utilisation(&tc.s, s235, &tc.d)
		checks := b.Explain(&tc.s, s235, &tc.d)
		if Passes(u) || id != NotCovered || len(checks) != 1 || !strings.Contains(checks[0].Note, tc.want) {
			t.Errorf("%v, %+v: %v by %q, %+v, want not covered with %q", tc.s.Shape, tc.d, u, id, checks, tc.want)
		}
	}
}

// An angle buckles about v and by twisting: its strut must carry less than by Rz.
// Class 3 limits of angles, stems and lower flanges: EN 1993-1-1:2005 table 5.2.
func TestAllowableOpenShapes(t *testing.T) {
	named := func(name string) section.Section {
		s, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	b, strut := basisOf(t, 1.5), Demand{Axial: 1e4, LengthY: 3, LengthZ: 3}
	angle := named("L 100x100x10")
	c, _ := find(b.Explain(&angle, s235, &strut), Axial)
	lambda := 3 / angle.Rv
	if want := angle.A * math.Pi * math.Pi * 210e9 / (lambda * lambda) / 1.5; !near(c.Resistance, want, 1e-9) {
		t.Errorf("angle: %v N, want Euler about v, %v N", c.Resistance, want)
	}
	tee, channel := named("TEE 300x200x6x10"), named("CHANNEL 200x80x6x11")
	for _, tc := range []struct {
		s    section.Section
		d    Demand
		want float64
	}{
		{angle, strut, 10 / 11.5}, {tee, Demand{Moment: 1, LateralSpacing: 1}, 290.0 / 6 / 14},
		{channel, Demand{Moment: 1, LateralSpacing: 1}, 74.0 / 11 / 14}, {girder, Demand{Moment: 1, LateralSpacing: 1}, 96.5 / (42 / (0.67 - 0.33*0.402875/0.562125))},
	} {
		if c, _ := find(b.Explain(&tc.s, s235, &tc.d), LocalBuckling); !near(c.Utilisation, tc.want, 1e-5) {
			t.Errorf("%s: (c/t)/limit %v, want %v", tc.s.Designation, c.Utilisation, tc.want)
		}
	}
	if c, ok := find(b.Explain(&channel, s235, &Demand{Moment: 1, LateralSpacing: 12}), LateralBuckling); !ok || c.Resistance >= channel.Wely*235e6/1.5 {
		t.Errorf("channel, 12 m unrestrained: %+v, want buckling sideways under yield", c)
	}
}
