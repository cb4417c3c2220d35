package api

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"net/http"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// The document as JSON is the stored bytes; its tag is their SHA-256.
func TestDocument(t *testing.T) {
	w := newWorld(t)
	path := "/v1/estimates/" + stock(w)["estimate"] + "/document"
	rec, _ := w.want(200, call{method: "GET", path: path})
	for _, canonical := range w.store.tenants[w.own].documents {
		if rec.Body.String() != string(canonical) {
			t.Errorf("answered %s, stored %s", rec.Body, canonical)
		}
	}
	sum := sha256.Sum256(rec.Body.Bytes())
	if got, want := rec.Header().Get("ETag"), `"`+hex.EncodeToString(sum[:])+`"`; got != want {
		t.Errorf("ETag %s, want %s", got, want)
	}
}

func TestDocumentByAccept(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	path := "/v1/estimates/" + ids["estimate"] + "/document"
	tags := map[string]bool{}
	for accept, want := range map[string]string{"": mediaJSON, mediaXLSX: mediaXLSX, "text/csv": mediaCSV, "text/html, */*;q=0.1": mediaJSON} {
		rec, _ := w.want(200, call{method: "GET", path: path}.with("Accept", accept))
		if got := rec.Header().Get("Content-Type"); got != want {
			t.Errorf("Accept %q: %q, want %q", accept, got, want)
		}
		tags[rec.Header().Get("ETag")] = true
		if file := rec.Header().Get("Content-Disposition"); (want == mediaJSON) != (file == "") {
			t.Errorf("Accept %q: Content-Disposition %q", accept, file)
		}
	}
	if len(tags) != 3 {
		t.Errorf("the three forms have the tags %v", tags)
	}
	w.refused(http.StatusNotAcceptable, call{method: "GET", path: path}.with("Accept", "image/png"))
}

func TestNotModified(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	for _, path := range []string{
		"/v1/estimates/" + ids["estimate"] + "/document", "/v1/estimates/" + ids["estimate"] + "/lines", "/v1/estimates/" + ids["estimate"] + "/range",
		"/v1/schedules/" + ids["schedule"] + "/source",
	} {
		first, _ := w.want(200, call{method: "GET", path: path})
		tag := first.Header().Get("ETag")
		for header, status := range map[string]int{tag: 304, `"x", ` + tag: 304, "*": 304, `"x"`: 200, "x": 200, "W/" + strings.TrimPrefix(tag, "W/"): 304} {
			rec := w.do(call{method: "GET", path: path}.with("If-None-Match", header))
			if rec.Code != status || (status == 304) != (rec.Body.Len() == 0) || rec.Header().Get("ETag") != tag {
				t.Errorf("%s, If-None-Match %s: status %d, %d bytes, ETag %s; want %d", path, header, rec.Code, rec.Body.Len(), rec.Header().Get("ETag"), status)
			}
		}
	}
}

// The parts are fields of the document, as they stand there.
func TestParts(t *testing.T) {
	w := newWorld(t)
	path := "/v1/estimates/" + stock(w)["estimate"]
	_, whole := w.want(200, call{method: "GET", path: path + "/document"})
	tags := map[string]string{}
	for _, part := range []string{"lines", "assumptions", "findings", "members", "range"} {
		rec, body := w.want(200, call{method: "GET", path: path + "/" + part})
		var got any = body
		if part != "range" {
			got = body["items"]
		}
		if d := cmp.Diff(whole[part], got); d != "" || whole[part] == nil {
			t.Errorf("%s: %s", part, d)
		}
		if other := tags[rec.Header().Get("ETag")]; other != "" {
			t.Errorf("%s and %s have the same tag", part, other)
		}
		tags[rec.Header().Get("ETag")] = part
	}
}

// Amounts reach the reader as they are stored, not through floats.
func TestNumbersAsStored(t *testing.T) {
	w := newWorld(t)
	rec, _ := w.want(200, call{method: "GET", path: "/v1/estimates/" + stock(w)["estimate"]})
	var e struct {
		Base       json.RawMessage `json:"base"`
		Confidence json.RawMessage `json:"confidence"`
	}
	if err := json.Unmarshal(rec.Body.Bytes(), &e); err != nil {
		t.Fatal(err)
	}
	if string(e.Base) != `"3240.00"` || string(e.Confidence) != "0.8" {
		t.Errorf("base %s, confidence %s", e.Base, e.Confidence)
	}
}

func TestEstimateRequest(t *testing.T) {
	w := newWorld(t)
	ids := stock(w)
	path := "/v1/schemes/" + ids["scheme"] + "/estimates"
	for body, status := range map[string]int{
		`{}`: 201, `{"seed":18446744073709551615}`: 201, `{"replicates":64,"trials":64}`: 201,
		`{"seed":-1}`: 422, `{"seed":1.5}`: 422, `{"seed":"1"}`: 422, `{"trials":1}`: 422, `{"replicates":1}`: 422, `{"trials":40000}`: 422, `{"schedule_revision_id":"x"}`: 422,
		`{"rate_book_id":"` + exampleID.String() + `"}`: 201,
	} {
		rec, body2 := w.want(status, call{method: "POST", path: path, body: body})
		if status == 201 && rec.Header().Get("Location") != "/v1/estimates/"+id(t, body2, "id") {
			t.Errorf("%s: Location %q", body, rec.Header().Get("Location"))
		}
	}
}
