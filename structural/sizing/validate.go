package sizing

import (
	"errors"
	"fmt"
	"math"

	"spanwright/structural/beam"
)

// Validate refuses a member with a length, factor or limit out of range, with
// supports that sizing does not cover, or with an action off the member. Every
// fault is reported, each with what was found and what would be accepted. Where the
// supports stand is left to the beam analysis.
func (m Member) Validate() error {
	if !(m.Length > 0 && m.Length <= math.MaxFloat64) {
		return fmt.Errorf("member: length %v m; accepted is a length above 0", m.Length)
	}
	var faults []error
	if !(math.Abs(m.Axial) <= math.MaxFloat64 && math.Abs(m.PermanentAxial) <= math.MaxFloat64) {
		faults = append(faults, fmt.Errorf("member: axial load %v N, permanent %v N; accepted are finite numbers", m.Axial, m.PermanentAxial))
	}
	for _, q := range [...]struct {
		name  string
		value float64
		most  float64
		unset string
	}{
		{"restraint spacing (m)", m.RestraintSpacing, math.MaxFloat64, "the longest span"},
		{"effective length factor", m.LengthFactor, math.MaxFloat64, "1, and 2 for overhangs"},
		{"moment factor C1 or Cb", m.MomentFactor, 10, "1"},
		{"net area factor", m.NetAreaFactor, 1, "1"},
		{"deflection limit n of span/n", m.DeflectionLimit, math.MaxFloat64, "no limit"},
		{"frequency floor (Hz)", m.FrequencyFloor, math.MaxFloat64, "no check"},
		{"share of the variable actions' mass", m.MassShare, 1, "none"},
		{"greatest depth (m)", m.MaxDepth, math.MaxFloat64, "any"},
		{"greatest width (m)", m.MaxWidth, math.MaxFloat64, "any"},
		{"stock length (m)", m.StockLength, math.MaxFloat64, "any"},
	} {
		if !(q.value >= 0 && q.value <= q.most) {
			faults = append(faults, fmt.Errorf("member: %s is %v; accepted is a number above 0%s, or 0 for %s", q.name, q.value, upTo(q.most), q.unset))
		}
	}
	faults = append(faults, m.validateSupports()...)
	for i, a := range m.Actions {
		if err := a.Validate(m.Length); err != nil {
			faults = append(faults, fmt.Errorf("member: action %d: %w", i+1, err))
		}
	}
	return errors.Join(faults...)
}

func upTo(most float64) string {
	if most == math.MaxFloat64 {
		return ""
	}
	return fmt.Sprintf(" and up to %v", most)
}

// validateSupports keeps to supports whose moments do not depend on the member's
// stiffness, because the member is analysed once for all sections.
func (m Member) validateSupports() []error {
	var faults []error
	if len(m.Supports) == 0 && !(m.Upright && len(m.Actions) == 0) {
		faults = append(faults, errors.New("member: no supports; accepted are supports that hold it, or none for an upright member without actions across it"))
	}
	for i, s := range m.Supports {
		if s.Kind != beam.Pinned && s.Kind != beam.Fixed || s.Settlement != 0 || s.RotationalStiffness != 0 {
			faults = append(faults, fmt.Errorf("member: support %d at %v m is %v with settlement %v m and rotational stiffness %v N·m/rad; accepted for sizing is pinned or fixed, without either",
				i+1, s.X, s.Kind, s.Settlement, s.RotationalStiffness))
		}
	}
	return faults
}

// Validate refuses a setup without design basis, strength bands or combinations,
// with factors out of range, or without gravity: self-weight is always counted.
func (s Setup) Validate() error {
	if s.Basis == nil {
		return errors.New("setup: no design basis")
	}
	if len(s.Grade.Bands) == 0 || !(s.Grade.E > 0 && s.Grade.E <= math.MaxFloat64) || !(s.Grade.G > 0 && s.Grade.G <= math.MaxFloat64) {
		return fmt.Errorf("setup: grade %q has %d strength bands, E = %v Pa, G = %v Pa; accepted is a grade with all of them",
			s.Grade.Name, len(s.Grade.Bands), s.Grade.E, s.Grade.G)
	}
	if len(s.Strength) == 0 {
		return errors.New("setup: no combination for strength; accepted are those of action.Sets, or the user's own")
	}
	for _, c := range s.Strength {
		if err := c.Validate(); err != nil {
			return fmt.Errorf("setup: strength: %w", err)
		}
	}
	if err := s.Service.Validate(); err != nil {
		return fmt.Errorf("setup: service: %w", err)
	}
	if !(s.Gravity > 0 && s.Gravity <= math.MaxFloat64) {
		return fmt.Errorf("setup: gravity %v m/s²; accepted is a value above 0, standard 9.80665", s.Gravity)
	}
	return nil
}
