package section

import "fmt"

// Shape is the geometry of a section; it decides which formulas and checks apply.
type Shape uint8

const (
	RoundTube       Shape = iota + 1
	ISection              // rolled or welded, doubly symmetric
	RectangularTube       // square too
	SolidRound
	Flat
)

// String returns the shape in words.
func (s Shape) String() string {
	switch s {
	case RoundTube:
		return "round tube"
	case ISection:
		return "I section"
	case RectangularTube:
		return "rectangular tube"
	case SolidRound:
		return "solid round"
	case Flat:
		return "flat"
	}
	return fmt.Sprintf("shape %d", uint8(s))
}

// Making is how a section is made; buckling curves depend on it (EN 1993-1-1
// table 6.2).
type Making uint8

const (
	HotRolled  Making = iota + 1 // hot rolled, hot finished or seamless
	ColdFormed                   // cold-formed welded hollow section
	Welded                       // welded from plates
)

// String returns the making in words.
func (m Making) String() string {
	switch m {
	case HotRolled:
		return "hot rolled"
	case ColdFormed:
		return "cold formed"
	case Welded:
		return "welded"
	}
	return fmt.Sprintf("making %d", uint8(m))
}

// Section is one size with its properties about the principal axes of EN
// 1993-1-1 1.7: y is the strong axis, z the weak one. Lengths are in m.
type Section struct {
	Designation string
	Family      string // canonical name, as in Families
	Shape       Shape
	Making      Making
	Source      string // standard or rule of dimensions and mass

	H  float64 // m, depth or outside diameter
	B  float64 // m, width; outside diameter of round shapes
	Tw float64 // m, web or wall; the thickness of a flat
	Tf float64 // m, flange; the wall of a rectangular tube; else 0
	R  float64 // m, root fillet or outer corner radius; 0 if none

	A    float64 // m², area
	Iy   float64 // m⁴, second moment about y
	Iz   float64 // m⁴, second moment about z
	Wely float64 // m³, elastic modulus about y
	Welz float64 // m³, elastic modulus about z
	Wply float64 // m³, plastic modulus about y
	Wplz float64 // m³, plastic modulus about z
	J    float64 // m⁴, St Venant torsion constant
	Iw   float64 // m⁶, warping constant; 0 where neglected (tubes, rounds, flats)
	Avy  float64 // m², shear area for shear along the width
	Avz  float64 // m², shear area for shear in the depth
	Ry   float64 // m, radius of gyration about y
	Rz   float64 // m, radius of gyration about z

	Perimeter float64 // m²/m, painted surface; of tubes the outside only
	Mass      float64 // kg/m, nominal: what is billed
	Thickness float64 // m, greatest of the parts; decides the yield band
}
