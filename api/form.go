package api

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"mime"
	"mime/multipart"
	"net/http"
	"slices"
	"strings"

	"github.com/google/uuid"

	"spanwright/api/service"
)

// part is one part of a multipart form.
type part struct {
	name, fileName, contentType string
	data                        []byte
}

// form is a multipart form, in the order of its parts.
type form []part

// formSlack is what a multipart body may have beyond its file, in bytes: heads of
// parts, short fields and a job table.
const formSlack = 1 << 20

// readForm takes a multipart body apart. Every part must be one of those known,
// and come once.
func readForm(r *request, known ...string) (form, error) {
	var f form
	var faults []service.Fault
	reader := multipart.NewReader(bytes.NewReader(r.Body), r.Boundary)
	for {
		p, err := reader.NextPart()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			return nil, brokenForm(err)
		}
		data, err := io.ReadAll(p)
		if err != nil {
			return nil, brokenForm(err)
		}
		name := p.FormName()
		switch {
		case !slices.Contains(known, name):
			faults = append(faults, service.Fault{Found: shorten(name), Problem: "unknown part of the form", Remedy: "one of " + strings.Join(known, ", ")})
		case f.has(name):
			faults = append(faults, service.Fault{Found: name, Problem: "the part is given twice", Remedy: "each part once"})
		default:
			f = append(f, part{name: name, fileName: p.FileName(), contentType: p.Header.Get("Content-Type"), data: data})
		}
		if len(f)+len(faults) > 4*len(known) {
			return nil, newProblem(http.StatusUnprocessableEntity, "the form has too many parts", faults...)
		}
	}
	if len(f)+len(faults) == 0 {
		return nil, brokenForm(nil)
	}
	if !f.has("file") {
		faults = append(faults, service.Fault{Found: "no part named file", Problem: "the file is missing", Remedy: "a part named file with a workbook or CSV file"})
	}
	if len(faults) > 0 {
		return nil, newProblem(http.StatusUnprocessableEntity, "the form has faults; nothing was stored", faults...)
	}
	return f, nil
}

// brokenForm is told without the library's words, which may quote the body.
func brokenForm(err error) *Problem {
	p := newProblem(http.StatusBadRequest, "the body is not a form as its Content-Type says",
		service.Fault{Found: "the body", Problem: "not readable as multipart/form-data", Remedy: "parts between lines of the declared boundary, each with a Content-Disposition"})
	if errors.Is(err, multipart.ErrMessageTooLarge) {
		p.Faults[0].Problem = "a part's head is too large"
	}
	return p
}

func (f form) has(name string) bool {
	return slices.ContainsFunc(f, func(p part) bool { return p.name == name })
}

// get returns a part, an empty one where it is absent.
func (f form) get(name string) part {
	i := slices.IndexFunc(f, func(p part) bool { return p.name == name })
	if i < 0 {
		return part{}
	}
	return f[i]
}

// text returns a short text part.
func (f form) text(name string) string { return strings.TrimSpace(string(f.get(name).data)) }

// id returns a part that is an id, nil where it is absent or empty.
func (f form) id(name string) (*uuid.UUID, error) {
	text := f.text(name)
	if text == "" {
		return nil, nil
	}
	id, err := uuid.Parse(text)
	if err != nil {
		return nil, newProblem(http.StatusUnprocessableEntity, fmt.Sprintf("the part %s is not an id", name),
			service.Fault{Pointer: "/" + name, Found: shorten(text), Problem: "not an id", Remedy: "a UUID, or leave it out"})
	}
	return &id, nil
}

// posting is the schedule of a form.
func (f form) posting() service.Posting {
	file := f.get("file")
	p := service.Posting{Name: file.fileName, ContentType: file.contentType, Data: file.data}
	for name, into := range map[string]*[]byte{"job": &p.JobTable, "definition": &p.DefinitionTable, "risks": &p.RiskTable} {
		if t := f.get(name); len(t.data) > 0 {
			*into = t.data
		}
	}
	return p
}

// fileName is the name of a raw body: X-File-Name, else that of Content-Disposition.
func fileName(h http.Header) string {
	if name := h.Get("X-File-Name"); name != "" {
		return name
	}
	if _, params, err := mime.ParseMediaType(h.Get("Content-Disposition")); err == nil {
		return params["filename"]
	}
	return ""
}
