package store

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgxpool"
)

// Pool shows the store's pool to the tests.
func Pool(s *Store) *pgxpool.Pool { return s.pool }

// InTenant shows a tenant's transaction to the tests as one of pgx.
func InTenant(ctx context.Context, s *Store, organisation uuid.UUID, fn func(pgx.Tx) error) error {
	return s.inTenant(ctx, organisation, fn)
}

// Taken and Missing are the constraints that have a message.
var Taken, Missing = taken, missing
