package service

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ranges"
	"spanwright/estimate/ratebook"
)

// previewBasis is an estimate sized, counted and drawn, ready to be priced again
// under other multipliers. It is safe for concurrent use.
type previewBasis struct {
	job      job.Job
	sized    *engine.Sized
	settings ranges.Settings
	before   pricing.Priced
	was      ranges.Preview // the range before any change

	mu       sync.Mutex
	counted  []counted  // that of the job first
	prepared []prepared // that of the job first
}

// counted is a take-off; multipliers of members of their own make another one.
type counted struct {
	split   string
	takeoff *engine.Takeoff
}

// prepared holds the draws of one model.
type prepared struct {
	model pricing.Model
	draws *ranges.Prepared
}

// mostPrepared models of one estimate are kept: its own and the changed ones of last.
const mostPrepared = 3

// newPreviewBasis sizes, counts, prices and draws a job: Conflict where it was frozen
// for another engine, else as CreateEstimate.
func newPreviewBasis(ctx context.Context, data []byte) (*previewBasis, error) {
	j, err := currentJob(data)
	if err != nil {
		return nil, err
	}
	b := &previewBasis{job: j}
	if b.sized, err = engine.Size(ctx, j, nil); err != nil {
		return nil, fromJob(err, j)
	}
	first, err := b.sized.Price(ctx, j)
	if err != nil {
		return nil, fromJob(err, j)
	}
	b.settings = first.Settings
	takeoff, err := b.takeoff(ctx, j, nil)
	if err != nil {
		return nil, err
	}
	if b.before, err = takeoff.Price(j); err != nil {
		return nil, fromJob(err, j)
	}
	b.was, err = b.preview(ctx, b.before.Model, nil)
	return b, err
}

// currentJob reads a frozen job that this engine can run.
func currentJob(data []byte) (job.Job, error) {
	var about struct {
		EngineVersion int      `json:"engine_version"`
		Data          job.Data `json:"data"`
	}
	if err := json.Unmarshal(data, &about); err != nil {
		return job.Job{}, fmt.Errorf("reading a frozen job: %w", err)
	}
	if about.EngineVersion != document.EngineVersion || about.Data != engine.Data() {
		return job.Job{}, &Error{Kind: Conflict, Message: fmt.Sprintf("the estimate was made by engine version %d and this is version %d, or with another catalogue or other grades; "+
			"make a new estimate of the scheme and preview that one", about.EngineVersion, document.EngineVersion)}
	}
	return job.Parse(data)
}

// slot takes one of the places for heavy requests, before work that may take long. It
// is nil where a place is held already.
type slot func() (release func(), err error)

// takeoff returns the quantities under a job's multipliers.
func (b *previewBasis) takeoff(ctx context.Context, j job.Job, take slot) (*engine.Takeoff, error) {
	split := ownMultipliers(j.Multipliers)
	b.mu.Lock()
	i := slices.IndexFunc(b.counted, func(c counted) bool { return c.split == split })
	if i >= 0 {
		defer b.mu.Unlock()
		return b.counted[i].takeoff, nil
	}
	b.mu.Unlock()
	release, err := take.take()
	if err != nil {
		return nil, err
	}
	defer release()
	t, err := b.sized.Takeoff(ctx, j)
	if err != nil {
		return nil, fromJob(err, j)
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	b.counted = append(slices.Clip(b.counted[:min(1, len(b.counted))]), counted{split, t})
	return t, nil
}

func (take slot) take() (func(), error) {
	if take == nil {
		return func() {}, nil
	}
	return take()
}

// ownMultipliers names the multipliers of members of their own, which are counted
// apart.
func ownMultipliers(list []ratebook.Multiplier) string {
	var own []string
	for _, m := range list {
		if m.Scope == ratebook.MemberScope {
			own = append(own, m.Name+"\x00"+m.Subject)
		}
	}
	slices.Sort(own)
	return strings.Join(own, "\x01")
}

// preview returns the range of a model: from the draws kept where they are of the
// same structure, else from new ones, which are kept.
func (b *previewBasis) preview(ctx context.Context, m pricing.Model, take slot) (ranges.Preview, error) {
	p, changes := b.find(m)
	if p == nil {
		release, err := take.take()
		if err != nil {
			return ranges.Preview{}, err
		}
		defer release()
		if p, err = ranges.Prepare(ctx, m, b.settings); err != nil {
			return ranges.Preview{}, fromRange(err)
		}
		b.keep(prepared{m, p})
	}
	v, err := p.Preview(changes)
	return v, fromRange(err)
}

// find looks for draws of a model of this structure, and what changed in it.
func (b *previewBasis) find(m pricing.Model) (*ranges.Prepared, []ranges.Change) {
	b.mu.Lock()
	kept := slices.Clone(b.prepared)
	b.mu.Unlock()
	for _, p := range kept {
		if changes, ok := changed(p.model, m); ok {
			return p.draws, changes
		}
	}
	return nil, nil
}

func (b *previewBasis) keep(p prepared) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.prepared = append(slices.Clip(b.prepared), p)
	if len(b.prepared) > mostPrepared {
		b.prepared = slices.Delete(b.prepared, 1, 2)
	}
}

// size is about how many bytes the basis holds.
func (b *previewBasis) size() int64 {
	const (
		column = 2 * 8 * ranges.PreviewReplicates * ranges.PreviewTrials // of an input
		member = 8 << 10                                                 // sized, with its checks
	)
	b.mu.Lock()
	defer b.mu.Unlock()
	n := int64(len(b.job.Members)) * member
	for _, p := range b.prepared {
		n += int64(len(p.model.Inputs)+len(p.model.Risks)) * column
	}
	return n
}

// changed returns the spreads in which two models differ; false where they differ in
// anything else.
func changed(old, m pricing.Model) ([]ranges.Change, bool) {
	if len(old.Inputs) != len(m.Inputs) || !slices.Equal(old.Overall, m.Overall) || !slices.Equal(old.Risks, m.Risks) ||
		!slices.EqualFunc(old.Terms, m.Terms, sameTerm) {
		return nil, false
	}
	var out []ranges.Change
	for i, x := range old.Inputs {
		y := m.Inputs[i]
		if x.ID != y.ID || x.Group != y.Group || x.Stream != y.Stream {
			return nil, false
		}
		if x.Spread != y.Spread {
			out = append(out, ranges.Change{ID: y.ID, Spread: y.Spread})
		}
	}
	return out, true
}

// sameTerm tells whether two terms differ in nothing but the last digits of their
// numbers: a coefficient holds quantities and constants alone, but is compiled with
// likely values at hand, whose rounding leaves a trace of 1e-16.
func sameTerm(a, b pricing.Term) bool {
	return a.Category == b.Category && alike(a.Coefficient, b.Coefficient) && alike(a.Least, b.Least) &&
		slices.Equal(a.Factors, b.Factors) && slices.Equal(a.After, b.After)
}

// alike tells whether two numbers are the same to the precision that a model
// promises.
func alike(a, b float64) bool {
	return math.Abs(a-b) <= 1e-12*math.Max(math.Abs(a), math.Abs(b))
}
