package calculator

import (
	"cmp"
	"errors"
	"slices"
	"strings"

	"spanwright/estimate/document"
	"spanwright/structural/action"
	"spanwright/structural/beam"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// MemberLimits are what a member has to keep to, and the lengths that its checks go by.
type MemberLimits struct {
	RestraintSpacing float64 `json:"restraint_spacing_m,omitempty" doc:"between lateral restraints; the longest span when absent"`
	LengthFactor     float64 `json:"length_factor,omitempty" doc:"effective length factor K; 1 for spans, 2 for overhangs when absent"`
	MomentFactor     float64 `json:"moment_factor,omitempty" doc:"C1 (EN 1993) or Cb (AISC 360) of the governing unrestrained length; 1 when absent, which is safe"`
	NetAreaFactor    float64 `json:"net_area_factor,omitempty" doc:"net over gross area in tension; 1 when absent"`
	DeflectionLimit  float64 `json:"deflection_limit,omitempty" doc:"n of span/n, and of twice the length over n for overhangs; no limit when absent"`
	FrequencyFloor   float64 `json:"frequency_floor_hz,omitempty" doc:"least first natural frequency; no check when absent"`
	MassShare        float64 `json:"mass_share,omitempty" doc:"share of the downward variable loads whose mass is there with the frequency, 0 to 1"`
	MaxDepth         float64 `json:"max_depth_mm,omitempty"`
	MaxWidth         float64 `json:"max_width_mm,omitempty"`
	StockLength      float64 `json:"stock_length_m,omitempty" doc:"longest piece that can be had; a longer member is warned of"`
}

func (l MemberLimits) check(f *Faults) {
	for _, x := range []struct {
		name, unit string
		value, lo  float64
		hi         float64
	}{
		{"/restraint_spacing_m", "m", l.RestraintSpacing, 1e-3, maxLength}, {"/length_factor", "", l.LengthFactor, 0.1, 10},
		{"/moment_factor", "", l.MomentFactor, 0.1, 10}, {"/net_area_factor", "", l.NetAreaFactor, 0.01, 1},
		{"/deflection_limit", "", l.DeflectionLimit, 1, 1e5}, {"/frequency_floor_hz", "Hz", l.FrequencyFloor, 1e-3, 1e4},
		{"/mass_share", "", l.MassShare, 0, 1}, {"/max_depth_mm", "mm", l.MaxDepth, 1, 1e5}, {"/max_width_mm", "mm", l.MaxWidth, 1, 1e5},
		{"/stock_length_m", "m", l.StockLength, 0.1, maxLength},
	} {
		if x.value != 0 {
			f.within(x.name, x.value, x.lo, x.hi, x.unit)
		}
	}
}

// member starts a member of the length with the limits and the loads.
func (l MemberLimits) member(length float64, list []BeamLoad) sizing.Member {
	m := sizing.Member{Length: length, RestraintSpacing: l.RestraintSpacing, LengthFactor: l.LengthFactor, MomentFactor: l.MomentFactor,
		NetAreaFactor: l.NetAreaFactor, DeflectionLimit: l.DeflectionLimit, FrequencyFloor: l.FrequencyFloor, MassShare: l.MassShare,
		MaxDepth: l.MaxDepth / 1e3, MaxWidth: l.MaxWidth / 1e3, StockLength: l.StockLength}
	for i := range list {
		m.Actions = append(m.Actions, list[i].action())
	}
	return m
}

// Steel is what members are made of and checked by.
type Steel struct {
	Candidates []string `json:"candidates" minItems:"1" maxItems:"1000" nullable:"false" doc:"families to size from and designations, such as IPE or HEB 200"`
	Grade      string   `json:"grade" doc:"steel grade, such as S355 or A992"`
	Basis
	Factors *LoadFactors `json:"factors,omitempty" doc:"of strength, in place of the combinations of the design basis"`
	Service *LoadFactors `json:"service_factors,omitempty" doc:"of deflection, in place of those of the design basis"`
}

func (s Steel) setup(f *Faults) sizing.Setup {
	out := sizing.Setup{Basis: s.basis(f), Gravity: gravity}
	out.Grade, _ = gradeOf("/grade", s.Grade, f)
	if out.Basis == nil {
		return out
	}
	out.Strength, out.Service, _ = action.Sets(s.DesignBasis) // of a basis that there is there is no error
	if s.Factors != nil {
		out.Strength = []action.Combination{s.Factors.combination("/factors", "request", f)}
	}
	if s.Service != nil {
		out.Service = s.Service.combination("/service_factors", "request, service", f)
	}
	return out
}

// sections are the candidates of a list of families and designations, lightest
// first, each once; those of a family that the grade does not come in are left to
// sizing.
func sections(at string, list []string, f *Faults) []section.Section {
	var out []section.Section
	for i, text := range list {
		if len(out) > MaxSections {
			break
		}
		if family, ok := section.IsFamily(text); ok {
			series, err := section.Series(family)
			if err != nil {
				f.unknown(item(at, i), text, err)
			}
			out = append(out, series...)
			continue
		}
		if s, ok := sectionOf(item(at, i), text, f); ok {
			out = append(out, s)
		}
	}
	f.few(at, len(out), MaxSections, "sections, families counted by their sizes")
	slices.SortFunc(out, func(a, b section.Section) int {
		return cmp.Or(cmp.Compare(a.Mass, b.Mass), cmp.Compare(a.Designation, b.Designation))
	})
	return slices.CompactFunc(out, func(a, b section.Section) bool { return a.Designation == b.Designation })
}

// SizingRequest asks for the section of one member.
type SizingRequest struct {
	Length         float64       `json:"length_m" doc:"above 0, up to 10000"`
	Supports       []BeamSupport `json:"supports,omitempty" maxItems:"51" doc:"pinned or fixed; none for an upright member without loads across it"`
	Loads          []BeamLoad    `json:"loads,omitempty" maxItems:"200" doc:"of every kind but curvature"`
	Axial          float64       `json:"axial_kn,omitempty" doc:"variable, compression positive"`
	PermanentAxial float64       `json:"permanent_axial_kn,omitempty" doc:"compression positive"`
	Upright        bool          `json:"upright,omitempty" doc:"a strut or column: own weight acts along it"`
	Objective      string        `json:"objective,omitempty" enum:"lightest,shallowest" doc:"lightest when absent"`
	MemberLimits
	Steel
}

// SizingAnswer is the chosen section with everything that speaks for and against it.
type SizingAnswer struct {
	Caution     string              `json:"caution"`
	Passes      bool                `json:"passes" doc:"where no candidate does, section is the nearest miss"`
	Section     string              `json:"section"`
	Grade       string              `json:"grade"`
	DesignBasis string              `json:"design_basis"`
	LineMass    Number              `json:"mass_kg_m"`
	Mass        Number              `json:"mass_kg" doc:"of one piece, nominal"`
	Governing   string              `json:"governing_check"`
	Utilisation Number              `json:"utilisation"`
	Combination string              `json:"combination" doc:"under which the governing check is highest"`
	Checks      []document.Check    `json:"checks" nullable:"false"`
	Rejected    []document.Rejected `json:"lighter_rejected" nullable:"false" doc:"the next ones below by the objective, and why they fail"`
	Skipped     []SkippedSection    `json:"skipped" nullable:"false"`
	TotalLoad   Number              `json:"total_load_kn" doc:"permanent, variable and own weight under the service combination"`
	SelfWeight  Number              `json:"self_weight_kn" doc:"without factor"`
	Spans       []BeamSpan          `json:"spans" nullable:"false" doc:"under the service combination"`
	Reactions   []document.Reaction `json:"reactions" nullable:"false" doc:"exact envelope under the service combination"`
	Ratios      []document.Ratio    `json:"split_ratios" nullable:"false"`
	Unsafe      bool                `json:"unsafe" doc:"the split method alone would be an unsafe shortcut"`
	Warnings    []string            `json:"warnings" nullable:"false"`
	WaysOut     []string            `json:"ways_out" nullable:"false" doc:"what would help, where nothing passes"`
}

// SkippedSection is a candidate that cannot be had, and why.
type SkippedSection struct {
	Section string `json:"section"`
	Reason  string `json:"reason"`
}

// Caps of the work of one sizing: every candidate asks for the envelope of all cases.
const maxSizingTracks = 20_000

// Size chooses a section. A member for which nothing passes is an answer with the
// nearest miss and the ways out. The error is Faults.
func Size(r SizingRequest) (SizingAnswer, error) {
	m, setup, candidates, f := r.read()
	if len(f) > 0 {
		return SizingAnswer{}, f
	}
	p, err := sizing.Prepare(m, setup)
	if err != nil {
		return SizingAnswer{}, fromSizing(err)
	}
	choose := sizing.Lightest
	if r.Objective == "shallowest" {
		choose = func(p *sizing.Prepared, c []section.Section) (sizing.Result, error) {
			return sizing.Best(p, c, func(s *section.Section) float64 { return s.H })
		}
	}
	result, err := choose(p, candidates)
	if err != nil {
		return SizingAnswer{}, Faults{{"/candidates", strings.Join(r.Candidates, ", "), err.Error(), "another family, section or grade"}}
	}
	out := sizingAnswer(result, setup, r.Length)
	return guarded(out)
}

func (r SizingRequest) read() (sizing.Member, sizing.Setup, []section.Section, Faults) {
	var f Faults
	if !f.above("/length_m", r.Length, maxLength, "m") {
		return sizing.Member{}, sizing.Setup{}, nil, f
	}
	held := supports(r.Supports, r.Length, &f)
	for i, s := range r.Supports {
		if s.Kind == "spring" || s.Kind == "guided" || s.RotationalStiffness != 0 || s.Settlement != 0 {
			f.add(item("/supports", i), quoted(s.Kind), "sizing takes stiff supports alone: its moments must not depend on the section", "pinned or fixed, without stiffness or settlement")
		}
	}
	if len(held) == 0 && !(r.Upright && len(r.Loads) == 0) {
		f.add("/supports", "no support", "nothing holds the member", "pinned or fixed supports, or none for an upright member without loads across it")
	}
	sizingLoads(r.Loads, r.Length, len(held), &f)
	f.signed("/axial_kn", r.Axial, maxForce, "kN")
	f.signed("/permanent_axial_kn", r.PermanentAxial, maxForce, "kN")
	f.oneOf("/objective", r.Objective, "lightest", "shallowest", "")
	r.MemberLimits.check(&f)
	setup := r.setup(&f)
	if len(r.Candidates) == 0 {
		f.add("/candidates", "nothing", "no candidate", "families or designations")
	}
	list := sections("/candidates", r.Candidates, &f)
	m := r.MemberLimits.member(r.Length, r.Loads)
	m.Supports, m.Axial, m.PermanentAxial, m.Upright = held, r.Axial*1e3, r.PermanentAxial*1e3, r.Upright
	return m, setup, list, f
}

// sizingLoads refuses loads that sizing does not take, and too many of them.
func sizingLoads(list []BeamLoad, length float64, supports int, f *Faults) {
	loads(list, length, supports-1, f)
	n := 1
	for i, l := range list {
		n++
		if l.Kind == "curvature" {
			f.add(item("/loads", i)+"/kind", `"curvature"`, "sizing takes no imposed curvature: its moments would depend on the section", "the beam calculator")
		}
		if l.Free {
			n += supports
		}
	}
	f.few("/loads", n*(supports+2*len(list)), maxSizingTracks, "load cases times places where something changes")
}

// fromSizing places an error of sizing: of the beam where it is one, else each line.
func fromSizing(err error) Faults {
	var b *beam.Fault
	if errors.As(err, &b) {
		return Faults{{beamPointer(b.Part), b.Found, string(b.Kind) + " at " + number(b.Where) + " m", b.Accepted}}
	}
	var f Faults
	for line := range strings.SplitSeq(err.Error(), "\n") {
		f.add("", "the member", line, "what the problem says")
	}
	return f
}

func sizingAnswer(r sizing.Result, setup sizing.Setup, length float64) SizingAnswer {
	out := SizingAnswer{
		Caution: document.Caution, Passes: r.Passes, Section: r.Section.Designation, Grade: setup.Grade.Name, DesignBasis: setup.Basis.Name(),
		LineMass: Number(r.Section.Mass), Mass: Number(r.Section.Mass * length), Governing: r.Governing, Utilisation: Number(r.Utilisation),
		Combination: r.Combination, Checks: checksOf(r.Checks), Rejected: []document.Rejected{}, Skipped: []SkippedSection{},
		TotalLoad: Number(r.TotalLoad / 1e3), SelfWeight: Number(r.SelfWeight / 1e3), Spans: []BeamSpan{}, Reactions: []document.Reaction{},
		Ratios: ratiosOf(r.Ratios), Unsafe: r.Unsafe, Warnings: append([]string{}, r.Warnings...), WaysOut: append([]string{}, r.WaysOut...),
	}
	for _, x := range r.LighterRejected {
		out.Rejected = append(out.Rejected, document.Rejected{Section: x.Section, Check: x.Check, Utilisation: Number(x.Utilisation)})
	}
	for _, x := range r.Skipped {
		out.Skipped = append(out.Skipped, SkippedSection{x.Section, x.Reason})
	}
	if len(r.Envelope.Reactions) > 0 {
		out.Spans = spansOf(r.Envelope)
	}
	for _, x := range r.Envelope.Reactions {
		moment := x.MMax
		if -x.MMin > moment {
			moment = x.MMin
		}
		out.Reactions = append(out.Reactions, document.Reaction{Position: Number(x.X), Max: Number(x.FMax / 1e3), Min: Number(x.FMin / 1e3), Moment: Number(moment / 1e3)})
	}
	return out
}
