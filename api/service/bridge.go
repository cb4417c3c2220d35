package service

import (
	"context"

	"github.com/google/uuid"

	"spanwright/estimate/bridge"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
)

// NewBridge asks for the change between two estimates.
type NewBridge struct {
	From uuid.UUID `json:"from" doc:"id of the earlier estimate"`
	To   uuid.UUID `json:"to" doc:"id of the later estimate, in the same currency"`
}

// Bridge explains the change between two estimates, cause by cause: NotFound and
// Invalid by JSON pointer, Busy. Nothing is stored.
func (s *Service) Bridge(ctx context.Context, a Actor, n NewBridge) (bridge.Bridge, error) {
	release, err := s.computing()
	if err != nil {
		return bridge.Bridge{}, err
	}
	defer release()
	at := func(i int) string { return []string{"/from", "/to"}[i] }
	ends, err := s.storedEstimates(ctx, a, []uuid.UUID{n.From, n.To}, at)
	if err != nil {
		return bridge.Bridge{}, err
	}
	valuer := engine.NewValuer()
	value := func(ctx context.Context, j job.Job) (bridge.Value, error) {
		v, err := valuer.Value(ctx, j)
		return bridge.Value(v), err
	}
	b, err := bridge.Build(ctx, bridge.Side{Job: ends[0].job, Document: ends[0].document}, bridge.Side{Job: ends[1].job, Document: ends[1].document}, value)
	if err != nil {
		return bridge.Bridge{}, fromSeveral(err)
	}
	return b, nil
}
