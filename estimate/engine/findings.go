package engine

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/pricing"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/takeoff"
	"spanwright/structural/beam"
	"spanwright/structural/resistance"
)

// lowestCombinedFactor is the factor on yield below which a first pass without
// explicit combinations is doubtful (common practice, no source: 3 to 4).
const lowestCombinedFactor = 3

// findings gathers what is unsafe or doubtful, gravest first, then by subject.
func (r *run) findings(d document.Document) []document.Finding {
	var f []document.Finding
	for _, s := range r.sized.members {
		f = append(f, memberFindings(s)...)
	}
	f = append(f, r.bandFindings(d.Groups)...)
	f = append(f, r.totalFindings(d)...)
	rank := map[document.Severity]int{document.Unsafe: 0, document.Doubtful: 1, document.Notice: 2}
	sort.SliceStable(f, func(i, j int) bool {
		if rank[f[i].Severity] != rank[f[j].Severity] {
			return rank[f[i].Severity] < rank[f[j].Severity]
		}
		return false
	})
	return f
}

func memberFindings(s sizedMember) []document.Finding {
	if s.result == nil {
		return nil
	}
	var out []document.Finding
	mark := s.member.Mark
	figures := []string{"member/" + assumption.Segment(mark) + "/net"}
	if note := refusal(*s.result); note != "" {
		out = append(out, document.Finding{Severity: document.Unsafe, Code: "not-covered", Subject: mark, Figures: figures,
			Message: fmt.Sprintf("The given section %s is not checked, because the design basis does not cover it here: %s. Its tonnage is priced as given.", s.result.Section.Designation, note)})
	} else if !s.result.Passes {
		out = append(out, document.Finding{Severity: document.Unsafe, Code: "section-fails", Subject: mark, Figures: figures,
			Message: fmt.Sprintf("The given section %s fails: %s at %.2f. Its tonnage is priced as given; it will grow.", s.result.Section.Designation, s.result.Governing, s.result.Utilisation)})
	}
	if f, ok := unsafeShortcut(mark, s.result.Ratios); ok {
		out = append(out, f)
	}
	if f, ok := softened(s); ok {
		out = append(out, f)
	}
	if f, ok := uplift(s); ok {
		out = append(out, f)
	}
	for _, w := range s.result.Warnings {
		out = append(out, document.Finding{Severity: document.Doubtful, Code: "section-warning", Subject: mark, Message: sentence(w), Figures: figures})
	}
	for i, c := range s.result.Checks {
		note := noteOf(s.result, i)
		slender := c.ID == resistance.Axial && strings.Contains(note, "slenderness over 200")
		failing := !resistance.Passes(c.Utilisation) && c.ID != resistance.Deflecting && c.ID != resistance.NotCovered
		if note != "" && (slender || failing) {
			out = append(out, document.Finding{Severity: document.Doubtful, Code: "check-note", Subject: mark, Message: sentence(c.ID + ": " + note), Figures: figures})
		}
	}
	return out
}

// sentence ends a note with a full stop.
func sentence(s string) string { return strings.TrimSuffix(s, ".") + "." }

// unsafeShortcut names the ratios of the split method that are too low. The
// sizing itself uses the exact envelope, so the finding warns against the
// shortcut, not against the size.
func unsafeShortcut(mark string, ratios []beam.Ratio) (document.Finding, bool) {
	var worst *beam.Ratio
	var low, missing []string
	for i, r := range ratios {
		switch {
		case !r.Unsafe:
			continue
		case r.Split == 0:
			missing = append(missing, r.Effect+" of "+r.Where)
			continue
		case worst == nil || r.Ratio < worst.Ratio-1e-9: // of equal ones the first
			worst = &ratios[i]
		}
		low = append(low, fmt.Sprintf("%s of %s %.2f", r.Effect, r.Where, r.Ratio))
	}
	if len(low)+len(missing) == 0 {
		return document.Finding{}, false
	}
	var parts []string
	if worst != nil {
		parts = append(parts, fmt.Sprintf("It gives %.2f of the exact %s of %s; ratios below 1: %s.", worst.Ratio, worst.Effect, worst.Where, strings.Join(low, "; ")))
	}
	if len(missing) > 0 {
		parts = append(parts, "It leaves out: "+strings.Join(missing, "; ")+".")
	}
	return document.Finding{Severity: document.Unsafe, Code: "unsafe-shortcut", Subject: mark,
		Message: "The split method would be unsafe here. " + strings.Join(parts, " ") + " The size and the reactions shown come from the exact envelope."}, true
}

