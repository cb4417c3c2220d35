package service

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/google/uuid"

	"spanwright/estimate/calibration"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
)

func decimal(t *testing.T, text string) money.Decimal {
	t.Helper()
	d, err := money.Parse(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// indexedBook has two indices without growth and one exchange rate.
func indexedBook(t *testing.T) ratebook.Book {
	t.Helper()
	b := ratebook.Ratio()
	b.BaseDate = "2026-01-01"
	values := func(first, last string) []ratebook.IndexValue {
		return []ratebook.IndexValue{{Date: "2025-01-01", Value: decimal(t, first)}, {Date: "2026-01-01", Value: decimal(t, last)}}
	}
	b.Indices = []ratebook.Index{
		{Name: "steel", Categories: []string{ratebook.Material}, Source: "invented", Values: values("100", "110")},
		{Name: "labour", Categories: []string{ratebook.Fabrication, ratebook.Erection}, Source: "invented", Values: values("100", "104")},
	}
	rate := b.Bolts
	rate.Spread.Low, rate.Spread.Likely, rate.Spread.High = 1.1, 1.16, 1.2
	b.Exchange = []ratebook.Exchange{{Currency: "GBP", Figure: rate, Date: "2025-12-15"}}
	if err := b.Validate(); err != nil {
		t.Fatal(err)
	}
	return b
}

// finished is a job whose outturn is at prices of a day and whose estimate is at those
// of the base date, 1000 in each category.
func finished(t *testing.T, job, currency, day string, categories ...string) Outturn {
	t.Helper()
	o := calibration.Outturn{Job: job, Completed: day, Currency: currency, Kind: "trestles", TakeOffMass: 1000, WeighedMass: 1200, Costs: map[string]money.Decimal{},
		Estimate: calibration.Past{Class: "4", Currency: "EUR", BaseDate: "2026-01-01", Base: map[string]money.Decimal{}}, Source: "invented"}
	for _, c := range categories {
		o.Costs[c], o.Estimate.Base[c] = decimal(t, "1000"), decimal(t, "1000")
	}
	return Outturn{ID: uuid.New(), Value: o}
}

// By hand: on 2025-07-02, 182 of 365 days into the year, steel is 100 + 10 · 182/365 =
// 104.9863 and labour 101.9945. Over 110 and 104, to 4 places, that is 0.9544 and
// 0.9807, their mean 0.96755, half away from zero 0.9676. So 1000 of material is
// 1047.78, of fabrication 1019.68, of margin, which no index covers, 1033.48; in GBP of
// the base date 1160.
func TestBasisFollowsTheRateBook(t *testing.T) {
	book := indexedBook(t)
	for _, test := range []struct {
		o    Outturn
		want string // the outturn of the first category at the basis
	}{
		{finished(t, "steel", "EUR", "2025-07-02", ratebook.Material), "1047.78"},
		{finished(t, "labour", "EUR", "2025-07-02", ratebook.Fabrication), "1019.68"},
		{finished(t, "margin", "EUR", "2025-07-02", ratebook.Margin), "1033.48"},
		{finished(t, "pounds", "GBP", "2026-01-01", ratebook.Material), "1160.00"},
		{finished(t, "first day", "EUR", "2025-01-01", ratebook.Material), "1100.00"},
		{finished(t, "within a quarter after the last value", "EUR", "2026-03-01", ratebook.Material), "1000.00"},
	} {
		basis, err := basisOf(book, test.o.Value)
		if err != nil {
			t.Fatal(err)
		}
		jobs, left, err := calibration.Normalise([]calibration.Outturn{test.o.Value}, basis)
		if err != nil || len(jobs) != 1 {
			t.Errorf("%s: %v, left %v", test.o.Value.Job, err, left)
			continue
		}
		// 1100 over 100 is 0.9091 to 4 places, so that the last digits are rough.
		got, want := jobs[0].Amounts[0].Outturn.Float64(), decimal(t, test.want).Float64()
		if !(want-0.1 <= got && got <= want+0.1) {
			t.Errorf("%s: got %v, want %v", test.o.Value.Job, got, want)
		}
	}
}

func TestJobsWithoutAPlaceInTheBasisAreLeftOut(t *testing.T) {
	book := RateBook{ID: uuid.New(), Number: 1, Content: indexedBook(t)}
	outturns := []Outturn{
		finished(t, "before the first value", "EUR", "2024-12-31", ratebook.Material),
		finished(t, "in dollars", "USD", "2026-01-01", ratebook.Material),
		finished(t, "long after the last value", "EUR", "2026-06-01", ratebook.Material),
	}
	_, _, err := fitted(book, outturns)
	var e *Error
	if !errors.As(err, &e) || e.Kind != Invalid || len(e.Faults) != 4 || !strings.Contains(e.Message, "0 comparable jobs were found and at least 20 are needed; 3 left out") {
		t.Fatalf("%v", err)
	}
	for i, words := range []string{"price index for material", "no exchange rate from USD to EUR", "price index for material"} {
		if f := e.Faults[i+1]; f.Found != outturns[i].Value.Job || !strings.Contains(f.Problem, words) {
			t.Errorf("fault %+v, want %q", f, words)
		}
	}
}

// A refusal lists a hundred jobs at the most.
func TestManyJobsLeftOut(t *testing.T) {
	var outturns []Outturn
	for i := range mostLeft + 5 {
		outturns = append(outturns, finished(t, fmt.Sprintf("job %03d", i), "USD", "2026-01-01", ratebook.Material))
	}
	_, _, err := fitted(RateBook{Content: indexedBook(t)}, outturns)
	var e *Error
	if !errors.As(err, &e) || len(e.Faults) != mostLeft+2 || !strings.Contains(e.Faults[mostLeft+1].Found, "105 jobs in all") {
		t.Errorf("%v", err)
	}
}

// A base date that no comparison knows is the caller's fault and names the place.
func TestBookThatCannotBeABasis(t *testing.T) {
	book := indexedBook(t)
	book.BaseDate = "1900-01-01"
	_, _, err := fitted(RateBook{Content: book}, []Outturn{finished(t, "a", "EUR", "2026-01-01", ratebook.Material)})
	var e *Error
	if !errors.As(err, &e) || e.Kind != Invalid || !slices.ContainsFunc(e.Faults, func(f Fault) bool { return strings.Contains(f.Problem, "/base_date") }) {
		t.Errorf("%v", err)
	}
}

func TestClassOfMostJobs(t *testing.T) {
	for _, test := range []struct {
		classes []string
		want    string
	}{{nil, "4"}, {[]string{"", ""}, "4"}, {[]string{"3", "2", "3"}, "3"}, {[]string{"4", "5"}, "5"}, {[]string{"1", "", ""}, "1"}} {
		var jobs []calibration.Comparable
		for _, c := range test.classes {
			jobs = append(jobs, calibration.Comparable{Class: c})
		}
		if got := classOf(jobs); got != test.want {
			t.Errorf("%q: class %s, want %s", test.classes, got, test.want)
		}
	}
}

// What the proposal is held against are the book's own figures. By hand for trestles:
// 1.11 · 1.12 · 1.02 = 1.268064.
func TestCurrentFiguresAreThoseOfTheBook(t *testing.T) {
	o := currentOf(ratebook.UnitRate(), "4")
	find := func(name, kind string) float64 {
		for _, c := range o.Current {
			if c.Name == name && c.Kind == kind {
				return c.Spread.Base()
			}
		}
		return 0
	}
	if got := find(calibration.FigureMass, "trestles"); !(1.268063 < got && got < 1.268065) {
		t.Errorf("mass factor %v, want 1.268064", got)
	}
	if shop, site := find(calibration.FigureShop, "trestles"), find(calibration.FigureSite, "trestles"); shop != 15 || site != 9 {
		t.Errorf("hours %v and %v, want 15 and 9 of the book", shop, site)
	}
	if len(o.Systemic) != 5 || o.Systemic["4"] != 0.18 {
		t.Errorf("systemic %v", o.Systemic)
	}
}
