package api

import (
	"net/http"
	"slices"
	"strconv"
	"strings"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
)

// tag is an entity tag of RFC 9110, 8.8.3.
type tag struct {
	value string
	weak  bool
}

// parseTags reads the list of an If-Match or If-None-Match header; star reports
// “*”. ok is false where the header is not such a list.
func parseTags(header string) (tags []tag, star, ok bool) {
	rest := strings.Trim(header, " \t")
	if rest == "*" {
		return nil, true, true
	}
	for {
		rest = strings.TrimLeft(rest, " \t,")
		if rest == "" {
			return tags, false, len(tags) > 0
		}
		text, weak := strings.CutPrefix(rest, "W/")
		text, quoted := strings.CutPrefix(text, `"`)
		value, after, closed := strings.Cut(text, `"`)
		if !quoted || !closed || strings.ContainsFunc(value, func(r rune) bool { return r <= ' ' || r == 0x7f }) {
			return nil, false, false
		}
		rest = strings.TrimLeft(after, " \t")
		if rest != "" && rest[0] != ',' {
			return nil, false, false
		}
		tags = append(tags, tag{value, weak})
	}
}

// etag is the tag of a version.
func etag(version int64) string { return `"` + strconv.FormatInt(version, 10) + `"` }

// precondition refuses a conditional operation without If-Match before its body
// is looked at.
func (a *api) precondition(ctx huma.Context, next func(huma.Context)) {
	r := requestOf(ctx.Context())
	if ctx.Operation().Metadata[conditionalKey] == nil {
		next(ctx)
		return
	}
	if strings.Trim(r.IfMatch, " \t,") == "" {
		a.refuse(ctx, newProblem(http.StatusPreconditionRequired, "the header If-Match is missing: send the ETag of the version that you read, or * for any"))
		return
	}
	if _, _, ok := parseTags(r.IfMatch); !ok {
		a.refuse(ctx, newProblem(http.StatusBadRequest, `the header If-Match is not a list of entity tags: send one like "3", in its quotes, or *`))
		return
	}
	next(ctx)
}

// version is the version that If-Match names. Weak tags never match, since they
// do not promise the same content (RFC 9110, 13.1.1). Of several the current one
// is chosen; the use case compares again when it writes.
func (r *request) version(current func() (int64, error)) (int64, error) {
	tags, star, _ := parseTags(r.IfMatch)
	if star {
		return service.AnyVersion, nil
	}
	var versions []int64
	for _, t := range tags {
		if v, err := strconv.ParseInt(t.value, 10, 64); err == nil && !t.weak && v > 0 {
			versions = append(versions, v)
		}
	}
	switch len(versions) {
	case 0:
		return 0, &service.Error{Kind: service.Stale, Message: "If-Match names no version of this resource (a weak tag never does): read it again and send its ETag"}
	case 1:
		return versions[0], nil
	}
	now, err := current()
	if err != nil || slices.Contains(versions, now) {
		return now, err
	}
	return versions[0], nil
}

// unchanged reports whether If-None-Match names the tag given (weak comparison).
func (r *request) unchanged(etag string) bool {
	tags, star, ok := parseTags(r.IfNoneMatch)
	if !ok {
		return false
	}
	value := strings.Trim(strings.TrimPrefix(etag, "W/"), `"`)
	return star || slices.ContainsFunc(tags, func(t tag) bool { return t.value == value })
}
