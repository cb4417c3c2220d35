package service

import (
	"cmp"
	"fmt"
	"maps"
	"slices"
	"strings"

	"spanwright/estimate/calibration"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

// basisOf brings the indices and exchange rates of a rate book into the form in which
// an outturn is compared: each index by its level over that of the base date, as the
// book escalates prices, at every date that the outturn needs. A category that no
// index covers follows the mean of all.
func basisOf(book ratebook.Book, o calibration.Outturn) (calibration.Basis, error) {
	b := calibration.Basis{Currency: book.Currency, BaseDate: book.BaseDate}
	for i, x := range book.Exchange {
		value, err := money.FromFloat(x.Spread.Base(), 6)
		if err != nil {
			return b, fmt.Errorf("exchange rate %d of the rate book %s: %w", i, book.Name, err)
		}
		b.Exchange = append(b.Exchange, calibration.ExchangeRate{Currency: x.Currency, Date: x.Date, Value: value, Source: x.Source})
	}
	for _, day := range daysOf(book, o) {
		var levels []money.Decimal
		for _, x := range book.Indices {
			level, ok := levelOf(book, x, day)
			if !ok {
				continue
			}
			levels = append(levels, level)
			for _, category := range x.Categories {
				b.Index = append(b.Index, calibration.IndexValue{Category: category, Date: day, Value: level, Source: x.Source})
			}
		}
		if len(levels) == 0 || len(levels) < len(book.Indices) {
			continue // a mean of some of them would jump
		}
		mean, err := meanOf(levels)
		if err != nil {
			return b, fmt.Errorf("mean of the indices of the rate book %s: %w", book.Name, err)
		}
		b.Index = append(b.Index, calibration.IndexValue{Date: day, Value: mean, Source: "mean of the indices of the rate book"})
	}
	return b, nil
}

// notesOn says what is supposed where a book has no index for a category.
func notesOn(book ratebook.Book) []string {
	without := uncovered(book)
	if len(book.Indices) == 0 || len(without) == 0 {
		return []string{}
	}
	return []string{fmt.Sprintf("No index of the rate book covers %s: they were brought to its base date by the mean of all its indices.", strings.Join(without, ", "))}
}

// levelOf is an index on a day over the index on the base date; false where the book
// has no value for one of them.
func levelOf(book ratebook.Book, x ratebook.Index, day string) (money.Decimal, bool) {
	if len(x.Categories) == 0 {
		return money.Zero, false
	}
	e, err := book.Escalation(x.Categories[0], book.BaseDate, day)
	return e.Value, err == nil && e.OK
}

// daysOf are the days at which a level is needed, rising: those of the outturn, the
// base date, and those at which the book itself has values, so that the last of them
// holds as long as the comparison lets it.
func daysOf(book ratebook.Book, o calibration.Outturn) []string {
	days := map[string]bool{book.BaseDate: true, o.Estimate.BaseDate: true, o.Completed: true}
	if o.CostDate != "" {
		days[o.CostDate] = true
	}
	for _, x := range book.Indices {
		for _, v := range x.Values {
			days[v.Date] = true
		}
	}
	maps.DeleteFunc(days, func(day string, _ bool) bool { return day < firstDay || day > lastDay })
	return slices.Sorted(maps.Keys(days))
}

// The days that a comparison knows, as package calibration reads them.
const (
	firstDay = "1950-01-01"
	lastDay  = "2199-12-31"
)

// uncovered are the categories that no index of the book names.
func uncovered(book ratebook.Book) []string {
	var out []string
	for _, c := range ratebook.Categories() {
		if !slices.ContainsFunc(book.Indices, func(x ratebook.Index) bool { return slices.Contains(x.Categories, c) }) {
			out = append(out, c)
		}
	}
	return out
}

func meanOf(levels []money.Decimal) (money.Decimal, error) {
	sum := 0.0
	for _, l := range levels {
		sum += l.Float64()
	}
	return money.FromFloat(sum/float64(len(levels)), 4)
}

// currentOf is what a proposal is held against: the book's own norms of hours and
// masses by kind, and its systemic deviations. Multipliers of past estimates are not
// known, so that those proposed are factors on what the estimates were priced with.
// class is the estimate class whose growth the masses are held against.
func currentOf(book ratebook.Book, class string) calibration.FitOptions {
	o := calibration.FitOptions{Systemic: map[string]float64{}}
	for class, deviation := range book.Systemic {
		if deviation > 0 {
			o.Systemic[class] = deviation
		}
	}
	for _, kind := range book.ConnectionClasses() {
		factor := (1 + book.Connections[kind].Spread.Base()) * massFactor(book, class)
		o.Current = append(o.Current, calibration.Current{Target: calibration.TargetAllowance, Name: calibration.FigureMass, Kind: kind, Spread: spread.NewFixed(factor)})
	}
	if book.Norms != nil {
		o.Current = append(o.Current, hoursOf(calibration.FigureShop, book.Norms.ShopHours)...)
		o.Current = append(o.Current, hoursOf(calibration.FigureSite, book.Norms.SiteHours)...)
	}
	return o
}

func hoursOf(figure string, norms map[string]ratebook.Figure) []calibration.Current {
	var out []calibration.Current
	for _, kind := range slices.Sorted(maps.Keys(norms)) {
		if s := norms[kind].Spread; s.Base() > 0 {
			out = append(out, calibration.Current{Target: calibration.TargetRate, Name: figure, Kind: kind, Spread: s})
		}
	}
	return out
}

// massFactor is what the book adds to net mass besides connections: growth and bolts.
func massFactor(book ratebook.Book, class string) float64 {
	return (1 + book.Growth[class].Spread.Base()) * (1 + book.Bolts.Spread.Base())
}

// classOf is the estimate class of most jobs, the rougher of two alike; 4 where none
// is stated.
func classOf(jobs []calibration.Comparable) string {
	count := map[string]int{}
	for _, j := range jobs {
		if j.Class != "" {
			count[j.Class]++
		}
	}
	best := ""
	for _, class := range []string{"5", "4", "3", "2", "1"} {
		if count[class] > count[best] {
			best = class
		}
	}
	return cmp.Or(best, "4")
}
