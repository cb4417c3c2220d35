package takeoff

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/assumption"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// By hand: 10 × 6 m × 42.2 kg/m = 2532 kg; delivered 2532 × 1.06 × 1.18 × 1.02 =
// 3230.366… kg; purchased 2532 × 1.06 × 1.18 × 1.07 = 3388.717… kg; surface 60 × 1.16 × 1.18
// = 82.128 m².
func TestNetDeliveredPurchasedByHand(t *testing.T) {
	items := count(t, []Piece{beam("B2", 4, 6), beam("B1", 6, 6)}, allowances(), limited())
	if len(items) != 1 {
		t.Fatalf("got %d items, want 1", len(items))
	}
	it := items[0]
	for _, c := range []struct{ what, got, want string }{
		{"net", it.Net.String(), "2.532"}, {"delivered", it.Delivered.String(), "3.230"}, {"purchased", it.Purchased.String(), "3.389"},
		{"marks", strings.Join(it.Marks, " "), "B1 B2"}, {"metres", text(it, ratebook.Metres), "60.00"}, {"pieces", text(it, ratebook.Pieces), "10"},
		{"surface", text(it, ratebook.SquareMetres), "82.13"}, {"hours without norms", text(it, ratebook.ShopHours), ""},
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
	rows := []Piece{beam("B1", 1, 6), beam("B2", 1, 6), beam("B3", 1, 6), beam("B4", 1, 6), beam("B5", 1, 6), beam("B6", 1, 6), beam("B7", 1, 6)}
	rows[1].Member.Treatment = schedule.CheckSection
	rows[2].Member.ConnectionClass = "lattice"
	rows[3].Split = "multiplier of its own"
	rows[4].Member.Coating, rows[4].Member.ExecutionClass = "C5 high", schedule.EXC3
	rows[5].Member.Coating, rows[5].Member.ExecutionClass = "C4 high", schedule.EXC2 // those of the job
	s := limited()
	s.Coating, s.Execution = "C4 high", schedule.EXC2
	got := map[string]string{}
	for _, it := range count(t, rows, allowances(), s) {
		got[it.ID] = strings.Join(it.Marks, " ") + " | " + it.Coating + " | " + it.Execution
		q, _ := it.Quantity(ratebook.DeliveredTonnes)
		if bias := q.Factors[0].ID == "bias"; bias != (it.Treatment == string(schedule.SizeFromFamily)) {
			t.Errorf("%s: the sizing bias is for sized members only", it.ID)
		}
	}
	want := map[string]string{
		"Gallery/IPE/size/simple beams":                                "B1 B6 B7 | C4 high | EXC2",
		"Gallery/IPE/check/simple beams":                               "B2 | C4 high | EXC2",
		"Gallery/IPE/size/lattice":                                     "B3 | C4 high | EXC2",
		"Gallery/IPE/size/simple beams/B4":                             "B4 | C4 high | EXC2",
		"Gallery/IPE/size/simple beams/coating C5 high/execution EXC3": "B5 | C5 high | EXC3",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("items (-want +got):\n%s", diff)
	}
}

// firstID is the rule of ids of the first engine version, kept here so that ids of
// jobs that it estimated can be held against it.
func firstID(p Piece) string {
	parts := []string{p.Member.Group, p.Family, string(p.Member.Treatment), p.Member.ConnectionClass}
	if p.Member.AreaMass > 0 {
		parts = append(parts, "by area")
	}
	if p.Split != "" {
		parts = append(parts, p.Member.Mark)
	}
	for i, s := range parts {
		parts[i] = assumption.Segment(s)
	}
	return strings.Join(parts, "/")
}

func TestIDsOfEarlierJobsStay(t *testing.T) {
	pieces := randomPieces(t, 7, 300)
	want, got := map[string]string{}, map[string]string{}
	for i := range pieces {
		m := &pieces[i].Member
		m.Joints, m.Concrete, m.Coating, m.ExecutionClass = nil, 0, "", "" // the columns that there were not
		want[m.Mark] = firstID(pieces[i])
	}
	for _, it := range count(t, pieces, allowances(), limited()) {
		for _, mark := range it.Marks {
			got[mark] = it.ID
		}
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("ids (-want +got):\n%s", diff)
	}
}

func TestCountNamesEveryMark(t *testing.T) {
	rows := []Piece{beam("B9", 1, 6), beam("B7", 1, 6), beam("B8", 1, 6), beam("B6", 1, 6)}
	rows[0].Member.Joints = []schedule.Joint{{Kind: "glued", Count: 1}}
	rows[1].Member.ConnectionClass = "welded art"
	rows[2].Waste = "timber"
	_, err := Count(rows, withNorms(), limited())
	var faults *FaultsError
	if !errors.As(err, &faults) {
		t.Fatalf("got %v, want faults", err)
	}
	var got []string
	for _, f := range faults.Faults {
		got = append(got, f.Mark+": "+f.Problem)
		if f.Remedy == "" {
			t.Errorf("%s: no remedy", f.Mark)
		}
	}
	want := []string{
		`B7: the norms of the rate book have no shop hours for "welded art"`, `B7: the norms of the rate book have no site hours for "welded art"`,
		`B7: the rate book has no connection class "welded art"`, `B8: the rate book has no waste allowance for "timber"`, `B9: the norms of the rate book have no joint "glued"`,
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("faults (-want +got):\n%s", diff)
	}
	if text := err.Error(); !strings.HasPrefix(text, "member B7: ") || !strings.HasSuffix(text, "(and 4 more)") {
		t.Errorf("message %q", text)
	}
	noPlate := withNorms()
	delete(noPlate.Waste, ratebook.WastePlate)
	if _, err := Count([]Piece{jointed()}, noPlate, limited()); err == nil || !strings.Contains(err.Error(), "of which joints are made") {
		t.Errorf("joints without waste of plate: %v", err)
	}
}

func TestPlaceOfAnItem(t *testing.T) {
	s := limited()
	s.Coating, s.Execution = "C4 high", schedule.EXC2
	items := count(t, []Piece{jointed()}, withNorms(), s)
	want := ratebook.Place{Mark: "B1", Group: "Gallery", Family: "moment", Treatment: Joint, Connection: CountedJoints, Waste: ratebook.WastePlate, Coating: "C4 high", Execution: schedule.EXC2}
	if diff := cmp.Diff(want, byID(t, items, "Gallery/moment/joint").Place()); diff != "" {
		t.Errorf("place (-want +got):\n%s", diff)
	}
}

func TestImpossibleMassIsAnError(t *testing.T) {
	for _, length := range []float64{math.NaN(), math.Inf(1), 1e300} {
		if _, err := Count([]Piece{beam("B1", 1, length)}, withNorms(), limited()); err == nil || !strings.Contains(err.Error(), "Gallery/IPE") {
			t.Errorf("length %g: got %v, want an error that names the item", length, err)
		}
		Breaches([]Piece{beam("B1", 1, length)}, withNorms(), limited())
		Loads([]Piece{beam("B1", 1, length)}, withNorms(), limited())
	}
}

// 6 splices · 5.5 h · 1.15 are 37.95 h, half away from zero 38.0; 24 h · 1.15 over 240 h are
// 0.115 weeks. The products of the floats are 37.949999999999996 and 0.11499999999999999.
func TestTiesThatFloatsMiss(t *testing.T) {
	for _, c := range []struct {
		driver   ratebook.Driver
		measured float64
		factor   float64
		want     string
	}{{ratebook.ShopHours, 6, 5.5, "38.0"}, {ratebook.Weeks, 6. / 240, 4, "0.12"}, {ratebook.SquareMetres, 2.21, 30, "76.25"}} {
		q, err := newQuantity(c.driver, c.measured, []Allowance{fixed("f", c.factor, 0), fixed("g", 0.15, 1)}, "", nil)
		if err != nil || q.Value.String() != c.want {
			t.Errorf("%s: %s, %v; want %s", c.driver, q.Value, err, c.want)
		}
	}
}

// Every value is its measured quantity times the factors, rounded once; the
// drivers stand in their order and none twice.
func TestValuesAreMeasuredTimesFactors(t *testing.T) {
	order := map[ratebook.Driver]int{}
	for i, d := range ratebook.Drivers() {
		order[d] = i
	}
	seen := map[ratebook.Driver]int{}
	for seed := range uint64(20) {
		a, s := unitRate(t)
		for _, it := range count(t, randomPieces(t, seed, 60), a, s) {
			last := -1
			for _, q := range it.Quantities {
				v := q.Measured
				for _, f := range q.Factors {
					v *= f.Offset + f.Spread.Base()
				}
				want, err := money.FromFloat(v*(1+1e-13), q.Driver.Places()) // a tie that floats miss is one
				if err != nil {
					t.Fatal(err)
				}
				if q.Value.String() != want.String() || want.Sign() <= 0 || q.Formula == "" {
					t.Errorf("%s %s: value %s, measured × factors %s, formula %q", it.ID, q.Driver, q.Value, want, q.Formula)
				}
				if order[q.Driver] <= last {
					t.Errorf("%s: %s is out of order", it.ID, q.Driver)
				}
				last = order[q.Driver]
				seen[q.Driver]++
			}
		}
	}
	for _, d := range ratebook.Drivers() {
		if seen[d] == 0 && d != ratebook.Lump && d != ratebook.CostOf && d != ratebook.PermitLoads {
			t.Errorf("no item has %s", d)
		}
	}
}

func unitRate(t *testing.T) (Allowances, Settings) {
	t.Helper()
	book, job := ratebook.UnitRate(), schedule.Settings{EstimateClass: 4, Coating: "galvanised and painted C5 high", ExecutionClass: schedule.EXC2}
	a, err := FromBook(book, job)
	if err != nil {
		t.Fatal(err)
	}
	return a, SettingsOf(book, job)
}

// What goes in comes out: net mass, length, pieces, concrete and joints of the rows
// are those of the items.
func TestNothingIsLost(t *testing.T) {
	a, s := unitRate(t)
	s.Stock = []float64{6, 12}
	for seed := range uint64(10) {
		pieces := randomPieces(t, seed, 80)
		want, got := map[string]float64{}, map[string]float64{}
		for _, p := range pieces {
			q := float64(p.Member.Quantity)
			want["net"] += p.Net() / 1000
			want["m³"] += q * p.Member.Concrete
			want["pieces"] += q
			splices := Splices(p, s)
			for _, j := range p.Member.Joints {
				want[j.Kind] += q * float64(j.Count)
				if j.Kind == schedule.JointSiteSplice {
					splices -= p.Member.Quantity * j.Count
				}
			}
			want[schedule.JointSiteSplice] += math.Max(0, float64(splices))
			want[ShopSplice] += float64(ShopJoints(p, s))
		}
		for _, it := range count(t, pieces, a, s) {
			if it.Treatment != Joint {
				got["pieces"] += float64(it.Pieces)
			}
			for _, q := range it.Quantities {
				switch {
				case q.Driver == ratebook.NetTonnes:
					got["net"] += q.Measured
				case q.Driver == ratebook.CubicMetres:
					got["m³"] += q.Measured
				case q.Driver == ratebook.Pieces && it.Treatment == Joint:
					got[it.Family] += q.Measured
				}
			}
		}
		for what, w := range want {
			if !(math.Abs(got[what]-w) <= 1e-9*w) {
				t.Errorf("seed %d: %s of the items %.12g, of the rows %.12g", seed, what, got[what], w)
			}
		}
	}
}

func TestOrderOfRowsDoesNotMatter(t *testing.T) {
	a, s := unitRate(t)
	pieces := randomPieces(t, 3, 120)
	items, loads, breaches := count(t, pieces, a, s), Loads(pieces, a, s), Breaches(pieces, a, s)
	for seed := range uint64(5) {
		rand.New(rand.NewPCG(seed, 2)).Shuffle(len(pieces), func(i, j int) { pieces[i], pieces[j] = pieces[j], pieces[i] })
		if diff := cmp.Diff(items, count(t, pieces, a, s)); diff != "" {
			t.Fatalf("items (-first +shuffled):\n%s", diff)
		}
		if diff := cmp.Diff(loads, Loads(pieces, a, s)); diff != "" {
			t.Fatalf("loads (-first +shuffled):\n%s", diff)
		}
		if diff := cmp.Diff(breaches, Breaches(pieces, a, s)); diff != "" {
			t.Fatalf("breaches (-first +shuffled):\n%s", diff)
		}
	}
}
