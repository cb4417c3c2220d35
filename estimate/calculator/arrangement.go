package calculator

import (
	"context"

	"spanwright/estimate/document"
	"spanwright/structural/action"
	"spanwright/structural/arrangement"
)

// ArrangementsRequest asks for the ways to hold a length.
type ArrangementsRequest struct {
	Length         float64            `json:"length_m" doc:"from the root to the tip, above 0, up to 10000"`
	Loads          []BeamLoad         `json:"loads,omitempty" maxItems:"50" doc:"moving trains and horizontal wind included; of every kind but curvature"`
	Kinds          []string           `json:"kinds,omitempty" doc:"ways to be tried; all when absent"`
	Fractions      []float64          `json:"inner_fractions,omitempty" maxItems:"10" doc:"of the length: places of the inner support; 2/3 when absent"`
	Spans          []int              `json:"equal_spans,omitempty" maxItems:"10" doc:"numbers of equal spans, 2 to 20; 2 and 3 when absent"`
	Tail           float64            `json:"tail_m,omitempty" doc:"lever arm of the counterweight behind the root; a third of the length when absent"`
	Safety         float64            `json:"stability_factor,omitempty" doc:"against overturning and uplift, 1 to 5: holding over lifting at characteristic values; 1.5 when absent"`
	BallastDensity float64            `json:"ballast_density_kg_m3,omitempty" doc:"2400, plain concrete, when absent"`
	Towers         ArrangementTowers  `json:"towers,omitempty"`
	Footings       ArrangementFooting `json:"footings,omitempty"`
	Lattice        ArrangementLattice `json:"lattice,omitempty"`
	MemberLimits
	Steel
}

// ArrangementTowers says what towers are made of. An absent field is the default
// that the notes of the answer name.
type ArrangementTowers struct {
	Height     float64  `json:"height_m,omitempty" doc:"from footing to the member; supports stand on their footings when absent"`
	RootHeight float64  `json:"root_height_m,omitempty"`
	Legs       int      `json:"legs,omitempty" doc:"1 to 4; 2 when absent"`
	Spread     float64  `json:"spread_m,omitempty" doc:"between neighbouring legs at the foot; an eighth of the height when absent"`
	Factor     float64  `json:"length_factor,omitempty" doc:"effective length factor of a leg"`
	Bracing    float64  `json:"bracing,omitempty" doc:"mass of bracing, head and feet over that of the legs; 0.25 when absent"`
	Wind       float64  `json:"wind_kn_m,omitempty" doc:"on the tower, for each metre of height"`
	Sections   []string `json:"candidates,omitempty" doc:"of a leg; those of the member when absent"`
}

// ArrangementFooting says how footings are sized: square, of one depth.
type ArrangementFooting struct {
	Bearing float64 `json:"bearing_kpa,omitempty" doc:"allowable pressure; 150 when absent"`
	Depth   float64 `json:"depth_m,omitempty" doc:"1 when absent"`
	Least   float64 `json:"least_m3,omitempty" doc:"1 when absent"`
}

// ArrangementLattice bounds the proportions of a parallel-chord lattice.
type ArrangementLattice struct {
	MinDepth      float64  `json:"min_depth_m,omitempty" doc:"between chord axes; length/18 when absent"`
	MaxDepth      float64  `json:"max_depth_m,omitempty" doc:"length/10 when absent"`
	Depths        int      `json:"depths,omitempty" doc:"how many are tried, 1 to 20; 5 when absent"`
	MinPanel      float64  `json:"min_panel_m,omitempty"`
	MaxPanel      float64  `json:"max_panel_m,omitempty"`
	AtPanelPoints bool     `json:"loads_at_panel_points,omitempty" doc:"else loads also bend the chord between them"`
	Allowance     float64  `json:"allowance,omitempty" doc:"own weight of gussets and plan bracing over that of the drawn members; 0.15 when absent"`
	Chords        []string `json:"chord_candidates,omitempty" doc:"those of the member when absent"`
	Diagonals     []string `json:"diagonal_candidates,omitempty" doc:"those of the chords when absent"`
}

// ArrangementsAnswer are the ways, feasible ones first, each group by mass of steel.
type ArrangementsAnswer struct {
	Caution     string        `json:"caution"`
	Grade       string        `json:"grade"`
	DesignBasis string        `json:"design_basis"`
	Candidates  []Arrangement `json:"candidates" nullable:"false"`
}

// Limits of a study: each candidate section is tried in every way.
const (
	maxStudyLoads = 50
	maxFractions  = 10
	maxDepths     = 20
	maxKinds      = 20
	maxSpansAlong = 20
)

// Arrangements compares ways to hold a length. The error is Faults, or that of ctx.
func Arrangements(ctx context.Context, r ArrangementsRequest) (ArrangementsAnswer, error) {
	s, found, err := StudyArrangements(ctx, r)
	if err != nil {
		return ArrangementsAnswer{}, err
	}
	out := ArrangementsAnswer{Caution: document.Caution, Grade: s.Setup.Grade.Name, DesignBasis: s.Setup.Basis.Name(), Candidates: []Arrangement{}}
	for i := range found {
		out.Candidates = append(out.Candidates, arrangementOf(&found[i]))
	}
	return guarded(out)
}

