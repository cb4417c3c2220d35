package service

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/calibration"
	"spanwright/estimate/sheet"
)

// Outturn is what one finished job really weighed and cost. It is never edited:
// a wrong one is withdrawn and posted anew.
type Outturn struct {
	ID           uuid.UUID           `json:"id"`
	Posting      uuid.UUID           `json:"posting_id" doc:"the posting that it came with"`
	Value        calibration.Outturn `json:"outturn"`
	SHA256       string              `json:"sha256" doc:"of the outturn's canonical bytes"`
	SourceName   string              `json:"source_name"`
	SourceSHA256 string              `json:"source_sha256"`
	Version      int64               `json:"version"`
	CreatedAt    time.Time           `json:"created_at"`
	CreatedBy    string              `json:"created_by" doc:"name of the token"`
	WithdrawnAt  *time.Time          `json:"withdrawn_at,omitempty" doc:"absent while it is in force"`

	Author  uuid.UUID `json:"-"` // the token; CreatedBy is its name
	Content []byte    `json:"-"` // canonical bytes of Value, of one to be stored
}

// OutturnPosting is what one posting added.
type OutturnPosting struct {
	ID       uuid.UUID `json:"posting_id"`
	Outturns []Outturn `json:"outturns" doc:"by name of the job"`
}

// postedJob is an outturn in the audit event of its posting, without its figures,
// which are kept as they came.
type postedJob struct {
	ID     uuid.UUID `json:"id"`
	Job    string    `json:"job"`
	SHA256 string    `json:"sha256"`
}

// AddOutturns reads finished jobs from a workbook, a CSV file or JSON and stores all
// of them or none: Invalid with every fault, Malformed, Unsupported, TooLarge,
// Conflict for jobs of which an outturn is in force already.
func (s *Service) AddOutturns(ctx context.Context, a Actor, p Posting, key Idempotency) (OutturnPosting, error) {
	classes, err := read(ctx, s, a, auth.WriteOutturns, func(tx Tx) ([]string, error) { return classesOf(ctx, tx) })
	if err != nil {
		return OutturnPosting{}, err
	}
	values, err := s.readOutturns(ctx, p, calibration.Options{Kinds: classes})
	if err != nil {
		return OutturnPosting{}, err
	}
	made, err := s.outturns(a, p, values)
	if err != nil {
		return OutturnPosting{}, err
	}
	return once(ctx, s, a, "post outturns", key, made.ID,
		func(tx Tx, id uuid.UUID) (OutturnPosting, error) {
			list, err := tx.OutturnsOfPosting(ctx, id)
			return OutturnPosting{ID: id, Outturns: list}, err
		},
		func(tx Tx) (OutturnPosting, error) { return made, s.insertOutturns(ctx, tx, a, made) })
}

// readOutturns reads a posting, with every fault at once.
func (s *Service) readOutturns(ctx context.Context, p Posting, o calibration.Options) ([]calibration.Outturn, error) {
	if int64(len(p.Data)) > s.limits.Sheet.Bytes {
		return nil, &Error{Kind: TooLarge, Message: "the outturns are larger than the limit"}
	}
	if len(p.Data) > largePosting {
		release, err := s.place(ctx)
		if err != nil {
			return nil, err
		}
		defer release()
	}
	if strings.HasPrefix(p.ContentType, "application/json") {
		list, err := calibration.ReadJSON(p.Data, o)
		return list, fromOutturnsJSON(err)
	}
	cells, err := sheet.Open(p.Data, p.Name, p.ContentType, s.limits.Sheet)
	if err != nil {
		return nil, fromReading(err)
	}
	list, err := calibration.Read(ctx, cells, o)
	var faults sheet.Faults
	if errors.As(err, &faults) {
		return nil, &Error{Kind: Invalid, Message: "the outturns have faults; nothing was stored", Faults: fromSheet(faults)}
	}
	return list, fromReading(err)
}

// fromOutturnsJSON classifies what reading outturns as JSON reports.
func fromOutturnsJSON(err error) error {
	var faults calibration.Faults
	switch {
	case err == nil:
		return nil
	case errors.As(err, &faults):
		out := &Error{Kind: Invalid, Message: "the outturns have faults; nothing was stored"}
		for _, f := range faults {
			out.Faults = append(out.Faults, Fault{Pointer: f.Pointer, Found: f.Found, Problem: f.Problem, Remedy: f.Remedy})
		}
		return out
	}
	return &Error{Kind: Malformed, Message: err.Error(), Err: err, Faults: []Fault{{Found: "the body", Problem: err.Error(),
		Remedy: `{"outturns": [{"job": "…", "completed": "2025-09-30", …}]}`}}}
}

