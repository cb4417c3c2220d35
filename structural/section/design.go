package section

// designWall is the share of the nominal wall that AISC 360-22 B4.2 reckons with.
const designWall = 0.93

// Design returns the section that AISC 360-22 checks: of tubes the one with the
// design wall 0.93 t (B4.2: every hollow section but boxes and those to A1065 and
// A1085; welded boxes, and every other shape, come back as they are). Properties
// are those of the design wall, mass and outside dimensions stay nominal, Nominal
// holds the nominal wall. A section that is a design section already comes back
// as it is.
//
// Outer corners of HSS are 2 t of the design wall, as in the American tables;
// other rectangular tubes keep their outer corner.
func (s Section) Design() Section {
	if s.Nominal > 0 {
		return s
	}
	t := designWall * s.Tw
	var d Section
	var err error
	switch {
	case s.Shape == RoundTube:
		d, err = roundTube(s.H, t)
	case s.Shape == RectangularTube && s.Family == "HSS":
		d, err = rectangularTube(s.H, s.B, t, 2*t, t)
	case s.Shape == RectangularTube:
		d, err = rectangularTube(s.H, s.B, t, s.R, max(0, s.R-t))
	default:
		return s
	}
	if err != nil { // a thinner wall always fits; a section of no builder stays as it is
		return s
	}
	d.Designation, d.Family, d.Making, d.Source = s.Designation, s.Family, s.Making, s.Source
	d.Mass, d.Nominal, d.Perimeter = s.Mass, s.Tw, s.Perimeter
	return d
}
