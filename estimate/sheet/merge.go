package sheet

import (
	"bytes"
	"cmp"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
)

// maxMerges bounds the merged ranges of a sheet.
const maxMerges = 20_000

// merge is one merged range.
type merge struct {
	left, top, right, bottom int
	text                     string // "C7:D9"
}

// readMerges finds the merged ranges of a sheet, by first row. They stand
// behind the rows, so the part is looked through beforehand: first for the mere
// word, at the speed of unpacking, and only where it occurs as XML.
func (b *xlsxBook) readMerges(part string) ([]merge, error) {
	found, err := b.contains(part, "mergeCell")
	if err != nil || !found {
		return nil, err
	}
	s, c, err := b.parts.scan(part)
	if err != nil {
		return nil, err
	}
	defer c.Close()
	if err := s.root("worksheet"); err != nil {
		return nil, err
	}
	var merges []merge
	err = s.each(func() error {
		if string(s.name) != "mergeCells" {
			return s.skip()
		}
		return s.each(func() error {
			m, err := parseMerge(string(s.attr("ref")))
			if err != nil {
				return err
			}
			if len(merges) == maxMerges {
				return tooMany("merged ranges", maxMerges)
			}
			merges = append(merges, m)
			return s.skip()
		})
	})
	slices.SortFunc(merges, func(a, b merge) int { return cmp.Or(cmp.Compare(a.top, b.top), cmp.Compare(a.left, b.left)) })
	return merges, err
}

// contains looks for a word in a part's bytes.
func (b *xlsxBook) contains(part, word string) (bool, error) {
	rc, err := b.parts.open(part)
	if err != nil {
		return false, err
	}
	defer rc.Close()
	buf, kept := make([]byte, 64<<10), 0
	for {
		n, err := rc.Read(buf[kept:])
		if bytes.Contains(buf[:kept+n], []byte(word)) {
			return true, nil
		}
		if errors.Is(err, io.EOF) {
			return false, nil
		}
		if err != nil {
			return false, err
		}
		tail := min(kept+n, len(word)-1)
		copy(buf, buf[kept+n-tail:kept+n])
		kept = tail
	}
}

func parseMerge(ref string) (merge, error) {
	first, last, found := strings.Cut(ref, ":")
	if !found {
		last = first
	}
	m := merge{text: ref}
	var ok1, ok2 bool
	m.left, m.top, ok1 = parseReference(first)
	m.right, m.bottom, ok2 = parseReference(last)
	if !ok1 || !ok2 || m.left > m.right || m.top > m.bottom {
		return m, fmt.Errorf("%.40q is no range of merged cells", ref)
	}
	return m, nil
}

// mergeCursor follows the rows downwards.
type mergeCursor struct {
	rest   []merge // by first row, not yet reached
	active []merge // that reach into the current row, by first column
	out    []Cell
}

// apply marks the cells of a row, in order of columns, and adds covered ones up
// to the last column wanted. The answer is valid until the next row.
func (m *mergeCursor) apply(row int, cells []Cell, columns int) ([]Cell, error) {
	m.active = slices.DeleteFunc(m.active, func(r merge) bool { return r.bottom < row })
	for len(m.rest) > 0 && m.rest[0].top <= row {
		if m.rest[0].bottom >= row {
			if err := m.activate(m.rest[0]); err != nil {
				return nil, err
			}
		}
		m.rest = m.rest[1:]
	}
	if len(m.active) == 0 {
		return cells, nil
	}
	out := m.out[:0]
	for _, r := range m.active {
		for len(cells) > 0 && cells[0].Column < r.left {
			out, cells = append(out, cells[0]), cells[1:]
		}
		for column := r.left; column <= min(r.right, columns); column++ {
			c := Cell{Column: column, Kind: Merged}
			if len(cells) > 0 && cells[0].Column == column {
				if row == r.top && column == r.left {
					c = cells[0]
				}
				cells = cells[1:]
			}
			if c.Range = r.text; c.Kind != Merged || row != r.top || column != r.left {
				out = append(out, c)
			}
		}
		for len(cells) > 0 && cells[0].Column <= r.right { // beyond the last column wanted
			cells = cells[1:]
		}
	}
	m.out = append(out, cells...)
	return m.out, nil
}

// activate inserts by column; active ranges of one row cannot overlap, which
// keeps their number below that of the columns.
func (m *mergeCursor) activate(r merge) error {
	at, _ := slices.BinarySearchFunc(m.active, r, func(a, b merge) int { return cmp.Compare(a.left, b.left) })
	if at > 0 && m.active[at-1].right >= r.left || at < len(m.active) && m.active[at].left <= r.right {
		return fmt.Errorf("the merged ranges %s and another overlap", r.text)
	}
	m.active = slices.Insert(m.active, at, r)
	return nil
}
