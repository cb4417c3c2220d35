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
// as the longest stock length and the vehicle allow. Rows by mass are made up of
// shorter parts anyway and count as one.
func Parts(p Piece, s Settings) int {
	most := s.Limits.Vehicle.Length
	if n := len(s.Stock); n > 0 {
		if longest := slices.Max(s.Stock); !(most > 0) || longest < most {
			most = longest
		}
	}
	if !p.sized() || !(most > 0) || !(p.Member.Length > most) {
		return 1
	}
	return int(min(math.Ceil(p.Member.Length/most-1e-9), 1e6))
}

// Splices returns the site splices of all pieces of the row: one fewer than parts
// in each.
func Splices(p Piece, s Settings) int { return p.Member.Quantity * (Parts(p, s) - 1) }

// parts returns the delivered parts of all pieces of the row.
func parts(p Piece, s Settings) int { return p.Member.Quantity * Parts(p, s) }
