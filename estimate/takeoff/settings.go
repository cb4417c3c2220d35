package takeoff

import (
	"math"
	"slices"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// Settings are what a take-off takes from the job besides its rows.
type Settings struct {
	Coating   string // system, where a row names none
	Execution string // class, where a row names none
	Limits    ratebook.Limits
	Haul      float64   // km from shop to site; 0 takes the book's norm
	Stock     []float64 // m, stock lengths of sections; none for lengths as wanted
	Kerf      float64   // m
	Purchase  string    // one of the ways of schedule; empty is by waste
	Plans     []SectionPlan
}

// SettingsOf returns the settings of a job, without cutting plans.
func SettingsOf(b ratebook.Book, s schedule.Settings) Settings {
	limits := ratebook.DefaultLimits()
	if b.Limits != nil {
		limits = *b.Limits
	}
	return Settings{
		Coating: s.Coating, Execution: s.ExecutionClass, Limits: limits, Haul: s.HaulDistance / 1000,
		Stock: slices.Clone(s.StockLengths), Kerf: s.Kerf, Purchase: s.Purchase,
	}
}

func (s Settings) coating(p Piece) string { return or(p.Member.Coating, s.Coating) }

func (s Settings) execution(p Piece) string { return or(p.Member.ExecutionClass, s.Execution) }

func or(own, job string) string {
	if own != "" {
		return own
	}
	return job
}

// Parts returns in how many equal parts one piece of the row is delivered: as few
// as the vehicle allows.
func Parts(p Piece, s Settings) int { return inParts(p.Member.Length, s.Limits.Vehicle.Length) }

// inParts returns into how few equal parts of at most most a length goes; most of 0
// is no limit.
func inParts(length, most float64) int {
	if !(most > 0) || !(length > most) {
		return 1
	}
	return int(min(math.Ceil(length/most-1e-9), 1e6))
}

// Splices returns the site splices of all pieces of the row: one fewer than parts
// in each. The parts of rows by mass are clipped or bolted within the allowance of
// their connection class.
func Splices(p Piece, s Settings) int {
	if !p.sized() {
		return 0
	}
	return p.Member.Quantity * (Parts(p, s) - 1)
}

// ShopJoints returns the butt joints that the shop makes in all pieces of the row:
// one fewer in each delivered part than the bars of the longest stock length that
// it takes. Only what is cut from bars has any.
func ShopJoints(p Piece, s Settings) int { return parts(p, s) * (bars(p, s) - 1) }

// bars returns how many equal pieces one delivered part of the row is cut as.
func bars(p Piece, s Settings) int {
	if !p.fromBars() || len(s.Stock) == 0 {
		return 1
	}
	return inParts(p.Member.Length/float64(Parts(p, s)), slices.Max(s.Stock))
}

// parts returns the delivered parts of all pieces of the row.
func parts(p Piece, s Settings) int { return p.Member.Quantity * Parts(p, s) }
