package service

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/api/auth"
	"spanwright/estimate/calculator"
	"spanwright/estimate/chart"
)

// CalculateBeam analyses one member: Forbidden, Invalid (faults by JSON pointer),
// Busy. Nothing is stored.
func (s *Service) CalculateBeam(ctx context.Context, a Actor, r calculator.BeamRequest) (calculator.BeamAnswer, error) {
	return calculate(ctx, s, a, r, plainly(calculator.Beam))
}

// CalculateSection looks up or computes a section; errors as CalculateBeam.
func (s *Service) CalculateSection(ctx context.Context, a Actor, r calculator.SectionRequest) (calculator.SectionAnswer, error) {
	return calculate(ctx, s, a, r, plainly(calculator.Section))
}

// CalculateResistance checks a section under a demand; errors as CalculateBeam.
func (s *Service) CalculateResistance(ctx context.Context, a Actor, r calculator.ResistanceRequest) (calculator.ResistanceAnswer, error) {
	return calculate(ctx, s, a, r, plainly(calculator.Resistance))
}

// CalculateSizing chooses the section of a member; errors as CalculateBeam. A member
// for which nothing passes is an answer.
func (s *Service) CalculateSizing(ctx context.Context, a Actor, r calculator.SizingRequest) (calculator.SizingAnswer, error) {
	return calculate(ctx, s, a, r, plainly(calculator.Size))
}

// CalculateArrangements compares ways to hold a length; errors as CalculateBeam.
func (s *Service) CalculateArrangements(ctx context.Context, a Actor, r calculator.ArrangementsRequest) (calculator.ArrangementsAnswer, error) {
	return calculate(ctx, s, a, r, calculator.Arrangements)
}

// CalculateCuttingPlan plans how bars are cut; errors as CalculateBeam.
func (s *Service) CalculateCuttingPlan(ctx context.Context, a Actor, r calculator.CuttingPlanRequest) (calculator.CuttingPlanAnswer, error) {
	return calculate(ctx, s, a, r, calculator.CuttingPlan)
}

// CalculateRange simulates the sum of uncertain lines; errors as CalculateBeam.
func (s *Service) CalculateRange(ctx context.Context, a Actor, r calculator.RangeRequest) (calculator.RangeAnswer, error) {
	return calculate(ctx, s, a, r, calculator.Range)
}

// plainly makes a calculator of one that is too quick to be given up.
func plainly[I, O any](f func(I) (O, error)) func(context.Context, I) (O, error) {
	return func(_ context.Context, in I) (O, error) { return f(in) }
}

// calculate authorises and runs a calculator as a heavy request, without a
// transaction.
func calculate[I, O any](ctx context.Context, s *Service, a Actor, in I, f func(context.Context, I) (O, error)) (O, error) {
	var none O
	if err := s.allow(a, auth.UseCalculators); err != nil {
		return none, err
	}
	select {
	case s.heavy <- struct{}{}:
		defer func() { <-s.heavy }()
	default:
		return none, &Error{Kind: Busy, Message: "as many computations as this server allows are running; try again in a moment"}
	}
	out, err := f(ctx, in)
	if err != nil {
		return none, fromCalculator(err)
	}
	return out, nil
}

// fromCalculator turns faults of a calculator into those of a request.
func fromCalculator(err error) error {
	var faults calculator.Faults
	if !errors.As(err, &faults) {
		return err
	}
	out := &Error{Kind: Invalid, Message: "the request has a fault; nothing was computed"}
	if len(faults) > 1 {
		out.Message = fmt.Sprintf("the request has %d faults; nothing was computed", len(faults))
	}
	for _, f := range faults {
		out.Faults = append(out.Faults, Fault{Pointer: f.Pointer, Found: f.Found, Problem: f.Problem, Remedy: f.Remedy})
	}
	return out
}

// BeamDiagrams returns the SVG of an analysed member's diagrams.
func BeamDiagrams(b calculator.BeamAnswer) []byte {
	d := chart.MemberDiagram{Title: "Moment, shear and deflection", Length: float64(b.Length), Note: combinations(b)}
	for _, r := range b.Reactions {
		d.Supports = append(d.Supports, chart.DiagramSupport{X: float64(r.Position), Kind: r.Kind})
	}
	for _, x := range b.Hinges {
		d.Hinges = append(d.Hinges, float64(x))
	}
	for _, s := range b.Stations {
		point := func(high, low calculator.Number) chart.DiagramPoint {
			return chart.DiagramPoint{X: float64(s.Position), Max: float64(high), Min: float64(low)}
		}
		d.Moment.Points = append(d.Moment.Points, point(s.MomentMax, s.MomentMin))
		d.Shear.Points = append(d.Shear.Points, point(s.ShearMax, s.ShearMin))
		d.Deflection.Points = append(d.Deflection.Points, point(s.DeflectionMax, s.DeflectionMin))
	}
	for _, s := range b.Spans {
		d.Spans = append(d.Spans, chart.DiagramSpan{From: float64(s.From), To: float64(s.To)})
		mark(&d.Moment, s.MomentMax, s.MomentMin)
		mark(&d.Shear, s.ShearMax, s.ShearMin)
		mark(&d.Deflection, s.DeflectionMax, s.DeflectionMin)
	}
	return chart.Diagrams(d).SVG()
}

// mark adds extremes, each place once.
func mark(l *chart.DiagramLane, list ...calculator.BeamExtreme) {
	for _, e := range list {
		m := chart.DiagramMark{X: float64(e.Position), Value: float64(e.Value)}
		if !slices.Contains(l.Marks, m) {
			l.Marks = append(l.Marks, m)
		}
	}
}

// combinations says under which factors the figures stand.
func combinations(b calculator.BeamAnswer) string {
	var names []string
	for _, c := range b.Combinations {
		names = append(names, named(c))
	}
	if len(names) == 1 && names[0] == named(b.Service) {
		return "Combination: " + names[0] + "."
	}
	return "Combination of moment and shear: " + strings.Join(names, ", ") + "; of deflection: " + named(b.Service) + "."
}

// named is a combination by its name, or by its factors where they are the request's.
func named(c calculator.Combination) string {
	if !strings.HasPrefix(c.Name, "request") {
		return c.Name
	}
	text := fmt.Sprintf("%g G + %g Q", c.Permanent, c.Variable)
	if c.Favourable != 0 && c.Favourable != c.Permanent {
		text += fmt.Sprintf(" or %g G + %g Q", c.Favourable, c.Variable)
	}
	return text
}
