package section

import (
	"regexp"
	"slices"
	"strings"
)

var (
	signs = strings.NewReplacer("×", "X", "✕", "X", "∗", "X", "*", "X", "″", "IN", "”", "IN", "“", "IN", "\"", "IN",
		"\u00a0", " ", "\t", " ", "–", "-", "‑", "-")
	decimalComma  = regexp.MustCompile(`(\d),(\d)`)
	mixedNumber   = regexp.MustCompile(`(\d)[ -]+(\d+/\d+)`)
	bareSchedule  = regexp.MustCompile(`^((?:PIPE\s+)?NPS\s*[\d+/.]+)\s+(\d+)$`)
	looseDot      = regexp.MustCompile(`\.([^\d]|$)`)
	separators    = strings.NewReplacer(" ", "", "-", "", "_", "")
	europeanWide  = regexp.MustCompile(`^HE(\d+)([ABM])$`)
	pipeSchedule  = regexp.MustCompile(`^(\d+(?:\+\d+/\d+|\.\d+|/\d+)?)(?:IN(?:CH)?)?(?:(?:SCHEDULE|SCH)?(STD|XXS|XXH|XS|XH)|(?:SCHEDULE|SCH|S)\.?(\d+))$`)
	namedStandard = regexp.MustCompile(`(?:TO)?(?:BS|DIN)?(EN10210|EN10219)2?$`)
)

// key reduces a spelling to what tells sizes apart: upper case, no spaces and
// hyphens, X between dimensions, IN for inches, + inside mixed numbers.
func key(text string) string {
	k := signs.Replace(strings.ToUpper(strings.TrimSpace(text)))
	k = decimalComma.ReplaceAllString(k, "$1.$2")
	k = mixedNumber.ReplaceAllString(k, "$1+$2")
	k = bareSchedule.ReplaceAllString(k, "${1}SCH$2")
	k = separators.Replace(k)
	return looseDot.ReplaceAllString(k, "$1")
}

// words are the spellings of a family before its size, as keys; the first is
// the key of its name.
var words = map[string][]string{
	"IPE":        {"IPE"},
	"HEA":        {"HEA"},
	"HEB":        {"HEB"},
	"HEM":        {"HEM"},
	"UPN":        {"UPN", "UNP"},
	"UPE":        {"UPE"},
	"W":          {"W"},
	"C":          {"C"},
	"L":          {"L", "ANGLE"},
	"CHS":        {"CHS", "ROUNDTUBE", "CIRCULARHOLLOWSECTION"},
	"PIPE":       {"PIPE", "NPS", "PIPENPS", "STEELPIPE"},
	"SHS":        {"SHS", "SQUARETUBE", "SQUAREHOLLOWSECTION"},
	"RHS":        {"RHS", "RECTANGULARTUBE", "RECTANGULARHOLLOWSECTION"},
	"HSS":        {"HSS", "RECTANGULARHSS", "SQUAREHSS"},
	"WELDED-I":   {"WELDEDI", "WI", "WELDEDIBEAM", "PLATEGIRDER", "PG"},
	"CHANNEL":    {"CHANNEL"},
	"TEE":        {"TEE"},
	"HSS-ROUND":  {"HSSROUND", "ROUNDHSS"},
	"WELDED-BOX": {"WELDEDBOX", "BOX", "BOXGIRDER"},
	"ROUND":      {"ROUND", "ROUNDBAR", "SOLIDROUND", "RD"},
	"FLAT":       {"FLAT", "FLATBAR", "FL"},
}

// IsFamily says whether text names a family, in any trade spelling, and
// returns its canonical name.
func IsFamily(text string) (string, bool) {
	k := key(text)
	for name, spellings := range words {
		if slices.Contains(spellings, k) {
			return name, true
		}
	}
	return "", false
}

// splitFamily parts a key into the family that it begins with and the rest.
// The longest word wins: ROUNDTUBE is not a ROUND. A word of one or two letters needs
// a number after it: WIDGET is not a W.
func splitFamily(k string) (family, rest string, ok bool) {
	if m := europeanWide.FindStringSubmatch(k); m != nil {
		return "HE" + m[2], m[1], true
	}
	if before, found := strings.CutSuffix(k, "PIPE"); found && before != "" {
		k = "PIPE" + before
	}
	longest := 0
	for name, spellings := range words {
		for _, w := range spellings {
			after, found := strings.CutPrefix(k, w)
			if len(w) <= 2 && !startsNumber(after) {
				continue
			}
			if found && len(w) > longest {
				family, rest, longest = name, after, len(w)
			}
		}
	}
	return family, rest, longest > 0
}

func startsNumber(text string) bool {
	return text == "" || text[0] == '.' || text[0] >= '0' && text[0] <= '9'
}

// decimalNPS are the nominal pipe sizes that are written as fractions.
var decimalNPS = map[string]string{
	"0.5": "1/2", "0.75": "3/4", "1.25": "1+1/4", "1.5": "1+1/2", "2.5": "2+1/2", "3.5": "3+1/2",
}

// pipeKey turns what follows PIPE or NPS into the key of a schedule designation.
func pipeKey(rest string) (string, bool) {
	m := pipeSchedule.FindStringSubmatch(rest)
	if m == nil {
		return "", false
	}
	size := m[1]
	if fraction, ok := decimalNPS[size]; ok {
		size = fraction
	}
	switch m[2] {
	case "":
		return "NPS" + size + "SCH" + m[3], true
	case "XH":
		return "NPS" + size + "XS", true
	case "XXH":
		return "NPS" + size + "XXS", true
	}
	return "NPS" + size + m[2], true
}
