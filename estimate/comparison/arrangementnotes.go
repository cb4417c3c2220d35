package comparison

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/ratebook"
	"spanwright/structural/action"
	"spanwright/structural/arrangement"
	"spanwright/structural/resistance"
)

// notes are those of the study about a candidate, and how its parts became rows.
func (s *ArrangementStudy) notes(c *arrangement.Candidate) []string {
	out := []string{}
	for _, n := range c.Notes {
		out = append(out, sentenceOf(n.Statement)+" ("+n.Clause+")")
	}
	if c.Truss != nil {
		out = append(out, s.notesOfLattice(c)...)
	} else {
		out = append(out, s.notesOfLoads(c)...)
	}
	if len(c.Towers) > 0 {
		out = append(out, "Each leg is a strut with its greatest force as one variable load of the same factored effect; bracing, head and base plates are a row by mass, for they are not sized: their surface is that which the rate book takes for such rows, none where it has no norm.")
	}
	if c.Ballast != nil && c.Ballast.Volume > 0 {
		out = append(out, "The ballast is priced as concrete in place; the frame that holds it and its tie to the tail are not priced.")
	}
	if slices.ContainsFunc(c.Supports, arrangement.Support.Lifted) {
		out = append(out, "Anchors and holding-down bolts are in the connections of their rows at the most; no anchor is counted.")
	}
	if s.sliver(c) {
		out = append(out, fmt.Sprintf("%s stands at %.2f: a little more load asks for another section.", c.Governing, c.Utilisation))
	}
	return out
}

// sliver tells whether the governing check has next to no room.
func (s *ArrangementStudy) sliver(c *arrangement.Candidate) bool {
	return c.Feasible && c.Utilisation > 0.97 && resistance.Passes(c.Utilisation)
}

func (s *ArrangementStudy) notesOfLattice(c *arrangement.Candidate) []string {
	t := c.Truss
	return []string{
		"Each chord is one row that runs on over its panel points with the greatest force of both chords along its whole length and the loads between panel points, so that site splices, transport and lifts are counted as for a long member; the study checks a chord as a simple bar between panel points, which is less favourable.",
		fmt.Sprintf("One diagonal is a strut with the greatest force; the other %d are a row by mass, for they are welded to the chords in the shop and not lifted one by one: they are priced as plain sections, and their surface is that which the rate book takes for rows by mass.", 2*t.Panels-1),
		fmt.Sprintf("Plan bracing and gussets of %.0f kg are priced by mass as the study lets the lattice carry them; connections come on top by their class. The lattice stands in one plane: what holds its plan bracing sideways, such as a second plane, is neither sized nor priced.", planBracing(c, &s.Study)),
		fmt.Sprintf("Panels of %.2f m depth are taken as fit for the road; deeper ones travel in bars and are welded or bolted on site, which costs more.", t.Depth),
	}
}

// notesOfLoads says where the row's loads are not those of the study.
func (s *ArrangementStudy) notesOfLoads(c *arrangement.Candidate) []string {
	var out []string
	partly, couples := false, false
	for _, a := range s.Study.Member.Actions {
		partly = partly || partial(a, rootOf(c), s.Study.Member.Length)
		couples = couples || a.Kind == action.Moment
	}
	if partly {
		out = append(out, "Loads on a part of the member, or not uniform, are rows of forces in the estimate's own check: it is up to 0.1 % higher than the study's, and more where a variable load crosses a support, because its parts may then be absent apart.")
	}
	if couples {
		out = append(out, "Couples are left out of the estimate's own check of the main member; the study's check has them.")
	}
	if m := s.Study.Member; m.MassShare > 0 && m.FrequencyFloor > 0 {
		out = append(out, "The estimate's own check of the frequency has no mass of variable loads; the study's check has it.")
	}
	return out
}

