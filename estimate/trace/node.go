package trace

import "spanwright/estimate/spread"

// Kind says how a figure comes about.
type Kind string

// The kinds of nodes. The last three are the leaves of a tree.
const (
	Sum        Kind = "sum"        // of its children, a difference where one is subtracted
	Product    Kind = "product"    // of factors
	Quantity   Kind = "quantity"   // counted by the take-off, or an intermediate value of a formula
	Choice     Kind = "choice"     // a section, with the checks that chose it
	Check      Kind = "check"      // demand over resistance
	Effect     Kind = "effect"     // of actions on a member, from the analysis
	Percentile Kind = "percentile" // of the simulated range
	Input      Kind = "input"      // given by the schedule or the job
	Assumed    Kind = "assumption" // an entry of the register
	Constant   Kind = "constant"   // of a cited clause, standard or definition
)

// Leaf tells whether nodes of the kind are made of nothing further.
func (k Kind) Leaf() bool { return k == Input || k == Assumed || k == Constant }

// Node is one figure and what it is made of.
type Node struct {
	Figure     string         `json:"figure,omitempty" doc:"id to ask for"`
	What       string         `json:"what" doc:"in one sentence"`
	Value      string         `json:"value,omitempty" doc:"as the document prints it"`
	Unit       string         `json:"unit,omitempty"`
	Kind       Kind           `json:"kind" enum:"sum,product,quantity,choice,check,effect,percentile,input,assumption,constant"`
	Formula    string         `json:"formula,omitempty" doc:"in words or symbols"`
	Arithmetic string         `json:"arithmetic,omitempty" doc:"the numbers put in; thousands stand apart by a no-break space"`
	Rounding   string         `json:"rounding,omitempty" doc:"the rule that acts on this value"`
	Source     string         `json:"source,omitempty" doc:"where a leaf comes from"`
	Owner      string         `json:"owner,omitempty" doc:"who set it"`
	Version    string         `json:"version,omitempty" doc:"of the source: hash or number"`
	Clause     string         `json:"clause,omitempty" doc:"standard and clause, or handbook"`
	Confidence string         `json:"confidence,omitempty" doc:"how firmly it is believed: low, medium, high"`
	Scope      string         `json:"scope,omitempty" doc:"the scope that won, with what it names"`
	Spread     *spread.Spread `json:"spread,omitempty" doc:"what is believed about the number"`
	Notes      []string       `json:"notes,omitempty"`
	Repeated   bool           `json:"repeated,omitempty" doc:"explained where the tree shows it first"`
	Cut        int            `json:"cut,omitempty" doc:"children left out by a limit"`
	Next       []string       `json:"next,omitempty" doc:"figures to ask for next, of those left out"`
	Children   []Node         `json:"children,omitempty"`
}

// Summary is one figure that can be asked for.
type Summary struct {
	Figure string `json:"figure"`
	Value  string `json:"value"`
	Unit   string `json:"unit,omitempty"`
}
