package takeoff

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/structural/section"
)

func quantities(it Item) map[ratebook.Driver]string {
	out := map[ratebook.Driver]string{}
	for _, q := range it.Quantities {
		out[q.Driver] = q.Value.String()
	}
	return out
}

// By hand for ten IPE 300 (EN 10365: 42.2 kg/m, 1.16 m²/m, web 7.1, flange 10.7 mm)
// of 6 m under the norms of withNorms.
func TestQuantitiesByHand(t *testing.T) {
	s := limited()
	s.Coating = "hot-dip galvanised"
	items := count(t, []Piece{beam("B1", 10, 6)}, withNorms(), s)
	want := map[ratebook.Driver]string{
		ratebook.NetTonnes:       "2.532", // 10 · 6 · 42.2 = 2532 kg
		ratebook.DeliveredTonnes: "3.230", // · 1.06 · 1.18 · 1.02 = 3230.366 kg
		ratebook.PurchasedTonnes: "3.389", // 2532 · 1.06 · 1.18 · 1.07 = 3388.717 kg
		ratebook.Metres:          "60.00",
		ratebook.Pieces:          "10",
		ratebook.SquareMetres:    "87.06", // 60 · 1.16 · 1.06 · 1.18 = 87.056
		ratebook.ZincKilograms:   "53.1",  // 87.056 m² · 610 g/m², both plates over 6 mm = 53.104 kg
		ratebook.ShopHours:       "38.8",  // 3.230366 · 12 = 38.764
		ratebook.SiteHours:       "29.1",  // 3.230366 · 9 = 29.073
		ratebook.Truckloads:      "0.18",  // 3.230366 · 1.025 / 25 · 1.35 = 0.1788; by length 60 / (13.6 · 17 · 9) = 0.029
		ratebook.TonneKilometres: "484.6", // 3.230366 · 150 = 484.555
		ratebook.CraneDays:       "1.18",  // 10 lifts · 1.18 · 0.1
		ratebook.Weeks:           "0.12",  // 29.073 / (6 · 40) = 0.1211
	}
	if diff := cmp.Diff(want, quantities(items[0])); diff != "" {
		t.Errorf("quantities (-want +got):\n%s", diff)
	}
}

func TestWhatIsNotPainted(t *testing.T) {
	for coating, want := range map[string][2]string{
		"":                   {"87.06", ""}, // not settled: the rates say what becomes of it
		Uncoated:             {"", ""},
		"C4 high":            {"87.06", ""},
		"duplex C5 high":     {"87.06", "53.1"},
		"Hot-Dip Galvanized": {"87.06", "53.1"},
	} {
		p := beam("B1", 10, 6)
		p.Member.Coating = coating
		it := count(t, []Piece{p}, withNorms(), limited())[0]
		if got := [2]string{text(it, ratebook.SquareMetres), text(it, ratebook.ZincKilograms)}; got != want {
			t.Errorf("%q: m² and kg of zinc %v, want %v", coating, got, want)
		}
	}
}

// ISO 1461:2009, table 3: mean coating mass 325 g/m² below 1.5 mm, 395 to 3 mm, 505
// to 6 mm, 610 above (from memory).
func TestZincByThickness(t *testing.T) {
	n := withNorms().Norms
	for _, c := range []struct{ thin, thick, want float64 }{
		{0.001, 0.001, 325}, {0.003, 0.003, 395}, {0.0031, 0.0031, 505}, {0.006, 0.006, 505}, {0.0061, 0.0061, 610},
		{0.0056, 0.0085, (505. + 610) / 2}, // IPE 200: web 5.6, flange 8.5 mm
	} {
		if got, _ := n.zinc(Piece{Thickness: c.thin, Thickest: c.thick}); got != c.want {
			t.Errorf("%g to %g m: %g g/m², want %g", c.thin, c.thick, got, c.want)
		}
	}
	n.Zinc = n.Zinc[:1]
	if got, ids := n.zinc(Piece{Thickness: 0.01, Thickest: 0.01}); got != 0 || ids != nil {
		t.Errorf("beyond the norms: %g g/m² by %v, want none", got, ids)
	}
}

