package engine

import (
	"context"
	"crypto/sha256"
	"fmt"
	"sync"

	"spanwright/estimate/document"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ranges"
)

// Value is what one job is worth: what a bridge asks.
type Value struct {
	Base       money.Decimal
	Total      money.Decimal            // base and contingency
	Groups     map[string]money.Decimal // base by member group
	Replicates []float64                // the same percentile of each replicate
}

// Valuer values jobs for a bridge: every stage is run once for each input that it
// reads, and jobs alike in all that decides the result are valued once. It is safe
// for concurrent use; its memory ends with it.
type Valuer struct {
	mu     sync.Mutex
	sized  map[[sha256.Size]byte]*Sized
	values map[string]Value
}

// NewValuer returns a valuer without memory.
func NewValuer() *Valuer {
	return &Valuer{sized: map[[sha256.Size]byte]*Sized{}, values: map[string]Value{}}
}

// Value values a job, which runs on this engine and this data.
func (v *Valuer) Value(ctx context.Context, j job.Job) (Value, error) {
	j.EngineVersion, j.Data = document.EngineVersion, Data()
	bare := j
	bare.Source, bare.Build = job.Source{}, ""
	_, key, err := bare.Canonical()
	if err != nil {
		return Value{}, err
	}
	v.mu.Lock()
	known, ok := v.values[key]
	v.mu.Unlock()
	if ok {
		return known, nil
	}
	sized, err := v.size(ctx, j)
	if err != nil {
		return Value{}, err
	}
	value, err := valueOf(ctx, sized, j)
	if err != nil {
		return Value{}, err
	}
	v.mu.Lock()
	defer v.mu.Unlock()
	v.values[key] = value
	return value, nil
}

func (v *Valuer) size(ctx context.Context, j job.Job) (*Sized, error) {
	key, err := sizingKey(j)
	if err != nil {
		return nil, err
	}
	v.mu.Lock()
	known, ok := v.sized[key]
	v.mu.Unlock()
	if ok {
		return known, nil
	}
	s, err := Size(ctx, j, nil)
	if err != nil {
		return nil, err
	}
	v.mu.Lock()
	defer v.mu.Unlock()
	v.sized[key] = s
	return s, nil
}

// valueOf prices and simulates; the total is the percentile as the document states
// it.
func valueOf(ctx context.Context, s *Sized, j job.Job) (Value, error) {
	p, err := s.Price(ctx, j)
	if err != nil {
		return Value{}, err
	}
	settings := p.Settings
	settings.Sensitivities = false
	res, err := ranges.Simulate(ctx, p.Model, settings, nil)
	if err != nil {
		return Value{}, rangeError(err)
	}
	currency, err := j.Money()
	if err != nil {
		return Value{}, err
	}
	for i, q := range res.Percentiles {
		if q.P != j.Settings.Confidence {
			continue
		}
		total, err := money.FromFloat(document.Number(q.Value).Rounded(), currency.MinorDigits)
		if err != nil {
			return Value{}, fmt.Errorf("percentile %g: %w", q.P, err)
		}
		out := Value{Base: p.Base, Total: total, Groups: p.Groups, Replicates: make([]float64, len(res.Replicated))}
		for r := range res.Replicated {
			out.Replicates[r] = res.Replicated[r][i]
		}
		return out, nil
	}
	return Value{}, fmt.Errorf("the simulation did not return the percentile %g", j.Settings.Confidence)
}
