package store_test

import (
	"context"
	"encoding/json"
	"testing"

	"spanwright/api/service"
)

func TestAudit(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	first := service.AuditEvent{ID: newID(), At: at(1), ActorToken: f.token.ID, ActorName: "quay job", ActorRole: "estimator", RequestID: "r1",
		Action: "update", SubjectKind: "project", SubjectID: f.project.ID, Before: f.project, After: map[string]any{"seed": uint64(18446744073709551615), "list": []int{1}}}
	second := service.AuditEvent{ID: newID(), At: at(2), ActorName: "command line", ActorRole: "administrator", Action: "delete", SubjectKind: "token", SubjectID: newID()}
	f.do(func(tx service.Tx) error {
		if err := tx.InsertAudit(ctx, first); err != nil {
			return err
		}
		return tx.InsertAudit(ctx, second)
	})
	// As they are answered: plain JSON values, numbers with all their digits.
	first.Before = map[string]any{"id": f.project.ID.String(), "name": "Loading quay", "currency": "EUR", "base_date": "2026-06-01", "display_units": "SI",
		"version": json.Number("1"), "created_at": "2026-06-01T23:59:01.123456Z", "updated_at": "2026-06-01T23:59:01.123456Z"}
	first.After = map[string]any{"seed": json.Number("18446744073709551615"), "list": []any{json.Number("1")}}
	f.do(func(tx service.Tx) error {
		f.same(got[service.List[service.AuditEvent]](f)(tx.Audit(ctx, service.Page{})), service.List[service.AuditEvent]{Items: []service.AuditEvent{second, first}})
		return nil
	})
	nameless := second
	nameless.ID, nameless.ActorName = newID(), ""
	f.refused("taken id", service.Conflict, "this audit event exists", func(ctx context.Context, tx service.Tx) error { return tx.InsertAudit(ctx, first) })
	f.refused("nameless", service.Invalid, "outside of what can be stored", func(ctx context.Context, tx service.Tx) error { return tx.InsertAudit(ctx, nameless) })
	for _, e := range []service.AuditEvent{{ID: newID(), Before: make(chan int)}, {ID: newID(), After: make(chan int)}} {
		if err := f.s.InTenant(ctx, f.organisation, func(tx service.Tx) error { return tx.InsertAudit(ctx, e) }); err == nil {
			t.Error("what has no JSON was stored")
		}
	}
}
