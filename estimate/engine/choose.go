package engine

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/schedule"
	"spanwright/structural/action"
	"spanwright/structural/material"
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// rules are the design basis of a job with its combinations.
type rules struct {
	basis    resistance.Basis
	strength []action.Combination
	service  action.Combination
}

func rulesOf(s schedule.Settings) (rules, error) {
	strength, service, err := action.Sets(s.DesignBasis)
	if err != nil {
		return rules{}, err
	}
	r := rules{strength: strength, service: service}
	switch s.DesignBasis {
	case "allowable":
		r.basis, err = resistance.Allowable(s.Factor)
	case "en1993":
		r.basis, err = resistance.EN1993(resistance.Partial{})
	default:
		r.basis, err = resistance.AISC(s.DesignBasis)
	}
	return r, err
}

func (r rules) setup(g material.Grade) sizing.Setup {
	return sizing.Setup{Basis: r.basis, Grade: g, Strength: r.strength, Service: r.service, Gravity: gravity}
}

// size sizes the members of one size group, mostly one member, and writes each
// one's result or error in its place.
func (r rules) size(members []schedule.Member, group []int, out []sizedMember, errs []error) {
	prepared := make([]*sizing.Prepared, len(group))
	good := true
	for k, i := range group {
		m := members[i]
		out[i] = sizedMember{member: m}
		if m.Treatment != schedule.ByMass && errs[i] == nil {
			prepared[k], errs[i] = r.prepare(m)
		}
		good = good && errs[i] == nil
	}
	switch first := members[group[0]]; {
	case !good, first.Treatment == schedule.ByMass:
	case first.Treatment == schedule.CheckSection:
		out[group[0]].result, errs[group[0]] = checkGiven(first, prepared[0])
	default:
		r.choose(members, group, prepared, out, errs)
	}
	for k, i := range group {
		if res := out[i].result; res != nil && errs[i] == nil {
			out[i].lifts, errs[i] = r.lifts(prepared[k], members[i], res.Section)
		}
	}
}

func (r rules) prepare(m schedule.Member) (*sizing.Prepared, error) {
	grade, err := material.Find(m.Grade)
	if err != nil {
		return nil, fault(m.Mark, err.Error(), "name a grade that Spanwright knows")
	}
	if why := r.uncoveredSteel(grade); why != "" {
		return nil, fault(m.Mark, fmt.Sprintf("design basis %s does not cover %s: %s", r.basis.Name(), grade.Name, why), "choose a carbon steel, or design basis allowable")
	}
	p, err := sizing.Prepare(structuralMember(m), r.setup(grade))
	if err != nil {
		return nil, fault(m.Mark, err.Error(), "correct the supports, loads or length of this row")
	}
	return p, nil
}

// uncoveredSteel is why the basis does not go with a steel, empty where it does:
// the curves of both standards are those of carbon steel, which yields sharply.
func (r rules) uncoveredSteel(g material.Grade) string {
	stainless := strings.HasPrefix(g.Standard, "EN 10088")
	switch {
	case stainless && r.basis.Name() == "en1993":
		return "stainless steel goes by EN 1993-1-4, and this basis holds EN 1993-1-1 and 1-5"
	case stainless && r.basis.Name() != "allowable":
		return "AISC 360-22 A1 is for structural steel; stainless steel goes by AISC 370"
	}
	return ""
}

func checkGiven(m schedule.Member, p *sizing.Prepared) (*sizing.Result, error) {
	sec, err := section.Find(m.Section)
	if err != nil {
		return nil, fault(m.Mark, err.Error(), "name a section that Spanwright knows")
	}
	res, err := p.Explain(&sec)
	if err != nil {
		return nil, fault(m.Mark, err.Error(), "choose another section or grade")
	}
	return &res, nil
}

// choose takes the lightest section of the family that passes in every member of
// the group, and sets the split method beside it.
func (r rules) choose(members []schedule.Member, group []int, prepared []*sizing.Prepared, out []sizedMember, errs []error) {
	first := members[group[0]]
	fail := func(err error) {
		for _, i := range group {
			errs[i] = fault(members[i].Mark, err.Error(), "choose another family or grade")
		}
	}
	series, err := section.Series(first.Family)
	if err != nil {
		fail(err)
		return
	}
	results, err := lightest(prepared, series)
	if err != nil {
		fail(err)
		return
	}
	for k, i := range group {
		if !results[k].Passes {
			errs[i] = tied(r.nothingPasses(members[i], results[k]), members, group, i)
		}
		out[i].result = &results[k]
	}
	for _, i := range group {
		if errs[i] != nil {
			return
		}
	}
	r.shorten(group, prepared, series, out)
}

