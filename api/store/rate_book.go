package store

import (
	"context"
	"encoding/hex"
	"fmt"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
	"spanwright/estimate/ratebook"
)

// A version is made when its book is updated, so that its time is the book's
// updated_at as of that version.
const (
	selectBookVersion = `
select b.id, b.name, b.version, v.number, v.sha256, v.content, b.created_at, v.created_at
from rate_book b join rate_book_version v on v.organisation_id = b.organisation_id and v.rate_book_id = b.id where `
	selectBook = selectBookVersion + "v.number = b.current_number"
)

func scanRateBook(row pgx.CollectableRow) (service.RateBook, error) {
	var b service.RateBook
	var content []byte
	err := row.Scan(&b.ID, &b.Name, &b.Version, &b.Number, (*digest)(&b.SHA256), &content, &b.CreatedAt, &b.UpdatedAt)
	if err != nil {
		return b, err
	}
	b.Content, err = ratebook.Parse(content)
	return b, err
}

// InsertRateBook stores a new rate book with the canonical bytes of its first
// content: Conflict when its name is taken. Without an author, by is uuid.Nil.
func (t tenant) InsertRateBook(ctx context.Context, b service.RateBook, content []byte, by uuid.UUID) error {
	err := t.write(ctx, "rate book", `
insert into rate_book (organisation_id, id, name, version, current_number, created_at, updated_at) values ($1, $2, $3, $4, $5, $6, $7)`,
		t.organisation, b.ID, b.Name, b.Version, b.Number, b.CreatedAt, b.UpdatedAt)
	if err != nil {
		return err
	}
	return t.insertBookVersion(ctx, b, content, by)
}

func (t tenant) insertBookVersion(ctx context.Context, b service.RateBook, content []byte, by uuid.UUID) error {
	sum, err := hex.DecodeString(b.SHA256)
	if err != nil {
		return fmt.Errorf("store: rate book: SHA-256: %w", err)
	}
	return t.write(ctx, "rate book version", `
insert into rate_book_version (organisation_id, rate_book_id, number, content, sha256, created_at, created_by) values ($1, $2, $3, $4, $5, $6, $7)`,
		t.organisation, b.ID, b.Number, content, sum, b.UpdatedAt, orNull(by))
}

// orNull is null for the nil id.
func orNull(id uuid.UUID) *uuid.UUID {
	if id == uuid.Nil {
		return nil
	}
	return &id
}

// RateBook reads a rate book with its newest content: NotFound.
func (t tenant) RateBook(ctx context.Context, id uuid.UUID) (service.RateBook, error) {
	return one(ctx, t, "rate book", scanRateBook, selectBook+" and b.id = $1", id)
}

// RateBookByName reads the rate book of exactly this name: NotFound.
func (t tenant) RateBookByName(ctx context.Context, name string) (service.RateBook, error) {
	return one(ctx, t, "rate book", scanRateBook, selectBook+" and b.name = $1", name)
}

// RateBookVersion reads a rate book with the content of a number: NotFound.
func (t tenant) RateBookVersion(ctx context.Context, id uuid.UUID, number int) (service.RateBook, error) {
	return one(ctx, t, "rate book version", scanRateBook, selectBookVersion+"b.id = $1 and v.number = $2", id, number)
}

// RateBooks lists rate books, newest first, each with its newest content: Invalid
// for a bad page.
func (t tenant) RateBooks(ctx context.Context, p service.Page) (service.List[service.RateBook], error) {
	return listing[service.RateBook]{noun: "rate book", sql: selectBook, order: [2]string{"b.created_at", "b.id"}, scan: scanRateBook,
		at: func(b service.RateBook) position { return position{b.CreatedAt, b.ID} }}.read(ctx, t, p)
}

// UpdateRateBook stores content as the version b.Number where the book's version is
// the one before b.Version: NotFound, Stale, Conflict when its name is taken.
func (t tenant) UpdateRateBook(ctx context.Context, b service.RateBook, content []byte, by uuid.UUID) error {
	err := t.replace(ctx, "rate book", "select id from rate_book where id = $1", b.ID, `
update rate_book set name = $3, current_number = $4, version = $2, updated_at = $5 where id = $1 and version = $2::bigint - 1`,
		b.ID, b.Version, b.Name, b.Number, b.UpdatedAt)
	if err != nil {
		return err
	}
	return t.insertBookVersion(ctx, b, content, by)
}
