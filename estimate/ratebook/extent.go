package ratebook

// Extent is how much of one type of weld is tested beyond looking at it, in one
// execution or inspection class.
type Extent struct {
	Weld        string
	Utilisation string  // of the weld in tension where the extent depends on it: "0.5 and above", "below 0.5"
	Method      string  // of the test
	Fraction    float64 // of the length, or of the number of welds
	Source      string
}

const (
	table24  = "EN 1090-2:2018, 12.4.2.3 and Table 24 (from memory; parted by utilisation as the 2008 edition parts them: check against the edition in force)"
	visual   = "visual inspection"
	deep     = "ultrasonic or radiographic testing"
	surface  = "magnetic particle or penetrant testing"
	ultra    = "ultrasonic testing"
	utilHigh = "0.5 and above"
	utilLow  = "below 0.5"
)

// supplementary is Table 24: percentages of the length in EXC2, EXC3 and EXC4. EXC1
// has none. For EXC4 the extent of EXC3 is the least, and the specification of the
// job decides.
var supplementary = []struct {
	weld, utilisation, method string
	exc2, exc3, exc4          float64
}{
	{"transverse butt weld in a butt joint, in tension", utilHigh, deep, 10, 20, 100},
	{"transverse butt weld in a butt joint, in tension", utilLow, deep, 0, 10, 50},
	{"transverse butt weld in a cruciform joint", "", deep, 10, 20, 100},
	{"transverse butt weld in a T joint", "", deep, 5, 10, 50},
	{"transverse fillet weld in tension or shear, throat over 12 mm or plate over 20 mm", "", surface, 5, 10, 20},
	{"transverse fillet weld in tension or shear, throat to 12 mm and plate to 20 mm", "", surface, 0, 5, 10},
	{"full-penetration longitudinal weld of web to top flange of a crane girder", "", deep, 10, 20, 100},
	{"other longitudinal weld, and weld to a stiffener", "", surface, 0, 5, 10},
}

// american are the extents of AISC 360-22 for risk category II (N5.5b as the 2010
// edition words it, from memory that the 2022 one keeps it; the rest from memory), and
// of AWS D1.1:2020 for cyclic loads. In risk categories III and IV the extent of
// complete-penetration welds is 100 %.
var american = map[string][]Extent{
	"AISC static": {
		{"every weld", "", visual, 1, "AISC 360-22, N5.4 and Tables N5.4-1 to N5.4-3; AWS D1.1:2020, clause 8, statically loaded (from memory)"},
		{"complete-penetration groove weld in a butt, T or corner joint, across tension, 8 mm and thicker", "", ultra, 0.1, "AISC 360-22, N5.5b (from memory), risk category II; 100 % in III and IV"},
		{"access hole in a flange over 50 mm thick", "", surface, 1, "AISC 360-22, N5.5c (from memory)"},
	},
	"AISC cyclic": {
		{"every weld", "", visual, 1, "AISC 360-22, N5.4; AWS D1.1:2020, clause 8, cyclically loaded (from memory)"},
		{"groove weld whose fatigue category rests on its soundness, across tension", "", ultra, 1, "AISC 360-22, N5.5 and Table A-3.1; AWS D1.1:2020, clause 8 (from memory); no reduction of the rate"},
		{"complete-penetration groove weld in a butt, T or corner joint, across tension, 8 mm and thicker", "", ultra, 0.1, "AISC 360-22, N5.5b (from memory), risk category II; 100 % in III and IV"},
		{"access hole in a flange over 50 mm thick", "", surface, 1, "AISC 360-22, N5.5c (from memory)"},
	},
}

// Extents returns the extents of inspection of an execution class (EXC1 to EXC4,
// EN 1090-2:2018) or inspection class (AISC static, AISC cyclic), looking at every
// weld first; those of zero are left out. For another class it returns nil. It
// documents the percentages with which the starting books price inspection; nothing
// is computed from it.
func Extents(executionClass string) []Extent {
	if list, ok := american[executionClass]; ok {
		return append([]Extent(nil), list...)
	}
	column := map[string]int{"EXC1": 0, "EXC2": 1, "EXC3": 2, "EXC4": 3}
	k, ok := column[executionClass]
	if !ok {
		return nil
	}
	out := []Extent{{Weld: "every weld", Method: visual, Fraction: 1, Source: "EN 1090-2:2018, 12.4.2.2 (from memory)"}}
	for _, s := range supplementary {
		if percent := [...]float64{0, s.exc2, s.exc3, s.exc4}[k]; percent > 0 {
			out = append(out, Extent{s.weld, s.utilisation, s.method, percent / 100, table24})
		}
	}
	return out
}