// lifts finds the supports of a member that are pulled upward, under the strength
// combinations, and under those of static equilibrium (EQU) where the basis has
// none with a permanent action below its value.
func (r rules) lifts(p *sizing.Prepared, m schedule.Member, sec section.Section) ([]lift, error) {
	if m.Upright || len(m.Supports) < 2 {
		return nil, nil
	}
	combinations := append([]action.Combination{action.EN1990Equilibrium()}, r.strength...)
	if strings.HasPrefix(r.basis.Name(), "aisc") {
		combinations = combinations[1:]
	}
	var out []lift
	for _, c := range combinations {
		reactions, err := p.Reactions(&sec, c)
		if err != nil {
			return nil, err
		}
		for i, x := range reactions {
			if out == nil {
				out = make([]lift, len(reactions))
			}
			if -x.FMin > out[i].force {
				out[i] = lift{at: x.X, force: -x.FMin, combination: c.Name}
			}
		}
	}
	return slices.DeleteFunc(out, func(l lift) bool { return l.force <= 1 }), nil
}

// lightest returns the explained choice for each member.
func lightest(prepared []*sizing.Prepared, series []section.Section) ([]sizing.Result, error) {
	if len(prepared) == 1 {
		res, err := sizing.Lightest(prepared[0], series)
		return []sizing.Result{res}, err
	}
	g, err := sizing.SameSize(prepared, series)
	return g.Members, err
}

// tied adds to the fault of one row of a size group which rows it is tied with:
// their limits bind it too.
func tied(err error, members []schedule.Member, group []int, at int) error {
	var f *memberFault
	if len(group) < 2 || !errors.As(err, &f) {
		return err
	}
	var others []string
	for _, i := range group {
		if i != at {
			others = append(others, members[i].Mark)
		}
	}
	f.Problem += "; tied by “Same size as” with " + strings.Join(others, ", ") + ", whose limits of depth and strength bind it too"
	return f
}

// nothingPasses words the answer where no size of a family passes.
func (r rules) nothingPasses(m schedule.Member, res sizing.Result) error {
	if note := refusal(res); note != "" {
		return fault(m.Mark, fmt.Sprintf("design basis %s does not cover %s here: %s", r.basis.Name(), m.Family, note), r.coveredWays(m))
	}
	ways := "choose another family or grade"
	if len(res.WaysOut) > 0 {
		ways = "ways out: " + strings.Join(res.WaysOut, "; ")
	}
	return fault(m.Mark, fmt.Sprintf("no size of %s passes; the nearest is %s at %.2f (%s)", m.Family, res.Section.Designation, res.Utilisation, res.Governing), ways)
}

// coveredWays says what may be done about a shape that the basis does not cover.
func (r rules) coveredWays(m schedule.Member) string {
	if m.Family == "L" {
		return "angles are sized as upright members alone (kind column, post or leg), because the own weight of others bends them; choose a tube, or enter the row as not sized"
	}
	return "choose another family, or another design basis"
}

// refusal is what the design basis says of a case that it does not cover.
func refusal(res sizing.Result) string {
	for _, c := range res.Checks {
		if c.ID == resistance.NotCovered {
			return c.Note
		}
	}
	return ""
}

// shorten sizes a group again with the demand of the split method, where one of
// its members is cut or simplified by it. What the method cannot cut has no
// shortcut.
func (r rules) shorten(group []int, prepared []*sizing.Prepared, series []section.Section, out []sizedMember) {
	again := make([]*sizing.Prepared, len(group))
	cut := false
	for k, i := range group {
		again[k] = prepared[k]
		if len(out[i].result.Ratios) == 0 {
			continue
		}
		p, err := r.bySplit(out[i].member)
		if err != nil {
			return
		}
		again[k], cut = p, true
	}
	if !cut {
		return
	}
	results, err := lightest(again, series)
	if err != nil {
		return
	}
	for k, i := range group {
		s := shortcut{section: results[k].Section, passes: results[k].Passes}
		if s.utilisation, s.check, err = prepared[k].Utilisation(&s.section); err != nil {
			return
		}
		out[i].split = &s
	}
}

// bySplit prepares a member for sizing with the demand of the split method.
func (r rules) bySplit(m schedule.Member) (*sizing.Prepared, error) {
	grade, err := material.Find(m.Grade)
	if err != nil {
		return nil, err
	}
	setup, member := r.setup(grade), structuralMember(m)
	if setup.Basis, err = newSplitBasis(member, setup); err != nil {
		return nil, err
	}
	return sizing.Prepare(member, setup)
}
