package section

import (
	"fmt"
	"math"
)

// unequalI returns a welded I of depth h and web tw with an upper flange b × tf
// and a lower one of another size; weld metal is not counted.
//
//   - A, I, W, Wpl: from the plates, exact;
//   - J: ⅓Σbt³ less the free ends, with El Darwish and Johnston's junctions;
//   - shear centre: the flanges' middle lines parted inversely to their second
//     moments; Iw = I₁I₂/(I₁ + I₂)·hs² (Vlasov, Thin-Walled Elastic
//     Beams; the same in AISC 360-22 commentary F4); Wagner exact by integration;
//   - Avz: EN 1993-1-1 6.2.6(3)d, η = 1.0; Avy: 6.2.6(3)e.
func unequalI(h, b, tw, tf, lowerB, lowerTf float64) (Section, error) {
	if err := sizes(part{"depth", h}, part{"upper width", b}, part{"web", tw}, part{"upper flange", tf},
		part{"lower width", lowerB}, part{"lower flange", lowerTf}); err != nil {
		return Section{}, err
	}
	hw := h - tf - lowerTf
	if !(hw > 0 && tw < b && tw < lowerB) {
		return Section{}, fmt.Errorf("web %s and flanges %s and %s mm do not fit into %s mm; want flanges under the depth, web under both widths",
			mm(tw), mm(tf), mm(lowerTf), mm(h))
	}
	half := func(b, tf float64) float64 { // torsion of a flange and its junction
		return b*tf*tf*tf/3 + junctionT(tw, tf, 0) - 0.21*math.Pow(tf, 4)
	}
	y, up := tw/2, h-tf
	s, err := measured(Section{
		Shape: UnequalI, Making: Welded, H: h, B: b, Tw: tw, Tf: tf, LowerB: lowerB, LowerTf: lowerTf,
		J:   half(b, tf) + half(lowerB, lowerTf) + hw*tw*tw*tw/3,
		Avz: hw * tw, Avy: b*tf + lowerB*lowerTf,
		WebSlender: hw / tw, FlangeSlender: (b - tw) / 2 / tf,
	}, []corner{
		{-lowerB / 2, 0, 0}, {lowerB / 2, 0, 0}, {lowerB / 2, lowerTf, 0}, {y, lowerTf, 0}, {y, up, 0}, {b / 2, up, 0},
		{b / 2, h, 0}, {-b / 2, h, 0}, {-b / 2, up, 0}, {-y, up, 0}, {-y, lowerTf, 0}, {-lowerB / 2, lowerTf, 0},
	})
	if err != nil {
		return Section{}, err
	}
	upper, lower := tf*b*b*b/12, lowerTf*lowerB*lowerB*lowerB/12
	hs := h - (tf+lowerTf)/2
	s.Iw = upper * lower / (upper + lower) * hs * hs
	s = s.sheared(0, lowerTf/2+hs*upper/(upper+lower)-s.Zc)
	return complete(s), nil
}

// weldedBox returns a box h × b of two webs tw between two flanges tf as wide as
// the box; weld metal is not counted.
//
//   - A, I, Wpl: outer less inner rectangle, exact;
//   - J: Bredt, 4A₀²/Σ(s/t) on the middle line; Iw is neglected;
//   - Avz: EN 1993-1-1 6.2.6(3)d; Avy: 6.2.6(3)e.
func weldedBox(h, b, tw, tf float64) (Section, error) {
	if err := sizes(part{"depth", h}, part{"width", b}, part{"web", tw}, part{"flange", tf}); err != nil {
		return Section{}, err
	}
	if !(2*tf < h && 2*tw < b) {
		return Section{}, misfit("web", "flange", tw, tf, 0, h, b)
	}
	hi, bi := h-2*tf, b-2*tw
	a0 := (h - tf) * (b - tw)
	s := Section{
		Shape: WeldedBox, Making: Welded, H: h, B: b, Tw: tw, Tf: tf,
		A: b*h - bi*hi, Iy: (b*h*h*h - bi*hi*hi*hi) / 12, Iz: (h*b*b*b - hi*bi*bi*bi) / 12,
		Wply: (b*h*h - bi*hi*hi) / 4, Wplz: (h*b*b - hi*bi*bi) / 4,
		J:   2 * a0 * a0 / ((h-tf)/tw + (b-tw)/tf),
		Avz: 2 * hi * tw, Avy: 2 * b * tf,
		Perimeter:  2 * (h + b),
		WebSlender: hi / tw, FlangeSlender: bi / tf,
	}
	return finish(s), nil
}

