package pricing

import (
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// randomJob draws items, rates of every kind and multipliers of every scope.
func randomJob(t *testing.T, r *rand.Rand, n int) ([]takeoff.Item, Rates) {
	t.Helper()
	text := func(places int, high float64) string { return fmt.Sprintf("%.*f", places, high*r.Float64()) }
	pick := func(list ...string) string { return list[r.IntN(len(list))] }
	var items []takeoff.Item
	for i := range n {
		it := item(t, fmt.Sprintf("I%03d", i))
		it.Group, it.Family = pick("Boom", "Tower", "Deck"), pick("CHS", "HEA")
		it.Coating, it.Execution = pick("", "C3", "C5"), pick("EXC2", "EXC3")
		for _, d := range ratebook.Drivers() {
			if d != ratebook.Lump && d != ratebook.CostOf && r.IntN(4) > 0 {
				it.Quantities = append(it.Quantities, measure(t, d, text(d.Places(), 300)))
			}
		}
		items = append(items, it)
	}
	job := euros(t)
	job.Currency = currency(t, pick("EUR", "JPY", "KWD"))
	job.Reference = decimal(t, "900")
	conversion := func(name, id string, places int) Conversion {
		v := decimal(t, fmt.Sprintf("%.*f", places, 0.8+0.4*r.Float64()))
		return Conversion{Name: name, ID: id, Value: v, Spread: spread.NewTriangular(0.5, v.Float64(), 2)}
	}
	job.Exchange = map[string]Conversion{}
	for _, c := range []string{"EUR", "USD"} {
		if c != job.Currency.Code {
			job.Exchange[c] = conversion("exchange", "exchange/"+c, 4)
		}
	}
	job.Escalation = map[string][]Conversion{ratebook.Material: {conversion("escalation to base date", "index/steel", 3)}}
	drivers := ratebook.Drivers()
	for i := range 25 {
		category := ratebook.Categories()[i%6]
		one := rate(fmt.Sprintf("r%02d", i), category, drivers[r.IntN(len(drivers)-1)], math.Round(1e3*r.Float64())/100)
		one.OfReference = r.IntN(5) == 0
		if !one.OfReference && r.IntN(3) == 0 {
			one.Currency = "USD"
		}
		if one.Driver != ratebook.Lump && r.IntN(4) == 0 {
			one.Breaks = []ratebook.Break{{From: decimal(t, text(0, 800)), Factor: decimal(t, "0.95")}}
		}
		if r.IntN(4) == 0 {
			one.MinimumCharge = decimal(t, text(0, 20000))
		}
		if one.Driver != ratebook.Lump && r.IntN(4) == 0 {
			one.MinimumOrder = decimal(t, text(0, 900))
		}
		if one.Driver != ratebook.Lump && r.IntN(3) == 0 {
			one.Select.Coatings = []string{pick("", "C3", "C5")}
		}
		job.Rates = append(job.Rates, one)
		if one.Driver != ratebook.Lump && r.IntN(3) == 0 {
			one.Scope, one.Subject, one.Figure = ratebook.GroupScope, "Tower", around(math.Round(1e3*r.Float64())/100)
			job.Rates = append(job.Rates, one)
		}
	}
	job.Rates = append(job.Rates,
		rate("engineering", ratebook.Engineering, ratebook.CostOf, 0.06, ratebook.Fabrication, ratebook.Material),
		rate("indirects", ratebook.Indirects, ratebook.CostOf, 0.03, ratebook.Engineering, ratebook.Erection),
		rate("margin", ratebook.Margin, ratebook.CostOf, 0.09, ratebook.Categories()[:9]...))
	for i, scope := range []ratebook.Scope{ratebook.ProjectScope, ratebook.GroupScope, ratebook.FamilyScope, ratebook.BookScope, ratebook.MemberScope} {
		m := project(fmt.Sprintf("m%d", i%3), math.Round(80+40*r.Float64())/100, ratebook.Categories()...)
		m.Scope, m.Subject = scope, map[ratebook.Scope]string{ratebook.GroupScope: "Boom", ratebook.FamilyScope: "HEA", ratebook.MemberScope: "mark I003"}[scope]
		job.Multipliers = append(job.Multipliers, m)
	}
	r.Shuffle(len(job.Rates), func(i, j int) { job.Rates[i], job.Rates[j] = job.Rates[j], job.Rates[i] })
	return items, job
}

// rounded rounds a fraction to places, half away from zero, in integers.
func rounded(x *big.Rat, places int) *big.Rat {
	scale := new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil))
	y := new(big.Rat).Mul(x, scale)
	y.Add(y, big.NewRat(1, 2)) // all are positive
	return new(big.Rat).Quo(new(big.Rat).SetInt(new(big.Int).Quo(y.Num(), y.Denom())), scale)
}

