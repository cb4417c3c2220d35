package calculator

import (
	"math"

	"spanwright/estimate/document"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// ResistanceRequest asks for every check of one section under one demand. The demand
// carries the factors of the design basis already.
type ResistanceRequest struct {
	Section string           `json:"section" doc:"designation, such as IPE 300"`
	Grade   string           `json:"grade" doc:"steel grade, such as S355 or A992"`
	Demand  ResistanceDemand `json:"demand"`
	Basis
}

// ResistanceDemand is what a member asks of its section, own weight included.
type ResistanceDemand struct {
	Moment         float64                `json:"moment_knm,omitempty" doc:"about the strong axis; its sign does not matter"`
	MomentZ        float64                `json:"moment_z_knm,omitempty" doc:"about the weak axis"`
	Shear          float64                `json:"shear_kn,omitempty" doc:"in the depth"`
	ShearY         float64                `json:"shear_y_kn,omitempty" doc:"along the width"`
	Axial          float64                `json:"axial_kn,omitempty" doc:"compression positive, tension negative"`
	LateralSpacing float64                `json:"lateral_spacing_m,omitempty" doc:"between lateral restraints of the compression flange; obligatory with a moment"`
	LengthY        float64                `json:"buckling_length_y_m,omitempty" doc:"K·L about the strong axis; obligatory with compression"`
	LengthZ        float64                `json:"buckling_length_z_m,omitempty" doc:"K·L about the weak axis; that about the strong axis when absent"`
	MomentFactor   float64                `json:"moment_factor,omitempty" doc:"C1 (EN 1993) or Cb (AISC 360) of the governing unrestrained length; 1 when absent"`
	NetAreaFactor  float64                `json:"net_area_factor,omitempty" doc:"net over gross area of a tension member; 1 when absent"`
	Frequency      float64                `json:"frequency_hz,omitempty"`
	FrequencyFloor float64                `json:"frequency_floor_hz,omitempty" doc:"least natural frequency asked for; no check when absent"`
	Deflections    []ResistanceDeflection `json:"deflections,omitempty" maxItems:"51"`
}

// ResistanceDeflection is the deflection of one span, with its limit.
type ResistanceDeflection struct {
	Where    string  `json:"where" maxLength:"100" doc:"span 1, left overhang"`
	Value    float64 `json:"value_mm"`
	Span     float64 `json:"span_m"`
	Limit    float64 `json:"limit_ratio" doc:"n of span/n; overhangs are taken as twice their length"`
	Overhang bool    `json:"overhang,omitempty"`
}

// ResistanceAnswer is every check that applies, explained.
type ResistanceAnswer struct {
	Caution     string           `json:"caution"`
	Section     string           `json:"section"`
	Grade       string           `json:"grade"`
	DesignBasis string           `json:"design_basis"`
	Yield       Number           `json:"yield_mpa"`
	Ultimate    Number           `json:"ultimate_mpa"`
	Passes      bool             `json:"passes"`
	Governing   string           `json:"governing_check,omitempty" doc:"absent where nothing acts"`
	Utilisation Number           `json:"utilisation"`
	Checks      []document.Check `json:"checks" nullable:"false"`
	Warnings    []string         `json:"warnings" nullable:"false"`
}

// Resistance checks a section in a grade under a demand. What the basis does not
// cover is a check that is not met and says so. The error is Faults.
func Resistance(r ResistanceRequest) (ResistanceAnswer, error) {
	var f Faults
	s, found := sectionOf("/section", r.Section, &f)
	g, known := gradeOf("/grade", r.Grade, &f)
	basis := r.basis(&f)
	d := r.Demand.demand(&f)
	out := ResistanceAnswer{Caution: document.Caution, DesignBasis: r.DesignBasis, Warnings: []string{}}
	var steel resistance.Material
	if found && known {
		steel, out.Warnings = steelOf(s, g, &f)
	}
	if len(f) > 0 {
		return ResistanceAnswer{}, f
	}
	checks := basis.Explain(&s, steel, &d)
	u, governing := resistance.Governing(checks)
	out.Section, out.Grade, out.Yield, out.Ultimate = s.Designation, g.Name, Number(steel.Yield/1e6), Number(steel.Ultimate/1e6)
	out.Passes, out.Governing, out.Utilisation, out.Checks = resistance.Passes(u), governing, Number(u), checksOf(checks)
	return guarded(out)
}

// steelOf is the material of a section in a grade, with what is doubtful about it.
func steelOf(s section.Section, g material.Grade, f *Faults) (resistance.Material, []string) {
	warnings := []string{}
	v := material.Suits(s.Family, g.Name)
	switch v.Level {
	case material.Refused:
		f.add("/grade", quoted(g.Name), v.Reason, v.Remedy)
	case material.Doubtful:
		warnings = append(warnings, v.Reason+"; take "+v.Remedy)
	}
	fy, fu, err := g.For(s.Family).Strength(s.Thickness)
	if err != nil {
		f.add("/section", quoted(s.Designation), err.Error(), "a thinner section or another grade")
	}
	return resistance.Material{Yield: fy, Ultimate: fu, E: g.E, G: g.G}, warnings
}

// demand checks the demand and brings it to SI.
func (d ResistanceDemand) demand(f *Faults) resistance.Demand {
	const at = "/demand"
	for _, x := range []struct {
		name, unit string
		value      float64
	}{{"moment_knm", "kNm", d.Moment}, {"moment_z_knm", "kNm", d.MomentZ}, {"shear_kn", "kN", d.Shear}, {"shear_y_kn", "kN", d.ShearY}, {"axial_kn", "kN", d.Axial}} {
		f.signed(at+"/"+x.name, x.value, maxForce, x.unit)
	}
	length := func(name string, v float64, needed bool, why string) {
		if needed && v == 0 {
			f.add(at+"/"+name, "nothing", why, "a length above 0 m")
			return
		}
		f.within(at+"/"+name, v, 0, maxLength, "m")
	}
	if d.LengthZ == 0 {
		d.LengthZ = d.LengthY
	}
	bent := d.Moment != 0 || d.MomentZ != 0
	length("lateral_spacing_m", d.LateralSpacing, bent, "a moment acts, and the lateral restraint decides its resistance")
	length("buckling_length_y_m", d.LengthY, d.Axial > 0, "compression acts, and the buckling length decides its resistance")
	length("buckling_length_z_m", d.LengthZ, false, "")
	optional := func(name string, v, lo, hi float64, unit string) {
		if v != 0 {
			f.within(at+"/"+name, v, lo, hi, unit)
		}
	}
	optional("moment_factor", d.MomentFactor, 0.1, 10, "")
	optional("net_area_factor", d.NetAreaFactor, 0.01, 1, "")
	optional("frequency_floor_hz", d.FrequencyFloor, 1e-3, 1e4, "Hz")
	f.within(at+"/frequency_hz", d.Frequency, 0, 1e9, "Hz")
	out := resistance.Demand{Moment: math.Abs(d.Moment) * 1e3, MomentZ: math.Abs(d.MomentZ) * 1e3, Shear: math.Abs(d.Shear) * 1e3,
		ShearY: math.Abs(d.ShearY) * 1e3, Axial: d.Axial * 1e3, LateralSpacing: d.LateralSpacing, LengthY: d.LengthY, LengthZ: d.LengthZ,
		MomentFactor: d.MomentFactor, NetAreaFactor: d.NetAreaFactor, Frequency: d.Frequency, FrequencyFloor: d.FrequencyFloor}
	if !f.few(at+"/deflections", len(d.Deflections), MaxSpans+1, "deflections") {
		return out
	}
	for i, x := range d.Deflections {
		out.Deflections = append(out.Deflections, x.deflection(item(at+"/deflections", i), f))
	}
	return out
}

func (x ResistanceDeflection) deflection(at string, f *Faults) resistance.Deflection {
	f.signed(at+"/value_mm", x.Value, 1e7, "mm")
	ok := f.above(at+"/span_m", x.Span, maxLength, "m")
	if !f.within(at+"/limit_ratio", x.Limit, 1, 1e5, "") || !ok {
		return resistance.Deflection{}
	}
	limit := x.Span / x.Limit
	if x.Overhang {
		limit *= 2
	}
	return resistance.Deflection{Where: x.Where, Value: math.Abs(x.Value) / 1e3, Span: x.Span, Limit: limit, Overhang: x.Overhang}
}
