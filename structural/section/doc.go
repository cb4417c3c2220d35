// Package section holds the section catalogues and computes section properties
// from dimensions.
//
//	data/*.csv (embedded) → rows → shape formulas → catalogue by family
//	"HE 200 B" → Find → family and size → catalogue row → Section
//	"CHS 508x25.4" → Find → dimensions → shape formulas → Section
//	family → Series → sections, lightest first → sizing
//
// All values are in SI: m, m², m³, m⁴, m⁶, kg/m. Mass is the nominal one of the
// standard for catalogue rows and 7850 kg/m³ × A for sizes by dimensions.
package section