// exactly recomputes a job in fractions from its lines: every unit price, amount
// and sum. It returns the unrounded total and how far rounding may move the total.
func exactly(t *testing.T, p Priced, job Rates) (unrounded *big.Rat, slack float64) {
	t.Helper()
	amount, whole, off := map[string]*big.Rat{}, map[string]*big.Rat{}, map[string]float64{}
	pending := slices.Clone(p.Lines)
	for len(pending) > 0 {
		l := pending[0]
		pending = pending[1:]
		if slices.ContainsFunc(l.Of, func(id string) bool { return amount[id] == nil }) {
			pending = append(pending, l)
			continue
		}
		unit := big.NewRat(1, 1)
		for _, part := range l.Parts {
			unit.Mul(unit, part.Value.Rat())
		}
		for _, m := range l.Multipliers {
			unit.Mul(unit, m.Value.Rat())
		}
		places := job.Currency.MinorDigits + 2
		quantity, exactQuantity, offQuantity := l.Quantity.Rat(), l.Quantity.Rat(), 0.0
		if l.Driver == ratebook.CostOf {
			places = 6
			quantity, exactQuantity = new(big.Rat), new(big.Rat)
			for _, id := range l.Of {
				quantity.Add(quantity, amount[id])
				exactQuantity.Add(exactQuantity, whole[id])
				offQuantity += off[id]
			}
			if quantity.Cmp(l.Quantity.Rat()) != 0 {
				t.Errorf("%s: the quantity is %s, its lines sum to %s", l.ID, l.Quantity, quantity.FloatString(6))
			}
		}
		stated := rounded(rounded(unit, 8), places)
		if stated.Cmp(l.UnitPrice.Rat()) != 0 {
			t.Errorf("%s: the unit price is %s, want %s", l.ID, l.UnitPrice, stated.FloatString(places))
		}
		amount[l.ID] = rounded(new(big.Rat).Mul(quantity, stated), job.Currency.MinorDigits)
		if amount[l.ID].Cmp(l.Amount.Rat()) != 0 {
			t.Errorf("%s: the amount is %s, want %s", l.ID, l.Amount, amount[l.ID].FloatString(3))
		}
		whole[l.ID] = new(big.Rat).Mul(exactQuantity, unit)
		u, _ := unit.Float64()
		off[l.ID] = offQuantity*u + 0.5*math.Pow10(-job.Currency.MinorDigits) + l.Quantity.Float64()*0.51*math.Pow10(-places)
	}
	sum := new(big.Rat)
	unrounded = new(big.Rat)
	for _, l := range p.Lines {
		sum.Add(sum, amount[l.ID])
		unrounded.Add(unrounded, whole[l.ID])
		slack += off[l.ID]
	}
	if sum.Cmp(p.Base.Rat()) != 0 {
		t.Errorf("the base is %s, the lines sum to %s", p.Base, sum.FloatString(3))
	}
	byCategory := money.Zero
	for _, c := range p.Categories {
		byCategory = byCategory.Add(c)
	}
	if !byCategory.Equal(p.Base) {
		t.Errorf("the categories sum to %s, the base is %s", byCategory, p.Base)
	}
	return unrounded, slack
}

