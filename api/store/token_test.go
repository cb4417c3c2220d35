package store_test

import (
	"context"
	"crypto/sha256"
	"testing"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/service"
)

func TestToken(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	expires, secret := at(1000), auth.NewToken()
	second := service.Token{ID: newID(), PublicID: secret.PublicID, Name: "second", Role: auth.Administrator, CreatedAt: at(10), CreatedBy: &f.token.ID, ExpiresAt: &expires, Version: 1}
	f.do(func(tx service.Tx) error { return tx.InsertToken(ctx, second, secret.SHA256) })
	f.do(func(tx service.Tx) error {
		f.same(got[service.Token](f)(tx.Token(ctx, f.token.ID)), f.token)
		f.same(got[service.Token](f)(tx.Token(ctx, second.ID)), second)
		f.same(got[service.List[service.Token]](f)(tx.Tokens(ctx, service.Page{})), service.List[service.Token]{Items: []service.Token{second, f.token}})
		return nil
	})
	want := service.Credential{Organisation: f.organisation, Token: second.ID, SecretSHA256: secret.SHA256, Role: auth.Administrator, Name: "second", ExpiresAt: &expires}
	f.same(got[service.Credential](f)(f.s.TokenByPublicID(ctx, secret.PublicID)), want)

	revoked := at(500)
	f.do(func(tx service.Tx) error { return tx.RevokeToken(ctx, second.ID, revoked) })
	f.do(func(tx service.Tx) error { return tx.RevokeToken(ctx, second.ID, at(900)) }) // keeps the first time
	second.RevokedAt, second.Version, want.RevokedAt = &revoked, 2, &revoked
	f.do(func(tx service.Tx) error {
		f.same(got[service.Token](f)(tx.Token(ctx, second.ID)), second)
		return nil
	})
	f.same(got[service.Credential](f)(f.s.TokenByPublicID(ctx, secret.PublicID)), want)

	insert := func(change func(*service.Token)) func(context.Context, service.Tx) error {
		n := service.Token{ID: newID(), PublicID: auth.NewToken().PublicID, Name: "third", Role: auth.Viewer, CreatedAt: at(20), Version: 1}
		change(&n)
		return func(ctx context.Context, tx service.Tx) error { return tx.InsertToken(ctx, n, secret.SHA256) }
	}
	nobody := newID()
	f.refused("unknown", service.NotFound, "no such token", func(ctx context.Context, tx service.Tx) error { _, err := tx.Token(ctx, newID()); return err })
	f.refused("revoke an unknown one", service.NotFound, "no such token", func(ctx context.Context, tx service.Tx) error { return tx.RevokeToken(ctx, newID(), at(1)) })
	f.refused("taken public id", service.Conflict, "a token of this public id", insert(func(n *service.Token) { n.PublicID = second.PublicID }))
	f.refused("no maker", service.NotFound, "no such token", insert(func(n *service.Token) { n.CreatedBy = &nobody }))
	f.refused("unknown role", service.Invalid, "outside of what can be stored", insert(func(n *service.Token) { n.Role = "root" }))
	if _, err := f.s.TokenByPublicID(ctx, "00000000000000000000"); kind(err) != service.NotFound {
		t.Errorf("unknown public id: %v, want NotFound", err)
	}
}

func TestSession(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	soon, late := at(100), at(200)
	dated := service.Token{ID: newID(), PublicID: auth.NewToken().PublicID, Name: "dated", Role: auth.Viewer, CreatedAt: at(10), ExpiresAt: &soon, Version: 1}
	sum := func(text string) []byte { s := sha256.Sum256([]byte(text)); return s[:] }
	sessions := []struct {
		secret  string
		token   service.Token
		ends    time.Time
		expires time.Time
	}{
		{"of a token without end", f.token, late, late},
		{"of a token that ends before it", dated, late, soon},
		{"of a token that ends after it", dated, at(50), at(50)},
	}
	ids := make([]uuid.UUID, len(sessions))
	f.do(func(tx service.Tx) error {
		if err := tx.InsertToken(ctx, dated, sum("x")); err != nil {
			return err
		}
		for i, s := range sessions {
			ids[i] = newID()
			if err := tx.InsertSession(ctx, ids[i], s.token.ID, sum(s.secret), at(20), s.ends); err != nil {
				return err
			}
		}
		return nil
	})
	for i, s := range sessions {
		f.same(got[service.Credential](f)(f.s.SessionBySecret(ctx, sum(s.secret))), service.Credential{Organisation: f.organisation, Token: s.token.ID,
			Session: ids[i], SecretSHA256: sum(s.secret), Role: s.token.Role, Name: s.token.Name, ExpiresAt: &s.expires})
	}
	for range 2 { // the second finds it gone, which is no error
		f.do(func(tx service.Tx) error { return tx.DeleteSession(ctx, ids[1]) })
	}
	f.do(func(tx service.Tx) error { return tx.RevokeToken(ctx, f.token.ID, at(30)) })
	for i, gone := range []bool{true, true, false} {
		if _, err := f.s.SessionBySecret(ctx, sum(sessions[i].secret)); (kind(err) == service.NotFound) != gone {
			t.Errorf("session %s: %v, want gone %v", sessions[i].secret, err, gone)
		}
	}
	f.refused("no token", service.NotFound, "no such token", func(ctx context.Context, tx service.Tx) error {
		return tx.InsertSession(ctx, newID(), newID(), sum("y"), at(1), at(2))
	})
	if _, err := f.s.SessionBySecret(ctx, nil); kind(err) != service.NotFound {
		t.Errorf("no secret: %v, want NotFound", err)
	}
}

// The whole way of a command-line token through the service.
func TestServiceAcceptsATokenOfTheCommandLine(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	a := mustOpenAdmin(t, f.db.AdminURL)
	organisation, err := a.EnsureOrganisation(t.Context(), "Brackwater salt works (invented)")
	if err != nil {
		t.Fatal(err)
	}
	text, err := a.CreateToken(t.Context(), organisation, auth.Manager, "gate", nil)
	if err != nil {
		t.Fatal(err)
	}
	s := service.New(service.Config{Store: f.s, Limits: service.DefaultLimits(), Now: time.Now, NewID: uuid.NewV7})
	actor, err := s.Authenticate(t.Context(), text, "r1")
	if err != nil {
		t.Fatal(err)
	}
	if actor.Organisation != organisation || actor.Role != auth.Manager || actor.Name != "gate" {
		t.Errorf("actor %+v", actor)
	}
}
