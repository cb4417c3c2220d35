package calculator

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
)

// simple is a request that is accepted; the refusals change one thing in it.
func simple() BeamRequest {
	return BeamRequest{Length: 10, Section: "IPE 300", Supports: pinned(0, 10), Loads: []BeamLoad{{Kind: "uniform", Load: 5}}}
}

// refusedAt fails unless the error is Faults with one at the pointer that says what
// was found and what would be accepted.
func refusedAt(t *testing.T, name string, err error, pointer string) {
	t.Helper()
	var f Faults
	if !errors.As(err, &f) {
		t.Errorf("%s: %v, want faults", name, err)
		return
	}
	found := false
	for _, x := range f {
		found = found || x.Pointer == pointer
		if x.Found == "" || x.Problem == "" || x.Remedy == "" {
			t.Errorf("%s: fault %+v is silent about something", name, x)
		}
	}
	if !found {
		t.Errorf("%s: no fault at %q in\n%v", name, pointer, err)
	}
}

var nan, inf = math.NaN(), math.Inf(1)

func with(change func(*BeamRequest)) BeamRequest {
	r := simple()
	change(&r)
	return r
}

func loaded(l ...BeamLoad) BeamRequest { return with(func(r *BeamRequest) { r.Loads = l }) }

func TestBeamRefusals(t *testing.T) {
	if _, err := Beam(simple()); err != nil {
		t.Fatal(err)
	}
	end := 1.0
	for name, row := range map[string]struct {
		request BeamRequest
		pointer string
	}{
		"no length":                 {with(func(r *BeamRequest) { r.Length = 0 }), "/length_m"},
		"length no number":          {with(func(r *BeamRequest) { r.Length = nan }), "/length_m"},
		"length too large":          {with(func(r *BeamRequest) { r.Length = 10001 }), "/length_m"},
		"no support":                {with(func(r *BeamRequest) { r.Supports = nil }), "/supports"},
		"support off the member":    {with(func(r *BeamRequest) { r.Supports[1].Position = 11 }), "/supports/1/position_m"},
		"support nowhere":           {with(func(r *BeamRequest) { r.Supports[1].Position = nan }), "/supports/1/position_m"},
		"two at one place":          {with(func(r *BeamRequest) { r.Supports[1].Position = 0 }), "/supports/1"},
		"one pinned: a mechanism":   {with(func(r *BeamRequest) { r.Supports = r.Supports[:1] }), ""},
		"unknown support":           {with(func(r *BeamRequest) { r.Supports[0].Kind = "glued" }), "/supports/0/kind"},
		"spring without stiffness":  {with(func(r *BeamRequest) { r.Supports[0].Kind = "spring" }), "/supports/0/stiffness_kn_m"},
		"pinned with stiffness":     {with(func(r *BeamRequest) { r.Supports[0].Stiffness = 5 }), "/supports/0/stiffness_kn_m"},
		"fixed with turning spring": {with(func(r *BeamRequest) { r.Supports[0].Kind = "fixed"; r.Supports[0].RotationalStiffness = 5 }), "/supports/0/rotational_stiffness_knm_rad"},
		"negative turning spring":   {with(func(r *BeamRequest) { r.Supports[0].RotationalStiffness = -5 }), "/supports/0/rotational_stiffness_knm_rad"},
		"guided that settles":       {with(func(r *BeamRequest) { r.Supports[0].Kind = "guided"; r.Supports[0].Settlement = 5 }), "/supports/0/settlement_mm"},
		"settlement no number":      {with(func(r *BeamRequest) { r.Supports[0].Settlement = inf }), "/supports/0/settlement_mm"},
		"no stiffness":              {with(func(r *BeamRequest) { r.Section = "" }), "/section"},
		"unknown section":           {with(func(r *BeamRequest) { r.Section = "IPE 301" }), "/section"},
		"unknown grade":             {with(func(r *BeamRequest) { r.Grade = "S356" }), "/grade"},
		"section and segments":      {with(func(r *BeamRequest) { r.Segments = []BeamSegment{{To: 10, EI: 1}} }), "/segments"},
		"segment without stiffness": {with(func(r *BeamRequest) { r.Section = ""; r.Segments = []BeamSegment{{To: 10}} }), "/segments/0/ei_knm2"},
		"segment with two":          {with(func(r *BeamRequest) { r.Section = ""; r.Segments = []BeamSegment{{To: 10, EI: 1, Section: "IPE 300"}} }), "/segments/0/section"},
		"segments that end early":   {with(func(r *BeamRequest) { r.Section = ""; r.Segments = []BeamSegment{{To: 9, EI: 1}} }), "/segments/0/to_m"},
		"segments out of order":     {with(func(r *BeamRequest) { r.Section = ""; r.Segments = []BeamSegment{{To: 5, EI: 1}, {To: 4, EI: 1}} }), "/segments/1/to_m"},
		"segments too unlike": {with(func(r *BeamRequest) {
			r.Section, r.Segments = "", []BeamSegment{{To: 4.99999, EI: 1e9}, {To: 5.00001, EI: 1e-9}, {To: 10, EI: 1e9}}
			r.Supports[0].Kind, r.Supports[1].Kind = "fixed", "fixed"
		}), ""},
		"hinge at the end":           {with(func(r *BeamRequest) { r.Hinges = []float64{10} }), "/hinges_m/0"},
		"hinge that lets it fall":    {with(func(r *BeamRequest) { r.Hinges = []float64{5} }), ""},
		"two hinges at one place":    {with(func(r *BeamRequest) { r.Supports[0].Kind = "fixed"; r.Hinges = []float64{5, 5} }), "/hinges_m/1"},
		"mass below 0":               {with(func(r *BeamRequest) { r.Masses = []BeamMass{{To: 5, PerMetre: -1}} }), "/masses/0/mass_kg_m"},
		"mass nowhere":               {with(func(r *BeamRequest) { r.Masses = []BeamMass{{From: 5, To: 5, PerMetre: 1}} }), "/masses/0/to_m"},
		"unknown basis":              {with(func(r *BeamRequest) { r.Basis = "en1994" }), "/design_basis"},
		"basis and factors":          {with(func(r *BeamRequest) { r.Basis = "en1993"; r.Factors = &LoadFactors{Permanent: 1} }), "/factors"},
		"factors of 0":               {with(func(r *BeamRequest) { r.Factors = &LoadFactors{} }), "/factors"},
		"factor no number":           {with(func(r *BeamRequest) { r.Factors = &LoadFactors{Permanent: nan, Variable: 1} }), "/factors/permanent"},
		"favourable over permanent":  {with(func(r *BeamRequest) { r.Factors = &LoadFactors{Permanent: 1, Favourable: 1.1, Variable: 1} }), "/factors/permanent_favourable"},
		"accompanying over 1":        {with(func(r *BeamRequest) { r.Service = &LoadFactors{Permanent: 1, Variable: 1, Accompanying: 2} }), "/service_factors/accompanying"},
		"too few stations":           {with(func(r *BeamRequest) { r.Stations = 1 }), "/stations"},
		"too many stations":          {with(func(r *BeamRequest) { r.Stations = MaxStations + 1 }), "/stations"},
		"place none":                 {with(func(r *BeamRequest) { r.Place = &BeamPlace{Goal: "least moment"} }), "/place_supports/count"},
		"place for an unknown goal":  {with(func(r *BeamRequest) { r.Place = &BeamPlace{Count: 1, Goal: "beauty"} }), "/place_supports/goal"},
		"place three mirrored":       {with(func(r *BeamRequest) { r.Place = &BeamPlace{Count: 3, Symmetric: true, Goal: "least moment"} }), "/place_supports/count"},
		"unknown load":               {loaded(BeamLoad{Kind: "wind"}), "/loads/0/kind"},
		"unknown nature":             {loaded(BeamLoad{Kind: "uniform", Nature: "live"}), "/loads/0/nature"},
		"horizontal":                 {loaded(BeamLoad{Kind: "uniform", Direction: "horizontal", Load: 1}), "/loads/0/direction"},
		"unknown direction":          {loaded(BeamLoad{Kind: "uniform", Direction: "up"}), "/loads/0/direction"},
		"load no number":             {loaded(BeamLoad{Kind: "uniform", Load: nan}), "/loads/0/load_kn_m"},
		"load too large":             {loaded(BeamLoad{Kind: "uniform", Load: 1e10}), "/loads/0/load_kn_m"},
		"force of a uniform load":    {loaded(BeamLoad{Kind: "uniform", Force: 1}), "/loads/0/force_kn"},
		"end of a uniform load":      {loaded(BeamLoad{Kind: "uniform", Load: 1, EndLoad: 2}), "/loads/0/end_load_kn_m"},
		"position of a uniform load": {loaded(BeamLoad{Kind: "uniform", Position: 1}), "/loads/0/position_m"},
		"end curvature of a point":   {loaded(BeamLoad{Kind: "point", EndCurvature: &end}), "/loads/0/end_curvature_per_m"},
		"off the end":                {loaded(BeamLoad{Kind: "uniform", To: 12, Load: 1}), "/loads/0/to_m"},
		"backwards":                  {loaded(BeamLoad{Kind: "uniform", From: 5, To: 4, Load: 1}), "/loads/0/to_m"},
		"from alone":                 {loaded(BeamLoad{Kind: "uniform", From: 5, Load: 1}), "/loads/0/to_m"},
		"point off the end":          {loaded(BeamLoad{Kind: "point", Position: 12, Force: 1}), "/loads/0/position_m"},
		"free point":                 {loaded(BeamLoad{Kind: "point", Free: true, Force: 1}), "/loads/0/free"},
		"free and permanent":         {loaded(BeamLoad{Kind: "uniform", Nature: "permanent", Free: true, Load: 1}), "/loads/0/free"},
		"dynamic factor below 1":     {loaded(BeamLoad{Kind: "uniform", Load: 1, Dynamic: 0.9}), "/loads/0/dynamic_factor"},
		"train without wheels":       {loaded(BeamLoad{Kind: "train"}), "/loads/0/wheels_kn"},
		"permanent train":            {loaded(BeamLoad{Kind: "train", Nature: "permanent", Wheels: []float64{1}}), "/loads/0/nature"},
		"wheels on a point":          {loaded(BeamLoad{Kind: "point", Force: 1, Wheels: []float64{1}}), "/loads/0/wheels_kn"},
		"spacings that do not fit":   {loaded(BeamLoad{Kind: "train", Wheels: []float64{1, 1}}), "/loads/0/spacings_m"},
		"spacing of 0":               {loaded(BeamLoad{Kind: "train", Wheels: []float64{1, 1}, Spacings: []float64{0}}), "/loads/0/spacings_m/0"},
		"wheel that lifts":           {loaded(BeamLoad{Kind: "train", Wheels: []float64{-1}}), "/loads/0/wheels_kn/0"},
		"moment at a hinge": {with(func(r *BeamRequest) {
			r.Supports = pinned(0, 6, 10)
			r.Hinges = []float64{4}
			r.Loads = []BeamLoad{{Kind: "moment", Position: 4, Moment: 1}}
		}), "/loads"},
		"place beside many": {with(func(r *BeamRequest) {
			r.Place = &BeamPlace{Count: 8, Goal: "least moment"}
			r.Loads = copies(11)
		}), "/loads"},
		"place among many": {with(func(r *BeamRequest) {
			r.Place = &BeamPlace{Count: 8, Goal: "least moment"}
			r.Supports = pinned(0, 1, 2, 3, 4)
		}), "/supports"},
		"long train on many spans": {with(func(r *BeamRequest) {
			r.Supports = pinned(0, 2, 4, 6, 8, 10)
			r.Loads = []BeamLoad{{Kind: "train", Wheels: make([]float64, 21), Spacings: ones(20)}}
		}), "/loads"},
		"place under a train": {with(func(r *BeamRequest) {
			r.Place = &BeamPlace{Count: 1, Goal: "least moment"}
			r.Loads = []BeamLoad{{Kind: "train", Wheels: []float64{1}}}
		}), "/place_supports"},
		"accompanying with too many": {with(func(r *BeamRequest) {
			r.Factors = &LoadFactors{Permanent: 1, Variable: 1, Accompanying: 0.5}
			r.Loads = copies(25)
		}), "/loads"},
		"free loads on too many spans": {with(func(r *BeamRequest) {
			r.Supports = nil
			for i := range 51 {
				r.Supports = append(r.Supports, pinned(float64(i)/5)...)
			}
			r.Loads = copies(MaxLoads)
			for i := range r.Loads {
				r.Loads[i].Free = true
			}
		}), "/loads"},
	} {
		_, err := Beam(row.request)
		refusedAt(t, name, err, row.pointer)
	}
}

