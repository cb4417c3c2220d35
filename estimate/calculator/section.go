package calculator

import (
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/document"
	"spanwright/structural/material"
	"spanwright/structural/section"
)

// SectionRequest asks for a section by designation, or by family and dimensions.
type SectionRequest struct {
	Designation string    `json:"designation,omitempty" maxLength:"200" doc:"as the trade writes it: IPE 300, W18x50, CHS 168.3x6.3, WELDED-I 500x200x10x16"`
	Family      string    `json:"family,omitempty" doc:"in place of designation: CHS, RHS, SHS, WELDED-I, WELDED-BOX, TEE, CHANNEL, L, ROUND, FLAT …"`
	Dimensions  []float64 `json:"dimensions_mm,omitempty" maxItems:"6" doc:"of the family, in the order of its designation: depth, width, web, flange"`
	Grade       string    `json:"grade,omitempty" doc:"only this grade's suitability and strength; every grade that suits when absent"`
}

// SectionProperties are those of one section, axes as EN 1993-1-1 1.7: y is the
// strong axis, z the weak one.
type SectionProperties struct {
	H             Number `json:"h_mm" doc:"depth or outside diameter; the longer leg of an angle"`
	B             Number `json:"b_mm" doc:"width; the shorter leg of an angle"`
	Tw            Number `json:"tw_mm" doc:"web, stem, leg or wall; the thickness of a flat"`
	Tf            Number `json:"tf_mm,omitempty" doc:"flange (tapered: mean); the wall of a rectangular tube"`
	R             Number `json:"r_mm,omitempty" doc:"root fillet or outer corner radius"`
	LowerB        Number `json:"lower_b_mm,omitempty" doc:"width of the lower flange where the flanges differ"`
	LowerTf       Number `json:"lower_tf_mm,omitempty"`
	Thickness     Number `json:"thickness_mm" doc:"greatest of the parts: decides the yield strength"`
	A             Number `json:"area_cm2"`
	Iy            Number `json:"iy_cm4"`
	Iz            Number `json:"iz_cm4"`
	Wely          Number `json:"wel_y_cm3"`
	Welz          Number `json:"wel_z_cm3"`
	Wply          Number `json:"wpl_y_cm3"`
	Wplz          Number `json:"wpl_z_cm3"`
	Ry            Number `json:"i_y_cm" doc:"radius of gyration"`
	Rz            Number `json:"i_z_cm"`
	J             Number `json:"j_cm4" doc:"St Venant torsion constant"`
	Iw            Number `json:"iw_cm6" doc:"warping constant; 0 where neglected"`
	Avy           Number `json:"av_y_cm2" doc:"shear area along the width"`
	Avz           Number `json:"av_z_cm2" doc:"shear area in the depth"`
	Yc            Number `json:"centroid_y_mm" doc:"from the left face"`
	Zc            Number `json:"centroid_z_mm" doc:"from the bottom face"`
	Y0            Number `json:"shear_centre_y_mm" doc:"from the centroid, to the right"`
	Z0            Number `json:"shear_centre_z_mm" doc:"from the centroid, up"`
	Iu            Number `json:"iu_cm4" doc:"greater principal second moment"`
	Iv            Number `json:"iv_cm4" doc:"smaller principal second moment"`
	Rv            Number `json:"i_v_cm" doc:"least radius of gyration"`
	Alpha         Number `json:"alpha_rad" doc:"from y to u, counter-clockwise positive"`
	WebSlender    Number `json:"web_slenderness" doc:"c/t of the web, stem, longer leg or deeper wall; d/t of round tubes"`
	FlangeSlender Number `json:"flange_slenderness"`
	Perimeter     Number `json:"painted_surface_m2_m" doc:"of tubes and boxes the outside only"`
	Mass          Number `json:"mass_kg_m" doc:"nominal: what is billed"`
}

// SectionGrade is a steel grade and how far it fits the section's family.
type SectionGrade struct {
	Grade    string `json:"grade"`
	Standard string `json:"standard"`
	Level    string `json:"level" enum:"suitable,doubtful,refused"`
	Reason   string `json:"reason,omitempty"`
	Remedy   string `json:"remedy,omitempty"`
	Yield    Number `json:"yield_mpa,omitempty" doc:"at the section's thickness"`
	Ultimate Number `json:"ultimate_mpa,omitempty"`
}

// SectionAnswer is one section with everything that is known of it.
type SectionAnswer struct {
	Caution     string             `json:"caution"`
	Designation string             `json:"designation"`
	Family      string             `json:"family"`
	Shape       string             `json:"shape"`
	Making      string             `json:"making"`
	Source      string             `json:"source" doc:"standard or rule of dimensions and mass"`
	Properties  SectionProperties  `json:"properties"`
	Design      *SectionProperties `json:"design_wall_properties,omitempty" doc:"with the wall that AISC 360-22 B4.2 reckons with, where it differs"`
	Grades      []SectionGrade     `json:"grades" nullable:"false"`
	Lighter     string             `json:"next_lighter,omitempty" doc:"in the family's catalogue"`
	Heavier     string             `json:"next_heavier,omitempty"`
}

