package service

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"

	"spanwright/estimate/calibration"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/spread"
)

// amendment makes changes of a calibration to a copy of a rate book.
//
//	multiplier → a multiplier of the book on its categories
//	allowance  → the connections of its class: what is left of the factor from
//	             take-off to weighed mass beside the book's growth and bolts
//	rate       → the norm of hours of its class
//	systemic   → the deviation of its estimate class
type amendment struct {
	book        ratebook.Book
	calibration Calibration
	author      string
	decision    CalibrationDecision
}

func newAmendment(book ratebook.Book, c Calibration, author string) *amendment {
	book.Multipliers = slices.Clone(book.Multipliers)
	book.Connections, book.Systemic = maps.Clone(book.Connections), maps.Clone(book.Systemic)
	if book.Norms != nil {
		norms := *book.Norms
		norms.ShopHours, norms.SiteHours = maps.Clone(norms.ShopHours), maps.Clone(norms.SiteHours)
		book.Norms = &norms
	}
	return &amendment{book: book, calibration: c, author: author, decision: CalibrationDecision{Applied: []AppliedChange{}, Left: []LeftChange{}}}
}

// hoursFor is the category whose cost the hours of a figure are part of.
var hoursFor = map[string]string{calibration.FigureShop: ratebook.Fabrication, calibration.FigureSite: ratebook.Erection}

// overlap tells whether two changes hold the same effect: those that the fit itself
// excludes, and hours beside the multiplier on the cost of the same work.
func overlap(a, b calibration.Change) bool {
	if slices.Contains(a.Excludes, b.Target) || slices.Contains(b.Excludes, a.Target) {
		return true
	}
	hours := func(a, b calibration.Change) bool {
		return a.Target == calibration.TargetRate && b.Target == calibration.TargetMultiplier && slices.Contains(b.Categories, hoursFor[a.Name])
	}
	return hours(a, b) || hours(b, a)
}

// unfit says why the book cannot hold a change; empty where it can.
func (m *amendment) unfit(c calibration.Change) string {
	switch c.Target {
	case calibration.TargetMultiplier:
		if c.SubjectKind != "" {
			return "a multiplier of a rate book is for every kind of structure; this one is for " + c.SubjectKind + " alone"
		}
		return ""
	case calibration.TargetSystemic:
		return ""
	case calibration.TargetRate:
		if m.book.Norms == nil {
			return "the rate book has no norms of hours"
		}
	case calibration.TargetAllowance:
	default:
		return "nothing of a rate book is meant by the target " + c.Target
	}
	if c.SubjectKind == "" {
		return "the rate book has a figure of its own for each kind of structure, and these jobs say nothing of the other kinds"
	}
	if _, ok := m.book.Connections[c.SubjectKind]; !ok {
		return "the rate book has no connection class " + c.SubjectKind
	}
	if f := m.connections(c); c.Target == calibration.TargetAllowance && !(f.Spread.Likely >= 0) {
		return "the factor is below what growth and bolts of the rate book make alone, so that nothing is left for connections"
	}
	return ""
}

// apply makes a change that fits and notes it.
func (m *amendment) apply(i int, c calibration.Change) {
	switch c.Target {
	case calibration.TargetMultiplier:
		m.multiplier(i, c)
	case calibration.TargetAllowance:
		m.figure(i, "/connections/", m.book.Connections, c.SubjectKind, m.connections(c))
	case calibration.TargetRate:
		field, norms := "/norms/shop_hours/", m.book.Norms.ShopHours
		if c.Name == calibration.FigureSite {
			field, norms = "/norms/site_hours/", m.book.Norms.SiteHours
		}
		f := m.sourced(norms[c.SubjectKind], c)
		f.Spread = stated(c.New, 2)
		m.figure(i, field, norms, c.SubjectKind, f)
	case calibration.TargetSystemic:
		m.systemic(i, c)
	}
}

// stated is a lognormal spread with its median as likely value, rounded to places
// that products of prices can carry.
func stated(s spread.Spread, places int) spread.Spread {
	s.Likely = rounded(s.Base(), places)
	return s
}

func rounded(x float64, places int) float64 {
	unit := math.Pow10(places)
	return math.Round(x*unit) / unit
}

// source names the calibration, with the evidence of a change.
func (m *amendment) source(c calibration.Change) string {
	text := fmt.Sprintf("calibration %s: %s", m.calibration.ID, c.Evidence)
	if r := []rune(text); len(r) > 2000 {
		text = string(r[:1999]) + "…"
	}
	return text
}

// sourced is a figure of the book with the calibration as its source.
func (m *amendment) sourced(f ratebook.Figure, c calibration.Change) ratebook.Figure {
	f.Source, f.Author, f.Confidence, f.ValidUntil = m.source(c), m.author, "medium", ""
	return f
}

