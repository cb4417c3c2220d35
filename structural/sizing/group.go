package sizing

import (
	"errors"
	"fmt"

	"spanwright/structural/section"
)

// Group is one section for several members.
type Group struct {
	Members   []Result // one for each member, all with the same section
	Passes    bool     // in every member
	Governing int      // index of the member with the highest utilisation
}

// SameSize returns the lightest candidate that passes every check in every member;
// equal masses are broken by designation. The order of candidates is free; a
// candidate that one of the members cannot have is left out for all.
//
// When nothing passes, the candidate with the smallest highest utilisation stands in
// the result, Passes is false and the governing member names its ways out. Rejected
// candidates of each member are those just lighter that fail in that member. Errors
// as Lightest, and for no members.
func SameSize(members []*Prepared, candidates []section.Section) (Group, error) {
	if len(members) == 0 {
		return Group{}, errors.New("sizing: no members for one size; accepted is at least one")
	}
	if err := checkMasses(candidates); err != nil {
		return Group{}, err
	}
	for _, p := range members {
		p.start(p.lightestOf(candidates))
	}
	chosen := -1
	for i := range candidates {
		if (chosen < 0 || better(&candidates[i], &candidates[chosen], massOf)) && allPass(members, &candidates[i]) {
			chosen = i
		}
	}
	g := Group{Passes: chosen >= 0}
	if !g.Passes {
		var err error
		if chosen, err = nearestForAll(members, candidates); err != nil {
			return Group{}, err
		}
	}
	for i, p := range members {
		r, err := p.Explain(&candidates[chosen])
		if err != nil {
			return Group{}, fmt.Errorf("member %d: %w", i+1, err)
		}
		p.reject(&r, candidates, chosen, massOf)
		g.Members = append(g.Members, r)
		if r.Utilisation > g.Members[g.Governing].Utilisation {
			g.Governing = i
		}
	}
	if !g.Passes {
		r := &g.Members[g.Governing]
		r.WaysOut = members[g.Governing].waysOut(&candidates[chosen], *r)
	}
	return g, nil
}

func massOf(s *section.Section) float64 { return s.Mass }

func allPass(members []*Prepared, s *section.Section) bool {
	for _, p := range members {
		if !p.passes(s) {
			return false
		}
	}
	return true
}

// nearestForAll returns the candidate whose highest utilisation over the members is
// smallest, the lighter of equals.
func nearestForAll(members []*Prepared, candidates []section.Section) (int, error) {
	nearest, least := -1, 0.0
	var why error
next:
	for i := range candidates {
		worst := 0.0
		for _, p := range members {
			u, _, err := p.Utilisation(&candidates[i])
			if err != nil {
				why = err
				continue next
			}
			worst = max(worst, u)
		}
		if nearest < 0 || worst < least || worst == least && better(&candidates[i], &candidates[nearest], massOf) {
			nearest, least = i, worst
		}
	}
	if nearest < 0 {
		return 0, fmt.Errorf("sizing: none of the %d candidates can be had for all %d members, the last because: %w", len(candidates), len(members), why)
	}
	return nearest, nil
}
