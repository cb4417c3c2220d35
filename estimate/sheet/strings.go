package sheet

import (
	"bytes"
	"encoding/binary"
	"errors"
	"strconv"
	"unicode/utf8"
)

// Shared texts lie one after the other, each behind its length, in chunks: the
// table costs their bytes and five more each, and never moves while it grows.
const (
	chunkBits  = 20
	chunkSize  = 1 << chunkBits
	firstChunk = 64 << 10 // most tables are small
)

type stringTable struct {
	chunks [][]byte
	places []uint32 // chunk number and offset
}

func (t *stringTable) add(text []byte) {
	need := binary.MaxVarintLen32 + len(text)
	last := len(t.chunks) - 1
	if last < 0 || cap(t.chunks[last])-len(t.chunks[last]) < need {
		size := chunkSize
		if last < 0 {
			size = max(firstChunk, need)
		}
		t.chunks = append(t.chunks, make([]byte, 0, size))
		last++
	}
	t.places = append(t.places, uint32(last<<chunkBits|len(t.chunks[last])))
	chunk := binary.AppendUvarint(t.chunks[last], uint64(len(text)))
	t.chunks[last] = append(chunk, text...)
}

// get is the text of that number, valid as long as the table.
func (t *stringTable) get(i int) ([]byte, bool) {
	if i < 0 || i >= len(t.places) {
		return nil, false
	}
	chunk := t.chunks[t.places[i]>>chunkBits][t.places[i]&(chunkSize-1):]
	length, n := binary.Uvarint(chunk)
	return chunk[n : n+int(length)], true
}

func (b *xlsxBook) readStrings(part string) error {
	s, c, err := b.parts.scan(part)
	if err != nil {
		return err
	}
	defer c.Close()
	if err := s.root("sst"); err != nil {
		return inPart(part, err)
	}
	var text []byte
	return inPart(part, s.all(func() error {
		if string(s.name) != "si" {
			return s.skip()
		}
		var err error
		if text, err = richText(s, text[:0]); err != nil {
			return err
		}
		if err := checkLength(text, b.limits.TextLength); err != nil {
			return err
		}
		if len(b.strings.places) == b.limits.SharedStrings {
			return tooMany("shared texts", b.limits.SharedStrings)
		}
		if len(text) > chunkSize/2 {
			return errors.New("a text in the XML is too long")
		}
		b.strings.add(text)
		return nil
	}))
}

// richText appends the text of the current element: its t, or the t of its runs
// (ISO/IEC 29500-1, 18.4.8). Phonetic readings are left out.
func richText(s *xmlScanner, dst []byte) ([]byte, error) {
	err := s.each(func() error {
		var err error
		switch string(s.name) {
		case "t":
			from := len(dst)
			dst, err = s.content(dst)
			dst = unescape(dst, from)
		case "r":
			dst, err = richText(s, dst)
		default:
			err = s.skip()
		}
		if err == nil && len(dst) > longestText {
			err = errors.New("a text in the XML is too long")
		}
		return err
	})
	return dst, err
}

// unescape resolves _xHHHH_ in dst[from:], the format's way to write characters
// that XML cannot hold (ISO/IEC 29500-1, 22.9.2.19).
func unescape(dst []byte, from int) []byte {
	if !bytes.Contains(dst[from:], []byte("_x")) {
		return dst
	}
	rest := bytes.Clone(dst[from:])
	dst = dst[:from]
	for len(rest) > 0 {
		if len(rest) >= 7 && rest[0] == '_' && rest[1] == 'x' && rest[6] == '_' {
			if n, err := strconv.ParseUint(string(rest[2:6]), 16, 16); err == nil && utf8.ValidRune(rune(n)) {
				dst, rest = utf8.AppendRune(dst, rune(n)), rest[7:]
				continue
			}
		}
		dst, rest = append(dst, rest[0]), rest[1:]
	}
	return dst
}
