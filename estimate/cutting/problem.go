package cutting

import "strconv"

// Limits of a problem; what is over them is refused.
const (
	MaxPieceRows = 1000    // rows of pieces
	MaxPieces    = 100_000 // pieces in all
	MaxStock     = 20      // stock lengths
	MinLength    = 10      // 0.1 mm: no piece or bar is shorter than 1 mm
	MaxLength    = 1e6     // 0.1 mm: no piece or bar is longer than 100 m
	MaxKerf      = 500     // 0.1 mm: 50 mm
	MaxCost      = 1e9     // minor units a bar
)

// Piece is a number of equal pieces.
type Piece struct {
	Mark   string `json:"mark"`   // names the piece; no two rows share one
	Length int64  `json:"length"` // 0.1 mm (whole tenths of a millimetre)
	Count  int    `json:"count"`
}

// Stock is one length in which bars can be had.
type Stock struct {
	Length    int64 `json:"length"`              // 0.1 mm
	Cost      int64 `json:"cost,omitempty"`      // of a bar, in whole minor units of one currency; LeastCost alone reads it
	Available int   `json:"available,omitempty"` // bars to be had; 0 = as many as wanted
}

// Objective says what a plan makes least.
type Objective string

// The objectives. The empty one is LeastLength, which is what a purchase by
// mass pays for.
const (
	LeastLength Objective = "length" // total length of the bars, 0.1 mm
	FewestBars  Objective = "bars"   // number of bars
	LeastCost   Objective = "cost"   // total cost of the bars, minor units
)

// Problem asks for a cutting plan.
type Problem struct {
	Pieces    []Piece   `json:"pieces"`
	Stock     []Stock   `json:"stock"`
	Kerf      int64     `json:"kerf"` // 0.1 mm lost at each cut
	Objective Objective `json:"objective,omitempty"`
}

// objective returns the objective with its default.
func (p Problem) objective() Objective {
	if p.Objective == "" {
		return LeastLength
	}
	return p.Objective
}

// price returns what a bar of the stock adds to the objective.
func (p Problem) price(s Stock) int64 {
	switch p.objective() {
	case FewestBars:
		return 1
	case LeastCost:
		return s.Cost
	default:
		return s.Length
	}
}

// longest returns the longest stock length, 0 where there is none.
func (p Problem) longest() int64 {
	var most int64
	for _, s := range p.Stock {
		most = max(most, s.Length)
	}
	return most
}

// millimetres prints tenths of a millimetre.
func millimetres(tenths int64) string {
	return strconv.FormatFloat(float64(tenths)/10, 'f', -1, 64) + " mm"
}

// metres prints tenths of a millimetre in metres.
func metres(tenths int64) string {
	return strconv.FormatFloat(float64(tenths)/10000, 'f', -1, 64) + " m"
}