// study reads the request.
func (r ArrangementsRequest) study() (arrangement.Study, Faults) {
	var f Faults
	if !f.above("/length_m", r.Length, maxLength, "m") {
		return arrangement.Study{}, f
	}
	f.few("/loads", len(r.Loads), maxStudyLoads, "loads")
	sizingLoads(r.Loads, r.Length, r.supports(), &f)
	r.MemberLimits.check(&f)
	r.bounds(&f)
	s := arrangement.Study{Setup: r.setup(&f), Member: r.MemberLimits.member(r.Length, r.Loads), Fractions: r.Fractions, Spans: r.Spans,
		Tail: r.Tail, BallastDensity: r.BallastDensity, Towers: r.Towers.rule(&f), Lattice: r.Lattice.rule(&f),
		Footings: arrangement.FootingRule{Bearing: r.Footings.Bearing * 1e3, Depth: r.Footings.Depth, Least: r.Footings.Least}}
	if r.Safety != 0 {
		s.Stability = arrangement.SafetyFactor(r.Safety)
	} else if r.DesignBasis == "en1993" {
		s.Stability = action.EN1990Equilibrium()
	}
	if len(r.Candidates) == 0 {
		f.add("/candidates", "nothing", "no candidate", "families or designations")
	}
	s.Sections = sections("/candidates", r.Candidates, &f)
	if f.few("/kinds", len(r.Kinds), maxKinds, "kinds") {
		for i, k := range r.Kinds {
			if f.oneOf(item("/kinds", i), k, kindNames()...) {
				s.Kinds = append(s.Kinds, arrangement.Kind(k))
			}
		}
	}
	return s, f
}

// supports is how many supports an arrangement of the study may have.
func (r ArrangementsRequest) supports() int {
	most := 4
	for _, n := range r.Spans {
		most = max(most, min(n, maxSpansAlong)+1)
	}
	return most
}

func kindNames() []string {
	var out []string
	for _, k := range arrangement.Kinds() {
		out = append(out, string(k))
	}
	return out
}

// bounds refuses numbers out of range; 0 stands for the default.
func (r ArrangementsRequest) bounds(f *Faults) {
	L, t, g, l := r.Length, r.Towers, r.Footings, r.Lattice
	for _, x := range []struct {
		name, unit string
		value      float64
		lo, hi     float64
	}{
		{"/tail_m", "m", r.Tail, L / 1e3, 10 * L}, {"/stability_factor", "", r.Safety, 1, 5}, {"/ballast_density_kg_m3", "kg/m³", r.BallastDensity, 500, 2e4},
		{"/towers/height_m", "m", t.Height, 0.1, 1e3}, {"/towers/root_height_m", "m", t.RootHeight, 0.1, 1e3}, {"/towers/legs", "", float64(t.Legs), 1, 4},
		{"/towers/spread_m", "m", t.Spread, 0.01, 1e3}, {"/towers/length_factor", "", t.Factor, 0.1, 10}, {"/towers/bracing", "", t.Bracing, 0, 10},
		{"/towers/wind_kn_m", "kN/m", t.Wind, 0, 1e4}, {"/footings/bearing_kpa", "kPa", g.Bearing, 1, 1e5}, {"/footings/depth_m", "m", g.Depth, 0.1, 100},
		{"/footings/least_m3", "m³", g.Least, 0, 1e5}, {"/lattice/min_depth_m", "m", l.MinDepth, L / 100, L}, {"/lattice/max_depth_m", "m", l.MaxDepth, L / 100, L},
		{"/lattice/depths", "", float64(l.Depths), 1, maxDepths}, {"/lattice/min_panel_m", "m", l.MinPanel, L / 100, L / 2},
		{"/lattice/max_panel_m", "m", l.MaxPanel, L / 100, L}, {"/lattice/allowance", "", l.Allowance, 0, 10},
	} {
		if x.value != 0 {
			f.within(x.name, x.value, x.lo, x.hi, x.unit)
		}
	}
	if f.few("/inner_fractions", len(r.Fractions), maxFractions, "fractions") {
		for i, x := range r.Fractions {
			f.within(item("/inner_fractions", i), x, 0.01, 1, "of the length")
		}
	}
	if f.few("/equal_spans", len(r.Spans), maxFractions, "numbers of spans") {
		for i, n := range r.Spans {
			f.within(item("/equal_spans", i), float64(n), 2, maxSpansAlong, "spans")
		}
	}
}

func (t ArrangementTowers) rule(f *Faults) arrangement.TowerRule {
	return arrangement.TowerRule{Height: t.Height, RootHeight: t.RootHeight, Legs: t.Legs, Spread: t.Spread, Factor: t.Factor, Bracing: t.Bracing,
		Wind: t.Wind * 1e3, Sections: sections("/towers/candidates", t.Sections, f)}
}

func (l ArrangementLattice) rule(f *Faults) arrangement.LatticeRule {
	return arrangement.LatticeRule{MinDepth: l.MinDepth, MaxDepth: l.MaxDepth, Depths: l.Depths, MinPanel: l.MinPanel, MaxPanel: l.MaxPanel,
		AtPanelPoints: l.AtPanelPoints, Allowance: l.Allowance, Chords: sections("/lattice/chord_candidates", l.Chords, f),
		Diagonals: sections("/lattice/diagonal_candidates", l.Diagonals, f)}
}
