package api

import (
	"cmp"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"net/http"
	"slices"
	"strconv"
	"strings"
	"sync"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
)

// shapeErrors makes huma's own refusals problem documents of ours, and its field
// names exact: the standard decoder would take “Name” for “name”, and the
// duplicate check could be walked around.
var shapeErrors = sync.OnceFunc(func() {
	huma.ValidateStrictCasing = true
	huma.NewError = func(status int, message string, errs ...error) huma.StatusError {
		return fromValidation(&request{}, status, message, errs)
	}
	huma.NewErrorWithContext = func(ctx huma.Context, status int, message string, errs ...error) huma.StatusError {
		c := context.Background()
		if ctx != nil {
			c = ctx.Context()
		}
		return fromValidation(requestOf(c), status, message, errs)
	}
})

// mostFaults bounds the faults of one answer to a JSON body: each is looked up in
// the body, and a hostile body can hold very many.
const mostFaults = 100

// fromValidation turns what huma found into a problem with faults in a fixed
// order. A server's fault is told without detail.
func fromValidation(r *request, status int, message string, errs []error) *Problem {
	p := newProblem(status, message)
	p.RequestID = r.ID
	if status >= http.StatusInternalServerError {
		p.Detail = ""
		return p
	}
	var body any
	if len(errs) > 0 && len(r.Body) > 0 {
		_ = json.Unmarshal(r.Body, &body) // only to place faults; a body that cannot be read has one fault, of the whole
	}
	for i, err := range errs {
		if i == mostFaults {
			p.Faults = append(p.Faults, service.Fault{Found: fmt.Sprintf("%d faults in all", len(errs)), Problem: "only the first are listed", Remedy: "mend those listed and send it again"})
			break
		}
		var d *huma.ErrorDetail
		if !errors.As(err, &d) {
			d = &huma.ErrorDetail{Message: err.Error()}
		}
		p.Faults = append(p.Faults, faultOf(r, d, body))
	}
	slices.SortStableFunc(p.Faults, func(a, b service.Fault) int {
		return cmp.Or(cmp.Compare(a.Pointer, b.Pointer), cmp.Compare(a.Problem, b.Problem))
	})
	switch n := len(p.Faults); n {
	case 0:
	case 1:
		p.Detail = "the request has a fault; nothing was done"
	default:
		p.Detail = fmt.Sprintf("the request has %d faults; nothing was done", n)
	}
	return p
}

// faultOf places one finding: by JSON pointer in the body, by name elsewhere.
func faultOf(r *request, d *huma.ErrorDetail, body any) service.Fault {
	where, rest, _ := strings.Cut(d.Location, ".")
	if where != "body" && !strings.HasPrefix(where, "body[") {
		return service.Fault{Found: found(d.Value), Problem: strings.TrimSpace(where+" parameter "+rest) + ": " + d.Message, Remedy: remedy(d.Message)}
	}
	steps := split(strings.TrimPrefix(d.Location, "body"), body)
	f := service.Fault{Found: found(d.Value), Problem: "not accepted", Remedy: remedy(d.Message)}
	var missing string
	if n, _ := fmt.Sscanf(d.Message, "expected required property %s to be present", &missing); n == 1 {
		steps = append(steps, missing)
		f.Found, f.Problem, f.Remedy = "nothing", "missing", "the field is obligatory"
	} else if d.Message == "unexpected property" && len(steps) > 0 {
		name := steps[len(steps)-1]
		f.Found, f.Problem, f.Remedy = name, "unknown field", "leave it out"
		if known := r.fields(steps[:len(steps)-1]); len(known) > 0 {
			f.Remedy = "one of " + strings.Join(known, ", ")
		}
	} else if value, field, ok := unfit(d.Message); ok {
		f.Found, f.Problem, f.Remedy = value, "does not fit the field "+field, "a value of the size and kind that the documentation gives"
	} else if len(steps) == 0 {
		f.Found, f.Problem, f.Remedy = "the body", d.Message, "a body as the documentation shows it"
	}
	f.Pointer = pointer(steps)
	return f
}

