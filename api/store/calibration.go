package store

import (
	"context"
	"encoding/hex"
	"encoding/json"
	"fmt"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const (
	calibrationHead = `c.id, c.rate_book_id, c.rate_book_number, c.sha256, c.jobs, c.left_out, c.recommended, c.statement, c.state, c.reason, c.decision,
  coalesce(c.made_number, 0), c.decided_at, coalesce(c.decided_by, '00000000-0000-0000-0000-000000000000'), coalesce(d.name, ''),
  c.version, c.created_at, c.created_by, t.name`
	fromCalibration = `
from calibration c join token t on t.organisation_id = c.organisation_id and t.id = c.created_by
left join token d on d.organisation_id = c.organisation_id and d.id = c.decided_by where `
)

// calibrationFields are the places of calibrationHead; decision is decoded after the
// scan.
func calibrationFields(c *service.Calibration, decision *[]byte) []any {
	return []any{&c.ID, &c.RateBook, &c.RateBookNumber, (*digest)(&c.SHA256), &c.Jobs, &c.LeftOut, &c.Recommended, &c.Statement, &c.State, &c.Reason, decision,
		&c.MadeNumber, &c.DecidedAt, &c.Decider, &c.DecidedBy, &c.Version, &c.CreatedAt, &c.Author, &c.CreatedBy}
}

func scanCalibrationHead(row pgx.CollectableRow) (service.Calibration, error) {
	var c service.Calibration
	var decision []byte
	if err := row.Scan(calibrationFields(&c, &decision)...); err != nil {
		return c, err
	}
	return c, decodeDecision(&c, decision)
}

func decodeDecision(c *service.Calibration, decision []byte) error {
	if decision == nil {
		return nil
	}
	return json.Unmarshal(decision, &c.Decision)
}

func scanCalibration(row pgx.CollectableRow) (service.Calibration, error) {
	var c service.Calibration
	var decision, proposal, evidence []byte
	if err := row.Scan(append(calibrationFields(&c, &decision), &proposal, &evidence)...); err != nil {
		return c, err
	}
	if err := json.Unmarshal(proposal, &c.Proposal); err != nil {
		return c, err
	}
	if err := json.Unmarshal(evidence, &c.Evidence); err != nil {
		return c, err
	}
	return c, decodeDecision(&c, decision)
}

// InsertCalibration stores a proposed calibration with the canonical bytes of its
// proposal in Content and of its evidence in EvidenceRaw: NotFound for the version of
// the rate book.
func (t tenant) InsertCalibration(ctx context.Context, c service.Calibration) error {
	sum, err := hex.DecodeString(c.SHA256)
	if err != nil {
		return fmt.Errorf("store: calibration: SHA-256: %w", err)
	}
	return t.write(ctx, "calibration", `
insert into calibration (organisation_id, id, rate_book_id, rate_book_number, proposal, sha256, evidence, jobs, left_out, recommended, statement,
  state, version, created_at, created_by) values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15)`,
		t.organisation, c.ID, c.RateBook, c.RateBookNumber, c.Content, sum, c.EvidenceRaw, c.Jobs, c.LeftOut, c.Recommended, c.Statement,
		c.State, c.Version, c.CreatedAt, c.Author)
}

// Calibration reads one calibration with proposal and evidence: NotFound.
func (t tenant) Calibration(ctx context.Context, id uuid.UUID) (service.Calibration, error) {
	return one(ctx, t, "calibration", scanCalibration, "select "+calibrationHead+", c.proposal, c.evidence"+fromCalibration+"c.id = $1", id)
}

// Calibrations lists calibrations without proposal and evidence, newest first:
// Invalid for a bad page.
func (t tenant) Calibrations(ctx context.Context, p service.Page) (service.List[service.Calibration], error) {
	return listing[service.Calibration]{noun: "calibration", sql: "select " + calibrationHead + fromCalibration + "true", order: [2]string{"c.created_at", "c.id"},
		scan: scanCalibrationHead, at: func(c service.Calibration) position { return position{c.CreatedAt, c.ID} }}.read(ctx, t, p)
}

// DecideCalibration writes the decision of a calibration that is still proposed, in
// the version before c.Version: NotFound, also for the version of the rate book that
// it has made; Stale when it is decided.
func (t tenant) DecideCalibration(ctx context.Context, c service.Calibration) error {
	var decision []byte
	var made *int
	if c.Decision != nil {
		var err error
		if decision, err = json.Marshal(c.Decision); err != nil {
			return fmt.Errorf("store: calibration: decision: %w", err)
		}
	}
	if c.MadeNumber != 0 {
		made = &c.MadeNumber
	}
	return t.replace(ctx, "calibration", "select id from calibration where id = $1", c.ID, `
update calibration set state = $3, reason = $4, decision = $5, made_number = $6, decided_at = $7, decided_by = $8, version = $2
where id = $1 and version = $2::bigint - 1 and state = 'proposed'`,
		c.ID, c.Version, c.State, c.Reason, decision, made, c.DecidedAt, orNull(c.Decider))
}
