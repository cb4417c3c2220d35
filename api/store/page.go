package store

import (
	"context"
	"encoding/base64"
	"encoding/binary"
	"fmt"
	"strconv"
	"time"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"spanwright/api/service"
)

const (
	defaultPage = 50
	largestPage = 200
)

// position is a place in a list that runs from the newest to the oldest.
type position struct {
	at time.Time
	id uuid.UUID
}

// cursor is the position as opaque text: base64url over the time in microseconds
// since 1970 (8 bytes, big-endian) and the id. Names and figures are not in it.
func (p position) cursor() string {
	b := binary.BigEndian.AppendUint64(nil, uint64(p.at.UnixMicro()))
	return base64.RawURLEncoding.EncodeToString(append(b, p.id[:]...))
}

// Times that a timestamptz surely holds; a forged cursor may name any.
var (
	earliest = time.Date(1970, 1, 1, 0, 0, 0, 0, time.UTC).UnixMicro()
	latest   = time.Date(9999, 12, 31, 0, 0, 0, 0, time.UTC).UnixMicro()
)

func parseCursor(text string) (position, error) {
	var p position
	b, err := base64.RawURLEncoding.DecodeString(text)
	if err != nil || len(b) != 8+len(p.id) {
		return p, badCursor(text)
	}
	micros := int64(binary.BigEndian.Uint64(b))
	if !(earliest <= micros && micros <= latest) {
		return p, badCursor(text)
	}
	p.at = time.UnixMicro(micros).UTC()
	copy(p.id[:], b[8:])
	if p.cursor() != text { // the decoder passes over line ends and odd last bits
		return p, badCursor(text)
	}
	return p, nil
}

func badCursor(text string) error {
	return &service.Error{Kind: service.Invalid, Message: "cursor: not one that a list has answered", Faults: []service.Fault{{
		Pointer: "/cursor", Found: fmt.Sprintf("%.60q", text), Problem: "not a cursor", Remedy: "“next” of the page before, unchanged, or none for the first page"}}}
}

func limit(p service.Page) (int, error) {
	if p.Limit == 0 {
		return defaultPage, nil
	}
	if !(1 <= p.Limit && p.Limit <= largestPage) {
		return 0, &service.Error{Kind: service.Invalid, Message: "limit: out of range", Faults: []service.Fault{{
			Pointer: "/limit", Found: strconv.Itoa(p.Limit), Problem: "out of range", Remedy: fmt.Sprintf("1 to %d", largestPage)}}}
	}
	return p.Limit, nil
}

// listing is how a list is read: sql has a where clause, order names its columns
// of time and id, at tells the position of a row.
type listing[T any] struct {
	noun  string
	sql   string
	order [2]string
	scan  pgx.RowToFunc[T]
	at    func(T) position
}

// read returns one page, newest first; args belong to sql. One row more than asked
// is read, which tells whether there is a next page.
func (l listing[T]) read(ctx context.Context, t tenant, p service.Page, args ...any) (service.List[T], error) {
	n, err := limit(p)
	if err != nil {
		return service.List[T]{}, err
	}
	sql := l.sql
	if p.Cursor != "" {
		after, err := parseCursor(p.Cursor)
		if err != nil {
			return service.List[T]{}, err
		}
		args = append(args, after.at, after.id)
		sql += fmt.Sprintf(" and (%s, %s) < ($%d, $%d)", l.order[0], l.order[1], len(args)-1, len(args))
	}
	sql += fmt.Sprintf(" order by %s desc, %s desc limit %d", l.order[0], l.order[1], n+1)
	rows, err := t.db.Query(ctx, sql, args...)
	if err != nil {
		return service.List[T]{}, failure(err, l.noun)
	}
	items, err := pgx.CollectRows(rows, l.scan)
	if err != nil {
		return service.List[T]{}, failure(err, l.noun)
	}
	if len(items) <= n {
		return service.List[T]{Items: items}, nil
	}
	items = items[:n]
	return service.List[T]{Items: items, Next: l.at(items[n-1]).cursor()}, nil
}
