package calibration

import (
	"fmt"

	"spanwright/estimate/money"
)

// trouble is a complaint with the field that it is about.
type trouble struct {
	field string
	complaint
}

// check holds the fields of one outturn against each other. bad holds the fields
// that are faulty already, which are not judged again.
func check(o Outturn, bad map[string]bool) []trouble {
	var list []trouble
	add := func(field, found, problem, remedy string) {
		list = append(list, trouble{field, complaint{found, problem, remedy}})
	}
	order := func(early, late, earlyDate, lateDate, problem string) {
		if !bad[early] && !bad[late] && earlyDate != "" && lateDate != "" && earlyDate > lateDate {
			add(late, lateDate, problem+" "+earlyDate, "mend one of the two dates")
		}
	}
	order("estimate/base_date", "completed", o.Estimate.BaseDate, o.Completed, "lies before the estimate base date")
	order("estimate/base_date", "cost_date", o.Estimate.BaseDate, o.CostDate, "lies before the estimate base date")
	order("cost_date", "completed", o.CostDate, o.Completed, "lies before the cost date")
	list = append(list, checkMasses(o, bad)...)
	list = append(list, checkPercentiles(o.Estimate, bad)...)
	if len(o.Costs) == 0 && !anyBad(bad, "costs/") {
		add("costs", "", "no outturn cost is given", "give the cost of at least one category, such as Outturn fabrication")
	}
	if len(o.Estimate.Base) == 0 && !anyBad(bad, "estimate/base/") {
		add("estimate/base", "", "no past estimate is given", "give the base of at least one category, such as Estimate fabrication")
	}
	return list
}

func anyBad(bad map[string]bool, prefix string) bool {
	for _, c := range categories {
		if bad[prefix+c] {
			return true
		}
	}
	return false
}

// likeliest is how many times the take-off mass, or which part of it, another mass
// of the same job may be before it is taken for a slip of its unit.
const likeliest = 5

func checkMasses(o Outturn, bad map[string]bool) []trouble {
	var list []trouble
	for _, m := range []struct {
		field string
		mass  float64
	}{{"drawing_mass", o.DrawingMass}, {"weighed_mass", o.WeighedMass}, {"estimate/delivered_mass", o.Estimate.DeliveredMass}} {
		if m.mass == 0 || bad[m.field] || bad["take_off_mass"] {
			continue
		}
		if times := m.mass / o.TakeOffMass; !(times >= 1.0/likeliest && times <= likeliest) {
			list = append(list, trouble{m.field, complaint{fmt.Sprintf("%.6g kg", m.mass), fmt.Sprintf("is %.3g times the take-off mass, %.6g kg", times, o.TakeOffMass), "mend one of the two masses, or its unit"}})
		}
	}
	return list
}

// checkPercentiles wants those given above 0 and none below a lower one.
func checkPercentiles(p Past, bad map[string]bool) []trouble {
	var list []trouble
	var last *percentile
	for _, x := range p.percentiles() {
		field := fmt.Sprintf("estimate/p%d", x.percent)
		switch {
		case bad[field]:
			continue
		case x.amount.Sign() <= 0:
			list = append(list, trouble{field, complaint{x.amount.String(), "is no cost of a whole job", "enter an amount above 0, or leave it blank"}})
			continue
		case last != nil && x.amount.Cmp(*last.amount) < 0:
			list = append(list, trouble{field, complaint{x.amount.String(), fmt.Sprintf("lies below P%d, %s", last.percent, last.amount), "percentiles rise from P10 to P90"}})
		}
		last = &x
	}
	return list
}

// empty is an outturn whose maps are ready to be filled.
func empty() Outturn {
	return Outturn{Costs: map[string]money.Decimal{}, Estimate: Past{Base: map[string]money.Decimal{}}}
}
