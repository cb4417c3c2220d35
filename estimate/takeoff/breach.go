package takeoff

import (
	"fmt"
	"math"

	"spanwright/estimate/ratebook"
)

// The envelopes that pieces are held against.
const (
	ShopCrane = "shop crane"
	SiteCrane = "site crane"
	Bath      = "galvanising bath"
	PaintBay  = "paint bay"
	OnVehicle = "vehicle"
	OnRoad    = "permit"
)

// Breach is one measure of a piece outside one envelope, and what it needs. Value
// and Limit are in Unit, m or kg; they are those of one delivered part, except the
// length on the vehicle, which is what parts are made for.
type Breach struct {
	Mark     string
	Envelope string
	Measure  string // length, width, height, mass
	Value    float64
	Limit    float64
	Unit     string
	Needs    string
}

// doubleDip is how much longer than the bath a piece may be that is dipped twice,
// once from either end. Common practice, no source.
const doubleDip = 1.9

// Breaches holds each row of steel against the envelopes, in the order of marks: the
// cranes by mass; the bath where its coating names galvanising, the paint bay where
// it is not uncoated or galvanised alone; the vehicle; the limits beyond which a load
// needs a permit. Depth and width may be turned; those of rows by mass are not known,
// and these are made to the length of bath and bay. Mass is that lifted: net with
// rolling margin, weld metal, connections and bolts, without growth. A limit of 0 is
// none.
func Breaches(pieces []Piece, a Allowances, s Settings) []Breach {
	var out []Breach
	for _, p := range byMark(pieces) {
		if p.Net() == 0 {
			continue // concrete alone
		}
		h := holder{p: p, n: Parts(p, s), mass: a.lifted(p, s)}
		h.cranes(s.Limits)
		if p.sized() && Galvanised(s.coating(p)) {
			h.bath(s.Limits.Bath)
		}
		if p.sized() && painted(s.coating(p)) {
			h.space(PaintBay, s.Limits.PaintBay, "painting outside the bay, or in parts")
		}
		h.vehicle(s.Limits.Vehicle)
		for _, o := range over(s.Limits.Permit, h.length(), p.Depth, p.Width, h.mass) {
			h.add(OnRoad, o, "permit load; local rules govern")
		}
		out = append(out, h.out...)
	}
	return out
}

// Permits returns how many delivered parts of the row need a permit load.
func Permits(p Piece, a Allowances, s Settings) int {
	if p.Net() == 0 {
		return 0
	}
	n := Parts(p, s)
	if len(over(s.Limits.Permit, p.Member.Length/float64(n), p.Depth, p.Width, a.lifted(p, s))) == 0 {
		return 0
	}
	return p.Member.Quantity * n
}

// lifted returns the mass of one delivered part in kg.
func (a Allowances) lifted(p Piece, s Settings) float64 {
	if p.Member.Quantity < 1 {
		return 0
	}
	mass := p.carried() / float64(p.Member.Quantity)
	if a.Counted(p) {
		for _, j := range p.Member.Joints {
			n := a.Norms.Joints[j.Kind]
			mass += float64(float64(j.Count) * (n.Mass.Value() + n.Bolts.Value()))
		}
	} else if conn, ok := a.Connections[p.Member.ConnectionClass]; ok {
		mass *= conn.Value() * a.Bolts.Value()
	}
	return mass / float64(Parts(p, s))
}

// excess is one measure beyond its limit.
type excess struct {
	measure, unit string
	value, limit  float64
}

// over returns what a part exceeds of a limit, depth and width turned for the
// fewest.
func over(v ratebook.Vehicle, length, depth, width, mass float64) []excess {
	list := within(v.Envelope, length, depth, width)
	if beyond(mass, v.Mass) {
		list = append(list, excess{"mass", "kg", mass, v.Mass})
	}
	return list
}

