package section

import "math"

// measured fills what follows from the outline alone: area, centroid, second and
// third moments, moduli of both faces, principal axes, perimeter.
func measured(s Section, corners []corner) (Section, error) {
	o, err := outlineOf(corners)
	if err != nil {
		return Section{}, err
	}
	all := o.integrals()
	left, right := o.turned().extent() // of −y
	left, right = -right, -left
	bottom, top := o.extent()
	s.A = all.a
	yc, zc := all.y/all.a, all.z/all.a
	s.Yc, s.Zc = yc-left, zc-bottom
	o = o.moved(-yc, -zc)
	m := o.integrals()
	s.Iy, s.Iz, s.Iyz = m.zz, m.yy, m.yz
	s.Wagner = m.wagner / m.zz // about the centroid; the shear centre follows
	s.WelyTop, s.WelyBottom = s.Iy/(top-zc), s.Iy/(zc-bottom)
	s.WelzLeft, s.WelzRight = s.Iz/(yc-left), s.Iz/(right-yc)
	s.Wply = o.plastic(m.a, m.z)
	q := o.turned()
	s.Wplz = q.plastic(m.a, -m.y)
	s.Perimeter = o.length()
	return s, nil
}

// sheared sets the shear centre at (y0, z0) from the centroid.
func (s Section) sheared(y0, z0 float64) Section {
	s.Y0, s.Z0 = y0, z0
	s.Wagner -= 2 * z0
	return s
}

// principal fills the principal axes: tan 2α = −2Iyz/(Iy − Iz) (any
// strength-of-materials handbook).
func principal(s Section) Section {
	if math.Abs(s.Iyz) < 1e-12*(s.Iy+s.Iz) {
		s.Iyz = 0
	}
	half := math.Hypot((s.Iy-s.Iz)/2, s.Iyz)
	s.Iu, s.Iv = (s.Iy+s.Iz)/2+half, (s.Iy+s.Iz)/2-half
	if s.Iyz == 0 {
		s.Iu, s.Iv = max(s.Iy, s.Iz), min(s.Iy, s.Iz)
	}
	s.Alpha = 0
	if s.Iyz != 0 || s.Iz > s.Iy {
		s.Alpha = math.Atan2(-2*s.Iyz, s.Iy-s.Iz) / 2
	}
	s.Ru, s.Rv = math.Sqrt(s.Iu/s.A), math.Sqrt(s.Iv/s.A)
	return s
}

// junctionL is the torsion bulb of an L or channel corner: αD⁴ of El Darwish and
// Johnston, Torsion of Structural Shapes, Journal of the Structural Division
// (ASCE) 91, 1965, with D the greatest circle in the corner.
func junctionL(tw, tf, r float64) float64 {
	alpha := -0.0908 + 0.2621*tw/tf + 0.1231*r/tf - 0.0752*tw*r/(tf*tf) - 0.0945*(tw/tf)*(tw/tf)
	d := 2 * (3*r + tw + tf - math.Sqrt(2*(2*r+tw)*(2*r+tf)))
	return alpha * math.Pow(d, 4)
}

// junctionT is the torsion bulb of a T junction, by the same paper.
func junctionT(tw, tf, r float64) float64 {
	alpha := -0.042 + 0.2204*tw/tf + 0.1355*r/tf - 0.0865*r*tw/(tf*tf) - 0.0725*(tw/tf)*(tw/tf)
	d := ((tf+r)*(tf+r) + tw*(r+tw/4)) / (2*r + tf)
	return alpha * math.Pow(d, 4)
}

// channelSize are the dimensions of a channel in m: the flange's thickness tf
// stands at the distance at from the web's back; slope 0 is a parallel flange.
type channelSize struct{ h, b, tw, tf, r, toe, slope, at float64 }

