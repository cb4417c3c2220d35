package engine

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/takeoff"
)

// needed are the categories without which steel is not priced, and the items that
// need them.
var needed = []struct {
	category string
	by       func(takeoff.Item) bool
}{
	{ratebook.Material, func(it takeoff.Item) bool { return it.Purchased.Sign() > 0 }},
	{ratebook.Fabrication, func(it takeoff.Item) bool {
		return it.Delivered.Sign() > 0 && it.Connection != takeoff.ReadyMade && !bolted(it)
	}},
	{ratebook.Coating, func(it takeoff.Item) bool { return needsCoat(it) }},
	{ratebook.Inspection, func(it takeoff.Item) bool {
		return it.Delivered.Sign() > 0 && it.Connection != takeoff.ReadyMade && !bolted(it)
	}},
	{ratebook.Erection, func(it takeoff.Item) bool { return it.Delivered.Sign() > 0 && !bolted(it) }},
}

// bolted tells whether an item is bolts alone: their work is that of the joints.
func bolted(it takeoff.Item) bool {
	return it.Treatment == takeoff.Joint && it.Purchased.Sign() == 0
}

func needsCoat(it takeoff.Item) bool {
	return it.Delivered.Sign() > 0 && it.Connection != takeoff.ReadyMade && it.Treatment != takeoff.Joint && it.Coating != "" && !strings.EqualFold(it.Coating, takeoff.Uncoated)
}

// coverageFindings say which steel or work no rate of the book prices: what is
// missing must never look like what costs nothing.
func (r *run) coverageFindings() []document.Finding {
	priced := map[string]bool{} // item, category
	for _, l := range r.priced.Lines {
		priced[l.Item+"\x00"+l.Category] = true
	}
	var out []document.Finding
	for _, n := range needed {
		t, marks := money.Zero, []string{}
		for _, it := range r.items {
			if n.by(it) && !priced[it.ID+"\x00"+n.category] {
				t, marks = t.Add(it.Delivered), append(marks, it.Marks...)
			}
		}
		if len(marks) == 0 {
			continue
		}
		slices.Sort(marks)
		marks = slices.Compact(marks)
		shown := strings.Join(marks[:min(12, len(marks))], ", ")
		if len(marks) > 12 {
			shown += fmt.Sprintf(" and %d more", len(marks)-12)
		}
		out = append(out, document.Finding{Severity: document.Doubtful, Code: "unpriced", Subject: "total", Figures: []string{"category/" + n.category, "base"},
			Message: fmt.Sprintf("No rate of the book prices the %s of %s t delivered (%s): it is in the total at nothing.", n.category, t, shown)})
	}
	return out
}

// unusedFindings say which settings of the job this rate book has no use for.
func (r *run) unusedFindings() []document.Finding {
	var out []document.Finding
	add := func(code, format string, args ...any) {
		out = append(out, document.Finding{Severity: document.Doubtful, Code: code, Subject: "total", Figures: []string{"base"}, Message: fmt.Sprintf(format, args...)})
	}
	s, b := r.job.Settings, r.job.Book
	for _, c := range s.SiteConditions {
		if !slices.ContainsFunc(b.Site, func(m ratebook.SiteMultiplier) bool { return m.Condition == c }) {
			add("condition-unpriced", "The site is named %q, and the rate book %q has no multiplier for it: it changes nothing.", c, b.Name)
		}
	}
	if b.Norms != nil {
		return out
	}
	if s.HaulDistance > 0 {
		add("haul-unpriced", "The haul distance changes nothing: the rate book %q prices shipping by the tonne.", b.Name)
	}
	if r.any(func(m sizedMember) bool { return len(m.member.Joints) > 0 }) {
		add("joints-unpriced", "Joints are counted in the schedule, and the rate book %q has no norms for them: the allowance of the connection class stands.", b.Name)
	}
	if r.any(func(m sizedMember) bool { return m.member.Concrete > 0 }) && !r.prices(ratebook.Foundations) {
		add("concrete-unpriced", "The schedule has concrete, and the rate book %q has no rate for it: it is in the total at nothing.", b.Name)
	}
	return out
}

func (r *run) prices(category string) bool { _, ok := r.priced.Categories[category]; return ok }

// Beyond these a date is far from what is known: years after the last value of an
// index, months between an exchange rate and the base date (common practice, no
// source).
const (
	farYears  = 3
	farMonths = 12
)

// dateFindings say where prices are carried far beyond what their index or exchange
// rate knows.
func (r *run) dateFindings() []document.Finding {
	var out []document.Finding
	add := func(figure, format string, args ...any) {
		out = append(out, document.Finding{Severity: document.Doubtful, Code: "far-date", Subject: "total", Figures: []string{figure}, Message: fmt.Sprintf(format, args...)})
	}
	s, b := r.job.Settings, r.job.Book
	latest := s.BaseDate
	if s.Money == schedule.MoneyOutturn {
		latest = max(latest, s.SpendDate)
	}
	for _, x := range b.Indices {
		if n := len(x.Values); n > 0 && years(x.Values[n-1].Date, latest) > farYears {
			add("base", "The index “%s” ends on %s; prices are carried on to %s by its growth alone.", x.Name, x.Values[n-1].Date, latest)
		}
	}
	if exchanges, err := b.ExchangeTo(s.Currency); err == nil {
		for _, from := range sortedKeys(exchanges) {
			if x := exchanges[from]; math.Abs(years(x.Date, s.BaseDate))*12 > farMonths {
				add("base", "The exchange rate of %s into %s is dated %s, the base date is %s.", from, s.Currency, x.Date, s.BaseDate)
			}
		}
	}
	return out
}

// years between two dates; 0 where one is none.
func years(from, to string) float64 {
	a, err := time.Parse(time.DateOnly, from)
	if err != nil {
		return 0
	}
	b, err := time.Parse(time.DateOnly, to)
	if err != nil {
		return 0
	}
	return b.Sub(a).Hours() / 24 / 365.25
}

// leastYield is the part of the stock length that a cutting plan should use (common
// practice, no source).
const leastYield = 0.75

// purchaseFindings say where much of the stock is cut to waste.
func purchaseFindings(plans []document.CuttingPlan) []document.Finding {
	var low, hints []string
	for _, p := range plans {
		if p.Yield >= leastYield {
			continue
		}
		low = append(low, fmt.Sprintf("%s %s %.0f %% of %s m", p.Section, p.Grade, 100*float64(p.Yield), four(float64(p.Stock))))
		if p.Hint != "" {
			hints = append(hints, sentence(p.Hint))
		}
	}
	if len(low) == 0 {
		return nil
	}
	message := "Bars of which little becomes pieces: " + strings.Join(low, "; ") + ". Other stock lengths or lengths of pieces would save steel."
	return []document.Finding{{Severity: document.Notice, Code: "low-yield", Subject: "total", Message: strings.Join(append([]string{message}, hints...), " ")}}
}

// four writes a number to four figures, in full.
func four(x float64) string {
	short, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 4, 64), 64)
	if err != nil {
		return "–"
	}
	return strconv.FormatFloat(short, 'f', -1, 64)
}