// DESIGN: at base values the model equals the unrounded decimal total to 1e-12, and
// the rounded total within half a minor unit a line and what the unit prices were
// rounded by.
func TestModelAgreesWithTheLines(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	seen := map[string]int{}
	for range 150 {
		items, job := randomJob(t, r, 1+r.IntN(12))
		p := price(t, items, job)
		unrounded, slack := exactly(t, p, job)
		want, _ := unrounded.Float64()
		if got := p.Model.Base(); !(math.Abs(got-want) <= 1e-12*want) {
			t.Errorf("the model's base is %.17g, the unrounded total %.17g", got, want)
		}
		if got := p.Model.Base(); !(math.Abs(got-p.Base.Float64()) <= slack) {
			t.Errorf("the model's base is %.15g, the rounded total %s: more apart than %g", got, p.Base, slack)
		}
		for _, n := range p.Notes {
			seen[n.Code]++
		}
	}
	for _, code := range []string{"price-break", "minimum-order", "minimum-charge", "no-quantity"} {
		if seen[code] < 20 {
			t.Errorf("%d jobs have a %s: the test does not test it", seen[code], code)
		}
	}
}

// The model is the job as a function of its assumptions: with other values of every
// input it gives what the job costs when it is priced anew with these values.
func TestModelIsTheJobAsAFunction(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	two := decimal(t, "2")
	for range 60 {
		items, job := randomJob(t, r, 6)
		job.Currency = currency(t, "EUR") // products of three decimals would run beyond 15 digits
		for i := range job.Rates {        // steps are tested by hand
			job.Rates[i].Breaks, job.Rates[i].MinimumCharge, job.Rates[i].MinimumOrder = nil, money.Zero, money.Zero
		}
		p := price(t, items, job)
		values := map[string]float64{}
		other := job
		other.Rates, other.Multipliers = slices.Clone(job.Rates), slices.Clone(job.Multipliers)
		move := func(id string, s *spread.Spread, scale float64) {
			s.Likely = math.Round(s.Likely*scale*(0.6+r.Float64())) / scale
			s.Low, s.High = 0, 10*s.Likely+1
			values[id] = s.Likely
		}
		for i := range other.Rates {
			move(RateID(other.Rates[i]), &other.Rates[i].Spread, 100)
		}
		for i := range other.Multipliers {
			move(MultiplierID(other.Multipliers[i]), &other.Multipliers[i].Spread, 10)
		}
		other.Exchange = map[string]Conversion{}
		for k, c := range job.Exchange {
			c.Value = c.Value.Mul(decimal(t, "1.1"))
			c.Spread.Likely = c.Value.Float64()
			values[c.ID] = c.Value.Float64()
			other.Exchange[k] = c
		}
		grown := slices.Clone(items) // growth of 12 % becomes 124 %: twice the quantities
		for i := range grown {
			grown[i].Quantities = slices.Clone(grown[i].Quantities)
			for k := range grown[i].Quantities {
				q := &grown[i].Quantities[k]
				q.Value = q.Value.Mul(two)
				q.Factors = []takeoff.Allowance{allowance("allowance/growth", 1.24), q.Factors[1]}
			}
		}
		values["allowance/growth"] = 1.24
		want := price(t, grown, other).Model.Base()
		if got := trial(p.Model, values); !(math.Abs(got-want) <= 2e-12*want) {
			t.Errorf("the model gives %.15g, pricing anew %.15g", got, want)
		}
	}
}

