package store

import (
	"context"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const (
	selectOutturn = `
select o.id, o.posting_id, o.content, o.sha256, o.source_name, o.source_sha256, o.version, o.created_at, o.created_by, t.name, o.withdrawn_at
from outturn o join token t on t.organisation_id = o.organisation_id and t.id = o.created_by where `
	// selectOutturnInForce does not see withdrawn ones.
	selectOutturnInForce = selectOutturn + "o.withdrawn_at is null"
)

func scanOutturn(row pgx.CollectableRow) (service.Outturn, error) {
	var o service.Outturn
	var content []byte
	err := row.Scan(&o.ID, &o.Posting, &content, (*digest)(&o.SHA256), &o.SourceName, (*digest)(&o.SourceSHA256), &o.Version, &o.CreatedAt,
		&o.Author, &o.CreatedBy, &o.WithdrawnAt)
	if err != nil {
		return o, err
	}
	return o, json.Unmarshal(content, &o.Value)
}

// InsertOutturns stores outturns with the canonical bytes in Content, all or none:
// Conflict when one of a job is in force already.
func (t tenant) InsertOutturns(ctx context.Context, list []service.Outturn) error {
	n := len(list)
	ids, postings, authors := make([]uuid.UUID, n), make([]uuid.UUID, n), make([]uuid.UUID, n)
	jobs, kinds, completed, names := make([]string, n), make([]string, n), make([]string, n), make([]string, n)
	contents, sums, sourceSums := make([][]byte, n), make([][]byte, n), make([][]byte, n)
	versions, created := make([]int64, n), make([]time.Time, n)
	for i, o := range list {
		var err error
		if sums[i], err = hex.DecodeString(o.SHA256); err != nil {
			return fmt.Errorf("store: outturn: SHA-256: %w", err)
		}
		if sourceSums[i], err = hex.DecodeString(o.SourceSHA256); err != nil {
			return fmt.Errorf("store: outturn: SHA-256 of the source: %w", err)
		}
		ids[i], postings[i], authors[i] = o.ID, o.Posting, o.Author
		jobs[i], kinds[i], completed[i], names[i] = o.Value.Job, o.Value.Kind, o.Value.Completed, o.SourceName
		contents[i], versions[i], created[i] = o.Content, o.Version, o.CreatedAt
	}
	return t.write(ctx, "outturn", `
insert into outturn (organisation_id, id, posting_id, job, kind, completed, content, sha256, source_name, source_sha256, version, created_at, created_by)
select $1, id, posting_id, job, kind, completed::date, content, sha256, source_name, source_sha256, version, created_at, created_by
from unnest($2::uuid[], $3::uuid[], $4::text[], $5::text[], $6::text[], $7::bytea[], $8::bytea[], $9::text[], $10::bytea[], $11::bigint[], $12::timestamptz[], $13::uuid[])
  as row (id, posting_id, job, kind, completed, content, sha256, source_name, source_sha256, version, created_at, created_by)`,
		t.organisation, ids, postings, jobs, kinds, completed, contents, sums, names, sourceSums, versions, created, authors)
}

// Outturn reads one outturn in force: NotFound.
func (t tenant) Outturn(ctx context.Context, id uuid.UUID) (service.Outturn, error) {
	return one(ctx, t, "outturn", scanOutturn, selectOutturnInForce+" and o.id = $1", id)
}

// Outturns lists the outturns in force, newest first: Invalid for a bad page.
func (t tenant) Outturns(ctx context.Context, p service.Page) (service.List[service.Outturn], error) {
	return listing[service.Outturn]{noun: "outturn", sql: selectOutturnInForce, order: [2]string{"o.created_at", "o.id"}, scan: scanOutturn,
		at: func(o service.Outturn) position { return position{o.CreatedAt, o.ID} }}.read(ctx, t, p)
}

// OutturnsInForce returns all of them, by job.
func (t tenant) OutturnsInForce(ctx context.Context) ([]service.Outturn, error) {
	return t.outturns(ctx, selectOutturnInForce)
}

// OutturnsOfPosting returns those of one posting by job, withdrawn ones too.
func (t tenant) OutturnsOfPosting(ctx context.Context, posting uuid.UUID) ([]service.Outturn, error) {
	return t.outturns(ctx, selectOutturn+"o.posting_id = $1", posting)
}

// outturns reads by the job's bytes: the order must not depend on a language.
func (t tenant) outturns(ctx context.Context, sql string, args ...any) ([]service.Outturn, error) {
	rows, err := t.db.Query(ctx, sql+` order by o.job collate "C", o.id`, args...)
	if err != nil {
		return nil, failure(err, "outturn")
	}
	list, err := pgx.CollectRows(rows, scanOutturn)
	return list, failure(err, "outturn")
}

// WithdrawOutturn takes an outturn of this version out of force: NotFound, Stale.
func (t tenant) WithdrawOutturn(ctx context.Context, id uuid.UUID, version int64, at time.Time) error {
	return t.replace(ctx, "outturn", "select id from outturn where id = $1 and withdrawn_at is null", id, `
update outturn set withdrawn_at = $3, version = $2::bigint + 1 where id = $1 and version = $2 and withdrawn_at is null`, id, version, at)
}
