package workbook

import (
	"sort"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// inputs are the cells that are meant to be changed, each once, and where the
// figures that are made of them find them.
type inputs struct {
	namer        *namer
	entries      map[string]assumption.Entry // the register by id
	likely       map[string]string           // by register id: the name of the cell that holds its likely value
	allowance    []allowance
	factorAt     map[string]int // index in allowance, by factorKey
	multiplier   []multiplier
	multiplierAt map[string]int // by multiplierKey
	conversion   []conversion
	convertAt    map[string]int // by partKey
	rate         []rate
	rateAt       map[string]int // by rateKey
	partColumns  []string       // heads of the parts on the sheet Rates
	emission     []emission
	emissionAt   map[string]int // by emissionKey
	width        int            // most multipliers on a line
}

// gather finds the inputs of a document. Each kind is sorted by id before it is
// named, so that names do not depend on the order of lines.
func gather(d document.Document) inputs {
	in := inputs{namer: newNamer(), entries: map[string]assumption.Entry{}, likely: map[string]string{}}
	for _, e := range d.Assumptions {
		in.entries[e.ID] = e
	}
	in.gatherAllowances(d)
	in.gatherMultipliers(d)
	in.gatherConversions(d)
	in.gatherRates(d)
	in.gatherEmissions(d)
	return in
}

// link notes that a cell holds the likely value of a register entry, where it does.
func (in *inputs) link(id, name, value string) {
	e, ok := in.entries[id]
	if !ok || e.Spread == nil || in.likely[id] != "" {
		return
	}
	if plainNumber(document.Number(e.Spread.Base())) == value {
		in.likely[id] = name
	}
}

// statement, source and owner are what the register says of an entry.
func (in *inputs) statement(id string) string { return in.entries[id].Statement }

func (in *inputs) sourceAndOwner(id string) (string, string) {
	e := in.entries[id]
	return e.Source, e.Owner
}

// key joins parts to a key of a map.
func key(parts ...string) string { return strings.Join(parts, "\x00") }

// sortedKeys returns the keys of a map in order.
func sortedKeys[V any](m map[string]V) []string {
	keys := make([]string, 0, len(m))
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}

// allowance is one factor of quantities: its likely value, or 1 and that.
type allowance struct {
	id, name string
	likely   document.Number
}

// factorKey tells factors apart.
func factorKey(f document.Factor) string { return key(f.Assumption, plainNumber(f.Value)) }

// onOne tells whether a factor is 1 and the likely value of its entry.
func (in *inputs) onOne(f document.Factor) bool {
	e, ok := in.entries[f.Assumption]
	if !ok || e.Spread == nil {
		return false
	}
	base := document.Number(e.Spread.Base())
	return plainNumber(base) != plainNumber(f.Value) && plainNumber(1+document.Number(base.Rounded())) == plainNumber(f.Value)
}

func (in *inputs) gatherAllowances(d document.Document) {
	found := map[string]allowance{}
	at := map[string]string{} // key of found, by factorKey
	for _, it := range d.Items {
		for _, q := range it.Quantities {
			for _, f := range q.Factors {
				a := allowance{id: f.Assumption, likely: f.Value}
				if in.onOne(f) {
					a.likely = document.Number(in.entries[f.Assumption].Spread.Base())
				}
				k := key(a.id, plainNumber(a.likely))
				found[k], at[factorKey(f)] = a, k
			}
		}
	}
	index := map[string]int{}
	for i, k := range sortedKeys(found) {
		a := found[k]
		a.name = in.namer.name("allowance", a.id)
		in.link(a.id, a.name, plainNumber(a.likely))
		in.allowance = append(in.allowance, a)
		index[k] = i
	}
	in.factorAt = map[string]int{}
	for k, a := range at {
		in.factorAt[k] = index[a]
	}
}

// factor is the formula of a factor and its value as the workbook holds it.
func (in *inputs) factor(f document.Factor) (string, float64) {
	a := in.allowance[in.factorAt[factorKey(f)]]
	if in.onOne(f) {
		return "1+" + a.name, 1 + a.likely.Rounded()
	}
	return a.name, a.likely.Rounded()
}

// multiplier is one factor on lines, once.
type multiplier struct {
	document.Multiplier
	cell  string // name of its cell
	lines int    // how many it acts on
}

func multiplierKey(m document.Multiplier) string {
	return key(m.Assumption, m.Name, m.Scope, m.Subject, shown(m.Value))
}

func (in *inputs) gatherMultipliers(d document.Document) {
	found, uses := map[string]document.Multiplier{}, map[string]int{}
	for _, l := range d.Lines {
		in.width = max(in.width, len(l.Multipliers))
		for _, m := range l.Multipliers {
			k := multiplierKey(m)
			found[k] = m
			uses[k]++
		}
	}
	in.multiplierAt = map[string]int{}
	for i, k := range sortedKeys(found) {
		m := multiplier{Multiplier: found[k], lines: uses[k]}
		id := m.Assumption
		if id == "" {
			id = strings.TrimSpace(m.Name + " " + m.Scope + " " + m.Subject)
		}
		m.cell = in.namer.name("multiplier", id)
		in.link(m.Assumption, m.cell, shown(m.Value))
		in.multiplier = append(in.multiplier, m)
		in.multiplierAt[k] = i
	}
}

// cellOf is the name of a multiplier's cell.
func (in *inputs) cellOf(m document.Multiplier) string {
	return in.multiplier[in.multiplierAt[multiplierKey(m)]].cell
}

// emission is one carbon factor, once.
type emission struct {
	id, name, module, driver, unit string
	value                          money.Decimal
}

func emissionKey(l document.CarbonLine) string { return key(l.FactorID, l.Module, shown(l.Factor)) }

func (in *inputs) gatherEmissions(d document.Document) {
	if d.Carbon == nil {
		return
	}
	found := map[string]emission{}
	for _, l := range d.Carbon.Lines {
		found[emissionKey(l)] = emission{id: l.FactorID, module: l.Module, driver: l.Driver, unit: l.Unit, value: l.Factor}
	}
	in.emissionAt = map[string]int{}
	for i, k := range sortedKeys(found) {
		e := found[k]
		e.name = in.namer.name("carbon", e.id)
		in.link(e.id, e.name, shown(e.value))
		in.emission = append(in.emission, e)
		in.emissionAt[k] = i
	}
}
