package api

import (
	"bytes"
	"context"
	"maps"
	"mime"
	"net/http"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
)

const tagSchedules = "Schedules"

type newSchedule struct {
	ByID
	Keyed
	XFileName string `header:"X-File-Name" doc:"name of the posted file, for a body that is the file itself; that of Content-Disposition when absent" example:"quay.csv"`
}

func (a *api) schedules() {
	register(a, operation(http.MethodGet, "/v1/schemes/{id}/schedules", "list-schedules", tagSchedules, "List the schedule revisions of a scheme, newest first"),
		func(ctx context.Context, r *request, in *listInput) (*listOutput[service.Revision], error) {
			l, err := a.service.Revisions(ctx, r.Actor, in.ID, in.page())
			return listed(r, in.Paged, l, err)
		})
	body := formBody(map[string]*huma.Schema{"file": fileSchema(fileHelp), "job": fileSchema("CSV file of Key,Value that stands for the Job sheet. "),
		"definition": fileSchema(definitionHelp), "risks": fileSchema(risksHelp)})
	maps.Copy(body.Content, scheduleForms())
	body.Content[mediaBytes] = &huma.MediaType{Schema: &huma.Schema{Type: huma.TypeString, Format: "binary"}}
	registerRaw(a, described(operation(http.MethodPost, "/v1/schemes/{id}/schedules", "post-schedule", tagSchedules, "Post a schedule as the next revision",
		writing(http.StatusConflict)...),
		"The body is the workbook, the CSV file or JSON itself, or a form with it. Either every row is taken or none; all faults are answered at once, by cell."),
		a.limits.Sheet.Bytes+formSlack, body, a.postSchedule)
	check := described(operation(http.MethodPost, "/v1/schedules/check", "check-schedule", tagSchedules, "Read a schedule without storing it", writing()...),
		"Answers the load of each member, the tonnes of each group as far as they are known before sizing, every default taken and what may have been forgotten; or all faults, by cell.")
	check.DefaultStatus = http.StatusOK
	registerRaw(a, check, a.limits.Sheet.Bytes+formSlack, body, a.checkSchedule)
	t := operation(http.MethodGet, "/v1/schedules/template", "get-schedule-template", tagSchedules, "Read an empty schedule to fill in")
	t.Responses["200"] = &huma.Response{Description: "a workbook with drop-down lists, an example row and a Job sheet",
		Content: map[string]*huma.MediaType{mediaXLSX: {Schema: &huma.Schema{Type: huma.TypeString, Format: "binary"}}}}
	register(a, t, a.template)
	register(a, operation(http.MethodGet, "/v1/schedules/{id}", "get-schedule", tagSchedules, "Read a schedule revision"),
		func(ctx context.Context, r *request, in *ByID) (*plain[service.Revision], error) {
			v, err := a.service.Revision(ctx, r.Actor, in.ID)
			return &plain[service.Revision]{Body: v}, err
		})
	o := operation(http.MethodGet, "/v1/schedules/{id}/source", "get-schedule-source", tagSchedules, "Read a schedule as it was posted")
	o.Responses["200"] = &huma.Response{Description: "the bytes as posted", Content: scheduleForms()}
	register(a, o, a.source)
}

type checkedSchedule struct {
	XFileName string `header:"X-File-Name" doc:"name of the posted file, for a body that is the file itself" example:"quay.csv"`
}

func (a *api) checkSchedule(ctx context.Context, r *request, _ *checkedSchedule) (*plain[service.Reading], error) {
	p, _, err := posting(r)
	if err != nil {
		return nil, err
	}
	v, err := a.service.CheckSchedule(ctx, r.Actor, p)
	return &plain[service.Reading]{Body: v}, err
}

// posting is the file of a request, sent as the body or in a form, and the form's
// content for a fingerprint.
func posting(r *request) (service.Posting, [][]byte, error) {
	if r.MediaType != mediaMultipart {
		return service.Posting{Name: r.FileName, ContentType: r.ContentType, Data: r.Body}, [][]byte{[]byte(r.MediaType), []byte(r.FileName), r.Body}, nil
	}
	f, err := readForm(r, "file", "job", "definition", "risks")
	if err != nil {
		return service.Posting{}, nil, err
	}
	return f.posting(), f.content(), nil
}

func (a *api) postSchedule(ctx context.Context, r *request, in *newSchedule) (*made[service.Revision], error) {
	p, parts, err := posting(r)
	if err != nil {
		return nil, err
	}
	v, err := a.service.PostSchedule(ctx, r.Actor, in.ID, p, r.attempt(in.Keyed, parts...))
	return &made[service.Revision]{Location: "/v1/schedules/" + v.ID.String(), Body: v}, err
}

func (a *api) template(ctx context.Context, r *request, _ *struct{}) (*content, error) {
	data, err := a.service.Template(ctx, r.Actor)
	if err != nil {
		return nil, err
	}
	return &content{Status: http.StatusOK, CacheControl: "private, no-cache", ContentType: mediaXLSX, Disposition: attachment("schedule.xlsx"), Body: data}, nil
}

func (a *api) source(ctx context.Context, r *request, in *ByID) (*content, error) {
	v, err := a.service.Revision(ctx, r.Actor, in.ID)
	if err != nil {
		return nil, err
	}
	out := &content{Status: http.StatusOK, ETag: `"` + v.SourceSHA256 + `"`, CacheControl: "private, no-cache",
		ContentType: sourceType(v.Source), Disposition: attachment(v.SourceName), Body: v.Source}
	if r.unchanged(out.ETag) {
		out.Status, out.Body = http.StatusNotModified, nil
	}
	return out, nil
}

// sourceType tells the media type of an accepted posting by its beginning.
func sourceType(data []byte) string {
	switch {
	case bytes.HasPrefix(data, []byte("PK")):
		return mediaXLSX
	case bytes.HasPrefix(bytes.TrimLeft(data, " \t\r\n"), []byte("{")):
		return mediaJSON
	}
	return mediaCSV
}

// attachment is a Content-Disposition that makes a browser save the file.
func attachment(name string) string {
	if v := mime.FormatMediaType("attachment", map[string]string{"filename": name}); v != "" {
		return v
	}
	return "attachment"
}
