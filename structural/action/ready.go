package action

import (
	"fmt"
	"math"
	"strings"
)

// Code is the family of standards that ready loads are taken from. The zero value is
// EN.
type Code uint8

// The families of standards.
const (
	EN   Code = iota // EN 1991
	ASCE             // ASCE 7-22
)

// String returns "EN 1991" or "ASCE 7-22".
func (c Code) String() string {
	switch c {
	case EN:
		return "EN 1991"
	case ASCE:
		return "ASCE 7-22"
	}
	return fmt.Sprintf("code %d", uint8(c))
}

// Use names what a member carries, for a ready set of loads.
type Use string

// The uses with ready loads.
const (
	Walkway   Use = "walkway"
	Platform  Use = "platform"
	Conveyor  Use = "conveyor"
	PipeFull  Use = "pipe level full"
	PipeEmpty Use = "pipe level empty"
	Wind      Use = "wind"
	Snow      Use = "snow"
)

// Uses returns all uses.
func Uses() []Use { return []Use{Walkway, Platform, Conveyor, PipeFull, PipeEmpty, Wind, Snow} }

// ParseUse finds a use by its name; letter case and outer spaces don't matter.
func ParseUse(name string) (Use, error) {
	var names []string
	for _, u := range Uses() {
		if strings.EqualFold(strings.TrimSpace(name), string(u)) {
			return u, nil
		}
		names = append(names, string(u))
	}
	return "", fmt.Errorf("no ready loads for use %q; accepted are %s", name, strings.Join(names, ", "))
}

// Site is what a ready set has to know. Each use reads the fields that it names and
// refuses those that are missing.
type Site struct {
	Code       Code
	Width      float64 // m, tributary width: walkway, platform, pipe levels, snow
	Belt       float64 // m, belt width: conveyor
	Density    float64 // kg/m³, loose density of what is conveyed: conveyor
	Height     float64 // m above ground: wind
	Face       float64 // m, depth that the wind meets, of the member with what it carries: wind
	Round      bool    // the face is a round tube: wind
	WindSpeed  float64 // m/s, basic: 10 min mean of 50 years (EN), 3 s gust of the risk category (ASCE): wind
	Terrain    string  // wind: category 0, I, II, III or IV (EN), exposure B, C or D (ASCE)
	GroundSnow float64 // N/m², on the ground: snow
}

// Sourced is a ready action with where its value comes from.
type Sourced struct {
	Action Action
	Source string // standard and clause with the values used, or "common practice, no source"
}

// unsourced marks a value that no standard stands behind.
const unsourced = "common practice, no source"

// Ready returns the characteristic actions of a use on a whole member. They are a
// first filling of empty cells, to be looked at by who knows the job; loads of one
// use do not contain those of another. The error names the field of Site that is
// missing or out of range.
func Ready(u Use, at Site) ([]Sourced, error) {
	if at.Code > ASCE {
		return nil, fmt.Errorf("%s: unknown code %d; accepted are EN and ASCE", u, at.Code)
	}
	switch u {
	case Walkway, Platform:
		return floor(u, at)
	case Conveyor:
		return conveyor(at)
	case PipeFull, PipeEmpty:
		return pipes(u, at)
	case Wind:
		return wind(at)
	case Snow:
		return snow(at)
	}
	_, err := ParseUse(string(u))
	return nil, err
}

// need is a field of Site that a use reads.
type need struct {
	name  string
	value float64
	most  float64
}

func (u Use) needs(fields ...need) error {
	for _, f := range fields {
		if !(f.value > 0 && f.value <= f.most) {
			return fmt.Errorf("%s: %s is %v; accepted is above 0 and up to %v", u, f.name, f.value, f.most)
		}
	}
	return nil
}

const (
	psf        = 47.880259 // N/m²
	freeFall   = 9.80665   // m/s², ISO 80000-3
	widest     = 100       // m
	decking    = 400       // N/m², open grating with its handrails and toe boards
	beltShape  = 0.11      // area of a full belt over its width squared
	spilt      = 0.3       // of the burden lies beside the belt
	conveyorBy = 1500      // N/m², belt, idlers and stringers, by belt width
)

// floors hold N/m² and source by use and code.
var floors = map[Use][2]struct {
	pressure float64
	source   string
}{
	Walkway: {
		EN:   {3000, "EN 1991-1-1:2002 table 6.2, category C3, lower end of 3.0 to 5.0 kN/m², without crowds (from memory)"},
		ASCE: {60 * psf, "ASCE 7-22 table 4.3-1, walkways and elevated platforms other than exit ways, 60 psf (from memory)"},
	},
	Platform: {
		EN:   {5000, "EN 1991-1-1:2002 table 6.2, category C3, recommended 5.0 kN/m² (from memory); stored goods and plant come on top"},
		ASCE: {125 * psf, "ASCE 7-22 table 4.3-1, light manufacturing, 125 psf (from memory); plant comes on top"},
	},
}

func floor(u Use, at Site) ([]Sourced, error) {
	if err := u.needs(need{"width (m)", at.Width, widest}); err != nil {
		return nil, err
	}
	f := floors[u][at.Code]
	return []Sourced{
		{Action{Nature: Permanent, Value: decking * at.Width, Label: string(u) + " deck"},
			unsourced + ": 0.4 kN/m² of open grating with handrails"},
		{Action{Free: true, Value: f.pressure * at.Width, Label: string(u) + " people"}, f.source},
	}, nil
}

