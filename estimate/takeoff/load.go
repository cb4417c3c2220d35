package takeoff

import (
	"cmp"
	"math"

	"spanwright/estimate/ratebook"
)

// The measures that may govern the number of vehicles.
const (
	ByMass   = "mass"
	ByLength = "length"
	ByVolume = "volume"
)

// vehicles is how many vehicles are filled, by each measure.
type vehicles struct{ mass, length, volume float64 }

func (v vehicles) plus(w vehicles) vehicles {
	return vehicles{v.mass + w.mass, v.length + w.length, v.volume + w.volume}
}

// grown is the deck that the design as grown takes; mass has its own factors.
func (v vehicles) grown(a Allowances) vehicles {
	g := a.Growth.Value()
	return vehicles{v.mass, float64(v.length * g), float64(v.volume * g)}
}

// governing returns the measure that fills most vehicles, and how many; mass
// before length before volume where two are equal.
func (v vehicles) governing() (string, float64) {
	name, most := ByMass, v.mass
	if v.length > most {
		name, most = ByLength, v.length
	}
	if v.volume > most {
		name, most = ByVolume, v.volume
	}
	return name, most
}

// filled returns the vehicles that the row fills: by carried mass without
// connections and growth; by deck length, parts lying side by side and in tiers,
// none across another; by the volume of the bounding prisms. Rows by mass, whose
// dimensions are not known, fill by mass alone; so does a limit of 0.
func filled(p Piece, s Settings) vehicles {
	var out vehicles
	v := s.Limits.Vehicle
	if v.Mass > 0 {
		out.mass = p.carried() / v.Mass
	}
	if !p.sized() || !(p.Depth > 0 && p.Width > 0 && v.Length > 0 && v.Width > 0 && v.Height > 0) {
		return out
	}
	upright := math.Max(1, fit(v.Width, p.Width)) * math.Max(1, fit(v.Height, p.Depth))
	laid := math.Max(1, fit(v.Width, p.Depth)) * math.Max(1, fit(v.Height, p.Width))
	out.length = p.length() / (v.Length * math.Max(upright, laid))
	out.volume = p.length() * p.Depth * p.Width / (v.Length * v.Width * v.Height)
	return out
}

// fit returns how many pieces stand in a space, whole ones.
func fit(space, piece float64) float64 { return math.Floor(space/piece + 1e-9) }

// ship states the truckloads of an item by the measure that governs it at likely
// values, whatever governs its group, and the parts that need a permit.
func (m *steelSum) ship(b *builder, a Allowances, s Settings, delivered []Allowance) {
	var v vehicles
	permits := 0
	for _, p := range m.rows {
		v = v.plus(filled(p, s))
		permits += Permits(p, a, s)
	}
	ids := []string{VehicleID, RollingMarginID}
	if m.total(func(p Piece) float64 { return p.Weld }) > 0 {
		ids = append(ids, WeldID)
	}
	grown := v.grown(a)
	grown.mass = product(v.mass, delivered)
	switch name, _ := grown.governing(); name {
	case ByMass:
		b.put(ratebook.Truckloads, v.mass, with(delivered, a.Norms.LoadUse),
			"vehicles by mass, rolling margin and weld metal included, × (the factors of delivered mass) × vehicles needed over vehicles filled", ids...)
	default:
		deck := map[string]float64{ByLength: v.length, ByVolume: v.volume}[name]
		b.put(ratebook.Truckloads, deck, []Allowance{a.Growth, a.Norms.LoadUse}, "vehicles by "+deckWords[name]+" × growth × vehicles needed over vehicles filled", VehicleID)
	}
	b.put(ratebook.PermitLoads, float64(permits), nil, "delivered parts beyond the limits of the road", append([]string{PermitID}, m.splitIDs(s)...)...)
}

var deckWords = map[string]string{ByLength: "deck length", ByVolume: "volume of the pieces' prisms"}

// Load is the vehicles of one group. ByMass, ByLength and ByVolume are vehicles
// filled by that measure alone; Vehicles is the greatest of them times the load
// use, rounded up to whole ones.
type Load struct {
	Group                      string
	Pieces                     int
	Splices                    int
	ByMass, ByLength, ByVolume float64
	Vehicles                   int
	Permits                    int // parts that need a permit load
	Governing                  string
}

// Loads returns the vehicles of each group, sorted by group: all pieces with
// connections, growth and counted joints. Rows of concrete alone fill none.
func Loads(pieces []Piece, a Allowances, s Settings) []Load {
	by := map[string]*Load{}
	for _, p := range byMark(pieces) {
		if p.Net() == 0 && p.Member.Concrete > 0 {
			continue
		}
		l, ok := by[p.Member.Group]
		if !ok {
			l = &Load{Group: p.Member.Group}
			by[l.Group] = l
		}
		v := filled(p, s)
		l.Pieces += p.Member.Quantity
		l.Splices += Splices(p, s)
		l.Permits += Permits(p, a, s)
		l.ByMass += float64(product(v.mass, a.delivered(p))) + a.jointLoads(p, s)
		v = v.grown(a)
		l.ByLength += v.length
		l.ByVolume += v.volume
	}
	out := make([]Load, 0, len(by))
	for _, group := range sortedKeys(by) {
		out = append(out, by[group].whole(a))
	}
	return out
}

// whole fills in the number of vehicles.
func (l Load) whole(a Allowances) Load {
	use := 1.0
	if a.Norms != nil {
		use = cmp.Or(a.Norms.LoadUse.Value(), 1)
	}
	name, most := vehicles{l.ByMass, l.ByLength, l.ByVolume}.governing()
	l.Governing = name
	l.Vehicles = int(math.Ceil(min(most*use, 1e9) - 1e-9))
	return l
}

// jointLoads returns the vehicles that the counted joints of the row fill by mass.
func (a Allowances) jointLoads(p Piece, s Settings) float64 {
	if a.Norms == nil || !(s.Limits.Vehicle.Mass > 0) {
		return 0
	}
	kg := 0.0
	for _, j := range a.jointsOf(p, s) {
		n := a.Norms.Joints[j.Kind]
		kg += float64(float64(j.Count) * (n.Mass.Value() + n.Bolts.Value()))
	}
	return kg * a.Growth.Value() / s.Limits.Vehicle.Mass
}
