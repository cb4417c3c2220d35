package resistance

import (
	"math"

	"spanwright/structural/section"
)

// etaBuckling is η of EN 1993-1-5:2006 5.1 (2), recommended up to S460; the shear
// area is held to η = 1.0 (EN 1993-1-1:2005 6.2.6 (3)).
const etaBuckling = 1.2

// plasticShear returns Vpl,Rd (N) of a shear area (m²), 6.2.6 (6.18).
func (x *enCase) plasticShear(area float64) float64 {
	return area * x.yield() / math.Sqrt(3)
}

func (x *enCase) shear(t *trace) use {
	t.put("Av", x.s.Avz, "m²")
	x.steel(t)
	return against(x.d.Shear, x.plasticShear(x.s.Avz))
}

func (x *enCase) shearY(t *trace) use {
	if x.d.ShearY == 0 {
		return use{}
	}
	t.put("Av", x.s.Avy, "m²")
	x.steel(t)
	return against(x.d.ShearY, x.plasticShear(x.s.Avy))
}

// buckledShear returns the shear (N) at which n webs of depth hw and thickness tw
// buckle, and whether they are slender enough to be asked, EN 1993-1-5:2006 5.
func (x *enCase) buckledShear(hw, tw, n float64, t *trace) (float64, bool) {
	if hw/tw <= 72*x.epsilon/etaBuckling {
		return 0, false
	}
	lambda := hw / (86.4 * tw * x.epsilon)
	chi := min(etaBuckling, 0.83/lambda)
	t.put("hw/tw", hw/tw, "")
	t.put("λw", lambda, "")
	t.put("χw", chi, "")
	return n * chi * hw * tw * x.m.Yield / (math.Sqrt(3) * x.p.M1), true
}

// webShear is buckledShear for shear in the depth.
func (x *enCase) webShear(t *trace) (float64, bool) {
	switch s := x.s; s.Shape {
	case section.ISection, section.Channel:
		return x.buckledShear(s.H-2*s.Tf, s.Tw, 1, t)
	case section.UnequalI:
		return x.buckledShear(s.H-s.Tf-s.LowerTf, s.Tw, 1, t)
	case section.WeldedBox:
		return x.buckledShear(s.H-2*s.Tf, s.Tw, 2, t)
	case section.RectangularTube:
		return x.buckledShear(s.H-3*s.Tw, s.Tw, 2, t)
	}
	return 0, false
}

// widthShear is buckledShear for shear along the width; flanges of open shapes
// are outstands that the clause is not for.
func (x *enCase) widthShear(t *trace) (float64, bool) {
	s := x.s
	switch {
	case x.d.ShearY == 0:
	case s.Shape == section.RectangularTube:
		return x.buckledShear(s.B-3*s.Tw, s.Tw, 2, t)
	case s.Shape == section.WeldedBox:
		return x.buckledShear(s.B-2*s.Tw, s.Tf, 2, t)
	}
	return 0, false
}

// webBuckling reports the direction of shear that uses more of its webs.
func (x *enCase) webBuckling(t *trace) use {
	depth, deep := x.webShear(nil)
	width, wide := x.widthShear(nil)
	var worst use
	if deep {
		worst = against(x.d.Shear, depth)
	}
	if along := against(x.d.ShearY, width); wide && along.utilisation > worst.utilisation {
		worst = along
		x.widthShear(t)
		t.say("shear along the width")
	} else if deep {
		x.webShear(t)
	}
	t.put("η", etaBuckling, "")
	t.put("fy", x.m.Yield, "Pa")
	t.put("γM1", x.p.M1, "")
	return worst
}

// loss returns ρ of 6.2.8 (3), of EN 1993-1-5 7.1 (1) where the web buckles before it
// yields: what shear takes of the shear area's part in bending, 0 to 1.
func loss(shear, resistance float64) float64 {
	used := min(1, ratio(shear, resistance))
	if used <= 0.5 {
		return 0
	}
	return (2*used - 1) * (2*used - 1)
}

// shearLoss is loss for shear in the depth.
func (x *enCase) shearLoss() float64 {
	most := x.plasticShear(x.s.Avz)
	if buckled, slender := x.webShear(nil); slender {
		most = min(most, buckled)
	}
	return loss(x.d.Shear, most)
}

// shearLossY is loss for shear along the width.
func (x *enCase) shearLossY() float64 {
	most := x.plasticShear(x.s.Avy)
	if buckled, slender := x.widthShear(nil); slender {
		most = min(most, buckled)
	}
	return loss(x.d.ShearY, most)
}

// sectionModulus returns the modulus (m³) that resists M beside the shear. Of I
// sections shear takes ρ·Aw²/(4·tw) from Wpl, (6.30), of tubes and boxes the same of
// both walls, of other shapes ρ of all, (6.29), which is on the safe side. Class 3
// and 4 are held to their own modulus, and lose from Wpl as in EN 1993-1-5 7.1 (1).
func (x *enCase) sectionModulus(t *trace) float64 {
	rho := x.shearLoss()
	t.put("W", x.y.w, "m³")
	t.put("class", float64(x.y.class), "")
	t.put("ρ", rho, "")
	s := x.s
	switch s.Shape {
	case section.ISection:
		hw := s.H - 2*s.Tf
		return min(x.y.w, s.Wply-rho*s.Tw*hw*hw/4)
	case section.RectangularTube, section.WeldedBox:
		return min(x.y.w, s.Wply-rho*s.Avz*s.Avz/(8*s.Tw))
	}
	return (1 - rho) * x.y.w
}

func (x *enCase) bending(t *trace) use {
	x.steel(t)
	return against(x.d.Moment, x.sectionModulus(t)*x.yield())
}

// sectionModulusZ returns the modulus (m³) that resists Mz beside the shear.
func (x *enCase) sectionModulusZ(t *trace) float64 {
	rho := x.shearLossY()
	t.put("W", x.z.w, "m³")
	t.put("class", float64(x.z.class), "")
	t.put("ρ", rho, "")
	return (1 - rho) * x.z.w
}

func (x *enCase) bendingZ(t *trace) use {
	if x.d.MomentZ == 0 {
		return use{}
	}
	x.steel(t)
	return against(x.d.MomentZ, x.sectionModulusZ(t)*x.yield())
}

// flangeInduced holds the web of an I section so stiff that the pressed flange
// cannot buckle into it. The class is that in bending alone; of unequal flanges the
// greater is pressed, and the moment is elastic.
func (x *enCase) flangeInduced(t *trace) use {
	s := x.s
	if s.Shape != section.ISection && s.Shape != section.UnequalI || x.d.Moment == 0 {
		return use{}
	}
	p := strong(s)
	hw, flange, k := s.H-2*s.Tf, s.B*s.Tf, 0.55
	alone := enCase{p: x.p, s: s, m: x.m, epsilon: x.epsilon}
	switch {
	case s.Shape == section.UnequalI:
		hw, flange = p.web, max(flange, s.LowerB*s.LowerTf)
	case alone.class(&p) <= 2:
		k = 0.4
	}
	t.put("hw/tw", hw/s.Tw, "")
	t.put("k", k, "")
	t.put("E", x.m.E, "Pa")
	t.put("fy", x.m.Yield, "Pa")
	return against(hw/s.Tw, k*x.m.E/x.m.Yield*math.Sqrt(hw*s.Tw/flange))
}
