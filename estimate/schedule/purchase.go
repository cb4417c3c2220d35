package schedule

import (
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// defaultKerf is the width of a saw cut in m; common practice, no source.
const defaultKerf = 0.005

// mostStockLengths is the number of stock lengths of a job.
const mostStockLengths = 20

const stockExample = `lengths such as "12; 15 m"`

var (
	stocks = span{0.5, 100, true, "a stock length from 0.5 to 100 m"}
	kerfs  = span{0, 0.05, true, "a saw cut from 0 to 50 mm"}
)

// readPurchase reads how steel is bought: stock lengths, kerf and the way to
// purchased mass.
func (r *reader) readPurchase() {
	s := &r.job.Settings
	lengths, stock := r.stockLengths()
	s.StockLengths = lengths
	s.Purchase = r.jobWord(jobPurchase, purchases(), "is no way to buy")
	kerf := r.jobQuantity(jobKerf, unit.Length, kerfs)
	s.Kerf = kerf.value
	byPlan := s.Purchase == PurchaseFirstFit || s.Purchase == PurchaseLeastStock
	if stock == blank && byPlan {
		r.jobFault(jobPurchase, &complaint{s.Purchase, "is a cutting plan, and no Stock lengths are given", "enter Stock lengths, such as 12; 15 m, or waste here"})
	}
	if stock == blank && kerf.state == given {
		r.jobFault(jobKerf, &complaint{shorten(r.job.entries[jobKerf].cell.Text), "is a saw cut, and no Stock lengths are given", "enter Stock lengths, such as 12; 15 m, or leave it blank"})
	}
	if kerf.state == blank {
		s.Kerf = defaultKerf
		if byPlan {
			r.setting("default/kerf", "5", "A saw cut takes 5 mm of the bar.", assumption.Medium)
		}
	}
	if s.Purchase == "" {
		s.Purchase = PurchaseWaste
		if !r.job.given[jobPurchase] {
			r.setting("default/purchase", PurchaseWaste, "Steel is bought with the waste allowance of its form, not by a cutting plan.", assumption.Medium)
		}
	}
}

func purchases() []string { return []string{PurchaseWaste, PurchaseFirstFit, PurchaseLeastStock} }

// stockLengths reads "12; 15 m", ascending. Where the key names no unit, bare
// lengths take that of the last one.
func (r *reader) stockLengths() ([]float64, state) {
	e := r.job.entries[jobStock]
	if e.cell.Kind == lostKind {
		return nil, bad
	}
	whole, wrong := readText(e.cell, longestText, stockExample)
	if wrong != nil {
		r.jobFault(jobStock, wrong)
		return nil, bad
	}
	if whole.state == blank {
		r.job.given[jobStock] = false
		return nil, blank
	}
	implied := e.unit
	if implied.IsZero() {
		implied = lastUnit(whole.value)
	}
	var list []float64
	var problems []string // one mistake made in every part is reported once
	for part := range strings.SplitSeq(whole.value, ";") {
		v, wrong := oneStockLength(sheet.Cell{Kind: e.cell.Kind, Text: strings.TrimSpace(part)}, e.comma, implied)
		if wrong == nil && slices.Contains(list, v) {
			wrong = &complaint{shorten(strings.TrimSpace(part)), "is a stock length that is named already", "each length once"}
		}
		switch {
		case wrong == nil:
			list = append(list, v)
		case !slices.Contains(problems, wrong.problem):
			problems = append(problems, wrong.problem)
			r.jobFault(jobStock, wrong)
		}
	}
	if len(list) > mostStockLengths {
		r.jobFault(jobStock, &complaint{shorten(whole.value), "names too many lengths", "at most 20 stock lengths"})
		return nil, bad
	}
	if len(problems) > 0 {
		return nil, bad
	}
	slices.Sort(list)
	return list, given
}

func oneStockLength(c sheet.Cell, comma bool, implied unit.Unit) (float64, *complaint) {
	n, wrong := readQuantity(c, comma, unit.Length, implied, stockExample)
	switch {
	case wrong != nil:
		return 0, wrong
	case n.state == blank:
		return 0, &complaint{"", "has an empty place between its stock lengths", stockExample}
	case !stocks.holds(n.value):
		return 0, &complaint{shorten(c.Text), "is out of bounds", stocks.words}
	}
	return n.value, nil
}

// lastUnit is the unit that ends the text; zero where there is none.
func lastUnit(text string) unit.Unit {
	i := strings.LastIndexFunc(text, func(r rune) bool { return r >= '0' && r <= '9' })
	u, err := unit.Lookup(strings.TrimSpace(text[i+1:]))
	if err != nil || u.Dimension != unit.Length {
		return unit.Unit{}
	}
	return u
}