// The likely value of a lognormal spread is a root, with the noise of binary
// arithmetic: √(0.9 · 1.6) = 1.2. The line has 1.2, and the model agrees.
func TestTheNoiseOfARootIsTakenOff(t *testing.T) {
	labour := rate("labour", ratebook.Fabrication, ratebook.ShopHours, 1)
	labour.Spread = spread.NewLognormal(0.9, 1.6)
	r := euros(t, labour)
	r.Multipliers = []ratebook.Multiplier{project("root", 1, ratebook.Fabrication)}
	r.Multipliers[0].Spread = spread.NewLognormal(0.7, 2.8) // √1.96 = 1.4
	p := price(t, []takeoff.Item{item(t, "A", hours, "1000.0")}, r)
	if p.Base.String() != "1680.00" || !near(p.Model.Base(), 1680) {
		t.Errorf("got %s and %.17g, want 1680", p.Base, p.Model.Base())
	}
}

// A likely value may carry noise in the thirteenth digit: the line goes by twelve,
// and the model follows the line to 1e-12.
func TestTheNoiseOfAFloatIsTakenOff(t *testing.T) {
	labour := rate("labour", ratebook.Fabrication, ratebook.ShopHours, 1)
	labour.Spread = spread.NewFixed(1.200000000004)
	p := price(t, []takeoff.Item{item(t, "A", hours, "1000.0")}, euros(t, labour))
	if p.Base.String() != "1200.00" || !near(p.Model.Base(), 1200) {
		t.Errorf("got %s and %.17g, want 1200", p.Base, p.Model.Base())
	}
}

// Inputs keep the correlation groups of norms, rates, multipliers and conversions.
func TestInputsKeepTheirGroups(t *testing.T) {
	it := item(t, "A", hours, "10.0")
	it.Quantities[0].Factors[0].Group = "hours"
	labour := rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60)
	labour.Figure.Group, labour.Currency = "labour", "USD"
	r := euros(t, labour)
	r.Multipliers = []ratebook.Multiplier{project("height", 1.1, ratebook.Fabrication)}
	r.Multipliers[0].Group = "site"
	r.Exchange = map[string]Conversion{"USD": {Name: ExchangeRate, ID: "exchange/USD", Value: decimal(t, "0.9"), Spread: spread.NewFixed(0.9), Group: "money"}}
	got := map[string]string{}
	for _, in := range price(t, []takeoff.Item{it}, r).Model.Inputs {
		got[in.ID] = in.Group
	}
	want := map[string]string{"allowance/growth": "hours", "allowance/shop hours": "", "exchange/USD": "money", "multiplier/height/project": "site", "rate/labour": "labour"}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

// The stream of a conversion is that of its input; a rate, a multiplier and an
// allowance are streams of their own.
func TestInputsKeepTheirStreams(t *testing.T) {
	growth := func(id, value string) Conversion {
		v := decimal(t, value)
		return Conversion{Name: EscalationToSpend, ID: id, Value: v, Spread: spread.NewTriangular(1, v.Float64(), 2), Group: "growth", Stream: "growth/labour"}
	}
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60), rate("site", ratebook.Erection, ratebook.ShopHours, 50))
	r.Multipliers = []ratebook.Multiplier{project("height", 1.1, ratebook.Fabrication)}
	r.Escalation = map[string][]Conversion{ratebook.Fabrication: {growth("escalation/labour/2027", "1.03")}, ratebook.Erection: {growth("escalation/labour/2028", "1.06")}}
	got := map[string]string{}
	for _, in := range price(t, []takeoff.Item{item(t, "A", hours, "10.0")}, r).Model.Inputs {
		got[in.ID] = in.Stream
	}
	want := map[string]string{"allowance/growth": "", "allowance/shop hours": "", "multiplier/height/project": "", "rate/labour": "", "rate/site": "",
		"escalation/labour/2027": "growth/labour", "escalation/labour/2028": "growth/labour"}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
	other := growth("escalation/labour/2027", "1.03")
	other.Stream = "growth/other"
	r.Escalation[ratebook.Erection] = []Conversion{other}
	if _, err := Price([]takeoff.Item{item(t, "A", hours, "10.0")}, r); err == nil || !strings.Contains(err.Error(), "streams") {
		t.Errorf("one input in two streams: error %v", err)
	}
}

