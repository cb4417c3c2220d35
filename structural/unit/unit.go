package unit

import (
	"fmt"
	"strings"
)

// Unit is one unit of measurement. The zero Unit means "none given".
type Unit struct {
	Symbol    string    // as written in heads and answers, e.g. "kN/m"
	Dimension Dimension // what it measures
	Factor    float64   // SI value of one such unit, e.g. 1000 N/m
}

// IsZero tells whether no unit is given.
func (u Unit) IsZero() bool { return u.Factor == 0 }

// SI turns x of this unit into SI, unrounded.
func (u Unit) SI(x float64) float64 { return x * u.Factor }

// Of turns an SI value into a number of this unit, unrounded.
func (u Unit) Of(si float64) float64 { return si / u.Factor }

// String is the symbol.
func (u Unit) String() string { return u.Symbol }

// Exact definitions: the international yard and pound agreement of 1959 and the
// standard acceleration of the 3rd CGPM (1901), as in NIST SP 811, appendix B.
// Constant expressions are evaluated exactly and rounded once.
const (
	inch      = 0.0254
	foot      = 12 * inch
	pound     = 0.45359237
	g0        = 9.80665
	poundF    = pound * g0 // 4.4482216152605 N exactly
	kip       = 1000 * poundF
	shortTon  = 2000 * pound
	longTon   = 2240 * pound
	hundredwt = 100 * pound // the short hundredweight of the US steel trade
)

// table lists each unit once, with its other spellings. The first unit of a
// dimension is the SI one. Keys are compared after tidySymbol.
var table = []struct {
	Unit
	spellings string // separated by "|"
}{
	{Unit{"", Number, 1}, ""},
	{Unit{"%", Percent, 0.01}, "percent|per cent|pct"},

	{Unit{"m", Length, 1}, "metre|metres|meter|meters"},
	{Unit{"mm", Length, 1e-3}, "millimetre|millimetres|millimeter|millimeters"},
	{Unit{"cm", Length, 1e-2}, "centimetre|centimetres|centimeter|centimeters"},
	{Unit{"in", Length, inch}, `inch|inches|in.|"`},
	{Unit{"ft", Length, foot}, "foot|feet|ft.|'"},

	{Unit{"m²", Area, 1}, "sq m|sqm"},
	{Unit{"cm²", Area, 1e-4}, ""},
	{Unit{"mm²", Area, 1e-6}, ""},
	{Unit{"in²", Area, inch * inch}, "sq in"},
	{Unit{"ft²", Area, foot * foot}, "sq ft|sqft"},

	{Unit{"m³", Volume, 1}, "cu m"},
	{Unit{"cm³", Volume, 1e-6}, ""},
	{Unit{"mm³", Volume, 1e-9}, ""},
	{Unit{"in³", Volume, inch * inch * inch}, "cu in"},
	{Unit{"ft³", Volume, foot * foot * foot}, "cu ft"},
	{Unit{"yd³", Volume, 27 * foot * foot * foot}, "cu yd"},

	{Unit{"m⁴", SecondMoment, 1}, ""},
	{Unit{"cm⁴", SecondMoment, 1e-8}, ""},
	{Unit{"mm⁴", SecondMoment, 1e-12}, ""},
	{Unit{"in⁴", SecondMoment, inch * inch * inch * inch}, ""},

	{Unit{"kg", Mass, 1}, "kilogram|kilograms|kgs"},
	{Unit{"g", Mass, 1e-3}, "gram|grams"},
	{Unit{"t", Mass, 1000}, "tonne|tonnes|metric ton|metric tons"},
	{Unit{"lb", Mass, pound}, "lbs|lbm|pound|pounds"},
	{Unit{"cwt", Mass, hundredwt}, "short hundredweight"},
	{Unit{"short ton", Mass, shortTon}, "short tons|US ton|US tons"},
	{Unit{"long ton", Mass, longTon}, "long tons|imperial ton|imperial tons"},

	{Unit{"N", Force, 1}, "newton|newtons"},
	{Unit{"daN", Force, 10}, ""},
	{Unit{"kN", Force, 1e3}, "kilonewton|kilonewtons"},
	{Unit{"MN", Force, 1e6}, "meganewton|meganewtons"},
	{Unit{"kgf", Force, g0}, ""},
	{Unit{"lbf", Force, poundF}, "lbsf"},
	{Unit{"kip", Force, kip}, "kips"},

	{Unit{"N·m", Moment, 1}, "Nm|N m"},
	{Unit{"N·mm", Moment, 1e-3}, "Nmm|N mm"},
	{Unit{"kN·m", Moment, 1e3}, "kNm|kN m"},
	{Unit{"kN·cm", Moment, 10}, "kNcm|kN cm"},
	{Unit{"MN·m", Moment, 1e6}, "MNm|MN m"},
	{Unit{"lbf·ft", Moment, poundF * foot}, "ft·lbf|lbf ft|ft lbf"},
	{Unit{"lbf·in", Moment, poundF * inch}, "in·lbf|lbf in|in lbf"},
	{Unit{"kip·ft", Moment, kip * foot}, "ft·kip|kip ft|ft kip|ft·kips|kips·ft|k·ft"},
	{Unit{"kip·in", Moment, kip * inch}, "in·kip|kip in|in kip|in·kips|kips·in|k·in"},

	{Unit{"Pa", Stress, 1}, "pascal|pascals"},
	{Unit{"kPa", Stress, 1e3}, ""},
	{Unit{"MPa", Stress, 1e6}, "N/mm²|MN/m²"},
	{Unit{"GPa", Stress, 1e9}, "kN/mm²"},
	{Unit{"kN/cm²", Stress, 1e7}, ""},
	{Unit{"psi", Stress, poundF / (inch * inch)}, "lbf/in²"},
	{Unit{"ksi", Stress, kip / (inch * inch)}, "kip/in²|kips/in²"},

	{Unit{"N/m", LineLoad, 1}, ""},
	{Unit{"daN/m", LineLoad, 10}, ""},
	{Unit{"kN/m", LineLoad, 1e3}, "N/mm"},
	{Unit{"MN/m", LineLoad, 1e6}, ""},
	{Unit{"plf", LineLoad, poundF / foot}, "lbf/ft"},
	{Unit{"klf", LineLoad, kip / foot}, "kip/ft|kips/ft|k/ft"},

	{Unit{"N/m²", AreaLoad, 1}, ""},
	{Unit{"daN/m²", AreaLoad, 10}, ""},
	{Unit{"kN/m²", AreaLoad, 1e3}, ""},
	{Unit{"psf", AreaLoad, poundF / (foot * foot)}, "lbf/ft²"},
	{Unit{"ksf", AreaLoad, kip / (foot * foot)}, "kip/ft²|kips/ft²"},

	{Unit{"kg/m", LineMass, 1}, ""},
	{Unit{"t/m", LineMass, 1000}, ""},
	{Unit{"lb/ft", LineMass, pound / foot}, "lbs/ft"},

	{Unit{"kg/m²", AreaMass, 1}, ""},
	{Unit{"t/m²", AreaMass, 1000}, ""},
	{Unit{"lb/ft²", AreaMass, pound / (foot * foot)}, "lbs/ft²"},

	{Unit{"Hz", Frequency, 1}, "1/s"},
}

