// Package arrangement compares ways to hold a given length: which supports, which
// section of the main member, what towers, ballast and footings.
//
// Data's way: Candidates turns each Kind of a Study into holdings (supports along a
// beam); sizing chooses the main member; an exact analysis under that section's own
// weight gives the reactions, never the split method; the reactions go into ballast,
// tower legs as columns and footings; a long span is also tried as a parallel-chord
// lattice; the candidates come back sorted, each with the Notes of what was assumed.
//
// Reactions are characteristic values. x runs from the root of the held length
// towards its tip, negative behind the root. Everything is in SI: m, kg, N, Pa, m³.
package arrangement
