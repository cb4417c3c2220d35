package store

import (
	"bytes"
	"context"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const selectToken = "select id, public_id, name, role, created_at, created_by, expires_at, revoked_at, version from token where true"

func scanToken(row pgx.CollectableRow) (service.Token, error) {
	var t service.Token
	err := row.Scan(&t.ID, &t.PublicID, &t.Name, &t.Role, &t.CreatedAt, &t.CreatedBy, &t.ExpiresAt, &t.RevokedAt, &t.Version)
	return t, err
}

// InsertToken stores a new token with the hash of its secret.
func (t tenant) InsertToken(ctx context.Context, n service.Token, secretSHA256 []byte) error {
	return t.write(ctx, "token", `
insert into token (organisation_id, id, public_id, secret_sha256, role, name, created_at, created_by, expires_at, revoked_at, version)
values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11)`,
		t.organisation, n.ID, n.PublicID, secretSHA256, string(n.Role), n.Name, n.CreatedAt, n.CreatedBy, n.ExpiresAt, n.RevokedAt, n.Version)
}

// Token reads one token, without its secret: NotFound.
func (t tenant) Token(ctx context.Context, id uuid.UUID) (service.Token, error) {
	return one(ctx, t, "token", scanToken, selectToken+" and id = $1", id)
}

// Tokens lists tokens, newest first: Invalid for a bad page.
func (t tenant) Tokens(ctx context.Context, p service.Page) (service.List[service.Token], error) {
	return listing[service.Token]{noun: "token", sql: selectToken, order: [2]string{"created_at", "id"}, scan: scanToken,
		at: func(n service.Token) position { return position{n.CreatedAt, n.ID} }}.read(ctx, t, p)
}

// RevokeToken ends a token and deletes its sessions: NotFound. One that is revoked
// already keeps its time.
func (t tenant) RevokeToken(ctx context.Context, id uuid.UUID, at time.Time) error {
	if err := t.write(ctx, "session", "delete from session where token_id = $1", id); err != nil {
		return err
	}
	_, err := one(ctx, t, "token", pgx.RowTo[uuid.UUID], `
update token set revoked_at = coalesce(revoked_at, $2), version = version + case when revoked_at is null then 1 else 0 end
where id = $1 returning id`, id, at)
	return err
}

// InsertSession stores a session of a token with the hash of its secret: NotFound
// for the token.
func (t tenant) InsertSession(ctx context.Context, id, token uuid.UUID, secretSHA256 []byte, created, expires time.Time) error {
	if err := t.write(ctx, "session", "delete from session where expires_at < $1", created); err != nil {
		return err
	}
	return t.write(ctx, "session", `
insert into session (organisation_id, id, token_id, secret_sha256, created_at, expires_at) values ($1, $2, $3, $4, $5, $6)`,
		t.organisation, id, token, secretSHA256, created, expires)
}

// DeleteSession ends a session; one that has ended already is no error.
func (t tenant) DeleteSession(ctx context.Context, id uuid.UUID) error {
	return t.write(ctx, "session", "delete from session where id = $1", id)
}

// TokenByPublicID finds a token of any organisation: NotFound. Whether its secret
// is right, and whether it has expired or was revoked, is for the caller.
func (s *Store) TokenByPublicID(ctx context.Context, publicID string) (service.Credential, error) {
	return credential(ctx, s, "token", func(row pgx.CollectableRow) (service.Credential, error) {
		var c service.Credential
		err := row.Scan(&c.Organisation, &c.Token, &c.SecretSHA256, &c.Role, &c.Name, &c.ExpiresAt, &c.RevokedAt)
		return c, err
	}, "select organisation_id, token_id, secret_sha256, role, name, expires_at, revoked_at from token_by_public_id($1)", publicID)
}

// SessionBySecret finds a session of any organisation by the hash of its secret:
// NotFound. It expires with its token, if that is earlier, and is revoked with it.
func (s *Store) SessionBySecret(ctx context.Context, sha256 []byte) (service.Credential, error) {
	return credential(ctx, s, "session", func(row pgx.CollectableRow) (service.Credential, error) {
		c := service.Credential{SecretSHA256: bytes.Clone(sha256)} // the row was found by equality with it
		err := row.Scan(&c.Organisation, &c.Session, &c.Token, &c.Role, &c.Name, &c.ExpiresAt, &c.RevokedAt)
		return c, err
	}, `
select organisation_id, session_id, token_id, role, name, least(session_expires_at, token_expires_at), revoked_at
from session_by_hash($1)`, sha256)
}

func credential(ctx context.Context, s *Store, noun string, scan pgx.RowToFunc[service.Credential], sql string, key any) (service.Credential, error) {
	rows, err := s.pool.Query(ctx, sql, key)
	if err != nil {
		return service.Credential{}, failure(err, noun)
	}
	c, err := pgx.CollectExactlyOneRow(rows, scan)
	if err != nil {
		return service.Credential{}, failure(err, noun)
	}
	return c, nil
}
