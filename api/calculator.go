package api

import (
	"context"
	"maps"
	"net/http"
	"strings"
	"sync"

	"github.com/danielgtaylor/huma/v2"

	"spanwright/api/service"
	"spanwright/estimate/calculator"
	"spanwright/estimate/spread"
)

const (
	tagCalculators = "Calculators"
	mediaSVG       = "image/svg+xml"
)

// posted is the input of a calculator.
type posted[T any] struct{ Body T }

// drawn is an answer as JSON or as a drawing; its bytes are written here.
type drawn struct {
	CacheControl string `header:"Cache-Control" hidden:"true"`
	Vary         string `header:"Vary" hidden:"true"`
	ContentType  string `header:"Content-Type" hidden:"true"`
	Body         []byte
}

// calculators are the structural engine as a service: nothing is stored.
func (a *api) calculators() {
	o := calculation("beam", "Analyse a member", "Extremes, reactions, values by span and along the member, first natural frequency, positions of trains, the split method with its signed ratios, and the best places of supports where they are asked for. With Accept: image/svg+xml the diagrams of moment, shear and deflection.")
	o.Errors = append(o.Errors, http.StatusNotAcceptable)
	o.Responses["200"] = &huma.Response{Description: "the analysed member", Content: map[string]*huma.MediaType{
		mediaJSON: {Schema: a.schema(calculator.BeamAnswer{})}, mediaSVG: {Schema: &huma.Schema{Type: huma.TypeString}}}}
	register(a, o, a.beam)
	calculate(a, "section", "Look up or compute a section", "All properties, mass and the grades that suit; a designation that is not held is answered with near misses.", a.service.CalculateSection)
	calculate(a, "resistance", "Check a section under a demand", "Every check of the design basis with its clause, formula and inputs. What the basis does not cover is a check that is not met and names the clause.", a.service.CalculateResistance)
	calculate(a, "sizing", "Choose the section of a member", "The lightest candidate that passes every check, why the next lighter ones fail, the split method's ratios; where nothing passes, the nearest miss and the ways out.", a.service.CalculateSizing)
	calculate(a, "arrangements", "Compare ways to hold a length", "Cantilever with counterweight, tower at the end, inner support, two inner supports, equal spans, propped, lattice: each with sections, exact reactions, towers, ballast and footings.", a.service.CalculateArrangements)
	calculate(a, "cutting-plan", "Plan how bars are cut", "Bars of one or several lengths cut into pieces: first fit with its lower bound, or column generation with an exactly checked bound and a hint when a small change of length saves bars.", a.service.CalculateCuttingPlan)
	calculate(a, "range", "Simulate the sum of uncertain lines", "Percentiles with standard errors, sensitivities and what discrete risks add, under rank correlations by group or by matrix. A matrix that is not possible is replaced by the nearest that is, with a warning; beyond 0.05 it is refused, naming the lines.", a.service.CalculateRange)
}

// calculation describes a calculator.
func calculation(name, summary, description string) huma.Operation {
	o := described(operation(http.MethodPost, "/v1/calculators/"+name, "calculate-"+name, tagCalculators, summary, writing(http.StatusTooManyRequests)...),
		description+" Nothing is stored.")
	o.DefaultStatus = http.StatusOK
	return o
}

// calculate registers a calculator that answers JSON.
func calculate[I, O any](a *api, name, summary, description string, f func(context.Context, service.Actor, I) (O, error)) {
	register(a, calculation(name, summary, description), func(ctx context.Context, r *request, in *posted[I]) (*plain[O], error) {
		out, err := f(ctx, r.Actor, in.Body)
		return &plain[O]{Body: out}, err
	})
}

func (a *api) beam(ctx context.Context, r *request, in *posted[calculator.BeamRequest]) (*drawn, error) {
	offers := []string{mediaJSON, mediaSVG}
	chosen := negotiate(r.Accept, offers)
	if chosen < 0 {
		return nil, newProblem(http.StatusNotAcceptable, "none of the media types in Accept can be answered",
			service.Fault{Found: shorten(r.Accept), Problem: "the header Accept is not accepted", Remedy: strings.Join(offers, ", ")})
	}
	answer, err := a.service.CalculateBeam(ctx, r.Actor, in.Body)
	if err != nil {
		return nil, err
	}
	out := &drawn{CacheControl: "no-store", Vary: "Accept", ContentType: offers[chosen]}
	if offers[chosen] == mediaSVG {
		out.Body = service.BeamDiagrams(answer)
		return out, nil
	}
	out.Body, err = marshal(answer)
	return out, err
}

