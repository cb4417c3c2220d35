package resistance

// enBody names a formula body of the basis. Bodies are called by a switch and not
// through a table of functions, so that the prepared case stays off the heap.
type enBody uint8

const (
	enRefusal enBody = iota
	enBending
	enBendingZ
	enLateral
	enShear
	enShearY
	enWeb
	enAxial
	enInteraction
	enLocal
	enDeflection
	enFrequency
)

type enRule struct {
	body enBody
	wording
}

// enRules stand in the order in which checks are explained.
var enRules = [...]enRule{
	{enRefusal, wording{
		id: NotCovered, passFail: true,
		clause:  "EN 1993-1-1:2005, scope of the clauses that this basis holds",
		formula: "shape, class and steel are covered",
	}},
	{enBending, wording{
		id: Bending, unit: "N·m",
		clause:  "EN 1993-1-1:2005 6.2.5 (6.13) to (6.15), with shear 6.2.8 (6.29), (6.30) and EN 1993-1-5:2006 7.1",
		formula: "M ≤ W·fy/γM0, W = Wpl (class 1, 2), Wel (3), Weff (4); V > VRd/2: also M ≤ (Wpl − ρ·Aw²/(4·tw))·fy/γM0, ρ = (2·V/VRd − 1)²; round and flat: (1 − ρ)·W",
	}},
	{enBendingZ, wording{
		id: BendingZ, unit: "N·m",
		clause:  "EN 1993-1-1:2005 6.2.5 (6.13) to (6.15), with shear 6.2.8 (6.29)",
		formula: "Mz ≤ (1 − ρ)·W·fy/γM0, W = Wpl (class 1, 2), Wel (3), Weff (4); ρ = (2·Vy/VRd − 1)² where Vy > VRd/2, else 0",
	}},
	{enLateral, wording{
		id: LateralBuckling, unit: "N·m",
		clause:  "EN 1993-1-1:2005 6.3.2.1 (6.55), general case 6.3.2.2 (6.56) or rolled case 6.3.2.3 (6.57), (6.58); Mcr: Timoshenko and Gere, Theory of Elastic Stability, chapter 6, in the form of NCCI SN003, loads at the shear centre",
		formula: "M ≤ χLT·Wy·fy/γM1, λLT = √(Wy·fy/Mcr); Mcr = C1·π²·E·Iz/L²·√(Iw/Iz + L²·G·J/(π²·E·Iz))",
	}},
	{enShear, wording{
		id: Shear, unit: "N",
		clause:  "EN 1993-1-1:2005 6.2.6 (6.18), η = 1.0",
		formula: "V ≤ Av·fy/(√3·γM0)",
	}},
	{enShearY, wording{
		id: ShearY, unit: "N",
		clause:  "EN 1993-1-1:2005 6.2.6 (6.18)",
		formula: "Vy ≤ Av·fy/(√3·γM0)",
	}},
	{enWeb, wording{
		id: WebBuckling, unit: "N",
		clause:  "EN 1993-1-5:2006 5.1 (2), 5.2 (5.2), 5.3 (5.5) and table 5.1, non-rigid end post, stiffeners at the supports alone, no share of the flanges",
		formula: "hw/tw > 72·ε/η: V ≤ χw·hw·tw·fy/(√3·γM1), χw = η for λw ≤ 0.83/η, else 0.83/λw; λw = hw/(86.4·tw·ε)",
	}},
	{enAxial, wording{
		id: Axial, unit: "N",
		clause:  "compression: EN 1993-1-1:2005 6.2.4 (6.10), (6.11) and 6.3.1 (6.47) to (6.50), table 6.2, torsional 6.3.1.4 (6.53); tension: 6.2.3 (6.6), (6.7)",
		formula: "N ≤ A·fy/γM0 and N ≤ χ·A·fy/γM1, χ = 1/(Φ + √(Φ² − λ²)), Φ = (1 + α·(λ − 0.2) + λ²)/2, λ = √(A·fy/Ncr), Aeff for A in class 4; tension: N ≤ A·fy/γM0, with holes also 0.9·Anet·fu/γM2",
	}},
	{enInteraction, wording{
		id:      Interaction,
		clause:  "EN 1993-1-1:2005 6.2.9.1 (6.36) to (6.41), class 3 and 4: 6.2.9.2 (6.42), 6.2.9.3 (6.44); 6.3.3 (6.61), (6.62) with annex B, Cmy = Cmz = CmLT = 1",
		formula: "section: M ≤ MN, both axes (My/MN)^α + (Mz/MN)^β ≤ 1, class 3 and 4: N/NRd + My/MyRd + Mz/MzRd ≤ 1; member: N/Nby + kyy·My/Mb + kyz·Mz/Mz,Rd ≤ 1 and N/Nbz + kzy·My/Mb + kzz·Mz/Mz,Rd ≤ 1",
	}},
	{enLocal, wording{
		id: LocalBuckling, passFail: true,
		clause:  "EN 1993-1-5:2006 8 (8.1), flange induced buckling",
		formula: "hw/tw ≤ k·E/fy·√(Aw/Afc), k = 0.4 (class 1, 2), 0.55 (3, 4)",
	}},
	{enDeflection, deflectionWording},
	{enFrequency, frequencyWording},
}
