package sheet

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"path"
	"strings"
)

// maxParts bounds the files in a workbook's archive; a thousand sheets with
// drawings stay below.
const maxParts = 4096

// parts is the archive of a workbook (ISO/IEC 29500-2), its names in lower case
// since part names are compared without case.
type parts map[string]*zip.File

var centralHeader = []byte("PK\x01\x02")

// openParts reads the archive's directory and refuses what a workbook has no
// need of: names that lead out of it, doubled names, encryption, too much data.
func openParts(data []byte, l Limits) (parts, error) {
	if n := bytes.Count(data, centralHeader); n > maxParts {
		return nil, tooMany("files inside the workbook", maxParts)
	}
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		return nil, damagedArchive(err)
	}
	p, total := parts{}, uint64(0)
	for _, f := range z.File {
		key, err := partKey(f)
		if err != nil {
			return nil, err
		}
		if strings.HasSuffix(key, "/") {
			continue
		}
		if _, doubled := p[key]; doubled {
			return nil, malformed(fmt.Sprintf("holds the part %q twice", f.Name), saveAgain)
		}
		p[key] = f
		total += f.UncompressedSize64
		if f.UncompressedSize64 > uint64(l.UnzippedBytes) || total > uint64(l.UnzippedBytes) {
			return nil, &OpenError{Kind: SizeLimit, Problem: fmt.Sprintf("unpacks to more than %d bytes", l.UnzippedBytes), Remedy: "split it, or leave out pictures and sheets that are not part of the schedule"}
		}
	}
	return p, nil
}

func damagedArchive(err error) *OpenError {
	e := malformed("is a damaged archive: "+err.Error(), saveAgain)
	e.cause = err
	return e
}

// partKey checks an entry's name and flags.
func partKey(f *zip.File) (string, error) {
	name := f.Name
	clean := path.Clean("/" + name)
	if name == "" || strings.ContainsAny(name, "\\\x00") || "/"+strings.TrimSuffix(name, "/") != clean {
		return "", malformed(fmt.Sprintf("holds a part with the unsafe name %q", name), saveAgain)
	}
	if f.Flags&1 != 0 {
		return "", unsupported("is encrypted", "take its password off and post it again")
	}
	return strings.ToLower(name), nil
}

// scan opens a part as XML; the caller closes it.
func (p parts) scan(name string) (*xmlScanner, io.Closer, error) {
	rc, err := p.open(name)
	if err != nil {
		return nil, nil, err
	}
	return newXMLScanner(rc), rc, nil
}

// open unpacks a part. The library refuses what unpacks to more than the archive
// declares, so that the limit on declared sizes holds (tested).
func (p parts) open(name string) (io.ReadCloser, error) {
	f, ok := p[strings.ToLower(name)]
	if !ok {
		return nil, malformed(fmt.Sprintf("lacks its part %q", name), saveAgain)
	}
	rc, err := f.Open()
	if err != nil {
		return nil, damagedArchive(err)
	}
	return rc, nil
}

// relation is one link of a part to another.
type relation struct {
	kind   string // last element of the type's URL, e.g. "worksheet"
	target string // full part name
}

// relations reads the links of a part by id. A part without links has none.
func (p parts) relations(part string) (map[string]relation, error) {
	dir, base := path.Split(part)
	name := dir + "_rels/" + base + ".rels"
	links := map[string]relation{}
	if _, ok := p[strings.ToLower(name)]; !ok {
		return links, nil
	}
	s, c, err := p.scan(name)
	if err != nil {
		return nil, err
	}
	defer c.Close()
	if err := s.root("Relationships"); err != nil {
		return nil, inPart(name, err)
	}
	err = s.all(func() error {
		target, err := s.attrText("Target")
		if err != nil {
			return err
		}
		id, kind := string(s.attr("Id")), path.Base(string(s.attr("Type")))
		if string(s.attr("TargetMode")) != "External" {
			if !strings.HasPrefix(target, "/") {
				target = "/" + dir + target
			}
			links[id] = relation{kind, strings.TrimPrefix(path.Clean(target), "/")}
		}
		return s.skip()
	})
	return links, inPart(name, err)
}

// inPart names the part in which an error was met.
func inPart(name string, err error) error {
	if err == nil {
		return nil
	}
	return fmt.Errorf("part %s: %w", name, err)
}