// exact holds each spelling as written; folded the same in lower case, for
// "KN" and "FT". No two units of the table differ by case alone (tested).
var exact, folded = spellings()

func spellings() (byCase, lower map[string]Unit) {
	byCase, lower = map[string]Unit{}, map[string]Unit{}
	for _, row := range table[1:] {
		for _, s := range append(strings.Split(row.spellings, "|"), row.Symbol) {
			if s == "" {
				continue
			}
			key := tidySymbol(s)
			byCase[key] = row.Unit
			lower[strings.ToLower(key)] = row.Unit
		}
	}
	return byCase, lower
}

var symbolSigns = strings.NewReplacer("⋅", "·", "•", "·", "*", "·", "-", "·", "^", "",
	"²", "2", "³", "3", "⁴", "4", "′", "'", "″", `"`, "\u00a0", " ", "\u202f", " ", "\u2009", " ")

// tidySymbol writes products with "·" and powers as plain digits.
func tidySymbol(s string) string {
	s = strings.Join(strings.Fields(symbolSigns.Replace(s)), " ")
	for _, sign := range []string{"·", "/"} {
		s = strings.ReplaceAll(s, " "+sign, sign)
		s = strings.ReplaceAll(s, sign+" ", sign)
	}
	return s
}

// unknown is the problem of a symbol that is in no table.
const unknown = "is not a known unit"

// Lookup finds a unit by its symbol or a usual spelling: "kN·m", "kNm", "kN-m",
// "kN/m2", "kN/m^2", "short tons". Capitals are forgiven ("KN", "FT") except
// that m is never read as M. A bare "ton" is refused, since it may be three
// things. The error is an *Error.
func Lookup(symbol string) (Unit, error) {
	key := tidySymbol(symbol)
	if u, ok := exact[key]; ok {
		return u, nil
	}
	low := strings.ToLower(key)
	if hasTon(low) {
		return Unit{}, refuse(symbol, "a bare ton may be three things", "t (1000 kg), short ton (2000 lb), long ton (2240 lb)")
	}
	u, ok := folded[low]
	if !ok {
		return Unit{}, refuse(symbol, unknown, "units such as m, mm, ft, kg, t, lb, kN, kip, kN/m, plf, kN/m², psf, MPa, ksi")
	}
	if key[0] == 'm' && u.Symbol[0] == 'M' {
		return Unit{}, refuse(symbol, "begins with milli where mega may be meant", u.Symbol)
	}
	return u, nil
}

func hasTon(low string) bool {
	head, _, _ := strings.Cut(low, "/")
	switch strings.TrimSpace(head) {
	case "ton", "tons", "ton(s)", "tonf", "tons force":
		return true
	}
	return false
}

// Symbols lists the units that are read where dimension d is wanted, the SI
// unit first, as in "m, mm, cm, in, ft".
func Symbols(d Dimension) string {
	var own, other []string
	for _, row := range table[1:] {
		switch {
		case row.Dimension == d:
			own = append(own, row.Symbol)
		case d.Accepts(row.Dimension):
			other = append(other, row.Symbol)
		}
	}
	return strings.Join(append(own, other...), ", ")
}

// Must is Lookup for symbols that stand in the program's own text.
// It panics on an unknown symbol, so no posted text may come here.
func Must(symbol string) Unit {
	u, err := Lookup(symbol)
	if err != nil {
		panic(fmt.Sprintf("unit.Must: %v", err))
	}
	return u
}
