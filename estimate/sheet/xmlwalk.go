package sheet

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"strconv"
	"unicode/utf8"
)

// each calls fn at every child element of the current element; fn must consume
// the child by each, content or skip.
func (s *xmlScanner) each(fn func() error) error {
	for {
		event, err := s.next()
		if err != nil {
			return early(err)
		}
		switch event {
		case xmlEnd:
			return nil
		case xmlStart:
			if err := fn(); err != nil {
				return err
			}
		}
	}
}

// all is each for the root element, and then expects the end of the file; only
// there does the archive's checksum count.
func (s *xmlScanner) all(fn func() error) error {
	if err := s.each(fn); err != nil {
		return err
	}
	switch _, err := s.next(); err {
	case io.EOF:
		return nil
	case nil:
		return errors.New("the XML goes on behind its root element")
	default:
		return err
	}
}

// content appends the text of the current element, without that of children.
func (s *xmlScanner) content(dst []byte) ([]byte, error) {
	for {
		event, err := s.next()
		if err != nil {
			return dst, early(err)
		}
		switch event {
		case xmlEnd:
			return dst, nil
		case xmlText:
			if dst = append(dst, s.text...); len(dst) > longestText {
				return dst, errors.New("a text in the XML is too long")
			}
		case xmlStart:
			if err := s.skip(); err != nil {
				return dst, err
			}
		}
	}
}

// skip consumes the current element.
func (s *xmlScanner) skip() error {
	for depth := len(s.ends); ; {
		event, err := s.next()
		if err != nil {
			return early(err)
		}
		if event == xmlEnd && len(s.ends) < depth {
			return nil
		}
	}
}

// root moves to the root element, which must have that name.
func (s *xmlScanner) root(name string) error {
	event, err := s.next()
	if err != nil {
		return early(err)
	}
	if event != xmlStart || string(s.name) != name {
		return fmt.Errorf("the XML begins with <%s> instead of <%s>", shorten(s.name), name)
	}
	return nil
}

// attr is the raw value of an attribute by its local name, nil without it. It
// is overwritten by the next event.
func (s *xmlScanner) attr(name string) []byte { return attribute(s.tag, name) }

// attrText is attr with its entities resolved.
func (s *xmlScanner) attrText(name string) (string, error) {
	value, err := resolve(bytes.Clone(s.attr(name)))
	return string(value), err
}

func attribute(tag []byte, name string) []byte {
	for {
		equals := bytes.IndexByte(tag, '=')
		if equals < 0 {
			return nil
		}
		key := bytes.TrimRight(tag[:equals], " \t\r\n")
		if i := bytes.LastIndexAny(key, " \t\r\n:"); i >= 0 {
			key = key[i+1:]
		}
		value := bytes.TrimLeft(tag[equals+1:], " \t\r\n")
		if len(value) < 2 || value[0] != '"' && value[0] != '\'' {
			return nil
		}
		end := bytes.IndexByte(value[1:], value[0])
		if end < 0 {
			return nil
		}
		if string(key) == name {
			return value[1 : end+1]
		}
		tag = value[end+2:]
	}
}

func local(name []byte) []byte {
	return name[bytes.IndexByte(name, ':')+1:]
}

func early(err error) error {
	if err == io.EOF {
		return errXMLEnd
	}
	return err
}

func shorten(name []byte) []byte { return name[:min(len(name), 40)] }

var errNotUTF8 = errors.New("the XML holds bytes that are not UTF-8")

// resolve replaces entities and line ends in place.
func resolve(text []byte) ([]byte, error) {
	if !utf8.Valid(text) {
		return nil, errNotUTF8
	}
	if bytes.IndexByte(text, '\r') >= 0 {
		text = bytes.ReplaceAll(text, []byte("\r\n"), []byte("\n"))
	}
	amp := bytes.IndexByte(text, '&')
	if amp < 0 {
		return text, nil
	}
	out, rest := text[:amp], text[amp:]
	for len(rest) > 0 {
		if rest[0] != '&' {
			out, rest = append(out, rest[0]), rest[1:]
			continue
		}
		end := bytes.IndexByte(rest[:min(len(rest), 12)], ';')
		if end < 0 {
			return nil, errors.New("the XML has an & without its entity")
		}
		r, ok := entity(string(rest[1:end]))
		if !ok {
			return nil, fmt.Errorf("the XML has an unknown entity &%s;", rest[1:end])
		}
		out, rest = utf8.AppendRune(out, r), rest[end+1:] // never longer than its entity
	}
	return out, nil
}

func entity(name string) (rune, bool) {
	switch name {
	case "lt":
		return '<', true
	case "gt":
		return '>', true
	case "amp":
		return '&', true
	case "quot":
		return '"', true
	case "apos":
		return '\'', true
	}
	if len(name) < 2 || name[0] != '#' {
		return 0, false
	}
	digits, base := name[1:], 10
	if digits[0] == 'x' {
		digits, base = digits[1:], 16
	}
	n, err := strconv.ParseUint(digits, base, 21)
	r := rune(n)
	legal := r == '\t' || r == '\n' || r == '\r' || r >= ' ' && r != 0xFFFE && r != 0xFFFF
	return r, err == nil && legal && utf8.ValidRune(r)
}
