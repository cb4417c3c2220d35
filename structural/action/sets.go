package action

import "fmt"

// Characteristic returns the characteristic combination with factors 1.0 and 1.0
// (EN 1990:2002 6.5.3, expression 6.14b, with ψ0 = 1). Serviceability is checked
// under it, and strength in a design basis that keeps the whole margin in the
// resistance.
func Characteristic() Combination {
	return Combination{Name: "characteristic", Clause: "EN 1990:2002 6.5.3 (6.14b)", Permanent: 1, Variable: 1}
}

// EN1990Strength returns the combination for strength (STR): γG = 1.35 or 1.00,
// γQ = 1.50, with ψ0 = 1 (EN 1990:2002 6.4.3.2, expression 6.10, table A1.2(B)).
func EN1990Strength() Combination {
	return Combination{
		Name: "1.35 G + 1.5 Q", Clause: "EN 1990:2002 6.4.3.2 (6.10), table A1.2(B)",
		Permanent: 1.35, PermanentFavourable: 1, Variable: 1.5,
	}
}

// EN1990Equilibrium returns the combination for static equilibrium (EQU), to be used
// against overturning and uplift of a whole member: γG = 1.10 or 0.90, γQ = 1.50 (EN
// 1990:2002 table A1.2(A)). It is no combination for strength.
func EN1990Equilibrium() Combination {
	return Combination{
		Name: "1.1 G + 1.5 Q, or 0.9 G", Clause: "EN 1990:2002 6.4.3.2 (6.10), table A1.2(A)",
		Permanent: 1.1, PermanentFavourable: 0.9, Variable: 1.5,
	}
}

// ASCE7LRFD returns the basic combinations of strength design (ASCE 7-22 2.3.1) in
// dead load D and one load L that stands for every variable action. The factor 1.6
// of live load is kept where the standard gives wind or snow less, and beside 0.9 D,
// which is on the safe side.
func ASCE7LRFD() []Combination {
	return []Combination{
		{Name: "1.4D", Clause: "ASCE 7-22 2.3.1 combination 1", Permanent: 1.4},
		{Name: "1.2D + 1.6L", Clause: "ASCE 7-22 2.3.1 combination 2", Permanent: 1.2, Variable: 1.6},
		{Name: "0.9D + 1.6L", Clause: "ASCE 7-22 2.3.1 combination 5, with the factor of L on every variable action", Permanent: 0.9, Variable: 1.6},
	}
}

// ASCE7ASD returns the basic combinations of allowable stress design (ASCE 7-22
// 2.4.1) in dead load D and one load L that stands for every variable action, at its
// full value: the factors 0.75 and 0.6 on companions and wind are left out, which is
// on the safe side.
func ASCE7ASD() []Combination {
	return []Combination{
		{Name: "D", Clause: "ASCE 7-22 2.4.1 combination 1", Permanent: 1},
		{Name: "D + L", Clause: "ASCE 7-22 2.4.1 combination 2", Permanent: 1, Variable: 1},
		{Name: "0.6D + L", Clause: "ASCE 7-22 2.4.1 combination 7, with the full value of every variable action", Permanent: 0.6, Variable: 1},
	}
}

// ASCE7Service returns D + L, under which deflections are taken beside the bases of
// AISC 360 (ASCE 7-22 appendix CC, CC.2.1).
func ASCE7Service() Combination {
	return Combination{Name: "D + L", Clause: "ASCE 7-22 appendix CC, CC.2.1", Permanent: 1, Variable: 1}
}

// Custom returns a combination of the user's own factors; favourable may be 0, for
// none beside permanent. Errors as Combination.Validate.
func Custom(name string, permanent, favourable, variable float64) (Combination, error) {
	c := Combination{Name: name, Clause: "factors of the user", Permanent: permanent, PermanentFavourable: favourable, Variable: variable}
	return c, c.Validate()
}

// Sets returns the combinations of a design basis, by its name: those for strength,
// of which the worst governs, and the one for deflection and frequency.
func Sets(basis string) (strength []Combination, service Combination, err error) {
	switch basis {
	case "allowable":
		return []Combination{Characteristic()}, Characteristic(), nil
	case "en1993":
		return []Combination{EN1990Strength()}, Characteristic(), nil
	case "aisc-asd":
		return ASCE7ASD(), ASCE7Service(), nil
	case "aisc-lrfd":
		return ASCE7LRFD(), ASCE7Service(), nil
	}
	return nil, Combination{}, fmt.Errorf("no combinations for design basis %q; accepted are allowable, en1993, aisc-asd and aisc-lrfd", basis)
}
