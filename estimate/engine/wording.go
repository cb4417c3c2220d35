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
	out := append(r.rowWords(), "Allowances for connections, bolts, growth and waste, each in the register.")
	var cats []string
	for _, c := range ratebook.Categories() {
		if r.prices(c) {
			cats = append(cats, c)
		}
	}
	out = append(out, "Categories priced: "+strings.Join(cats, ", ")+".")
	if r.job.Book.Kind == ratebook.KindUnitRate {
		out = append(out, r.systemWords()...)
	}
	return append(out, "In the range, not in the base: the systemic factor of the estimate class and the spread of every rate, multiplier and allowance.")
}

// rowWords say what the rows of the schedule are.
func (r *run) rowWords() []string {
	count := map[schedule.Treatment]int{}
	concrete, volume := 0, 0.0
	for _, s := range r.sized.members {
		m := s.member
		if m.Concrete > 0 {
			concrete, volume = concrete+1, volume+float64(m.Quantity)*m.Concrete
		}
		if m.Treatment != schedule.ByMass || m.LineMass+m.AreaMass > 0 {
			count[m.Treatment]++
		}
	}
	var out []string
	if n := count[schedule.SizeFromFamily] + count[schedule.CheckSection] + count[schedule.ByMass]; n > 0 {
		out = append(out, fmt.Sprintf("Steelwork of %s: %d sized from a family, %d with a given section, %d by mass.",
			counted(n, "schedule row"), count[schedule.SizeFromFamily], count[schedule.CheckSection], count[schedule.ByMass]))
	}
	if concrete > 0 && r.prices(ratebook.Foundations) {
		out = append(out, fmt.Sprintf("Concrete of %s: %s m³.", counted(concrete, "schedule row"), four(volume)))
	}
	return out
}

// counted puts a number before a word, in the plural where it is not one.
func counted(n int, word string) string {
	if n == 1 {
		return "1 " + word
	}
	return fmt.Sprintf("%d %ss", n, word)
}

// systemWords are the coating systems that are priced, and the extents of inspection
// of the execution classes.
func (r *run) systemWords() []string {
	var out, coatings []string
	for _, it := range r.items {
		if needsCoat(it) {
			coatings = append(coatings, it.Coating)
		}
	}
	slices.Sort(coatings)
	if coatings = slices.Compact(coatings); len(coatings) > 0 && r.prices(ratebook.Coating) {
		out = append(out, "Coating systems: "+strings.Join(coatings, ", ")+".")
	}
	if !r.prices(ratebook.Inspection) {
		return out
	}
	for _, class := range r.facts.Executions {
		for _, x := range ratebook.Extents(class) {
			out = append(out, extentWords(class, x))
		}
	}
	return out
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
	if r.job.Settings.Money != schedule.MoneyOutturn || !r.escalated() {
		out = append(out, "Escalation after the base date.")
	} else if len(r.job.Risks) > 0 {
		out = append(out, "Escalation of discrete risks: their amounts are taken as stated, in the money of the estimate.")
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
