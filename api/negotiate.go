package api

import (
	"net/http"
	"slices"
	"strconv"
	"strings"

	"spanwright/api/service"
	"spanwright/estimate/document"
)

// rendering is a form of an estimate.
type rendering struct {
	media  string
	suffix string                       // of a file name and an entity tag
	write  func([]byte) ([]byte, error) // from the stored bytes; nil for themselves
}

// export is a rendering that needs the document as data.
func export(media, suffix string, write func(document.Document) ([]byte, error)) rendering {
	return rendering{media, suffix, func(canonical []byte) ([]byte, error) {
		d, err := document.Parse(canonical)
		if err != nil {
			return nil, err
		}
		return write(d)
	}}
}

// renderings are the forms that Accept may ask for, the preferred one first.
func (a *api) renderings() []rendering {
	out := []rendering{{media: mediaJSON, suffix: "json"}}
	if a.exports.Workbook != nil {
		out = append(out, export(mediaXLSX, "xlsx", a.exports.Workbook))
	}
	if a.exports.CSV != nil {
		out = append(out, export(mediaCSV, "csv", a.exports.CSV))
	}
	return out
}

// choose picks the form that Accept likes best.
func (a *api) choose(r *request) (rendering, error) {
	all := a.renderings()
	offers := make([]string, len(all))
	for i, o := range all {
		offers[i] = o.media
	}
	if i := negotiate(r.Accept, offers); i >= 0 {
		return all[i], nil
	}
	return rendering{}, newProblem(http.StatusNotAcceptable, "none of the media types in Accept can be answered",
		service.Fault{Found: shorten(r.Accept), Problem: "the header Accept is not accepted", Remedy: strings.Join(offers, ", ")})
}

// negotiate returns the index of the offer with the highest quality in an Accept
// header (RFC 9110, 12.5.1), the first of equals; −1 where none is accepted. An
// empty header accepts everything.
func negotiate(accept string, offers []string) int {
	if strings.TrimSpace(accept) == "" {
		return 0
	}
	best, at := 0.0, -1
	for i, offer := range offers {
		if q := quality(accept, offer); q > best {
			best, at = q, i
		}
	}
	return at
}

// quality is that of the most specific range that covers the media type.
func quality(accept, media string) float64 {
	kind, _, _ := strings.Cut(media, "/")
	ranges := []string{"*/*", kind + "/*", media}
	rank, q := -1, 0.0
	for item := range strings.SplitSeq(accept, ",") {
		name, params, _ := strings.Cut(item, ";")
		at := slices.Index(ranges, strings.ToLower(strings.TrimSpace(name)))
		if at > rank {
			rank, q = at, weight(params)
		}
	}
	return q
}

// weight is the parameter q, 1 where it is absent, 0 where it is no weight.
func weight(params string) float64 {
	for p := range strings.SplitSeq(params, ";") {
		key, value, _ := strings.Cut(p, "=")
		if !strings.EqualFold(strings.TrimSpace(key), "q") {
			continue
		}
		q, err := strconv.ParseFloat(strings.TrimSpace(value), 64)
		if err != nil || !(0 <= q && q <= 1) {
			return 0
		}
		return q
	}
	return 1
}

// tag is the entity tag of a document in this form: strong for the stored bytes,
// weak for what a later program may write differently.
func (o rendering) tag(sha256 string) string {
	if o.write == nil {
		return `"` + sha256 + `"`
	}
	return `W/"` + sha256 + "-" + o.suffix + `"`
}