// doubts are the notes about the comparison as a whole, the gravest first.
func (s *ArrangementStudy) doubts(sides []Side) []string {
	out := append(s.failing(sides),
		"The probabilities say how prices, growth, connections and risks that the ways share move their totals. They do not say whether the ground bears a support where one stands, nor that the design of one way may grow more than that of another: a lead that foundations and access could take up decides nothing.")
	if level := levelWith(sides); len(level) > 0 {
		out = append(out, fmt.Sprintf("Level with the first at the depth of a study: %s lie within %.0f %% of its mean, whatever the probability says; decide by site, access and time (common practice, no source).", strings.Join(level, ", "), 100*levelWithin))
	}
	if len(s.Study.Member.Actions) == 0 {
		out = append(out, "DOUBT: the study states no load: every way carries its own weight alone, and the ranking says nothing about what it is for. A blank load is never taken as zero in a schedule.")
	}
	if !s.windy() {
		out = append(out, "DOUBT: nothing acts sideways in the study. Towers, their footings and slender members are light without wind, which favours ways with many towers: give the study a horizontal load and the wind on the towers.")
	}
	out = append(out,
		"Priced are what spans, towers, ballast and footings. What stands on the member, what holds it at a root without a tower, and access are in none of the ways.",
		"Sections are those of the study and not sized again, so the belief about the conservatism of the checks (sizing bias) is not in these ranges: each is a little narrower than that of an estimate sized from families; between the ways most of it would cancel.",
		"Lumps such as calculations, crane set-up, foundation set-up and load test come once a job whatever the number of supports, which favours many of them.",
		"Foundations are priced alike wherever they stand. A tower in the tide or on bad ground is dearer: enter a multiplier of scope member on its FOOTING and TOWER rows, or of scope group on Towers or Foundations.",
	)
	if s.Book.Kind == ratebook.KindRatio {
		out = append(out, "DOUBT: the rate book prices by multiples of tonnes and has no rate for concrete: ballast and footings are not in the totals, which favours ways with much of them. Take a unit-rate book to compare arrangements.")
	}
	if s.OwnRules {
		out = append(out, "The study checks by partial factors, combinations or factors on loads of its own. The estimate's own checks are by those of the design basis and may differ.")
	}
	if n := s.feasible(); n > len(sides) {
		out = append(out, fmt.Sprintf("%d ways are feasible; priced are the %d with the least steel, and a heavier one may be cheaper.", n, len(sides)))
	}
	return out
}

// levelWithin is the lead, as a part of the mean, that a study without site and details
// does not bear out. Common practice, no source.
const levelWithin = 0.1

// levelWith names the schemes whose mean lies close to that of the first.
func levelWith(sides []Side) []string {
	var out []string
	first := float64(sides[0].Document.Range.Mean)
	for _, side := range sides[1:] {
		if float64(side.Document.Range.Mean)-first < levelWithin*first {
			out = append(out, side.ID)
		}
	}
	return out
}

// windy tells whether anything acts sideways.
func (s *ArrangementStudy) windy() bool {
	return s.Study.Towers.Wind > 0 || slices.ContainsFunc(s.Study.Member.Actions, func(a action.Action) bool { return a.Direction == action.Horizontal })
}

// failing names the rows that the estimate's own engine finds wanting.
func (s *ArrangementStudy) failing(sides []Side) []string {
	var out []string
	for _, side := range sides {
		var marks []string
		for _, m := range side.Document.Members {
			if !m.Passes {
				marks = append(marks, fmt.Sprintf("%s at %.3f", m.Mark, float64(m.Utilisation)))
			}
		}
		if len(marks) > 0 {
			out = append(out, fmt.Sprintf("DOUBT: %s passes in the study, and the estimate's own check does not pass %s; factors, combinations or partial factors of the study differ from those of its design basis, or the note on loads above applies.", side.ID, strings.Join(marks, ", ")))
		}
	}
	return out
}

func (s *ArrangementStudy) feasible() int {
	n := 0
	for _, c := range s.Candidates {
		if c.Feasible {
			n++
		}
	}
	return n
}

func sentenceOf(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + strings.TrimSuffix(s[1:], ".") + "."
}