// softened warns where compression raises the deflection by more than a tenth: the
// deflection check is of first order, and 1/(1 − N/Ncr) is the usual amplification.
func softened(s sizedMember) (document.Finding, bool) {
	sec, length := s.result.Section, s.member.Length
	if !(s.member.Axial > 0) || s.member.DeflectionLimit == 0 || len(s.member.Loads) == 0 {
		return document.Finding{}, false
	}
	ratio := s.member.Axial * length * length / (math.Pi * math.Pi * softModulus * sec.Iy)
	if ratio <= 0.1 {
		return document.Finding{}, false
	}
	return document.Finding{Severity: document.Doubtful, Code: "compressed-deflection", Subject: s.member.Mark,
		Message: fmt.Sprintf("The deflection is of first order; the compression of %.4g kN is %.2g of the Euler load of the length and would raise it.", s.member.Axial/1000, ratio)}, true
}

// softModulus is the lower of the two moduli in use, 29,000 ksi, Pa.
const softModulus = 199.948e9

func uplift(s sizedMember) (document.Finding, bool) {
	var parts []string
	for _, l := range s.lifts {
		parts = append(parts, fmt.Sprintf("%.1f kN at %.3g m under %s", l.force/1000, l.at, l.combination))
	}
	if len(parts) == 0 {
		return document.Finding{}, false
	}
	return document.Finding{Severity: document.Doubtful, Code: "uplift", Subject: s.member.Mark,
		Message: "A support is lifted: " + strings.Join(parts, "; ") + ". Holding-down or ballast is needed and is not priced."}, true
}

// bandFindings holds each group's mass per metre and price per tonne against the
// bands of the book, by the connection class that most of its mass has.
func (r *run) bandFindings(groups []document.Group) []document.Finding {
	class, hours := r.mainClass(), r.shopHours()
	var out []document.Finding
	for _, g := range groups {
		for _, b := range r.job.Book.Bands {
			if b.Class != class[g.Group] {
				continue
			}
			value, unit, ok := measure(b.Measure, g, hours[g.Group], r.currency)
			if b.Measure == "price/t" {
				b.Low, b.High = b.Low*r.exchanged, b.High*r.exchanged
			}
			if !ok || (b.Low <= value && value <= b.High) {
				continue
			}
			out = append(out, document.Finding{Severity: document.Doubtful, Code: "outside-band", Subject: g.Group,
				Message: fmt.Sprintf("%s %s lies outside the usual %s to %s for %s (%s).", four(value), unit, four(b.Low), four(b.High), b.Class, b.Source),
				Figures: []string{"group/" + assumption.Segment(g.Group) + "/amount"}})
		}
	}
	return out
}

func measure(name string, g document.Group, hours float64, c money.Currency) (float64, string, bool) {
	switch name {
	case "kg/m":
		return 1000 * g.Net.Float64() / float64(g.Length), "kg/m", g.Length > 0
	case "price/t":
		if !(g.Delivered.Sign() > 0) {
			return 0, "", false
		}
		return g.Amount.Float64() / g.Delivered.Float64(), c.Code + "/t", g.Delivered.Sign() > 0
	}
	if name == "shop h/t" && g.Delivered.Sign() > 0 && hours > 0 {
		return hours / g.Delivered.Float64(), "shop h/t", true
	}
	return math.NaN(), "", false
}

// shopHours are those of each group.
func (r *run) shopHours() map[string]float64 {
	out := map[string]float64{}
	for _, it := range r.items {
		if q, ok := it.Quantity(ratebook.ShopHours); ok {
			out[it.Group] += q.Value.Float64()
		}
	}
	return out
}

func (r *run) mainClass() map[string]string {
	heaviest := map[string]float64{}
	class := map[string]string{}
	for _, it := range r.items {
		if t := it.Net.Float64(); t > heaviest[it.Group] {
			heaviest[it.Group], class[it.Group] = t, it.Connection
		}
	}
	return class
}