// Section looks a section up, or computes it from its dimensions. The error is
// Faults; that of an unknown designation names near misses.
func Section(r SectionRequest) (SectionAnswer, error) {
	var f Faults
	designation, at := r.designation(&f)
	if len(f) > 0 {
		return SectionAnswer{}, f
	}
	s, ok := sectionOf(at, designation, &f)
	if !ok {
		return SectionAnswer{}, f
	}
	out := SectionAnswer{Caution: document.Caution, Designation: s.Designation, Family: s.Family, Shape: s.Shape.String(), Making: s.Making.String(),
		Source: s.Source, Properties: propertiesOf(s)}
	if d := s.Design(); d.A != s.A {
		p := propertiesOf(d)
		out.Design = &p
	}
	if out.Grades = gradesOf(s, r.Grade, &f); len(f) > 0 {
		return SectionAnswer{}, f
	}
	out.Lighter, out.Heavier = neighbours(s)
	return guarded(out)
}

// designation is that of the request, or the one that its dimensions make.
func (r SectionRequest) designation(f *Faults) (text, pointer string) {
	switch {
	case r.Designation != "" && (r.Family != "" || len(r.Dimensions) > 0):
		f.add("/designation", quoted(r.Designation), "the section is given twice", "designation, or family with dimensions_mm")
	case r.Designation != "":
		if len(r.Designation) > 200 {
			f.add("/designation", quoted(r.Designation), "too long", "at most 200 letters")
		}
		return r.Designation, "/designation"
	case r.Family == "":
		f.add("/designation", "nothing", "no section", "designation, or family with dimensions_mm")
	}
	if !f.few("/dimensions_mm", len(r.Dimensions), 6, "dimensions") {
		return "", ""
	}
	family, known := section.IsFamily(r.Family)
	if r.Family != "" && !known {
		f.add("/family", quoted(r.Family), "no such family", strings.Join(familyNames(), ", "))
	}
	unit := "" // of a family that is not given by dimensions: its sizes are names
	if slices.ContainsFunc(section.Families(), func(x section.Family) bool { return x.Name == family && x.ByDimensions }) {
		unit = " mm"
	}
	var parts []string
	for i, d := range r.Dimensions {
		f.above(item("/dimensions_mm", i), d, 1e5, "mm")
		parts = append(parts, strconv.FormatFloat(d, 'f', -1, 64)+unit)
	}
	return family + " " + strings.Join(parts, " x "), "/dimensions_mm"
}

func familyNames() []string {
	var names []string
	for _, x := range section.Families() {
		names = append(names, x.Name)
	}
	return names
}

func propertiesOf(s section.Section) SectionProperties {
	mm := func(v float64) Number { return Number(v * 1e3) }
	cm := func(v float64) Number { return Number(v * 1e2) }
	cm2 := func(v float64) Number { return Number(v * 1e4) }
	cm3 := func(v float64) Number { return Number(v * 1e6) }
	cm4 := func(v float64) Number { return Number(v * 1e8) }
	return SectionProperties{
		H: mm(s.H), B: mm(s.B), Tw: mm(s.Tw), Tf: mm(s.Tf), R: mm(s.R), LowerB: mm(s.LowerB), LowerTf: mm(s.LowerTf), Thickness: mm(s.Thickness),
		A: cm2(s.A), Iy: cm4(s.Iy), Iz: cm4(s.Iz), Wely: cm3(s.Wely), Welz: cm3(s.Welz), Wply: cm3(s.Wply), Wplz: cm3(s.Wplz),
		Ry: cm(s.Ry), Rz: cm(s.Rz), J: cm4(s.J), Iw: Number(s.Iw * 1e12), Avy: cm2(s.Avy), Avz: cm2(s.Avz),
		Yc: mm(s.Yc), Zc: mm(s.Zc), Y0: mm(s.Y0), Z0: mm(s.Z0), Iu: cm4(s.Iu), Iv: cm4(s.Iv), Rv: cm(s.Rv), Alpha: Number(s.Alpha),
		WebSlender: Number(s.WebSlender), FlangeSlender: Number(s.FlangeSlender), Perimeter: Number(s.Perimeter), Mass: Number(s.Mass),
	}
}

// gradesOf lists the grade asked for, or every one that is not refused.
func gradesOf(s section.Section, name string, f *Faults) []SectionGrade {
	out := []SectionGrade{}
	if name != "" {
		if g, ok := gradeOf("/grade", name, f); ok {
			out = append(out, suitability(s, g))
		}
		return out
	}
	for _, n := range material.Names() {
		g, ok := gradeOf("/grade", n, f)
		if !ok {
			continue
		}
		if x := suitability(s, g); x.Level != material.Refused.String() {
			out = append(out, x)
		}
	}
	return out
}

func suitability(s section.Section, g material.Grade) SectionGrade {
	v := material.Suits(s.Family, g.Name)
	out := SectionGrade{Grade: g.Name, Standard: g.Standard, Level: v.Level.String(), Reason: v.Reason, Remedy: v.Remedy}
	fy, fu, err := g.For(s.Family).Strength(s.Thickness)
	if err != nil {
		out.Level, out.Reason = material.Refused.String(), err.Error()
		return out
	}
	out.Yield, out.Ultimate = Number(fy/1e6), Number(fu/1e6)
	return out
}

// neighbours are the next sizes of the family's catalogue by mass; none for a size
// that is not in it.
func neighbours(s section.Section) (lighter, heavier string) {
	series, err := section.Series(s.Family)
	if err != nil {
		return "", ""
	}
	i := slices.IndexFunc(series, func(x section.Section) bool { return x.Designation == s.Designation })
	if i > 0 {
		lighter = series[i-1].Designation
	}
	if i >= 0 && i+1 < len(series) {
		heavier = series[i+1].Designation
	}
	return lighter, heavier
}
