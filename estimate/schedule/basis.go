package schedule

import (
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/structural/resistance"
)

// bases are the design bases with the names that mean the same in the trade, all
// compared by their letters and digits alone.
var bases = []struct {
	name string
	same []string
}{
	{defaultBasis, []string{"allowable stress"}},
	{"en1993", []string{"EN 1993-1-1", "EN 1993-1-1:2005", "Eurocode 3", "EC3", "Eurocode"}},
	{resistance.ASD, []string{"AISC 360 ASD", "AISC 360-22 ASD", "ANSI/AISC 360 ASD", "ASD"}},
	{resistance.LRFD, []string{"AISC 360 LRFD", "AISC 360-22 LRFD", "ANSI/AISC 360 LRFD", "LRFD"}},
}

func basisNames() []string {
	var names []string
	for _, b := range bases {
		names = append(names, b.name)
	}
	return names
}

func basisWords() string {
	return strings.Join(basisNames(), ", ") + "; also EN 1993-1-1, AISC 360 ASD, AISC 360 LRFD"
}

// findBasis finds a design basis by its name or another in use.
func findBasis(found string) (string, bool) {
	key := fold(found)
	for _, b := range bases {
		if fold(b.name) == key || slices.ContainsFunc(b.same, func(s string) bool { return fold(s) == key }) {
			return b.name, true
		}
	}
	return "", false
}

func (r *reader) designBasis() string {
	found := r.jobText(jobStandard)
	if found == "" {
		if !r.job.given[jobStandard] {
			r.setting(basisEntry, defaultBasis, "Members are checked by allowable stress, yield over one factor.", assumption.Medium)
		}
		return defaultBasis
	}
	if name, ok := findBasis(found); ok {
		return name
	}
	remedy := didYouMean(near(found, basisNames()), "one of "+basisWords())
	if strings.Contains(fold(found), "aisc") {
		remedy = "AISC 360 ASD or AISC 360 LRFD"
	}
	r.jobFault(jobStandard, &complaint{shorten(found), "is no design basis", remedy})
	r.job.entries[jobStandard].cell.Kind = lostKind
	return defaultBasis
}
