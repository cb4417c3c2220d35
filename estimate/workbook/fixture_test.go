package workbook

import (
	"fmt"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/spread"
)

func decimal(t testing.TB, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// plainLine is a line before its product is known: the factors as text.
type plainLine struct {
	group, category, quantity, rate string
	multipliers                     []string
}

// estimate makes a document of lines: amounts, categories, groups and base are
// sums of exact decimals, as the engine's are.
func estimate(t testing.TB, currency string, lines []plainLine) document.Document {
	t.Helper()
	c, err := money.FindCurrency(currency)
	if err != nil {
		t.Fatal(err)
	}
	d := document.Document{EngineVersion: document.EngineVersion, Caution: document.Caution}
	d.Job = document.Job{Project: "Brackwater salt works, loading quay", Scheme: "inner support", Currency: currency, EstimateClass: 4,
		BaseDate: "2026-06-01", Money: "base-date money of 2026-06-01, net of taxes", DesignBasis: "allowable", Factor: 3,
		RateBook: "ratio", RateBookNote: "Invented figures, for tests.", ReferencePrice: "900", Source: "brackwater.csv",
		Seed: 1, Replicates: 32, Trials: 4096}
	categories := map[string]money.Decimal{}
	groups := map[string]*document.Group{}
	for i, p := range lines {
		l := document.Line{ID: fmt.Sprintf("line/item %d/%s", i+1, p.category), Item: fmt.Sprintf("item %d", i+1), Group: p.group,
			Category: p.category, Driver: "delivered tonnes", Quantity: decimal(t, p.quantity), Unit: "t", Rate: decimal(t, p.rate),
			RateFormula: "reference price × ratio", Multipliers: []document.Multiplier{}, Assumptions: []string{"rate/" + p.category}}
		l.RateID, l.RateScope = "rate/"+p.category, "rate book"
		product := l.Rate
		for j, m := range p.multipliers {
			l.Multipliers = append(l.Multipliers, document.Multiplier{Name: fmt.Sprintf("multiplier %d", j+1), Scope: "group", Subject: p.group, Value: decimal(t, m)})
			product = product.Mul(decimal(t, m))
		}
		l.UnitPrice = product.Round(8).Round(c.MinorDigits + 2)
		exact, err := money.Product(l.Quantity, l.UnitPrice)
		if err != nil {
			t.Fatal(err)
		}
		l.Amount = c.Round(exact)
		d.Lines = append(d.Lines, l)
		categories[p.category] = categories[p.category].Add(l.Amount)
		d.Totals.Base = d.Totals.Base.Add(l.Amount)
		if groups[p.group] == nil {
			groups[p.group] = &document.Group{Group: p.group, Members: 1, Pieces: 2, Length: 24, Surface: 31.5,
				Net: decimal(t, "1.250"), Delivered: decimal(t, "1.500"), Purchased: decimal(t, "1.625")}
		}
		groups[p.group].Amount = groups[p.group].Amount.Add(l.Amount)
	}
	for _, name := range []string{"material", "fabrication", "coating", "inspection", "shipping", "erection"} {
		if a, ok := categories[name]; ok {
			x := document.Number(a.Float64())
			d.Categories = append(d.Categories, document.Category{Category: name, Amount: a, Mean: 1.04 * x, P10: 0.9 * x, P90: 1.3 * x})
		}
	}
	names := []string{}
	for name := range groups {
		names = append(names, name)
	}
	slices.Sort(names)
	for _, name := range names {
		d.Groups = append(d.Groups, *groups[name])
	}
	fillRange(t, &d, c)
	return d
}

// fillRange gives the document the exact quantiles of a lognormal total.
func fillRange(t testing.TB, d *document.Document, c money.Currency) {
	t.Helper()
	base := max(d.Totals.Base.Float64(), 1)
	total := distuv.LogNormal{Mu: math.Log(1.08 * base), Sigma: 0.2}
	d.Range = document.Range{Mean: document.Number(total.Mean()), MeanSE: document.Number(base / 1000), SD: document.Number(total.StdDev()),
		BaseAt: document.Number(total.CDF(base)), Method: "exact quantiles, for tests", Warnings: []string{}}
	for _, p := range []float64{0.1, 0.5, 0.8, 0.9} {
		d.Range.Percentiles = append(d.Range.Percentiles, document.Percentile{P: document.Number(p), Value: document.Number(total.Quantile(p)), SE: document.Number(base / 500)})
	}
	for i := range 101 {
		d.Range.Curve = append(d.Range.Curve, document.Number(total.Quantile(min(max(float64(i)/100, 1e-4), 1-1e-4))))
	}
	at, err := money.FromFloat(total.Quantile(0.8), c.MinorDigits)
	if err != nil {
		t.Fatal(err)
	}
	d.Totals.Confidence, d.Totals.AtConfidence, d.Totals.Contingency = 0.8, at, at.Sub(d.Totals.Base)
}

// brackwater is an estimate with everything in it: sized members, an unsafe
// shortcut, a failing section, secondary steel, spreads of every kind.
func brackwater(t testing.TB) document.Document {
	d := estimate(t, "EUR", []plainLine{
		{"boom", "material", "81.915", "900", nil}, {"boom", "fabrication", "78.203", "2160.0", []string{"1.15", "1.0500"}},
		{"boom", "coating", "78.203", "450.0", []string{"0.9725"}}, {"boom", "erection", "78.203", "1350.0", []string{"1.1"}},
		{"trestles", "material", "39.115", "900", nil}, {"trestles", "fabrication", "36.590", "2160.0", []string{"1.05"}},
		{"trestles", "coating", "36.590", "450.0", nil}, {"trestles", "erection", "36.590", "1350.0", nil},
		{"walkway", "material", "15.275", "900", nil}, {"walkway", "fabrication", "14.803", "2160.0", nil},
	})
	d.Items = []document.Item{
		{ID: "boom/CHS/size/tube boom", Group: "boom", Family: "CHS", Treatment: "size", Connection: "tube boom", Marks: []string{"B1", "B2"}, Pieces: 4,
			Length: 148, Surface: 612.5, Net: decimal(t, "61.240"), Delivered: decimal(t, "78.203"), Purchased: decimal(t, "81.915")},
		{ID: "trestles/HEB/check/trestles", Group: "trestles", Family: "HEB", Treatment: "check", Connection: "trestles", Marks: []string{"T1"}, Pieces: 8,
			Length: 96, Surface: 201, Net: decimal(t, "31.877"), Delivered: decimal(t, "36.590"), Purchased: decimal(t, "39.115")},
		{ID: "walkway/grating/not sized/simple beams", Group: "walkway", Family: "grating", Treatment: "not sized", Connection: "simple beams",
			Marks: []string{"W1"}, Pieces: 1, Length: 60, Net: decimal(t, "12.940"), Delivered: decimal(t, "14.803"), Purchased: decimal(t, "15.275")},
	}
	for i := range d.Items {
		it := &d.Items[i]
		bolts := document.Factor{Assumption: "allowance/bolts", Value: 1.02}
		for _, q := range []struct {
			driver string
			value  money.Decimal
			on     []document.Factor
		}{{"net tonnes", it.Net, nil}, {"delivered tonnes", it.Delivered, []document.Factor{bolts}}, {"purchased tonnes", it.Purchased, nil}} {
			measured := q.value.Float64()
			for _, f := range q.on {
				measured /= float64(f.Value)
			}
			it.Quantities = append(it.Quantities, document.Quantity{Driver: q.driver, Unit: "t", Value: q.value, Measured: document.Number(measured), Factors: q.on, Formula: "drawn mass × factors"})
		}
	}
	for i := range d.Lines {
		l := &d.Lines[i]
		l.Item = d.Items[slices.IndexFunc(d.Items, func(it document.Item) bool { return it.Group == l.Group })].ID
		l.ID = "line/" + l.Item + "/" + l.Category
		if l.Category == "material" {
			l.Driver = "purchased tonnes"
		}
	}
	for i, it := range d.Items { // sorted as the groups are
		g := &d.Groups[i]
		g.Members, g.Pieces, g.Length, g.Surface = len(it.Marks), it.Pieces, it.Length, it.Surface
		g.Net, g.Delivered, g.Purchased = it.Net, it.Delivered, it.Purchased
	}
	d.Totals.Net, d.Totals.Delivered, d.Totals.Purchased = decimal(t, "106.057"), decimal(t, "129.596"), decimal(t, "136.305")
	d.Totals.Members, d.Totals.Pieces, d.Totals.Unsafe = 4, 13, 2
	d.Members = []document.Member{
		{Mark: "B1", Group: "boom", Kind: "beam", Description: "inner boom", Item: d.Items[0].ID, Quantity: 2, Length: 37, Treatment: "size",
			Arrangement: "two equal spans", Section: "CHS 508 × 16", Grade: "S355", LineMass: 194, Net: 14356, Passes: true,
			Governing: "deflection", Utilisation: 0.9712, TotalLoad: 412.6,
			Ratios: []document.Ratio{{Effect: "span moment", Where: "span 1", Split: 100, Exact: 56, Unit: "kNm", Ratio: 1.78},
				{Effect: "reaction", Where: "support 2", Split: 100, Exact: 125, Unit: "kN", Ratio: 0.8, Unsafe: true}}},
		{Mark: "B2", Group: "boom", Kind: "beam", Item: d.Items[0].ID, Quantity: 2, Length: 37, Treatment: "size", Arrangement: "simple",
			Section: "CHS 711 × 20", Grade: "S355", LineMass: 341, Net: 25234, Passes: true, Governing: "bending", Utilisation: 0.8123, TotalLoad: 388},
		{Mark: "T1", Group: "trestles", Kind: "column", Item: d.Items[1].ID, Quantity: 8, Length: 12, Treatment: "check", Arrangement: "strut",
			Section: "HEB 300", Grade: "S235", LineMass: 117, Net: 11232, Governing: "flexural buckling", Utilisation: 1.0841, TotalLoad: 1204},
		{Mark: "W1", Group: "walkway", Kind: "grating", Item: d.Items[2].ID, Quantity: 1, Length: 60, Treatment: "not sized", Net: 12940, Passes: true},
	}
	d.Findings = []document.Finding{
		{Severity: document.Unsafe, Code: "unsafe-shortcut", Subject: "B1", Message: "The split method would be unsafe here: it gives 0.80 of the exact reaction (support 2). The size and the reactions shown come from the exact envelope.", Figures: []string{"member/B1/net"}},
		{Severity: document.Unsafe, Code: "section-fails", Subject: "T1", Message: "The given section HEB 300 fails: flexural buckling at 1.08. Its tonnage is priced as given; it will grow."},
		{Severity: document.Doubtful, Code: "outside-band", Subject: "walkway", Message: "216 kg/m lies outside the usual 20 to 60."},
		{Severity: document.Notice, Code: "possible-omission", Subject: "total", Message: "No stairs are in the schedule."},
	}
	d.Assumptions = []assumption.Entry{
		{ID: "allowance/bolts", Kind: assumption.Allowance, Statement: "Bolts, on net mass", Unit: "fraction", Source: "invented", Owner: "starting book",
			Confidence: assumption.Medium, Spread: &spread.Spread{Distribution: spread.PERT, Low: 0.01, Likely: 0.02, High: 0.03}, Feeds: []string{"base", "range"}},
		{ID: "setting/confidence", Kind: assumption.Setting, Statement: "The percentile that base and contingency reach", Value: "0.8", Source: "job",
			Owner: "estimator", Confidence: assumption.High, Feeds: []string{"contingency"}},
		{ID: "systemic/class 4", Kind: assumption.Systemic, Statement: "Systemic factor on the whole base", Source: "rate book", Owner: "starting book",
			Confidence: assumption.Low, Spread: &spread.Spread{Distribution: spread.Lognormal, Low: 0.794, Likely: 1, High: 1.2595}, Feeds: []string{"range"}},
	}
	brackwaterParts(t, &d)
	d.Inclusions = []string{"Steelwork as scheduled", "Connections, bolts, growth"}
	d.Exclusions = []string{"Foundations", "Taxes", "Fatigue checks"}
	d.Notes = []string{"Rates are invented."}
	return d
}

// brackwaterParts adds what goes beyond masses and money.
func brackwaterParts(t testing.TB, d *document.Document) {
	m := &d.Members[2]
	m.Inputs = []document.Measure{{Symbol: "permanent load", Value: 6, Unit: "kN/m"}, {Symbol: "axial load", Value: 1180, Unit: "kN"}}
	m.Checks = []document.Check{{ID: "flexural buckling", Clause: "EN 1993-1-1, 6.3.1", Formula: "NEd / Nb,Rd", Demand: 1204, Resistance: 1110.6, Unit: "kN",
		Utilisation: 1.0841, Inputs: []document.Measure{{Symbol: "Lcr", Value: 12, Unit: "m"}, {Symbol: "χ", Value: 0.317}}}}
	d.Range.Sensitivities = []document.Sensitivity{{Assumption: "systemic/class 4", Share: 0.61, Swing: 182_000, Narrowing: 121_000},
		{Assumption: "rate/fabrication", Share: 0.22, Swing: 101_000, Narrowing: 32_500}}
	d.Range.SensitivityMethod = "Share by covariance; swing and narrowing on the same draws."
	d.Range.Risks = []document.RiskRange{{Assumption: "risk/late permit", Name: "permit for the quay comes late", Probability: 0.2, Mean: 9000, Share: 0.012, Contingency: decimal(t, "2194.38")}}
	d.Shipping = document.Shipping{Limits: []string{"vehicle 13.6 × 2.55 × 2.7 m, 25 t", "galvanising bath 12.5 × 1.8 × 2.8 m"},
		Loads:    []document.Load{{Group: "boom", Pieces: 4, Splices: 8, ByMass: 3.13, ByLength: 4.2, ByVolume: 2.1, Vehicles: 6, Permits: 4, Governing: "length"}},
		Breaches: []document.Breach{{Mark: "B1", Envelope: "vehicle", Measure: "length", Value: 37, Limit: 13.6, Unit: "m", Needs: "two site splices in each piece"}}}
	d.Cutting = []document.CuttingPlan{{Section: "HEB 300", Grade: "S235", Method: "first fit", Kerf: 0.005, Stock: 120.8, Used: 96, Yield: 0.7947, Bound: 120.8, Proven: true,
		Bars: []document.Bars{{Length: 15.1, Count: 8}}, Purchased: decimal(t, "14.134"),
		Patterns: []document.Pattern{{Stock: 15.1, Count: 8, Cuts: []document.Cut{{Mark: "T1", Length: 12, Count: 1}}}}, Hint: "12.1 m bars would save 24 m"}}
	d.Class = document.Class{Stated: 4, Suggested: 4, Why: "two of eight items are defined", Low: -0.21, High: 0.29,
		Definition: []document.Definition{{Item: "loads", State: "preliminary"}, {Item: "connections", State: "none"}},
		Typical:    []document.Typical{{Industry: "process plant", LowFrom: -0.3, LowTo: -0.15, HighFrom: 0.2, HighTo: 0.5, Source: "AACE 18R-97 (from memory)"}}}
}
