package api

import (
	"reflect"
	"strconv"
	"strings"

	"github.com/danielgtaylor/huma/v2"
	"github.com/google/uuid"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

const (
	securityScheme = "bearer"
	apiVersion     = "1" // of /v1; the program's own is told by /healthz
)

const about = `Prices fabricated steel structures from a sketch: members are sized with simplified conservative beam checks, converted to tonnage and priced; the answer is a budget range with every assumption itemised.

` + document.Caution + `

Errors are problem documents (RFC 9457) with a JSON pointer or a cell for every fault. Amounts are decimal strings. Unknown fields and keys given twice are refused.`

// openAPI is huma's configuration: JSON, no links into bodies, unknown query
// parameters refused, documentation served by us.
func openAPI() huma.Config {
	registry := huma.NewMapRegistry("#/components/schemas/", schemaName)
	registry.RegisterTypeAlias(reflect.TypeFor[money.Decimal](), reflect.TypeFor[decimalSchema]())
	registry.RegisterTypeAlias(reflect.TypeFor[uuid.UUID](), reflect.TypeFor[idSchema]())
	c := huma.DefaultConfig("Spanwright", apiVersion)
	c.Info.Description = about
	c.Components.Schemas = registry
	c.Components.SecuritySchemes = map[string]*huma.SecurityScheme{securityScheme: {Type: "http", Scheme: "bearer", BearerFormat: "swt_…",
		Description: "An access token. Its role (viewer, estimator, manager, administrator) says what it may do."}}
	c.CreateHooks = nil
	c.OpenAPIPath, c.DocsPath, c.SchemasPath = "", "", ""
	c.RejectUnknownQueryParameters = true
	return c
}

// decimalSchema stands for money.Decimal in the document: a string, because a JSON
// number passes through floats in most readers.
type decimalSchema struct{}

// Schema is what money.Parse accepts.
func (decimalSchema) Schema(huma.Registry) *huma.Schema {
	return &huma.Schema{Type: huma.TypeString, Pattern: `^[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)$`, PatternDescription: "a plain decimal number such as 1234.50",
		MaxLength: most(40), Examples: []any{"1234.50"}, Description: "exact decimal number"}
}

// idSchema stands for ids.
type idSchema struct{}

// Schema is a UUID.
func (idSchema) Schema(huma.Registry) *huma.Schema {
	return &huma.Schema{Type: huma.TypeString, Format: "uuid", Examples: []any{exampleID.String()}}
}

// schemaName names a type in the document. Packages that share names with others
// put theirs before; a generic type follows its argument: ProjectList.
func schemaName(t reflect.Type, hint string) string {
	for t.Kind() == reflect.Pointer {
		t = t.Elem()
	}
	if outer, inner, generic := strings.Cut(t.Name(), "["); generic {
		inner = strings.TrimSuffix(inner, "]")
		dir, name, _ := strings.Cut(inner[strings.LastIndexByte(inner, '/')+1:], ".")
		return prefixed(dir, name) + outer
	}
	if t.Name() == "" {
		return hint
	}
	return prefixed(t.PkgPath()[strings.LastIndexByte(t.PkgPath(), '/')+1:], t.Name())
}

func prefixed(dir, name string) string {
	switch {
	case dir == "document" && name == "Document":
		return "EstimateDocument"
	case dir == "document":
		return "Document" + name
	case dir == "ratebook":
		return "RateBook" + strings.Replace(name, "Book", "Content", 1)
	case dir == "calibration":
		return "Calibration" + name
	case dir == "assumption":
		return "Assumption" + name
	case dir == "trace":
		return "Trace" + name
	case dir == "comparison" && name != "Comparison":
		return "Comparison" + name
	case dir == "bridge" && name != "Bridge":
		return "Bridge" + name
	case dir == "service" && name == "Revision":
		return "Schedule"
	}
	return strings.ToUpper(name[:1]) + name[1:]
}

// schema registers a type of answer that is written as bytes.
func (a *api) schema(shape any) *huma.Schema {
	t := reflect.TypeOf(shape)
	return a.huma.OpenAPI().Components.Schemas.Schema(t, true, t.Name())
}

// document states the forms of a status: JSON of the schema, and the exports.
func (a *api) document(o *huma.Operation, status int, s *huma.Schema) {
	forms := map[string]*huma.MediaType{mediaJSON: {Schema: s}}
	for _, f := range a.renderings()[1:] {
		forms[f.media] = &huma.MediaType{Schema: &huma.Schema{Type: huma.TypeString}}
		if f.media == mediaXLSX {
			forms[f.media].Schema.Format = "binary"
		}
	}
	o.Responses[strconv.Itoa(status)] = &huma.Response{Description: "the estimate", Content: forms}
}

func jsonOnly(forms map[string]*huma.MediaType) map[string]*huma.MediaType {
	return map[string]*huma.MediaType{mediaJSON: forms[mediaJSON]}
}

// formBody is a multipart body with an obligatory file.
func formBody(parts map[string]*huma.Schema) *huma.RequestBody {
	return &huma.RequestBody{Required: true, Content: map[string]*huma.MediaType{
		mediaMultipart: {Schema: &huma.Schema{Type: huma.TypeObject, Properties: parts, Required: []string{"file"}}}}}
}

func fileSchema(description string) *huma.Schema {
	return &huma.Schema{Type: huma.TypeString, Format: "binary", Description: strings.TrimSpace(description)}
}

func most(n int) *int { return &n }
