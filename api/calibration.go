package api

import (
	"context"
	"net/http"

	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/calibration"
	"spanwright/estimate/spread"
)

type newCalibration struct {
	Keyed
	Body service.NewCalibration
}

type newDecision struct {
	ByID
	Keyed
	Body service.NewDecision
}

func (a *api) calibrations() {
	register(a, operation(http.MethodGet, "/v1/calibrations", "list-calibrations", tagOutturns, "List calibrations without their proposals, newest first"),
		func(ctx context.Context, r *request, in *Paged) (*listOutput[service.Calibration], error) {
			l, err := a.service.Calibrations(ctx, r.Actor, in.page())
			return listed(r, *in, l, err)
		})
	register(a, described(operation(http.MethodPost, "/v1/calibrations", "create-calibration", tagOutturns, "Fit the outturns in force",
		writing(http.StatusConflict, http.StatusNotFound, http.StatusTooManyRequests)...),
		"Brings every outturn in force to currency, base date, indices and exchange rates of a rate book, tests past ranges, fits each figure with shrinkage by kind of structure and tests the fit by leaving one job out. Fewer than 20 comparable jobs are refused, with the reason of each that was left out. The rate book stays as it is: a proposed multiplier is a factor on what the past estimates were priced with, and takes the place of one of an earlier calibration; outturns whose estimates were priced with that one are to be withdrawn before."),
		func(ctx context.Context, r *request, in *newCalibration) (*made[service.Calibration], error) {
			c, err := a.service.CreateCalibration(ctx, r.Actor, in.Body, r.attempt(in.Keyed, r.Body))
			return &made[service.Calibration]{Location: "/v1/calibrations/" + c.ID.String(), ETag: etag(c.Version), Body: c}, err
		})
	register(a, operation(http.MethodGet, "/v1/calibrations/{id}", "get-calibration", tagOutturns, "Read a calibration with its proposal and evidence"),
		func(ctx context.Context, r *request, in *ByID) (*versioned[service.Calibration], error) {
			c, err := a.service.Calibration(ctx, r.Actor, in.ID)
			return &versioned[service.Calibration]{ETag: etag(c.Version), Body: c}, err
		})
	o := described(operation(http.MethodPost, "/v1/calibrations/{id}/decision", "decide-calibration", tagOutturns, "Accept or decline a calibration", writing(http.StatusConflict)...),
		"A calibration is decided once. Acceptance makes the next version of the rate book with the changes named, or with every recommended one that the book can hold; the answer says what was changed and what was left, with the reason. It is refused with 409 when the rate book has got a newer version since the fit.")
	o.DefaultStatus = http.StatusOK
	register(a, o, func(ctx context.Context, r *request, in *newDecision) (*versioned[service.Calibration], error) {
		c, err := a.service.DecideCalibration(ctx, r.Actor, in.ID, in.Body, r.attempt(in.Keyed, r.Body))
		return &versioned[service.Calibration]{ETag: etag(c.Version), Body: c}, err
	})
}

// exampleCalibration is an accepted one of invented figures, cut short.
func exampleCalibration() service.Calibration {
	old, at := spread.NewFixed(1), exampleTime
	prediction := spread.NewLognormal(0.98, 1.24)
	score := calibration.Score{Figure: calibration.Fabrication, Jobs: 24, Band: calibration.Tally{Name: "within P10 to P90", Promised: 0.8, Jobs: 24, Count: 20, Expected: 19.2, Low: 0.63, High: 0.95},
		Eighty:   calibration.Tally{Name: "at or below P80", Promised: 0.8, Jobs: 24, Count: 19, Expected: 19.2, Low: 0.58, High: 0.93},
		LogScore: 0.9, Compared: 24, Against: "the old centre, with the other jobs' scatter about it", Gain: 0.4, GainError: 0.1, Improves: true, Statement: "The fit predicts better."}
	p := calibration.Proposal{Jobs: []string{"Pan house footbridge"}, Left: []calibration.Left{{Job: "Loading boom", Reasons: []string{"no price index for coating in EUR"}}},
		PerTonne: true, Unfitted: []calibration.Left{}, Recommended: true, Statement: "Totals: the fit predicts better. 1 of 1 changes are recommended.",
		Figures: []calibration.Figure{{Name: calibration.Fabrication, Target: calibration.TargetMultiplier, Measure: "outturn over estimate", Jobs: 24, Median: 1.1, Between: 0.05, Within: 0.08,
			Kinds: []calibration.KindFit{{Jobs: 0, Weight: 1, Median: 1.1, Deviation: 0.08, Freedom: 20, Prediction: prediction}}, BackTest: score}},
		Changes: []calibration.Change{{Target: calibration.TargetMultiplier, Name: calibration.Fabrication, Categories: []string{calibration.Fabrication}, Old: &old,
			New: prediction, Jobs: 24, Recommended: true, Evidence: "outturn over estimate: median 1.102, P10 0.98, P90 1.24; 1 before"}}}
	return service.Calibration{ID: exampleID, RateBook: exampleID, RateBookNumber: 1, SHA256: exampleSum, Jobs: 24, LeftOut: 1, Recommended: true, Statement: p.Statement,
		State: service.Accepted, Reason: "twenty-four jobs agree", MadeNumber: 2, DecidedAt: &at, DecidedBy: "estimating manager", Version: 2, CreatedAt: at, CreatedBy: "estimating desk",
		Decision: &service.CalibrationDecision{Applied: []service.AppliedChange{{Field: "/multipliers/4", After: "1.102, P10 0.98, P90 1.24"}}, Left: []service.LeftChange{}},
		Proposal: &p, Evidence: &service.CalibrationEvidence{Currency: "EUR", BaseDate: "2026-06-01", GrowthClass: "4", Notes: []string{}, Outturns: []uuid.UUID{exampleID},
			Coverage: calibration.Covered{Tallies: []calibration.Tally{score.Eighty}, Left: []calibration.Left{}, Verdict: "Past ranges held about as often as they said."}}}
}
