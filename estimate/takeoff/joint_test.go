package takeoff

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

func jointed() Piece {
	p := beam("B1", 3, 6)
	p.Member.Joints = []schedule.Joint{{Kind: schedule.JointMoment, Count: 2}}
	return p
}

// By hand: 3 pieces with 2 joints of 40 kg plates, 6 kg bolts, 5 h in the shop, 2 h on
// site each.
func TestCountedJointsByHand(t *testing.T) {
	items := count(t, []Piece{jointed()}, withNorms(), limited())
	if len(items) != 3 {
		t.Fatalf("got %d items, want steel, plates, bolts", len(items))
	}
	steel := byID(t, items, "Gallery/IPE/size/counted joints")
	for _, q := range steel.Quantities {
		for _, f := range q.Factors {
			if f.ID == "c" || f.ID == "b" {
				t.Errorf("%s of the steel has the allowance %s, which the joints replace", q.Driver, f.ID)
			}
		}
	}
	if steel.Connection != CountedJoints || steel.Delivered.String() != "0.896" { // 3 · 6 · 42.2 · 1.18 = 896.33 kg
		t.Errorf("steel: class %s, delivered %s", steel.Connection, steel.Delivered)
	}
	plates := byID(t, items, "Gallery/moment/joint")
	if diff := cmp.Diff(map[ratebook.Driver]string{
		ratebook.DeliveredTonnes: "0.283", // 6 · 40 · 1.18 = 283.2 kg
		ratebook.PurchasedTonnes: "0.323", // · 1.14 = 322.85 kg
		ratebook.Pieces:          "6",
		ratebook.ShopHours:       "35.4", // 6 · 5 · 1.18
		ratebook.SiteHours:       "14.2", // 6 · 2 · 1.18 = 14.16
		ratebook.Truckloads:      "0.02", // 283.2 / 25000 · 1.35 = 0.0153
		ratebook.TonneKilometres: "42.5", // 0.2832 · 150
		ratebook.Weeks:           "0.06", // 14.16 / 240 = 0.059
	}, quantities(plates)); diff != "" {
		t.Errorf("plates (-want +got):\n%s", diff)
	}
	if plates.Net.String() != "0.000" || plates.Treatment != Joint || plates.Pieces != 0 {
		t.Errorf("plates: net %s, treatment %s, %d pieces of the schedule", plates.Net, plates.Treatment, plates.Pieces)
	}
	bolts := byID(t, items, "Gallery/moment bolts/joint")
	if bolts.Delivered.String() != "0.042" || bolts.Purchased.String() != "0.000" || text(bolts, ratebook.ShopHours) != "" { // 6 · 6 · 1.18 = 42.48 kg
		t.Errorf("bolts: delivered %s, purchased %s", bolts.Delivered, bolts.Purchased)
	}
}

func TestHoursOfSteelBetweenCountedJoints(t *testing.T) {
	a := withNorms()
	steel := byID(t, count(t, []Piece{jointed()}, a, limited()), "Gallery/IPE/size/counted joints")
	if got := text(steel, ratebook.ShopHours) + text(steel, ratebook.Weeks); got != "" {
		t.Errorf("without a norm for counted joints the steel has hours: %s", got)
	}
	a.Norms.ShopHours[CountedJoints] = fixed("cut and drill", 5, 0)
	steel = byID(t, count(t, []Piece{jointed()}, a, limited()), "Gallery/IPE/size/counted joints")
	if got := text(steel, ratebook.ShopHours); got != "4.5" { // 0.89633 t · 5 h/t
		t.Errorf("shop hours %s, want 4.5", got)
	}
}

// A book without norms keeps the allowance of the connection class.
func TestBookWithoutNormsCountsNoJoints(t *testing.T) {
	items := count(t, []Piece{jointed()}, allowances(), limited())
	if len(items) != 1 || items[0].ID != "Gallery/IPE/size/simple beams" || items[0].Delivered.String() != "0.969" { // 759.6 · 1.06 · 1.18 · 1.02 = 969.11
		t.Errorf("items %+v", items)
	}
}

