package takeoff

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"strconv"
	"strings"
	"sync"

	"spanwright/estimate/cutting"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// SectionPlan is how the bars of one section and grade are bought and cut.
type SectionPlan struct {
	Designation, Grade string
	LineMass           float64 // kg/m
	Kerf               float64 // m
	Net                float64 // kg, of the pieces
	Purchased          float64 // kg, of the stock: its length times kg/m
	Plan               cutting.Plan
	Split              []string // pieces that are made of several, in words
	ShopJoints         int      // butt joints in pieces longer than the longest stock
}

// A hint is looked for where a section has at most hintRows rows: it takes one plan
// for each row and length tried. hintRange is how much shorter a piece may become,
// in tenths of a millimetre.
const (
	hintRows  = 60
	hintRange = 50
)

// Purchase makes the cutting plans that the settings ask for, sorted by section and
// grade: first fit, or least stock with a proven bound. It returns none where steel
// is bought with the waste allowance. Rows by mass, plate, and sections welded from
// plates have no plan. A piece that is delivered in parts is cut as these, a part that
// is longer than the longest stock as equal pieces that the shop joins. The error
// names the section; cancelling the context is an error too.
func Purchase(ctx context.Context, pieces []Piece, s Settings) ([]SectionPlan, error) {
	if s.Purchase != schedule.PurchaseFirstFit && s.Purchase != schedule.PurchaseLeastStock {
		return nil, nil
	}
	if len(s.Stock) == 0 {
		return nil, fmt.Errorf("purchase by %s: found no stock lengths; accepted: at least one, such as 12 m", s.Purchase)
	}
	all := lots(pieces)
	plans, errs := make([]SectionPlan, len(all)), make([]error, len(all))
	turns := make(chan struct{}, runtime.GOMAXPROCS(0))
	var wg sync.WaitGroup
	for i, lot := range all {
		turns <- struct{}{}
		wg.Go(func() {
			plans[i], errs[i] = s.cut(ctx, lot)
			<-turns
		})
	}
	wg.Wait()
	if err := errors.Join(errs...); err != nil {
		return nil, err
	}
	return plans, nil
}

// lots parts the pieces that come out of bars by section and grade, sorted.
func lots(pieces []Piece) [][]Piece {
	by := map[string][]Piece{}
	for _, p := range byMark(pieces) {
		if p.fromBars() {
			key := p.Designation + "\x00" + p.Grade
			by[key] = append(by[key], p)
		}
	}
	var out [][]Piece
	for _, key := range sortedKeys(by) {
		out = append(out, by[key])
	}
	return out
}

func (p Piece) fromBars() bool {
	return p.sized() && p.Designation != "" && p.Waste != ratebook.WastePlate && p.Weld == 0 && p.Member.Length > 0 && p.Member.Quantity > 0
}

// cut plans one section and grade.
func (s Settings) cut(ctx context.Context, lot []Piece) (SectionPlan, error) {
	out := SectionPlan{Designation: lot[0].Designation, Grade: lot[0].Grade, LineMass: lot[0].LineMass, Kerf: s.Kerf}
	problem := cutting.Problem{Kerf: tenths(s.Kerf)}
	for _, length := range s.Stock {
		problem.Stock = append(problem.Stock, cutting.Stock{Length: tenths(length)})
	}
	for _, p := range lot {
		out.Net += p.Net()
		n := Parts(p, s) * bars(p, s)
		if n > 1 {
			out.Split = append(out.Split, p.Member.Mark+": "+cutWords(p, s))
		}
		out.ShopJoints += ShopJoints(p, s)
		problem.Pieces = append(problem.Pieces, cutting.Piece{Mark: p.Member.Mark, Length: tenths(p.Member.Length / float64(n)), Count: p.Member.Quantity * n})
	}
	if len(problem.Pieces) > cutting.MaxPieceRows {
		problem.Pieces = merge(problem.Pieces)
	}
	var err error
	out.Plan, err = s.solve(ctx, problem)
	if err != nil {
		return SectionPlan{}, fmt.Errorf("cutting plan of %s: %w", strings.TrimSpace(out.Designation+" "+out.Grade), err)
	}
	out.Purchased = float64(out.Plan.StockLength) / 1e4 * out.LineMass
	return out, nil
}

func (s Settings) solve(ctx context.Context, p cutting.Problem) (cutting.Plan, error) {
	if s.Purchase == schedule.PurchaseFirstFit {
		return cutting.FirstFit(ctx, p)
	}
	var l cutting.Limits
	if len(p.Pieces) <= hintRows {
		l.HintRange = hintRange
	}
	return cutting.Optimise(ctx, p, l)
}

// merge joins rows of one length under the first of their marks.
func merge(rows []cutting.Piece) []cutting.Piece {
	var out []cutting.Piece
	at := map[int64]int{}
	for _, r := range rows {
		i, ok := at[r.Length]
		if !ok {
			at[r.Length] = len(out)
			out = append(out, r)
			continue
		}
		out[i].Count += r.Count
	}
	return out
}

// tenths returns a length in whole tenths of a millimetre.
func tenths(m float64) int64 { return int64(math.Round(m * 1e4)) }

// splitWords says what it takes to deliver a length in n parts.
func splitWords(n int, length float64) string { return joinWords("site splice", n, length) }

func joinWords(joint string, n int, length float64) string {
	if n != 2 {
		joint += "s"
	}
	return fmt.Sprintf("%d %s into %d pieces of %s m", n-1, joint, n, plain(length/float64(n), 3))
}

// cutWords says of which pieces those of the row are made.
func cutWords(p Piece, s Settings) string {
	n, k := Parts(p, s), bars(p, s)
	part := p.Member.Length / float64(n)
	words := fmt.Sprintf("each piece of %s m is cut as ", plain(p.Member.Length, 3))
	switch {
	case k == 1:
		return words + splitWords(n, p.Member.Length)
	case n == 1:
		return words + joinWords("shop butt joint", k, part)
	}
	return words + splitWords(n, p.Member.Length) + ", each of them as " + joinWords("shop butt joint", k, part)
}

// plain writes a number with at most so many decimals.
func plain(x float64, places int) string {
	text := strconv.FormatFloat(x, 'f', places, 64)
	if !strings.Contains(text, ".") {
		return text
	}
	return strings.TrimRight(strings.TrimRight(text, "0"), ".")
}

// plan returns the plan of the row's section; ok tells whether there is one.
func (s Settings) plan(p Piece) (plan SectionPlan, ok bool) {
	if !p.fromBars() {
		return SectionPlan{}, false
	}
	for _, x := range s.Plans {
		if x.Designation == p.Designation && x.Grade == p.Grade && x.Net > 0 {
			return x, true
		}
	}
	return SectionPlan{}, false
}
