package calibration

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"

	"spanwright/estimate/spread"
)

// Proposal is what the outturns say of a rate book: data, until a person accepts a
// change of it.
type Proposal struct {
	Jobs        []string `json:"jobs" doc:"the comparable jobs it rests on"`
	Left        []Left   `json:"left" doc:"jobs left out, with reasons"`
	PerTonne    bool     `json:"per_tonne" doc:"cost ratios are per tonne, so that they hold beside the mass factor"`
	Figures     []Figure `json:"figures"`
	Unfitted    []Left   `json:"unfitted" doc:"figures that too few jobs have"`
	Shared      *Shared  `json:"shared,omitempty" doc:"scatter that all categories of a job share; absent where fewer than two categories were fitted"`
	Changes     []Change `json:"changes"`
	Recommended bool     `json:"recommended" doc:"at least one change is recommended"`
	Statement   string   `json:"statement" doc:"what the back-test says, in one or two sentences"`
}

// Figure is one fitted ratio.
type Figure struct {
	Name     string    `json:"name" doc:"a category, or one of total, masses and hours"`
	Target   string    `json:"target,omitempty" enum:"multiplier,allowance,rate"`
	Measure  string    `json:"measure" doc:"what is divided by what"`
	Unit     string    `json:"unit,omitempty"`
	Jobs     int       `json:"jobs"`
	Median   float64   `json:"median" doc:"over all kinds: exp(μ)"`
	Between  float64   `json:"between_kinds" doc:"deviation of the logarithm between kinds (τ)"`
	Within   float64   `json:"within_kinds" doc:"pooled deviation of the logarithm within kinds (σ)"`
	Kinds    []KindFit `json:"kinds"`
	BackTest Score     `json:"back_test"`
}

// KindFit is a figure for one kind of structure.
type KindFit struct {
	Kind         string        `json:"kind" doc:"empty for any other kind"`
	Jobs         int           `json:"jobs"`
	OwnMedian    float64       `json:"own_median,omitempty" doc:"of its jobs alone, before shrinking"`
	OwnDeviation float64       `json:"own_deviation,omitempty" doc:"deviation of the logarithm of its jobs alone; absent for one job"`
	Weight       float64       `json:"pooled_weight" doc:"how far the centre is moved to the pooled one, 0 to 1"`
	Median       float64       `json:"median" doc:"after shrinking"`
	Deviation    float64       `json:"deviation" doc:"within the kind, after shrinking"`
	Freedom      float64       `json:"degrees_of_freedom" doc:"of the Student distribution of a job to come"`
	Prediction   spread.Spread `json:"prediction" doc:"of a job to come: P10 and P90"`
}

// Shared is the scatter that all categories of a job share.
type Shared struct {
	Jobs      int     `json:"jobs"`
	Deviation float64 `json:"deviation" doc:"of the logarithm"`
	Widened   float64 `json:"widened" doc:"the same for the few jobs that it is known from"`
}

// Change is one proposed change of a rate book. What it means, by target:
//
//   - multiplier: the factor on the categories; Old is what the past estimates were
//     priced with.
//   - allowance: the factor from take-off to weighed mass, so 1 + connections, bolts
//     and growth together.
//   - rate: hours per weighed tonne.
//   - systemic: the factor of median 1 on the whole base, by estimate class.
type Change struct {
	Target      string         `json:"target" enum:"multiplier,allowance,rate,systemic"`
	Name        string         `json:"name"`
	Categories  []string       `json:"categories,omitempty"`
	SubjectKind string         `json:"subject_kind,omitempty" doc:"kind of structure; empty for every kind without a change of its own"`
	Class       string         `json:"class,omitempty" doc:"estimate class of a systemic factor; empty for all"`
	Old         *spread.Spread `json:"old,omitempty" doc:"absent where none was handed in"`
	New         spread.Spread  `json:"new"`
	Jobs        int            `json:"jobs"`
	Recommended bool           `json:"recommended"`
	Excludes    []string       `json:"excludes,omitempty" doc:"targets that hold the same effect: accept one or the other"`
	Evidence    string         `json:"evidence"`
}

// Canonical returns the proposal's bytes and their SHA-256 in hex. The order of the
// outturns does not change them.
func (p Proposal) Canonical() ([]byte, string, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	if err := e.Encode(p); err != nil {
		return nil, "", fmt.Errorf("writing the proposal: %w", err)
	}
	sum := sha256.Sum256(b.Bytes())
	return b.Bytes(), hex.EncodeToString(sum[:]), nil
}
