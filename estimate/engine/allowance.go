package engine

import (
	"fmt"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/job"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// Ids of the register entries of the rate book.
const (
	biasID     = "allowance/sizing bias"
	boltsID    = "allowance/bolts"
	confID     = "setting/confidence"
	refPriceID = "setting/reference price"
)

func correlationID(group string) string { return "setting/correlation/" + assumption.Segment(group) }

func connectionID(class string) string { return "allowance/connections/" + assumption.Segment(class) }
func wasteID(kind string) string       { return "allowance/waste/" + assumption.Segment(kind) }
func growthID(class int) string        { return "allowance/growth/class " + strconv.Itoa(class) }
func systemicID(class int) string      { return "systemic/class " + strconv.Itoa(class) }

// bookAllowances picks the allowances of the job's estimate class from its book.
func bookAllowances(j job.Job) (takeoff.Allowances, takeoff.Allowance, error) {
	class := strconv.Itoa(j.Settings.EstimateClass)
	growth, ok := j.Book.Growth[class]
	deviation, found := j.Book.Systemic[class]
	if !ok || !found {
		return takeoff.Allowances{}, takeoff.Allowance{}, fmt.Errorf("the rate book %q has no figures for estimate class %s", j.Book.Name, class)
	}
	a := takeoff.Allowances{
		SizingBias:  takeoff.Allowance{ID: biasID, Spread: j.Book.SizingBias.Spread},
		Bolts:       takeoff.Allowance{ID: boltsID, Spread: j.Book.Bolts.Spread, Offset: 1},
		Growth:      takeoff.Allowance{ID: growthID(j.Settings.EstimateClass), Spread: growth.Spread, Offset: 1},
		Connections: map[string]takeoff.Allowance{},
		Waste:       map[string]takeoff.Allowance{},
	}
	for class, f := range j.Book.Connections {
		a.Connections[class] = takeoff.Allowance{ID: connectionID(class), Spread: f.Spread, Offset: 1}
	}
	for kind, f := range j.Book.Waste {
		a.Waste[kind] = takeoff.Allowance{ID: wasteID(kind), Spread: f.Spread, Offset: 1}
	}
	systemic := takeoff.Allowance{ID: systemicID(j.Settings.EstimateClass), Spread: spread.LogDeviation(deviation)}
	return a, systemic, nil
}
