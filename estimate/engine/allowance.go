package engine

import (
	"fmt"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/estimate/job"
	"spanwright/estimate/spread"
	"spanwright/estimate/takeoff"
)

// Ids of register entries of the job as a whole.
const (
	confID     = "setting/confidence"
	refPriceID = "setting/reference price"
)

func correlationID(group string) string { return "setting/correlation/" + assumption.Segment(group) }

func systemicID(class int) string { return "systemic/class " + strconv.Itoa(class) }

// systemicFactor is the factor on the whole base of the job's estimate class.
func systemicFactor(j job.Job) (takeoff.Allowance, error) {
	deviation, ok := j.Book.Systemic[strconv.Itoa(j.Settings.EstimateClass)]
	if !ok {
		return takeoff.Allowance{}, fmt.Errorf("the rate book %q has no systemic deviation for estimate class %d", j.Book.Name, j.Settings.EstimateClass)
	}
	return takeoff.Allowance{ID: systemicID(j.Settings.EstimateClass), Spread: spread.LogDeviation(deviation)}, nil
}
