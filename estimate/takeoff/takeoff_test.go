package takeoff

import (
	"strings"
	"testing"

	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

func allowances() Allowances {
	fixed := func(id string, v float64) Allowance { return Allowance{ID: id, Spread: spread.NewFixed(v), Offset: 1} }
	return Allowances{
		SizingBias:  Allowance{ID: "bias", Spread: spread.NewFixed(1)},
		Connections: map[string]Allowance{"simple beams": fixed("c", 0.06), "lattice": fixed("l", 0.15)},
		Bolts:       fixed("b", 0.02), Growth: fixed("g", 0.18),
		Waste: map[string]Allowance{"sections": fixed("ws", 0.07), "tube": fixed("wt", 0.09), "plate": fixed("wp", 0.14)},
	}
}

func beam(mark string, quantity int, length float64) Piece {
	return Piece{Member: schedule.Member{Mark: mark, Group: "Gallery", Quantity: quantity, Length: length, Treatment: schedule.SizeFromFamily, ConnectionClass: "simple beams"},
		Family: "IPE", LineMass: 42.2, Surface: 1.16, Waste: "sections"}
}

// By hand: 10 × 6 m × 42.2 kg/m = 2532 kg; delivered 2532 × 1.06 × 1.18 × 1.02 =
// 3230.346… kg; purchased 2532 × 1.06 × 1.18 × 1.07 = 3388.697… kg.
func TestNetDeliveredPurchasedByHand(t *testing.T) {
	items, err := Count([]Piece{beam("B2", 4, 6), beam("B1", 6, 6)}, allowances())
	if err != nil {
		t.Fatal(err)
	}
	if len(items) != 1 {
		t.Fatalf("got %d items, want 1", len(items))
	}
	it := items[0]
	for _, c := range []struct{ what, got, want string }{
		{"net", it.Net.String(), "2.532"}, {"delivered", it.Delivered.String(), "3.230"}, {"purchased", it.Purchased.String(), "3.389"},
		{"marks", strings.Join(it.Marks, " "), "B1 B2"},
	} {
		if c.got != c.want {
			t.Errorf("%s: got %s, want %s", c.what, c.got, c.want)
		}
	}
	if it.Pieces != 10 || it.Length != 60 {
		t.Errorf("pieces %d, length %g; want 10, 60", it.Pieces, it.Length)
	}
}

func TestRowsByAreaAndByLength(t *testing.T) {
	grating := Piece{Member: schedule.Member{Mark: "G", Quantity: 2, Length: 60, Area: 30, AreaMass: 28.5, Treatment: schedule.ByMass}}
	if got := grating.Net(); got != 1710 {
		t.Errorf("grating: got %g kg, want 2 × 30 m² × 28.5 kg/m² = 1710", got)
	}
	rail := Piece{Member: schedule.Member{Mark: "H", Quantity: 3, Length: 10, Treatment: schedule.ByMass}, LineMass: 14.5}
	if got := rail.Net(); got != 435 {
		t.Errorf("handrail: got %g kg, want 3 × 10 m × 14.5 kg/m = 435", got)
	}
}

func TestItemsAreSplitByWhatDiffers(t *testing.T) {
	given := beam("B2", 1, 6)
	given.Member.Treatment = schedule.CheckSection
	lattice := beam("B3", 1, 6)
	lattice.Member.ConnectionClass = "lattice"
	alone := beam("B4", 1, 6)
	alone.Split = "multiplier of its own"
	items, err := Count([]Piece{beam("B1", 1, 6), given, lattice, alone, beam("B5", 1, 6)}, allowances())
	if err != nil {
		t.Fatal(err)
	}
	if len(items) != 4 {
		t.Fatalf("got %d items, want 4", len(items))
	}
	for _, it := range items {
		bias := it.ToDelivered[0].ID == "bias"
		if bias != (it.Treatment == schedule.SizeFromFamily) {
			t.Errorf("%s: the sizing bias is for sized members only", it.ID)
		}
	}
}

func TestCountNamesTheMark(t *testing.T) {
	p := beam("B7", 1, 6)
	p.Member.ConnectionClass = "welded art"
	if _, err := Count([]Piece{p}, allowances()); err == nil || !strings.Contains(err.Error(), "B7") {
		t.Errorf("unknown connection class: got %v", err)
	}
	p = beam("B8", 1, 6)
	p.Waste = "timber"
	if _, err := Count([]Piece{p}, allowances()); err == nil || !strings.Contains(err.Error(), "B8") {
		t.Errorf("unknown waste: got %v", err)
	}
}
