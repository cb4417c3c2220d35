package calibration

import (
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/money"
)

func amount(t testing.TB, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func amounts(t testing.TB, pairs map[string]string) map[string]money.Decimal {
	t.Helper()
	out := map[string]money.Decimal{}
	for k, v := range pairs {
		out[k] = amount(t, v)
	}
	return out
}

// oneJob is an invented job in GBP whose figures are easy to follow by hand.
func oneJob(t testing.TB) Outturn {
	t.Helper()
	p10, p50, p80, p90 := amount(t, "900"), amount(t, "1100"), amount(t, "1200"), amount(t, "1300")
	return Outturn{Job: "Pan walkway", Completed: "2022-03-31", CostDate: "2022-01-01", Currency: "GBP", Kind: "trestles",
		TakeOffMass: 1000, WeighedMass: 1150,
		Costs: amounts(t, map[string]string{Material: "330", Erection: "500.05", Owner: "40"}),
		Estimate: Past{Currency: "GBP", BaseDate: "2021-01-01", Base: amounts(t, map[string]string{Material: "300", Erection: "500", Foundations: "200"}),
			P10: &p10, P50: &p50, P80: &p80, P90: &p90},
		Source: "invented"}
}

func oneBasis(t testing.TB) Basis {
	t.Helper()
	return Basis{Currency: "EUR", BaseDate: "2024-01-01",
		Exchange: []ExchangeRate{{"GBP", "2023-12-29", amount(t, "1.15"), "invented"}, {"GBP", "2023-06-30", amount(t, "9"), "invented, older"}},
		Index: []IndexValue{
			{"", "", "2021-01-01", amount(t, "100"), "invented"}, {"", "", "2022-01-01", amount(t, "110"), "invented"}, {"", "", "2024-01-01", amount(t, "121"), "invented"},
			{Material, "GBP", "2020-12-01", amount(t, "80"), "invented"}, {Material, "GBP", "2021-12-15", amount(t, "160"), "invented"}, {Material, "GBP", "2023-12-01", amount(t, "120"), "invented"},
			{Material, "EUR", "2020-12-01", amount(t, "1"), "invented, of another currency"},
		}}
}

// By hand: material in the estimate 300 · 120/80 · 1.15 = 517.50, in the outturn
// 330 · 120/160 · 1.15 = 284.625, half away from zero 284.63; erection 500 · 1.21 ·
// 1.15 = 695.75 and 500.05 · 1.1 · 1.15 = 632.56325, 632.56. Both sides have 800 of
// the base of 1000; P50 goes with the base, 1100 · 1213.25/1000 = 1334.575, 1334.58.
func TestNormaliseByHand(t *testing.T) {
	got, left, err := Normalise([]Outturn{oneJob(t)}, oneBasis(t))
	if err != nil || len(left) > 0 {
		t.Fatalf("got %v, left %v", err, left)
	}
	want := []Comparable{{Job: "Pan walkway", Completed: "2022-03-31", Kind: "trestles",
		Amounts:  []Amount{{Material, amount(t, "517.50"), amount(t, "284.63")}, {Erection, amount(t, "695.75"), amount(t, "632.56")}},
		Estimate: amount(t, "1213.25"), Outturn: amount(t, "917.19"), ScopeShare: 0.8,
		Percentiles: []Percentile{{10, amount(t, "1091.93")}, {50, amount(t, "1334.58")}, {80, amount(t, "1455.90")}, {90, amount(t, "1577.23")}},
		TakeOffMass: 1000, WeighedMass: 1150,
		Notes: []string{"not compared: foundations (in the estimate alone), owner (in the outturn alone)"}}}
	if diff := cmp.Diff(want, got, sameMoney); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

func TestEveryJobLeftHasItsReasons(t *testing.T) {
	for _, c := range []struct {
		name   string
		change func(*Outturn, *Basis)
		words  []string
	}{
		{"currency without a rate", func(o *Outturn, _ *Basis) { o.Currency = "NOK" }, []string{"no exchange rate from NOK to EUR holds on 2024-01-01: none is dated before"}},
		{"rate too old", func(_ *Outturn, b *Basis) { b.Exchange = b.Exchange[1:] }, []string{"the last before is of 2023-06-30, and one holds for 92 days"}},
		{"index without the date", func(o *Outturn, _ *Basis) { o.CostDate, o.Completed = "", "2023-07-01" }, []string{"index for material has no value that holds on 2023-07-01", "index for erection has no value"}},
		{"no index", func(_ *Outturn, b *Basis) { b.Index = nil }, []string{"no price index for material in GBP", "no price index for erection"}},
		{"no common category", func(o *Outturn, _ *Basis) {
			delete(o.Costs, Material)
			delete(o.Costs, Erection)
		}, []string{"no category is both"}},
		{"costs of nothing", func(o *Outturn, _ *Basis) { o.Costs[Material], o.Costs[Erection] = money.Zero, money.Zero }, []string{"outturn of the common categories is not above 0"}},
		{"negative cost", func(o *Outturn, _ *Basis) { o.Costs[Material] = o.Costs[Material].Neg() }, []string{"the cost of material is negative"}},
		{"no kind", func(o *Outturn, _ *Basis) { o.Kind = "" }, []string{"no kind of structure"}},
		{"no tonnage", func(o *Outturn, _ *Basis) { o.WeighedMass = 0 }, []string{"no tonnage"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			o, b := oneJob(t), oneBasis(t)
			c.change(&o, &b)
			got, left, err := Normalise([]Outturn{o}, b)
			if err != nil {
				t.Fatal(err)
			}
			if len(got) != 0 || len(left) != 1 || left[0].Job != o.Job {
				t.Fatalf("got %v, left %v", got, left)
			}
			for _, w := range c.words {
				if !strings.Contains(strings.Join(left[0].Reasons, "\n"), w) {
					t.Errorf("reasons %q lack %q", left[0].Reasons, w)
				}
			}
		})
	}
}

func TestZeroOnOneSideIsNoted(t *testing.T) {
	o := oneJob(t)
	o.Costs[Erection] = money.Zero
	got, _, err := Normalise([]Outturn{o}, oneBasis(t))
	if err != nil || len(got) != 1 || !slices.Contains(got[0].Notes, "in the total alone, being 0 on one side: erection") {
		t.Errorf("got %+v, %v", got, err)
	}
}

func TestSameDayAndCurrencyNeedNothing(t *testing.T) {
	o := oneJob(t)
	o.CostDate, o.Completed = "2021-01-01", "2021-01-01"
	got, left, err := Normalise([]Outturn{o}, Basis{Currency: "GBP", BaseDate: "2021-01-01"})
	if err != nil || len(left) > 0 {
		t.Fatalf("got %v, left %v", err, left)
	}
	if got[0].Outturn.String() != "830.05" || got[0].Estimate.String() != "800.00" {
		t.Errorf("got %s and %s, want 830.05 and 800.00 unchanged", got[0].Outturn, got[0].Estimate)
	}
}

func TestBasisFaultsHavePointers(t *testing.T) {
	b := oneBasis(t)
	b.Currency, b.BaseDate = "EURO", "soon"
	b.Exchange[0].Value, b.Exchange[1].Source = money.Zero, ""
	b.Index[0].Category, b.Index[2].Date = "steel", "2022-01-01"
	var faults Faults
	if err := b.Validate(); !errors.As(err, &faults) {
		t.Fatalf("got %v", err)
	}
	var got []string
	for _, f := range faults {
		got = append(got, f.Pointer)
	}
	if diff := cmp.Diff([]string{"/currency", "/base_date", "/exchange/0/value", "/exchange/1/source", "/index/0/category", "/index/2"}, got); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
	if _, _, err := Normalise(nil, b); err == nil {
		t.Error("a faulty basis was accepted")
	}
}

func demoBasis(t testing.TB) Basis {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", "basis.json"))
	if err != nil {
		t.Fatal(err)
	}
	var b Basis
	if err := json.Unmarshal(data, &b); err != nil {
		t.Fatal(err)
	}
	return b
}

func TestNormaliseKeepsEveryJobOnce(t *testing.T) {
	list := demo(t)
	list[3].Currency = "NOK"
	list = append(list, list[5])
	got, left, err := Normalise(list, demoBasis(t))
	if err != nil {
		t.Fatal(err)
	}
	if len(got) != 22 || len(left) != 3 {
		t.Fatalf("got %d comparable and %d left, want 22 and 3: %v", len(got), len(left), left)
	}
	slices.Reverse(list)
	again, leftAgain, err := Normalise(list, demoBasis(t))
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(got, again, sameMoney); diff != "" {
		t.Errorf("the order of the jobs changes the result:\n%s", diff)
	}
	if diff := cmp.Diff(left, leftAgain); diff != "" {
		t.Errorf("the order of the jobs changes who is left out:\n%s", diff)
	}
}
