package api

import (
	"cmp"
	"crypto/sha256"
	"encoding/binary"
	"net/http"
	"slices"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humaecho"

	"spanwright/api/service"
)

// Keyed is the input of operations that create: a repeated request with the same
// key answers with what the first one made.
type Keyed struct {
	IdempotencyKey string `header:"Idempotency-Key" maxLength:"200" pattern:"^[!-~]+$" patternDescription:"1 to 200 visible ASCII characters" doc:"names one attempt: repeated with the same key and content, the request answers with what the first one made; with other content it is refused with 409"`
}

const keyHeader = "Idempotency-Key"

// oneKey refuses a key that is sent empty or twice: huma would take the one for
// none and the other for its first value, and the caller would trust in it.
func (a *api) oneKey(ctx huma.Context, next func(huma.Context)) {
	keys := humaecho.Unwrap(ctx).Request().Header.Values(keyHeader)
	if len(keys) > 1 || len(keys) == 1 && keys[0] == "" {
		a.refuse(ctx, newProblem(http.StatusUnprocessableEntity, "the header "+keyHeader+" is empty or sent twice: send it once, with 1 to 200 visible ASCII characters"))
		return
	}
	next(ctx)
}

// attempt names the attempt: the key, and a fingerprint over what was asked. The
// path is part of it, the form of the answer is not.
func (r *request) attempt(k Keyed, content ...[]byte) service.Idempotency {
	if k.IdempotencyKey == "" {
		return service.Idempotency{}
	}
	return service.Idempotency{Key: k.IdempotencyKey, Fingerprint: fingerprint(append([][]byte{[]byte(r.Path)}, content...)...)}
}

// fingerprint is SHA-256 over the fields, each with its length before it, so that
// no two lists of fields read alike.
func fingerprint(fields ...[]byte) []byte {
	h := sha256.New()
	for _, f := range fields {
		h.Write(binary.BigEndian.AppendUint64(nil, uint64(len(f))))
		h.Write(f)
	}
	return h.Sum(nil)
}

// content are the fields of a form that count: names, file names and contents,
// sorted by name; not the boundary.
func (f form) content() [][]byte {
	sorted := slices.SortedStableFunc(slices.Values(f), func(a, b part) int { return cmp.Compare(a.name, b.name) })
	var out [][]byte
	for _, p := range sorted {
		out = append(out, []byte(p.name), []byte(p.fileName), p.data)
	}
	return out
}
