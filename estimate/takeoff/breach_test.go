package takeoff

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// block is one piece of a given size and mass as lifted: the connections of its
// class and the bolts are divided out beforehand.
func block(length, depth, width, kg float64) Piece {
	net := kg / (1 + rollingMargin) / (1.06 * 1.02)
	return Piece{
		Member: schedule.Member{Mark: "P1", Group: "Quay", Quantity: 1, Length: length, Treatment: schedule.CheckSection, ConnectionClass: "simple beams"},
		Family: "WELDED-BOX", Designation: "box", LineMass: net / length, Surface: 1, Depth: depth, Width: width, Thickness: 0.01, Thickest: 0.02, Waste: "sections",
	}
}

func envelopes(list []Breach) []string {
	var out []string
	for _, b := range list {
		out = append(out, b.Envelope+" "+b.Measure+": "+b.Needs)
	}
	return out
}

// The road: 2.55 m wide and 4.0 m high (Directive 96/53/EC, annex I, from memory), 25
// t of load (common practice); in the United States 8.5 ft wide (23 CFR 658.15, from
// memory), 13.5 ft high, 48,000 lb.
func TestPermitLimits(t *testing.T) {
	const ft, lb = 0.3048, 0.45359237
	for _, c := range []struct {
		name       string
		limits     ratebook.Limits
		high, wide float64 // m
		kg         float64
		want       int
	}{
		{"within", ratebook.DefaultLimits(), 4, 2.55, 24_999, 0},
		{"too wide", ratebook.DefaultLimits(), 4, 2.551, 10_000, 1},
		{"too high", ratebook.DefaultLimits(), 4.001, 2.55, 10_000, 1},
		{"turned it fits", ratebook.DefaultLimits(), 2.5, 3.9, 10_000, 0},
		{"too heavy", ratebook.DefaultLimits(), 1, 1, 25_001, 1},
		{"within, US", ratebook.AmericanLimits(), 13.5 * ft, 8.5 * ft, 47_999 * lb, 0},
		{"too wide, US", ratebook.AmericanLimits(), 13.5 * ft, 8.51 * ft, 10_000, 1},
		{"too high, US", ratebook.AmericanLimits(), 13.51 * ft, 8.5 * ft, 10_000, 1},
		{"too heavy, US", ratebook.AmericanLimits(), 1, 1, 48_001 * lb, 1},
	} {
		p := block(10, c.high, c.wide, c.kg)
		s := Settings{Limits: c.limits}
		if got := Permits(p, withNorms(), s); got != c.want {
			t.Errorf("%s: %d permit loads, want %d", c.name, got, c.want)
		}
		it := byID(t, count(t, []Piece{p}, withNorms(), s), "Quay/WELDED-BOX/check/simple beams")
		if got := text(it, ratebook.PermitLoads); got != map[int]string{1: "1"}[c.want] {
			t.Errorf("%s: quantity %q of permit loads", c.name, got)
		}
	}
}

func TestBreachesNameWhatIsNeeded(t *testing.T) {
	for _, c := range []struct {
		name, coating string
		p             Piece
		want          []string
	}{
		{"fits", "hot-dip galvanised", block(12.5, 2.5, 1.8, 19_000), nil},
		{"long", "", block(42, 0.5, 0.5, 19_000), []string{"vehicle length: 3 site splices into 4 pieces of 10.5 m"}},
		{"double dip", "hot-dip galvanised", block(13.2, 1, 1, 5000), []string{"galvanising bath length: double dip"}},
		{"too deep for the bath", "duplex C5", block(12, 2.6, 2, 5000), []string{"galvanising bath width: double dip"}},
		{"far too deep", "hot-dip galvanised", block(5, 5.4, 1.5, 5000), []string{"galvanising bath height: a greater bath, or thermal spraying", "vehicle height: a vehicle with a lower deck", "permit height: permit load; local rules govern"}},
		{"long and wide", "hot-dip galvanised", block(13.6, 1.9, 1.9, 5000), []string{"galvanising bath length: 1 site splice into 2 pieces of 6.8 m, or thermal spraying", "galvanising bath width: a greater bath, or thermal spraying"}},
		{"heavy", "", block(12, 1, 1, 45_010), []string{
			"shop crane mass: 2 site splices into 3 pieces of 4 m, or two cranes together in the shop",
			"site crane mass: 1 site splice into 2 pieces of 6 m, or a crane that lifts 45.1 t at its radius",
			"vehicle mass: 1 site splice into 2 pieces of 6 m, or a vehicle of greater load",
			"permit mass: permit load; local rules govern"}},
		{"not settled", "", block(10, 4.5, 1, 9000), []string{"paint bay height: painting outside the bay, or in parts", "vehicle height: a vehicle with a lower deck", "permit height: permit load; local rules govern"}},
		{"bare", Uncoated, block(10, 4.5, 1, 9000), []string{"vehicle height: a vehicle with a lower deck", "permit height: permit load; local rules govern"}},
		{"wide", "galvanised and painted C4 high", block(10, 4.5, 4.2, 9000), []string{
			"galvanising bath width: a greater bath, or thermal spraying", "galvanising bath height: a greater bath, or thermal spraying",
			"paint bay width: painting outside the bay, or in parts", "paint bay height: painting outside the bay, or in parts",
			"vehicle width: a wide load, or a split along the piece", "vehicle height: a vehicle with a lower deck",
			"permit width: permit load; local rules govern", "permit height: permit load; local rules govern"}},
	} {
		s := limited()
		s.Coating = c.coating
		if diff := cmp.Diff(c.want, envelopes(Breaches([]Piece{c.p}, withNorms(), s))); diff != "" {
			t.Errorf("%s (-want +got):\n%s", c.name, diff)
		}
	}
}

