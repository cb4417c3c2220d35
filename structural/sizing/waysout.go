package sizing

import (
	"fmt"
	"math"
	"slices"

	"spanwright/structural/resistance"
	"spanwright/structural/section"
)

// strongest is the greatest yield strength that a way out names: S460, the
// strongest grade of EN 1993-1-1:2005 Table 3.1 (Pa).
const strongest = 460e6

// closest is the greatest number of parts into which a way out cuts the length
// between lateral restraints.
const closest = 12

// waysOut names what would help the nearest miss r of section s, with a figure
// where one is at hand. Every figure is a first estimate except the restraint
// spacing, which has been tried.
func (p *Prepared) waysOut(s *section.Section, r Result) []string {
	var ways []string
	for _, c := range r.Checks {
		if !c.Passes() {
			ways = append(ways, p.wayOut(s, c)...)
		}
	}
	ways = append(ways, p.closerRestraint(s, r)...)
	if !p.member.Upright {
		ways = append(ways, "another support, so that the longest span gets shorter")
	}
	if d := p.member.MaxDepth; d > 0 {
		ways = append(ways, fmt.Sprintf("room for more than %.4g mm of depth", d*1e3))
	}
	if b := p.member.MaxWidth; b > 0 {
		ways = append(ways, fmt.Sprintf("room for more than %.4g mm of width", b*1e3))
	}
	return unique(append(ways, "a heavier or deeper family than "+s.Family))
}

// wayOut names what would help against one failing check.
func (p *Prepared) wayOut(s *section.Section, c resistance.Check) []string {
	switch c.ID {
	case resistance.BendingZ, resistance.ShearY:
		return append(p.strongerGrade(s, c.Utilisation), "a wider section or a tube against the horizontal actions, or horizontal supports for them")
	case resistance.Vibrating:
		return []string{fmt.Sprintf("a section with a second moment Iy of at least %.0f cm⁴ at the same mass (%s has %.0f cm⁴); a stronger grade does not help",
			math.Ceil(s.Iy*c.Utilisation*c.Utilisation*1e8), s.Designation, s.Iy*1e8)}
	case resistance.WebBuckling:
		return []string{"a thicker web, or stiffeners (which this basis does not count)"}
	case resistance.NotCovered:
		return []string{"another family or design basis: " + c.Note}
	case resistance.Bending:
		return append(p.strongerGrade(s, c.Utilisation),
			fmt.Sprintf("a section with a modulus Wel of at least %.0f cm³ (%s has %.0f cm³)", math.Ceil(s.Wely*c.Utilisation*1e6), s.Designation, s.Wely*1e6))
	case resistance.Shear:
		return append(p.strongerGrade(s, c.Utilisation),
			fmt.Sprintf("a section with a shear area of at least %.1f cm² (%s has %.1f cm²)", s.Avz*c.Utilisation*1e4, s.Designation, s.Avz*1e4))
	case resistance.LateralBuckling:
		return []string{"a closed tube, which does not buckle sideways"}
	case resistance.Axial:
		if p.member.Axial <= 0 && p.member.PermanentAxial <= 0 && !p.member.Upright || p.tension(c) {
			return p.strongerGrade(s, c.Utilisation)
		}
		return []string{"supports or restraints that shorten the buckling length", "a closed tube, which has no weak axis or less of one"}
	case resistance.Interaction:
		return []string{"less axial force or less load across the member: together they use the section up"}
	case resistance.LocalBuckling:
		return []string{"a thicker wall or a grade of lower yield strength: the " + c.Note}
	case resistance.Deflecting:
		ways := []string{
			fmt.Sprintf("a section with a second moment Iy of at least %.0f cm⁴ (%s has %.0f cm⁴); a stronger grade does not help", math.Ceil(s.Iy*c.Utilisation*1e8), s.Designation, s.Iy*1e8),
		}
		if n := math.Floor(p.member.DeflectionLimit / c.Utilisation); n >= softestLimit {
			ways = append(ways, fmt.Sprintf("a deflection limit of L/%.0f instead of L/%.0f", n, p.member.DeflectionLimit))
		}
		return ways
	}
	return nil
}

// softestLimit is the n of the softest deflection limit L/n that is worth naming as
// a way out (common practice, no source).
const softestLimit = 50

// tension tells whether an axial check stands under tension in every variant.
func (p *Prepared) tension(c resistance.Check) bool {
	for i := range p.strength {
		if p.strength[i].axial >= 0 {
			return false
		}
	}
	return c.ID == resistance.Axial
}

// strongerGrade names the yield strength needed, where a usual grade has it.
func (p *Prepared) strongerGrade(s *section.Section, utilisation float64) []string {
	fy, _, err := p.suits(s.Family).grade.Strength(s.Thickness)
	if err != nil || !(fy*utilisation <= strongest) {
		return nil
	}
	return []string{fmt.Sprintf("a grade with a yield strength of at least %.0f MPa at %.1f mm (%s has %.0f MPa)",
		math.Ceil(fy*utilisation/1e6), s.Thickness*1e3, p.setup.Grade.Name, fy/1e6)}
}

// closerRestraint looks for the widest even spacing of lateral restraints at which
// the checks that they help are met, where one of those fails.
func (p *Prepared) closerRestraint(s *section.Section, r Result) []string {
	m, err := p.steel(s)
	if err != nil || !slices.ContainsFunc(r.Checks, func(c resistance.Check) bool { return helped(c) && !c.Passes() }) {
		return nil
	}
	d := &p.demand
	spacing, weak := d.LateralSpacing, d.LengthZ
	defer func() { d.LateralSpacing, d.LengthZ = spacing, weak }()
	for parts := 2; parts <= closest; parts++ {
		d.LateralSpacing = spacing / float64(parts)
		d.LengthZ = min(weak, d.LateralSpacing)
		var tried Result
		p.explain(&tried, s, m)
		checks := tried.Checks
		if slices.ContainsFunc(checks, func(c resistance.Check) bool { return helped(c) && !c.Passes() }) {
			continue
		}
		way := fmt.Sprintf("lateral restraint every %.2f m", math.Floor(d.LateralSpacing*100)/100)
		if u := tried.Utilisation; resistance.Passes(u) {
			return []string{fmt.Sprintf("%s: %s then passes at %.2f", way, s.Designation, u)}
		}
		return []string{way + ", together with what the other failing checks need"}
	}
	return nil
}

// helped tells whether closer lateral restraint helps a check.
func helped(c resistance.Check) bool {
	return c.ID == resistance.LateralBuckling || c.ID == resistance.Axial || c.ID == resistance.Interaction
}

// unique drops repeated ways, keeping the order.
func unique(ways []string) []string {
	seen := map[string]bool{}
	var kept []string
	for _, w := range ways {
		if !seen[w] {
			seen[w] = true
			kept = append(kept, w)
		}
	}
	return kept
}
