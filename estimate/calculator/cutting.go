package calculator

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"spanwright/estimate/cutting"
	"spanwright/estimate/document"
)

// CuttingPlanRequest asks how bars are cut into pieces.
type CuttingPlanRequest struct {
	Pieces    []CuttingPiece `json:"pieces" nullable:"false" doc:"1 to 1000 rows, 100,000 pieces in all"`
	Stock     []CuttingStock `json:"stock" nullable:"false" doc:"1 to 20 lengths in which bars can be had"`
	Kerf      float64        `json:"kerf_mm,omitempty" doc:"lost at each cut, 0 to 50"`
	Objective string         `json:"objective,omitempty" enum:"length,bars,cost" doc:"what the plan makes least: length of the bars (when absent), their number, or their cost"`
	Method    string         `json:"method,omitempty" enum:"first fit,least stock" doc:"first fit (when absent) is quick and has a lower bound; least stock is column generation with an exactly checked bound"`
	HintLimit float64        `json:"hint_limit_mm,omitempty" doc:"by how much a length may be shortened to save bars; 0 asks for no hint; with the method least stock"`
}

// CuttingPiece is a number of equal pieces.
type CuttingPiece struct {
	Mark   string  `json:"mark" doc:"each mark once"`
	Length float64 `json:"length_m" doc:"taken up to the next 0.1 mm"`
	Count  int     `json:"count"`
}

// CuttingStock is one length in which bars can be had.
type CuttingStock struct {
	Length    float64 `json:"length_m" doc:"taken down to 0.1 mm"`
	Cost      float64 `json:"cost,omitempty" doc:"of a bar, in any one currency, to the hundredth; read by the objective cost alone"`
	Available int     `json:"available,omitempty" doc:"bars to be had; 0 or absent: as many as wanted"`
}

// CuttingPlanAnswer is a plan with what is known of its quality.
type CuttingPlanAnswer struct {
	Caution     string           `json:"caution"`
	Method      string           `json:"method"`
	Objective   string           `json:"objective"`
	Patterns    []CuttingPattern `json:"patterns" nullable:"false" doc:"the longest bars first"`
	Bars        []CuttingBars    `json:"bars" nullable:"false"`
	Pieces      int64            `json:"pieces"`
	StockLength Number           `json:"stock_length_m" doc:"of all bars: used, kerf and offcuts"`
	Used        Number           `json:"used_m" doc:"in pieces"`
	KerfLoss    Number           `json:"kerf_loss_m"`
	Offcuts     Number           `json:"offcuts_m"`
	Yield       Number           `json:"yield" doc:"used over stock length"`
	Unit        string           `json:"unit" doc:"of value, bound and gap: m, bars, or the currency of the costs"`
	Value       Number           `json:"value" doc:"of the objective"`
	Bound       Number           `json:"bound" doc:"no plan is below it"`
	Gap         Number           `json:"gap" doc:"value less bound"`
	Proven      bool             `json:"proven" doc:"whether the gap is 0, so that no plan is better"`
	Hint        *CuttingHint     `json:"hint,omitempty"`
	Notes       []string         `json:"notes" nullable:"false"`
}

// CuttingPattern is a number of bars that are cut alike.
type CuttingPattern struct {
	Length Number       `json:"stock_length_m"`
	Bars   int64        `json:"bars"`
	Cuts   []CuttingCut `json:"cuts" nullable:"false" doc:"the longest first"`
	Offcut Number       `json:"offcut_m" doc:"left of each bar"`
}

// CuttingCut is a number of equal pieces in one bar.
type CuttingCut struct {
	Mark   string `json:"mark"`
	Length Number `json:"length_m"`
	Count  int64  `json:"count"`
}

// CuttingBars is a number of bars of one length.
type CuttingBars struct {
	Length Number `json:"length_m"`
	Bars   int64  `json:"bars"`
}

// CuttingHint is a small change of one length that saves bars.
type CuttingHint struct {
	Marks   []string `json:"marks" nullable:"false"`
	Length  Number   `json:"length_m"`
	Shorter Number   `json:"shorter_mm"`
	Saves   Number   `json:"saves" doc:"in the unit of the objective"`
	Text    string   `json:"text"`
}

const (
	tenths     = 1e4 // 0.1 mm in a metre
	hundredths = 100
	maxHint    = 1000 // mm
	firstFit   = "first fit"
	leastStock = "least stock"
)

// CuttingPlan plans how bars are cut into pieces. The error is Faults, or that of the
// context.
func CuttingPlan(ctx context.Context, r CuttingPlanRequest) (CuttingPlanAnswer, error) {
	var f Faults
	p := r.problem(&f)
	method := r.Method
	if method == "" {
		method = firstFit
	}
	f.oneOf("/method", method, firstFit, leastStock)
	if f.within("/hint_limit_mm", r.HintLimit, 0, maxHint, "mm") && r.HintLimit > 0 && method == firstFit {
		f.add("/hint_limit_mm", number(r.HintLimit)+" mm", "the method first fit gives no hint", "0, or the method least stock")
	}
	f.merge(p.Validate())
	if len(f) > 0 {
		return CuttingPlanAnswer{}, f
	}
	var plan cutting.Plan
	var err error
	if method == firstFit {
		plan, err = cutting.FirstFit(ctx, p)
	} else {
		plan, err = cutting.Optimise(ctx, p, cutting.Limits{HintRange: int64(math.Round(r.HintLimit * 10))})
	}
	if err != nil {
		var short cutting.Faults
		if errors.As(err, &short) {
			f.merge(err)
			return CuttingPlanAnswer{}, f
		}
		return CuttingPlanAnswer{}, err
	}
	return guarded(r.answer(plan))
}