func (r *run) totalFindings(d document.Document) []document.Finding {
	var out []document.Finding
	add := func(s document.Severity, code, message string, figures ...string) {
		out = append(out, document.Finding{Severity: s, Code: code, Subject: "total", Message: message, Figures: figures})
	}
	if r.job.Settings.DesignBasis == "allowable" && r.job.Settings.Factor < lowestCombinedFactor {
		add(document.Doubtful, "low-factor", fmt.Sprintf("The factor on yield is %.4g without explicit combinations; 3 to 4 is usual for a first pass (common practice, no source).", r.job.Settings.Factor))
	}
	for _, w := range r.ranged.Warnings {
		add(document.Doubtful, w.Code, w.Message, "range", "contingency")
	}
	if d.Totals.Contingency.Sign() < 0 {
		add(document.Doubtful, "negative-contingency", fmt.Sprintf("The contingency is negative: the base lies at P%.3g, above the chosen P%.3g.", 100*float64(d.Range.BaseAt), 100*float64(d.Totals.Confidence)), "contingency")
	}
	out = append(out, r.coverageFindings()...)
	out = append(out, r.unusedFindings()...)
	out = append(out, r.priceFindings()...)
	out = append(out, r.dateFindings()...)
	out = append(out, purchaseFindings(d.Cutting)...)
	out = append(out, classFindings(d.Class)...)
	if rho := zeroCorrelation(r.job.Book.Correlation); len(rho) > 0 {
		add(document.Doubtful, "no-correlation", "Costs of the group "+strings.Join(rho, ", ")+" are taken as uncorrelated (ρ = 0), which narrows the range.", "range")
	}
	if d.Split != nil {
		add(document.Notice, "split-summary", splitWords(*d.Split))
	}
	for _, it := range r.items {
		if it.Treatment == takeoff.Concrete || it.Treatment == takeoff.Joint {
			continue // bolts of joints are bought with them
		}
		if it.Net.Sign() == 0 || it.Delivered.Sign() == 0 || it.Purchased.Sign() == 0 {
			out = append(out, document.Finding{Severity: document.Doubtful, Code: "too-light", Subject: it.Group, Figures: []string{"item/" + it.ID + "/net"},
				Message: fmt.Sprintf("The pieces %s together weigh less than half a kilogram and are priced at nothing.", strings.Join(it.Marks, ", "))})
		}
	}
	if s := r.job.Settings; r.job.Book.Kind == ratebook.KindRatio && s.Coating+s.ExecutionClass != "" {
		add(document.Notice, "recorded-only", "Coating and execution class are recorded with the job; the ratio book does not price them apart.")
	}
	for _, o := range r.job.Omissions {
		add(document.Notice, "possible-omission", o)
	}
	return out
}

// Codes of notes of the pricing that are treated apart.
const (
	noteExpired      = "expired"
	noteNotTriggered = "not-triggered"
	noteNoQuantity   = "no-quantity"
)

// priceFindings are what the pricing saw: prices past their date, minimum charges
// and orders that bind, categories that could not be escalated.
func (r *run) priceFindings() []document.Finding {
	var out []document.Finding
	for _, n := range r.priced.Notes {
		severity := document.Notice
		switch n.Code {
		case noteExpired:
			severity = document.Doubtful
		case noteNotTriggered, noteNoQuantity:
			continue // an exclusion, or a rate that this job has no use for
		}
		message := n.Message
		if name, ok := strings.CutPrefix(n.Subject, "rate/"); ok {
			message = "Rate “" + name + "”: " + message
		}
		out = append(out, document.Finding{Severity: severity, Code: "rate-" + n.Code, Subject: "total", Message: sentence(message), Figures: []string{"category/" + n.Category}})
	}
	for _, words := range r.stale {
		out = append(out, document.Finding{Severity: document.Doubtful, Code: "exchange-expired", Subject: "total", Message: words, Figures: []string{"base"}})
	}
	for _, c := range slices.Compact(slices.Clone(r.unescalated)) {
		if !r.prices(c) || r.onlyFractions(c) {
			continue // a fraction follows what it is taken of
		}
		out = append(out, document.Finding{Severity: document.Doubtful, Code: "not-escalated", Subject: "total", Figures: []string{"category/" + c},
			Message: fmt.Sprintf("Prices of %s are those of %s: the rate book has no index for them.", c, r.job.Book.BaseDate)})
	}
	return out
}

// onlyFractions tells whether every line of a category is a fraction of others.
func (r *run) onlyFractions(category string) bool {
	return !slices.ContainsFunc(r.priced.Lines, func(l pricing.Line) bool { return l.Category == category && l.Driver != ratebook.CostOf })
}

// splitWords puts the summary of the split method into a sentence.
func splitWords(s document.SplitSummary) string {
	diff := fmt.Sprintf("%.3f t more", float64(s.DifferenceT))
	switch {
	case s.DifferenceT < 0:
		diff = fmt.Sprintf("%.3f t less", -float64(s.DifferenceT))
	case s.DifferenceT == 0:
		diff = "no more and no less"
	}
	if s.Difference != nil && s.Difference.Sign() != 0 {
		diff += fmt.Sprintf(" (%s of the base at likely values)", s.Difference)
	}
	text := fmt.Sprintf("Sized by the split method, %d members would weigh %.3f t net, %s than by the exact envelope", len(s.Members), float64(s.TonnesSplit), diff)
	if len(s.UnsafeMembers) == 0 {
		return text + "; none of these sections would fail the exact checks."
	}
	text += "; its sections would fail the exact checks in " + strings.Join(s.UnsafeMembers, ", ")
	if s.UnsafeDifference != nil {
		text += fmt.Sprintf(", which alone make %s of the difference", s.UnsafeDifference)
	}
	return text + "."
}

func zeroCorrelation(c map[string]float64) []string {
	var out []string
	for _, g := range sortedKeys(c) {
		if c[g] == 0 {
			out = append(out, g)
		}
	}
	return out
}
