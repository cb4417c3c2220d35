package comparison

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/structural/arrangement"
)

// ArrangementStudy is a study of ways to hold a length with all that prices it.
type ArrangementStudy struct {
	Study      arrangement.Study       // as it was asked
	Candidates []arrangement.Candidate // what arrangement.Candidates found for it
	OwnRules   bool                    // it checks by factors of its own, not by those of its design basis
	Kind       string                  // of the main member, such as boom or beam; what lumps and connections go by

	Schedule    schedule.Schedule // settings with their defaults, and risks: ReadArrangementJob; its members are not looked at
	Source      job.Source
	Book        ratebook.Book
	Multipliers []ratebook.Multiplier // edited ones, beside those of the book
	Sampling    job.Sampling
	Data        job.Data // of the engine that runs the jobs
	Build       string   // of the program
}

// ArrangementSampling is that of a comparison of arrangements where nothing else is
// asked: a quarter of an estimate's trials, because each way is an estimate of its own
// with its sensitivities. Standard errors say what that costs.
func ArrangementSampling() job.Sampling { return job.Sampling{Seed: 1, Replicates: 32, Trials: 1024} }

// Run computes the estimate of a job: engine.Run without its progress.
type Run func(ctx context.Context, j job.Job) (document.Document, error)

// ArrangementComparison is the ways to hold a length side by side by their whole range.
type ArrangementComparison struct {
	Arrangements []PricedArrangement `json:"arrangements" nullable:"false" doc:"the priced ones first, by the mean of their range; then those without a price"`
	Comparison   Comparison          `json:"comparison" doc:"of the priced ones, in the same order; the id of a scheme is the name of the arrangement"`
	Notes        []string            `json:"notes" nullable:"false" doc:"what the comparison rests on and where it is in doubt"`
}

// PricedArrangement is one way to hold the length with what decides about it.
type PricedArrangement struct {
	Name        string          `json:"name"`
	Kind        string          `json:"kind"`
	Priced      bool            `json:"priced" doc:"whether it is a scheme of the comparison"`
	Feasible    bool            `json:"feasible"`
	Reason      string          `json:"reason,omitempty" doc:"why it has no price"`
	WaysOut     []string        `json:"ways_out" nullable:"false"`
	Section     string          `json:"section" doc:"of the main member; of a lattice its chords"`
	Steel       document.Number `json:"steel_kg" doc:"main member, legs and bracing, without connections"`
	PlanBracing document.Number `json:"plan_bracing_kg,omitempty" doc:"what a lattice carries beside its chords and diagonals; priced beside the steel"`
	Ballast     document.Number `json:"ballast_kg"`
	BallastM3   document.Number `json:"ballast_m3"`
	Footings    document.Number `json:"footings_m3"`
	Deflection  document.Number `json:"deflection_mm"`
	Governing   string          `json:"governing_check"`
	Utilisation document.Number `json:"utilisation"`
	Parts       []ArrangedPart  `json:"parts" nullable:"false" doc:"the rows that were priced, with the checks' outcome by the estimate's own engine"`
	Notes       []string        `json:"notes" nullable:"false"`
}

// ArrangedPart is one priced row of an arrangement.
type ArrangedPart struct {
	Mark        string          `json:"mark"`
	Group       string          `json:"group"`
	Quantity    int             `json:"quantity"`
	Section     string          `json:"section,omitempty"`
	Net         document.Number `json:"net_kg,omitempty"`
	Concrete    document.Number `json:"concrete_m3,omitempty" doc:"of all pieces"`
	Passes      bool            `json:"passes"`
	Governing   string          `json:"governing_check,omitempty"`
	Utilisation document.Number `json:"utilisation,omitempty"`
}

// TooFewError reports that fewer ways can be priced than a comparison needs.
type TooFewError struct {
	Feasible int
	Reasons  []string // why each of the others is not feasible, by name
}

// Error says how many were found and what hinders the others.
func (e *TooFewError) Error() string {
	return fmt.Sprintf("%d of the ways to hold the length are feasible; accepted: %d or more; %s", e.Feasible, Fewest, strings.Join(e.Reasons, "; "))
}

// ErrFreeze is wrapped by errors of freezing a job: settings, rate book and multipliers
// that do not go together.
var ErrFreeze = errors.New("the job cannot be frozen")

// Jobs freezes the feasible candidates, the lightest Most of them, each as a job of its
// own whose scheme bears the candidate's name, in the order of the candidates. The
// error wraps ErrFreeze and that of job.Freeze.
func (s ArrangementStudy) Jobs() ([]job.Job, error) {
	var jobs []job.Job
	names := s.names()
	for i := range s.Candidates {
		c := &s.Candidates[i]
		if !c.Feasible || len(jobs) == Most {
			continue
		}
		sch := s.Schedule
		sch.Settings.Scheme = names[i]
		sch.Members = s.members(c)
		j, err := job.Freeze(sch, s.Source, s.Book, s.Multipliers, s.Sampling)
		if err != nil {
			return nil, fmt.Errorf("comparison: %w: %s: %w", ErrFreeze, c.Name, err)
		}
		j.EngineVersion, j.Data, j.Build = document.EngineVersion, s.Data, s.Build
		jobs = append(jobs, j)
	}
	return jobs, nil
}

