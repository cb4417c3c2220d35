package trace

import (
	"slices"
	"strings"
	"sync"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

// Tracer answers for the figures of one document. It is safe for concurrent use.
type Tracer struct {
	doc      document.Document
	lines    map[string]*document.Line
	carbon   map[string]*document.CarbonLine
	items    map[string]*document.Item
	members  map[string]*document.Member // by segment of the mark
	entries  map[string]*assumption.Entry
	holds    map[string][]*document.Member // by item
	fed      map[string][]string           // entries that name a figure itself, in the order of the register
	ranked   map[string]*document.Sensitivity
	doubts   map[string][]string
	category map[string][]*document.Line
	group    map[string][]*document.Line
	inGroup  map[string][]*document.Item
	module   map[string][]*document.CarbonLine
	plan     map[bar]*document.CuttingPlan
	cut      map[bar]document.Number // kg of the rows cut from a plan
	sums     sync.Map                // by item and formula: way
	rows     sync.Map                // by item: what its rows bring, []kid
}

// New indexes a document once, for many questions.
func New(d document.Document) *Tracer {
	t := &Tracer{doc: d,
		lines: map[string]*document.Line{}, carbon: map[string]*document.CarbonLine{}, items: map[string]*document.Item{},
		members: map[string]*document.Member{}, entries: map[string]*assumption.Entry{}, holds: map[string][]*document.Member{},
		fed: map[string][]string{}, ranked: map[string]*document.Sensitivity{}, doubts: map[string][]string{},
		category: map[string][]*document.Line{}, group: map[string][]*document.Line{}, inGroup: map[string][]*document.Item{},
		module: map[string][]*document.CarbonLine{}, plan: map[bar]*document.CuttingPlan{}, cut: map[bar]document.Number{},
	}
	t.indexCosts()
	t.indexMembers()
	for i := range d.Assumptions {
		e := &d.Assumptions[i]
		t.entries[e.ID] = e
		for _, f := range e.Feeds {
			t.fed[f] = append(t.fed[f], e.ID)
		}
	}
	for i := range d.Range.Sensitivities {
		s := &d.Range.Sensitivities[i]
		t.ranked[s.Assumption] = s
	}
	for _, f := range d.Findings {
		for _, id := range f.Figures {
			t.doubts[id] = append(t.doubts[id], string(f.Severity)+": "+f.Message)
		}
	}
	return t
}

func (t *Tracer) indexCosts() {
	for i := range t.doc.Lines {
		l := &t.doc.Lines[i]
		t.lines[l.ID] = l
		t.category[l.Category] = append(t.category[l.Category], l)
		t.group[l.Group] = append(t.group[l.Group], l)
	}
	for i := range t.doc.Items {
		it := &t.doc.Items[i]
		t.items[it.ID] = it
		t.inGroup[it.Group] = append(t.inGroup[it.Group], it)
	}
	if t.doc.Carbon == nil {
		return
	}
	for i := range t.doc.Carbon.Lines {
		l := &t.doc.Carbon.Lines[i]
		t.carbon[l.ID] = l
		t.module[l.Module] = append(t.module[l.Module], l)
	}
}

func (t *Tracer) indexMembers() {
	for i := range t.doc.Cutting {
		p := &t.doc.Cutting[i]
		t.plan[bar{p.Section, p.Grade}] = p
	}
	for i := range t.doc.Members {
		m := &t.doc.Members[i]
		t.members[assumption.Segment(m.Mark)] = m
		t.cut[bar{m.Section, m.Grade}] += m.Net
		for _, id := range append([]string{m.Item, m.ConcreteItem}, m.JointItems...) {
			if id != "" {
				t.holds[id] = append(t.holds[id], m)
			}
		}
	}
}

// resolve returns the draft of a figure, of a part of one (after #), or of an
// entry of the register.
func (t *Tracer) resolve(figure string) (draft, bool) {
	d, ok := t.figure(figure)
	if !ok {
		if at := strings.LastIndex(figure, "#"); at > 0 {
			return t.part(figure, figure[:at])
		}
		return draft{}, false
	}
	for _, doubt := range t.doubts[figure] {
		d.Notes = slices.DeleteFunc(d.Notes, func(note string) bool { return strings.HasSuffix(doubt, ": "+note) })
		d.Notes = append(d.Notes, doubt)
	}
	return d, true
}

// part looks for a part among the children of its figure, two levels down: the
// parts of a figure stand no deeper.
func (t *Tracer) part(id, figure string) (draft, bool) {
	whole, ok := t.resolve(figure)
	if !ok {
		return draft{}, false
	}
	if segment, ok := strings.CutSuffix(strings.TrimPrefix(figure, "member/"), "/net"); ok && t.members[segment] != nil {
		whole.kids = t.rowParts(t.members[segment])
	}
	for level := 0; level < 2; level++ {
		var below []kid
		for _, k := range whole.kids {
			if k.figure == id {
				return k.make(), true
			}
			if level == 0 && strings.HasPrefix(k.figure, figure+"#") {
				below = append(below, k.make().kids...)
			}
		}
		whole.kids = below
	}
	return draft{}, false
}

// figure finds whose figure an id is.
func (t *Tracer) figure(id string) (draft, bool) {
	if l, ok := t.lines[id]; ok {
		return t.line(l), true
	}
	if l, ok := t.carbon[id]; ok {
		return t.carbonLine(l), true
	}
	if d, ok := t.total(id); ok {
		return d, true
	}
	head, rest, _ := strings.Cut(id, "/")
	if at := strings.LastIndex(rest, "/"); at > 0 {
		name, last := rest[:at], rest[at+1:]
		switch head {
		case "item":
			if it, ok := t.items[name]; ok {
				return t.quantity(it, last)
			}
		case "group":
			return t.groupFigure(name, last)
		case "member":
			return t.memberFigure(name, last)
		}
	}
	if e, ok := t.entries[id]; ok {
		return t.entry(e, "").make(), true
	}
	return draft{}, false
}

// total finds the figures of which a document has one.
func (t *Tracer) total(id string) (draft, bool) {
	switch id {
	case "base":
		return t.base(), true
	case "contingency":
		return t.contingency(), true
	case "range":
		return t.rangeFigure(), true
	case atConfidence:
		return t.atConfidence(), true
	case "tax":
		return t.tax(), t.doc.Totals.Tax.Sign() != 0
	case reserve:
		return t.reserve(), t.doc.Totals.Reserve.Sign() != 0
	case "total/net", "total/delivered", "total/purchased":
		return t.totalMass(strings.TrimPrefix(id, "total/")), true
	}
	if name, ok := strings.CutPrefix(id, "category/"); ok {
		return t.categoryFigure(name)
	}
	return t.carbonTotal(id)
}

// kid makes the child of a figure by its id.
func (t *Tracer) kid(id string) kid {
	return kid{id, func() draft {
		if d, ok := t.resolve(id); ok {
			return d
		}
		return draft{Node: Node{What: "The document names " + id + ", which it does not hold.", Kind: Constant, Source: "document", Notes: []string{"not found"}}}
	}}
}
