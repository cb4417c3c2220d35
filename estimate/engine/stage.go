package engine

import (
	"context"
	"crypto/sha256"
	"encoding/json"
	"errors"
	"fmt"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
)

// Sized is a job after its first stage. The later stages may be run from it many
// times, under other rates, multipliers, allowances and samplings. It is safe for
// concurrent use.
type Sized struct {
	members []sizedMember
	of      job.Job
	key     [sha256.Size]byte
}

// same tells whether a job has the very members and settings that were sized; one
// that was read anew is compared by its key.
func (s *Sized) same(j job.Job) (bool, error) {
	if n := len(j.Members); n > 0 && n == len(s.of.Members) && &j.Members[0] == &s.of.Members[0] && settingsKey(j) == settingsKey(s.of) {
		return true, nil
	}
	key, err := sizingKey(j)
	return key == s.key, err
}

// Size sizes the members of a job. It returns a *FaultsError when some cannot be
// sized, the context's error when cancelled.
func Size(ctx context.Context, j job.Job, progress Progress) (*Sized, error) {
	if progress == nil {
		progress = func(string, int, int) {}
	}
	key, err := sizingKey(j)
	if err != nil {
		return nil, err
	}
	members, err := sizeAll(ctx, j, progress)
	if err != nil {
		return nil, err
	}
	return &Sized{members: members, of: j, key: key}, nil
}

// settingsKey are the settings that sizing reads, as text.
func settingsKey(j job.Job) string {
	s := j.Settings
	return fmt.Sprintf("%q %g %q %g %g %g %q", s.DesignBasis, s.Factor, s.Grade, s.DeflectionLimit, s.FrequencyFloor, s.Restraint, j.Data)
}

// sizingKey is a hash of all that the sizing of a job reads.
func sizingKey(j job.Job) ([sha256.Size]byte, error) {
	data, err := json.Marshal([]any{j.Members, settingsKey(j)})
	if err != nil {
		return [sha256.Size]byte{}, fmt.Errorf("sizing: %w", err)
	}
	return sha256.Sum256(data), nil
}

// ErrOtherSizing reports a job whose members are not those that were sized.
var ErrOtherSizing = errors.New("the job has other members or another design basis than those that were sized")

func (s *Sized) start(j job.Job, progress Progress) (*run, error) {
	if progress == nil {
		progress = func(string, int, int) {}
	}
	same, err := s.same(j)
	if err != nil {
		return nil, err
	}
	if !same {
		return nil, ErrOtherSizing
	}
	currency, err := j.Money()
	if err != nil {
		return nil, err
	}
	return &run{job: j, currency: currency, sized: s, progress: progress}, nil
}

// Estimate runs the stages after sizing. Its errors are those of Run, and
// ErrOtherSizing.
func (s *Sized) Estimate(ctx context.Context, j job.Job, progress Progress) (document.Document, error) {
	r, err := s.start(j, progress)
	if err != nil {
		return document.Document{}, err
	}
	return r.finish(ctx)
}

// Priced is a job after pricing, without its range.
type Priced struct {
	Base       money.Decimal
	Categories map[string]money.Decimal
	Groups     map[string]money.Decimal
	Model      pricing.Model
	Settings   ranges.Settings
}

// Price runs take-off and pricing alone: what a change of rates costs, and the
// cost model with the settings of its simulation.
func (s *Sized) Price(ctx context.Context, j job.Job) (Priced, error) {
	r, err := s.start(j, nil)
	if err != nil {
		return Priced{}, err
	}
	if err := r.price(ctx); err != nil {
		return Priced{}, err
	}
	out := Priced{Base: r.priced.Base, Categories: r.priced.Categories, Groups: map[string]money.Decimal{}, Model: r.priced.Model, Settings: r.rangeSettings()}
	for _, l := range r.priced.Lines {
		out.Groups[l.Group] = out.Groups[l.Group].Add(l.Amount)
	}
	return out, nil
}

// Takeoff is a job whose quantities are counted, ready to be priced again and
// again while its rates are edited.
type Takeoff struct{ run *run }

// Takeoff counts the quantities of a job.
func (s *Sized) Takeoff(ctx context.Context, j job.Job) (*Takeoff, error) {
	r, err := s.start(j, nil)
	if err != nil {
		return nil, err
	}
	if err := r.count(ctx); err != nil {
		return nil, err
	}
	return &Takeoff{r}, nil
}

// Price prices the counted quantities with the rates and multipliers of j. The
// allowances and limits of its book must be those of the job that was counted.
func (t *Takeoff) Price(j job.Job) (pricing.Priced, error) {
	r := *t.run
	r.job, r.conversions, r.unescalated, r.stale = j, nil, nil, nil
	rates, err := r.rates()
	if err != nil {
		return pricing.Priced{}, err
	}
	p, err := pricing.Price(r.items, rates)
	if err != nil {
		return pricing.Priced{}, &RatesError{err}
	}
	return p, nil
}
