package calculator

import "spanwright/estimate/document"

// Number is a figure of an answer: a float64 printed to 12 significant digits.
type Number = document.Number

// BeamRequest asks for the analysis of one member in one plane.
type BeamRequest struct {
	Length   float64       `json:"length_m" doc:"above 0, up to 10000"`
	Supports []BeamSupport `json:"supports,omitempty" maxItems:"51" doc:"any order; none where place_supports places them all"`
	Section  string        `json:"section,omitempty" doc:"designation of a constant section, such as IPE 300; its own weight is added"`
	Grade    string        `json:"grade,omitempty" doc:"steel grade of the sections: gives E and density; S355 when absent"`
	Segments []BeamSegment `json:"segments,omitempty" maxItems:"50" doc:"stretches of constant stiffness, left to right, in place of section"`
	Hinges   []float64     `json:"hinges_m,omitempty" maxItems:"50" doc:"places inside the member where the moment is zero"`
	Loads    []BeamLoad    `json:"loads,omitempty" maxItems:"200" doc:"at most 32 wheels of all trains, and 100 wheels times spans"`
	Masses   []BeamMass    `json:"masses,omitempty" maxItems:"50" doc:"masses that vibrate with the member besides its own and those of permanent downward loads"`
	Basis    string        `json:"design_basis,omitempty" enum:"allowable,en1993,aisc-asd,aisc-lrfd" doc:"takes the combinations of a design basis"`
	Factors  *LoadFactors  `json:"factors,omitempty" doc:"of moments, shears and reactions, in place of design_basis; all 1 when both are absent"`
	Service  *LoadFactors  `json:"service_factors,omitempty" doc:"of deflections; all 1 when absent"`
	Place    *BeamPlace    `json:"place_supports,omitempty" doc:"asks for the best positions of more, pinned supports; at most 12 supports then, and 80 loads times supports to be placed"`
	Stations int           `json:"stations,omitempty" doc:"of the diagrams, 2 to 401; 101 when absent. Supports, jumps and extremes come on top while there is room"`
}

// BeamSegment is a stretch of constant stiffness up to a place.
type BeamSegment struct {
	To      float64 `json:"to_m" doc:"its end from the left end; the last ends at the member's length"`
	EI      float64 `json:"ei_knm2,omitempty" doc:"bending stiffness, in place of section"`
	Section string  `json:"section,omitempty" doc:"designation, in place of ei_knm2"`
	Mass    float64 `json:"mass_kg_m,omitempty" doc:"own mass beside ei_knm2; its weight is added"`
}

// BeamMass is a stretch of mass.
type BeamMass struct {
	From     float64 `json:"from_m"`
	To       float64 `json:"to_m"`
	PerMetre float64 `json:"mass_kg_m"`
}

// BeamPlace asks for the best positions of supports.
type BeamPlace struct {
	Count     int    `json:"count" doc:"pinned supports to be placed, 1 to 8"`
	Symmetric bool   `json:"symmetric,omitempty" doc:"in pairs, mirrored about the middle; the count is even"`
	Goal      string `json:"goal" enum:"least moment,least deflection,parallel ends,least shortening"`
}

// BeamExtreme is a value and where it stands; its unit stands in the field's name.
type BeamExtreme struct {
	Value    Number `json:"value"`
	Position Number `json:"position_m"`
}

// BeamEffects are the extremes over a stretch, or over the whole member.
type BeamEffects struct {
	MomentMax     BeamExtreme `json:"moment_max_knm" doc:"sagging positive"`
	MomentMin     BeamExtreme `json:"moment_min_knm"`
	ShearMax      BeamExtreme `json:"shear_max_kn" doc:"positive where the part to the left is pushed up"`
	ShearMin      BeamExtreme `json:"shear_min_kn"`
	DeflectionMax BeamExtreme `json:"deflection_max_mm" doc:"down positive, under the service factors"`
	DeflectionMin BeamExtreme `json:"deflection_min_mm"`
}

// BeamSpan is one span or overhang.
type BeamSpan struct {
	Name     string `json:"name"`
	From     Number `json:"from_m"`
	To       Number `json:"to_m"`
	Overhang bool   `json:"overhang"`
	BeamEffects
}

