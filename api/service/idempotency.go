package service

import (
	"bytes"
	"context"
	"errors"

	"github.com/google/uuid"
)

// once runs make in one transaction with its idempotency record. With a key that
// was used before for the same request it returns what was made then; for
// another request it is a Conflict. Without a key it always makes.
func once[T any](ctx context.Context, s *Service, a Actor, operation string, key Idempotency, id uuid.UUID,
	again func(Tx, uuid.UUID) (T, error), do func(Tx) (T, error)) (T, error) {
	attempt := func() (T, error) {
		var out T
		err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
			m, found, err := s.remembered(ctx, tx, a, operation, key)
			if err != nil {
				return err
			}
			if found {
				out, err = again(tx, m.Resource)
				return err
			}
			if out, err = do(tx); err != nil {
				return err
			}
			return s.remember(ctx, tx, a, operation, key, id, nil)
		})
		return out, err
	}
	out, err := attempt()
	if isRace(err) {
		out, err = attempt()
	}
	return out, err
}

// raceError wraps the Conflict of Remember: a simultaneous request with the same
// key committed first, so that a second attempt finds its record.
type raceError struct{ error }

func (e raceError) Unwrap() error { return e.error }

func isRace(err error) bool {
	var r raceError
	return errors.As(err, &r)
}

func (s *Service) remembered(ctx context.Context, tx Tx, a Actor, operation string, key Idempotency) (Memory, bool, error) {
	if key.Key == "" {
		return Memory{}, false, nil
	}
	m, err := tx.Remembered(ctx, a.Token, operation, key.Key)
	if isKind(err, NotFound) {
		return Memory{}, false, nil
	}
	if err != nil {
		return Memory{}, false, err
	}
	if !bytes.Equal(m.Fingerprint, key.Fingerprint) {
		return Memory{}, false, &Error{Kind: Conflict, Message: "this Idempotency-Key was used for a different request; take a new key"}
	}
	return m, true, nil
}

func (s *Service) remember(ctx context.Context, tx Tx, a Actor, operation string, key Idempotency, id uuid.UUID, body []byte) error {
	if key.Key == "" {
		return nil
	}
	err := tx.Remember(ctx, a.Token, operation, key.Key, Memory{Fingerprint: key.Fingerprint, Resource: id, Body: body, CreatedAt: s.now()})
	if isKind(err, Conflict) {
		return raceError{err}
	}
	return err
}
