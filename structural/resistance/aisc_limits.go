package resistance

import (
	"math"

	"spanwright/structural/section"
)

// kc is the coefficient for flanges of built-up I sections, AISC 360-22 table B4.1a
// note [a]: 4/√(h/tw), from 0.35 to 0.76.
func kc(webSlenderness float64) float64 {
	return min(0.76, max(0.35, 4/math.Sqrt(webSlenderness)))
}

// rootOf returns √(E/Fy), the unit of most limits.
func rootOf(m Material) float64 { return math.Sqrt(m.E / m.Yield) }

// element is a plate of a section by table B4.1.
type element struct {
	width     float64 // m
	thickness float64 // m
}

func (e element) lambda() float64 { return e.width / e.thickness }

// flangeOf returns the flange, B4.1a: half of it of I sections and tees, all of it of
// channels, the shorter leg of angles; of unequal flanges the upper.
func flangeOf(s *section.Section) element {
	switch s.Shape {
	case section.Channel:
		return element{s.B, s.Tf}
	case section.Angle:
		return element{s.B, s.Tw}
	}
	return element{s.B / 2, s.Tf}
}

// webOf returns the web, B4.1b: between fillets of I sections and channels, the whole
// depth of stems and longer legs, between flanges of welded shapes; of rectangular
// tubes the outside less three walls, as the corner radius is not known.
func webOf(s *section.Section) element {
	switch s.Shape {
	case section.RectangularTube:
		return element{s.H - 3*s.Tw, s.Tw}
	case section.Angle, section.Tee:
		return element{s.H, s.Tw}
	case section.UnequalI:
		return element{s.H - s.Tf - s.LowerTf, s.Tw}
	}
	return element{s.H - 2*s.Tf - 2*s.R, s.Tw}
}

// sideOf returns the flange of a closed rectangular shape between its corners or
// webs.
func sideOf(s *section.Section) element {
	if s.Shape == section.WeldedBox {
		return element{s.B - 2*s.Tw, s.Tf}
	}
	return element{s.B - 3*s.Tw, s.Tw}
}

// builtUp tells whether the limits of built-up I sections hold.
func builtUp(s *section.Section) bool { return s.Making == section.Welded }

// flexureLimits returns λp and λr of an I section's flange in bending about the
// strong axis: table B4.1b case 10 rolled, case 11 built-up with FL = 0.7·Fy.
func flexureLimits(s *section.Section, m Material) (compact, slender float64) {
	root := rootOf(m)
	if builtUp(s) {
		return 0.38 * root, 0.95 * root * math.Sqrt(kc(webOf(s).lambda())/0.7)
	}
	return 0.38 * root, root
}

// classOf names the class of an element in bending.
func classOf(lambda, compact, slender float64) string {
	switch {
	case lambda <= compact:
		return "compact"
	case lambda <= slender:
		return "noncompact"
	}
	return "slender"
}

// sayClass notes an element's slenderness, limits and class.
func (t *aiscTrace) sayClass(name string, lambda, compact, slender float64) {
	if t == nil {
		return
	}
	t.put("λ "+name, lambda, "")
	t.put("λp "+name, compact, "")
	t.put("λr "+name, slender, "")
	t.say(name + " " + classOf(lambda, compact, slender))
}

// sayWall notes the design and the nominal wall of a tube, B4.2.
func (t *aiscTrace) sayWall(s *section.Section) {
	if t != nil && s.Nominal > 0 {
		t.put("t design", s.Tw, "m")
		t.put("t nominal", s.Nominal, "m")
	}
}

// strongest is the highest yield strength (Pa) of the steels of A3.1, ASTM A514, 100 ksi
// as it is rounded in SI.
const strongest = 690e6

// uncovered returns why the section, steel and demand have no rule here; "" if they
// have one.
func uncovered(s *section.Section, m Material, d *Demand) string {
	if !(m.Yield <= strongest) {
		return "AISC 360-22 A3.1 lists no structural steel with a yield strength over 100 ksi (690 MPa)"
	}
	switch s.Shape {
	case section.RoundTube, section.ISection, section.RectangularTube, section.WeldedBox, section.SolidRound, section.Flat:
		return ""
	case section.Channel:
		if bent(d) && (flangeOf(s).lambda() > 0.38*rootOf(m) || webOf(s).lambda() > 3.76*rootOf(m)) {
			return "AISC 360-22 F2 takes channels with compact flanges and webs only"
		}
		return ""
	case section.Tee:
		if d.MomentZ != 0 {
			return "bending of tees about the axis of symmetry is not covered: AISC 360-22 F9 is for the other axis"
		}
		return ""
	case section.Angle:
		return uncoveredAngle(s, m, d)
	case section.UnequalI:
		if bent(d) {
			return "bending of I sections with unequal flanges (AISC 360-22 F4 and F5, singly symmetric) is not covered"
		}
		return ""
	case section.ChordSet:
		if bent(d) || pressed(d) || d.Shear != 0 || d.ShearY != 0 {
			return "built-up chord sets (AISC 360-22 E6: slenderness modified by the spacing of connectors; lacing) are covered in tension only"
		}
		return ""
	}
	return "AISC 360-22 has no rule here for this shape"
}