func misfit(web, flange string, tw, tf, r, h, b float64) error {
	return fmt.Errorf("%s %s, %s %s and fillet %s mm do not fit into %s x %s mm; want parts and fillets within depth and width",
		web, mm(tw), flange, mm(tf), mm(r), mm(h), mm(b))
}

// Chords returns n like chords, laced or battened together: two, one above the
// other at spacingZ, or four, at the corners of spacingZ × spacingY; both in m
// between chord centroids. The chords are set mirror-wise, so that the set is
// doubly symmetric.
//
//   - A, Iy, Iz: parallel axes; the lacing's shear flexibility is not in them: EN
//     1993-1-1 6.4 asks for it in columns;
//   - elastic moduli at the outermost face that the chord can turn outwards, on
//     the safe side; plastic moduli from chords that yield as a whole;
//   - J, shear areas: the chords' own, without the lacing; Iw is neglected.
//
// The chord's own mass is billed n times: lacing and battens are not in it.
func Chords(chord Section, n int, spacingZ, spacingY float64) (Section, error) {
	outZ, outY := max(chord.Zc, chord.H-chord.Zc), max(chord.Yc, chord.B-chord.Yc)
	if err := checkChords(chord, n, spacingZ, spacingY, outZ, outY); err != nil {
		return Section{}, err
	}
	k := float64(n)
	s := chord
	s.Shape, s.Chords, s.SpacingZ, s.SpacingY, s.ChordA, s.ChordRv = ChordSet, n, spacingZ, spacingY, chord.A, chord.Rv
	s.A, s.J, s.Iw, s.Avy, s.Avz = k*chord.A, k*chord.J, 0, k*chord.Avy, k*chord.Avz
	s.Iy = k * (chord.Iy + chord.A*spacingZ*spacingZ/4)
	s.Iz = k * (chord.Iz + chord.A*spacingY*spacingY/4)
	s.H, s.B = spacingZ+2*outZ, spacingY+2*outY
	s.Wply, s.Wplz = k*chord.A*spacingZ/2, k*chord.A*spacingY/2
	if n == 2 {
		s.Wplz = k * chord.Wplz
	}
	s.Y0, s.Z0, s.Wagner, s.Iyz, s.Alpha = 0, 0, 0, 0, 0
	s.Perimeter = k * chord.Perimeter
	thickness := chord.Thickness
	s = finish(s)
	if n == 2 { // no chord is turned about z: its own weaker face counts twice
		s.Welz = k * chord.Welz
		s.WelzLeft, s.WelzRight = s.Welz, s.Welz
	}
	s.Thickness, s.Mass = thickness, k*chord.Mass
	return s, nil
}

// checkChords refuses chords that overlap; outZ and outY are their farthest faces
// from the own centroid.
func checkChords(chord Section, n int, spacingZ, spacingY, outZ, outY float64) error {
	if n != 2 && n != 4 {
		return fmt.Errorf("a set of %d chords; want 2 or 4", n)
	}
	if !(chord.A > 0) || chord.Shape == ChordSet {
		return fmt.Errorf("a chord without area or itself a set of chords; want a section of Find")
	}
	if err := sizes(part{"spacing in the depth", spacingZ}); err != nil {
		return err
	}
	if !(spacingZ >= 2*outZ) {
		return fmt.Errorf("chords %s mm apart in the depth overlap; want %s mm or more", mm(spacingZ), mm(2*outZ))
	}
	switch {
	case n == 2 && spacingY != 0:
		return fmt.Errorf("two chords with a spacing of %s mm in the width; want one spacing, or four chords", mm(spacingY))
	case n == 4 && !(spacingY >= 2*outY && spacingY <= greatestPart):
		return fmt.Errorf("chords %s mm apart in the width; want %s to %s mm", mm(spacingY), mm(2*outY), mm(greatestPart))
	}
	return nil
}
