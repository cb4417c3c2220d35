package store

import (
	"context"
	"errors"
	"fmt"
	"strings"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgxpool"

	"spanwright/api/auth"
	"spanwright/api/service"
	"spanwright/estimate/ratebook"
)

// Admin does what the service may not: it makes organisations and their first
// tokens. It is safe for use by several goroutines.
type Admin struct {
	pool  *pgxpool.Pool
	now   func() time.Time
	newID func() (uuid.UUID, error)
}

// organisationLock is the key of the advisory lock around making an organisation:
// "spanwri2" as eight bytes.
const organisationLock = 0x7370616e77726932

// OpenAdmin connects as an administrator of the cluster or a member of
// spanwright_owner, to a schema that this program knows: [ErrDirty], [ErrNewer] or
// [ErrOlder] otherwise. No error holds the URL.
func OpenAdmin(ctx context.Context, adminURL string) (*Admin, error) {
	config, err := poolConfig(adminURL, Options{MaxConnections: 2})
	if err != nil {
		return nil, err
	}
	pool, err := pgxpool.NewWithConfig(ctx, config)
	if err != nil {
		return nil, fmt.Errorf("store: open: %w", err)
	}
	if err := checkSchema(ctx, pool); err != nil {
		pool.Close()
		return nil, err
	}
	return &Admin{pool: pool, now: time.Now, newID: uuid.NewV7}, nil
}

// Close closes the connections.
func (a *Admin) Close() { a.pool.Close() }

// asOwner runs fn in a transaction of the role spanwright_owner, whom row-level
// security does not bind: it may insert through tenant, but must not read.
func (a *Admin) asOwner(ctx context.Context, fn func(pgx.Tx) error) error {
	var own error
	err := pgx.BeginTxFunc(ctx, a.pool, pgx.TxOptions{BeginQuery: "begin; set local role spanwright_owner"}, func(db pgx.Tx) error {
		own = fn(db)
		return own
	})
	if own != nil {
		return own
	}
	return failure(err, "transaction")
}

// EnsureOrganisation returns the organisation of this name, which it makes with
// the starting rate book where it is missing: Invalid for a bad name. Of two that
// run at once the second finds what the first one made.
func (a *Admin) EnsureOrganisation(ctx context.Context, name string) (uuid.UUID, error) {
	if n := len([]rune(name)); strings.TrimSpace(name) == "" || n > 200 {
		return uuid.Nil, &service.Error{Kind: service.Invalid, Message: "the name of an organisation has 1 to 200 characters"}
	}
	var id uuid.UUID
	err := a.asOwner(ctx, func(db pgx.Tx) error {
		if _, err := db.Exec(ctx, "select pg_advisory_xact_lock($1)", int64(organisationLock)); err != nil {
			return failure(err, "organisation")
		}
		err := db.QueryRow(ctx, "select id from organisation where name = $1 order by created_at, id limit 1", name).Scan(&id)
		if !errors.Is(err, pgx.ErrNoRows) {
			return failure(err, "organisation")
		}
		id, err = a.insertOrganisation(ctx, db, name)
		return err
	})
	return id, err
}

func (a *Admin) insertOrganisation(ctx context.Context, db pgx.Tx, name string) (uuid.UUID, error) {
	id, err := a.newID()
	if err != nil {
		return id, fmt.Errorf("store: organisation: %w", err)
	}
	t, now := tenant{db: db, organisation: id}, a.now()
	if err := t.write(ctx, "organisation", "insert into organisation (id, name, created_at) values ($1, $2, $3)", id, name, now); err != nil {
		return id, err
	}
	if err := a.audit(ctx, t, "organisation", id, map[string]string{"name": name}); err != nil {
		return id, err
	}
	for _, b := range service.StartingBooks() {
		if err := a.insertBook(ctx, t, b, now); err != nil {
			return id, err
		}
	}
	return id, nil
}

// insertBook stores a starting book of a new organisation.
func (a *Admin) insertBook(ctx context.Context, t tenant, b ratebook.Book, now time.Time) error {
	content, sum, err := b.Canonical()
	if err != nil {
		return fmt.Errorf("store: rate book: %w", err)
	}
	id, err := a.newID()
	if err != nil {
		return fmt.Errorf("store: rate book: %w", err)
	}
	book := service.RateBook{ID: id, Name: b.Name, Version: 1, Number: 1, SHA256: sum, Content: b, CreatedAt: now, UpdatedAt: now}
	if err := t.InsertRateBook(ctx, book, content, uuid.Nil); err != nil {
		return err
	}
	return a.audit(ctx, t, "rate book", id, book)
}

// CreateToken makes a token for an organisation and returns its text, which is not
// stored: NotFound for the organisation, Invalid for a bad role or name.
func (a *Admin) CreateToken(ctx context.Context, organisation uuid.UUID, role auth.Role, name string, expires *time.Time) (string, error) {
	if _, err := auth.ParseRole(string(role)); err != nil {
		return "", &service.Error{Kind: service.Invalid, Message: err.Error()}
	}
	if n := len([]rune(name)); strings.TrimSpace(name) == "" || n > 100 {
		return "", &service.Error{Kind: service.Invalid, Message: "the name of a token has 1 to 100 characters"}
	}
	id, err := a.newID()
	if err != nil {
		return "", fmt.Errorf("store: token: %w", err)
	}
	secret := auth.NewToken()
	n := service.Token{ID: id, PublicID: secret.PublicID, Name: name, Role: role, CreatedAt: a.now(), ExpiresAt: expires, Version: 1}
	err = a.asOwner(ctx, func(db pgx.Tx) error {
		t := tenant{db: db, organisation: organisation}
		if err := t.InsertToken(ctx, n, secret.SHA256); err != nil {
			return err
		}
		return a.audit(ctx, t, "token", id, n)
	})
	if err != nil {
		return "", err
	}
	return secret.Text, nil
}

func (a *Admin) audit(ctx context.Context, t tenant, kind string, subject uuid.UUID, after any) error {
	id, err := a.newID()
	if err != nil {
		return fmt.Errorf("store: audit event: %w", err)
	}
	return t.InsertAudit(ctx, service.AuditEvent{ID: id, At: a.now(), ActorName: "command line", ActorRole: string(auth.Administrator),
		Action: "create", SubjectKind: kind, SubjectID: subject, After: after})
}
