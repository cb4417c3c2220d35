package material

import (
	"regexp"
	"slices"
	"strings"

	"spanwright/structural/spelling"
)

// enNumber is the standard that a grade is named with, without its signs.
const enNumber = `EN(10025[1-6]|10210[1-3]?|10219[1-3]?|10088[1-5]?)(20[012]\d)?`

var (
	separators = strings.NewReplacer(" ", "", "\t", "", "\u00a0", "", "-", "", "_", "", ".", "", "/", "", ":", "", ",", "", "(", "", ")", "")
	standards  = regexp.MustCompile(`^(BS|DIN)?` + enNumber + `|` + enNumber + `$|^ASTM|^ASME`)

	// A quality after an EN grade changes toughness and delivery condition, not
	// the strengths of EN 10025-2 table 7.
	structural = regexp.MustCompile(`^(S\d{3})(?:JR|J0|JO|J2|K2)?(?:\+(?:N|AR|M))?$|^(S\d{3})(?:JR|J0|JO|J2|K2)(?:N|AR|M)$`)

	// EN 10025-3 and -4 and their hollow sections; L asks for toughness at -50 °C.
	fineGrain = regexp.MustCompile(`^(S\d{3})([NM])L?(H?)$`)

	// The closing H is the hollow section of EN 10210-1 and EN 10219-1.
	hollow = regexp.MustCompile(`^(S\d{3})(?:JR|J0|JO|J2|K2)?H(?:\+?(?:N|AR|M))?$`)

	astmGrade = regexp.MustCompile(`^S?(A36|A53|A106|A500|A572|A588|A992|A\d+)(?:M|A\d+M)?(?:GRADE|GR)?([A-Z]|\d\d)?$`)
	stainless = regexp.MustCompile(`^(?:X\w*?)?1?(4\d{3})$`)

	// Names that were withdrawn from the standards but live on in enquiries, and
	// names of other systems; suggestions only, because their strengths differ.
	withdrawn = map[string]string{
		"ST37": "S235", "ST372": "S235", "FE360": "S235",
		"ST44": "S275", "ST442": "S275", "FE430": "S275",
		"AISI304": "1.4301", "304": "1.4301", "AISI316": "1.4401", "316": "1.4401", "2205": "1.4462",
		"ST52": "S355", "ST523": "S355", "FE510": "S355",
	}
)

func compact(name string) string {
	return standards.ReplaceAllString(separators.Replace(strings.ToUpper(name)), "")
}

// canonical returns the name under which a grade would be held; it does not
// promise that it is.
func canonical(name string) string {
	c := compact(name)
	if m := structural.FindStringSubmatch(c); m != nil {
		return m[1] + m[2]
	}
	if m := fineGrain.FindStringSubmatch(c); m != nil {
		return m[1] + m[2] + m[3]
	}
	if m := hollow.FindStringSubmatch(c); m != nil {
		return m[1] + "H"
	}
	if m := astmGrade.FindStringSubmatch(c); m != nil {
		return strings.TrimSpace(m[1] + " " + m[2])
	}
	if m := stainless.FindStringSubmatch(c); m != nil {
		return "1." + m[1]
	}
	return c
}

// near returns up to three grades whose spelling is close to name and that begin
// with the same letter or digit: S999 is a slip of no ASTM grade.
func (d *data) near(name string) []string {
	c := compact(name)
	if after, ok := strings.CutPrefix(c, "S"); ok && strings.HasPrefix(after, "A") {
		c = after // ASME's SA-106
	}
	if n, ok := withdrawn[c]; ok {
		return []string{n}
	}
	type candidate struct {
		name     string
		distance int
	}
	var found []candidate
	for _, n := range d.names {
		k := compact(n)
		if c == "" || c[0] != k[0] {
			continue
		}
		dist := spelling.Distance(c, k)
		if dist <= max(1, len(k)/2) || len(c) >= 3 && (strings.HasPrefix(k, c) || strings.HasPrefix(c, k)) {
			found = append(found, candidate{n, dist})
		}
	}
	slices.SortStableFunc(found, func(a, b candidate) int { return a.distance - b.distance })
	var names []string
	for _, f := range found[:min(3, len(found))] {
		names = append(names, f.name)
	}
	return names
}