func ones(n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = 1
	}
	return out
}

func copies(n int) []BeamLoad {
	out := make([]BeamLoad, n)
	for i := range out {
		out[i] = BeamLoad{Kind: "uniform", Load: 1}
	}
	return out
}

// Each limit is taken, and one more is refused.
func TestLimits(t *testing.T) {
	spans := func(n int) BeamRequest {
		return with(func(r *BeamRequest) {
			r.Supports = nil
			for i := range n + 1 {
				r.Supports = append(r.Supports, pinned(10*float64(i)/float64(n))...)
			}
		})
	}
	wheels := func(n int) BeamRequest {
		l := BeamLoad{Kind: "train", Wheels: make([]float64, n), Spacings: make([]float64, n-1)}
		for i := range l.Wheels {
			l.Wheels[i] = 10
		}
		for i := range l.Spacings {
			l.Spacings[i] = 1
		}
		return loaded(l)
	}
	for name, row := range map[string]struct {
		make    func(int) BeamRequest
		most    int
		pointer string
	}{
		"spans":  {spans, MaxSpans, "/supports"},
		"loads":  {func(n int) BeamRequest { return loaded(copies(n)...) }, MaxLoads, "/loads"},
		"wheels": {wheels, MaxWheels, "/loads"},
		"masses": {func(n int) BeamRequest {
			return with(func(r *BeamRequest) {
				for range n {
					r.Masses = append(r.Masses, BeamMass{To: 10, PerMetre: 1})
				}
			})
		}, MaxMasses, "/masses"},
	} {
		if _, err := Beam(row.make(row.most)); err != nil {
			t.Errorf("%d %s: %v", row.most, name, err)
		}
		_, err := Beam(row.make(row.most + 1))
		refusedAt(t, name, err, row.pointer)
	}
}

