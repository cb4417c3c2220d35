package store

import (
	"context"
	"errors"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

var (
	_ service.Store = (*Store)(nil)
	_ service.Tx    = tenant{}
)

// tenant is a transaction of one organisation. Its statements name no
// organisation where they read: row-level security does. Where they write, they
// name the one that the transaction has set; any other is refused by the policy.
type tenant struct {
	db           pgx.Tx
	organisation uuid.UUID
}

// InTenant runs fn in a transaction that sees and writes the rows of one
// organisation only; it commits when fn returns nil and rolls back otherwise. The
// setting that row-level security reads is local to the transaction: no
// connection goes back to the pool with it. Errors of fn come back as they are.
//
// No transaction may be open while the engine computes: fn only reads and writes.
// After an error of a method of Tx, NotFound and Stale aside, the transaction can
// only be rolled back.
func (s *Store) InTenant(ctx context.Context, organisation uuid.UUID, fn func(service.Tx) error) error {
	return s.inTenant(ctx, organisation, func(db pgx.Tx) error { return fn(tenant{db: db, organisation: organisation}) })
}

func (s *Store) inTenant(ctx context.Context, organisation uuid.UUID, fn func(pgx.Tx) error) error {
	if organisation == uuid.Nil {
		return errors.New("store: no organisation given: want the id of the caller's organisation")
	}
	// A parsed UUID prints as hexadecimal digits and hyphens only: it needs no
	// quoting, and begin and setting travel as one message.
	begin := "begin; set local app.organisation = '" + organisation.String() + "'"
	var own error
	err := pgx.BeginTxFunc(ctx, s.pool, pgx.TxOptions{BeginQuery: begin}, func(db pgx.Tx) error {
		own = fn(db)
		return own
	})
	if own != nil {
		return own // and not what went wrong in the rollback after it
	}
	return failure(err, "transaction")
}

// write runs a statement that writes; the noun is what its errors speak of.
func (t tenant) write(ctx context.Context, noun, sql string, args ...any) error {
	_, err := t.db.Exec(ctx, sql, args...)
	return failure(err, noun)
}

// replace runs an update of a row that may have another version by now: Stale when
// it touches no row but exists finds one for the id, NotFound when there is none.
func (t tenant) replace(ctx context.Context, noun, exists string, id uuid.UUID, sql string, args ...any) error {
	done, err := t.db.Exec(ctx, sql, args...)
	if err != nil || done.RowsAffected() > 0 {
		return failure(err, noun)
	}
	if _, err := one(ctx, t, noun, pgx.RowTo[uuid.UUID], exists, id); err != nil {
		return err
	}
	return &service.Error{Kind: service.Stale, Message: "the " + noun + " has changed meanwhile: read it again and repeat the change"}
}

// one reads exactly one row: NotFound when there is none.
func one[T any](ctx context.Context, t tenant, noun string, scan pgx.RowToFunc[T], sql string, args ...any) (T, error) {
	rows, err := t.db.Query(ctx, sql, args...)
	if err != nil {
		var none T
		return none, failure(err, noun)
	}
	v, err := pgx.CollectExactlyOneRow(rows, scan)
	return v, failure(err, noun)
}
