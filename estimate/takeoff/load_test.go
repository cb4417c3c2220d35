package takeoff

import (
	"math"
	"testing"

	"spanwright/estimate/ratebook"
)

func near(got, want float64) bool { return math.Abs(got-want) <= 1e-9*math.Abs(want) }

// By hand, on a deck of 13.6 × 2.55 m with 2.7 m of height and 25 t:
func TestLoadsByHand(t *testing.T) {
	heavy := beam("B1", 100, 12) // 100 · 12 · 42.2 = 50,640 kg
	light := block(12, 2, 2, 1000)
	light.Member.Mark, light.Member.Quantity, light.Member.Group = "L1", 4, "Light"
	wide := block(10, 2.6, 5, 3000) // 1 across, though 5 m wide: its prism governs
	wide.Member.Mark, wide.Member.Group = "W1", "Wide"
	loads := Loads([]Piece{wide, heavy, light}, withNorms(), limited())
	for i, want := range []Load{
		// mass 50,640 · 1.025 · 1.06 · 1.18 · 1.02 / 25,000 = 2.6489; 17 across and 9 tiers: 1.18 · 1200 / (13.6 · 153) = 0.6805;
		// 2.6489 · 1.35 = 3.58 → 4 vehicles
		{Group: "Gallery", Pieces: 100, ByMass: 50640 * 1.025 * 1.06 * 1.18 * 1.02 / 25000, ByLength: 1.18 * 1200 / (13.6 * 153), ByVolume: 1.18 * 1200 * 0.3 * 0.15 / (13.6 * 2.55 * 2.7), Vehicles: 4, Governing: ByMass},
		// length 48 / 13.6 · 1.18 = 4.165 · 1.35 = 5.62 → 6 vehicles
		{Group: "Light", Pieces: 4, ByMass: 4 * 1000 * 1.18 / 25000, ByLength: 1.18 * 48 / 13.6, ByVolume: 1.18 * 48 * 4 / (13.6 * 2.55 * 2.7), Vehicles: 6, Governing: ByLength},
		// volume 10 · 2.6 · 5 / 93.636 · 1.18 = 1.638 · 1.35 = 2.21 → 3 vehicles, one permit load
		{Group: "Wide", Pieces: 1, ByMass: 3000 * 1.18 / 25000, ByLength: 1.18 * 10 / 13.6, ByVolume: 1.18 * 130 / (13.6 * 2.55 * 2.7), Vehicles: 3, Permits: 1, Governing: ByVolume},
	} {
		got := loads[i]
		if !near(got.ByMass, want.ByMass) || !near(got.ByLength, want.ByLength) || !near(got.ByVolume, want.ByVolume) {
			t.Errorf("%s: by mass %g, length %g, volume %g; want %g, %g, %g", want.Group, got.ByMass, got.ByLength, got.ByVolume, want.ByMass, want.ByLength, want.ByVolume)
		}
		got.ByMass, got.ByLength, got.ByVolume = want.ByMass, want.ByLength, want.ByVolume
		if got != want {
			t.Errorf("got %+v, want %+v", got, want)
		}
	}
}

// The truckloads of the items of a group that is governed by mass sum to its
// vehicles before they are rounded up.
func TestTruckloadsOfItemsAndGroups(t *testing.T) {
	a, s := withNorms(), limited()
	pieces := []Piece{beam("B1", 100, 12), jointed()}
	pieces[1].Member.Mark = "B2"
	sum := 0.0
	for _, it := range count(t, pieces, a, s) {
		if q, ok := it.Quantity(ratebook.Truckloads); ok {
			sum += product(q.Measured, q.Factors)
		}
	}
	if got := Loads(pieces, a, s)[0].ByMass * 1.35; math.Abs(got-sum) > 0.01 { // what rounds to 0.00 loads is left out of the items
		t.Errorf("vehicles of the group %g, of its items %g", got, sum)
	}
}

func TestBulkyItemsGoByLength(t *testing.T) {
	light := block(12, 2, 2, 1000)
	light.Member.Quantity = 4
	it := count(t, []Piece{light}, withNorms(), limited())[0]
	q, _ := it.Quantity(ratebook.Truckloads)
	if q.Value.String() != "5.62" || len(q.Factors) != 2 || q.Factors[0].ID != "g" || q.Factors[1].ID != "load use" { // 48 / 13.6 · 1.18 · 1.35
		t.Errorf("truckloads %s by %v, want 5.62 by growth and the load use", q.Value, q.Factors)
	}
}

func TestLoadsWithoutNorms(t *testing.T) {
	loads := Loads([]Piece{beam("B1", 100, 30)}, allowances(), limited())
	// 126,600 · 1.025 · 1.06 · 1.18 · 1.02 / 25,000 = 6.62 → 7; 2 splices a piece
	if len(loads) != 1 || loads[0].Vehicles != 7 || loads[0].Splices != 200 {
		t.Errorf("%+v, want 7 vehicles and 200 splices", loads)
	}
}
