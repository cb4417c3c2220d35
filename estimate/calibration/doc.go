// Package calibration learns from finished jobs: it holds what they really weighed
// and cost against what was estimated for them.
//
//	cells or JSON → Read, ReadJSON → []Outturn (all faults at once)
//	outturns + Basis (indices, dated exchange rates) → Normalise → []Comparable, []Left
//	comparables → Coverage: did past bands hold as often as they said?
//	comparables → Fit (shrinkage by kind) → BackTest (each job from the others) → Proposal
//
// A Proposal is data. It changes no rate book: the service makes a new version of
// one from it only when a person accepts. Nothing is left out silently: a job that
// cannot be compared is listed with its reasons, and so is a figure that has too few
// jobs.
//
// What the fits mean, so that nothing is counted twice:
//
//   - The mass factor is weighed over take-off mass. Where every job states the
//     delivered mass that its estimate was priced on, cost multipliers are per tonne,
//     and both may be accepted. Where one does not, cost multipliers hold the effect
//     of the mass as well; a change then names those that exclude it.
//   - The part of the scatter that all categories of a job share is the systemic
//     factor; a multiplier's own spread is what remains beside it.
package calibration
