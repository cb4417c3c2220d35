package service

import (
	"context"
	"errors"
	"time"

	"spanwright/estimate/document"
)

const (
	// patience is how long work waits for a place before it is answered Busy.
	patience = 10 * time.Second
	// largePosting is the size in bytes from which reading a schedule needs a
	// place.
	largePosting = 256 << 10
)

// Export runs work that holds a whole document in memory, such as writing a
// workbook, a few at a time: Busy when no place becomes free in ten seconds, the
// context's error when it ends first.
func (s *Service) Export(ctx context.Context, work func() ([]byte, error)) ([]byte, error) {
	release, err := s.place(ctx)
	if err != nil {
		return nil, err
	}
	defer release()
	data, err := work()
	if errors.Is(err, document.ErrEarlier) {
		return nil, &Error{Kind: Conflict, Message: document.ErrEarlier.Error(), Err: err}
	}
	return data, err
}

// place waits for one of the places for reading and writing large files.
func (s *Service) place(ctx context.Context) (func(), error) {
	timer := time.NewTimer(patience)
	defer timer.Stop()
	select {
	case s.files <- struct{}{}:
		return func() { <-s.files }, nil
	case <-timer.C:
		return nil, &Error{Kind: Busy, Message: "as many large files as this server allows are being read or written; try again in a moment"}
	case <-ctx.Done():
		return nil, ctx.Err()
	}
}
