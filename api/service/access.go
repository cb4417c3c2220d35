package service

import (
	"context"
	"errors"
	"time"

	"github.com/google/uuid"

	"spanwright/api/auth"
)

// SessionLife is how long a sign-in of the pages lasts.
const SessionLife = 12 * time.Hour

var errUnknownToken = &Error{Kind: Unauthenticated, Message: "no valid token: send one as “Authorization: Bearer swt_…”"}

// Authenticate finds the actor of a bearer token. Unauthenticated when it is
// malformed, unknown, expired or revoked; which of them is not said.
func (s *Service) Authenticate(ctx context.Context, token, requestID string) (Actor, error) {
	id, sum, err := auth.ParseToken(token)
	if err != nil {
		return Actor{}, errUnknownToken
	}
	c, err := s.store.TokenByPublicID(ctx, id)
	return s.actor(c, sum, err, requestID)
}

// Session finds the actor of a session cookie: Unauthenticated.
func (s *Service) Session(ctx context.Context, secret, requestID string) (Actor, error) {
	sum, err := auth.ParseSession(secret)
	if err != nil {
		return Actor{}, errUnknownToken
	}
	c, err := s.store.SessionBySecret(ctx, sum)
	return s.actor(c, sum, err, requestID)
}

func (s *Service) actor(c Credential, sum []byte, err error, requestID string) (Actor, error) {
	if isKind(err, NotFound) {
		return Actor{}, errUnknownToken
	}
	if err != nil {
		return Actor{}, err
	}
	now := s.now()
	if !auth.Matches(c.SecretSHA256, sum) || c.RevokedAt != nil || (c.ExpiresAt != nil && !now.Before(*c.ExpiresAt)) {
		return Actor{}, errUnknownToken
	}
	return Actor{Organisation: c.Organisation, Token: c.Token, Name: c.Name, Role: c.Role, RequestID: requestID}, nil
}

// SignIn makes a server-side session for a token and returns its secret, to be
// set as a cookie, and when it ends.
func (s *Service) SignIn(ctx context.Context, token, requestID string) (string, time.Time, error) {
	a, err := s.Authenticate(ctx, token, requestID)
	if err != nil {
		return "", time.Time{}, err
	}
	if err := s.allow(a, auth.ManageOwnAccess); err != nil {
		return "", time.Time{}, err
	}
	id, err := s.newID()
	if err != nil {
		return "", time.Time{}, err
	}
	secret, now := auth.NewSession(), s.now()
	ends := now.Add(SessionLife)
	err = s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		if err := tx.InsertSession(ctx, id, a.Token, secret.SHA256, now, ends); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "sign in", "session", id, nil, nil)
	})
	return secret.Text, ends, err
}

// SignOut ends the session of a cookie; an unknown one is no error.
func (s *Service) SignOut(ctx context.Context, secret, requestID string) error {
	sum, err := auth.ParseSession(secret)
	if err != nil {
		return nil
	}
	c, err := s.store.SessionBySecret(ctx, sum)
	if isKind(err, NotFound) {
		return nil
	}
	if err != nil {
		return err
	}
	a := Actor{Organisation: c.Organisation, Token: c.Token, Name: c.Name, Role: c.Role, RequestID: requestID}
	return s.store.InTenant(ctx, c.Organisation, func(tx Tx) error {
		if err := tx.DeleteSession(ctx, c.Session); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "sign out", "session", c.Session, nil, nil)
	})
}

// CreateToken makes a token; its text is in the answer and nowhere else.
func (s *Service) CreateToken(ctx context.Context, a Actor, n NewToken) (Token, string, error) {
	if err := s.allow(a, auth.ManageTokens); err != nil {
		return Token{}, "", err
	}
	role, err := auth.ParseRole(string(n.Role))
	if err != nil {
		return Token{}, "", invalid("/role", string(n.Role), "unknown role", "viewer, estimator, manager or administrator")
	}
	if err := checkName("/name", n.Name, 100); err != nil {
		return Token{}, "", err
	}
	now := s.now()
	if n.ExpiresAt != nil && !n.ExpiresAt.After(now) {
		return Token{}, "", invalid("/expires_at", n.ExpiresAt.Format(time.RFC3339), "already past", "a time after now, or none")
	}
	id, err := s.newID()
	if err != nil {
		return Token{}, "", err
	}
	secret := auth.NewToken()
	t := Token{ID: id, PublicID: secret.PublicID, Name: n.Name, Role: role, CreatedAt: now, CreatedBy: &a.Token, ExpiresAt: n.ExpiresAt, Version: 1}
	err = s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		if err := tx.InsertToken(ctx, t, secret.SHA256); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "create", "token", id, nil, t)
	})
	return t, secret.Text, err
}

// RevokeToken ends a token at once, with its sessions.
func (s *Service) RevokeToken(ctx context.Context, a Actor, id uuid.UUID) (Token, error) {
	if err := s.allow(a, auth.ManageTokens); err != nil {
		return Token{}, err
	}
	var after Token
	err := s.store.InTenant(ctx, a.Organisation, func(tx Tx) error {
		before, err := tx.Token(ctx, id)
		if err != nil || before.RevokedAt != nil {
			after = before
			return err
		}
		if err := tx.RevokeToken(ctx, id, s.now()); err != nil {
			return err
		}
		if after, err = tx.Token(ctx, id); err != nil {
			return err
		}
		return s.audit(ctx, tx, a, "revoke", "token", id, before, after)
	})
	return after, err
}

// Tokens lists the organisation's tokens, without secrets.
func (s *Service) Tokens(ctx context.Context, a Actor, p Page) (List[Token], error) {
	return list(ctx, s, a, auth.ManageTokens, func(tx Tx) (List[Token], error) { return tx.Tokens(ctx, p) })
}

// Audit lists the organisation's audit events, newest first.
func (s *Service) Audit(ctx context.Context, a Actor, p Page) (List[AuditEvent], error) {
	return list(ctx, s, a, auth.ReadAudit, func(tx Tx) (List[AuditEvent], error) { return tx.Audit(ctx, p) })
}

// Ready reports why the service cannot serve, if so.
func (s *Service) Ready(ctx context.Context) error { return s.store.Ready(ctx) }

func isKind(err error, k Kind) bool {
	var e *Error
	return errors.As(err, &e) && e.Kind == k
}