// channel returns a channel with its web at the left.
//
//   - A, I, W, Wpl: from the outline with fillets, exact;
//   - J: ⅔b tf³ + ⅓(h − 2tf)tw³ + 2αD⁴ − 0.420 tf⁴ (El Darwish and Johnston
//     1965; tapered flanges by their mean thickness), within 2.5 % of a
//     finite-element model for UPE and UPN; at the steep slope of C it lies 5 to
//     12 % low, so that catalogue rows carry the printed J;
//   - shear centre and Iw: thin-walled on the middle line, the taper included; Iw
//     is within 5 % of the model, low where it differs most; the American tables
//     leave the taper out and print 20 to 24 % more for C;
//   - Avz: EN 1993-1-1 6.2.6(3)b; Avy: the two flanges.
func channel(d channelSize) (Section, error) {
	if err := sizes(part{"depth", d.h}, part{"width", d.b}, part{"web", d.tw}, part{"flange", d.tf}); err != nil {
		return Section{}, err
	}
	toe, root := d.thickness(d.b), d.thickness(d.tw)
	if !(d.r >= 0 && d.toe >= 0 && d.slope >= 0 && toe > 0 && d.tw < d.b && 2*root < d.h) {
		return Section{}, misfit("web", "flange", d.tw, d.tf, d.r, d.h, d.b)
	}
	s, err := measured(Section{
		Shape: Channel, Making: HotRolled, H: d.h, B: d.b, Tw: d.tw, Tf: d.tf, R: d.r, ToeR: d.toe, Slope: d.slope,
		J: 2*d.b*d.tf*d.tf*d.tf/3 + (d.h-2*d.tf)*d.tw*d.tw*d.tw/3 + 2*junctionL(d.tw, d.tf, d.r) - 0.420*math.Pow(d.tf, 4),
	}, []corner{
		{0, 0, 0}, {d.b, 0, 0}, {d.b, toe, d.toe}, {d.tw, root, d.r},
		{d.tw, d.h - root, d.r}, {d.b, d.h - toe, d.toe}, {d.b, d.h, 0}, {0, d.h, 0},
	})
	if err != nil {
		return Section{}, err
	}
	if d.r == 0 {
		s.Making = Welded
	}
	e, iw := d.warping()
	s = s.sheared(-(s.Yc-d.tw/2)-e, 0)
	s.Wagner = 0 // y is an axis of symmetry
	s.Iw = iw
	s.Avz = max(s.A-2*d.b*d.tf+(d.tw+d.r)*d.tf, (d.h-2*d.tf)*d.tw)
	s.Avy = 2 * d.b * d.tf
	s.WebSlender = (d.h - 2*d.tf - 2*d.r) / d.tw
	s.FlangeSlender = (d.b - d.tw - d.r) / d.tf
	return complete(s), nil
}

// thickness of the flange at y from the web's back.
func (d channelSize) thickness(y float64) float64 { return d.tf + (d.at-y)*d.slope }

// warping returns the distance of the shear centre from the web's middle line
// and the warping constant. With the web's middle as pole the sectorial
// coordinate of the flange is z0·s, z0 half the web's height between the flanges'
// middle lines, s along the width: Iωz/Iy = e and Iw = Iωω − e²Iy (Vlasov,
// Thin-Walled Elastic Beams).
func (d channelSize) warping() (e, iw float64) {
	t := func(s float64) float64 { return d.thickness(s + d.tw/2) }
	z0 := (d.h - t(0)) / 2
	length := d.b - d.tw/2
	iy := 2 * d.tw * z0 * z0 * z0 / 3
	var product, square float64
	for i, x := range gaussAt {
		s, w := x*length, gaussWeight[i]*length
		z := (d.h - t(s)) / 2
		iy += 2 * z * z * t(s) * w
		product += 2 * z0 * s * z * t(s) * w
		square += 2 * z0 * s * z0 * s * t(s) * w
	}
	return product / iy, square - product*product/iy
}

