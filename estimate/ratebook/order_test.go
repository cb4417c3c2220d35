package ratebook

import (
	"errors"
	"slices"
	"strings"
	"testing"
)

func percentage(id, category string, of ...string) Rate {
	return Rate{ID: id, Category: category, Driver: CostOf, Of: of}
}

func TestCategoryOrder(t *testing.T) {
	rates := []Rate{
		percentage("m", Margin, Material, Fabrication, Inspection, Engineering),
		percentage("i", Inspection, Fabrication, Erection), // of a category that is shown after it
		{ID: "w", Category: Erection, Driver: SiteHours, Of: []string{Margin}},
	}
	got, err := CategoryOrder(rates)
	want := []string{Material, Fabrication, Coating, Erection, Inspection, Shipping, Foundations, Engineering, Indirects, Margin, Owner}
	if err != nil || !slices.Equal(got, want) {
		t.Errorf("got %v, %v; want %v", got, err, want)
	}
	for _, b := range []Book{Ratio(), UnitRate()} {
		order, err := CategoryOrder(b.PricedRates())
		if err != nil || len(order) != len(Categories()) {
			t.Errorf("%s: %v, %v", b.Name, order, err)
		}
		for _, r := range b.Rates {
			for _, of := range r.Of {
				if slices.Index(order, of) >= slices.Index(order, r.Category) {
					t.Errorf("%s is priced before %s, which it is a fraction of", r.Category, of)
				}
			}
		}
	}
	if order, err := CategoryOrder([]Rate{percentage("x", "roof", "wall"), percentage("y", Margin, "wall")}); err != nil || len(order) != len(Categories()) {
		t.Errorf("unknown categories: %v, %v", order, err)
	}
}

func TestCategoryOrderNamesTheCycle(t *testing.T) {
	for want, rates := range map[string][]Rate{
		"inspection → margin → inspection":        {percentage("m", Margin, Inspection), percentage("i", Inspection, Fabrication, Margin)},
		"margin → margin":                         {percentage("m", Margin, Material, Margin)},
		"coating → erection → shipping → coating": {percentage("a", Shipping, Coating), percentage("b", Coating, Erection), percentage("c", Erection, Shipping)},
		"fabrication → engineering → fabrication": {percentage("a", Material, Fabrication), percentage("b", Fabrication, Engineering), percentage("c", Engineering, Fabrication)},
	} {
		_, err := CategoryOrder(rates)
		var cycle *CycleError
		if !errors.As(err, &cycle) || strings.Join(cycle.Categories, " → ") != want || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want %s", err, want)
		}
	}
}

func TestValidateNamesTheCycle(t *testing.T) {
	b := UnitRate()
	rateAt(t, &b, "inspection EXC2").Of = []string{Fabrication, Margin}
	got := faults(t, b)
	if len(got) != 1 || got[0].Field != "/rates" || got[0].Found != `"inspection → margin → inspection"` {
		t.Errorf("got %+v", got)
	}
}

func TestTheMostSpecificRateWins(t *testing.T) {
	place := Place{Mark: "B1", Group: "Boom", Family: "CHS", Waste: WasteTube}
	all := []Rate{
		{ID: "tube"},
		{ID: "tube", Scope: FamilyScope, Subject: "CHS"},
		{ID: "tube", Scope: GroupScope, Subject: "Boom"},
		{ID: "tube", Scope: MemberScope, Subject: "B1"},
	}
	for n := 1; n <= len(all); n++ {
		for _, backwards := range []bool{false, true} {
			rates := slices.Clone(all[:n])
			if backwards {
				slices.Reverse(rates)
			}
			if got := ResolveRates(rates, place); len(got) != 1 || rates[got[0]].Scope != all[n-1].Scope {
				t.Errorf("of the first %d scopes %v won, want %s", n, got, all[n-1].Scope)
			}
		}
	}
	if got := ResolveRates(all, Place{Mark: "B2", Group: "Tower", Family: "HEB"}); !slices.Equal(got, []int{0}) {
		t.Errorf("elsewhere %v won, want the book's", got)
	}
}

func TestResolveRatesSelects(t *testing.T) {
	rates := []Rate{
		{ID: "paint", Select: Selection{Coatings: []string{"", "C3 medium"}}},
		{ID: "all"},
		{ID: "tube", Select: Selection{Wastes: []string{WasteTube}, Treatments: []string{"size", "check"}}},
		{ID: "tube", Scope: GroupScope, Subject: "Boom", Select: Selection{Wastes: []string{WasteTube}, Executions: []string{"EXC3"}}},
	}
	for _, c := range []struct {
		place Place
		want  []int
	}{
		{Place{}, []int{1, 0}},
		{Place{Coating: "C4 high"}, []int{1}},
		{Place{Coating: "C3 medium", Waste: WasteTube, Treatment: "check"}, []int{1, 0, 2}},
		{Place{Coating: "x", Waste: WasteTube, Treatment: "not sized"}, []int{1}},
		{Place{Coating: "x", Waste: WasteTube, Treatment: "size", Group: "Boom", Execution: "EXC3"}, []int{1, 3}},
		{Place{Coating: "x", Waste: WasteTube, Treatment: "size", Group: "Boom", Execution: "EXC2"}, []int{1, 2}}, // the narrower one does not match
	} {
		if got := ResolveRates(rates, c.place); !slices.Equal(got, c.want) {
			t.Errorf("%+v: %v, want %v", c.place, got, c.want)
		}
	}
	for i, other := range []Place{{Treatment: "x"}, {Family: "x"}, {Connection: "x"}, {Waste: "x"}, {Coating: "x"}, {Execution: "x"}} {
		s := Selection{Treatments: []string{"y"}, Families: []string{"y"}, Connections: []string{"y"}, Wastes: []string{"y"}, Coatings: []string{"y"}, Executions: []string{"y"}}
		if s.Matches(other) {
			t.Errorf("list %d is not looked at", i)
		}
	}
	if got := ResolveRates([]Rate{{ID: "a"}, {ID: "a"}}, Place{}); !slices.Equal(got, []int{1}) {
		t.Errorf("of equals %v won, want the later one", got)
	}
}