func conveyor(at Site) ([]Sourced, error) {
	if err := Conveyor.needs(need{"belt (m)", at.Belt, 5}, need{"density (kg/m³)", at.Density, 10_000}); err != nil {
		return nil, err
	}
	burden := beltShape * at.Belt * at.Belt * at.Density * freeFall
	return []Sourced{
		{Action{Nature: Permanent, Value: conveyorBy * at.Belt, Label: "conveyor machinery"},
			unsourced + ": 1.5 kN/m for each metre of belt width, for belt, idlers and stringers"},
		{Action{Free: true, Value: burden, Label: "conveyor burden"},
			unsourced + ": a full belt, 0.11 × width² × loose density"},
		{Action{Free: true, Value: spilt * burden, Label: "conveyor spillage"},
			unsourced + ": 30 % of the burden beside the belt"},
	}, nil
}

// A level of pipes counts as 8 in pipes of schedule 40, full of water, at 15 in
// centres.
const (
	pipeSteel    = 1100 // N/m²
	pipeContents = 830  // N/m²
	pipeSource   = unsourced + ": 8 in pipes of schedule 40 (ASME B36.10M) at 15 in centres, "
)

func pipes(u Use, at Site) ([]Sourced, error) {
	if err := u.needs(need{"width (m)", at.Width, widest}); err != nil {
		return nil, err
	}
	set := []Sourced{{Action{Nature: Permanent, Value: pipeSteel * at.Width, Label: "pipes"}, pipeSource + "1.10 kN/m² of steel"}}
	if u == PipeFull {
		set = append(set, Sourced{Action{Value: pipeContents * at.Width, Label: "contents of pipes"}, pipeSource + "0.83 kN/m² of water"})
	}
	return set, nil
}

func snow(at Site) ([]Sourced, error) {
	if err := Snow.needs(need{"width (m)", at.Width, widest}, need{"ground snow (N/m²)", at.GroundSnow, 50_000}); err != nil {
		return nil, err
	}
	shape, source := 0.8, "EN 1991-1-3:2003 5.2 (5.1), μ1 = 0.8, Ce = Ct = 1.0; a fixed action by section 2"
	if at.Code == ASCE {
		shape, source = 0.7*1.2, "ASCE 7-22 7.3 (7.3-1), 0.7·Ce·Ct·pg with Ce = 1.0, Ct = 1.2 in the open"
	}
	return []Sourced{{Action{Value: shape * at.GroundSnow * at.Width, Label: "snow"}, source}}, nil
}

// roughness is a terrain of EN 1991-1-4:2005 table 4.1, m.
type roughness struct{ z0, least float64 }

var terrains = map[string]roughness{
	"0": {0.003, 1}, "I": {0.01, 1}, "II": {0.05, 2}, "III": {0.3, 5}, "IV": {1, 10},
}

// exposure is one of ASCE 7-22 table 26.11-1: power law and gradient height, m.
type exposure struct{ alpha, gradient float64 }

var exposures = map[string]exposure{
	"B": {7.5, 999.7}, "C": {9.8, 749.8}, "D": {11.5, 589.8},
}

func wind(at Site) ([]Sourced, error) {
	if err := Wind.needs(need{"height (m)", at.Height, 200}, need{"face (m)", at.Face, widest}, need{"wind speed (m/s)", at.WindSpeed, 120}); err != nil {
		return nil, err
	}
	terrain := strings.ToUpper(strings.TrimSpace(at.Terrain))
	shape, face := 2.0, "sharp-edged"
	if at.Round {
		shape, face = 1.2, "round"
	}
	var pressure float64
	var source string
	if at.Code == ASCE {
		e, ok := exposures[terrain]
		if !ok {
			return nil, fmt.Errorf("wind: exposure %q; accepted are B, C and D", at.Terrain)
		}
		pressure = 0.85 * 0.85 * gustPressureASCE(at.WindSpeed, at.Height, e.alpha, e.gradient)
		source = fmt.Sprintf("ASCE 7-22 26.10 (26.10-1), table 26.10-1, exposure %s, Kzt = Ke = 1; Kd = G = 0.85, Cf = %.1f (%s, figure 29.4-2); at the strength level", terrain, shape, face)
	} else {
		r, ok := terrains[terrain]
		if !ok {
			return nil, fmt.Errorf("wind: terrain category %q; accepted are 0, I, II, III and IV", at.Terrain)
		}
		pressure = gustPressureEN(at.WindSpeed, at.Height, r.z0, r.least)
		source = fmt.Sprintf("EN 1991-1-4:2005 4.5 (4.8), table 4.1, category %s, co = 1; cs·cd = 1, cf = %.1f (%s, section 7)", terrain, shape, face)
	}
	return []Sourced{{Action{Direction: Horizontal, Value: pressure * shape * at.Face, Label: "wind"}, source}}, nil
}

// gustPressureEN returns the peak velocity pressure qp(z), N/m², of EN 1991-1-4:2005
// 4.3 to 4.5 with recommended values: cr = kr·ln(z/z0), kr = 0.19·(z0/0.05)^0.07,
// Iv = 1/ln(z/z0), qp = (1 + 7·Iv)·½·1.25·(cr·vb)². speed is m/s, height and roughness
// length m; below least the value at least holds.
func gustPressureEN(speed, height, roughnessLength, least float64) float64 {
	l := math.Log(max(height, least) / roughnessLength)
	v := 0.19 * math.Pow(roughnessLength/0.05, 0.07) * l * speed
	return (1 + 7/l) * 0.5 * 1.25 * v * v
}

// gustPressureASCE returns the velocity pressure qz, N/m², of ASCE 7-22 26.10
// (26.10-1.SI) with Kzt = Ke = 1: 0.613·Kz·V², Kz = 2.41·(z/zg)^(2/α), not below 15 ft.
// speed is m/s, height and gradient height m.
func gustPressureASCE(speed, height, alpha, gradient float64) float64 {
	return 0.613 * 2.41 * math.Pow(max(height, 4.572)/gradient, 2/alpha) * speed * speed
}
