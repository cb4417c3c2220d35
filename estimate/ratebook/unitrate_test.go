package ratebook

import (
	"maps"
	"slices"
	"strings"
	"testing"

	"spanwright/estimate/spread"

	"github.com/google/go-cmp/cmp"
)

// figuresOf returns every figure of a book by JSON pointer.
func figuresOf(b Book) map[string]Figure {
	out := map[string]Figure{}
	put := func(field string, m map[string]Figure) {
		for k, f := range m {
			out[at(field, k)] = f
		}
	}
	for _, r := range b.Rates {
		out["/rates/"+r.ID] = r.Figure
	}
	for _, f := range b.Carbon {
		out["/carbon/"+f.Module+"/"+f.ID] = f.Figure
	}
	for _, x := range b.Exchange {
		out["/exchange/"+x.Currency] = x.Figure
	}
	for _, x := range b.Indices {
		out["/indices/"+x.Name] = *x.Growth
	}
	n := b.Norms
	put("/norms/shop_hours", n.ShopHours)
	put("/norms/site_hours", n.SiteHours)
	for k, j := range n.Joints {
		put("/norms/joints/"+k, map[string]Figure{"mass": j.Mass, "bolts": j.Bolts, "shop": j.ShopHours, "site": j.SiteHours})
	}
	put("/norms", map[string]Figure{"surface": n.Surface, "surface_by_mass": *n.SurfaceByMass, "load_use": n.LoadUse, "lift_days": n.LiftDays, "crew": n.Crew, "week_hours": n.WeekHours, "haul": n.HaulDistance})
	put("/connections", b.Connections)
	put("/waste", b.Waste)
	put("/growth", b.Growth)
	put("", map[string]Figure{"bolts": b.Bolts, "sizing_bias": b.SizingBias})
	return out
}

func TestUnitRateIsValidAndSaysThatItIsInvented(t *testing.T) {
	b := UnitRate()
	if err := b.Validate(); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(strings.ToLower(b.Note), "invented") {
		t.Errorf("the note %q does not say that the prices are invented", b.Note)
	}
	for field, f := range figuresOf(b) {
		if !strings.Contains(f.Source, "invented") && !strings.Contains(f.Source, "from memory") {
			t.Errorf("%s: source %q says neither that the figure is invented nor that it is from memory", field, f.Source)
		}
		if strings.HasPrefix(f.Source, "generic") && !strings.HasPrefix(field, "/carbon/") {
			t.Errorf("%s: only carbon factors are published averages", field)
		}
	}
	for _, x := range b.Indices {
		if !strings.Contains(x.Source, "invented") {
			t.Errorf("index %s: source %q", x.Name, x.Source)
		}
	}
	data, sum, err := b.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	back, err := Parse(data)
	if err != nil {
		t.Fatal(err)
	}
	if _, again, err := back.Canonical(); err != nil || again != sum {
		t.Errorf("read back the hash is %s, %v; want %s", again, err, sum)
	}
}

// values of a spread as low, likely, high.
func values(s spread.Spread) [3]float64 { return [3]float64{s.Low, s.Likely, s.High} }