// names are those of the candidates, numbered where two are alike, such as of supports
// a millimetre apart.
func (s ArrangementStudy) names() []string {
	out := make([]string, len(s.Candidates))
	seen := map[string]int{}
	for i, c := range s.Candidates {
		out[i] = c.Name
		if seen[c.Name]++; seen[c.Name] > 1 {
			out[i] = fmt.Sprintf("%s (%d)", c.Name, seen[c.Name])
		}
	}
	return out
}

// CompareArrangements prices the feasible candidates of a study and compares them on
// common draws. The others are listed with their reason. The error is *TooFewError, or
// that of Jobs, run or joint.
func CompareArrangements(ctx context.Context, s ArrangementStudy, run Run, joint Joint) (ArrangementComparison, error) {
	jobs, err := s.Jobs()
	if err != nil {
		return ArrangementComparison{}, err
	}
	if len(jobs) < Fewest {
		return ArrangementComparison{}, s.tooFew(len(jobs))
	}
	sides := make([]Side, len(jobs))
	for i, j := range jobs {
		d, err := run(ctx, j)
		if err != nil {
			return ArrangementComparison{}, fmt.Errorf("comparison: %s: %w", j.Settings.Scheme, err)
		}
		sides[i] = Side{ID: j.Settings.Scheme, Job: j, Document: d}
	}
	slices.SortStableFunc(sides, func(a, b Side) int {
		return cmp.Or(cmp.Compare(a.Document.Range.Mean, b.Document.Range.Mean), strings.Compare(a.ID, b.ID))
	})
	c, err := Build(ctx, sides, joint)
	if err != nil {
		return ArrangementComparison{}, err
	}
	return ArrangementComparison{Arrangements: s.summaries(sides), Comparison: c, Notes: s.doubts(sides)}, nil
}

func (s ArrangementStudy) tooFew(n int) error {
	e := &TooFewError{Feasible: n}
	for _, c := range s.Candidates {
		if !c.Feasible {
			e.Reasons = append(e.Reasons, c.Name+": "+c.Reason)
		}
	}
	return e
}

// summaries are the priced candidates in the order of sides, then the others.
func (s ArrangementStudy) summaries(sides []Side) []PricedArrangement {
	var out []PricedArrangement
	names := s.names()
	for _, side := range sides {
		a := s.summary(slices.Index(names, side.ID))
		a.Name, a.Priced, a.Parts = side.ID, true, parts(side)
		out = append(out, a)
	}
	for i, name := range names {
		if slices.ContainsFunc(sides, func(x Side) bool { return x.ID == name }) {
			continue
		}
		a := s.summary(i)
		if a.Name = name; a.Feasible {
			a.Reason = "not priced: a comparison takes " + strconv.Itoa(Most) + " schemes, and these are the lightest; ask for fewer kinds, fractions or spans"
		}
		out = append(out, a)
	}
	return out
}

func (s ArrangementStudy) summary(i int) PricedArrangement {
	c := &s.Candidates[i]
	out := PricedArrangement{
		Name: c.Name, Kind: string(c.Kind), Feasible: c.Feasible, Reason: c.Reason, WaysOut: append([]string{}, c.WaysOut...),
		Section: c.Result.Section.Designation, Steel: document.Number(c.Mass.Steel), PlanBracing: document.Number(planBracing(c, &s.Study)),
		Ballast: document.Number(c.Mass.Ballast), Footings: document.Number(c.Volume()), Deflection: document.Number(c.Deflection.Value * 1e3),
		Governing: c.Governing, Utilisation: document.Number(c.Utilisation), Parts: []ArrangedPart{}, Notes: s.notes(c),
	}
	if c.Ballast != nil {
		out.BallastM3 = document.Number(c.Ballast.Volume)
	}
	return out
}

// parts are the rows of a priced candidate as its estimate has them.
func parts(s Side) []ArrangedPart {
	concrete := map[string]float64{}
	for _, m := range s.Job.Members {
		concrete[m.Mark] = float64(m.Quantity) * m.Concrete
	}
	out := []ArrangedPart{}
	for _, m := range s.Document.Members {
		out = append(out, ArrangedPart{Mark: m.Mark, Group: m.Group, Quantity: m.Quantity, Section: m.Section, Net: m.Net,
			Concrete: document.Number(concrete[m.Mark]), Passes: m.Passes, Governing: m.Governing, Utilisation: m.Utilisation})
	}
	return out
}
