// Package section holds the section catalogues and computes section properties
// from dimensions.
//
//	data/*.csv (embedded) → rows → shape formulas → catalogue by family
//	"HE 200 B", "W18x50" → Find → family and size → catalogue row → Section
//	"CHS 508x25.4", "2x UPN 200 @ 600" → Find → dimensions → shape formulas → Section
//	family → Series → sections, lightest first → sizing
//	Section → Design → Section with the wall that AISC 360-22 reckons with
//
// All values are in SI: m, m², m³, m⁴, m⁶, kg/m. Mass is the nominal one of the
// standard for catalogue rows and 7850 kg/m³ × A for sizes by dimensions.
// Doubly symmetric shapes have closed forms (shapes.go, plated.go), the others are
// integrated along their outline (outline.go, asymmetric.go).
package section
