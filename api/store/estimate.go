package store

import (
	"context"
	"encoding/hex"
	"fmt"
	"strconv"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
	"spanwright/estimate/money"
)

const selectEstimate = `
select e.id, e.scheme_id, e.schedule_revision_id, e.rate_book_id, e.rate_book_number, e.job_sha256, e.document_sha256, e.engine_version,
  e.currency, e.base::text, e.p10::text, e.p50::text, e.p80::text, e.p90::text, e.mean::text, e.confidence::float8, e.contingency::text,
  e.net_t::text, e.delivered_t::text, e.purchased_t::text, e.members, e.unsafe_findings, e.created_at, e.created_by, t.name
from estimate e join token t on t.organisation_id = e.organisation_id and t.id = e.created_by where `

func scanEstimate(row pgx.CollectableRow) (service.Estimate, error) {
	var e service.Estimate
	into := func(d *money.Decimal) *amount { return (*amount)(d) }
	err := row.Scan(&e.ID, &e.Scheme, &e.Revision, &e.RateBook, &e.RateBookNumber, (*digest)(&e.JobSHA256), (*digest)(&e.DocumentSHA256), &e.EngineVersion,
		&e.Currency, into(&e.Base), into(&e.P10), into(&e.P50), into(&e.P80), into(&e.P90), into(&e.Mean), &e.Confidence, into(&e.Contingency),
		into(&e.Net), into(&e.Delivered), into(&e.Purchased), &e.Members, &e.Unsafe, &e.CreatedAt, &e.Author, &e.CreatedBy)
	return e, err
}

// projection are the columns that [service.Head] makes from a document, in the
// order of projectionColumns.
func projection(e service.Estimate) []any {
	// As text: a cast from float8 to numeric keeps 15 digits only.
	confidence := strconv.FormatFloat(e.Confidence, 'g', -1, 64)
	return []any{e.EngineVersion, e.Currency, e.Base.String(), e.P10.String(), e.P50.String(), e.P80.String(), e.P90.String(), e.Mean.String(),
		confidence, e.Contingency.String(), e.Net.String(), e.Delivered.String(), e.Purchased.String(), e.Members, e.Unsafe}
}

const projectionColumns = "engine_version, currency, base, p10, p50, p80, p90, mean, confidence, contingency, net_t, delivered_t, purchased_t, members, unsafe_findings"

// InsertEstimate stores an estimate with the canonical bytes of its frozen job and
// of its document: NotFound for the scheme, its revision or the version of the
// rate book.
func (t tenant) InsertEstimate(ctx context.Context, e service.Estimate, job, document []byte) error {
	jobSum, err := hex.DecodeString(e.JobSHA256)
	if err != nil {
		return fmt.Errorf("store: estimate: SHA-256 of the job: %w", err)
	}
	documentSum, err := hex.DecodeString(e.DocumentSHA256)
	if err != nil {
		return fmt.Errorf("store: estimate: SHA-256 of the document: %w", err)
	}
	return t.write(ctx, "estimate", `
insert into estimate (`+projectionColumns+`, organisation_id, id, scheme_id, schedule_revision_id, rate_book_id, rate_book_number,
  job, job_sha256, document, document_sha256, created_at, created_by)
values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17, $18, $19, $20, $21, $22, $23, $24, $25, $26, $27)`,
		append(projection(e), t.organisation, e.ID, e.Scheme, e.Revision, e.RateBook, e.RateBookNumber,
			job, jobSum, document, documentSum, e.CreatedAt, e.Author)...)
}

// Estimate reads the head of one estimate: NotFound.
func (t tenant) Estimate(ctx context.Context, id uuid.UUID) (service.Estimate, error) {
	return one(ctx, t, "estimate", scanEstimate, selectEstimate+"e.id = $1", id)
}

// EstimateDocument reads the document's bytes as they were stored: NotFound.
func (t tenant) EstimateDocument(ctx context.Context, id uuid.UUID) ([]byte, error) {
	return one(ctx, t, "estimate", pgx.RowTo[[]byte], "select document from estimate where id = $1", id)
}

// EstimateJob reads the frozen job's bytes as they were stored: NotFound.
func (t tenant) EstimateJob(ctx context.Context, id uuid.UUID) ([]byte, error) {
	return one(ctx, t, "estimate", pgx.RowTo[[]byte], "select job from estimate where id = $1", id)
}

// Estimates lists the estimates of a scheme, newest first: Invalid for a bad page.
func (t tenant) Estimates(ctx context.Context, scheme uuid.UUID, p service.Page) (service.List[service.Estimate], error) {
	return listing[service.Estimate]{noun: "estimate", sql: selectEstimate + "e.scheme_id = $1", order: [2]string{"e.created_at", "e.id"},
		scan: scanEstimate, at: func(e service.Estimate) position { return position{e.CreatedAt, e.ID} }}.read(ctx, t, p, scheme)
}

// NewestEstimate reads the newest estimate of a scheme: NotFound when it has none.
func (t tenant) NewestEstimate(ctx context.Context, scheme uuid.UUID) (service.Estimate, error) {
	return one(ctx, t, "estimate", scanEstimate, selectEstimate+"e.scheme_id = $1 order by e.created_at desc, e.id desc limit 1", scheme)
}
