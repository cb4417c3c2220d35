package store

import (
	"context"
	"encoding/hex"
	"fmt"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

// selectRevision begins a query for revisions, with their sources or without.
func selectRevision(source string) string {
	return `
select r.id, r.scheme_id, r.number, r.source_name, r.source_sha256, r.members, r.created_at, r.created_by, t.name, ` + source + `
from schedule_revision r join token t on t.organisation_id = r.organisation_id and t.id = r.created_by where `
}

var (
	selectWholeRevision  = selectRevision("r.source, r.job_defaults, r.definition, r.risks")
	selectListedRevision = selectRevision("null::bytea, null::bytea, null::bytea, null::bytea")
)

func scanRevision(row pgx.CollectableRow) (service.Revision, error) {
	var r service.Revision
	err := row.Scan(&r.ID, &r.Scheme, &r.Number, &r.SourceName, (*digest)(&r.SourceSHA256), &r.Members, &r.CreatedAt, &r.Author, &r.CreatedBy,
		&r.Source, &r.JobTable, &r.DefinitionTable, &r.RiskTable)
	return r, err
}

// InsertRevision stores a posting under the next number of its scheme, which it
// returns in the record: NotFound for the scheme. Simultaneous ones wait for each
// other on the scheme's row.
func (t tenant) InsertRevision(ctx context.Context, r service.Revision) (service.Revision, error) {
	sum, err := hex.DecodeString(r.SourceSHA256)
	if err != nil {
		return r, fmt.Errorf("store: schedule revision: SHA-256 of the source: %w", err)
	}
	// No key update: references to the scheme need not wait.
	if _, err := one(ctx, t, "scheme", pgx.RowTo[uuid.UUID], "select id from scheme where id = $1 for no key update", r.Scheme); err != nil {
		return r, err
	}
	// A statement of its own: it must see what was committed during the wait.
	number, err := one(ctx, t, "schedule revision", pgx.RowTo[int], `
insert into schedule_revision (organisation_id, id, scheme_id, number, source_name, source_sha256, source, job_defaults, definition, risks, members, created_at, created_by)
values ($1, $2, $3, 1 + coalesce((select max(number) from schedule_revision where scheme_id = $3), 0), $4, $5, $6, $7, $8, $9, $10, $11, $12)
returning number`,
		t.organisation, r.ID, r.Scheme, r.SourceName, sum, r.Source, r.JobTable, r.DefinitionTable, r.RiskTable, r.Members, r.CreatedAt, r.Author)
	if err != nil {
		return r, err
	}
	r.Number = number
	return r, nil
}

// Revision reads one revision with what was posted: NotFound.
func (t tenant) Revision(ctx context.Context, id uuid.UUID) (service.Revision, error) {
	return one(ctx, t, "schedule revision", scanRevision, selectWholeRevision+"r.id = $1", id)
}

// NewestRevision reads the revision of the highest number: NotFound when the scheme
// has none.
func (t tenant) NewestRevision(ctx context.Context, scheme uuid.UUID) (service.Revision, error) {
	return one(ctx, t, "schedule revision", scanRevision, selectWholeRevision+"r.scheme_id = $1 order by r.number desc limit 1", scheme)
}

// Revisions lists the revisions of a scheme, newest first, without what was posted:
// Invalid for a bad page.
func (t tenant) Revisions(ctx context.Context, scheme uuid.UUID, p service.Page) (service.List[service.Revision], error) {
	return listing[service.Revision]{noun: "schedule revision", sql: selectListedRevision + "r.scheme_id = $1",
		order: [2]string{"r.created_at", "r.id"}, scan: scanRevision,
		at: func(r service.Revision) position { return position{r.CreatedAt, r.ID} }}.read(ctx, t, p, scheme)
}
