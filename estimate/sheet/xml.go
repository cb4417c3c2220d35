package sheet

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"unicode/utf8"
)

// Bounds of one tag, one text and the nesting; no workbook comes near them.
const (
	longestTag  = 64 << 10
	longestText = 1 << 20
	deepest     = 64
)

type xmlEvent uint8

const (
	xmlEnd   xmlEvent = iota // of the element that name tells; or of the file
	xmlStart                 // name and attr tell which
	xmlText                  // text has it, with its entities resolved
)

// xmlScanner reads XML 1.0 in UTF-8 as a stream, without building anything and
// without allocating per token. Document types are refused, and with them all
// entities beyond the five of XML itself. Namespace prefixes are dropped.
type xmlScanner struct {
	r      *bufio.Reader
	tag    []byte // inside of the current tag
	name   []byte // local name, part of tag
	text   []byte // current text
	open   []byte // names of the open elements, one after the other
	ends   []int  // where each ends in open
	inTag  bool   // the "<" is already read
	closed bool   // the current start tag ended in "/>"
	began  bool
}

var (
	errXMLEnd     = errors.New("the XML ends early")
	errXMLOutside = errors.New("text stands outside the XML's root element")
)

func newXMLScanner(r io.Reader) *xmlScanner {
	return &xmlScanner{r: bufio.NewReaderSize(r, 32<<10)}
}

// next moves to the next event. At the end of the file it answers io.EOF.
func (s *xmlScanner) next() (xmlEvent, error) {
	if s.closed {
		s.closed = false
		s.pop()
		return xmlEnd, nil
	}
	if !s.began {
		s.began = true
		if mark, _ := s.r.Peek(3); bytes.Equal(mark, []byte("\xef\xbb\xbf")) {
			_, _ = s.r.Discard(3) // what Peek has shown is there
		}
	}
	for {
		if !s.inTag {
			s.text = s.text[:0]
			if err := s.readText(); err != nil {
				return xmlEnd, err
			}
			s.inTag = true
			if len(s.text) > 0 && len(s.ends) > 0 {
				return xmlText, nil
			}
		}
		s.inTag = false
		event, skipped, err := s.readTag()
		if err != nil || !skipped {
			return event, err
		}
	}
}

// readText reads up to the next "<" and resolves entities.
func (s *xmlScanner) readText() error {
	for {
		part, err := s.r.ReadSlice('<')
		s.text = append(s.text, part...)
		if err == nil {
			s.text = s.text[:len(s.text)-1]
			break
		}
		if err == io.EOF && len(s.ends) > 0 {
			return errXMLEnd
		}
		if err == io.EOF && len(bytes.TrimSpace(s.text)) > 0 {
			return errXMLOutside
		}
		if err != bufio.ErrBufferFull {
			return err
		}
		if len(s.text) > longestText {
			return errors.New("a text in the XML is too long")
		}
	}
	if len(s.ends) == 0 && len(bytes.TrimSpace(s.text)) > 0 {
		return errXMLOutside
	}
	var err error
	s.text, err = resolve(s.text)
	return err
}

// readTag reads from behind "<". skipped means there is nothing to tell.
func (s *xmlScanner) readTag() (xmlEvent, bool, error) {
	first, err := s.r.Peek(1)
	if err != nil {
		return xmlEnd, false, errXMLEnd
	}
	switch first[0] {
	case '?':
		return xmlEnd, true, s.readInstruction()
	case '!':
		return s.readDeclaration()
	}
	if err := s.readUntil('>'); err != nil {
		return xmlEnd, false, err
	}
	if s.tag[0] == '/' {
		s.name = local(bytes.TrimSpace(s.tag[1:]))
		if len(s.ends) == 0 || !bytes.Equal(s.name, s.top()) {
			return xmlEnd, false, fmt.Errorf("the XML closes <%s>, which is not open", shorten(s.name))
		}
		s.pop()
		return xmlEnd, false, nil
	}
	return xmlStart, false, s.push()
}

