package bridge

import (
	"bytes"
	"encoding/json"
	"fmt"
	"maps"
	"slices"

	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/spread"
)

// moved returns the players whose inputs differ between two jobs: taking them
// alone from b changes a, or taking all but them from b does not make b.
func moved(a, b job.Job) ([]Cause, error) {
	ends := [2]job.Job{}
	var err error
	for i, all := range []bool{false, true} {
		if ends[i], err = mix(a, b, func(Cause) bool { return all }); err != nil {
			return nil, err
		}
	}
	var out []Cause
	for _, c := range players() {
		alone, err := mix(a, b, func(x Cause) bool { return x == c })
		if err != nil {
			return nil, err
		}
		rest, err := mix(a, b, func(x Cause) bool { return x != c })
		if err != nil {
			return nil, err
		}
		sameAlone, err := same(alone, ends[0])
		if err != nil {
			return nil, err
		}
		sameRest, err := same(rest, ends[1])
		if err != nil {
			return nil, err
		}
		if !sameAlone || !sameRest {
			out = append(out, c)
		}
	}
	return out, nil
}

// same tells whether two jobs are one in all that decides a result: texts that only
// explain, such as sources and authors, are left out.
func same(a, b job.Job) (bool, error) {
	x, err := bare(a)
	if err != nil {
		return false, err
	}
	y, err := bare(b)
	return bytes.Equal(x, y), err
}

// explaining are the fields of a job that decide no amount.
var explaining = []string{"source", "author", "reason", "confidence_of", "note", "version", "owner", "description", "remarks", "valid_until", "label", "rate_book_sha256", "build", "defaults", "omissions", "definition", "name"}

func bare(j job.Job) ([]byte, error) {
	j.Source, j.Build, j.Defaults, j.Omissions, j.BookSHA256 = job.Source{}, "", nil, nil, ""
	j.Settings.Project, j.Settings.Scheme, j.Settings.Definition = "", "", nil
	data, err := json.Marshal(j)
	if err != nil {
		return nil, fmt.Errorf("bridge: writing a job: %w", err)
	}
	var tree any
	d := json.NewDecoder(bytes.NewReader(data))
	d.UseNumber()
	if err := d.Decode(&tree); err != nil {
		return nil, fmt.Errorf("bridge: reading a job: %w", err)
	}
	return json.Marshal(strip(tree))
}

// strip removes the explaining texts of a job; the names of multipliers, rates and
// risks stay, because they key draws and scopes.
func strip(v any) any {
	switch x := v.(type) {
	case map[string]any:
		_, keyed := x["scope"]
		_, risk := x["probability"]
		for _, k := range explaining {
			if k == "name" && (keyed || risk) {
				continue
			}
			if _, ok := x[k].(string); ok || k == "version" {
				delete(x, k)
			}
		}
		if _, figure := x["spread"]; figure { // how firmly a figure is believed moves nothing
			delete(x, "confidence")
		}
		for k := range x {
			x[k] = strip(x[k])
		}
	case []any:
		for i := range x {
			x[i] = strip(x[i])
		}
	}
	return v
}

// mix returns the job that takes each player from b where from says so, else from
// a. Both jobs are left as they are. Between books of two kinds the allowances and
// norms are part of the rates: neither can be priced with those of the other.
func mix(a, b job.Job, chosen func(Cause) bool) (job.Job, error) {
	from := func(c Cause) bool {
		if c == Allowance && a.Book.Kind != b.Book.Kind {
			c = Rate
		}
		return chosen(c)
	}
	pick := func(c Cause) job.Job {
		if from(c) {
			return b
		}
		return a
	}
	out := pick(Scope)
	out.Sampling = a.Sampling
	out.Members = members(a.Members, b.Members, from)
	settings(&out.Settings, pick)
	book := out.Book
	book.Currency = pick(Rate).Book.Currency
	book.Kind, book.ReferencePrice = pick(Rate).Book.Kind, pick(Rate).Book.ReferencePrice
	rates(&book, a.Book, b.Book, from)
	allowances(&book, pick(Allowance).Book, a.Book, b.Book, from)
	book.Exchange = pick(Exchange).Book.Exchange
	book.Indices, book.SpendMonths = pick(Escalation).Book.Indices, pick(Escalation).Book.SpendMonths
	book.BaseDate = pick(BaseDate).Book.BaseDate
	policy := pick(RiskPolicy)
	book.Correlation = correlations(policy.Book.Correlation, a.Book.Correlation, b.Book.Correlation)
	class, own := fmt.Sprint(out.Settings.EstimateClass), fmt.Sprint(policy.Settings.EstimateClass)
	book.Systemic = maps.Clone(policy.Book.Systemic)
	if deviation, ok := policy.Book.Systemic[own]; ok {
		book.Systemic = map[string]float64{class: deviation}
	}
	out.Book = book
	out.Risks = policy.Risks
	out.Multipliers = multipliers(a.Multipliers, b.Multipliers, from)
	return out, nil
}

