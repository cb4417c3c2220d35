package cutting

import (
	"fmt"
	"strconv"
	"strings"
)

// Fault is one thing wrong with a problem.
type Fault struct {
	Pointer string `json:"pointer"` // JSON pointer (RFC 6901) into the problem
	Found   string `json:"found"`
	Problem string `json:"problem"`
	Remedy  string `json:"remedy"` // what would be accepted
}

// Faults are all the faults of a problem, in the order of its fields.
type Faults []Fault

// Error returns one line for each fault.
func (f Faults) Error() string {
	lines := make([]string, len(f))
	for i, x := range f {
		lines[i] = fmt.Sprintf("%s: %s: found %s; accepted: %s", x.Pointer, x.Problem, x.Found, x.Remedy)
	}
	return strings.Join(lines, "\n")
}

func (f *Faults) add(pointer, found, problem, remedy string) {
	*f = append(*f, Fault{pointer, found, problem, remedy})
}

// within refuses a length outside least to most, all in 0.1 mm.
func (f *Faults) within(pointer, what string, v, least, most int64) bool {
	if v >= least && v <= most {
		return true
	}
	f.add(pointer, millimetres(v), what+" out of range", millimetres(least)+" to "+millimetres(most))
	return false
}

// Validate returns all faults of the problem as Faults, or nil. It also refuses
// what the available bars cannot hold by their number and length alone; that a
// plan exists is known only once one has been found.
func (p Problem) Validate() error {
	var f Faults
	p.validatePieces(&f)
	p.validateStock(&f)
	f.within("/kerf", "kerf", p.Kerf, 0, MaxKerf)
	switch p.objective() {
	case LeastLength, FewestBars, LeastCost:
	default:
		f.add("/objective", quoted(string(p.Objective)), "unknown objective", "length, bars, cost")
	}
	if len(f) == 0 {
		p.validateAvailable(&f)
	}
	if len(f) == 0 {
		return nil
	}
	return f
}

func (p Problem) validatePieces(f *Faults) {
	if n := len(p.Pieces); n == 0 || n > MaxPieceRows {
		f.add("/pieces", fmt.Sprintf("%d rows", n), "number of rows out of range", fmt.Sprintf("1 to %d rows", MaxPieceRows))
	}
	longest, total := p.longest(), 0
	first := map[string]int{}
	for i, x := range p.Pieces[:min(len(p.Pieces), MaxPieceRows)] {
		at := "/pieces/" + strconv.Itoa(i)
		if x.Mark == "" {
			f.add(at+"/mark", "nothing", "mark missing", "a mark that no other row has")
		} else if j, twice := first[x.Mark]; twice {
			f.add(at+"/mark", quoted(x.Mark), fmt.Sprintf("mark already stands in row %d", j), "a mark that no other row has")
		} else {
			first[x.Mark] = i
		}
		if f.within(at+"/length", "length of "+quoted(x.Mark), x.Length, MinLength, MaxLength) && longest > 0 && x.Length > longest {
			f.add(at+"/length", millimetres(x.Length), "piece "+quoted(x.Mark)+" is longer than every stock length", "up to the longest stock length, "+millimetres(longest))
		}
		if x.Count < 1 || x.Count > MaxPieces {
			f.add(at+"/count", strconv.Itoa(x.Count), "count of "+quoted(x.Mark)+" out of range", fmt.Sprintf("1 to %d", MaxPieces))
		} else {
			total += x.Count
		}
	}
	if total > MaxPieces {
		f.add("/pieces", fmt.Sprintf("%d pieces in all", total), "too many", fmt.Sprintf("at most %d pieces", MaxPieces))
	}
}

func (p Problem) validateStock(f *Faults) {
	if n := len(p.Stock); n == 0 || n > MaxStock {
		f.add("/stock", fmt.Sprintf("%d stock lengths", n), "number of stock lengths out of range", fmt.Sprintf("1 to %d", MaxStock))
	}
	for i, s := range p.Stock[:min(len(p.Stock), MaxStock)] {
		at := "/stock/" + strconv.Itoa(i)
		f.within(at+"/length", "stock length", s.Length, MinLength, MaxLength)
		if p.Objective == LeastCost && (s.Cost < 1 || s.Cost > MaxCost) || s.Cost < 0 {
			f.add(at+"/cost", strconv.FormatInt(s.Cost, 10), "cost of a bar out of range", fmt.Sprintf("1 to %d minor units, or nothing where the objective is not cost", int64(MaxCost)))
		}
		if s.Available < 0 || s.Available > MaxPieces {
			f.add(at+"/available", strconv.Itoa(s.Available), "bars available out of range", fmt.Sprintf("0 (as many as wanted) to %d", MaxPieces))
		}
	}
}

// validateAvailable refuses pieces that the bars available cannot hold: all
// pieces at least as long as one row's must go into bars at least as long.
func (p Problem) validateAvailable(f *Faults) {
	for i, x := range p.Pieces {
		var width, count, room, places int64
		for _, y := range p.Pieces {
			if y.Length >= x.Length {
				width += (y.Length + p.Kerf) * int64(y.Count)
				count += int64(y.Count)
			}
		}
		bounded := true
		for _, s := range p.Stock {
			if s.Length < x.Length {
				continue
			}
			bounded = bounded && s.Available > 0
			room += (s.Length + p.Kerf) * int64(s.Available)
			places += (s.Length + p.Kerf) / (x.Length + p.Kerf) * int64(s.Available)
		}
		if bounded && (width > room || count > places) {
			f.add("/pieces/"+strconv.Itoa(i), fmt.Sprintf("%d pieces of %s and longer, %s with kerf", count, millimetres(x.Length), metres(width)),
				"not enough bars available for "+quoted(x.Mark),
				fmt.Sprintf("at most %d such pieces, %s in all, or more bars of %s and longer", places, metres(room), millimetres(x.Length)))
		}
	}
}

// quoted is a text as a fault shows it, shortened.
func quoted(text string) string {
	const most = 60
	if r := []rune(text); len(r) > most {
		text = string(r[:most]) + "…"
	}
	return strconv.Quote(text)
}