// The demo values of the project's brief, section 5 (invented there).
func TestUnitRateHasTheDemoValues(t *testing.T) {
	b := UnitRate()
	got, want := map[string][3]float64{}, map[string][3]float64{
		"connections/simple beams": {.04, .06, .09}, "connections/trestles": {.08, .11, .15}, "connections/lattice": {.10, .15, .22}, "connections/tube booms": {.08, .12, .18},
		"bolts": {.01, .02, .03}, "waste/sections": {.04, .07, .12}, "waste/tube": {.05, .09, .15}, "waste/plate": {.08, .14, .22},
		"growth/5": {.05, .18, .35}, "growth/4": {.03, .12, .25}, "growth/3": {.01, .06, .12}, "growth/2": {0, .03, .07}, "growth/1": {0, .01, .03},
		"shop/simple beams": {8, 12, 18}, "shop/trestles": {10, 15, 22}, "shop/tube booms": {18, 28, 42}, "shop/lattice": {25, 38, 55}, "shop/platforms": {22, 32, 45}, "shop/stairs and rails": {45, 75, 120},
		"site/trestles": {6, 9, 14}, "site/lattice": {8, 14, 22}, "site/platforms": {18, 28, 42},
		"rate/shop labour": {45, 60, 75}, "rate/inspection EXC2": {.02, .04, .06}, "rate/inspection EXC3": {.05, .07, .10},
	}
	for name := range want {
		kind, key, _ := strings.Cut(name, "/")
		m := map[string]map[string]Figure{"connections": b.Connections, "bolts": {"": b.Bolts}, "waste": b.Waste, "growth": b.Growth, "shop": b.Norms.ShopHours, "site": b.Norms.SiteHours}[kind]
		if kind == "rate" {
			m = map[string]Figure{key: rateNamed(t, b, key).Figure}
		}
		got[name] = values(m[key].Spread)
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
	if d := cmp.Diff(map[string]float64{"5": .25, "4": .18, "3": .11, "2": .08, "1": .06}, b.Systemic); d != "" {
		t.Errorf("systemic (-want +got)\n%s", d)
	}
	for _, id := range []string{"steel sections", "steel tube", "steel plate"} {
		s := rateNamed(t, b, id).Spread
		if low, high := s.Low/s.Likely, s.High/s.Likely; !near(low, 0.88) || !near(high, 1.2) {
			t.Errorf("%s: %v and %v times the likely price, want 0.88 and 1.20", id, low, high)
		}
	}
}

func near(got, want float64) bool { return got-want < 1e-9 && want-got < 1e-9 }

func rateNamed(t *testing.T, b Book, id string) Rate {
	t.Helper()
	i := slices.IndexFunc(b.Rates, func(r Rate) bool { return r.ID == id })
	if i < 0 {
		t.Fatalf("no rate %q", id)
	}
	return b.Rates[i]
}

func TestNoCostSpreadIsWithoutItsGroup(t *testing.T) {
	b := UnitRate()
	free := []string{"/connections", "/waste", "/growth", "/bolts", "/sizing_bias", "/norms/surface", "/norms/joints"} // masses and surfaces
	for field, f := range figuresOf(b) {
		mass := slices.ContainsFunc(free, func(p string) bool { return strings.HasPrefix(field, p) }) && !strings.HasSuffix(field, "/shop") && !strings.HasSuffix(field, "/site")
		if f.Group == "" && f.Spread.Distribution != spread.Fixed && !mass {
			t.Errorf("%s has a spread and no correlation group", field)
		}
	}
	for _, m := range b.Multipliers {
		if m.Group == "" {
			t.Errorf("multiplier %s has no correlation group", m.Name)
		}
	}
	if d := cmp.Diff(map[string]float64{"labour": 0.5, "supply": 0.2, "other costs": 0.3, "carbon": 0.3}, b.Correlation); d != "" {
		t.Errorf("(-want +got)\n%s", d)
	}
}

// Every category is priced; every condition of a site has its multiplier; every
// connection class of the ratio book is there, with bands for its hours.
func TestUnitRateIsWhole(t *testing.T) {
	b := UnitRate()
	for _, c := range Categories() {
		if !slices.ContainsFunc(b.Rates, func(r Rate) bool { return r.Category == c }) {
			t.Errorf("no rate of the category %s", c)
		}
	}
	for _, s := range siteConditions() {
		i := slices.IndexFunc(b.Site, func(m SiteMultiplier) bool { return m.Condition == s })
		if i < 0 {
			t.Errorf("no multiplier for %s", s)
		} else if m := b.Site[i]; !slices.Equal(m.Categories, []string{Erection, Indirects}) || !strings.Contains(m.Reason, "weeks") {
			t.Errorf("%s: acts on %v, because %q; want erection, and indirects for its weeks", s, m.Categories, m.Reason)
		}
	}
	for class := range Ratio().Connections {
		if _, ok := b.Connections[class]; !ok {
			t.Errorf("no connection class %s", class)
		}
	}
	for class, f := range b.Norms.ShopHours {
		if class == countedJoints {
			continue // no class of the schedule
		}
		i := slices.IndexFunc(b.Bands, func(band Band) bool { return band.Measure == "shop h/t" && band.Class == class })
		if i < 0 || !(b.Bands[i].Low < f.Spread.Likely && f.Spread.Likely < b.Bands[i].High) {
			t.Errorf("%s: no band that holds %g shop h/t", class, f.Spread.Likely)
		}
	}
	modules := map[string]bool{}
	for _, f := range b.Carbon {
		modules[f.Module] = true
	}
	if d := cmp.Diff([]string{"A1-A3", "A4", "A5"}, slices.Sorted(maps.Keys(modules))); d != "" {
		t.Errorf("modules (-want +got)\n%s", d)
	}
	for _, currency := range []string{"USD", "JPY", "KWD", "GBP"} {
		if _, ok := b.rateOf(currency); !ok {
			t.Errorf("no exchange rate for %s", currency)
		}
	}
}

// At every place, steel has one price, paint one system and inspection one extent,
// whatever the schedule may say there.
func TestOnePricePerPlace(t *testing.T) {
	b := UnitRate()
	count := func(p Place, prefix string) int {
		n := 0
		for _, i := range ResolveRates(b.Rates, p) {
			if strings.HasPrefix(b.Rates[i].ID, prefix) {
				n++
			}
		}
		return n
	}
	for _, w := range wastes() {
		for _, tr := range treatments() {
			for _, class := range append(b.ConnectionClasses(), countedJoints) {
				p := Place{Waste: w, Treatment: tr, Connection: class}
				ready := 0
				if tr == "not sized" && class == "none" {
					ready = 1
				}
				if count(p, "steel ") != 1 || count(p, "ready-made") != ready {
					t.Errorf("%+v: %d steel prices, %d for ready-made steel", p, count(p, "steel "), count(p, "ready-made"))
				}
			}
		}
	}
	for _, e := range append(executions(), "") {
		if n := count(Place{Execution: e}, "inspection "); n != 1 {
			t.Errorf("%d extents of inspection for the execution class %q", n, e)
		}
	}
	if n := count(Place{}, "paint "); n != 1 {
		t.Errorf("%d paint systems for rows that name none", n)
	}
}

// Bolts have one price: the bolts of counted joints by their own mass, others by the
// tonne of steel. What is bought ready-made has its fixings and its zinc; a small job
// pays for one whole load.
func TestBoltsZincAndLoadsArePricedOnce(t *testing.T) {
	b := UnitRate()
	of := func(p Place) []string {
		var out []string
		for _, i := range ResolveRates(b.Rates, p) {
			if r := b.Rates[i]; strings.Contains(r.ID, "bolts") || r.ID == "galvanising" {
				out = append(out, r.ID)
			}
		}
		slices.Sort(out)
		return out
	}
	const zinc = "hot-dip galvanised"
	for _, c := range []struct {
		p    Place
		want []string
	}{
		{Place{Family: "IPE", Treatment: "size", Connection: "simple beams", Coating: zinc}, []string{"bolts", "galvanising"}},
		{Place{Family: "handrail", Treatment: "not sized", Connection: "stairs and rails", Coating: zinc}, []string{"bolts", "galvanising"}},
		{Place{Family: "grating", Treatment: "not sized", Connection: "none", Coating: zinc}, nil},
		{Place{Family: "IPE", Treatment: "size", Connection: countedJoints, Coating: zinc}, []string{"galvanising"}},
	} {
		if got := of(c.p); !slices.Equal(got, c.want) {
			t.Errorf("%+v: %v, want %v", c.p, got, c.want)
		}
	}
	for _, kind := range jointKinds() {
		plates, bolts := Place{Family: kind, Treatment: "joint", Connection: countedJoints}, Place{Family: kind + " bolts", Treatment: "joint", Connection: countedJoints}
		if got := of(plates); got != nil {
			t.Errorf("plates of %s: %v", kind, got)
		}
		if got := of(bolts); !slices.Equal(got, []string{"counted bolts"}) {
			t.Errorf("bolts of %s: %v", kind, got)
		}
	}
	if got := rateNamed(t, b, "loading").MinimumOrder.String(); got != "1" {
		t.Errorf("least loads %s, want 1", got)
	}
}

// The tables that the book refers to are those of the package.
func TestCoatingsOfTheBookAreThoseOfTheTable(t *testing.T) {
	b := UnitRate()
	sold := map[string]bool{}
	for _, r := range b.Rates {
		for _, c := range r.Select.Coatings {
			if c != "" {
				sold[c] = true
			}
		}
	}
	listed := map[string]bool{}
	for _, s := range CoatingSystems() {
		if s.Priced {
			listed[s.Name] = true
		}
	}
	if d := cmp.Diff(listed, sold); d != "" {
		t.Errorf("(-table +book)\n%s", d)
	}
	for i, z := range ZincMasses() {
		if got := b.Norms.Zinc[i]; got.UpTo != z.UpTo || got.Mass != z.Mass {
			t.Errorf("zinc %d: book %+v, table %+v", i, got, z)
		}
	}
}

func TestCoatingsNamesWhatRatesPrice(t *testing.T) {
	b := UnitRate()
	var want []string
	for _, s := range CoatingSystems() {
		if s.Priced {
			want = append(want, s.Name)
		}
	}
	slices.Sort(want)
	if got := b.Coatings(); !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	if got := Ratio().Coatings(); got != nil {
		t.Errorf("the ratio book prices any coating, got %v", got)
	}
	b.Rates = append(b.Rates, Rate{ID: "any paint", Category: Coating, Driver: SquareMetres})
	if got := b.Coatings(); got != nil {
		t.Errorf("a rate that prices any coating: got %v", got)
	}
}
