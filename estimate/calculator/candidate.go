package calculator

import (
	"spanwright/estimate/document"
	"spanwright/structural/arrangement"
	"spanwright/structural/sizing"
)

// Arrangement is one way to hold the length, with all that it needs. Places are
// measured from the root, negative behind it.
type Arrangement struct {
	Name        string               `json:"name"`
	Kind        string               `json:"kind"`
	Feasible    bool                 `json:"feasible"`
	Reason      string               `json:"reason,omitempty" doc:"why it is not feasible"`
	WaysOut     []string             `json:"ways_out" nullable:"false"`
	Governing   string               `json:"governing_check" doc:"part and check with the highest utilisation"`
	Utilisation Number               `json:"utilisation"`
	Deflection  Number               `json:"deflection_mm" doc:"largest of the main member, service combination"`
	DeflectedAt Number               `json:"deflection_position_m"`
	Mass        ArrangementMass      `json:"mass"`
	Member      ArrangementPart      `json:"member" doc:"the main member; of a lattice its chord"`
	Diagonal    *ArrangementPart     `json:"diagonal,omitempty"`
	Truss       *ArrangementTruss    `json:"lattice,omitempty"`
	Supports    []ArrangementSupport `json:"supports" nullable:"false"`
	Towers      []ArrangementTower   `json:"towers" nullable:"false"`
	Ballast     *ArrangementBallast  `json:"ballast,omitempty"`
	Footings    []ArrangementBase    `json:"footings" nullable:"false"`
	Concrete    Number               `json:"footings_m3" doc:"sum of the footings"`
	Unsafe      bool                 `json:"unsafe" doc:"the split method alone would be an unsafe shortcut for the main member"`
	Ratios      []document.Ratio     `json:"split_ratios" nullable:"false"`
	Notes       []ArrangementNote    `json:"notes" nullable:"false"`
}

// ArrangementMass is what an arrangement weighs, without connections.
type ArrangementMass struct {
	Member  Number `json:"member_kg"`
	Legs    Number `json:"legs_kg"`
	Bracing Number `json:"bracing_kg"`
	Steel   Number `json:"steel_kg"`
	Ballast Number `json:"ballast_kg"`
}

// ArrangementPart is a sized part.
type ArrangementPart struct {
	Section     string           `json:"section"`
	Passes      bool             `json:"passes"`
	Governing   string           `json:"governing_check"`
	Utilisation Number           `json:"utilisation"`
	LineMass    Number           `json:"mass_kg_m"`
	Checks      []document.Check `json:"checks" nullable:"false"`
}

// ArrangementTruss are the proportions of a lattice.
type ArrangementTruss struct {
	Panels      int    `json:"panels"`
	Panel       Number `json:"panel_m"`
	Depth       Number `json:"depth_m" doc:"between chord axes"`
	Compression Number `json:"chord_compression_kn"`
	Tension     Number `json:"chord_tension_kn"`
	Force       Number `json:"diagonal_force_kn"`
	Shear       Number `json:"shear_deflection_mm" doc:"what the diagonals add to the deflection"`
}

// ArrangementSupport is one support with its exact, characteristic reactions.
type ArrangementSupport struct {
	Position  Number `json:"position_m"`
	Kind      string `json:"kind"`
	Role      string `json:"role"`
	Max       Number `json:"max_kn"`
	Min       Number `json:"min_kn"`
	Permanent Number `json:"permanent_kn"`
	Couple    Number `json:"couple_knm"`
	Side      Number `json:"side_kn"`
	Least     Number `json:"least_kn" doc:"under the factors of stability"`
	Lifted    bool   `json:"lifted" doc:"it has to be held down"`
}

// ArrangementTower is the legs under one support.
type ArrangementTower struct {
	Position    Number          `json:"position_m"`
	Height      Number          `json:"height_m"`
	Legs        int             `json:"legs"`
	Leg         ArrangementPart `json:"leg"`
	Compression Number          `json:"leg_compression_kn" doc:"characteristic"`
	Tension     Number          `json:"leg_tension_kn"`
	Overturning Number          `json:"overturning_knm"`
	LegMass     Number          `json:"legs_kg"`
	BracingMass Number          `json:"bracing_kg"`
}

// ArrangementBallast is the counterweight of a cantilever.
type ArrangementBallast struct {
	Mass        Number `json:"mass_kg"`
	Volume      Number `json:"volume_m3"`
	Arm         Number `json:"lever_arm_m"`
	Overturning Number `json:"overturning_knm"`
	Holding     Number `json:"holding_knm" doc:"without the counterweight"`
	Safety      Number `json:"safety" doc:"holding with the counterweight over overturning; 0 where nothing lifts"`
}