// A piece of 30 m goes on vehicles of 13.6 m in 3 parts of 10 m with 2 site splices;
// one that the row counts already is not counted twice.
func TestSiteSplicesOfLongPieces(t *testing.T) {
	long, ready := beam("B1", 4, 30), beam("B2", 4, 30)
	ready.Member.Joints = []schedule.Joint{{Kind: schedule.JointSiteSplice, Count: 1}}
	s := limited()
	if n, k := Parts(long, s), Splices(long, s); n != 3 || k != 8 {
		t.Errorf("%d parts, %d splices; want 3, 8", n, k)
	}
	items := count(t, []Piece{long, ready}, withNorms(), s)
	it := byID(t, items, "Gallery/site splice/joint")
	q, _ := it.Quantity(ratebook.Pieces)
	if q.Value.String() != "16" || !cmp.Equal(q.Fixed, []string{SplicesID, VehicleID}) || !strings.Contains(q.Formula, "12 of them") { // 8 + 4 counted + 4 missing
		t.Errorf("splices %s by %v, %q; want 16, 12 of them by default", q.Value, q.Fixed, q.Formula)
	}
	if got := text(byID(t, items, "Gallery/IPE/size/simple beams"), ratebook.CraneDays); got != "1.42" { // 4 · 3 lifts · 1.18 · 0.1 = 1.416
		t.Errorf("crane days %s, want 1.42", got)
	}
	if items := count(t, []Piece{long}, allowances(), s); len(items) != 1 {
		t.Errorf("a book without norms has %d items, want 1: splices are counted, not priced", len(items))
	}
}

func TestPartsByStockAndVehicle(t *testing.T) {
	row := Piece{Member: schedule.Member{Quantity: 1, Length: 60, Treatment: schedule.ByMass}}
	for _, c := range []struct {
		p       Piece
		stock   []float64
		vehicle float64
		want    int
	}{
		{beam("B", 1, 13.6), nil, 13.6, 1}, {beam("B", 1, 13.601), nil, 13.6, 2}, {beam("B", 1, 27.2), nil, 13.6, 2},
		{beam("B", 1, 13), []float64{6, 12}, 13.6, 1}, {beam("B", 1, 15), []float64{15.1}, 13.6, 2}, {beam("B", 1, 15), []float64{15.1}, 0, 1},
		{beam("B", 1, 500), nil, 0, 1}, {row, []float64{12}, 13.6, 5},
	} {
		s := Settings{Stock: c.stock}
		s.Limits.Vehicle.Length = c.vehicle
		if got := Parts(c.p, s); got != c.want {
			t.Errorf("%g m, stock %v, vehicle %g m: %d parts, want %d", c.p.Member.Length, c.stock, c.vehicle, got, c.want)
		}
	}
}

// Out of bars of at most 12 m, a piece of 13 m on a vehicle of 13.6 m has one butt
// joint made in the shop; one of 26 m goes in 2 parts with one each, and one site
// splice. Rows by mass, flats and welded sections are not cut from bars.
func TestShopJoints(t *testing.T) {
	s := limited()
	s.Stock = []float64{6, 12}
	welded := beam("W1", 3, 13)
	welded.Weld = 0.8
	for _, c := range []struct {
		p               Piece
		joints, splices int
	}{
		{beam("B1", 3, 12), 0, 0}, {beam("B1", 3, 13), 3, 0}, {beam("B1", 3, 26), 6, 3}, {beam("B1", 3, 20), 0, 3}, {welded, 0, 0},
	} {
		if got, splices := ShopJoints(c.p, s), Splices(c.p, s); got != c.joints || splices != c.splices {
			t.Errorf("%s of %g m: %d joints in the shop, %d on site; want %d, %d", c.p.Member.Mark, c.p.Member.Length, got, splices, c.joints, c.splices)
		}
	}
	a, pieces := withNorms(), []Piece{beam("B1", 3, 13)}
	if items := count(t, pieces, a, s); len(items) != 1 {
		t.Errorf("without a norm: %d items, want the steel alone", len(items))
	}
	a.Norms.Joints[ShopSplice] = JointAllowances{Mass: fixed("kg", 0, 0), Bolts: fixed("bolts", 0, 0), ShopHours: fixed("h", 4, 0), SiteHours: fixed("site", 0, 0)}
	it := byID(t, count(t, pieces, a, s), "Gallery/shop splice/joint")
	if diff := cmp.Diff(map[ratebook.Driver]string{ratebook.Pieces: "3", ratebook.ShopHours: "14.2"}, quantities(it)); diff != "" { // 3 · 4 · 1.18 = 14.16 h
		t.Errorf("with a norm (-want +got):\n%s", diff)
	}
	if q, _ := it.Quantity(ratebook.Pieces); !strings.HasSuffix(q.Formula, "3 of them because pieces are longer than the longest stock") {
		t.Errorf("formula %q", q.Formula)
	}
}
