package service

import (
	"context"
	"strings"
	"unicode"

	"github.com/google/uuid"

	"spanwright/api/auth"
)

// audit writes one event in the transaction of the change that it tells of.
func (s *Service) audit(ctx context.Context, tx Tx, a Actor, action, kind string, subject uuid.UUID, before, after any) error {
	id, err := s.newID()
	if err != nil {
		return err
	}
	return tx.InsertAudit(ctx, AuditEvent{
		ID: id, At: s.now(), ActorToken: a.Token, ActorName: a.Name, ActorRole: string(a.Role), RequestID: a.RequestID,
		Action: action, SubjectKind: kind, SubjectID: subject, Before: before, After: after,
	})
}

// read runs fn in the tenant's transaction after asking the policy.
func read[T any](ctx context.Context, s *Service, a Actor, o auth.Operation, fn func(Tx) (T, error)) (T, error) {
	var out T
	if err := s.allow(a, o); err != nil {
		return out, err
	}
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		var err error
		out, err = fn(tx)
		return err
	})
	return out, err
}

// list is read for one page of a list; an empty page is [] and not null.
func list[T any](ctx context.Context, s *Service, a Actor, o auth.Operation, fn func(Tx) (List[T], error)) (List[T], error) {
	l, err := read(ctx, s, a, o, fn)
	l.Items = orEmpty(l.Items)
	return l, err
}

func invalid(pointer, found, problem, remedy string) error {
	return &Error{Kind: Invalid, Message: strings.TrimPrefix(pointer, "/") + ": " + problem,
		Faults: []Fault{{Pointer: pointer, Found: found, Problem: problem, Remedy: remedy}}}
}

// checkName refuses names that are empty, too long or hold control characters.
func checkName(pointer, name string, most int) error {
	switch {
	case strings.TrimSpace(name) == "":
		return invalid(pointer, name, "empty", "a name")
	case len([]rune(name)) > most:
		return invalid(pointer, string([]rune(name)[:40])+"…", "too long", "a shorter name")
	case name != strings.TrimSpace(name):
		return invalid(pointer, name, "begins or ends with a blank", "the name without it")
	case strings.ContainsFunc(name, func(r rune) bool {
		return r < 0x20 || r == 0x7f || r == 0xfffd || unicode.Is(unicode.Bidi_Control, r)
	}):
		return invalid(pointer, name, "holds a control character", "plain text")
	}
	return nil
}