// ArrangementBase is a footing.
type ArrangementBase struct {
	Position Number `json:"position_m"`
	Count    int    `json:"count"`
	Force    Number `json:"force_kn"`
	Uplift   Number `json:"uplift_kn"`
	Width    Number `json:"width_m"`
	Depth    Number `json:"depth_m"`
	Volume   Number `json:"volume_m3" doc:"of one"`
	Governs  string `json:"governs"`
}

// ArrangementNote is one thing assumed, left out or taken by default; values in SI.
type ArrangementNote struct {
	ID        string             `json:"id"`
	Clause    string             `json:"clause"`
	Statement string             `json:"statement"`
	Values    []document.Measure `json:"values" nullable:"false"`
}

// arrangementOf writes a candidate in kN, kNm and mm.
func arrangementOf(c *arrangement.Candidate) Arrangement {
	kilo := func(v float64) Number { return Number(v / 1e3) }
	out := Arrangement{Name: c.Name, Kind: string(c.Kind), Feasible: c.Feasible, Reason: c.Reason, WaysOut: append([]string{}, c.WaysOut...),
		Governing: c.Governing, Utilisation: Number(c.Utilisation), Deflection: Number(c.Deflection.Value * 1e3), DeflectedAt: Number(c.Deflection.X),
		Mass: ArrangementMass{Member: Number(c.Mass.Member), Legs: Number(c.Mass.Legs), Bracing: Number(c.Mass.Bracing),
			Steel: Number(c.Mass.Steel), Ballast: Number(c.Mass.Ballast)},
		Member: partOf(&c.Result), Supports: []ArrangementSupport{}, Towers: []ArrangementTower{}, Footings: []ArrangementBase{},
		Concrete: Number(c.Volume()), Unsafe: c.Result.Unsafe, Ratios: ratiosOf(c.Result.Ratios), Notes: []ArrangementNote{}}
	for _, s := range c.Supports {
		out.Supports = append(out.Supports, ArrangementSupport{Position: Number(s.X), Kind: s.Kind.String(), Role: string(s.Role), Max: kilo(s.Max), Min: kilo(s.Min),
			Permanent: kilo(s.Permanent), Couple: kilo(s.Couple), Side: kilo(s.Side), Least: kilo(s.Least), Lifted: s.Lifted()})
	}
	for i := range c.Towers {
		t := &c.Towers[i]
		out.Towers = append(out.Towers, ArrangementTower{Position: Number(t.X), Height: Number(t.Height), Legs: t.Legs, Leg: partOf(&t.Leg),
			Compression: kilo(t.Compression), Tension: kilo(t.Tension), Overturning: kilo(t.Overturning), LegMass: Number(t.LegMass), BracingMass: Number(t.BracingMass)})
	}
	for _, b := range c.Footings {
		out.Footings = append(out.Footings, ArrangementBase{Position: Number(b.X), Count: b.Count, Force: kilo(b.Force), Uplift: kilo(b.Uplift),
			Width: Number(b.Width), Depth: Number(b.Depth), Volume: Number(b.Volume), Governs: b.Governs})
	}
	if b := c.Ballast; b != nil {
		out.Ballast = &ArrangementBallast{Mass: Number(b.Mass), Volume: Number(b.Volume), Arm: Number(b.Arm), Overturning: kilo(b.Overturning),
			Holding: kilo(b.Holding), Safety: Number(b.Safety)}
	}
	if t := c.Truss; t != nil {
		diagonal := partOf(&t.Diagonal)
		out.Diagonal = &diagonal
		out.Truss = &ArrangementTruss{Panels: t.Panels, Panel: Number(t.Panel), Depth: Number(t.Depth), Compression: kilo(t.Compression),
			Tension: kilo(t.Tension), Force: kilo(t.Force), Shear: Number(t.Deflection.Shear * 1e3)}
	}
	for _, n := range c.Notes {
		out.Notes = append(out.Notes, noteOf(n))
	}
	return out
}

func partOf(r *sizing.Result) ArrangementPart {
	return ArrangementPart{Section: r.Section.Designation, Passes: r.Passes, Governing: r.Governing, Utilisation: Number(r.Utilisation),
		LineMass: Number(r.Section.Mass), Checks: checksOf(r.Checks)}
}

func noteOf(n arrangement.Note) ArrangementNote {
	out := ArrangementNote{ID: n.ID, Clause: n.Clause, Statement: n.Statement, Values: []document.Measure{}}
	for _, q := range n.Values {
		out.Values = append(out.Values, document.Measure{Symbol: q.Symbol, Value: Number(q.Value), Unit: q.Unit})
	}
	return out
}
