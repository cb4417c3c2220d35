package sheet

import (
	"fmt"
	"maps"
	"slices"
	"strings"
)

// xlsxBook is a workbook (ISO/IEC 29500-1, clause 18) of which all but the rows
// is read.
type xlsxBook struct {
	limits   Limits
	parts    parts
	sheets   []worksheet
	strings  stringTable
	formats  []showing // by cell style
	from1904 bool
}

type worksheet struct {
	name string // as shown on its tab
	part string // where it is in the archive
}

func openXLSX(data []byte, l Limits) (*xlsxBook, error) {
	p, err := openParts(data, l)
	if err != nil {
		return nil, err
	}
	root, err := workbookPart(p)
	if err != nil {
		return nil, err
	}
	links, err := p.relations(root)
	if err != nil {
		return nil, err
	}
	b := &xlsxBook{limits: l, parts: p}
	if err := b.readWorkbook(root, links); err != nil {
		return nil, err
	}
	if part, ok := first(links, "sharedStrings"); ok {
		if err := b.readStrings(part); err != nil {
			return nil, err
		}
	}
	if part, ok := first(links, "styles"); ok {
		if err := b.readStyles(part); err != nil {
			return nil, err
		}
	}
	return b, nil
}

// workbookPart finds the main part, or tells what else the archive is.
func workbookPart(p parts) (string, error) {
	links, err := p.relations("")
	if err != nil {
		return "", err
	}
	part, ok := first(links, "officeDocument")
	switch {
	case ok && strings.HasSuffix(part, ".bin"):
		return "", unsupported("is a binary workbook (.xlsb)", saveAgain)
	case ok && strings.HasPrefix(part, "word/"):
		return "", unsupported("is a text document", wanted)
	case ok && strings.HasPrefix(part, "ppt/"):
		return "", unsupported("is a presentation", wanted)
	case ok:
		return part, nil
	}
	if _, ok := p["content.xml"]; ok {
		return "", unsupported("is an OpenDocument file", saveAgain)
	}
	return "", unsupported("is an archive but no XLSX workbook", wanted)
}

// first is the target of the first link of a kind, in order of ids.
func first(links map[string]relation, kind string) (string, bool) {
	for _, id := range slices.Sorted(maps.Keys(links)) {
		if links[id].kind == kind {
			return links[id].target, true
		}
	}
	return "", false
}

// readWorkbook reads the date system and the sheets in their order.
func (b *xlsxBook) readWorkbook(part string, links map[string]relation) error {
	s, c, err := b.parts.scan(part)
	if err != nil {
		return err
	}
	defer c.Close()
	if err := s.root("workbook"); err != nil {
		return inPart(part, err)
	}
	err = s.all(func() error {
		switch string(s.name) {
		case "workbookPr":
			v := string(s.attr("date1904"))
			b.from1904 = v == "1" || v == "true"
		case "sheets":
			return s.each(func() error { return b.addSheet(s, links) })
		}
		return s.skip()
	})
	if err != nil {
		return inPart(part, err)
	}
	if len(b.sheets) == 0 {
		return malformed("has no worksheet", wanted)
	}
	return nil
}

func (b *xlsxBook) addSheet(s *xmlScanner, links map[string]relation) error {
	name, err := s.attrText("name")
	if err != nil {
		return err
	}
	link, ok := links[string(s.attr("id"))]
	if !ok || name == "" {
		return malformed(fmt.Sprintf("has a sheet %q without its part", name), saveAgain)
	}
	if link.kind != "worksheet" { // a chart or a macro sheet has no cells
		return s.skip()
	}
	for _, other := range b.sheets {
		if strings.EqualFold(other.name, name) {
			return malformed(fmt.Sprintf("has two sheets named %q", name), "rename one of them")
		}
	}
	if len(b.sheets) == b.limits.Sheets {
		return tooMany("sheets", b.limits.Sheets)
	}
	b.sheets = append(b.sheets, worksheet{name, link.target})
	return s.skip()
}
