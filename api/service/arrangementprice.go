package service

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"strconv"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/calculator"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/sheet"
)

// NewArrangementComparison asks for the ways to hold a length by their whole range.
type NewArrangementComparison struct {
	Study       calculator.ArrangementsRequest `json:"study" doc:"as the calculator of arrangements takes it"`
	Kind        string                         `json:"kind,omitempty" maxLength:"80" default:"boom" doc:"of the main member, such as boom or beam: lumps and the connection class go by it"`
	RateBook    string                         `json:"rate_book,omitempty" maxLength:"200" default:"unit-rate" doc:"id or name of a rate book of the organisation; the starting book of that name where it has none"`
	Job         map[string]any                 `json:"job,omitempty" doc:"settings by the keys of the Job sheet, such as Currency, Estimate class, Confidence, Coating; those that the study decides are refused"`
	Multipliers []PreviewMultiplier            `json:"multipliers,omitempty" maxItems:"100" doc:"beside those of the rate book; of scope member by marks such as FOOTING-2 or TOWER-1-LEG"`
	Seed        *uint64                        `json:"seed,omitempty" default:"1"`
	Replicates  int                            `json:"replicates,omitempty" default:"32"`
	Trials      int                            `json:"trials,omitempty" default:"1024" doc:"of each replicate"`
}

// CompareArrangements prices the feasible ways of a study and compares them on common
// draws: Forbidden, NotFound, Invalid by JSON pointer, Busy. Nothing is stored.
func (s *Service) CompareArrangements(ctx context.Context, a Actor, n NewArrangementComparison) (comparison.ArrangementComparison, error) {
	var none comparison.ArrangementComparison
	for _, o := range []auth.Operation{auth.UseCalculators, auth.ReadRates} {
		if err := s.allow(a, o); err != nil {
			return none, err
		}
	}
	if n.Trials == 0 {
		n.Trials = comparison.ArrangementSampling().Trials
	}
	sampling, err := NewEstimate{Seed: n.Seed, Replicates: n.Replicates, Trials: n.Trials}.sampling(s.limits.Trials)
	if err != nil {
		return none, err
	}
	release, err := s.computing()
	if err != nil {
		return none, err
	}
	defer release()
	book, err := s.arrangementBook(ctx, a, n.RateBook)
	if err != nil {
		return none, err
	}
	study, err := n.study(ctx)
	if err != nil {
		return none, err
	}
	if study.Multipliers, err = n.inForce(book, a); err != nil {
		return none, err
	}
	study.Book, study.Sampling, study.Data, study.Build = book, sampling, engine.Data(), s.build
	run := func(ctx context.Context, j job.Job) (document.Document, error) { return s.run(ctx, j, nil) }
	out, err := comparison.CompareArrangements(ctx, study, run, engine.Joint)
	return out, fromArrangements(err)
}

// arrangementBook finds a rate book by id or name; the starting books are there even
// where the organisation has none of their name.
func (s *Service) arrangementBook(ctx context.Context, a Actor, named string) (ratebook.Book, error) {
	if named == "" {
		named = ratebook.KindUnitRate
	}
	id, notID := uuid.Parse(named)
	found, err := read(ctx, s, a, auth.ReadRates, func(tx Tx) (RateBook, error) {
		if notID != nil {
			return tx.RateBookByName(ctx, named)
		}
		return tx.RateBook(ctx, id)
	})
	switch {
	case err == nil:
		return found.Content, nil
	case !isKind(err, NotFound):
		return ratebook.Book{}, err
	case named == ratebook.KindUnitRate:
		return ratebook.UnitRate(), nil
	case named == ratebook.KindRatio:
		return ratebook.Ratio(), nil
	}
	return ratebook.Book{}, &Error{Kind: NotFound, Message: "no such rate book",
		Faults: []Fault{{Pointer: "/rate_book", Found: named, Problem: "no such rate book", Remedy: "the id or name of a rate book of this organisation, unit-rate or ratio"}}}
}

