package store

import (
	"context"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

// attemptLocks is the first half of the keys of advisory locks around one attempt.
const attemptLocks = 0x73777274 // "swrt"

// Remembered finds the record of an idempotency key: NotFound. It holds a lock on
// the key until the transaction ends: a simultaneous request with the same key
// waits here and then finds the record, before it has made anything that would
// be in conflict with what the first one made.
func (t tenant) Remembered(ctx context.Context, token uuid.UUID, operation, key string) (service.Memory, error) {
	const lock = "select pg_advisory_xact_lock($1, hashtext($2))"
	err := t.write(ctx, "idempotency record", lock, int32(attemptLocks), token.String()+"\n"+operation+"\n"+key)
	if err != nil {
		return service.Memory{}, err
	}
	// A statement of its own: it must see what was committed during the wait.
	return one(ctx, t, "idempotency record", func(row pgx.CollectableRow) (service.Memory, error) {
		var m service.Memory
		err := row.Scan(&m.Fingerprint, &m.Resource, &m.Body, &m.CreatedAt)
		return m, err
	}, `
select fingerprint, resource_id, body, created_at from idempotency where token_id = $1 and operation = $2 and key = $3`, token, operation, key)
}

// Remember writes the record of an idempotency key: Conflict when there is one.
func (t tenant) Remember(ctx context.Context, token uuid.UUID, operation, key string, m service.Memory) error {
	return t.write(ctx, "idempotency record", `
insert into idempotency (organisation_id, token_id, operation, key, fingerprint, resource_id, body, created_at)
values ($1, $2, $3, $4, $5, $6, $7, $8)`,
		t.organisation, token, operation, key, m.Fingerprint, m.Resource, m.Body, m.CreatedAt)
}
