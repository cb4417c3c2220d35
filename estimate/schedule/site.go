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

// The conditions of a site that make erection dearer, as they stand in
// Settings.SiteConditions.
const (
	SiteOverWater = "over water"
	SiteTidal     = "tidal"
	SiteLivePlant = "live plant"
	SiteHeight    = "height"
	SiteWeather   = "weather"
)

// SiteConditions returns the conditions of a site that a job may name.
func SiteConditions() []string {
	return []string{SiteOverWater, SiteTidal, SiteLivePlant, SiteHeight, SiteWeather}
}

// siteConditions reads "tidal; height", in the order of SiteConditions.
func (r *reader) siteConditions() []string {
	all := SiteConditions()
	var list []string
	for part := range strings.SplitSeq(r.jobText(jobConditions), ";") {
		if fold(part) == "" {
			continue
		}
		found := strings.TrimSpace(part)
		i := slices.IndexFunc(all, func(c string) bool { return fold(c) == fold(found) })
		switch {
		case i < 0:
			r.jobFault(jobConditions, &complaint{shorten(found), "is no site condition", didYouMean(near(found, all), `one or more of `+strings.Join(all, ", ")+`, parted by ";"`)})
		case slices.Contains(list, all[i]):
			r.jobFault(jobConditions, &complaint{shorten(found), "is named twice", "each site condition once"})
		default:
			list = append(list, all[i])
		}
	}
	slices.SortFunc(list, func(a, b string) int { return slices.Index(all, a) - slices.Index(all, b) })
	return list
}

// haulUnits are what a haul distance may be in, in m (the mile: NIST SP 811,
// appendix B); longer symbols come before those that end them.
var haulUnits = []struct {
	symbol string
	factor float64
}{{"km", 1000}, {"mi", 1609.344}, {"m", 1}}

// haulDistance reads a distance in km, or in the unit that the value names.
func (r *reader) haulDistance() float64 {
	e := &r.job.entries[jobHaul]
	factor := 1000.0
	if word := strings.TrimSpace(e.cell.Text); e.cell.Kind == sheet.Text {
		for _, u := range haulUnits {
			if rest, ok := strings.CutSuffix(word, u.symbol); ok {
				factor, e.cell.Text = u.factor, strings.TrimSpace(rest)
				break
			}
		}
	}
	bounds := hauls
	bounds.high /= factor
	n := r.jobQuantity(jobHaul, unit.Number, bounds)
	return unit.Round(n.value*factor, unit.Digits)
}
