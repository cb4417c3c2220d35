package resistance

import (
	"math"

	"spanwright/structural/section"
)

// teeStrength returns Mn (N·m) of a tee bent in the plane of its stem by yielding and
// local buckling, F9.1, F9.3 and F9.4. The sign of the moment is not known, so the
// stem is taken in compression and the flange too:
//
//	My (F9-4);
//	noncompact flange Mp − (Mp − 0.7·Fy·Sxc)·(λ − λp)/(λr − λp) (F9-14) with
//	Mp = Fy·Zx ≤ 1.6·My (F9-2), slender flange 0.7·E·Sxc/λ² (F9-15);
//	stem Fcr·Sx (F9-16), Fcr = Fy to 0.84·√(E/Fy) (F9-17),
//	(1.43 − 0.515·d/tw·√(Fy/E))·Fy to 1.52·√(E/Fy) (F9-18), 1.52·E/(d/tw)² (F9-19)
func teeStrength(s *section.Section, m Material, t *aiscTrace) float64 {
	t.cite("F9 (F9-2), (F9-4), (F9-14) to (F9-19)",
		"M ≤ Mn by φ or Ω; Mn is the least of My (stem in compression), flange and stem local buckling")
	root, yield := rootOf(m), m.Yield*s.Wely
	flange, stem := flangeOf(s).lambda(), webOf(s).lambda()
	t.sayClass("flange", flange, 0.38*root, root)
	t.sayClass("stem", stem, 0.84*root, 1.52*root)
	top := yield
	switch {
	case stem > 1.52*root:
		top = 1.52 * m.E / (stem * stem) * s.Wely
	case stem > 0.84*root:
		top = min(yield, (1.43-0.515*stem/root)*yield)
	}
	switch {
	case flange > root:
		top = min(top, 0.7*m.E*s.WelyTop/(flange*flange))
	case flange > 0.38*root:
		plastic := min(m.Yield*s.Wply, 1.6*yield)
		top = min(top, plastic-(plastic-0.7*m.Yield*s.WelyTop)*(flange/root-0.38)/0.62)
	}
	return top
}

// teeLateral returns Mn (N·m) of a tee by lateral-torsional buckling with the stem in
// compression, F9.2, which has no Cb:
//
//	Mcr = 1.95·E/Lb·√(Iy·J)·(B + √(1 + B²)) ≤ My (F9-10), B = −2.3·d/Lb·√(Iy/J) (F9-12)
func teeLateral(s *section.Section, m Material, length float64, t *aiscTrace) float64 {
	t.cite("F9.2 (F9-10), (F9-12)", "M ≤ Mn by φ or Ω; Mn = 1.95·E/Lb·√(Iy·J)·(B + √(1 + B²)) ≤ My, B = −2.3·d/Lb·√(Iy/J)")
	b := 2.3 * s.H / length * math.Sqrt(s.Iz/s.J)
	t.put("B", -b, "")
	t.put("Iz", s.Iz, "m⁴")
	t.put("J", s.J, "m⁴")
	// −B + √(1 + B²) as 1/(B + √(1 + B²)), which loses no digits.
	critical := 1.95 * m.E / length * math.Sqrt(s.Iz*s.J) / (b + math.Sqrt(1+b*b))
	return min(m.Yield*s.Wely, critical)
}