// 1.9 times 12.5 m is 23.75 m; a vehicle for that length is taken.
func TestReachOfTheDoubleDip(t *testing.T) {
	s := limited()
	s.Coating, s.Limits.Vehicle, s.Limits.Permit = "hot-dip galvanised", ratebook.Vehicle{}, ratebook.Vehicle{}
	for length, want := range map[float64]string{23.75: "double dip", 23.8: "1 site splice into 2 pieces of 11.9 m, or thermal spraying", 40: "3 site splices into 4 pieces of 10 m, or thermal spraying"} {
		got := Breaches([]Piece{block(length, 1, 1, 9000)}, withNorms(), s)
		if len(got) != 1 || got[0].Needs != want || got[0].Value != length || got[0].Limit != 12.5 || got[0].Unit != "m" {
			t.Errorf("%g m: %+v, want %q", length, got, want)
		}
	}
}

// What is lifted: 10 × (net · 1.025 · 1.06 · 1.02), one delivered part at a time; of
// counted joints their own mass.
func TestLiftedMassByHand(t *testing.T) {
	a, s := withNorms(), limited()
	p := beam("B1", 10, 6) // 253.2 kg a piece
	if got, want := a.lifted(p, s), 253.2*1.025*1.06*1.02; math.Abs(got-want) > 1e-9 {
		t.Errorf("lifted %g kg, want %g", got, want)
	}
	if got, want := a.lifted(beam("B1", 10, 30), s), 30./3*42.2*1.025*1.06*1.02; math.Abs(got-want) > 1e-9 {
		t.Errorf("part of 10 m: %g kg, want %g", got, want)
	}
	if got, want := a.lifted(jointed(), s), 253.2*1.025+2*(40+6); math.Abs(got-want) > 1e-9 {
		t.Errorf("with counted joints: %g kg, want %g", got, want)
	}
}

// Rows by mass are held by mass and length: 60 m go in 5 parts of 12 m. Of 900 kg/m a
// part is lifted with 10.8 · 1.025 · 1.06 · 1.02 = 11.97 t, of 2300 kg/m with 30.59 t. The
// area without a length is one part of 30 · 1.025 · 1.06 · 1.02 = 33.25 t.
func TestBreachesOfRowsByMass(t *testing.T) {
	row := func(length, perMetre, area float64) Piece {
		m := schedule.Member{Mark: "H1", Group: "Quay", Quantity: 2, Length: length, Treatment: schedule.ByMass, ConnectionClass: "simple beams", LineMass: perMetre}
		if area > 0 {
			m.Area, m.AreaMass = area, 100
		}
		return NewPiece(m, nil)
	}
	s := limited()
	s.Coating = "duplex C5" // bath and bay are no matter of rows by mass
	for _, c := range []struct {
		p       Piece
		want    []string
		permits int
		cranes  string
	}{
		{row(13.6, 900, 0), nil, 0, "0.24"}, // 2 lifts · 1.18 · 0.1
		{row(60, 900, 0), []string{"vehicle length: delivery in 5 parts of 12 m"}, 0, "1.18"},
		{row(60, 2300, 0), []string{
			"shop crane mass: delivery in 10 parts of 6 m, or two cranes together in the shop",
			"vehicle length: delivery in 5 parts of 12 m",
			"vehicle mass: delivery in 10 parts of 6 m, or a vehicle of greater load",
			"permit mass: permit load; local rules govern"}, 10, "1.18"},
		{row(0, 0, 300), []string{
			"shop crane mass: delivery in 2 parts, or two cranes together in the shop",
			"vehicle mass: delivery in 2 parts, or a vehicle of greater load",
			"permit mass: permit load; local rules govern"}, 2, "0.24"},
	} {
		got := envelopes(Breaches([]Piece{c.p}, withNorms(), s))
		if diff := cmp.Diff(c.want, got); diff != "" {
			t.Errorf("%g m of %g kg (-want +got):\n%s", c.p.Member.Length, c.p.Net(), diff)
		}
		items := count(t, []Piece{c.p}, withNorms(), s)
		if got := text(items[0], ratebook.CraneDays); len(items) != 1 || got != c.cranes {
			t.Errorf("%d items, %s crane days; want 1 (no splices), %s", len(items), got, c.cranes)
		}
		if got := Permits(c.p, withNorms(), s); got != c.permits {
			t.Errorf("%d permit loads, want %d", got, c.permits)
		}
	}
}

func TestWhatHasNoEnvelope(t *testing.T) {
	footing := Piece{Member: schedule.Member{Mark: "F1", Quantity: 1, Length: 90, Concrete: 50, Treatment: schedule.ByMass}}
	if got := Breaches([]Piece{footing}, withNorms(), limited()); got != nil || Permits(footing, withNorms(), limited()) != 0 {
		t.Errorf("concrete alone: %+v", got)
	}
	if got := Breaches([]Piece{block(90, 9, 9, 1e6)}, withNorms(), Settings{Coating: "duplex"}); got != nil {
		t.Errorf("limits of 0 are none: %+v", got)
	}
}
