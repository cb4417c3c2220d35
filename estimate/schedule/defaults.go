package schedule

import (
	"maps"
	"slices"
	"strconv"

	"spanwright/estimate/assumption"
	"spanwright/structural/material"
	"spanwright/structural/unit"
)

// What is taken where schedule and Job sheet are silent. All of it is common
// practice, no source.
const (
	ungrouped         = "ungrouped"
	defaultBasis      = "allowable"
	defaultFactor     = 3   // a comfortable first pass where loads are rough
	defaultLimit      = 250 // span over n, for all kinds but the boom
	boomLimit         = 100 // a boom carries no finishes and nobody walks on it
	defaultGrade      = "S235"
	defaultPipeGrade  = "A53 B"
	defaultClass      = 5
	defaultConfidence = 0.8
	defaultCurrency   = "EUR"
)

const noSource = "common practice, no source"

// kindOf is the kind that follows from how a member is held.
func kindOf(m *Member) string {
	switch {
	case m.Treatment == ByMass:
		return "secondary steel"
	case m.Arrangement == strut, m.Arrangement == cantilever:
		return m.Arrangement
	}
	return "beam"
}

// The connection classes of the starting rate book.
const (
	simpleBeams = "simple beams"
	trestles    = "trestles"
	lattice     = "lattice"
	tubeBooms   = "tube booms"
	noClass     = "none" // bought with its connections, such as grating with clips
)

func connectionClasses() []string {
	return []string{simpleBeams, trestles, lattice, tubeBooms, noClass}
}

// The classes of secondary steel, which only some rate books have.
const (
	platforms = "platforms"
	stairs    = "stairs and rails"
)

// classOf is the connection class of a kind, among those that the rate book knows.
func classOf(kind string, known []string) string {
	switch {
	case hasWord(kind, "stair", "stairs", "ladder", "handrail", "rail", "railing") && slices.Contains(known, stairs):
		return stairs
	case hasWord(kind, "platform", "grating", "walkway", "flooring") && slices.Contains(known, platforms):
		return platforms
	case hasWord(kind, "boom"):
		return tubeBooms
	case hasWord(kind, "column", "post", "leg", "tower", "trestle"):
		return trestles
	case hasWord(kind, "chord", "diagonal", "bracing", "brace", "lattice"):
		return lattice
	}
	return simpleBeams
}

func limitOf(kind string) float64 {
	if hasWord(kind, "boom") {
		return boomLimit
	}
	return defaultLimit
}

func gradeOf(family string) string {
	switch family {
	case "PIPE":
		return defaultPipeGrade
	case "W":
		return "A992"
	case "C":
		return "A36"
	case "HSS", "HSS-ROUND":
		return "A500 C"
	}
	return defaultGrade
}

// defaults are the register entries of the defaults taken so far, one for each
// value of each field, and the sets of them that rows share.
type defaults struct {
	entries map[string]assumption.Entry
	shared  map[string]map[string]string
}

func newDefaults() *defaults {
	return &defaults{entries: map[string]assumption.Entry{}, shared: map[string]map[string]string{}}
}

// enter keeps the first entry of an id and returns the id.
func (d *defaults) enter(e assumption.Entry) string {
	if _, ok := d.entries[e.ID]; !ok {
		if e.Kind == "" {
			e.Kind, e.Source, e.Owner = assumption.Default, noSource, "Spanwright"
		}
		d.entries[e.ID] = e
	}
	return e.ID
}

// byValue enters a default of which there may be several values.
func (d *defaults) byValue(field, value, unit, statement string, c assumption.Confidence) string {
	return d.enter(assumption.Entry{ID: "default/" + field + "/" + assumption.Segment(value), Statement: statement, Value: value, Unit: unit, Confidence: c})
}

// share returns the same map for the same defaults, so that many rows cost little.
// The maps are never changed afterwards.
func (d *defaults) share(t taken) map[string]string {
	if len(t) == 0 {
		return nil
	}
	key := t.key()
	if _, ok := d.shared[key]; !ok {
		d.shared[key] = t
	}
	return d.shared[key]
}

func (d *defaults) group() string {
	return d.byValue("group", ungrouped, "", "Rows without a group are summed as one group.", assumption.Medium)
}

func (d *defaults) simple() string {
	return d.byValue("support", simple, "", "Members whose support is blank are simply supported at both ends.", assumption.Low)
}

func (d *defaults) foundation() string {
	return d.byValue("support", notSized, "", "Rows of kind foundation whose support is blank are not sized.", assumption.Medium)
}

func (d *defaults) kind(kind, arrangement string) string {
	statement := "Rows that are not sized and name neither kind nor product are secondary steel."
	if arrangement != "" {
		statement = "Members whose kind is blank are taken as a " + kind + " by their support."
	}
	return d.byValue("kind", kind, "", statement, assumption.Medium)
}

func (d *defaults) connection(class string) string {
	return d.byValue("connection class", class, "", "Connections are allowed for as class "+class+" by the kind of the member.", assumption.Low)
}

func (d *defaults) limit(n float64) string {
	text := strconv.FormatFloat(n, 'f', -1, 64)
	return d.byValue("deflection limit", text, "", "Deflection is limited to span / "+text+".", assumption.Medium)
}

func (d *defaults) restraint() string {
	return d.byValue("restraint", "full span", "", "The compression flange is restrained at the supports alone.", assumption.Medium)
}

func (d *defaults) lengthFactor() string {
	return d.byValue("length factor", "1 for spans, 2 for free ends", "", "Members in compression buckle over their longest span with K = 1, or over their longest overhang or cantilever with K = 2.", assumption.Medium)
}

func (d *defaults) grade(name string) string {
	return d.byValue("grade", name, "", "The steel is "+name+" where no grade is named.", assumption.Low)
}

// noteGrade enters a doubt about a family in a grade.
func (d *defaults) noteGrade(family, grade string, v material.Verdict) {
	d.enter(assumption.Entry{
		ID: "structural/grade/" + assumption.Segment(family) + "/" + assumption.Segment(grade), Kind: assumption.Structural,
		Statement: family + " in " + grade + ": " + v.Reason + "; better: " + v.Remedy + ".", Value: grade,
		Source: "family × grade table of the grade data", Owner: "Spanwright", Confidence: assumption.Low,
	})
}

// taken are the defaults of one row: register entry by field.
type taken map[string]string

func (t *taken) take(field, entry string) { (*t)[field] = entry }

// key is the same for the same defaults.
func (t taken) key() string {
	var b []byte
	for _, field := range slices.Sorted(maps.Keys(t)) {
		b = append(append(b, field...), 0)
		b = append(append(b, t[field]...), 0)
	}
	return string(b)
}

// fixedText writes a number of the settings for the register.
func fixedText(v float64) string { return unit.FormatNumber(v, unit.Unit{}, unit.Digits) }
