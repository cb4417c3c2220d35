package service

import (
	"context"
	"errors"

	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/estimate/ratebook"
)

// StartingBook is the name of the rate book that is used where none is named.
const StartingBook = "ratio"

// StartingBooks are the rate books that every organisation begins with.
func StartingBooks() []ratebook.Book { return []ratebook.Book{ratebook.Ratio(), ratebook.UnitRate()} }

// CreateRateBook stores a rate book as version 1: Invalid, Conflict.
func (s *Service) CreateRateBook(ctx context.Context, a Actor, book ratebook.Book, key Idempotency) (RateBook, error) {
	if err := s.allow(a, auth.WriteRates); err != nil {
		return RateBook{}, err
	}
	content, sum, err := checkedBook(book)
	if err != nil {
		return RateBook{}, err
	}
	id, err := s.newID()
	if err != nil {
		return RateBook{}, err
	}
	now := s.now()
	b := RateBook{ID: id, Name: book.Name, Version: 1, Number: 1, SHA256: sum, Content: book, CreatedAt: now, UpdatedAt: now}
	return once(ctx, s, a, "create rate book", key, id,
		func(tx Tx, id uuid.UUID) (RateBook, error) { return tx.RateBook(ctx, id) },
		func(tx Tx) (RateBook, error) {
			if err := tx.InsertRateBook(ctx, b, content, a.Token); err != nil {
				return b, err
			}
			return b, s.audit(ctx, tx, a, "create", "rate book", id, nil, b)
		})
}

func checkedBook(b ratebook.Book) ([]byte, string, error) {
	if err := b.Validate(); err != nil {
		return nil, "", fromRates(err, "")
	}
	if err := checkName("/name", b.Name, nameLength); err != nil {
		return nil, "", err
	}
	return b.Canonical()
}

// fromRates turns faults of rates into those of a request whose body holds them
// at a JSON pointer.
func fromRates(err error, at string) error {
	var bad *ratebook.InvalidError
	if !errors.As(err, &bad) {
		return err
	}
	out := &Error{Kind: Invalid, Message: "the rates have faults; nothing was stored"}
	for _, f := range bad.Faults {
		out.Faults = append(out.Faults, Fault{Pointer: at + f.Field, Found: f.Found, Problem: "not accepted", Remedy: f.Accepted})
	}
	return out
}

// RateBook reads the newest version of a rate book: NotFound.
func (s *Service) RateBook(ctx context.Context, a Actor, id uuid.UUID) (RateBook, error) {
	return read(ctx, s, a, auth.ReadRates, func(tx Tx) (RateBook, error) { return tx.RateBook(ctx, id) })
}

// RateBookVersion reads an older version: NotFound.
func (s *Service) RateBookVersion(ctx context.Context, a Actor, id uuid.UUID, number int) (RateBook, error) {
	return read(ctx, s, a, auth.ReadRates, func(tx Tx) (RateBook, error) { return tx.RateBookVersion(ctx, id, number) })
}

// RateBooks lists rate books.
func (s *Service) RateBooks(ctx context.Context, a Actor, p Page) (List[RateBook], error) {
	return list(ctx, s, a, auth.ReadRates, func(tx Tx) (List[RateBook], error) { return tx.RateBooks(ctx, p) })
}

// UpdateRateBook stores new content as the next version; estimates made with
// older ones keep them: NotFound, Stale, Invalid.
func (s *Service) UpdateRateBook(ctx context.Context, a Actor, id uuid.UUID, version int64, book ratebook.Book) (RateBook, error) {
	if err := s.allow(a, auth.WriteRates); err != nil {
		return RateBook{}, err
	}
	content, sum, err := checkedBook(book)
	if err != nil {
		return RateBook{}, err
	}
	return update(ctx, s, a, "rate book", id, version, Tx.RateBook, func(tx Tx, before RateBook) (RateBook, error) {
		if book.Name != before.Name {
			return before, invalid("/name", book.Name, "a rate book keeps its name, because estimates ask for it", before.Name+", or a new rate book")
		}
		after := RateBook{ID: id, Name: book.Name, Version: before.Version + 1, Number: before.Number + 1, SHA256: sum, Content: book,
			CreatedAt: before.CreatedAt, UpdatedAt: s.now()}
		return after, tx.UpdateRateBook(ctx, after, content, a.Token)
	})
}