// study computes the ways and reads the settings; their faults come together.
func (n NewArrangementComparison) study(ctx context.Context) (comparison.ArrangementStudy, error) {
	r := n.Study
	out := comparison.ArrangementStudy{Kind: n.Kind, OwnRules: r.OwnRules()}
	if out.Kind == "" {
		out.Kind = "boom"
	}
	posted, err := json.Marshal(n)
	if err != nil {
		return out, fmt.Errorf("writing the study: %w", err)
	}
	sum := sha256.Sum256(posted)
	out.Source = job.Source{Name: "arrangement study", SHA256: hex.EncodeToString(sum[:])}
	var faults []Fault
	found, candidates, err := calculator.StudyArrangements(ctx, r)
	var wrong calculator.Faults
	switch {
	case errors.As(err, &wrong):
		for _, f := range wrong {
			faults = append(faults, Fault{Pointer: "/study" + f.Pointer, Found: f.Found, Problem: f.Problem, Remedy: f.Remedy})
		}
	case err != nil:
		return out, err
	}
	out.Study, out.Candidates = found, candidates
	sch, err := comparison.ReadArrangementJob(ctx, n.Job, r.DesignBasis, r.Grade, r.YieldFactor())
	keys := fromArrangementJob(err)
	if err != nil && len(keys) == 0 {
		return out, err
	}
	faults = append(faults, keys...)
	out.Schedule = sch
	if len(faults) > 0 {
		return out, &Error{Kind: Invalid, Message: fmt.Sprintf("the request has faults, %d in all; nothing was computed", len(faults)), Faults: faults}
	}
	return out, nil
}

// fromArrangementJob turns faults of the settings into those of the request: of keys in
// job, and of what the study hands on as settings.
func fromArrangementJob(err error) []Fault {
	var decided *comparison.SettledError
	var keys sheet.Faults
	var out []Fault
	if errors.As(err, &decided) {
		for i, k := range decided.Keys {
			out = append(out, Fault{Pointer: "/job/" + pointerEscapes.Replace(k), Found: decided.Found[i], Problem: "is decided by the study", Remedy: decided.Remedy()})
		}
	}
	if errors.As(err, &keys) {
		for _, f := range keys {
			at := "/study/design_basis"
			switch {
			case f.Address.Sheet == "job":
				at = "/job/" + pointerEscapes.Replace(f.Header)
			case f.Header == "Grade":
				at = "/study/grade"
			case f.Header == "Factor":
				at = "/study/factor"
			}
			out = append(out, Fault{Pointer: at, Found: f.Found, Problem: f.Problem, Remedy: f.Remedy})
		}
	}
	return out
}

// inForce are the multipliers of the request.
func (n NewArrangementComparison) inForce(book ratebook.Book, a Actor) ([]ratebook.Multiplier, error) {
	var out []ratebook.Multiplier
	var faults []Fault
	for i, x := range n.Multipliers {
		m, found := x.read("/multipliers/"+strconv.Itoa(i), book, a, "comparison of arrangements")
		faults = append(faults, found...)
		out = append(out, m)
	}
	if len(faults) > 0 {
		return nil, &Error{Kind: Invalid, Message: "the multipliers have faults; nothing was computed", Faults: faults}
	}
	return out, nil
}

// fromArrangements turns what pricing a study reports into faults of the request.
func fromArrangements(err error) error {
	var few *comparison.TooFewError
	var rates *engine.RatesError
	var members *engine.FaultsError
	switch {
	case err == nil, errors.Is(err, context.Canceled), errors.Is(err, context.DeadlineExceeded):
		return err
	case errors.As(err, &few):
		out := &Error{Kind: Invalid, Message: fmt.Sprintf("%d of the ways to hold the length are feasible; a comparison needs %d", few.Feasible, comparison.Fewest)}
		for _, r := range few.Reasons {
			out.Faults = append(out.Faults, Fault{Pointer: "/study/kinds", Found: r, Problem: "not feasible", Remedy: "more kinds, more or larger candidates, shorter spans"})
		}
		if len(out.Faults) == 0 {
			out.Faults = []Fault{{Pointer: "/study/kinds", Found: strconv.Itoa(few.Feasible) + " way", Problem: "nothing to compare", Remedy: "two or more kinds, fractions or numbers of spans"}}
		}
		return out
	case errors.As(err, &members):
		out := &Error{Kind: Invalid, Message: "the ways cannot be priced as they stand", Err: err}
		for _, f := range members.Faults {
			out.Faults = append(out.Faults, Fault{Pointer: "/study", Found: f.Mark, Problem: f.Problem, Remedy: f.Remedy})
		}
		return out
	case errors.As(err, &rates):
		return &Error{Kind: Invalid, Message: err.Error(), Err: err, Faults: []Fault{{Pointer: "/rate_book", Found: "the rates", Problem: err.Error(), Remedy: "correct the rates or multipliers, or choose another rate book"}}}
	case errors.Is(err, comparison.ErrFreeze):
		return &Error{Kind: Invalid, Message: err.Error(), Err: err, Faults: []Fault{{Pointer: "/job", Found: "the settings", Problem: err.Error(), Remedy: "correct the settings or choose another rate book"}}}
	}
	return err
}
