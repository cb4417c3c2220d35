package schedule

import (
	"slices"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// windSpeed reads a speed in m/s, or in mph where the value says so.
func (r *reader) windSpeed() float64 {
	e := &r.job.entries[jobWindSpeed]
	word, factor := strings.ToLower(strings.TrimSpace(e.cell.Text)), 1.0
	if e.cell.Kind == sheet.Text {
		if rest, ok := strings.CutSuffix(word, "mph"); ok {
			word, factor = rest, mileAnHour
		}
		e.cell.Text = strings.TrimSpace(strings.TrimSuffix(word, "m/s"))
	}
	return unit.Round(r.siteQuantity(jobWindSpeed, unit.Number, speeds)*factor, unit.Digits)
}

// siteQuantity reads what load sets need: where it is faulty, rows that need it are
// not blamed.
func (r *reader) siteQuantity(id jobID, d unit.Dimension, s span) float64 {
	n := r.jobQuantity(id, d, s)
	if n.state == bad {
		r.job.entries[id].cell.Kind = lostKind
	}
	return n.value
}

// mileAnHour is 1 mph in m/s (NIST SP 811, appendix B).
const mileAnHour = 0.44704

// terrains are the categories of EN 1991-1-4:2005 table 4.1 and the exposures of
// ASCE 7-22 26.7.3.
var terrains = []string{"0", "I", "II", "III", "IV", "B", "C", "D"}

func (r *reader) terrain() string {
	found := r.jobText(jobTerrain)
	if i := slices.IndexFunc(terrains, func(t string) bool { return strings.EqualFold(t, found) }); i >= 0 {
		return terrains[i]
	}
	if found != "" {
		r.jobFault(jobTerrain, &complaint{shorten(found), "is no terrain category and no exposure", "one of " + strings.Join(terrains, ", ")})
		r.job.entries[jobTerrain].cell.Kind = lostKind
	}
	return ""
}
