package ranges

import (
	"fmt"
	"math"

	"spanwright/estimate/pricing"
	"spanwright/estimate/spread"
)

// program is a model validated and compiled for evaluation by columns.
type program struct {
	inputs     []input
	beliefs    []belief // by first input
	groups     []group
	terms      []term
	overall    []pricing.Factor
	categories []string // in order of first appearance
	risks      []risk
	matrix     *mixing // nil without a correlation matrix
}

// input is one assumption with its sampler and random numbers.
type input struct {
	id      string
	sampler spread.Sampler
	draws   uniforms
	group   int // index of groups, −1 for none
	row     int // row of the correlation matrix, −1 for none
	belief  int // index of beliefs
}

// belief is what the inputs of one stream have in common: their uniform number.
type belief struct {
	key   string // of the random numbers
	group string
	first int  // input
	drawn bool // one of them is not fixed
}

// keyOf is what keys the random numbers of an input.
func keyOf(in pricing.Input) string {
	if in.Stream != "" {
		return in.Stream
	}
	return in.ID
}

// group is a correlation group: z = √r·Z + √(1−r)·e with one common factor Z, so
// that any two members have the latent correlation r.
type group struct {
	name        string
	members     int // beliefs that are not fixed
	rho         float64
	common, own float64 // √r, √(1−r)
	draws       uniforms
}

// term is a pricing.Term with its category as an index.
type term struct {
	category    int
	coefficient float64
	factors     []pricing.Factor
	least       float64
	after       []pricing.Factor
}

// plain reports whether t is a bare product.
func (t *term) plain() bool { return t.least == 0 && len(t.after) == 0 }

// risk is a pricing.Risk with the random numbers of its occurrence.
type risk struct {
	id          string
	probability float64
	impact      int
	draws       uniforms
}

// purpose says what a model is compiled for.
type purpose struct {
	latents bool // fixed inputs keep their group: their spread may change
	joint   bool // ids of the matrix may be missing: another model has them
}

// Limits of a model.
const (
	MaxInputs     = 20_000
	MaxTerms      = 1_000_000
	MaxCategories = 32
	MaxRisks      = 1000
)

// compile validates m under s; the error names the part at fault.
func compile(m pricing.Model, s Settings, use purpose) (*program, error) {
	if len(m.Terms) == 0 || len(m.Terms) > MaxTerms {
		return nil, fault("model.terms", len(m.Terms), fmt.Sprintf("1 to %d terms", MaxTerms))
	}
	if len(m.Inputs) > MaxInputs {
		return nil, fault("model.inputs", len(m.Inputs), fmt.Sprintf("at most %d inputs", MaxInputs))
	}
	p := &program{overall: m.Overall}
	var err error
	if p.matrix, err = s.Matrix.compile(s.Seed); err != nil {
		return nil, err
	}
	if err := p.addInputs(m.Inputs, s, use); err != nil {
		return nil, err
	}
	if err := p.matrix.checkKnown(m.Inputs, use); err != nil {
		return nil, err
	}
	if err := p.addTerms(m.Terms); err != nil {
		return nil, err
	}
	if err := p.addRisks(m.Risks, s.Seed); err != nil {
		return nil, err
	}
	if err := p.checkFactors("model.overall", m.Overall); err != nil {
		return nil, err
	}
	return p, nil
}

// addInputs compiles spreads, streams and groups. An input in the matrix leaves its
// group.
func (p *program) addInputs(inputs []pricing.Input, s Settings, use purpose) error {
	index, beliefs := map[string]int{}, map[string]int{}
	for i, in := range inputs {
		where := fmt.Sprintf("model.inputs[%d] %q", i, in.ID)
		if in.ID == "" || i > 0 && in.ID <= inputs[i-1].ID {
			return fault(where, "its id empty, repeated or out of order", "ids that rise")
		}
		sampler, err := in.Spread.Sampler()
		if err != nil {
			return fmt.Errorf("ranges: %s: %w", where, err)
		}
		key := keyOf(in)
		next := input{id: in.ID, sampler: sampler, draws: newUniforms(s.Seed, "assumption", key), group: -1, row: p.matrix.row(key)}
		if next.belief, err = p.believe(beliefs, in, i); err != nil {
			return err
		}
		first := !sampler.Fixed() && !p.beliefs[next.belief].drawn
		p.beliefs[next.belief].drawn = p.beliefs[next.belief].drawn || first
		if in.Group != "" {
			rho, ok := s.Correlation[in.Group]
			if !ok && next.row < 0 {
				return fault(where+" group", fmt.Sprintf("%q", in.Group), fmt.Sprintf("a group of the settings' correlation: %q", sortedKeys(s.Correlation)))
			}
			if _, ok := index[in.Group]; !ok {
				index[in.Group] = len(p.groups)
				p.groups = append(p.groups, newGroup(s.Seed, in.Group, rho))
			}
			if next.row < 0 {
				next.group = index[in.Group]
			}
			if next.row < 0 && first {
				p.groups[next.group].members++
			}
		}
		p.inputs = append(p.inputs, next)
	}
	for i := range p.inputs {
		if g := p.inputs[i].group; g >= 0 && (p.groups[g].rho == 0 || p.inputs[i].sampler.Fixed() && !use.latents) {
			p.inputs[i].group = -1
		}
	}
	return nil
}

