// Package assumption is the register of everything that an estimate believes
// rather than knows, and of the inputs that it was given.
//
//	schedule, structural notes, rate book, settings
//	  → Register.Add (each stage adds its own)
//	  → Register.Feed (each stage says which figures an entry feeds)
//	  → Register.Entries, sorted by id, in the estimate document
//
// It is a leaf: every stage may import it, it imports only spread.
package assumption

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"spanwright/estimate/spread"
)

// Kind says where an entry's value comes from.
type Kind string

// The kinds of entries.
const (
	Input      Kind = "input"      // given by the schedule or the job sheet
	Default    Kind = "default"    // taken because the schedule left it blank
	Allowance  Kind = "allowance"  // a known item not yet counted
	Rate       Kind = "rate"       // a price or a multiple of one
	Multiplier Kind = "multiplier" // an editable factor on categories
	Systemic   Kind = "systemic"   // a factor on the whole base
	Structural Kind = "structural" // a simplification of the checks
	Setting    Kind = "setting"    // a choice of the calculation, such as the confidence
	Risk       Kind = "risk"       // a discrete event beside the spreads
)

// Confidence says how firmly a value is believed.
type Confidence string

// The grades of confidence.
const (
	Low    Confidence = "low"
	Medium Confidence = "medium"
	High   Confidence = "high"
)

// Entry is one line of the register.
type Entry struct {
	ID         string         `json:"id" doc:"stable id; keys the random stream of a spread"`
	Kind       Kind           `json:"kind" enum:"input,default,allowance,rate,multiplier,systemic,structural,setting,risk"`
	Statement  string         `json:"statement" doc:"what is assumed, in one sentence"`
	Value      string         `json:"value,omitempty" doc:"the value taken, where it is not a spread"`
	Unit       string         `json:"unit,omitempty"`
	Spread     *spread.Spread `json:"spread,omitempty" doc:"what is believed about the number"`
	Group      string         `json:"group,omitempty" doc:"correlation group"`
	Scope      string         `json:"scope,omitempty" doc:"the scope that won: member, group, family, scheme, project or rate book"`
	Subject    string         `json:"subject,omitempty" doc:"what the scope names"`
	Source     string         `json:"source" doc:"where the value comes from"`
	Clause     string         `json:"clause,omitempty" doc:"standard and clause of a structural note"`
	Owner      string         `json:"owner" doc:"who set it"`
	Confidence Confidence     `json:"confidence" enum:"low,medium,high"`
	Feeds      []string       `json:"feeds" doc:"ids of the figures that change with it while every section stays as chosen; {mark}, {group} and {item} stand for those of each member concerned"`
	Resizes    bool           `json:"may_change_sections,omitempty" doc:"a change may also choose other sections, and so move masses and costs in steps"`
}

// Register collects entries. The zero value is ready to use; it is not safe for
// concurrent use.
type Register struct {
	entries map[string]*Entry
}

// Add puts an entry in the register. Adding the same id again keeps the first
// entry and joins the figures that both feed; an error says so when the two
// disagree about the value.
func (r *Register) Add(e Entry) error {
	if e.ID == "" || e.Statement == "" || e.Source == "" {
		return fmt.Errorf("assumption %q: id, statement and source are obligatory", e.ID)
	}
	if r.entries == nil {
		r.entries = map[string]*Entry{}
	}
	old, ok := r.entries[e.ID]
	if !ok {
		c := e
		c.Feeds = slices.Clone(e.Feeds)
		r.entries[e.ID] = &c
		return nil
	}
	if old.Value != e.Value || !sameSpread(old.Spread, e.Spread) {
		return fmt.Errorf("assumption %q is stated twice with different values", e.ID)
	}
	old.Feeds = append(old.Feeds, e.Feeds...)
	return nil
}

func sameSpread(a, b *spread.Spread) bool {
	if a == nil || b == nil {
		return a == b
	}
	return *a == *b
}

// Feed records that the entry id feeds the figures named. An unknown id is a
// fault of the program and reported as an error.
func (r *Register) Feed(id string, figures ...string) error {
	e, ok := r.entries[id]
	if !ok {
		return fmt.Errorf("assumption %q is not in the register", id)
	}
	e.Feeds = append(e.Feeds, figures...)
	return nil
}

// Entries returns the register sorted by id, each entry's figures sorted and
// without repetition.
func (r *Register) Entries() []Entry {
	out := make([]Entry, 0, len(r.entries))
	for _, e := range r.entries {
		c := *e
		c.Feeds = slices.Clone(e.Feeds)
		sort.Strings(c.Feeds)
		c.Feeds = slices.Compact(c.Feeds)
		if c.Feeds == nil {
			c.Feeds = []string{}
		}
		out = append(out, c)
	}
	sort.Slice(out, func(i, j int) bool { return out[i].ID < out[j].ID })
	return out
}

// Segment makes a name safe as one segment of an id: ids are segments joined by
// "/", with "*" and braces reserved for patterns.
func Segment(name string) string {
	return segments.Replace(name)
}

var segments = strings.NewReplacer("%", "%25", "/", "%2F", "*", "%2A", "{", "%7B", "}", "%7D")
