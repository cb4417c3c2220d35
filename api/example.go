package api

import (
	"maps"
	"net/http"
	"strconv"
	"strings"
	"time"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/uuid"

	"spanwright/api/auth"
	"spanwright/api/service"
	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// The examples of the documentation: the loading quay of the invented Brackwater
// salt works, with invented figures. They are values of the types that are
// answered, so that they cannot fall behind them.
var (
	exampleID   = uuid.MustParse("01980000-0000-7000-8000-000000000001")
	exampleTime = time.Date(2026, 6, 1, 9, 30, 0, 0, time.UTC)
	exampleSum  = strings.Repeat("0123456789abcdef", 4)

	offered = Exports{
		Workbook: func(document.Document) ([]byte, error) { return nil, nil },
		CSV:      func(document.Document) ([]byte, error) { return nil, nil },
	}
)

func amount(text string) money.Decimal {
	d, err := money.Parse(text)
	if err != nil {
		panic("api: an example is no amount: " + err.Error())
	}
	return d
}

// exampleSecret is no token: it has not the form of one.
const exampleSecret = "swt_…"

// examples are keyed by the name of the schema.
func examples() map[string]any {
	id, at := exampleID, exampleTime
	project := service.Project{ID: id, Name: "Brackwater loading quay", Currency: "EUR", BaseDate: "2026-06-01", DisplayUnits: "SI", Version: 1, CreatedAt: at, UpdatedAt: at}
	scheme := service.Scheme{ID: id, Project: id, Name: "Two trestles", Version: 1, CreatedAt: at, UpdatedAt: at}
	revision := service.Revision{ID: id, Scheme: id, Number: 1, SourceName: "quay.csv", SourceSHA256: exampleSum, Members: 3, CreatedAt: at, CreatedBy: "estimating desk"}
	estimate := exampleEstimate()
	book := service.RateBook{ID: id, Name: "ratio", Version: 1, Number: 1, SHA256: exampleSum, Content: ratebook.Ratio(), CreatedAt: at, UpdatedAt: at}
	value := ratebook.Multiplier{Name: "tidal work", Scope: ratebook.GroupScope, Subject: "Trestles", Categories: []string{ratebook.Erection},
		Spread: spread.NewPERT(1.05, 1.15, 1.4), Reason: "erection between tides", Author: "estimating desk"}
	multiplier := service.Multiplier{ID: id, Project: id, Value: value, Version: 1, CreatedAt: at, UpdatedAt: at}
	token := service.Token{ID: id, PublicID: "00112233445566778899", Name: "estimating desk", Role: auth.Estimator, CreatedAt: at, CreatedBy: &id, Version: 1}
	event := service.AuditEvent{ID: id, At: at, ActorToken: id, ActorName: "estimating desk", ActorRole: string(auth.Estimator), RequestID: "quay-42", Action: "create",
		SubjectKind: "project", SubjectID: id, After: project}
	posted := MultiplierValue(value)
	posted.Author = ""
	d := exampleDocument()
	all := map[string]any{
		"Project": project, "ProjectList": only(project), "NewProject": service.NewProject{Name: project.Name, Currency: "EUR", BaseDate: "2026-06-01", DisplayUnits: "SI"},
		"Scheme": scheme, "SchemeList": only(scheme), "NewScheme": NewScheme{Name: scheme.Name},
		"Reading": exampleReading(), "Schedule": revision, "ScheduleList": only(revision),
		"Estimate": estimate, "EstimateList": only(estimate), "NewEstimate": service.NewEstimate{Replicates: 32, Trials: 4096},
		"RateBook": book, "RateBookList": only(book), "RateBookContent": book.Content,
		"Multiplier": multiplier, "MultiplierList": only(multiplier), "NewMultiplier": NewMultiplier{Value: posted}, "MultiplierChange": MultiplierChange{Value: posted},
		"Token": token, "TokenList": only(token), "NewToken": service.NewToken{Name: token.Name, Role: token.Role},
		"IssuedToken": IssuedToken{Token: token, Secret: exampleSecret}, "AuditEventList": only(event),
		"Health": Health{Status: "up", Version: "1.0.0"},
		"Intake": Intake{Taken: service.Taken{Project: project, Scheme: scheme, Schedule: revision, Estimate: estimate}, Document: d}, "EstimateDocument": d,
		"DocumentLineItems": Items[document.Line]{d.Lines}, "AssumptionEntryItems": Items[assumption.Entry]{d.Assumptions}, "DocumentRange": d.Range,
		"DocumentFindingItems": Items[document.Finding]{d.Findings}, "DocumentMemberItems": Items[document.Member]{d.Members},
	}
	maps.Copy(all, calculatorExamples())
	maps.Copy(all, arrangementPriceExamples())
	maps.Copy(all, explanationExamples())
	maps.Copy(all, outturnExamples())
	return all
}

func only[T any](item T) service.List[T] { return service.List[T]{Items: []T{item}} }

func exampleEstimate() service.Estimate {
	return service.Estimate{ID: exampleID, Scheme: exampleID, Revision: exampleID, JobSHA256: exampleSum, DocumentSHA256: exampleSum, EngineVersion: document.EngineVersion,
		Currency: "EUR", Base: amount("3240.00"), P10: amount("2890.00"), P50: amount("3410.00"), P80: amount("3980.00"), P90: amount("4330.00"), Mean: amount("3510.00"),
		Confidence: 0.8, Contingency: amount("740.00"), Net: amount("1.200"), Delivered: amount("1.350"), Purchased: amount("1.450"), Members: 1, Unsafe: 0,
		CreatedAt: exampleTime, CreatedBy: "estimating desk"}
}

func exampleReading() service.Reading {
	return service.Reading{
		Settings: schedule.Settings{Project: "Brackwater loading quay", Scheme: "Two trestles", DesignBasis: "allowable", Factor: 3, Grade: "S275",
			DeflectionLimit: 250, EstimateClass: 4, Currency: "EUR", BaseDate: "2026-06-01", Confidence: 0.8, Money: "base date", Purchase: "waste"},
		Echo: schedule.Echo{Members: []schedule.EchoMember{{Mark: "B1", Permanent: 12, Variable: 24}}, Groups: []schedule.EchoGroup{{Group: "Beams", Pieces: 4}}},
		Defaults: []assumption.Entry{{ID: "default/restraint/full span", Kind: assumption.Default, Statement: "The compression flange is restrained at the supports alone.",
			Value: "full span", Source: "common practice, no source", Owner: "Spanwright", Confidence: assumption.Medium, Feeds: []string{"member/B1/check/lateral-torsional buckling"}}},
		Omissions: []string{"No stair rows: add them, as rows that are not sized with their mass, or make sure that there are none."},
	}
}

func exampleDocument() document.Document {
	rate := assumption.Entry{ID: "rate/fabrication", Kind: assumption.Rate, Statement: "fabrication per delivered tonne, as a multiple of the reference price",
		Source: "invented for the Brackwater demo", Owner: "starting book", Confidence: assumption.Medium, Feeds: []string{"line/beams/fabrication"}}
	return document.Document{
		EngineVersion: document.EngineVersion, Caution: document.Caution,
		Job: document.Job{Project: "Brackwater loading quay", Scheme: "Two trestles", Source: "quay.csv", SourceSHA256: exampleSum, JobSHA256: exampleSum, DesignBasis: "allowable",
			Factor: 1.5, EstimateClass: 4, Currency: "EUR", BaseDate: "2026-06-01", Money: "base date", RateBook: "ratio", RateBookSHA256: exampleSum, ReferencePrice: "900",
			CatalogueSHA256: exampleSum, GradesSHA256: exampleSum, Seed: 1, Replicates: 32, Trials: 4096},
		Totals: document.Totals{Base: amount("3240.00"), Confidence: 0.8, AtConfidence: amount("3980.00"), Contingency: amount("740.00"),
			Net: amount("1.200"), Delivered: amount("1.350"), Purchased: amount("1.450"), Members: 1, Pieces: 4},
		Class: document.Class{Stated: 4},
		Range: document.Range{Mean: 3510, MeanSE: 4, SD: 560, BaseAt: 0.36, Method: "simulation", Curve: []document.Number{}, Warnings: []string{},
			Percentiles: []document.Percentile{{P: 0.1, Value: 2890, SE: 5}, {P: 0.8, Value: 3980, SE: 6}}},
		Categories: []document.Category{{Category: ratebook.Fabrication, Amount: amount("3240.00"), Mean: 3510, P10: 2890, P90: 4330}},
		Groups:     []document.Group{}, Items: []document.Item{},
		Lines: []document.Line{{ID: "line/beams/fabrication", Item: "beams", Group: "Beams", Category: ratebook.Fabrication, Driver: "delivered mass", Quantity: amount("1.350"), Unit: "t",
			Rate: amount("2400.00"), RateFormula: "reference price × ratio", Multipliers: []document.Multiplier{}, Amount: amount("3240.00"), Assumptions: []string{rate.ID}}},
		Members: []document.Member{{Mark: "B1", Group: "Beams", Kind: "beam", Item: "beams", Quantity: 4, Length: 6, Treatment: "sized", Section: "IPE 240", Grade: "S355",
			LineMass: 30.7, Net: 736.8, Passes: true, Governing: "bending", Utilisation: 0.87}},
		Findings: []document.Finding{{Severity: document.Notice, Code: "omission", Subject: "the total", Message: "no stairs are listed"}}, Assumptions: []assumption.Entry{rate},
		Inclusions: []string{"fabrication"}, Exclusions: []string{"owner's cost"}, Notes: []string{},
	}
}

// illustrate gives every JSON body and every problem of the document an example.
func (a *api) illustrate() {
	all := examples()
	for _, item := range a.huma.OpenAPI().Paths {
		for _, o := range []*huma.Operation{item.Get, item.Post, item.Put, item.Delete} {
			if o == nil {
				continue
			}
			if o.RequestBody != nil {
				exemplify(all, o.RequestBody.Content)
			}
			for status, r := range o.Responses {
				exemplify(all, r.Content)
				if m := r.Content[mediaProblem]; m != nil {
					code, _ := strconv.Atoi(status)
					m.Example, r.Description = exampleProblem(code)
				}
			}
		}
	}
}

// exemplify attaches examples by the name of the schema.
func exemplify(all map[string]any, content map[string]*huma.MediaType) {
	for _, m := range content {
		if e := all[m.Schema.Ref[strings.LastIndexByte(m.Schema.Ref, '/')+1:]]; e != nil {
			m.Example = e
		}
	}
}

// scheduleForms are the media types of a schedule, with examples of those that
// are text.
func scheduleForms() map[string]*huma.MediaType {
	file := func() *huma.MediaType {
		return &huma.MediaType{Schema: &huma.Schema{Type: huma.TypeString, Format: "binary"}}
	}
	forms := map[string]*huma.MediaType{mediaXLSX: file(), mediaCSV: file()}
	forms[mediaCSV].Schema.Format = ""
	forms[mediaCSV].Example = "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Section or family,Grade\nB1,4,6,simple,8,IPE,S355\n"
	forms[mediaJSON] = &huma.MediaType{
		Schema: &huma.Schema{Type: huma.TypeObject, Required: []string{"rows"}, AdditionalProperties: false, Properties: map[string]*huma.Schema{
			"rows": {Type: huma.TypeArray, Items: &huma.Schema{Type: huma.TypeObject, AdditionalProperties: true}, Description: "the members, with the columns' heads as keys"},
			"job":  {Type: huma.TypeObject, AdditionalProperties: true, Description: "the keys of the Job sheet"}}},
		Example: map[string]any{"job": map[string]any{"Currency": "EUR"}, "rows": []any{map[string]any{
			"Mark": "B1", "Quantity": 4, "Length (m)": 6, "Support": "simple", "Permanent load (kN/m)": 8, "Section or family": "IPE", "Grade": "S355"}}},
	}
	return forms
}

// exampleProblem is a problem of a status, and when it is answered.
func exampleProblem(status int) (*Problem, string) {
	when := map[int]string{
		http.StatusBadRequest:            "the body or a header cannot be read",
		http.StatusUnauthorized:          "no valid token",
		http.StatusForbidden:             "the token's role may not",
		http.StatusNotFound:              "no such thing in this organisation",
		http.StatusNotAcceptable:         "none of the media types in Accept can be answered",
		http.StatusRequestTimeout:        "the body did not arrive in time",
		http.StatusConflict:              "a name is taken, or an Idempotency-Key was used for another request",
		http.StatusPreconditionFailed:    "If-Match names another version",
		http.StatusRequestEntityTooLarge: "the body is larger than the limit",
		http.StatusUnsupportedMediaType:  "the content type is not one that is read here",
		http.StatusUnprocessableEntity:   "the content has faults; nothing was stored",
		http.StatusPreconditionRequired:  "If-Match is missing",
		http.StatusTooManyRequests:       "too many heavy requests; the header Retry-After says when to repeat",
		http.StatusInternalServerError:   "a fault of the service; the log has it under the request's id",
		http.StatusServiceUnavailable:    "the service cannot serve now",
	}[status]
	p := newProblem(status, when)
	p.RequestID = "quay-42"
	if status == http.StatusUnprocessableEntity {
		p.Faults = []service.Fault{{Sheet: "Schedule", Row: 7, Column: "C", Cell: "Schedule!C7", Header: "Length (m)", Found: "six", Problem: "not a number", Remedy: "a length above 0, such as 6"}}
	}
	if status == http.StatusInternalServerError {
		p.Detail = ""
	}
	return p, when
}
