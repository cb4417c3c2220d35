package api

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"mime"
	"net"
	"net/http"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humaecho"
	"github.com/labstack/echo/v4"

	"spanwright/api/service"
	"spanwright/estimate/sheet"
)

// The media types that are read and written.
const (
	mediaJSON      = "application/json"
	mediaXLSX      = sheet.MediaTypeXLSX
	mediaCSV       = sheet.MediaTypeCSV
	mediaMultipart = "multipart/form-data"
	mediaBytes     = "application/octet-stream"
)

// readBody reads the whole body up to the operation's limit and refuses one that
// is too large, empty, of another media type, or JSON that is damaged or names a
// key twice. What follows reads it from memory.
func (a *api) readBody(ctx huma.Context, next func(huma.Context)) {
	o := ctx.Operation()
	if o.RequestBody == nil {
		next(ctx)
		return
	}
	limit, _ := o.Metadata[limitKey].(int64)
	c, r := humaecho.Unwrap(ctx), requestOf(ctx.Context())
	data, p := readLimited(c, limit)
	if p == nil && len(data) == 0 {
		p = newProblem(http.StatusBadRequest, "the body is empty", service.Fault{Found: "nothing", Problem: "the body is empty", Remedy: accepted(o)})
	}
	if p == nil {
		r.Body = data
		p = r.declare(c.Request().Header.Get("Content-Type"), o)
	}
	if p == nil && r.MediaType == mediaJSON {
		p = checkJSON(data)
	}
	if p != nil {
		a.refuse(ctx, p)
		return
	}
	c.Request().Body = io.NopCloser(bytes.NewReader(data))
	next(ctx)
}

// readLimited reads at most limit bytes. Afterwards the server's deadline for
// reading is lifted: it would end the context of a long computation.
func readLimited(c echo.Context, limit int64) ([]byte, *Problem) {
	large := newProblem(http.StatusRequestEntityTooLarge, fmt.Sprintf("the body is larger than %d bytes", limit))
	if c.Request().ContentLength > limit {
		c.Response().Header().Set("Connection", "close")
		return nil, large
	}
	var b bytes.Buffer
	b.Grow(int(max(0, c.Request().ContentLength)) + bytes.MinRead)
	_, err := b.ReadFrom(http.MaxBytesReader(c.Response(), c.Request().Body, limit))
	var over *http.MaxBytesError
	var slow net.Error
	switch {
	case errors.As(err, &over):
		return nil, large
	case errors.As(err, &slow) && slow.Timeout():
		return nil, newProblem(http.StatusRequestTimeout, "the body did not arrive in time")
	case err != nil:
		return nil, newProblem(http.StatusBadRequest, "the body did not arrive whole")
	}
	// A connection without deadlines, as in tests, has none to lift.
	_ = http.NewResponseController(c.Response()).SetReadDeadline(time.Time{})
	return b.Bytes(), nil
}

// declare takes the declared content type, which must be one of the operation's.
func (r *request) declare(header string, o *huma.Operation) *Problem {
	media, params, err := mime.ParseMediaType(header)
	refused := newProblem(http.StatusUnsupportedMediaType, "the body's content type cannot be read here",
		service.Fault{Found: shorten(header), Problem: "the header Content-Type is not accepted", Remedy: accepted(o)})
	if err != nil || o.RequestBody.Content[media] == nil {
		return refused
	}
	if charset := params["charset"]; media == mediaJSON && charset != "" && !strings.EqualFold(charset, "utf-8") {
		return refused
	}
	if media == mediaMultipart && params["boundary"] == "" {
		return newProblem(http.StatusBadRequest, "the header Content-Type of a multipart body names no boundary")
	}
	r.ContentType, r.MediaType, r.Boundary = header, media, params["boundary"]
	return nil
}

// accepted lists the media types of an operation's body.
func accepted(o *huma.Operation) string {
	var types []string
	for t := range o.RequestBody.Content {
		types = append(types, t)
	}
	slices.Sort(types)
	return strings.Join(types, ", ")
}

// maxDepth is how deeply JSON may be nested.
const maxDepth = 64

// checkJSON refuses JSON that encoding/json would take in silence: a key given
// twice, text after the value, bytes that are not UTF-8.
func checkJSON(data []byte) *Problem {
	if !utf8.Valid(data) {
		return malformed("", "not UTF-8", "JSON in UTF-8")
	}
	c := jsonCheck{d: json.NewDecoder(bytes.NewReader(data))}
	c.d.UseNumber()
	if p := c.value(nil); p != nil {
		return p
	}
	if _, err := c.d.Token(); !errors.Is(err, io.EOF) {
		return malformed("", "something follows the JSON value at byte "+strconv.FormatInt(c.d.InputOffset(), 10), "one JSON value and nothing after it")
	}
	return nil
}

func malformed(at, problem, remedy string) *Problem {
	return newProblem(http.StatusBadRequest, "the body is not JSON as it is read here: "+problem,
		service.Fault{Pointer: at, Found: "the body", Problem: problem, Remedy: remedy})
}

type jsonCheck struct{ d *json.Decoder }

func (c jsonCheck) value(at []string) *Problem {
	t, err := c.d.Token()
	if err != nil {
		return c.syntax(at, err)
	}
	if len(at) > maxDepth {
		return malformed(pointer(at), "nested too deeply", fmt.Sprintf("at most %d levels", maxDepth))
	}
	switch t {
	case json.Delim('{'):
		return c.object(at)
	case json.Delim('['):
		for i := 0; c.d.More(); i++ {
			if p := c.value(append(at[:len(at):len(at)], strconv.Itoa(i))); p != nil {
				return p
			}
		}
		return c.end(at)
	}
	return nil
}

func (c jsonCheck) object(at []string) *Problem {
	seen := map[string]bool{}
	for c.d.More() {
		t, err := c.d.Token()
		if err != nil {
			return c.syntax(at, err)
		}
		key, _ := t.(string)
		here := append(at[:len(at):len(at)], key)
		if seen[key] {
			return malformed(pointer(here), "the key is given twice", "each key once")
		}
		seen[key] = true
		if p := c.value(here); p != nil {
			return p
		}
	}
	return c.end(at)
}

// end reads the closing delimiter.
func (c jsonCheck) end(at []string) *Problem {
	if _, err := c.d.Token(); err != nil {
		return c.syntax(at, err)
	}
	return nil
}

func (c jsonCheck) syntax(at []string, err error) *Problem {
	offset := c.d.InputOffset()
	var s *json.SyntaxError
	if errors.As(err, &s) {
		offset = s.Offset
	}
	what := "a syntax error"
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		what = "the text ends too early"
	}
	return malformed(pointer(at), fmt.Sprintf("%s at byte %d", what, offset), "JSON (RFC 8259)")
}