// By hand: 3 · 10 m · 14.5 kg/m = 0.435 t · 30 m²/t · 1.18 = 15.399 m², as much as a plate
// of 2000 / (30 · 7850) m = 8.5 mm has: · 610 g/m² = 9.39 kg. 2 · 2 · 30 m² · 1.18 = 141.6 m²;
// 28.5 kg/m² are a plate of 3.6 mm: · 505 g/m² = 71.5 kg.
func TestSurfaceOfRowsByMass(t *testing.T) {
	rail := NewPiece(schedule.Member{Mark: "H1", Group: "Quay", Kind: "handrail", Quantity: 3, Length: 10, LineMass: 14.5, Treatment: schedule.ByMass, ConnectionClass: "simple beams", Coating: "hot-dip galvanised"}, nil)
	grating := NewPiece(schedule.Member{Mark: "G1", Group: "Quay", Kind: "grating", Quantity: 2, Area: 30, AreaMass: 28.5, Treatment: schedule.ByMass, ConnectionClass: "simple beams", Coating: "hot-dip galvanised"}, nil)
	ready, bare := rail, grating
	ready.Member.ConnectionClass, bare.Member.Coating = ReadyMade, Uncoated
	known := withNorms()
	known.Connections[ReadyMade] = fixed("none", 0, 1)
	known.Norms.ShopHours[ReadyMade], known.Norms.SiteHours[ReadyMade] = fixed("hn", 8, 0), fixed("sn", 8, 0)
	without := withNorms()
	without.Norms.RowSurface = nil
	for _, c := range []struct {
		name string
		p    Piece
		a    Allowances
		want [2]string
	}{
		{"by metre", rail, known, [2]string{"15.40", "9.4"}}, {"by area", grating, known, [2]string{"141.60", "71.5"}},
		{"ready-made", ready, known, [2]string{}}, {"bare", bare, known, [2]string{}},
		{"book without the norm", rail, without, [2]string{}}, {"book without norms", grating, allowances(), [2]string{}},
	} {
		it := count(t, []Piece{c.p}, c.a, limited())[0]
		if got := [2]string{text(it, ratebook.SquareMetres), text(it, ratebook.ZincKilograms)}; got != c.want {
			t.Errorf("%s: m² and kg of zinc %q, want %q", c.name, got, c.want)
		}
	}
}

// Where corners are concentric the area of a tube is its wall times the mean of both
// perimeters, so that the inner one is 2 A / t less the outer one (closed form).
func TestInsideOfClosedSections(t *testing.T) {
	for name, want := range map[string]float64{
		"CHS 508x25.4": 2, "RHS 200x100x8": 2, "SHS 100x5": 2, "2x CHS 114.3x5 @ 800": 2,
		"WELDED-BOX 600x400x12x20": 2 * (0.56 + 0.376), "IPE 300": 0, "2x UPN 200 @ 600": 0, "FLAT 100x10": 0,
	} {
		sec, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		if want == 2 {
			want = 2*sec.A/sec.Tw - sec.Perimeter
		}
		if got := NewPiece(schedule.Member{}, &sec).Inside; !(math.Abs(got-want) <= 1e-9) {
			t.Errorf("%s: %g m inside, want %g", name, got, want)
		}
	}
}

// Zinc is on both faces of a tube, paint on one: (π · 0.508 + π · 0.4572) · 10 m · 610 g/m² ·
// 1.06 · 1.18 = 23.1 kg; π · 0.508 · 10 · 1.06 · 1.18 = 19.96 m².
func TestZincInsideTubes(t *testing.T) {
	sec, err := section.Find("CHS 508x25.4")
	if err != nil {
		t.Fatal(err)
	}
	p := NewPiece(schedule.Member{Mark: "T1", Group: "Quay", Quantity: 1, Length: 10, Treatment: schedule.CheckSection, ConnectionClass: "simple beams", Coating: "duplex C5"}, &sec)
	it := count(t, []Piece{p}, withNorms(), limited())[0]
	if m2, kg := text(it, ratebook.SquareMetres), text(it, ratebook.ZincKilograms); m2 != "19.96" || kg != "23.1" {
		t.Errorf("%s m², %s kg of zinc; want 19.96, 23.1", m2, kg)
	}
}

func TestHaulOfTheJobOrTheBook(t *testing.T) {
	s := limited()
	s.Haul = 80
	it := count(t, []Piece{beam("B1", 10, 6)}, withNorms(), s)[0]
	q, _ := it.Quantity(ratebook.TonneKilometres)
	if q.Value.String() != "258.4" || !cmp.Equal(q.Fixed, []string{HaulInputID}) { // 3.230366 · 80 = 258.43
		t.Errorf("job's haul: %s by %v", q.Value, q.Fixed)
	}
	q, _ = count(t, []Piece{beam("B1", 10, 6)}, withNorms(), limited())[0].Quantity(ratebook.TonneKilometres)
	if q.Fixed != nil || q.Factors[len(q.Factors)-1].ID != "haul" {
		t.Errorf("book's haul: fixed %v, factors %v", q.Fixed, q.Factors)
	}
}