// unfit takes a decoder's message about a value that its field cannot hold apart:
// the value, and the field's path with dots.
func unfit(message string) (value, field string, ok bool) {
	rest, ok := strings.CutPrefix(message, "json: cannot unmarshal ")
	if !ok {
		return "", "", false
	}
	value, where, _ := strings.Cut(rest, " into Go ")
	where, _, _ = strings.Cut(where, " of type ")
	if _, path, dotted := strings.Cut(strings.TrimPrefix(where, "struct field "), "."); dotted {
		return shorten(value), path, true
	}
	return shorten(value), "that it stands in", true
}

// found is a value as it may be shown: scalars, shortened; never a whole object.
func found(v any) string {
	switch x := v.(type) {
	case nil:
		return "nothing"
	case string:
		return shorten(x)
	case []string:
		return shorten(strings.Join(x, ", "))
	case bool, float64, int, int64:
		return fmt.Sprint(x)
	case []any:
		return "a list"
	}
	return "an object"
}

func shorten(text string) string {
	const most = 80
	if r := []rune(text); len(r) > most {
		return string(r[:most]) + "…"
	}
	return text
}

func remedy(message string) string {
	return strings.TrimPrefix(strings.TrimPrefix(message, "expected "), "value to be ")
}

// split takes huma's path such as “.members[0].length” apart. Names may hold dots
// and brackets themselves, so each is looked up in the body; the longest fits.
func split(path string, body any) []string {
	var steps []string
	for path != "" {
		var step string
		if path[0] == '[' {
			end := max(strings.IndexByte(path, ']'), 1)
			step, path = path[1:end], path[min(end+1, len(path)):]
			i, err := strconv.Atoi(step)
			list, _ := body.([]any)
			body = nil
			if err == nil && i >= 0 && i < len(list) {
				body = list[i]
			}
		} else {
			path = strings.TrimPrefix(path, ".")
			object, _ := body.(map[string]any)
			step = name(path, object)
			path, body = path[len(step):], object[step]
			if step == "" {
				return steps
			}
		}
		steps = append(steps, step)
	}
	return steps
}

func name(path string, object map[string]any) string {
	if _, ok := object[path]; ok {
		return path
	}
	longest, ok := "", false
	for key := range object {
		rest, fits := strings.CutPrefix(path, key)
		if fits && (rest == "" || rest[0] == '.' || rest[0] == '[') && len(key) >= len(longest) {
			longest, ok = key, true
		}
	}
	if ok {
		return longest
	}
	if end := strings.IndexAny(path, ".["); end > 0 {
		return path[:end]
	}
	return path
}

var escapes = strings.NewReplacer("~", "~0", "/", "~1")

// pointer writes a JSON pointer (RFC 6901).
func pointer(steps []string) string {
	var b strings.Builder
	for _, s := range steps {
		b.WriteByte('/')
		b.WriteString(escapes.Replace(s))
	}
	return b.String()
}

// fields lists the names that the body's schema knows at a place.
func (r *request) fields(steps []string) []string {
	if r.Operation == nil || r.Operation.RequestBody == nil || r.Registry == nil {
		return nil
	}
	media := r.Operation.RequestBody.Content[mediaJSON]
	if media == nil {
		return nil
	}
	s := r.resolve(media.Schema)
	for _, step := range steps {
		s = r.resolve(below(s, step))
	}
	if s == nil {
		return nil
	}
	var names []string
	for n, p := range s.Properties {
		if !p.ReadOnly {
			names = append(names, n)
		}
	}
	slices.Sort(names)
	return names
}

func (r *request) resolve(s *huma.Schema) *huma.Schema {
	for s != nil && s.Ref != "" {
		s = r.Registry.SchemaFromRef(s.Ref)
	}
	return s
}

func below(s *huma.Schema, step string) *huma.Schema {
	if s == nil {
		return nil
	}
	if s.Items != nil {
		return s.Items
	}
	if p, ok := s.Properties[step]; ok {
		return p
	}
	p, _ := s.AdditionalProperties.(*huma.Schema)
	return p
}
