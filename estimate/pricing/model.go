package pricing

import "spanwright/estimate/spread"

// Model is the compiled cost of a job as a function of its assumptions:
//
//	total = (Σ over Terms of Coefficient · Π Factors) · Π Overall
//
// in major units of the job's currency. Identical products within a category are
// merged, so that the cost of one trial does not grow with the number of members.
type Model struct {
	Inputs  []Input // sorted by ID, each used by at least one term or by Overall
	Terms   []Term
	Overall []Factor // factors on the whole base, such as the systemic factor
}

// Input is one assumption that the total depends on.
type Input struct {
	ID     string        // the assumption's id; keys its random stream
	Spread spread.Spread // what is believed about it
	Group  string        // correlation group; empty for an independent one
}

// Factor is Offset + x, where x is the value of Inputs[Input]. An allowance a
// enters as 1 + a; a rate or multiplier enters as 0 + x.
type Factor struct {
	Input  int
	Offset float64
}

// Term is one merged product.
type Term struct {
	Category    string
	Coefficient float64
	Factors     []Factor // sorted by Input, then Offset
}
