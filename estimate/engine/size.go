package engine

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"sort"
	"sync"
	"sync/atomic"

	"spanwright/estimate/job"
	"spanwright/estimate/schedule"
	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// gravity is the standard acceleration of free fall, m/s² (ISO 80000-3).
const gravity = 9.80665

// sizedMember is one row with its sizing; rows that are not sized have none.
type sizedMember struct {
	member schedule.Member
	result *sizing.Result
	lifts  []lift    // supports that are pulled upward under a combination
	split  *shortcut // of members that are sized and that the split method would cut or simplify
}

// lift is the pull on one support and the combination that gives the largest.
type lift struct {
	at, force   float64 // m, N
	combination string
}

// chosen is the section of the row, nil where it is not sized.
func (s sizedMember) chosen() *section.Section {
	if s.result == nil {
		return nil
	}
	return &s.result.Section
}

// sizeAll sizes every member on all cores. Members of one size group are sized
// together, all others are independent, so that the result does not depend on the
// number of cores.
func sizeAll(ctx context.Context, j job.Job, progress Progress) ([]sizedMember, error) {
	rules, err := rulesOf(j.Settings)
	if err != nil {
		return nil, fmt.Errorf("design basis: %w", err)
	}
	groups, errs := sizeGroups(j.Members)
	out := make([]sizedMember, len(j.Members))
	var next, done atomic.Int64
	var wg sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), max(1, len(groups))) {
		wg.Go(func() {
			for ctx.Err() == nil {
				i := int(next.Add(1)) - 1
				if i >= len(groups) {
					return
				}
				rules.size(j.Members, groups[i], out, errs)
				progress("sizing", int(done.Add(int64(len(groups[i])))), len(j.Members))
			}
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	return out, gather(errs)
}

// sizeGroups parts the members, by index, into those that get one section; most
// stand alone. A mark that no member has is that member's error.
func sizeGroups(members []schedule.Member) (groups [][]int, errs []error) {
	errs = make([]error, len(members))
	at := make(map[string]int, len(members))
	for i := range members {
		at[members[i].Mark] = i
	}
	root := make([]int, len(members))
	for i := range root {
		root[i] = i
	}
	find := func(i int) int {
		for root[i] != i {
			i = root[i]
		}
		return i
	}
	for i := range members {
		as := members[i].SameSizeAs
		if as == "" {
			continue
		}
		k, ok := at[as]
		if !ok || members[k].Treatment != schedule.SizeFromFamily || members[k].Family != members[i].Family {
			errs[i] = fault(members[i].Mark, fmt.Sprintf("takes the size of %q, which is no row sized from %s", as, members[i].Family), "name the mark of another row of the same family")
			continue
		}
		a, b := find(i), find(k)
		root[max(a, b)] = min(a, b)
	}
	index := map[int]int{}
	for i := range members {
		k := find(i)
		g, ok := index[k]
		if !ok {
			g = len(groups)
			index[k] = g
			groups = append(groups, nil)
		}
		groups[g] = append(groups[g], i)
	}
	return groups, errs
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

// structuralMember hands the row to the structural engine, which knows nothing
// of schedules.
func structuralMember(m schedule.Member) sizing.Member {
	s := sizing.Member{
		Length: m.Length, Axial: m.Axial, RestraintSpacing: m.Restraint,
		LengthFactor: m.LengthFactor, MomentFactor: m.MomentFactor, NetAreaFactor: m.NetAreaFactor,
		DeflectionLimit: m.DeflectionLimit, FrequencyFloor: m.FrequencyFloor, MaxDepth: m.MaxDepth, Upright: m.Upright,
	}
	for _, sp := range m.Supports {
		kind := beam.Pinned
		if sp.Kind == "fixed" {
			kind = beam.Fixed
		}
		s.Supports = append(s.Supports, beam.Support{X: sp.Position, Kind: kind})
	}
	for _, l := range m.Loads {
		a := action.Action{Free: l.Free, Value: l.Value, Dynamic: l.Dynamic, Label: l.Label}
		if l.Nature == "permanent" {
			a.Nature = action.Permanent
		}
		if l.Sideways {
			a.Direction = action.Horizontal
		}
		switch l.Kind {
		case "point":
			a.Kind, a.From, a.To = action.Point, l.Position, l.Position
		case "train":
			a.Kind, a.Train = action.MovingTrain, action.Train{Loads: l.Wheels, Spacings: l.Spacings}
		}
		s.Actions = append(s.Actions, a)
	}
	return s
}
