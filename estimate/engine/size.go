package engine

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"sort"
	"strings"
	"sync"
	"sync/atomic"

	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/takeoff"
	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// gravity is the standard acceleration of free fall, m/s² (ISO 80000-3).
const gravity = 9.80665

// sizedMember is one row with its sizing; rows that are not sized have none.
type sizedMember struct {
	member schedule.Member
	result *sizing.Result
}

func (s sizedMember) piece() takeoff.Piece {
	p := takeoff.Piece{Member: s.member}
	if s.result == nil {
		p.Family, p.LineMass, p.Waste = s.member.Kind, s.member.LineMass, ratebook.WasteSections
		if s.member.AreaMass > 0 {
			p.Waste = ratebook.WastePlate
		}
		return p
	}
	sec := s.result.Section
	p.Family, p.LineMass, p.Surface = sec.Family, sec.Mass, sec.Perimeter
	p.Waste = ratebook.WasteSections
	switch sec.Shape {
	case section.RoundTube, section.RectangularTube:
		p.Waste = ratebook.WasteTube
	case section.Flat:
		p.Waste = ratebook.WastePlate
	}
	return p
}

// sizeAll sizes every member on all cores. Members are independent, so the
// result does not depend on the number of cores.
func sizeAll(ctx context.Context, j job.Job, progress Progress) ([]sizedMember, error) {
	basis, err := resistance.Allowable(j.Settings.Factor)
	if err != nil {
		return nil, fmt.Errorf("design basis: %w", err)
	}
	out := make([]sizedMember, len(j.Members))
	errs := make([]error, len(j.Members))
	var next, done atomic.Int64
	var wg sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), max(1, len(j.Members))) {
		wg.Go(func() {
			for ctx.Err() == nil {
				i := int(next.Add(1)) - 1
				if i >= len(j.Members) {
					return
				}
				out[i], errs[i] = sizeOne(j.Members[i], basis)
				progress("sizing", int(done.Add(1)), len(j.Members))
			}
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	return out, gather(errs)
}

// gather joins the faults of members; any other error goes first.
func gather(errs []error) error {
	var all FaultsError
	for _, err := range errs {
		var f *memberFault
		switch {
		case err == nil:
		case errors.As(err, &f):
			all.Faults = append(all.Faults, f.Fault)
		default:
			return err
		}
	}
	if len(all.Faults) == 0 {
		return nil
	}
	sort.SliceStable(all.Faults, func(i, k int) bool { return all.Faults[i].Mark < all.Faults[k].Mark })
	return &all
}

type memberFault struct{ Fault }

func (f *memberFault) Error() string { return f.Mark + ": " + f.Problem }

func fault(mark, problem, remedy string) error {
	return &memberFault{Fault{Mark: mark, Problem: problem, Remedy: remedy}}
}

func sizeOne(m schedule.Member, basis resistance.Basis) (sizedMember, error) {
	if m.Treatment == schedule.ByMass {
		return sizedMember{member: m}, nil
	}
	grade, err := material.Find(m.Grade)
	if err != nil {
		return sizedMember{}, fault(m.Mark, err.Error(), "name a grade that Spanwright knows")
	}
	p, err := sizing.Prepare(structuralMember(m), sizing.Setup{
		Basis: basis, Grade: grade, Combination: action.Characteristic(), Gravity: gravity,
	})
	if err != nil {
		return sizedMember{}, fault(m.Mark, err.Error(), "correct the supports, loads or length of this row")
	}
	res, err := choose(m, p)
	if err != nil {
		return sizedMember{}, err
	}
	return sizedMember{member: m, result: &res}, nil
}

func choose(m schedule.Member, p *sizing.Prepared) (sizing.Result, error) {
	if m.Treatment == schedule.CheckSection {
		sec, err := section.Find(m.Section)
		if err != nil {
			return sizing.Result{}, fault(m.Mark, err.Error(), "name a section that Spanwright knows")
		}
		res, err := p.Explain(&sec)
		if err != nil {
			return sizing.Result{}, fault(m.Mark, err.Error(), "choose another section or grade")
		}
		return res, nil
	}
	series, err := section.Series(m.Family)
	if err != nil {
		return sizing.Result{}, fault(m.Mark, err.Error(), "name a family that Spanwright knows")
	}
	res, err := sizing.Lightest(p, series)
	if err != nil {
		return sizing.Result{}, fault(m.Mark, err.Error(), "choose another family or grade")
	}
	if !res.Passes {
		return sizing.Result{}, fault(m.Mark,
			fmt.Sprintf("no size of %s passes; the nearest is %s at %.2f (%s)", m.Family, res.Section.Designation, res.Utilisation, res.Governing),
			"ways out: "+strings.Join(res.WaysOut, "; "))
	}
	return res, nil
}

// structuralMember hands the row to the structural engine, which knows nothing
// of schedules.
func structuralMember(m schedule.Member) sizing.Member {
	s := sizing.Member{
		Length: m.Length, Axial: m.Axial, RestraintSpacing: m.Restraint,
		LengthFactor: m.LengthFactor, DeflectionLimit: m.DeflectionLimit, Upright: m.Upright,
	}
	for _, sp := range m.Supports {
		kind := beam.Pinned
		if sp.Kind == "fixed" {
			kind = beam.Fixed
		}
		s.Supports = append(s.Supports, beam.Support{X: sp.Position, Kind: kind})
	}
	for _, l := range m.Loads {
		a := action.Action{Free: l.Free, Value: l.Value, Label: l.Label}
		if l.Nature == "permanent" {
			a.Nature = action.Permanent
		}
		if l.Kind == "point" {
			a.Kind, a.From, a.To = action.Point, l.Position, l.Position
		}
		s.Actions = append(s.Actions, a)
	}
	return s
}
