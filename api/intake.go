package api

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"net/http"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
	"spanwright/estimate/document"
)

const tagIntake = "Intake"

// Intake is the answer to an intake as JSON: what was stored, and the estimate's
// document, byte for byte as it is stored.
type Intake struct {
	service.Taken
	Document document.Document `json:"document"`
}

// content is an answer whose bytes are written here.
type content struct {
	Status       int
	Location     string `header:"Location" doc:"address of what was made"`
	ETag         string `header:"ETag" doc:"SHA-256 of the stored document; weak for what is made from it"`
	CacheControl string `header:"Cache-Control" hidden:"true"`
	Disposition  string `header:"Content-Disposition" doc:"file name, where the answer is a file"`
	Vary         string `header:"Vary" hidden:"true"`
	ContentType  string `header:"Content-Type" hidden:"true"`
	Body         []byte
}

const (
	fileHelp       = "The workbook or CSV file of the schedule. "
	definitionHelp = "CSV file that stands for the sheet Definition of a CSV schedule: what of the structure is defined. "
	risksHelp      = "CSV file that stands for the sheet Risks of a CSV schedule: discrete risks. "
)

func (a *api) intake() {
	o := described(operation(http.MethodPost, "/v1/intake", "intake", tagIntake, "Post a schedule, get the priced estimate",
		writing(http.StatusConflict, http.StatusNotFound, http.StatusNotAcceptable, http.StatusTooManyRequests)...),
		"Finds or makes project and scheme, stores the schedule as the next revision and its estimate: all or nothing. Accept says whether the answer is JSON, the priced workbook or the lines as CSV. Answers 200 where an earlier request with the same Idempotency-Key did the work.")
	a.document(&o, http.StatusCreated, a.schema(Intake{}))
	a.document(&o, http.StatusOK, a.schema(Intake{}))
	o.Responses["200"].Description = "made by an earlier request with the same Idempotency-Key"
	registerRaw(a, o, a.limits.Sheet.Bytes+formSlack, formBody(map[string]*huma.Schema{
		"file":         fileSchema(fileHelp),
		"project":      {Type: huma.TypeString, MaxLength: most(200), Description: "name of the project; that of the Job sheet when absent"},
		"scheme":       {Type: huma.TypeString, MaxLength: most(200), Description: "name of the scheme; that of the Job sheet when absent"},
		"rate_book_id": {Type: huma.TypeString, Format: "uuid", Description: "the rate book; the starting book when absent"},
		"rate_book":    {Type: huma.TypeString, MaxLength: most(200), Description: "name of the rate book, such as unit-rate, in place of its id"},
		"job":          fileSchema("CSV file of Key,Value that stands for the Job sheet of a CSV schedule. "),
		"definition":   fileSchema(definitionHelp),
		"risks":        fileSchema(risksHelp),
	}), a.takeIn)
}

func (a *api) takeIn(ctx context.Context, r *request, in *Keyed) (*content, error) {
	chosen, err := a.choose(r)
	if err != nil {
		return nil, err
	}
	f, err := readForm(r, "file", "project", "scheme", "rate_book_id", "rate_book", "job", "definition", "risks")
	if err != nil {
		return nil, err
	}
	book, err := f.id("rate_book_id")
	if err != nil {
		return nil, err
	}
	t, err := a.service.Intake(ctx, r.Actor,
		service.Intake{Project: f.text("project"), Scheme: f.text("scheme"), RateBook: book, BookName: f.text("rate_book"), Posting: f.posting()}, r.attempt(*in, f.content()...))
	if err != nil {
		return nil, err
	}
	canonical, err := a.service.Document(ctx, r.Actor, t.Estimate.ID)
	if err != nil {
		return nil, err
	}
	out, err := a.rendered(ctx, chosen, t.Estimate, canonical)
	if err != nil {
		return nil, err
	}
	if chosen.write == nil {
		if out.Body, err = embed(t, canonical); err != nil {
			return nil, err
		}
		out.ETag = ""
	}
	out.Location, out.CacheControl, out.Status = estimatePath(t.Estimate), "no-store", http.StatusCreated
	if t.Again {
		out.Status = http.StatusOK
	}
	return out, nil
}

// embed writes the answer of an intake. The document goes in as it is: reading
// and writing it again might change a byte, and its hash would not fit.
func embed(t service.Taken, canonical []byte) ([]byte, error) {
	head, err := marshal(t)
	if err != nil {
		return nil, fmt.Errorf("writing the answer: %w", err)
	}
	out := append(bytes.TrimSuffix(bytes.TrimSpace(head), []byte("}")), `,"document":`...)
	out = append(out, bytes.TrimSpace(canonical)...)
	return append(out, "}\n"...), nil
}

// marshal writes JSON as huma does, without escapes for HTML.
func marshal(v any) ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	err := e.Encode(v)
	return b.Bytes(), err
}

// rendered is the document in the form chosen.
func (a *api) rendered(ctx context.Context, o rendering, e service.Estimate, canonical []byte) (*content, error) {
	body := canonical
	if o.write != nil {
		var err error
		if body, err = a.service.Export(ctx, func() ([]byte, error) { return o.write(canonical) }); err != nil {
			return nil, fmt.Errorf("writing estimate %s as %s: %w", e.ID, o.suffix, err)
		}
	}
	out := &content{ETag: o.tag(e.DocumentSHA256), CacheControl: "private, no-cache", Vary: "Accept", ContentType: o.media, Body: body}
	if o.media != mediaJSON {
		out.Disposition = attachment("estimate-" + e.ID.String() + "." + o.suffix)
	}
	return out, nil
}