// outturns makes the records of a posting.
func (s *Service) outturns(a Actor, p Posting, values []calibration.Outturn) (OutturnPosting, error) {
	posting, err := s.newID()
	if err != nil {
		return OutturnPosting{}, err
	}
	out := OutturnPosting{ID: posting}
	if p.Name == "" {
		p.Name = "outturns"
	}
	now := s.now()
	for _, v := range values {
		id, err := s.newID()
		if err != nil {
			return out, err
		}
		content, err := json.Marshal(v)
		if err != nil {
			return out, fmt.Errorf("writing the outturn of %s: %w", v.Job, err)
		}
		sum := sha256.Sum256(content)
		out.Outturns = append(out.Outturns, Outturn{ID: id, Posting: posting, Value: v, SHA256: hex.EncodeToString(sum[:]), SourceName: p.SourceName(),
			SourceSHA256: p.SHA256(), Version: 1, CreatedAt: now, CreatedBy: a.Name, Author: a.Token, Content: content})
	}
	return out, nil
}

// insertOutturns stores a posting whose jobs have no outturn in force yet.
func (s *Service) insertOutturns(ctx context.Context, tx Tx, a Actor, p OutturnPosting) error {
	inForce, err := tx.OutturnsInForce(ctx)
	if err != nil {
		return err
	}
	if n := len(inForce) + len(p.Outturns); n > calibration.MostOutturns {
		return &Error{Kind: Invalid, Message: "there would be too many outturns in force", Faults: []Fault{{Found: strconv.Itoa(n) + " outturns",
			Problem: "more than can be fitted together", Remedy: fmt.Sprintf("at most %d; withdraw old ones", calibration.MostOutturns)}}}
	}
	known := map[string]Outturn{}
	for _, o := range inForce {
		known[strings.ToLower(o.Value.Job)] = o
	}
	var faults []Fault
	for _, o := range p.Outturns {
		if first, twice := known[strings.ToLower(o.Value.Job)]; twice {
			faults = append(faults, Fault{Found: o.Value.Job, Problem: "has an outturn in force already, posted on " + first.CreatedAt.Format(time.DateOnly),
				Remedy: "withdraw outturn " + first.ID.String() + ", or leave the job out"})
		}
	}
	if len(faults) > 0 {
		return &Error{Kind: Conflict, Message: "jobs have an outturn already; nothing was stored", Faults: faults}
	}
	if err := tx.InsertOutturns(ctx, p.Outturns); err != nil {
		return err
	}
	jobs := make([]postedJob, len(p.Outturns))
	for i, o := range p.Outturns {
		jobs[i] = postedJob{o.ID, o.Value.Job, o.SHA256}
	}
	return s.audit(ctx, tx, a, "post", "outturns", p.ID, nil, jobs)
}

// Outturn reads one outturn in force: NotFound.
func (s *Service) Outturn(ctx context.Context, a Actor, id uuid.UUID) (Outturn, error) {
	return read(ctx, s, a, auth.ReadOutturns, func(tx Tx) (Outturn, error) { return tx.Outturn(ctx, id) })
}

// Outturns lists the outturns in force.
func (s *Service) Outturns(ctx context.Context, a Actor, p Page) (List[Outturn], error) {
	return list(ctx, s, a, auth.ReadOutturns, func(tx Tx) (List[Outturn], error) { return tx.Outturns(ctx, p) })
}

// OutturnTemplate writes an empty table of outturns as a workbook.
func (s *Service) OutturnTemplate(ctx context.Context, a Actor) ([]byte, error) {
	if err := s.allow(a, auth.ReadOutturns); err != nil {
		return nil, err
	}
	return s.Export(ctx, calibration.Template)
}

// WithdrawOutturn takes an outturn out of force; its row, its audit events and the
// calibrations that rest on it stay: NotFound, Stale.
func (s *Service) WithdrawOutturn(ctx context.Context, a Actor, id uuid.UUID, version int64) error {
	if err := s.allow(a, auth.WithdrawOutturns); err != nil {
		return err
	}
	return s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		before, err := tx.Outturn(ctx, id)
		if err != nil {
			return err
		}
		if version != AnyVersion && version != before.Version {
			return &Error{Kind: Stale, Message: "the outturn has changed: read it again and repeat"}
		}
		if err := tx.WithdrawOutturn(ctx, id, before.Version, s.now()); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "withdraw", "outturn", id, before, nil)
	})
}