// push takes the start tag in s.tag.
func (s *xmlScanner) push() error {
	if s.tag[len(s.tag)-1] == '/' {
		s.closed = true
		s.tag = s.tag[:len(s.tag)-1]
	}
	name := s.tag
	if i := bytes.IndexAny(s.tag, " \t\r\n"); i >= 0 {
		name = s.tag[:i]
	}
	if s.name = local(name); len(s.name) == 0 {
		return errors.New("the XML has a tag without a name")
	}
	if len(s.ends) == deepest {
		return errors.New("the XML is nested too deeply")
	}
	s.open = append(s.open, s.name...)
	s.ends = append(s.ends, len(s.open))
	return nil
}

func (s *xmlScanner) top() []byte {
	from := 0
	if len(s.ends) > 1 {
		from = s.ends[len(s.ends)-2]
	}
	return s.open[from:s.ends[len(s.ends)-1]]
}

func (s *xmlScanner) pop() {
	s.open = s.open[:len(s.open)-len(s.top())]
	s.ends = s.ends[:len(s.ends)-1]
}

// readUntil fills s.tag up to a ">" outside quotes, without it.
func (s *xmlScanner) readUntil(stop byte) error {
	s.tag = s.tag[:0]
	for quote := byte(0); ; {
		from := len(s.tag)
		part, err := s.r.ReadSlice(stop)
		s.tag = append(s.tag, part...)
		if len(s.tag) > longestTag {
			return errors.New("a tag in the XML is too long")
		}
		for _, c := range s.tag[from:] {
			switch {
			case quote == 0 && (c == '"' || c == '\''):
				quote = c
			case c == quote:
				quote = 0
			}
		}
		if err == bufio.ErrBufferFull || err == nil && quote != 0 {
			continue
		}
		if err == io.EOF {
			return errXMLEnd
		}
		if err != nil {
			return err
		}
		if s.tag = s.tag[:len(s.tag)-1]; len(s.tag) == 0 {
			return errors.New("the XML has a tag without a name")
		}
		return nil
	}
}

// readInstruction skips "?…?>", but refuses an encoding that is not UTF-8.
func (s *xmlScanner) readInstruction() error {
	if err := s.skipPast("?>"); err != nil {
		return err
	}
	if !bytes.HasPrefix(s.tag, []byte("?xml ")) {
		return nil
	}
	encoding := bytes.ToLower(attribute(s.tag, "encoding"))
	if len(encoding) > 0 && string(encoding) != "utf-8" && string(encoding) != "us-ascii" {
		return fmt.Errorf("the XML is encoded in %s instead of UTF-8", shorten(encoding))
	}
	return nil
}

// readDeclaration takes comments and CDATA; all else is a document type.
func (s *xmlScanner) readDeclaration() (xmlEvent, bool, error) {
	head, _ := s.r.Peek(8)
	switch {
	case bytes.HasPrefix(head, []byte("!--")):
		_, _ = s.r.Discard(3) // what Peek has shown is there
		return xmlEnd, true, s.skipPast("-->")
	case bytes.HasPrefix(head, []byte("![CDATA[")) && len(s.ends) > 0:
		_, _ = s.r.Discard(8)
		if err := s.skipPast("]]>"); err != nil {
			return xmlEnd, false, err
		}
		s.text = append(s.text[:0], s.tag[:len(s.tag)-3]...)
		if !utf8.Valid(s.text) {
			return xmlEnd, false, errNotUTF8
		}
		return xmlText, false, nil
	}
	return xmlEnd, false, errors.New("the XML declares a document type, which is refused")
}

// skipPast fills s.tag up to and with the mark.
func (s *xmlScanner) skipPast(mark string) error {
	s.tag = s.tag[:0]
	for {
		part, err := s.r.ReadSlice(mark[len(mark)-1])
		s.tag = append(s.tag, part...)
		switch {
		case err == io.EOF:
			return errXMLEnd
		case err != nil && err != bufio.ErrBufferFull:
			return err
		case len(s.tag) > longestText:
			return errors.New("a comment or a text in the XML is too long")
		case bytes.HasSuffix(s.tag, []byte(mark)):
			return nil
		}
	}
}
