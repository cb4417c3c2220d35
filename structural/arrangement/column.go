package arrangement

import (
	"spanwright/structural/resistance"
	"spanwright/structural/section"
	"spanwright/structural/sizing"
)

// axial is one state of axial force in a bar, N, characteristic, compression +.
type axial struct{ permanent, variable float64 }

// column returns the lightest section with which the bar passes in every state, as
// explained in its worst one. Sections come lightest first.
func column(m sizing.Member, setup sizing.Setup, sections []section.Section, states ...axial) (sizing.Result, error) {
	all := make([]*sizing.Prepared, len(states))
	for i, n := range states {
		m.PermanentAxial, m.Axial = n.permanent, n.variable
		var err error
		if all[i], err = sizing.Prepare(m, setup); err != nil {
			return sizing.Result{}, err
		}
	}
	r, err := sizing.Lightest(all[0], keep(sections, all[1:]))
	if err != nil || !r.Passes {
		return r, err
	}
	for _, p := range all[1:] {
		other, err := p.Explain(&r.Section)
		if err != nil {
			return sizing.Result{}, err
		}
		if !other.Passes { // keep let everything through: nothing passes here, or not in all states
			alone, err := sizing.Lightest(p, sections)
			if err != nil || !alone.Passes {
				return alone, err
			}
			return other, nil
		}
		if other.Utilisation > r.Utilisation {
			other.LighterRejected, other.Skipped = r.LighterRejected, r.Skipped
			r = other
		}
	}
	return r, nil
}

// keep returns the sections that pass in every state, and those that can't be had,
// which sizing names; all of them if none passes.
func keep(sections []section.Section, states []*sizing.Prepared) []section.Section {
	var kept []section.Section
	passing := false
	for i := range sections {
		ok, had := true, true
		for _, p := range states {
			u, _, err := p.Utilisation(&sections[i])
			had = had && err == nil
			ok = ok && (err != nil || resistance.Passes(u))
		}
		if ok {
			kept = append(kept, sections[i])
			passing = passing || had
		}
	}
	if !passing {
		return sections
	}
	return kept
}
