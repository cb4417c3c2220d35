package trace

import (
	"fmt"
	"math/big"
	"strings"

	"spanwright/estimate/document"
)

// none is the value of a row that has no share.
var none = value{}

// jointKind is the kind of joints that an item counts, or of which it has the bolts.
func jointKind(it *document.Item) string { return strings.TrimSuffix(it.Family, " bolts") }

// joints are those of a kind that a row states, over all its pieces.
func (t *Tracer) joints(kind string, m *document.Member) (value, kid) {
	for _, x := range m.Inputs {
		if x.Symbol != "joints, "+kind {
			continue
		}
		n := printed(x.Value)
		total := value{open: new(big.Rat), rat: new(big.Rat).Mul(n.rat, whole(m.Quantity).rat)}
		total.text = total.rat.RatString()
		id := rowID(m) + "#all " + x.Symbol
		return total, kid{id, func() draft {
			d := draft{Node: Node{Figure: id, What: fmt.Sprintf("Joints of row %s, %s, on all its pieces.", m.Mark, kind), Value: total.text, Unit: "pcs", Kind: Product,
				Formula: "pieces × joints of a piece", Arithmetic: fmt.Sprintf("%d × %s = %s pcs", m.Quantity, n.text, grouped(total.text))}}
			d.kids = []kid{t.pieces(m), t.stated(m, x.Symbol, n, x.Unit)}
			return d
		}}
	}
	return none, kid{}
}

// volume is the concrete of a row.
func (t *Tracer) volume(m *document.Member) (value, kid) {
	for _, x := range m.Inputs {
		if x.Symbol == "concrete" {
			return t.perPiece(m, "concrete", "Concrete of all pieces of row "+m.Mark+".", x.Value, x.Unit)
		}
	}
	return none, kid{}
}

// length is the length of all pieces of a row.
func (t *Tracer) length(m *document.Member) (value, kid) {
	return t.perPiece(m, "length", "Length of all pieces of row "+m.Mark+".", m.Length, "m")
}

// perPiece is pieces × what one piece has.
func (t *Tracer) perPiece(m *document.Member, symbol, what string, each document.Number, unit string) (value, kid) {
	one, n := printed(each), whole(m.Quantity)
	total := value{rat: new(big.Rat).Mul(one.rat, n.rat), open: new(big.Rat).Mul(one.open, n.rat)}
	total.text = text(document.Number(float64(m.Quantity) * each.Rounded()))
	id := rowID(m) + "#all " + symbol
	return total, kid{id, func() draft {
		d := draft{Node: Node{Figure: id, What: what, Value: total.text, Unit: unit, Kind: Product, Formula: "pieces × " + symbol,
			Arithmetic: fmt.Sprintf("%d × %s = %s", m.Quantity, with(one.text, unit), with(total.text, unit))}}
		d.kids = []kid{t.pieces(m), t.stated(m, symbol, one, unit)}
		return d
	}}
}

// pieces is the quantity of a row.
func (t *Tracer) pieces(m *document.Member) kid {
	return t.stated(m, "quantity", whole(m.Quantity), "pcs")
}

// brought is what the rows bring to a quantity that is stated as a whole, listed once
// for all quantities alike.
func (t *Tracer) brought(it *document.Item, q *document.Quantity) []kid {
	type key struct {
		item    string
		surface bool
	}
	k := key{it.ID, q.Driver == "square metres" || q.Driver == "kg of zinc"}
	if known, ok := t.rows.Load(k); ok {
		return known.([]kid)
	}
	var out []kid
	for _, m := range t.holds[it.ID] {
		switch {
		case it.Treatment == "concrete":
			out = append(out, t.pieces(m))
		case it.Treatment == "joint":
			out = append(out, t.joined(it, m))
		case k.surface:
			out = append(out, t.surface(m))
		default:
			out = append(out, t.kid(rowID(m)))
		}
	}
	t.rows.Store(k, out)
	return out
}

// joined is what a row brings to an item of joints: those that it counts, or the
// length of its pieces, which asks for site splices.
func (t *Tracer) joined(it *document.Item, m *document.Member) kid {
	if kind := jointKind(it); measureOf(m, "joints, "+kind, "") != nil {
		_, k := t.joints(kind, m)
		return k
	}
	return kid{rowID(m) + "#all length", func() draft {
		_, k := t.length(m)
		return k.make()
	}}
}

// surface is what a row brings to a surface: the document holds its sum over the
// item alone.
func (t *Tracer) surface(m *document.Member) kid {
	id := rowID(m) + "#surface"
	return kid{id, func() draft {
		formula := "pieces × length × painted perimeter of the section"
		if m.Section == "" {
			formula = "mass × surface per tonne of rows by mass, or twice the area of rows by area"
		}
		d := draft{Node: Node{Figure: id, What: "Surface of all pieces of row " + m.Mark + ".", Kind: Quantity, Formula: formula,
			Notes: []string{"the document holds the surface of the item alone"}}}
		_, length := t.length(m)
		d.kids = []kid{length, t.lineMass(m)}
		return d
	}}
}

// rowParts are all that trees show of a row under the id of its net mass.
func (t *Tracer) rowParts(m *document.Member) []kid {
	_, length := t.length(m)
	out := []kid{t.pieces(m), t.stated(m, "length", printed(m.Length), "m"), length, t.surface(m)}
	for _, x := range m.Inputs {
		out = append(out, t.stated(m, x.Symbol, printed(x.Value), x.Unit))
		if kind, ok := strings.CutPrefix(x.Symbol, "joints, "); ok {
			_, k := t.joints(kind, m)
			out = append(out, k)
		}
	}
	if _, k := t.volume(m); k.make != nil {
		out = append(out, k)
	}
	if m.Section != "" {
		out = append(out, t.lineMass(m), kid{rowID(m) + "#own weight", func() draft { return t.ownWeight(m) }},
			t.stated(m, "deflection limit", printed(m.DeflectionLimit), ""))
	} else {
		out = append(out, t.lineMass(m))
	}
	return out
}