// calculatorExamples are requests and what the calculators answer to them, cut short:
// the loading quay's deck beam, and its boom of invented loads.
var calculatorExamples = sync.OnceValue(func() map[string]any {
	out := map[string]any{}
	deck := calculator.Steel{Candidates: []string{"IPE"}, Grade: "S355", Basis: calculator.Basis{DesignBasis: "en1993"}}
	pinned := []calculator.BeamSupport{{Position: 0, Kind: "pinned"}, {Position: 6, Kind: "pinned"}}
	loads := []calculator.BeamLoad{{Label: "deck", Kind: "uniform", Nature: "permanent", Load: 2}, {Label: "walkway", Kind: "uniform", Load: 5}}
	limits := calculator.MemberLimits{RestraintSpacing: 2, DeflectionLimit: 250}
	illustrated(out, "Beam", calculator.BeamRequest{Length: 8, Section: "IPE 300", Grade: "S355", Stations: 3, Basis: "en1993", Loads: loads,
		Supports: pinned}, calculator.Beam)
	illustrated(out, "Section", calculator.SectionRequest{Designation: "IPE 300", Grade: "S355"}, calculator.Section)
	illustrated(out, "Resistance", calculator.ResistanceRequest{Section: "IPE 300", Grade: "S355", Basis: calculator.Basis{DesignBasis: "en1993"},
		Demand: calculator.ResistanceDemand{Moment: 90, Shear: 60, LateralSpacing: 2}}, calculator.Resistance)
	illustrated(out, "Sizing", calculator.SizingRequest{Length: 6, Supports: pinned, Loads: loads, MemberLimits: limits, Steel: deck}, calculator.Size)
	boom := deck
	boom.Candidates = []string{"CHS"}
	illustrated(out, "Arrangements", calculator.ArrangementsRequest{Length: 30, Loads: loads[:1], Kinds: []string{"equal spans"}, Spans: []int{2},
		Towers: calculator.ArrangementTowers{Height: 8}, MemberLimits: calculator.MemberLimits{DeflectionLimit: 200}, Steel: boom},
		func(r calculator.ArrangementsRequest) (calculator.ArrangementsAnswer, error) {
			return calculator.Arrangements(context.Background(), r)
		})
	illustrated(out, "CuttingPlan", calculator.CuttingPlanRequest{Pieces: []calculator.CuttingPiece{{Mark: "B1", Length: 6.05, Count: 24}}, Kerf: 5,
		Stock: []calculator.CuttingStock{{Length: 12.1}, {Length: 15.1}}, Method: "least stock", HintLimit: 10},
		func(r calculator.CuttingPlanRequest) (calculator.CuttingPlanAnswer, error) {
			return calculator.CuttingPlan(context.Background(), r)
		})
	steel, labour := 40_000.0, 65_000.0
	illustrated(out, "Range", calculator.RangeRequest{Trials: 256, Correlation: map[string]float64{"labour": 0.5}, Systemic: 0.11,
		Lines: []calculator.RangeLine{{ID: "steel", Amount: &steel, Spread: spread.NewTriangular(0.88, 1, 1.2)},
			{ID: "shop", Amount: &labour, Spread: spread.NewPERT(0.8, 1, 1.5), Group: "labour"}, {ID: "site", Spread: spread.NewPERT(20_000, 30_000, 55_000), Group: "labour"}},
		Risks: []calculator.RangeRisk{{ID: "late access to the quay", Probability: 0.2, Impact: spread.NewUniform(10_000, 30_000)}}},
		func(r calculator.RangeRequest) (calculator.RangeAnswer, error) {
			return calculator.Range(context.Background(), r)
		})
	return out
})

// illustrated adds a request and its answer. An example that is refused is left out,
// and the test of the document's completeness names it.
func illustrated[I, O any](into map[string]any, name string, in I, f func(I) (O, error)) {
	answer, err := f(in)
	if err != nil {
		return
	}
	maps.Copy(into, map[string]any{name + "Request": in, name + "Answer": answer})
}
