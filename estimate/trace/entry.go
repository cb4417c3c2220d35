package trace

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

// entry is the leaf of a register entry. The value shown is that used in the
// formula above it; empty stands for the entry's own.
func (t *Tracer) entry(e *assumption.Entry, used string) kid {
	return kid{e.ID, func() draft { return draft{Node: t.entryNode(e, used)} }}
}

func (t *Tracer) entryNode(e *assumption.Entry, used string) Node {
	n := Node{
		Figure: e.ID, What: e.Statement, Value: used, Unit: e.Unit, Kind: Assumed, Source: e.Source, Owner: e.Owner,
		Version: t.version(e), Clause: e.Clause, Confidence: string(e.Confidence), Scope: strings.TrimSpace(e.Scope + " " + e.Subject), Spread: e.Spread,
	}
	if e.Kind == assumption.Input {
		n.Kind = Input
	}
	if e.Spread != nil {
		likely := text(document.Number(e.Spread.Base()))
		switch n.Value {
		case "":
			n.Value = likely
		case likely:
		case text(document.Number(1 + e.Spread.Base())):
			n.Notes = append(n.Notes, "1 + "+likely+", the likely value")
		}
		if e.Value != "" {
			n.Notes = append(n.Notes, e.Value)
		}
	} else if n.Value == "" {
		n.Value = e.Value
	}
	if e.Group != "" {
		n.Notes = append(n.Notes, "correlated with the group "+e.Group)
	}
	if s, ok := t.ranked[e.ID]; ok {
		n.Notes = append(n.Notes, fmt.Sprintf("in the range: share of variance %s, swing %s, narrowing %s", short(s.Share), short(s.Swing), short(s.Narrowing)))
	}
	if e.Resizes && slices.ContainsFunc(e.Feeds, func(f string) bool { return strings.HasPrefix(f, "member/") }) {
		n.Notes = append(n.Notes, "a change may also choose other sections")
	}
	return n
}

// short is a figure of the simulation to three digits, as ranges are read.
func short(n document.Number) string {
	return grouped(text(document.Number(threeDigits(n.Rounded()))))
}

// version says of what state of its source an entry is.
func (t *Tracer) version(e *assumption.Entry) string {
	switch e.Kind {
	case assumption.Input:
		return hash(t.doc.Job.SourceSHA256)
	case assumption.Multiplier:
		if strings.HasPrefix(e.Value, "version ") {
			return e.Value
		}
	case assumption.Default, assumption.Structural:
		return fmt.Sprintf("engine version %d", t.doc.EngineVersion)
	case assumption.Risk, assumption.Setting:
		if !strings.HasPrefix(e.Source, "rate book") {
			return hash(t.doc.Job.JobSHA256)
		}
	}
	return hash(t.doc.Job.RateBookSHA256)
}

func hash(sum string) string {
	if sum == "" {
		return ""
	}
	return "SHA-256 " + sum
}

// known is the leaf of an entry by its id. An id that the register lacks is shown
// as such.
func (t *Tracer) known(id, used string) kid {
	if e, ok := t.entries[id]; ok {
		return t.entry(e, used)
	}
	return kid{id, func() draft {
		return draft{Node: Node{Figure: id, What: "Assumption " + id + ".", Value: used, Kind: Assumed, Source: "rate book " + t.doc.Job.RateBook,
			Version: hash(t.doc.Job.RateBookSHA256), Notes: []string{"the register has no such entry"}}}
	}}
}

// listed are the leaves of those ids that the register holds.
func (t *Tracer) listed(ids ...string) []kid {
	var out []kid
	for _, id := range ids {
		if e, ok := t.entries[id]; ok {
			out = append(out, t.entry(e, ""))
		}
	}
	return out
}

// stated is the leaf of a number that a row of the schedule states.
func (t *Tracer) stated(m *document.Member, symbol string, v value, unit string) kid {
	id := rowID(m) + "#" + symbol
	return kid{id, func() draft {
		n := Node{Figure: id, What: fmt.Sprintf("Row %s of the schedule states %s.", m.Mark, symbol), Value: v.text, Unit: unit, Kind: Input,
			Source: t.source() + ", row " + m.Mark, Owner: "schedule", Version: hash(t.doc.Job.SourceSHA256)}
		if e, ok := t.entries["input/"+column(symbol)]; ok {
			n.Owner, n.Confidence = e.Owner, string(e.Confidence)
		}
		return draft{Node: n}
	}}
}

func (t *Tracer) source() string {
	if t.doc.Job.Source == "" {
		return "posted schedule"
	}
	return "schedule " + t.doc.Job.Source
}

// rowID is the id under which what a member's row states is found.
func rowID(m *document.Member) string { return "member/" + assumption.Segment(m.Mark) + "/net" }

// column is the input of the register that a measure of a row belongs to.
func column(symbol string) string {
	switch {
	case strings.HasPrefix(symbol, "position of "):
		return "point position"
	case strings.HasPrefix(symbol, "dynamic factor on horizontal"):
		return "dynamic factor, horizontal"
	case strings.HasPrefix(symbol, "dynamic factor"):
		return "dynamic factor"
	case strings.HasPrefix(symbol, "wheel of "):
		return "moving load"
	case strings.HasPrefix(symbol, "joints"):
		return "joints"
	}
	return symbol
}

// constant is a leaf of a cited clause.
func constant(what, value, unit, clause, source, version string) kid {
	return kid{"", func() draft {
		return draft{Node: Node{What: what, Value: value, Unit: unit, Kind: Constant, Clause: clause, Source: source, Version: version}}
	}}
}
