package arrangement_test

import (
	"context"
	"fmt"

	"spanwright/structural/action"
	"spanwright/structural/arrangement"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// The loading boom of the Brackwater salt works, 42 m with 0.9 kN/m permanent and
// 1.2 kN/m variable, in CHS of S355 with a factor of 3 as a first pass, 8 m above the
// quay: every way to hold it, the lightest that passes first.
func Example() {
	basis, err := resistance.Allowable(3)
	if err != nil {
		fmt.Println(err)
		return
	}
	grade, err := material.Find("S355")
	if err != nil {
		fmt.Println(err)
		return
	}
	strength, service, err := action.Sets(basis.Name())
	if err != nil {
		fmt.Println(err)
		return
	}
	tubes, err := section.Series("CHS")
	if err != nil {
		fmt.Println(err)
		return
	}
	all, err := arrangement.Candidates(context.Background(), arrangement.Study{
		Setup: sizing.Setup{Basis: basis, Grade: grade, Strength: strength, Service: service, Gravity: 9.80665},
		Member: sizing.Member{
			Length: 42, DeflectionLimit: 100,
			Actions: []action.Action{{Nature: action.Permanent, Value: 900}, {Value: 1200}},
		},
		Sections: tubes,
		Towers:   arrangement.TowerRule{Height: 8},
	})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, c := range all {
		verdict := fmt.Sprintf("%.2f %s", c.Utilisation, c.Governing)
		if !c.Feasible {
			verdict += ", not feasible"
		}
		fmt.Printf("%s: %s, %.1f t steel, %.1f t ballast, %.1f m³ footings, %.0f mm; %s\n",
			c.Name, c.Result.Section.Designation, c.Mass.Steel/1e3, c.Mass.Ballast/1e3, c.Volume(), c.Deflection.Value*1e3, verdict)
	}
	// Output:
	// 3 equal spans: CHS 323.9x6, 2.5 t steel, 0.0 t ballast, 7.0 m³ footings, 43 mm; 0.91 member: bending
	// lattice: CHS 193.7x5, 2.8 t steel, 0.0 t ballast, 3.0 m³ footings, 74 mm; 0.99 chord: interaction
	// two inner supports: CHS 406.4x8, 3.8 t steel, 0.0 t ballast, 4.0 m³ footings, 131 mm; 0.94 member: bending
	// 2 equal spans: CHS 457x10, 5.1 t steel, 0.0 t ballast, 5.0 m³ footings, 45 mm; 0.96 member: bending
	// inner support, least moment: CHS 508x12, 6.5 t steel, 0.0 t ballast, 3.0 m³ footings, 176 mm; 1.00 member: bending
	// inner support at 0.667 of the length: CHS 610x12, 7.8 t steel, 0.0 t ballast, 3.0 m³ footings, 87 mm; 0.96 member: bending
	// inner support, least deflection: CHS 610x12, 7.8 t steel, 0.0 t ballast, 3.0 m³ footings, 67 mm; 0.92 member: bending
	// propped: CHS 1016x20, 20.9 t steel, 0.0 t ballast, 31.4 m³ footings, 71 mm; 0.87 member: bending
	// tower at the end: CHS 1016x20, 20.9 t steel, 0.0 t ballast, 3.0 m³ footings, 172 mm; 0.98 tower leg at 42.00 m: axial
	// cantilever with counterweight: CHS 1219x25, 41.2 t steel, 84.6 t ballast, 12.4 m³ footings, 1481 mm; 2.61 member: bending, not feasible
}
