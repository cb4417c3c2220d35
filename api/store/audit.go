package store

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const selectAudit = `
select id, at, actor_token_id, actor_name, actor_role, request_id, action, subject_kind, subject_id, before, after
from audit_event where true`

func scanAudit(row pgx.CollectableRow) (service.AuditEvent, error) {
	var e service.AuditEvent
	var actor *uuid.UUID
	var before, after []byte
	err := row.Scan(&e.ID, &e.At, &actor, &e.ActorName, &e.ActorRole, &e.RequestID, &e.Action, &e.SubjectKind, &e.SubjectID, &before, &after)
	if err != nil {
		return e, err
	}
	if actor != nil {
		e.ActorToken = *actor
	}
	if e.Before, err = fromJSON(before); err != nil {
		return e, err
	}
	e.After, err = fromJSON(after)
	return e, err
}

// InsertAudit appends an event. Before and After are stored as the JSON that they
// are answered as; nil is none. Without an actor's token, ActorToken is uuid.Nil.
func (t tenant) InsertAudit(ctx context.Context, e service.AuditEvent) error {
	before, err := toJSON(e.Before)
	if err != nil {
		return err
	}
	after, err := toJSON(e.After)
	if err != nil {
		return err
	}
	return t.write(ctx, "audit event", `
insert into audit_event (organisation_id, id, at, actor_token_id, actor_name, actor_role, request_id, action, subject_kind, subject_id, before, after)
values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)`,
		t.organisation, e.ID, e.At, orNull(e.ActorToken), e.ActorName, e.ActorRole, e.RequestID, e.Action, e.SubjectKind, e.SubjectID, before, after)
}

// Audit lists events, newest first: Invalid for a bad page. Before and After are
// plain JSON values with numbers as json.Number.
func (t tenant) Audit(ctx context.Context, p service.Page) (service.List[service.AuditEvent], error) {
	return listing[service.AuditEvent]{noun: "audit event", sql: selectAudit, order: [2]string{"at", "id"}, scan: scanAudit,
		at: func(e service.AuditEvent) position { return position{e.At, e.ID} }}.read(ctx, t, p)
}

func toJSON(v any) ([]byte, error) {
	if v == nil {
		return nil, nil
	}
	data, err := json.Marshal(v)
	if err != nil {
		return nil, fmt.Errorf("store: audit event: %w", err)
	}
	return data, nil
}

func fromJSON(data []byte) (any, error) {
	if data == nil {
		return nil, nil
	}
	d := json.NewDecoder(bytes.NewReader(data))
	d.UseNumber() // a float would lose digits of a seed
	var v any
	err := d.Decode(&v)
	return v, err
}