// 10¹⁶ takes up no 1, but keeps what it loses.
func TestSumLosesNothing(t *testing.T) {
	var s sum
	for _, x := range []float64{1, 1e16, 1, -1e16, 1} {
		s.add(x)
	}
	if s.value() != 3 {
		t.Errorf("got %g, want 3", s.value())
	}
}

// A trial's cost does not grow with the members: identical products merge.
func TestTermsMerge(t *testing.T) {
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60), rate("steel", ratebook.Material, ratebook.DeliveredTonnes, 900),
		rate("margin", ratebook.Margin, ratebook.CostOf, 0.1, ratebook.Fabrication, ratebook.Material))
	var many []takeoff.Item
	for i := range 500 {
		many = append(many, item(t, fmt.Sprintf("I%d", i), hours, "1.5", tonnes, "1.700"))
	}
	a, b := price(t, many[:1], r).Model, price(t, many, r).Model
	if len(a.Terms) != 4 || len(b.Terms) != 4 || len(b.Inputs) != 6 {
		t.Errorf("one item has %d terms, 500 like ones %d and %d inputs; want 4, 4 and 6", len(a.Terms), len(b.Terms), len(b.Inputs))
	}
}

// The same job in another order of items, rates and multipliers is the same to the
// last bit.
func TestOrderDoesNotMatter(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for range 40 {
		items, job := randomJob(t, r, 8)
		want := price(t, items, job)
		for range 3 {
			r.Shuffle(len(items), func(i, j int) { items[i], items[j] = items[j], items[i] })
			r.Shuffle(len(job.Rates), func(i, j int) { job.Rates[i], job.Rates[j] = job.Rates[j], job.Rates[i] })
			r.Shuffle(len(job.Multipliers), func(i, j int) {
				job.Multipliers[i], job.Multipliers[j] = job.Multipliers[j], job.Multipliers[i]
			})
			if diff := cmp.Diff(fmt.Sprintf("%+v", want), fmt.Sprintf("%+v", price(t, items, job))); diff != "" {
				t.Fatal(diff)
			}
		}
	}
}

// The systemic factor and the risks stand outside the terms.
func TestSystemicFactorAndRisks(t *testing.T) {
	r := euros(t, rate("labour", ratebook.Fabrication, ratebook.ShopHours, 60))
	r.Systemic = takeoff.Allowance{ID: "systemic", Spread: spread.LogDeviation(0.25)}
	r.Risks = []DiscreteRisk{
		{ID: "risk/strike", Probability: 0.2, Impact: spread.NewTriangular(1000, 2000, 5000)},
		{ID: "risk/grant", Probability: 0.1, Impact: spread.NewFixed(-3000)},
	}
	p := price(t, []takeoff.Item{item(t, "A", hours, "10.0")}, r)
	m := p.Model
	if p.Base.String() != "600.00" || !near(m.Base(), 600) {
		t.Errorf("base %s, of the model %g: risks and the systemic factor are no part of it", p.Base, m.Base())
	}
	id := func(i int) string { return m.Inputs[i].ID }
	if len(m.Overall) != 1 || id(m.Overall[0].Input) != "systemic" || len(m.Risks) != 2 || m.Risks[0].ID != "risk/grant" || id(m.Risks[0].Impact) != "risk/grant" || id(m.Risks[1].Impact) != "risk/strike" || m.Risks[1].Probability != 0.2 {
		t.Errorf("got overall %v, risks %v, inputs %v", m.Overall, m.Risks, m.Inputs)
	}
	if !slices.IsSortedFunc(m.Inputs, func(a, b Input) int {
		if a.ID < b.ID {
			return -1
		}
		return 1
	}) {
		t.Errorf("inputs out of order: %v", m.Inputs)
	}
}
