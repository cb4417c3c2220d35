package engine

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
)

// inclusions says what the total holds.
func (r *run) inclusions() []string {
	sized, given, byMass := 0, 0, 0
	for _, s := range r.sized.members {
		switch s.member.Treatment {
		case schedule.SizeFromFamily:
			sized++
		case schedule.CheckSection:
			given++
		default:
			byMass++
		}
	}
	out := []string{
		fmt.Sprintf("Steelwork of %d schedule rows: %d sized from a family, %d with a given section, %d by mass.", len(r.sized.members), sized, given, byMass),
		"Allowances for connections, bolts, growth and waste, each in the register.",
	}
	var cats []string
	for _, c := range ratebook.Categories() {
		if _, ok := r.priced.Categories[c]; ok {
			cats = append(cats, c)
		}
	}
	if e := r.job.Settings.ExecutionClass; e != "" {
		for _, x := range ratebook.Extents(e) {
			out = append(out, extentWords(e, x))
		}
	}
	return append(out,
		"Categories priced: "+strings.Join(cats, ", ")+".",
		"In the range, not in the base: the systemic factor of the estimate class and the spread of every rate, multiplier and allowance.")
}

// extentWords is the extent of inspection of one type of weld.
func extentWords(class string, x ratebook.Extent) string {
	weld := x.Weld
	if x.Utilisation != "" {
		weld += ", utilisation " + x.Utilisation
	}
	return fmt.Sprintf("Inspection in %s: %s of %s: %.0f %% (%s).", class, x.Method, weld, 100*x.Fraction, x.Source)
}

// exclusions says what the total does not hold. An empty list would be a fault.
func (r *run) exclusions() []string {
	horizontal := "Wind and other horizontal actions: not checked, as no row gives any."
	if r.any(sideways) {
		horizontal = "Horizontal actions on rows that give none, and the stability of the structure as a whole: not checked."
	}
	vibration := "Vibration: not checked, as no frequency floor is asked for."
	if r.any(floored) {
		vibration = "Vibration beyond the frequency floors asked for: resonance, damping and comfort are not checked."
	}
	out := r.notPriced()
	out = append(out,
		"Land, permits and finance.",
		"Taxes and duties, except a tax line shown apart where the job states a rate.",
		"Equipment, conveyors, piping, electrical work, cladding and roofing.",
		"Corrosion allowance, least wall thickness and durability.",
		"Fatigue, earthquake and accidental actions: not checked; dynamic effects beyond the dynamic factors given neither.",
		vibration,
		horizontal,
		"Torsion, forces put into webs across them, and sway of frames (P-Δ): not checked.",
		"Design of connections, splices and bearings; they are priced by allowance or by counted joints.",
		"Rolling margin and weld metal: they count in what is lifted and carried, and are not priced.",
		"Management reserve: money outside the range, held by who approves.")
	if len(r.job.Risks) == 0 {
		out = append(out, "Discrete risks: none were given.")
	}
	return out
}

// notPriced names the categories without a line, with what falls under them, and
// the money that the estimate is not in.
func (r *run) notPriced() []string {
	var out []string
	for _, c := range []struct{ category, words string }{
		{ratebook.Foundations, "Foundations, ballast and holding-down."},
		{ratebook.Margin, "Margin of the fabricator."},
		{ratebook.Engineering, "Engineering, load tests, trial assembly and survey."},
		{ratebook.Indirects, "Site indirects."},
		{ratebook.Owner, "The owner's costs."},
	} {
		if _, ok := r.priced.Categories[c.category]; !ok {
			out = append(out, c.words)
		}
	}
	for _, n := range r.priced.Notes {
		if n.Code == noteNotTriggered {
			out = append(out, fmt.Sprintf("%s, “%s”: %s.", strings.ToUpper(n.Category[:1])+n.Category[1:], strings.TrimPrefix(n.Subject, "rate/"), n.Message))
		}
	}
	if r.job.Settings.Money != schedule.MoneyOutturn {
		out = append(out, "Escalation after the base date.")
	}
	return append(out, "Exchange risk beyond the spread of dated rates.")
}

// any tells whether one of the members is of a kind.
func (r *run) any(is func(sizedMember) bool) bool { return slices.ContainsFunc(r.sized.members, is) }

func (r *run) textNotes() []string {
	out := []string{
		"Concept sizes follow the exact envelope; the split method is shown beside it and never used for reactions.",
		"Reactions and total loads are those of the service combination, without factors, in the vertical plane.",
		"What an assumption feeds is stated for sections as chosen; entries marked so may also choose other sections, and then move masses and costs in steps.",
		"Percentiles of lines, groups or projects do not add up.",
		"Labour, coating, freight and erection follow delivered mass; material follows purchased mass.",
	}
	if n := r.job.Book.Note; n != "" {
		out = append(out, "Rate book “"+r.job.Book.Name+"”: "+n)
	}
	return out
}
