package resistance

import (
	"math"

	"spanwright/structural/section"
)

// interaction holds axial force with bending about one or both axes, and biaxial
// bending, to chapter H1.
func (a aisc) interaction(s *section.Section, m Material, d *Demand, t *aiscTrace) use {
	forces := 0
	for _, v := range [3]float64{d.Axial, d.Moment, d.MomentZ} {
		if v != 0 {
			forces++
		}
	}
	if forces < 2 || uncovered(s, m, d) != "" {
		return use{}
	}
	t.cite("H1.1, H1.2 (H1-1a), (H1-1b); Appendix 8 (A-8-3), Cm = 1",
		"Pr/Pc ≥ 0.2: Pr/Pc + 8/9·(Mrx/Mcx + Mry/Mcy) ≤ 1; below: Pr/(2·Pc) + Mrx/Mcx + Mry/Mcy ≤ 1; Mr = M/(1 − α·Pr/Pe1) in compression")
	p := a.axialShare(s, m, d)
	x, y := a.momentShares(s, m, d, t)
	t.put("Pr/Pc", p, "")
	t.put("Mrx/Mcx", x, "")
	t.put("Mry/Mcy", y, "")
	if d.Axial > 0 {
		t.say("moments are amplified along the member (B1); those of a frame's sway (B2) have to be in the demand")
	}
	return against(h1(p, x, y), 1)
}

// h1 is the sum of (H1-1a) or (H1-1b). From Pr/Pc = 0.2 the greater of both counts:
// they differ from (H1-1a) only where both are over 1, and so more force never gives
// a lower figure.
func h1(p, x, y float64) float64 {
	low := p/2 + x + y
	if p < 0.2 {
		return low
	}
	return max(p+8.0/9*(x+y), low)
}

// axialShare returns Pr/Pc.
func (a aisc) axialShare(s *section.Section, m Material, d *Demand) float64 {
	switch {
	case d.Axial == 0:
		return 0
	case d.Axial < 0:
		return ratio(-d.Axial, a.tension(s, m, d, nil))
	}
	return ratio(d.Axial, a.available(compressionStrength(s, m, d, nil), general, nil))
}

// momentShares returns Mrx/Mcx and Mry/Mcy with the moments amplified by B1.
func (a aisc) momentShares(s *section.Section, m Material, d *Demand, t *aiscTrace) (x, y float64) {
	if d.Moment != 0 {
		nominal := strongStrength(s, m, nil)
		if yieldsSideways(s) {
			nominal = min(nominal, lateralStrength(s, m, d, nil))
		}
		b1 := a.amplifier(m, d, s.Iy, d.LengthY)
		t.put("B1x", b1, "")
		x = ratio(d.Moment*b1, a.available(nominal, general, nil))
	}
	if d.MomentZ != 0 {
		b1 := a.amplifier(m, d, s.Iz, d.LengthZ)
		t.put("B1y", b1, "")
		y = ratio(d.MomentZ*b1, a.available(weakStrength(s, m, nil), general, nil))
	}
	return x, y
}

// amplifier returns B1 = Cm/(1 − α·Pr/Pe1) ≥ 1, Appendix 8 (A-8-3), with Cm = 1,
// Pe1 = π²·E·I/L² (A-8-5), α = 1.0 in LRFD and 1.6 in ASD; 1 in tension. A member
// near or over its Euler load gets a finite figure that still grows.
func (a aisc) amplifier(m Material, d *Demand, inertia, length float64) float64 {
	if d.Axial <= 0 {
		return 1
	}
	alpha := 1.6
	if a.lrfd {
		alpha = 1
	}
	euler := math.Pi * math.Pi * m.E * inertia / (length * length)
	return amplification(ratio(alpha*d.Axial, euler))
}
