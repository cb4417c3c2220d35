package api

import (
	"context"
	"net/http"
	"strings"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
	"spanwright/estimate/trace"
)

// mediaText is a plain text for the terminal.
const mediaText = "text/plain"

type traceInput struct {
	ByID
	Figure string `query:"figure" required:"true" minLength:"1" maxLength:"500" doc:"id of a figure, as the list of figures has it, or of an assumption" example:"category/erection"`
	Depth  int    `query:"depth" minimum:"0" maximum:"100" default:"4" doc:"levels below the figure; 0 is all, in 2000 nodes at the most"`
}

type figuresInput struct {
	ByID
	Prefix string `query:"prefix" maxLength:"500" doc:"only ids that begin with it" example:"category/"`
}

func (a *api) traces() {
	o := described(operation(http.MethodGet, "/v1/estimates/{id}/trace", "trace-estimate", tagEstimates, "Ask where a figure comes from", http.StatusNotAcceptable),
		"The tree of formula, numbers, sources and authors behind a figure, from the stored document alone. Leaves are inputs, assumptions and constants of a cited clause. With Accept: text/plain the tree as indented text.")
	o.Responses["200"] = a.orText("the tree", trace.Node{})
	register(a, o, a.trace)
	register(a, described(operation(http.MethodGet, "/v1/estimates/{id}/figures", "list-estimate-figures", tagEstimates, "List the figures that can be traced"),
		"By rising id. Assumptions can be traced by their ids too."),
		func(ctx context.Context, r *request, in *figuresInput) (*plain[Items[trace.Summary]], error) {
			l, err := a.service.Figures(ctx, r.Actor, in.ID, in.Prefix)
			return &plain[Items[trace.Summary]]{Body: Items[trace.Summary]{Items: l}}, err
		})
}

func (a *api) trace(ctx context.Context, r *request, in *traceInput) (*content, error) {
	return textual(r, "private, no-cache", trace.Text, func() (trace.Node, error) {
		return a.service.Trace(ctx, r.Actor, in.ID, in.Figure, in.Depth)
	})
}

// orText is an answer as JSON, or as text for the terminal.
func (a *api) orText(what string, shape any) *huma.Response {
	return &huma.Response{Description: what, Content: map[string]*huma.MediaType{
		mediaJSON: {Schema: a.schema(shape)}, mediaText: {Schema: &huma.Schema{Type: huma.TypeString}}}}
}

// textual answers what work returns as JSON, or as text where Accept likes that
// better. Accept is looked at before the work is done.
func textual[T any](r *request, cache string, text func(T) string, work func() (T, error)) (*content, error) {
	offers := []string{mediaJSON, mediaText}
	chosen := negotiate(r.Accept, offers)
	if chosen < 0 {
		return nil, newProblem(http.StatusNotAcceptable, "none of the media types in Accept can be answered",
			service.Fault{Found: shorten(r.Accept), Problem: "the header Accept is not accepted", Remedy: strings.Join(offers, ", ")})
	}
	v, err := work()
	if err != nil {
		return nil, err
	}
	out := &content{Status: http.StatusOK, CacheControl: cache, Vary: "Accept", ContentType: offers[chosen]}
	if offers[chosen] == mediaText {
		out.ContentType, out.Body = mediaText+"; charset=utf-8", []byte(text(v))
		return out, nil
	}
	out.Body, err = marshal(v)
	return out, err
}
