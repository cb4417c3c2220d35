package resistance

import "math"

// wording describes one check to a reader.
type wording struct {
	id       string
	clause   string
	formula  string
	unit     string
	passFail bool
}

// check puts an answer and what was noted on the way under the description.
func (w *wording) check(u use, t *trace) Check {
	return Check{
		ID: w.id, Clause: w.clause, Formula: w.formula,
		Demand: u.demand, Resistance: u.resistance, Unit: w.unit, Utilisation: u.utilisation,
		PassFail: w.passFail, Inputs: t.inputs, Note: t.note,
	}
}

// use is what a formula body answers. The zero value means that the check does not
// apply.
type use struct {
	applies     bool
	demand      float64
	resistance  float64
	utilisation float64
}

// against is the use of a resistance by a demand in the same unit. What is not a
// finite number fails and is answered as 0, so that no answer holds NaN or infinity.
func against(demand, resistance float64) use {
	return use{applies: true, demand: finite(demand), resistance: finite(resistance), utilisation: ratio(demand, resistance)}
}

// refuse is the answer of a check that a case is not covered by its basis.
func refuse() use { return use{applies: true, demand: 1, utilisation: ceiling} }

func finite(v float64) float64 {
	if math.Abs(v) <= math.MaxFloat64 {
		return v
	}
	return 0
}

// trace notes what a formula body works with. A nil trace notes nothing.
type trace struct {
	inputs []Quantity
	note   string
}

// put notes a quantity; one that is not a finite number is left out.
func (t *trace) put(symbol string, value float64, unit string) {
	if t != nil && math.Abs(value) <= math.MaxFloat64 {
		t.inputs = append(t.inputs, Quantity{Symbol: symbol, Value: value, Unit: unit})
	}
}

func (t *trace) say(note string) {
	if t != nil {
		t.note = note
	}
}
