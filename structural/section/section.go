package section

import (
	"fmt"
	"math"
)

// Shape is the geometry of a section; it decides which formulas and checks apply.
type Shape uint8

const (
	RoundTube       Shape = iota + 1
	ISection              // rolled or welded, doubly symmetric
	RectangularTube       // square too
	SolidRound
	Flat
	Channel   // rolled, parallel or tapered flanges
	Angle     // equal or unequal legs, the heel at the lower left
	Tee       // flange on top, stem down
	UnequalI  // welded, flanges of different size: singly symmetric about z
	WeldedBox // four plates, webs between the flanges
	ChordSet  // like chords that are laced or battened together
)

var shapeNames = [...]string{
	RoundTube: "round tube", ISection: "I section", RectangularTube: "rectangular tube", SolidRound: "solid round",
	Flat: "flat", Channel: "channel", Angle: "angle", Tee: "tee", UnequalI: "I section with unequal flanges",
	WeldedBox: "welded box", ChordSet: "built-up chord set",
}

// String returns the shape in words.
func (s Shape) String() string {
	if s >= RoundTube && int(s) < len(shapeNames) {
		return shapeNames[s]
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

// Section is one size with its properties. Lengths are in m. The axes are those
// of EN 1993-1-1 1.7: z runs up along the depth, y to the right along the width;
// y is the strong axis, of tees the one parallel to the flange, of angles the one
// parallel to the shorter leg (their principal axes are u and v).
//
// Where a section is not symmetric about an axis, its elastic modulus is that of
// the face that yields first, and the moduli of both faces stand beside it.
type Section struct {
	Designation string
	Family      string // canonical name, as in Families
	Shape       Shape
	Making      Making
	Source      string // standard or rule of dimensions and mass

	H  float64 // m, depth or outside diameter; the longer leg of an angle
	B  float64 // m, width; outside diameter of round shapes; the shorter leg
	Tw float64 // m, web, stem, leg or wall; the thickness of a flat
	Tf float64 // m, flange (tapered: mean); the wall of a rectangular tube, the leg of an angle; else 0
	R  float64 // m, root fillet or outer corner radius; 0 if none

	LowerB  float64 // m, width of the lower flange where the flanges differ; else 0
	LowerTf float64 // m, its thickness; else 0
	ToeR    float64 // m, toe radius of angles and tapered flanges; else 0
	Slope   float64 // -, slope of a tapered flange's inner face; else 0
	Nominal float64 // m, nominal wall after Design; 0 while the wall is the nominal one

	A    float64 // m², area
	Iy   float64 // m⁴, second moment about y
	Iz   float64 // m⁴, second moment about z
	Wely float64 // m³, elastic modulus about y, the smaller of both faces
	Welz float64 // m³, elastic modulus about z, the smaller of both faces
	Wply float64 // m³, plastic modulus about y
	Wplz float64 // m³, plastic modulus about z
	J    float64 // m⁴, St Venant torsion constant
	Iw   float64 // m⁶, warping constant; 0 where neglected (tubes, boxes, rounds, flats)
	Avy  float64 // m², shear area for shear along the width
	Avz  float64 // m², shear area for shear in the depth
	Ry   float64 // m, radius of gyration about y
	Rz   float64 // m, radius of gyration about z

	Yc         float64 // m, centroid from the left face (back of a web, heel of an angle)
	Zc         float64 // m, centroid from the bottom face
	WelyTop    float64 // m³, elastic modulus about y at the top face
	WelyBottom float64 // m³, elastic modulus about y at the bottom face
	WelzLeft   float64 // m³, elastic modulus about z at the left face
	WelzRight  float64 // m³, elastic modulus about z at the right face
	Y0         float64 // m, shear centre from the centroid, to the right
	Z0         float64 // m, shear centre from the centroid, up
	Wagner     float64 // m, monosymmetry ∫z(y²+z²)dA/Iy − 2Z0, z up; below 0 where the upper flange is the greater; EN zj = −Wagner/2 with the top compressed; of angles about u

	Iyz   float64 // m⁴, product of inertia; 0 if y and z are principal axes
	Iu    float64 // m⁴, greater principal second moment
	Iv    float64 // m⁴, smaller principal second moment
	Ru    float64 // m, radius of gyration about u
	Rv    float64 // m, radius of gyration about v: the least
	Alpha float64 // rad, from y to u, counter-clockwise positive

	WebSlender    float64 // -, c/t of the web, stem, longer leg or deeper wall (EN 1993-1-1 table 5.2); d/t of round tubes
	FlangeSlender float64 // -, c/t of the flange (compressed: the upper), shorter leg or narrower wall; 0 if none

	Chords   int     // number of chords of a chord set; else 0
	SpacingZ float64 // m, between chord centroids in the depth
	SpacingY float64 // m, between chord centroids in the width
	ChordA   float64 // m², area of one chord
	ChordRv  float64 // m, least radius of gyration of one chord

	Perimeter float64 // m²/m, painted surface; of tubes and boxes the outside only
	Mass      float64 // kg/m, nominal: what is billed, at 7850 kg/m³
	Thickness float64 // m, greatest of the parts; decides the yield band
}

// MassAt returns the nominal mass in kg/m of the section in a material of
// another density, kg/m³.
func (s Section) MassAt(density float64) float64 { return s.Mass * density / steelDensity }

// PolarRadius returns the polar radius of gyration about the shear centre, in m:
// √(Ry² + Rz² + Y0² + Z0²).
func (s Section) PolarRadius() float64 {
	return math.Sqrt(s.Ry*s.Ry + s.Rz*s.Rz + s.Y0*s.Y0 + s.Z0*s.Z0)
}
