package takeoff

import (
	"cmp"
	"math"
	"strings"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/structural/section"
)

// Piece is one schedule row with what its section adds. Rows by mass have no
// section: their dimensions, surface and weld are 0, which stands for not known.
type Piece struct {
	Member      schedule.Member
	Family      string  // of the chosen section; the kind of a row that is not sized
	Designation string  // of the section; empty where there is none
	Grade       string  // of the steel
	LineMass    float64 // kg/m, nominal, of the chosen section
	Surface     float64 // m²/m, painted
	Inside      float64 // m²/m, of tubes and boxes: what the bath wets besides
	Depth       float64 // m
	Width       float64 // m
	Thickness   float64 // m, of the thinnest plate of the section
	Thickest    float64 // m, of the thickest
	Weld        float64 // kg/m, weld metal along a section that is welded from plates
	Waste       string  // which waste allowance its purchase carries
	Split       string  // separates pieces that multipliers or rates treat differently
}

// NewPiece returns the piece of a row with the section chosen for it; nil is a row
// by mass. Split is left to the caller.
func NewPiece(m schedule.Member, sec *section.Section) Piece {
	p := Piece{Member: m, Grade: m.Grade, Waste: ratebook.WasteSections}
	if sec == nil {
		p.Family, p.LineMass = m.Kind, m.LineMass
		if m.AreaMass > 0 {
			p.Waste = ratebook.WastePlate
		}
		return p
	}
	p.Family, p.Designation, p.LineMass, p.Surface = sec.Family, sec.Designation, sec.Mass, sec.Perimeter
	p.Depth, p.Width, p.Weld = sec.H, max(sec.B, sec.LowerB), weld(sec)
	p.Thickness, p.Thickest = plates(sec)
	p.Inside = inside(sec)
	switch sec.Shape {
	case section.RoundTube, section.RectangularTube:
		p.Waste = ratebook.WasteTube
	case section.Flat:
		p.Waste = ratebook.WastePlate
	}
	return p
}

// plates returns the thinnest and the thickest plate of a section, m.
func plates(sec *section.Section) (thin, thick float64) {
	thin, thick = sec.Tw, max(sec.Tw, sec.Thickness)
	for _, t := range []float64{sec.Tf, sec.LowerTf} {
		if t > 0 {
			thin, thick = min(thin, t), max(thick, t)
		}
	}
	return thin, thick
}

// inside returns the inner perimeter of a closed section in m, of a set of closed
// chords that of all, else 0. The inner corners of rectangular tubes are taken as
// concentric with the outer ones.
func inside(sec *section.Section) float64 {
	wall := cmp.Or(sec.Nominal, sec.Tw)
	switch sec.Shape {
	case section.RoundTube:
		return math.Pi * (sec.H - 2*wall)
	case section.RectangularTube:
		return 2*(sec.H+sec.B-4*wall) - float64((8-2*math.Pi)*math.Max(0, sec.R-wall))
	case section.WeldedBox:
		return 2 * (sec.H - 2*sec.Tf + sec.B - 2*sec.Tw)
	case section.ChordSet:
		_, rest, _ := strings.Cut(sec.Designation, "x ")
		name, _, _ := strings.Cut(rest, " @ ")
		if chord, err := section.Find(name); err == nil {
			return float64(sec.Chords) * inside(&chord)
		}
	}
	return 0
}

// Net returns the drawn mass of all pieces of the row in kg: nominal mass per
// metre by length, or mass per square metre by area.
func (p Piece) Net() float64 {
	n := float64(p.Member.Quantity)
	if p.Member.Treatment == schedule.ByMass && p.Member.AreaMass > 0 {
		return float64(n * p.Member.AreaMass * p.Member.Area)
	}
	return float64(n * p.LineMass * p.Member.Length)
}

// sized tells whether the row has a section, and so dimensions.
func (p Piece) sized() bool { return p.Member.Treatment != schedule.ByMass }

// length returns the length of all pieces of the row, m.
func (p Piece) length() float64 { return float64(float64(p.Member.Quantity) * p.Member.Length) }

// rollingMargin is what pieces weigh above their nominal mass; not priced, it
// counts in what is lifted and carried. Common practice, no source.
const rollingMargin = 0.025

// carried returns the mass of all pieces of the row in kg as they are lifted and
// carried, without connections and growth: net with the rolling margin and the
// weld metal along the section.
func (p Piece) carried() float64 {
	return float64(p.Net()*(1+rollingMargin)) + float64(p.Weld*p.length())
}

const (
	steelDensity = 7850  // kg/m³, EN 1991-1-1:2002 table A.4 (77 to 78.5 kN/m³); that of the nominal masses
	leastThroat  = 0.003 // m, EN 1993-1-8:2005, 4.5.2(2)
	throatOfWall = 0.5   // of the thinner plate, fillets on both sides; common practice, no source
)

// weld estimates the weld metal along a section welded from plates in kg/m: n
// fillets of throat a, a²·ρ each, for the area of a fillet with equal legs a·√2 is
// a². The throat is half the web, at least 3 mm.
func weld(sec *section.Section) float64 {
	if sec.Making != section.Welded {
		return 0
	}
	fillets := map[section.Shape]float64{section.ISection: 4, section.UnequalI: 4, section.WeldedBox: 4, section.Channel: 4, section.Tee: 2}[sec.Shape]
	throat := math.Max(leastThroat, throatOfWall*sec.Tw)
	return fillets * throat * throat * steelDensity
}
