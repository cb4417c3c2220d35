// Package calculator is the structural engine, the cutting plan and the range as
// stateless calculators: plain requests in, plain answers out, nothing stored.
//
//	JSON ─ Decode ─▶ request (lengths in m, forces in kN: units stand in the field names)
//	  ─ faults, all at once, by JSON pointer ─▶ Faults
//	  ─ SI ─▶ structural packages ─▶ SI ─▶ answer in the units of its field names
//	  ─ every number finite ─▶ answer, with the caution
//
// The same functions serve the API and the offline commands.
package calculator

// Limits of one request. What lies over them is a fault, not a long computation.
const (
	MaxSpans    = 50
	MaxLoads    = 200
	MaxWheels   = 32 // of all trains together
	MaxStations = 401
	MaxMasses   = 50
	MaxSections = 1000 // candidates of one sizing, families counted by their sizes

	MaxWheelSpans = 100 // wheels of all trains times spans: a second or two of work
)

// gravity is the standard acceleration of free fall, m/s² (ISO 80000-3).
const gravity = 9.80665

// Bounds of what a request may hold; wide of any structure, narrow enough that no
// result overflows.
const (
	maxLength    = 1e4  // m
	maxForce     = 1e9  // kN, kN/m or kNm
	maxStiffness = 1e15 // kN/m, kNm/rad or kNm²
	minStiffness = 1e-9 // the same
	maxMass      = 1e9  // kg/m
	maxPlace     = 1e3  // m, spacings of wheels
)
