package calculator

import (
	"fmt"

	"spanwright/structural/beam"
)

// BeamSupport holds a member at one place.
type BeamSupport struct {
	Position            float64 `json:"position_m" doc:"from the left end"`
	Kind                string  `json:"kind" enum:"pinned,fixed,spring,guided" doc:"guided holds the rotation alone"`
	Stiffness           float64 `json:"stiffness_kn_m,omitempty" doc:"of a spring"`
	RotationalStiffness float64 `json:"rotational_stiffness_knm_rad,omitempty" doc:"of a pinned or spring support that resists turning"`
	Settlement          float64 `json:"settlement_mm,omitempty" doc:"down positive; counted with the factor 1 wherever it makes an effect worse"`
}

var supportKinds = map[string]beam.SupportKind{
	"pinned": beam.Pinned, "fixed": beam.Fixed, "spring": beam.Spring, "guided": beam.Guided,
}

// supports reads supports and refuses what no member of the length can have.
func supports(list []BeamSupport, length float64, f *Faults) []beam.Support {
	if !f.few("/supports", len(list), MaxSpans+1, "supports") {
		return nil
	}
	var out []beam.Support
	for i, s := range list {
		at := item("/supports", i)
		f.within(at+"/position_m", s.Position, 0, length, "m")
		f.signed(at+"/settlement_mm", s.Settlement, 1e6, "mm")
		if !f.oneOf(at+"/kind", s.Kind, "pinned", "fixed", "spring", "guided") {
			continue
		}
		s.stiffnesses(at, f)
		if s.Kind == "guided" && s.Settlement != 0 {
			f.add(at+"/settlement_mm", number(s.Settlement)+" mm", "a guided support does not hold the deflection", "0")
		}
		out = append(out, beam.Support{X: s.Position, Kind: supportKinds[s.Kind], Stiffness: s.Stiffness * 1e3,
			RotationalStiffness: s.RotationalStiffness * 1e3, Settlement: s.Settlement / 1e3})
	}
	return out
}

func (s BeamSupport) stiffnesses(at string, f *Faults) {
	switch {
	case s.Kind == "spring":
		f.within(at+"/stiffness_kn_m", s.Stiffness, minStiffness, maxStiffness, "kN/m")
	case s.Stiffness != 0:
		f.add(at+"/stiffness_kn_m", number(s.Stiffness)+" kN/m", fmt.Sprintf("a %s support has no stiffness", s.Kind), "0, or the kind spring")
	}
	switch {
	case s.RotationalStiffness == 0:
	case s.Kind == "fixed" || s.Kind == "guided":
		f.add(at+"/rotational_stiffness_knm_rad", number(s.RotationalStiffness)+" kNm/rad",
			fmt.Sprintf("a %s support holds the rotation already", s.Kind), "0, or the kind pinned")
	default:
		f.within(at+"/rotational_stiffness_knm_rad", s.RotationalStiffness, minStiffness, maxStiffness, "kNm/rad")
	}
}