// problem is the request in whole tenths of a millimetre and hundredths of money.
func (r CuttingPlanRequest) problem(f *Faults) cutting.Problem {
	p := cutting.Problem{Objective: cutting.Objective(r.Objective)}
	for i, x := range r.Pieces[:min(len(r.Pieces), cutting.MaxPieceRows+1)] {
		at := item("/pieces", i)
		if len([]rune(x.Mark)) > 80 {
			f.add(at+"/mark", quoted(x.Mark), "too long", "at most 80 letters")
		}
		y := cutting.Piece{Mark: x.Mark, Count: x.Count}
		if f.above(at+"/length_m", x.Length, cutting.MaxLength/tenths, "m") {
			y.Length = int64(math.Ceil(float64(x.Length*tenths) - 1e-6))
		}
		p.Pieces = append(p.Pieces, y)
	}
	for i, x := range r.Stock[:min(len(r.Stock), cutting.MaxStock+1)] {
		at := item("/stock", i)
		y := cutting.Stock{Available: x.Available}
		if f.above(at+"/length_m", x.Length, cutting.MaxLength/tenths, "m") {
			y.Length = int64(math.Floor(float64(x.Length*tenths) + 1e-6))
		}
		if f.within(at+"/cost", x.Cost, 0, cutting.MaxCost/hundredths, "") {
			y.Cost = int64(math.Round(x.Cost * hundredths))
		}
		p.Stock = append(p.Stock, y)
	}
	if f.within("/kerf_mm", r.Kerf, 0, cutting.MaxKerf/10, "mm") {
		p.Kerf = int64(math.Ceil(float64(r.Kerf*10) - 1e-6))
	}
	return p
}

// cuttingFields are the fields of a cutting problem under their names here.
var cuttingFields = strings.NewReplacer("/length", "/length_m", "/kerf", "/kerf_mm")

// merge adds the faults of a cutting problem, but no second one at a place.
func (f *Faults) merge(err error) {
	var list cutting.Faults
	if !errors.As(err, &list) {
		return
	}
	for _, x := range list {
		at := cuttingFields.Replace(x.Pointer)
		if !slices.ContainsFunc(*f, func(y Fault) bool { return y.Pointer == at }) {
			f.add(at, x.Found, x.Problem, x.Remedy)
		}
	}
}

func (r CuttingPlanRequest) answer(p cutting.Plan) CuttingPlanAnswer {
	metres := func(v int64) Number { return Number(float64(v) / tenths) }
	value := map[cutting.Objective]func(int64) Number{
		cutting.LeastLength: metres,
		cutting.FewestBars:  func(v int64) Number { return Number(v) },
		cutting.LeastCost:   func(v int64) Number { return Number(float64(v) / hundredths) },
	}[p.Objective]
	out := CuttingPlanAnswer{
		Caution: document.Caution, Method: p.Method, Objective: string(p.Objective), Patterns: []CuttingPattern{}, Bars: []CuttingBars{}, Pieces: p.Pieces,
		StockLength: metres(p.StockLength), Used: metres(p.Used), KerfLoss: metres(p.KerfLoss), Offcuts: metres(p.Offcuts), Yield: Number(p.Yield),
		Unit:  map[cutting.Objective]string{cutting.LeastLength: "m", cutting.FewestBars: "bars", cutting.LeastCost: "currency of the costs"}[p.Objective],
		Value: value(p.Value), Bound: value(p.Bound), Gap: value(p.Gap), Proven: p.Proven, Notes: []string{},
	}
	for _, x := range p.Patterns {
		y := CuttingPattern{Length: metres(x.Length), Bars: x.Bars, Cuts: []CuttingCut{}, Offcut: metres(x.Offcut)}
		for _, c := range x.Cuts {
			y.Cuts = append(y.Cuts, CuttingCut{Mark: c.Mark, Length: metres(c.Length), Count: c.Count})
		}
		out.Patterns = append(out.Patterns, y)
	}
	for _, x := range p.Bars {
		out.Bars = append(out.Bars, CuttingBars{Length: metres(x.Length), Bars: x.Bars})
	}
	if h := p.Hint; h != nil {
		out.Hint = &CuttingHint{Marks: h.Marks, Length: metres(h.Length), Shorter: Number(float64(h.Shorter) / 10), Saves: value(h.Saves), Text: h.Text}
		if p.Objective == cutting.LeastCost {
			out.Hint.Text = fmt.Sprintf("%g mm less on %s would save %.2f", out.Hint.Shorter, strings.Join(h.Marks, ", "), float64(out.Hint.Saves))
		}
	}
	if !p.Proven && r.Method != leastStock {
		out.Notes = append(out.Notes, "First fit is not proven to be best; the method least stock may save up to the gap.")
	}
	return out
}