// settings takes each setting of the job from the cause that it belongs to.
func settings(s *schedule.Settings, pick func(Cause) job.Job) {
	basis, escalation, policy := pick(DesignBasis).Settings, pick(Escalation).Settings, pick(RiskPolicy).Settings
	s.DesignBasis, s.Factor = basis.DesignBasis, basis.Factor
	s.Money, s.SpendDate = escalation.Money, escalation.SpendDate
	s.BaseDate = pick(BaseDate).Settings.BaseDate
	s.Confidence, s.ManagementReserve = policy.Confidence, policy.ManagementReserve
	s.EstimateClass = pick(Allowance).Settings.EstimateClass
}

// members matches rows by mark. Rows in one job alone come and go with the scope.
func members(a, b []schedule.Member, from func(Cause) bool) []schedule.Member {
	base, other := a, b
	if from(Scope) {
		base, other = b, a
	}
	at := map[string]schedule.Member{}
	for _, m := range other {
		at[m.Mark] = m
	}
	out := slices.Clone(base)
	for i := range out {
		match, ok := at[out[i].Mark]
		if !ok {
			continue
		}
		m := &out[i]
		if from(Section) != from(Scope) {
			section(m, match)
		}
		if from(DesignBasis) != from(Scope) {
			limits(m, match)
		}
		if from(Allowance) != from(Scope) && m.Defaults["connection_class"] != "" && match.Defaults["connection_class"] != "" {
			m.ConnectionClass = match.ConnectionClass // by the classes of the rate book
		}
	}
	return out
}

// section gives a row the family, section and grade of another.
func section(m *schedule.Member, other schedule.Member) {
	if m.Treatment == schedule.ByMass || other.Treatment == schedule.ByMass {
		return // the treatment is scope
	}
	m.Family, m.Section, m.Grade, m.Treatment = other.Family, other.Section, other.Grade, other.Treatment
	m.SameSizeAs, m.MaxDepth = other.SameSizeAs, other.MaxDepth
}

// limits gives a row the limits of another that both took by default.
func limits(m *schedule.Member, other schedule.Member) {
	both := func(field string) bool { return m.Defaults[field] != "" && other.Defaults[field] != "" }
	if both("deflection_limit") {
		m.DeflectionLimit = other.DeflectionLimit
	}
	if both("restraint_m") {
		m.Restraint = other.Restraint
	}
	if both("length_factor") {
		m.LengthFactor = other.LengthFactor
	}
}

// believed is the spread of a figure in both jobs: where the likely value is the
// same the whole spread is risk policy, else it goes with the figure's own cause.
func believed(a, b spread.Spread, own Cause, from func(Cause) bool) spread.Spread {
	cause := own
	if a.Base() == b.Base() {
		cause = RiskPolicy
	}
	if from(cause) {
		return b
	}
	return a
}

func figure(a, b ratebook.Figure, own Cause, from func(Cause) bool) ratebook.Figure {
	out := a
	if from(own) {
		out = b
	}
	out.Spread = believed(a.Spread, b.Spread, own, from)
	out.Group = a.Group
	if from(RiskPolicy) {
		out.Group = b.Group
	}
	return out
}

// figures joins the figures of two books by name. One that stands in a single book
// is kept whatever the cause, because rows of that book's job may ask for it.
func figures(a, b map[string]ratebook.Figure, own Cause, from func(Cause) bool) map[string]ratebook.Figure {
	if a == nil && b == nil {
		return nil
	}
	out := maps.Clone(b)
	if out == nil {
		out = map[string]ratebook.Figure{}
	}
	for k, x := range a {
		if y, both := b[k]; both {
			x = figure(x, y, own, from)
		}
		out[k] = x
	}
	return out
}
