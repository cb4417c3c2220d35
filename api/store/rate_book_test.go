package store_test

import (
	"context"
	"testing"

	"github.com/google/uuid"

	"spanwright/api/service"
)

func TestRateBook(t *testing.T) {
	t.Parallel()
	f := newFixture(t)
	ctx := t.Context()
	starting := newBook(t, "starting")
	starting.CreatedAt, starting.UpdatedAt = at(20), at(20)
	f.do(func(tx service.Tx) error {
		return tx.InsertRateBook(ctx, starting, canonical(t, starting.Content), uuid.Nil)
	})
	second := f.book
	second.Name, second.Version, second.Number, second.UpdatedAt = "renamed", 2, 2, at(30)
	second.Content.Name, second.Content.Note = "renamed", "Invented, and changed <&>"
	content := canonical(t, second.Content)
	second.SHA256 = hexSum(content)
	f.do(func(tx service.Tx) error {
		f.same(got[service.RateBook](f)(tx.RateBook(ctx, f.book.ID)), f.book)
		f.same(got[service.RateBook](f)(tx.RateBookByName(ctx, "starting")), starting)
		return tx.UpdateRateBook(ctx, second, content, f.token.ID)
	})
	first := f.book // the content of before, under the book's name and version of now
	first.Name, first.Version = second.Name, second.Version
	f.do(func(tx service.Tx) error {
		f.same(got[service.RateBook](f)(tx.RateBook(ctx, f.book.ID)), second)
		f.same(got[service.RateBook](f)(tx.RateBookByName(ctx, "renamed")), second)
		f.same(got[service.RateBook](f)(tx.RateBookVersion(ctx, f.book.ID, 1)), first)
		f.same(got[service.RateBook](f)(tx.RateBookVersion(ctx, f.book.ID, 2)), second)
		f.same(got[service.List[service.RateBook]](f)(tx.RateBooks(ctx, service.Page{})), service.List[service.RateBook]{Items: []service.RateBook{starting, second}})
		return nil
	})
	twin, unknown, renamed, leap := newBook(t, "starting"), second, second, second
	unknown.ID = newID()
	renamed.Name, renamed.Version, renamed.Number = "starting", 3, 3
	leap.Version, leap.Number = 9, 9
	update := func(b service.RateBook) func(context.Context, service.Tx) error {
		return func(ctx context.Context, tx service.Tx) error { return tx.UpdateRateBook(ctx, b, content, f.token.ID) }
	}
	f.refused("unknown", service.NotFound, "no such rate book", func(ctx context.Context, tx service.Tx) error { _, err := tx.RateBook(ctx, newID()); return err })
	f.refused("old name", service.NotFound, "no such rate book", func(ctx context.Context, tx service.Tx) error { _, err := tx.RateBookByName(ctx, "ratio"); return err })
	f.refused("unknown version", service.NotFound, "no such rate book version", func(ctx context.Context, tx service.Tx) error {
		_, err := tx.RateBookVersion(ctx, f.book.ID, 3)
		return err
	})
	f.refused("taken name", service.Conflict, "a rate book of this name", func(ctx context.Context, tx service.Tx) error {
		return tx.InsertRateBook(ctx, twin, content, f.token.ID)
	})
	f.refused("update to a taken name", service.Conflict, "a rate book of this name", update(renamed))
	f.refused("update of an older version", service.Stale, "the rate book has changed", update(second))
	f.refused("update of a later version", service.Stale, "the rate book has changed", update(leap))
	f.refused("update of an unknown one", service.NotFound, "no such rate book", update(unknown))
	f.do(func(tx service.Tx) error { // nothing of the refused ones is left
		f.same(got[service.RateBook](f)(tx.RateBook(ctx, f.book.ID)), second)
		return nil
	})
}
