package service

import (
	"context"
	"errors"
	"sync"

	"github.com/google/uuid"
)

// The previews that are kept: of the estimates edited last, as many as fit.
const (
	mostPreviews  = 16
	previewMemory = 256 << 20 // bytes, reckoned
)

// previewKey names an estimate within its organisation.
type previewKey struct{ organisation, estimate uuid.UUID }

// previews keeps what previews are made from, so that editing does not size and
// draw again. It is safe for concurrent use.
type previews struct {
	mu      sync.Mutex
	entries map[previewKey]*previewEntry
	clock   uint64
}

// previewEntry is one estimate's basis, there once ready is closed.
type previewEntry struct {
	ready chan struct{}
	basis *previewBasis
	err   error
	used  uint64
}

func newPreviews() *previews { return &previews{entries: map[previewKey]*previewEntry{}} }

// get returns a basis, which make prepares where none is kept; requests for the same
// one meanwhile wait for it. The boolean says that it was kept.
func (p *previews) get(ctx context.Context, k previewKey, make func() (*previewBasis, error)) (*previewBasis, bool, error) {
	for {
		e, mine := p.entry(k)
		if mine {
			b, err := p.fill(k, e, make)
			return b, false, err
		}
		select {
		case <-ctx.Done():
			return nil, false, ctx.Err()
		case <-e.ready:
		}
		if !errors.Is(e.err, context.Canceled) && !errors.Is(e.err, context.DeadlineExceeded) {
			return e.basis, true, e.err
		}
	}
}

// entry returns the entry of a key, a new one where there is none, and whether the
// caller is the one to fill it.
func (p *previews) entry(k previewKey) (*previewEntry, bool) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.clock++
	e := p.entries[k]
	if e != nil {
		e.used = p.clock
		return e, false
	}
	e = &previewEntry{ready: make(chan struct{}), used: p.clock}
	p.entries[k] = e
	return e, true
}

// fill makes the basis of an entry. One that fails, or panics, leaves no entry behind
// and nobody waiting.
func (p *previews) fill(k previewKey, e *previewEntry, make func() (*previewBasis, error)) (*previewBasis, error) {
	b, err := (*previewBasis)(nil), errors.New("the preview was not prepared")
	defer func() {
		p.mu.Lock()
		e.basis, e.err = b, err
		if err != nil && p.entries[k] == e {
			delete(p.entries, k)
		}
		p.mu.Unlock()
		close(e.ready)
		p.trim(k)
	}()
	b, err = make()
	return b, err
}

// trim drops the entries used longest ago until the rest fits, that of the key last.
func (p *previews) trim(last previewKey) {
	p.mu.Lock()
	defer p.mu.Unlock()
	for {
		var oldest previewKey
		var memory int64
		count := 0
		for k, e := range p.entries {
			if e.basis == nil {
				continue // being made
			}
			count++
			memory += e.basis.size()
			if old := p.entries[oldest]; old == nil || oldest == last || k != last && e.used < old.used {
				oldest = k
			}
		}
		if count == 0 || count <= mostPreviews && memory <= previewMemory {
			return
		}
		delete(p.entries, oldest)
	}
}