func within(e ratebook.Envelope, length, depth, width float64) []excess {
	upright, laid := outside(e, length, depth, width), outside(e, length, width, depth)
	if len(laid) < len(upright) {
		return laid
	}
	return upright
}

func outside(e ratebook.Envelope, length, height, width float64) []excess {
	var list []excess
	for _, x := range []excess{{"length", "m", length, e.Length}, {"width", "m", width, e.Width}, {"height", "m", height, e.Height}} {
		if beyond(x.value, x.limit) {
			list = append(list, x)
		}
	}
	return list
}

func beyond(value, limit float64) bool { return limit > 0 && value > limit*(1+1e-9) }

// holder collects the breaches of one row.
type holder struct {
	p    Piece
	n    int     // parts in which a piece is delivered
	mass float64 // kg, of a part
	out  []Breach
}

func (h *holder) length() float64 { return h.p.Member.Length / float64(h.n) }

func (h *holder) add(envelope string, x excess, needs string) {
	h.out = append(h.out, Breach{h.p.Member.Mark, envelope, x.measure, x.value, x.limit, x.unit, needs})
}

// split says into how many pieces the whole one goes so that each part has at most
// limit of what a delivered part has value of.
func (h *holder) split(value, limit float64) string {
	return h.apart(h.n * int(min(math.Ceil(value/limit-1e-9), 1e6)))
}

// apart says how a piece comes in n parts; rows by mass come in parts anyway.
func (h *holder) apart(n int) string {
	length := h.p.Member.Length
	switch {
	case h.p.sized():
		return splitWords(n, length)
	case length > 0:
		return fmt.Sprintf("delivery in %d parts of %s m", n, plain(length/float64(n), 3))
	}
	return fmt.Sprintf("delivery in %d parts", n)
}

func (h *holder) cranes(l ratebook.Limits) {
	for _, c := range []struct {
		name   string
		limit  float64
		system string
	}{{ShopCrane, l.ShopCrane, "two cranes together in the shop"}, {SiteCrane, l.SiteCrane, "a crane that lifts %s t at its radius"}} {
		if beyond(h.mass, c.limit) {
			system := c.system
			if c.name == SiteCrane {
				system = fmt.Sprintf(system, plain(math.Ceil(h.mass/100)/10, 1))
			}
			h.add(c.name, excess{"mass", "kg", h.mass, c.limit}, h.split(h.mass, c.limit)+", or "+system)
		}
	}
}

// bath names the double dip where one measure alone is too great and at most
// doubleDip times the bath.
func (h *holder) bath(e ratebook.Envelope) {
	list := within(e, h.length(), h.p.Depth, h.p.Width)
	for _, x := range list {
		switch {
		case len(list) == 1 && !beyond(x.value, doubleDip*x.limit):
			h.add(Bath, x, "double dip")
		case x.measure == "length":
			h.add(Bath, x, h.split(x.value, x.limit)+", or thermal spraying")
		default:
			h.add(Bath, x, "a greater bath, or thermal spraying")
		}
	}
}

func (h *holder) space(envelope string, e ratebook.Envelope, system string) {
	for _, x := range within(e, h.length(), h.p.Depth, h.p.Width) {
		needs := system
		if x.measure == "length" {
			needs = h.split(x.value, x.limit) + ", or " + system
		}
		h.add(envelope, x, needs)
	}
}

func (h *holder) vehicle(v ratebook.Vehicle) {
	for _, x := range over(v, h.p.Member.Length, h.p.Depth, h.p.Width, h.mass) {
		switch x.measure {
		case "length":
			h.add(OnVehicle, x, h.apart(h.n))
		case "mass":
			h.add(OnVehicle, x, h.split(x.value, x.limit)+", or a vehicle of greater load")
		case "height":
			h.add(OnVehicle, x, "a vehicle with a lower deck")
		default:
			h.add(OnVehicle, x, "a wide load, or a split along the piece")
		}
	}
}