// angle returns an angle with the longer leg h upright and its heel at the lower
// left.
//
//   - A, I, W, Wpl, Iyz, principal axes: from the outline with fillet, exact;
//   - J: ⅓bt³ + ⅓(h − t)t³ + αD⁴ − 0.21t⁴ (El Darwish and Johnston 1965),
//     within 2.5 % of a finite-element model;
//   - the shear centre is where the legs' middle lines meet, Iw = t³(b'³ + h'³)/36
//     about it (Bleich, Buckling Strength of Metal Structures, table 3);
//   - Wagner about u: AISC 360-22 F10.2, βw of its commentary;
//   - shear areas ⅔ht and ⅔bt: elastic, because EN 1993-1-1 6.2.6(3) names none.
func angle(h, b, t, r, toe float64) (Section, error) {
	if err := sizes(part{"leg", h}, part{"leg", b}, part{"thickness", t}); err != nil {
		return Section{}, err
	}
	if !(r >= 0 && toe >= 0 && toe <= t && 2*t <= b && t+r+toe <= b && b <= h) {
		return Section{}, misfit("leg", "root", t, t, r, h, b)
	}
	corners := []corner{{0, 0, 0}, {b, 0, 0}, {b, t, toe}, {t, t, r}, {t, h, toe}, {0, h, 0}}
	s, err := measured(Section{
		Shape: Angle, Making: HotRolled, H: h, B: b, Tw: t, Tf: t, R: r, ToeR: toe,
		J:   b*t*t*t/3 + (h-t)*t*t*t/3 + junctionL(t, t, r) - 0.21*t*t*t*t,
		Iw:  t * t * t * (math.Pow(b-t/2, 3) + math.Pow(h-t/2, 3)) / 36,
		Avz: 2 * h * t / 3, Avy: 2 * b * t / 3,
		WebSlender: h / t, FlangeSlender: b / t,
	}, corners)
	if err != nil {
		return Section{}, err
	}
	y0, z0 := t/2-s.Yc, t/2-s.Zc
	s = complete(s.sheared(y0, z0))
	// About the principal axis u, as AISC 360-22 F10 asks for it.
	sin, cos := math.Sincos(s.Alpha)
	o, err := outlineOf(corners)
	if err != nil {
		return Section{}, err
	}
	m := o.moved(-s.Yc, -s.Zc).rotated(cos, sin, s.Alpha).integrals()
	s.Wagner = m.wagner/m.zz - 2*(z0*cos-y0*sin)
	return s, nil
}

// tee returns a T with its flange on top; r = 0 is welded from plates.
//
//   - A, I, W, Wpl: from the outline with fillets, exact;
//   - J: ⅓b tf³ + ⅓(h − tf)tw³ + αD⁴ − 0.21tf⁴ − 0.105tw⁴ (El Darwish and
//     Johnston 1965);
//   - the shear centre is where the middle lines meet, Iw = tf³b³/144 + tw³h'³/36
//     about it, h' = h − tf/2 (Bleich, table 3);
//   - Avz: EN 1993-1-1 6.2.6(3)c; Avy: the flange.
func tee(h, b, tw, tf, r float64) (Section, error) {
	if err := sizes(part{"depth", h}, part{"width", b}, part{"stem", tw}, part{"flange", tf}); err != nil {
		return Section{}, err
	}
	if !(r >= 0 && tf+r < h && tw+2*r < b) {
		return Section{}, misfit("stem", "flange", tw, tf, r, h, b)
	}
	y, under := tw/2, h-tf
	s, err := measured(Section{
		Shape: Tee, Making: HotRolled, H: h, B: b, Tw: tw, Tf: tf, R: r,
		J:          b*tf*tf*tf/3 + under*tw*tw*tw/3 + junctionT(tw, tf, r) - 0.21*math.Pow(tf, 4) - 0.105*math.Pow(tw, 4),
		Iw:         math.Pow(tf*b, 3)/144 + math.Pow(tw*(h-tf/2), 3)/36,
		Avy:        b * tf,
		WebSlender: (h - tf - r) / tw, FlangeSlender: ((b-tw)/2 - r) / tf,
	}, []corner{
		{-y, 0, 0}, {y, 0, 0}, {y, under, r}, {b / 2, under, 0}, {b / 2, h, 0},
		{-b / 2, h, 0}, {-b / 2, under, 0}, {-y, under, r},
	})
	if err != nil {
		return Section{}, err
	}
	s.Avz = tw * (h - tf/2)
	if r > 0 {
		s.Avz = s.A - b*tf + (tw+2*r)*tf/2
	} else {
		s.Making = Welded
	}
	s = s.sheared(0, h-tf/2-s.Zc)
	return complete(s), nil
}

// complete fills what follows from A, I and the moduli of both faces.
func complete(s Section) Section {
	s.Wely, s.Welz = min(s.WelyTop, s.WelyBottom), min(s.WelzLeft, s.WelzRight)
	s.Ry, s.Rz = math.Sqrt(s.Iy/s.A), math.Sqrt(s.Iz/s.A)
	s.Thickness = max(s.Tw, s.Tf, s.LowerTf)
	s.Mass = steelDensity * s.A
	return principal(s)
}