// BeamReaction bounds the reaction of one support.
type BeamReaction struct {
	Position  Number `json:"position_m"`
	Kind      string `json:"kind"`
	Max       Number `json:"max_kn" doc:"up positive"`
	Min       Number `json:"min_kn" doc:"below 0 it has to be held down"`
	MomentMax Number `json:"moment_max_knm" doc:"clockwise positive"`
	MomentMin Number `json:"moment_min_knm"`
}

// BeamStation is one place of the diagrams; at a jump there are two, first as seen
// from the left.
type BeamStation struct {
	Position      Number `json:"position_m"`
	MomentMax     Number `json:"moment_max_knm"`
	MomentMin     Number `json:"moment_min_knm"`
	ShearMax      Number `json:"shear_max_kn"`
	ShearMin      Number `json:"shear_min_kn"`
	DeflectionMax Number `json:"deflection_max_mm"`
	DeflectionMin Number `json:"deflection_min_mm"`
}

// BeamSplit is what the split method says, and how far it may be believed.
type BeamSplit struct {
	Pieces    []BeamPiece      `json:"pieces" nullable:"false"`
	Reactions []BeamReaction   `json:"reactions" nullable:"false"`
	Ratios    []document.Ratio `json:"ratios" nullable:"false"`
	Unsafe    bool             `json:"unsafe" doc:"a ratio lies below 1: the split method alone would be an unsafe shortcut"`
}

// BeamPiece is one handbook beam of the split member.
type BeamPiece struct {
	Handbook string `json:"handbook" doc:"simple span, cantilever, propped cantilever or fixed both ends"`
	From     Number `json:"from_m"`
	To       Number `json:"to_m"`
	BeamEffects
}

// BeamTrain are the extremes under one train alone, dynamic factor included,
// combination factors not.
type BeamTrain struct {
	Load          int                `json:"load" doc:"index in loads, from 0"`
	Label         string             `json:"label,omitempty"`
	MomentMax     BeamTrainExtreme   `json:"moment_max_knm"`
	MomentMin     BeamTrainExtreme   `json:"moment_min_knm"`
	ShearMax      BeamTrainExtreme   `json:"shear_max_kn"`
	ShearMin      BeamTrainExtreme   `json:"shear_min_kn"`
	DeflectionMax BeamTrainExtreme   `json:"deflection_max_mm"`
	Reactions     []BeamTrainExtreme `json:"reactions_max_kn" nullable:"false"`
}

// BeamTrainExtreme is a value, where it stands and where the train then stands.
type BeamTrainExtreme struct {
	Value     Number `json:"value"`
	Position  Number `json:"position_m"`
	Lead      Number `json:"lead_m" doc:"the leading wheel, perhaps off the member"`
	Direction int    `json:"direction" doc:"1 to the right, −1 to the left, 0 without a wheel on the member"`
}

// BeamPlacement is where the supports asked for stand best.
type BeamPlacement struct {
	Goal      string   `json:"goal"`
	Positions []Number `json:"positions_m" nullable:"false"`
	Value     Number   `json:"value" doc:"what the goal makes least"`
	Unit      string   `json:"unit"`
}

// BeamAnswer is the analysed member. The supports placed are among its reactions.
type BeamAnswer struct {
	Caution      string         `json:"caution"`
	Length       Number         `json:"length_m"`
	SelfWeight   Number         `json:"self_weight_kn" doc:"without factor"`
	Combinations []Combination  `json:"combinations" nullable:"false" doc:"of moments, shears and reactions: the worst at each place"`
	Service      Combination    `json:"service_combination" doc:"of deflections"`
	Effects      BeamEffects    `json:"extremes"`
	Spans        []BeamSpan     `json:"spans" nullable:"false"`
	Reactions    []BeamReaction `json:"reactions" nullable:"false"`
	Stations     []BeamStation  `json:"stations" nullable:"false"`
	Frequency    *Number        `json:"first_frequency_hz,omitempty" doc:"absent without a mass"`
	Split        *BeamSplit     `json:"split_method,omitempty" doc:"absent where the method cannot cut the member; notes say why"`
	Trains       []BeamTrain    `json:"trains,omitempty"`
	Placement    *BeamPlacement `json:"placement,omitempty"`
	Hinges       []Number       `json:"hinges_m,omitempty"`
	Notes        []string       `json:"notes" nullable:"false"`
}
