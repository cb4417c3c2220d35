package pricing

import "spanwright/estimate/spread"

// Model is the compiled cost of a job as a function of its assumptions:
//
//	total = (Σ over Terms) · Π Overall + Σ over Risks that occur
//	term  = max(Coefficient · Π Factors, Least) · Π After
//
// in major units of the job's currency. Identical products within a category are
// merged, so that the cost of one trial does not grow with the number of members.
type Model struct {
	Inputs  []Input // sorted by ID, each used by at least one term, by Overall or by a risk
	Terms   []Term
	Overall []Factor // factors on the whole base, such as the systemic factor
	Risks   []Risk   // sorted by ID
}

// Input is one assumption that the total depends on.
type Input struct {
	ID     string        // the assumption's id
	Spread spread.Spread // what is believed about it
	Group  string        // correlation group; empty for an independent one

	// Stream keys the random numbers; empty is the ID. Inputs of one stream are one
	// belief, such as the growth of an index over several times: in a trial all have
	// the same percentile. They are of one group.
	Stream string
}

// Factor is Offset + x, where x is the value of Inputs[Input]. An allowance a
// enters as 1 + a; a rate or multiplier enters as 0 + x.
type Factor struct {
	Input  int
	Offset float64
}

// Term is one merged product. Where Least is above zero the product does not fall
// below it: with a term that takes the same product off it is what is lacking to a
// minimum. After are factors upon the greater of the
// two, such as a percentage taken of the line; without a Least they are empty and
// stand among Factors.
type Term struct {
	Category    string
	Coefficient float64
	Factors     []Factor // sorted by Input, then Offset
	Least       float64
	After       []Factor // sorted by Input, then Offset
}

// Risk is a discrete risk: with its probability it adds the value of its input
// to the total of a trial, outside Overall and outside every category. It is no
// part of the base.
type Risk struct {
	ID          string  // keys the stream of its occurrence
	Probability float64 // 0 to 1
	Impact      int     // index in Inputs: cost when it occurs, may be negative
}
