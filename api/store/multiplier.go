package store

import (
	"context"
	"encoding/json"
	"fmt"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

// selectMultiplier sees those in force: a deleted one is not found.
const selectMultiplier = `
select id, project_id, scheme_id, scope, subject, name, categories, spread, correlation_group, reason, author, version, created_at, updated_at
from multiplier where deleted_at is null`

func scanMultiplier(row pgx.CollectableRow) (service.Multiplier, error) {
	var m service.Multiplier
	var spread []byte
	v := &m.Value
	err := row.Scan(&m.ID, &m.Project, &m.Scheme, &v.Scope, &v.Subject, &v.Name, &v.Categories, &spread, &v.Group, &v.Reason, &v.Author,
		&m.Version, &m.CreatedAt, &m.UpdatedAt)
	if err != nil {
		return m, err
	}
	return m, json.Unmarshal(spread, &v.Spread)
}

// InsertMultiplier stores a new multiplier: NotFound for the project, or for the
// scheme in it; Conflict when one of this name, scope and subject is in force.
func (t tenant) InsertMultiplier(ctx context.Context, m service.Multiplier) error {
	v := m.Value
	spread, err := json.Marshal(v.Spread)
	if err != nil {
		return fmt.Errorf("store: multiplier: %w", err)
	}
	return t.write(ctx, "multiplier", `
insert into multiplier (organisation_id, id, project_id, scheme_id, scope, subject, name, categories, spread, correlation_group, reason, author,
  version, created_at, updated_at) values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15)`,
		t.organisation, m.ID, m.Project, m.Scheme, string(v.Scope), v.Subject, v.Name, v.Categories, spread, v.Group, v.Reason, v.Author,
		m.Version, m.CreatedAt, m.UpdatedAt)
}

// Multiplier reads one multiplier in force: NotFound.
func (t tenant) Multiplier(ctx context.Context, id uuid.UUID) (service.Multiplier, error) {
	return one(ctx, t, "multiplier", scanMultiplier, selectMultiplier+" and id = $1", id)
}

// Multipliers lists the multipliers in force of a project and its schemes, newest
// first: Invalid for a bad page.
func (t tenant) Multipliers(ctx context.Context, project uuid.UUID, p service.Page) (service.List[service.Multiplier], error) {
	return listing[service.Multiplier]{noun: "multiplier", sql: selectMultiplier + " and project_id = $1", order: [2]string{"created_at", "id"},
		scan: scanMultiplier, at: func(m service.Multiplier) position { return position{m.CreatedAt, m.ID} }}.read(ctx, t, p, project)
}

// MultipliersInForce returns those of the whole project, then those of the scheme,
// each oldest first: of two alike the later one wins.
func (t tenant) MultipliersInForce(ctx context.Context, project, scheme uuid.UUID) ([]service.Multiplier, error) {
	rows, err := t.db.Query(ctx, selectMultiplier+`
and project_id = $1 and (scheme_id is null or scheme_id = $2) order by scheme_id is not null, created_at, id`, project, scheme)
	if err != nil {
		return nil, failure(err, "multiplier")
	}
	ms, err := pgx.CollectRows(rows, scanMultiplier)
	return ms, failure(err, "multiplier")
}

const multiplierExists = "select id from multiplier where id = $1 and deleted_at is null"

// UpdateMultiplier writes the value of m over the version before m.Version; its
// project and scheme stay: NotFound, Stale, Conflict as for InsertMultiplier.
func (t tenant) UpdateMultiplier(ctx context.Context, m service.Multiplier) error {
	v := m.Value
	spread, err := json.Marshal(v.Spread)
	if err != nil {
		return fmt.Errorf("store: multiplier: %w", err)
	}
	return t.replace(ctx, "multiplier", multiplierExists, m.ID, `
update multiplier set scope = $3, subject = $4, name = $5, categories = $6, spread = $7, correlation_group = $8, reason = $9, author = $10,
  version = $2, updated_at = $11 where id = $1 and version = $2::bigint - 1 and deleted_at is null`,
		m.ID, m.Version, string(v.Scope), v.Subject, v.Name, v.Categories, spread, v.Group, v.Reason, v.Author, m.UpdatedAt)
}

// DeleteMultiplier takes a multiplier of this version out of force: NotFound, Stale.
func (t tenant) DeleteMultiplier(ctx context.Context, id uuid.UUID, version int64, at time.Time) error {
	return t.replace(ctx, "multiplier", multiplierExists, id, `
update multiplier set deleted_at = $3, updated_at = $3, version = $2::bigint + 1 where id = $1 and version = $2 and deleted_at is null`, id, version, at)
}
