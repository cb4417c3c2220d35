package calibration

import (
	"math"
	"slices"
)

// What a proposed change is made to.
const (
	TargetMultiplier = "multiplier" // a factor on a category of cost
	TargetAllowance  = "allowance"  // the factor from net to delivered mass: connections, bolts and growth
	TargetRate       = "rate"       // hours per tonne
	TargetSystemic   = "systemic"   // the deviation of the factor on the whole base
	TargetNone       = ""           // shown, and nothing is proposed from it
)

// Names of the figures that are no category.
const (
	FigureTotal   = "total"
	FigureMass    = "weighed over take-off mass"
	FigureDrawing = "drawing over take-off mass"
	FigureWeighed = "weighed over drawing mass"
	FigureShop    = "shop hours per tonne"
	FigureSite    = "site hours per tonne"
)

// measure is a figure before it is fitted: how it is called, and its sample of each
// job that has one.
type measure struct {
	name, target, words, unit string
	categories                []string
	scaled                    bool // its ratio multiplies what the estimate was priced with
	samples                   []sample
}

// measures lists every figure with its samples; jobs are sorted.
func measures(jobs []Comparable, perTonne bool) []measure {
	list := []measure{
		{name: FigureTotal, target: TargetNone, words: "outturn over estimate of the compared categories", scaled: true},
		{name: FigureMass, target: TargetAllowance, words: "weighed over take-off mass"},
		{name: FigureDrawing, target: TargetNone, words: "drawing over take-off mass"},
		{name: FigureWeighed, target: TargetNone, words: "weighed over drawing mass"},
		{name: FigureShop, target: TargetRate, words: "shop hours over weighed mass", unit: "h/t"},
		{name: FigureSite, target: TargetRate, words: "site hours over weighed mass", unit: "h/t"},
	}
	for _, j := range jobs {
		t := j.WeighedMass / 1000
		for i, ratio := range []float64{j.Outturn.Float64() / j.Estimate.Float64(), j.WeighedMass / j.TakeOffMass, j.DrawingMass / j.TakeOffMass,
			j.WeighedMass / j.DrawingMass, j.ShopHours / t, j.SiteHours / t} {
			list[i].add(j, ratio)
		}
	}
	return append(list, categoryMeasures(jobs, perTonne)...)
}

// withoutMass are the categories that do not follow the steel's mass.
var withoutMass = []string{Foundations, Owner}

func categoryMeasures(jobs []Comparable, perTonne bool) []measure {
	var list []measure
	for _, category := range categories {
		m := measure{name: category, target: TargetMultiplier, words: "outturn over estimate", categories: []string{category}, scaled: true}
		byMass := perTonne && !slices.Contains(withoutMass, category)
		if byMass {
			m.words = "outturn over estimate, each per tonne of its own mass"
		}
		for _, j := range jobs {
			i := slices.IndexFunc(j.Amounts, func(a Amount) bool { return a.Category == category })
			if i < 0 {
				continue
			}
			ratio := j.Amounts[i].Outturn.Float64() / j.Amounts[i].Estimate.Float64()
			if byMass {
				ratio *= j.DeliveredMass / j.WeighedMass
			}
			m.add(j, ratio)
		}
		list = append(list, m)
	}
	return list
}

// add takes a ratio that has a logarithm; what was not given, or is 0 on one side,
// has none.
func (m *measure) add(j Comparable, ratio float64) {
	if ratio > 0 && ratio < math.MaxFloat64 {
		m.samples = append(m.samples, sample{j.Job, j.Kind, math.Log(ratio)})
	}
}

// allPriced tells whether every job states the delivered mass that its estimate was
// priced on.
func allPriced(jobs []Comparable) bool {
	return !slices.ContainsFunc(jobs, func(j Comparable) bool { return !(j.DeliveredMass > 0) })
}