// believe returns the number of the belief of input i.
func (p *program) believe(known map[string]int, in pricing.Input, i int) (int, error) {
	key := keyOf(in)
	n, ok := known[key]
	if !ok {
		n = len(p.beliefs)
		known[key] = n
		p.beliefs = append(p.beliefs, belief{key: key, group: in.Group, first: i})
	}
	if b := p.beliefs[n]; b.group != in.Group {
		return 0, fault(fmt.Sprintf("model.inputs[%d] %q group", i, in.ID), fmt.Sprintf("%q", in.Group),
			fmt.Sprintf("%q, that of model.inputs[%d], which is of the same stream %q", b.group, b.first, key))
	}
	return n, nil
}

// newGroup returns the group of a rank correlation. All groups hang on one common
// factor: two inputs of groups with latent correlations r and s have √(r·s), so
// that costs of different groups are not taken as unrelated.
func newGroup(seed uint64, name string, rho float64) group {
	r := LatentCorrelation(rho)
	return group{name: name, rho: rho, common: math.Sqrt(r), own: math.Sqrt(1 - r), draws: newUniforms(seed, "common factor", "")}
}

// addTerms checks the terms and numbers their categories.
func (p *program) addTerms(terms []pricing.Term) error {
	index := map[string]int{}
	for i, t := range terms {
		where := fmt.Sprintf("model.terms[%d]", i)
		if !isFinite(t.Coefficient) {
			return fault(where+" coefficient", t.Coefficient, "a finite number")
		}
		if !(t.Least >= 0 && isFinite(t.Least)) {
			return fault(where+" least", t.Least, "0 for none, or a finite number above it")
		}
		if err := p.checkFactors(where, t.Factors); err != nil {
			return err
		}
		if err := p.checkFactors(where+" after", t.After); err != nil {
			return err
		}
		if _, ok := index[t.Category]; !ok {
			index[t.Category] = len(p.categories)
			p.categories = append(p.categories, t.Category)
		}
		p.terms = append(p.terms, term{index[t.Category], t.Coefficient, t.Factors, t.Least, t.After})
	}
	if len(p.categories) > MaxCategories {
		return fault("model.terms", fmt.Sprintf("%d categories", len(p.categories)), fmt.Sprintf("at most %d", MaxCategories))
	}
	return nil
}

// addRisks checks the discrete risks and keys their streams.
func (p *program) addRisks(risks []pricing.Risk, seed uint64) error {
	if len(risks) > MaxRisks {
		return fault("model.risks", len(risks), fmt.Sprintf("at most %d risks", MaxRisks))
	}
	for i, r := range risks {
		where := fmt.Sprintf("model.risks[%d] %q", i, r.ID)
		if r.ID == "" || i > 0 && r.ID <= risks[i-1].ID {
			return fault(where, "its id empty, repeated or out of order", "ids that rise")
		}
		if !(0 <= r.Probability && r.Probability <= 1) {
			return fault(where+" probability", r.Probability, "0 to 1")
		}
		if r.Impact < 0 || r.Impact >= len(p.inputs) {
			return fault(where+" impact", r.Impact, fmt.Sprintf("an input, 0 to %d", len(p.inputs)-1))
		}
		p.risks = append(p.risks, risk{r.ID, r.Probability, r.Impact, newUniforms(seed, "risk", r.ID)})
	}
	return nil
}

// checkFactors tests that factors point at inputs and have finite offsets.
func (p *program) checkFactors(where string, factors []pricing.Factor) error {
	for i, f := range factors {
		if f.Input < 0 || f.Input >= len(p.inputs) {
			return fault(fmt.Sprintf("%s factor %d input", where, i), f.Input, fmt.Sprintf("0 to %d", len(p.inputs)-1))
		}
		if !isFinite(f.Offset) {
			return fault(fmt.Sprintf("%s factor %d offset", where, i), f.Offset, "a finite number")
		}
	}
	return nil
}

// isFinite reports whether x is neither NaN nor infinite.
func isFinite(x float64) bool { return math.Abs(x) <= math.MaxFloat64 }