func TestConcreteByHand(t *testing.T) {
	footing := Piece{Member: schedule.Member{Mark: "F1", Group: "Quay", Kind: schedule.KindFoundation, Quantity: 4, Treatment: schedule.ByMass, Concrete: 2.25, ConnectionClass: "simple beams"}, Family: "foundation", Waste: "sections"}
	anchored := footing
	anchored.Member.Mark, anchored.Member.LineMass, anchored.LineMass, anchored.Member.Length = "F2", 20, 20, 1.5
	items := count(t, []Piece{footing, anchored}, withNorms(), limited())
	it := byID(t, items, "Quay/concrete/concrete")
	if got := text(it, ratebook.CubicMetres); got != "18.00" || len(it.Quantities) != 1 { // 2 · 4 · 2.25 m³
		t.Errorf("concrete %s m³ of %d quantities, want 18.00 alone", got, len(it.Quantities))
	}
	if it.Pieces != 4 || it.Net.String() != "0.000" || it.Treatment != Concrete {
		t.Errorf("pieces %d, net %s, treatment %s", it.Pieces, it.Net, it.Treatment)
	}
	if steel := byID(t, items, "Quay/foundation/not sized/simple beams"); steel.Pieces != 4 || steel.Net.String() != "0.120" { // 4 · 1.5 · 20 kg
		t.Errorf("steel of foundations: %d pieces, %s t", steel.Pieces, steel.Net)
	}
}

// Fillets along a welded I of web 10 mm: 4 of throat 5 mm, 4 · 25 mm² · 7850 kg/m³ =
// 0.785 kg/m; one of web 5 mm has the least throat of 3 mm: 4 · 9 · 7850 = 0.2826.
func TestWeldMetalByHand(t *testing.T) {
	for name, want := range map[string]string{"WELDED-I 500x200x10x16": "18.5", "WELDED-I 300x150x5x8": "6.7", "WELDED-BOX 600x400x12x20": "26.7", "IPE 300": "", "CHS 508x16 EN 10219": ""} {
		sec, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		p := NewPiece(schedule.Member{Mark: "G1", Group: "Quay", Quantity: 2, Length: 10, Treatment: schedule.CheckSection, ConnectionClass: "simple beams"}, &sec)
		it := count(t, []Piece{p}, withNorms(), limited())[0]
		if got := text(it, ratebook.WeldKilograms); got != want { // 20 m · kg/m · 1.18 growth
			t.Errorf("%s: %q kg, want %q", name, got, want)
		}
	}
}

func TestPieceOfASection(t *testing.T) {
	member := schedule.Member{Mark: "B1", Grade: "S355", Treatment: schedule.CheckSection}
	for name, want := range map[string]Piece{
		"IPE 300":                       {Family: "IPE", Depth: 0.3, Width: 0.15, Thickness: 0.0071, Thickest: 0.0107, Waste: ratebook.WasteSections},
		"CHS 508x25.4":                  {Family: "CHS", Inside: math.Pi * 0.4572, Depth: 0.508, Width: 0.508, Thickness: 0.0254, Thickest: 0.0254, Waste: ratebook.WasteTube},
		"FLAT 100x10":                   {Family: "FLAT", Depth: 0.1, Width: 0.01, Thickness: 0.01, Thickest: 0.01, Waste: ratebook.WastePlate},
		"WELDED-I 500x200x10x16x300x20": {Family: "WELDED-I", Depth: 0.5, Width: 0.3, Thickness: 0.01, Thickest: 0.02, Waste: ratebook.WasteSections},
	} {
		sec, err := section.Find(name)
		if err != nil {
			t.Fatal(err)
		}
		got := NewPiece(member, &sec)
		want.Member, want.Designation, want.Grade, want.LineMass, want.Surface, want.Weld = member, sec.Designation, "S355", sec.Mass, sec.Perimeter, got.Weld
		if diff := cmp.Diff(want, got, cmp.Comparer(near)); diff != "" {
			t.Errorf("%s (-want +got):\n%s", name, diff)
		}
	}
	row := NewPiece(schedule.Member{Kind: "grating", AreaMass: 28.5, Treatment: schedule.ByMass}, nil)
	if row.Family != "grating" || row.Waste != ratebook.WastePlate || row.Designation != "" {
		t.Errorf("row by area: %+v", row)
	}
}
