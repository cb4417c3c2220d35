// Package unit reads and writes physical quantities at the edges of the
// program; inside it everything is SI: m, kg, s, N, Pa, K, rad.
//
//	cell text "12'-6 1/2\""  ─┐
//	column head "Length (ft)" ─┴→ Header, Lookup → Parse → SI float64, 10 significant digits
//	SI float64 → Format, FormatNumber, FormatFeetInches → text for people
//
// A bare number takes the unit that its column implies; where none is implied
// the answer is an error and never a guess, as it is for a bare "ton".
package unit