func (m *amendment) note(i int, field, before, after string) {
	m.decision.Applied = append(m.decision.Applied, AppliedChange{Change: i, Field: field, Before: before, After: after})
}

// figure replaces a figure by class. The maps are copies of the book's.
func (m *amendment) figure(i int, field string, figures map[string]ratebook.Figure, class string, f ratebook.Figure) {
	before := ""
	if old, ok := figures[class]; ok {
		before = spreadWords(old.Spread)
	}
	figures[class] = f
	m.note(i, field+pointerEscapes.Replace(class), before, spreadWords(f.Spread))
}

var pointerEscapes = strings.NewReplacer("~", "~0", "/", "~1")

// multiplier replaces the multiplier of an earlier calibration on the same category.
func (m *amendment) multiplier(i int, c calibration.Change) {
	made := ratebook.Multiplier{Name: "calibration of " + c.Name, Scope: ratebook.BookScope, Categories: c.Categories,
		Spread: stated(c.New, 3), Reason: m.source(c), Author: m.author}
	at := slices.IndexFunc(m.book.Multipliers, func(o ratebook.Multiplier) bool { return o.Name == made.Name && o.Scope == made.Scope })
	before := ""
	if at < 0 {
		at = len(m.book.Multipliers)
		m.book.Multipliers = append(m.book.Multipliers, made)
	} else {
		before = spreadWords(m.book.Multipliers[at].Spread)
		m.book.Multipliers[at] = made
	}
	m.note(i, fmt.Sprintf("/multipliers/%d", at), before, spreadWords(made.Spread))
}

// systemic sets the deviation of one estimate class, or of all.
func (m *amendment) systemic(i int, c calibration.Change) {
	classes := []string{c.Class}
	if c.Class == "" {
		classes = slices.Sorted(maps.Keys(m.book.Systemic))
	}
	for _, class := range classes {
		before := m.book.Systemic[class]
		m.book.Systemic[class] = rounded(logDeviation(c.New), 4)
		m.note(i, "/systemic/"+class, fmt.Sprintf("%.4g", before), fmt.Sprintf("%.4g", m.book.Systemic[class]))
	}
}

// z90 is the standard normal quantile of 0.9.
const z90 = 1.2815515655446004

// logDeviation is the standard deviation of the logarithm of a lognormal spread.
func logDeviation(s spread.Spread) float64 { return math.Log(s.High/s.Low) / (2 * z90) }

// leastDeviation keeps connections that were all scatter of growth from becoming
// certain; a judgement, no source.
const leastDeviation = 0.01

// connections is the allowance that makes, with growth and bolts of the book, the
// factor of a change. What growth and bolts scatter is taken out of its spread, as
// variances of logarithms, because they go on scattering beside it:
//
//	1 + connections = factor / ((1 + growth) (1 + bolts))
func (m *amendment) connections(c calibration.Change) ratebook.Figure {
	class := m.calibration.Evidence.GrowthClass
	growth, bolts := m.book.Growth[class].Spread, m.book.Bolts.Spread
	whole := logDeviation(c.New)
	variance := float64(whole*whole) - logVariance(growth) - logVariance(bolts)
	deviation := math.Max(leastDeviation, math.Sqrt(math.Max(0, variance)))
	median := c.New.Base() / massFactor(m.book, class)
	end := func(z float64) float64 { return rounded(median*math.Exp(z*deviation)-1, 6) }
	f := m.sourced(m.book.Connections[c.SubjectKind], c)
	f.Spread = spread.NewTriangular(end(-z90), rounded(median-1, 4), end(z90))
	f.Spread.Bounds = spread.BoundsPercentiles
	if f.Spread.Validate() != nil || f.Spread.Quantile(0) < 0 {
		// The left tail would be below no connections at all.
		f.Spread = spread.NewTriangular(0, f.Spread.Likely, end(2*z90))
	}
	return f
}

// logVariance is the variance of ln(1 + x) of an allowance, to first order.
func logVariance(s spread.Spread) float64 {
	relative := 1 + s.Mean()
	return s.Variance() / (relative * relative)
}

// spreadWords is a spread in one line.
func spreadWords(s spread.Spread) string {
	if s.Distribution == spread.Fixed {
		return fmt.Sprintf("%.4g", s.Base())
	}
	bounds := "from %.4g to %.4g"
	if s.Distribution == spread.Lognormal || s.Bounds == spread.BoundsPercentiles {
		bounds = "P10 %.4g, P90 %.4g"
	}
	return fmt.Sprintf("%.4g, "+bounds, s.Base(), s.Low, s.High)
}
