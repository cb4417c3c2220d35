package schedule

import (
	"context"
	"slices"
	"strings"

	"spanwright/estimate/spread"
	"spanwright/structural/unit"
)

// Risk is a discrete event that may come and move the cost, beside the spreads of
// prices and quantities.
type Risk struct {
	Name        string        `json:"name"`        // once in the schedule
	Probability float64       `json:"probability"` // above 0, below 1
	Impact      spread.Spread `json:"impact"`      // in the job's currency if it comes; triangular between limits, or fixed; negative for an opportunity
	Owner       string        `json:"owner,omitempty"`
	Source      string        `json:"source,omitempty"`
}

// The columns of the sheet Risks.
const (
	riskName = iota
	riskProbability
	riskLow
	riskLikely
	riskHigh
	riskOwner
	riskSource
	riskCount
)

// riskHeads is indexed by the columns of the sheet Risks.
var riskHeads = [riskCount]definition{
	riskName: {Column: Column{Header: "Risk", Obligatory: true, Meaning: "name of the event, once on the sheet", Example: "piles meet rock"},
		hints: []string{"name", "event", "title", "description"}},
	riskProbability: {Column: Column{Header: "Probability (%)", Obligatory: true, Unit: "%", Meaning: "probability that it comes, above 0 and below 100 %", Example: "20"},
		dimensions: []unit.Dimension{unit.Percent}, hints: []string{"chance", "likelihood", "p"}},
	riskLow: {Column: Column{Header: "Low", Meaning: "least cost if it comes, in the job's currency; negative for an opportunity", Blank: "the likely amount, where High is blank too", Example: "20000"},
		hints: []string{"minimum", "min", "best case", "optimistic"}},
	riskLikely: {Column: Column{Header: "Likely", Obligatory: true, Meaning: "likely cost if it comes", Example: "45000"},
		hints: []string{"most likely", "impact", "amount", "cost", "mode"}},
	riskHigh: {Column: Column{Header: "High", Meaning: "greatest cost if it comes", Blank: "the likely amount, where Low is blank too", Example: "90000"},
		hints: []string{"maximum", "max", "worst case", "pessimistic"}},
	riskOwner: {Column: Column{Header: "Owner", Meaning: "who watches it", Example: "marine engineer"},
		hints: []string{"responsible"}},
	riskSource: {Column: Column{Header: "Source", Meaning: "where the figures come from", Example: "ground report, invented"},
		hints: []string{"basis", "reference"}},
}

// RiskColumns returns the columns of the sheet Risks, in the order of the template.
func RiskColumns() []Column { return described(riskHeads[:]) }

var (
	probabilities = span{0, 1, false, "a probability above 0 and below 100 %"}
	impacts       = span{-1e12, 1e12, true, "an amount between -1e12 and 1e12"}
)

// readRisks reads the risks, sorted by name.
func (r *reader) readRisks(ctx context.Context, s annexSource) error {
	err := r.readAnnex(ctx, s, riskHeads[:], func(w *annexRow) { r.risks = append(r.risks, w.risk()) })
	slices.SortStableFunc(r.risks, func(a, b Risk) int { return naturalCompare(a.Name, b.Name) })
	return err
}

func (w *annexRow) risk() Risk {
	name := w.needed(riskName, "give the event a name")
	if name.state == given {
		w.once(riskName, name.value)
	}
	p := w.quantity(riskProbability, unit.Percent, probabilities)
	switch {
	case p.state == blank:
		w.judge(riskProbability, &complaint{"", "the probability is blank", probabilities.words})
	case p.state == given && !(p.value < 1):
		w.judge(riskProbability, &complaint{w.cells[riskProbability].Text, "is certain, and so no risk", probabilities.words + "; what is certain belongs into the schedule"})
	}
	return Risk{
		Name: name.value, Probability: p.value, Impact: w.impact(),
		Owner: w.text(riskOwner, longestName).value, Source: w.text(riskSource, longestText).value,
	}
}

// impact reads low, likely and high, or the likely amount alone.
func (w *annexRow) impact() spread.Spread {
	low, likely, high := w.quantity(riskLow, unit.Number, impacts), w.quantity(riskLikely, unit.Number, impacts), w.quantity(riskHigh, unit.Number, impacts)
	switch {
	case low.state == bad || likely.state == bad || high.state == bad:
	case likely.state == blank:
		w.judge(riskLikely, &complaint{"", "the likely amount is blank", "enter it, alone or between Low and High"})
	case low.state != high.state:
		id, other := riskLow, "High"
		if high.state == blank {
			id, other = riskHigh, "Low"
		}
		w.judge(id, &complaint{"", "is blank, and " + other + " is given", "enter both Low and High, or neither"})
	case low.state == given && !(low.value <= likely.value && likely.value <= high.value):
		found := []string{w.cells[riskLow].Text, w.cells[riskLikely].Text, w.cells[riskHigh].Text}
		w.judge(riskLikely, &complaint{strings.Join(found, ", "), "is out of order", "low ≤ likely ≤ high, also where they are negative"})
	case low.state == given && low.value < high.value:
		return spread.NewTriangular(low.value, likely.value, high.value)
	case likely.value == 0:
		w.judge(riskLikely, &complaint{w.cells[riskLikely].Text, "changes no cost", "the amount that it would cost, negative for what it would save"})
	default:
		return spread.NewFixed(likely.value)
	}
	return spread.Spread{}
}
