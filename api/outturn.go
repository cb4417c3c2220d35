package api

import (
	"context"
	"maps"
	"net/http"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/calibration"
	"spanwright/estimate/money"
)

const tagOutturns = "Outturns and calibrations"

type newOutturns struct {
	Keyed
	XFileName string `header:"X-File-Name" doc:"name of the posted file, for a body that is the file itself; that of Content-Disposition when absent" example:"outturns.csv"`
}

type outturnWithdrawal struct {
	ByID
	Conditional
}

func (a *api) outturns() {
	register(a, operation(http.MethodGet, "/v1/outturns", "list-outturns", tagOutturns, "List the outturns in force, newest first"),
		func(ctx context.Context, r *request, in *Paged) (*listOutput[service.Outturn], error) {
			l, err := a.service.Outturns(ctx, r.Actor, in.page())
			return listed(r, *in, l, err)
		})
	body := formBody(map[string]*huma.Schema{"file": fileSchema("The workbook or CSV file of outturns. ")})
	maps.Copy(body.Content, outturnForms())
	body.Content[mediaBytes] = &huma.MediaType{Schema: &huma.Schema{Type: huma.TypeString, Format: "binary"}}
	registerRaw(a, described(operation(http.MethodPost, "/v1/outturns", "post-outturns", tagOutturns, "Post what finished jobs weighed and cost", writing(http.StatusConflict)...),
		"The body is the workbook, the CSV file or JSON itself, or a form with it; the template names the columns. Either every job is taken or none; all faults are answered at once, by cell or JSON pointer. A job has one outturn in force: a wrong one is withdrawn and posted anew."),
		a.limits.Sheet.Bytes+formSlack, body, a.postOutturns)
	t := operation(http.MethodGet, "/v1/outturns/template", "get-outturn-template", tagOutturns, "Read an empty table of outturns to fill in")
	t.Responses["200"] = &huma.Response{Description: "a workbook with an example row and a sheet that explains the columns",
		Content: map[string]*huma.MediaType{mediaXLSX: {Schema: &huma.Schema{Type: huma.TypeString, Format: "binary"}}}}
	register(a, t, a.outturnTemplate)
	register(a, operation(http.MethodGet, "/v1/outturns/{id}", "get-outturn", tagOutturns, "Read an outturn in force"),
		func(ctx context.Context, r *request, in *ByID) (*versioned[service.Outturn], error) {
			o, err := a.service.Outturn(ctx, r.Actor, in.ID)
			return &versioned[service.Outturn]{ETag: etag(o.Version), Body: o}, err
		})
	register(a, described(operation(http.MethodDelete, "/v1/outturns/{id}", "withdraw-outturn", tagOutturns, "Withdraw an outturn", conditional()...),
		"Later calibrations leave it out; those made with it stay as they are."),
		a.withdrawOutturn)
}

func (a *api) postOutturns(ctx context.Context, r *request, in *newOutturns) (*made[service.OutturnPosting], error) {
	p, parts := service.Posting{Name: r.FileName, ContentType: r.ContentType, Data: r.Body}, [][]byte{[]byte(r.MediaType), []byte(r.FileName), r.Body}
	if r.MediaType == mediaMultipart {
		f, err := readForm(r, "file")
		if err != nil {
			return nil, err
		}
		p, parts = f.posting(), f.content()
	}
	posting, err := a.service.AddOutturns(ctx, r.Actor, p, r.attempt(in.Keyed, parts...))
	return &made[service.OutturnPosting]{Location: "/v1/outturns", Body: posting}, err
}

func (a *api) outturnTemplate(ctx context.Context, r *request, _ *struct{}) (*content, error) {
	data, err := a.service.OutturnTemplate(ctx, r.Actor)
	if err != nil {
		return nil, err
	}
	return &content{Status: http.StatusOK, CacheControl: "private, no-cache", ContentType: mediaXLSX, Disposition: attachment("outturns.xlsx"), Body: data}, nil
}

func (a *api) withdrawOutturn(ctx context.Context, r *request, in *outturnWithdrawal) (*struct{}, error) {
	version, err := r.version(func() (int64, error) {
		o, err := a.service.Outturn(ctx, r.Actor, in.ID)
		return o.Version, err
	})
	if err != nil {
		return nil, err
	}
	return nil, a.service.WithdrawOutturn(ctx, r.Actor, in.ID, version)
}

// outturnForms are the media types of outturns, with examples of those that are text.
func outturnForms() map[string]*huma.MediaType {
	forms := map[string]*huma.MediaType{
		mediaXLSX: {Schema: &huma.Schema{Type: huma.TypeString, Format: "binary"}},
		mediaCSV: {Schema: &huma.Schema{Type: huma.TypeString}, Example: "Job,Completed,Currency,Kind,Take-off mass (kg),Weighed mass (kg),Estimate fabrication,Outturn fabrication,Estimate currency,Estimate base date,Source\n" +
			"Pan house footbridge,2025-09-30,EUR,trestles,41800,46300,90000,99000.50,EUR,2024-06-30,invented\n"},
	}
	value := exampleOutturn().Value
	forms[mediaJSON] = &huma.MediaType{
		Schema: &huma.Schema{Type: huma.TypeObject, Required: []string{"outturns"}, AdditionalProperties: false, Properties: map[string]*huma.Schema{
			"outturns": {Type: huma.TypeArray, Items: &huma.Schema{Type: huma.TypeObject, AdditionalProperties: true},
				Description: "the jobs, each as the outturn of an answer; masses are numbers in kg or texts with their unit, amounts are decimal strings"}}},
		Example: map[string]any{"outturns": []calibration.Outturn{value}},
	}
	return forms
}

// exampleOutturn is an invented job of the Brackwater salt works.
func exampleOutturn() service.Outturn {
	p80 := amount("222000.00")
	return service.Outturn{ID: exampleID, Posting: exampleID, SHA256: exampleSum, SourceName: "outturns.csv", SourceSHA256: exampleSum, Version: 1,
		CreatedAt: exampleTime, CreatedBy: "estimating desk",
		Value: calibration.Outturn{Job: "Pan house footbridge", Completed: "2025-09-30", Currency: "EUR", Kind: "trestles", TakeOffMass: 41_800, WeighedMass: 46_300,
			Costs:    map[string]money.Decimal{calibration.Fabrication: amount("99000.50")},
			Estimate: calibration.Past{Class: "4", Currency: "EUR", BaseDate: "2024-06-30", Base: map[string]money.Decimal{calibration.Fabrication: amount("90000.00")}, P80: &p80},
			Source:   "invented final account"}}
}

// outturnExamples are keyed by the name of the schema.
func outturnExamples() map[string]any {
	o, c := exampleOutturn(), exampleCalibration()
	head := c
	head.Proposal, head.Evidence = nil, nil
	return map[string]any{
		"Outturn": o, "OutturnList": only(o), "OutturnPosting": service.OutturnPosting{ID: exampleID, Outturns: []service.Outturn{o}},
		"Calibration": c, "CalibrationList": only(head), "NewCalibration": service.NewCalibration{RateBook: ref(exampleID)},
		"NewDecision": service.NewDecision{Decision: service.Accept, Changes: []int{0}, Reason: "twenty-four jobs agree"},
	}
}

func ref(id uuid.UUID) *uuid.UUID { return &id }