// All faults at once, in the order of the fields.
func TestAllFaultsAtOnce(t *testing.T) {
	_, err := Beam(BeamRequest{Length: 5, Section: "nothing", Supports: []BeamSupport{{Position: 9, Kind: "glued"}}, Loads: []BeamLoad{{Kind: "x"}}, Stations: 1})
	var f Faults
	if !errors.As(err, &f) || len(f) != 5 || len(strings.Split(err.Error(), "\n")) != 5 {
		t.Errorf("%d faults: %v", len(f), err)
	}
}

func TestOtherRefusals(t *testing.T) {
	resistance := func(change func(*ResistanceRequest)) error {
		r := ResistanceRequest{Section: "IPE 300", Grade: "S355", Basis: Basis{DesignBasis: "en1993"}, Demand: ResistanceDemand{Moment: 1, LateralSpacing: 1}}
		change(&r)
		_, err := Resistance(r)
		return err
	}
	size := func(change func(*SizingRequest)) error {
		r := sizedRequest()
		change(&r)
		_, err := Size(r)
		return err
	}
	study := func(change func(*ArrangementsRequest)) error {
		r := boomStudy()
		change(&r)
		_, err := Arrangements(context.Background(), r)
		return err
	}
	section := func(r SectionRequest) error {
		_, err := Section(r)
		return err
	}
	for name, row := range map[string]struct {
		err     error
		pointer string
	}{
		"section: nothing":             {section(SectionRequest{}), "/designation"},
		"section: twice":               {section(SectionRequest{Designation: "IPE 300", Family: "IPE"}), "/designation"},
		"section: too long":            {section(SectionRequest{Designation: strings.Repeat("9", 300)}), "/designation"},
		"section: unknown family":      {section(SectionRequest{Family: "rail"}), "/family"},
		"section: dimension of 0":      {section(SectionRequest{Family: "CHS", Dimensions: []float64{100, 0}}), "/dimensions_mm/1"},
		"section: dimension no number": {section(SectionRequest{Family: "CHS", Dimensions: []float64{nan, 5}}), "/dimensions_mm/0"},
		"section: wall too thick":      {section(SectionRequest{Family: "CHS", Dimensions: []float64{100, 60}}), "/dimensions_mm"},
		"section: too many":            {section(SectionRequest{Family: "CHS", Dimensions: make([]float64, 7)}), "/dimensions_mm"},
		"section: unknown grade":       {section(SectionRequest{Designation: "IPE 300", Grade: "S1"}), "/grade"},

		"resistance: unknown section": {resistance(func(r *ResistanceRequest) { r.Section = "IPE" }), "/section"},
		"resistance: unknown grade":   {resistance(func(r *ResistanceRequest) { r.Grade = "" }), "/grade"},
		"resistance: not made":        {resistance(func(r *ResistanceRequest) { r.Grade = "A53 B" }), "/grade"},
		"resistance: unknown basis":   {resistance(func(r *ResistanceRequest) { r.DesignBasis = "as4100" }), "/design_basis"},
		"resistance: foreign factor":  {resistance(func(r *ResistanceRequest) { r.Factor = 1.5 }), "/factor"},
		"resistance: foreign partial": {resistance(func(r *ResistanceRequest) { r.DesignBasis = "aisc-asd"; r.M0 = 1.1 }), "/design_basis"},
		"resistance: low factor":      {resistance(func(r *ResistanceRequest) { r.DesignBasis = "allowable"; r.Factor = 1 }), "/factor"},
		"resistance: partial":         {resistance(func(r *ResistanceRequest) { r.M1 = 3 }), "/gamma_m1"},
		"resistance: no spacing":      {resistance(func(r *ResistanceRequest) { r.Demand.LateralSpacing = 0 }), "/demand/lateral_spacing_m"},
		"resistance: no length":       {resistance(func(r *ResistanceRequest) { r.Demand.Axial = 5 }), "/demand/buckling_length_y_m"},
		"resistance: no number":       {resistance(func(r *ResistanceRequest) { r.Demand.Moment = nan }), "/demand/moment_knm"},
		"resistance: net area":        {resistance(func(r *ResistanceRequest) { r.Demand.NetAreaFactor = 1.1 }), "/demand/net_area_factor"},
		"resistance: deflection":      {resistance(func(r *ResistanceRequest) { r.Demand.Deflections = []ResistanceDeflection{{Span: 0, Limit: 250}} }), "/demand/deflections/0/span_m"},
		"resistance: limit":           {resistance(func(r *ResistanceRequest) { r.Demand.Deflections = []ResistanceDeflection{{Span: 1, Limit: nan}} }), "/demand/deflections/0/limit_ratio"},

		"sizing: no length":         {size(func(r *SizingRequest) { r.Length = 0 }), "/length_m"},
		"sizing: no candidate":      {size(func(r *SizingRequest) { r.Candidates = nil }), "/candidates"},
		"sizing: unknown candidate": {size(func(r *SizingRequest) { r.Candidates = []string{"IPE", "QQ 7"} }), "/candidates/1"},
		"sizing: family not made":   {size(func(r *SizingRequest) { r.Grade = "A53 B" }), "/candidates"},
		"sizing: spring":            {size(func(r *SizingRequest) { r.Supports[0] = BeamSupport{Kind: "spring", Stiffness: 5} }), "/supports/0"},
		"sizing: no support":        {size(func(r *SizingRequest) { r.Supports = nil }), "/supports"},
		"sizing: mechanism":         {size(func(r *SizingRequest) { r.Supports = pinned(3) }), ""},
		"sizing: two at one place":  {size(func(r *SizingRequest) { r.Supports = pinned(0, 0) }), "/supports/1"},
		"sizing: curvature":         {size(func(r *SizingRequest) { r.Loads[0] = BeamLoad{Kind: "curvature", Curvature: 1e-3} }), "/loads/0/kind"},
		"sizing: objective":         {size(func(r *SizingRequest) { r.Objective = "cheapest" }), "/objective"},
		"sizing: limit":             {size(func(r *SizingRequest) { r.DeflectionLimit = -1 }), "/deflection_limit"},
		"sizing: share":             {size(func(r *SizingRequest) { r.MassShare = 2 }), "/mass_share"},
		"sizing: axial":             {size(func(r *SizingRequest) { r.Axial = inf }), "/axial_kn"},

		"arrangements: no length":  {study(func(r *ArrangementsRequest) { r.Length = -1 }), "/length_m"},
		"arrangements: kind":       {study(func(r *ArrangementsRequest) { r.Kinds = []string{"sky hook"} }), "/kinds/0"},
		"arrangements: fraction":   {study(func(r *ArrangementsRequest) { r.Fractions = []float64{1.5} }), "/inner_fractions/0"},
		"arrangements: spans":      {study(func(r *ArrangementsRequest) { r.Spans = []int{1} }), "/equal_spans/0"},
		"arrangements: tower":      {study(func(r *ArrangementsRequest) { r.Towers.Height = nan }), "/towers/height_m"},
		"arrangements: safety":     {study(func(r *ArrangementsRequest) { r.Safety = 0.5 }), "/stability_factor"},
		"arrangements: depths":     {study(func(r *ArrangementsRequest) { r.Lattice.Depths = 99 }), "/lattice/depths"},
		"arrangements: footing":    {study(func(r *ArrangementsRequest) { r.Footings.Bearing = -1 }), "/footings/bearing_kpa"},
		"arrangements: legs":       {study(func(r *ArrangementsRequest) { r.Towers.Sections = []string{"QQ"} }), "/towers/candidates/0"},
		"arrangements: candidates": {study(func(r *ArrangementsRequest) { r.Candidates = nil }), "/candidates"},
		"arrangements: loads":      {study(func(r *ArrangementsRequest) { r.Loads = copies(maxStudyLoads + 1) }), "/loads"},
		"arrangements: panels":     {study(func(r *ArrangementsRequest) { r.Lattice.MinPanel = 49 }), "/lattice/min_panel_m"},
	} {
		refusedAt(t, name, row.err, row.pointer)
	}
}

func TestDecodeRefusals(t *testing.T) {
	for name, row := range map[string]struct{ text, pointer string }{
		"unknown field":   {`{"length_m": 5, "colour": 1}`, ""},
		"key twice":       {`{"supports": [{"kind": "pinned", "kind": "fixed"}]}`, "/supports/0/kind"},
		"another type":    {`{"length_m": "five"}`, "/length_m"},
		"two values":      {`{} {}`, ""},
		"cut short":       {`{"length_m": 5`, ""},
		"nothing":         {``, ""},
		"not UTF-8":       {"{\"section\": \"\xff\"}", ""},
		"too deep":        {strings.Repeat("[", 50) + strings.Repeat("]", 50), strings.Repeat("/0", 33)},
		"number too long": {`{"length_m": 1e999}`, ""},
	} {
		var r BeamRequest
		refusedAt(t, name, Decode([]byte(row.text), &r), row.pointer)
	}
}