// uncoveredAngle covers single angles in tension and, with legs up to 0.71·√(E/Fy),
// for which the scope of E4 asks for no torsional buckling, in compression.
func uncoveredAngle(s *section.Section, m Material, d *Demand) string {
	switch {
	case bent(d):
		return "bending of single angles (AISC 360-22 F10) is not covered"
	case pressed(d) && s.H/s.Tw > 0.71*rootOf(m):
		return "single angles in compression with a leg over 0.71·√(E/Fy) (AISC 360-22 E4, unsymmetric) are not covered"
	}
	return ""
}

// bent and pressed tell which limits a demand calls for. A demand that is not a
// number calls for them too.
func bent(d *Demand) bool    { return d.Moment != 0 || d.MomentZ != 0 }
func pressed(d *Demand) bool { return !(d.Axial <= 0) }

// localSlenderness holds the plates to the limits of applicability, beyond which the
// standard gives no strength: round tube 0.45·E/Fy (F8 and E7.2), web of a
// rectangular tube 5.70·√(E/Fy) (F7.3, table B4.1b case 19: slender webs of tubes
// are not built), unstiffened web of a built-up I section 260 and 0.40·E/Fy and web
// over flange area 10 (F13.2). Within them slenderness lowers the strengths instead.
func localSlenderness(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	switch {
	case s.Shape == section.RoundTube && (bent(d) || pressed(d)):
		t.cite("F8 and E7.2", "D/t ≤ 0.45·E/Fy")
		t.steel(m)
		return applicable(s.H/s.Tw, 0.45*m.E/m.Yield, t, "AISC 360-22 F8 and E7.2 give no strength for a wall over D/t = 0.45·E/Fy")
	case boxed(s) && bent(d):
		t.cite("F7.3, table B4.1b cases 19 and 21", "h/t ≤ 5.70·√(E/Fy)")
		t.steel(m)
		return applicable(websInBending(s, d), 5.70*rootOf(m), t, "slender webs of tubes (AISC 360-22 F7.3(c)) are not covered")
	case s.Shape == section.ISection && builtUp(s) && d.Moment != 0:
		t.cite("F13.2 (F13-4), unstiffened", "h/tw ≤ min(260; 0.40·E/Fy); h·tw/(b·tf) ≤ 10 for slender webs")
		t.steel(m)
		return girderLimit(s, m, t)
	}
	return use{}
}

// boxed tells whether the shape is a rectangular tube or a welded box.
func boxed(s *section.Section) bool {
	return s.Shape == section.RectangularTube || s.Shape == section.WeldedBox
}

// websInBending returns the greatest slenderness of the sides that are webs under the
// moments of the demand.
func websInBending(s *section.Section, d *Demand) float64 {
	var lambda float64
	if d.Moment != 0 {
		lambda = webOf(s).lambda()
	}
	if d.MomentZ != 0 {
		lambda = max(lambda, sideOf(s).lambda())
	}
	return lambda
}

func applicable(value, most float64, t *aiscTrace, reason string) use {
	u := against(value, most)
	if !Passes(u.utilisation) {
		t.say(reason)
	}
	return u
}

// girderLimit holds the web of a built-up I section to F13.2.
func girderLimit(s *section.Section, m Material, t *aiscTrace) use {
	web := webOf(s)
	u := applicable(web.lambda(), min(260, 0.40*m.E/m.Yield), t, "AISC 360-22 F13.2: the unstiffened web is too slender")
	if ratio := webToFlange(s); web.lambda() > 5.70*rootOf(m) {
		t.put("aw", ratio, "")
		if w := applicable(ratio, 10, t, "AISC 360-22 F13.2: the web has over 10 times the area of the compression flange"); w.utilisation > u.utilisation {
			return w
		}
	}
	return u
}

// webToFlange returns aw = hc·tw/(bfc·tfc), (F4-12).
func webToFlange(s *section.Section) float64 {
	web := webOf(s)
	return web.width * web.thickness / (s.B * s.Tf)
}
