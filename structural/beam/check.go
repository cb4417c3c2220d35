package beam

import (
	"fmt"
	"math"
)

// near is the part of the length within which two places are the same place.
const near = 1e-10

// finite tells whether v is a number within the range of float64.
func finite(v float64) bool { return math.Abs(v) <= math.MaxFloat64 }

// positive tells whether v is finite and above zero; NaN is not.
func positive(v float64) bool { return v > 0 && v <= math.MaxFloat64 }

// check refuses what Analyse cannot work with. The first fault is returned.
func check(b Beam, cases []Case) *Fault {
	if fault := checkLength(b); fault != nil {
		return fault
	}
	if fault := checkSegments(b); fault != nil {
		return fault
	}
	if fault := checkSupports(b); fault != nil {
		return fault
	}
	if fault := checkHinges(b); fault != nil {
		return fault
	}
	for c, loads := range cases {
		for i := range loads {
			if fault := checkLoad(b, &loads[i]); fault != nil {
				fault.Part = fmt.Sprintf("case %d load %d", c+1, i+1)
				return fault
			}
		}
	}
	return nil
}

func checkLength(b Beam) *Fault {
	if !positive(b.Length) {
		return &Fault{FaultLength, "member", 0, num(b.Length) + " m", "a length above 0 m"}
	}
	return nil
}

func checkSegments(b Beam) *Fault {
	from := 0.0
	for i, s := range b.Segments {
		if !positive(s.EI) {
			return &Fault{FaultStiffness, ordinal("segment", i), from, "EI = " + num(s.EI) + " N.m²", "an EI above 0 N.m²"}
		}
		if !(from+near*b.Length < s.To && s.To <= b.Length*(1+near)) {
			return &Fault{FaultSegment, ordinal("segment", i), from, "an end at " + num(s.To) + " m",
				"an end beyond " + num(from) + " m, at " + num(b.Length) + " m at the most"}
		}
		from = s.To
	}
	if !(math.Abs(from-b.Length) <= near*b.Length) {
		return &Fault{FaultSegment, "last segment", from, "an end at " + num(from) + " m", "an end at " + num(b.Length) + " m"}
	}
	return nil
}

func checkSupports(b Beam) *Fault {
	if len(b.Supports) == 0 {
		return &Fault{FaultNoSupport, "member", 0, "no support", "one fixed support, or two"}
	}
	for i, s := range b.Supports {
		if !within(b, s.X) {
			return outside(b, ordinal("support", i), s.X)
		}
		for _, o := range b.Supports[:i] {
			if math.Abs(o.X-s.X) <= near*b.Length {
				return &Fault{FaultTwice, ordinal("support", i), s.X, "another support at the same place", "one support at a place"}
			}
		}
		if fault := checkSupport(s); fault != nil {
			fault.Part = ordinal("support", i)
			return fault
		}
	}
	return nil
}

// checkSupport leaves the part to its caller.
func checkSupport(s Support) *Fault {
	stiff := func() string { return "stiffness " + num(s.Stiffness) + " N/m" }
	turn := func() string { return "rotational stiffness " + num(s.RotationalStiffness) + " N.m/rad" }
	switch {
	case !(s.Kind >= Pinned && s.Kind <= Guided):
		return &Fault{FaultSupport, "", s.X, fmt.Sprintf("kind %d", s.Kind), "Pinned, Fixed, Spring or Guided"}
	case s.Kind == Spring && !positive(s.Stiffness):
		return &Fault{FaultStiffness, "", s.X, stiff(), "a spring stiffness above 0 N/m"}
	case s.Kind != Spring && s.Stiffness != 0:
		return &Fault{FaultStiffness, "", s.X, stiff() + " on a " + s.Kind.String() + " support", "0, or kind Spring"}
	case s.RotationalStiffness != 0 && !positive(s.RotationalStiffness):
		return &Fault{FaultStiffness, "", s.X, turn(), "0 N.m/rad or more"}
	case (s.Kind == Fixed || s.Kind == Guided) && s.RotationalStiffness != 0:
		return &Fault{FaultStiffness, "", s.X, turn() + " on a " + s.Kind.String() + " support", "0, or kind Pinned"}
	case s.Kind == Guided && s.Settlement != 0:
		return &Fault{FaultSupport, "", s.X, "settlement " + num(s.Settlement) + " m on a guided support", "0: it does not hold the deflection"}
	case !finite(s.Settlement):
		return &Fault{FaultSupport, "", s.X, "settlement " + num(s.Settlement) + " m", "a finite settlement, down +"}
	}
	return nil
}

func checkHinges(b Beam) *Fault {
	for i, x := range b.Hinges {
		if !(x > near*b.Length && x < b.Length*(1-near)) {
			return &Fault{FaultOutside, ordinal("hinge", i), x, num(x) + " m", "a place inside the member, between 0 and " + num(b.Length) + " m"}
		}
		for _, o := range b.Hinges[:i] {
			if math.Abs(o-x) <= near*b.Length {
				return &Fault{FaultTwice, ordinal("hinge", i), x, "another hinge at the same place", "one hinge at a place"}
			}
		}
		for _, s := range b.Supports {
			if s.holdsRotation() && math.Abs(s.X-x) <= near*b.Length {
				return &Fault{FaultHinge, ordinal("hinge", i), x, "a support that holds the rotation", "a hinge beside it, or at a pinned support"}
			}
		}
	}
	return nil
}

// checkLoad leaves the part to its caller.
func checkLoad(b Beam, l *Load) *Fault {
	if !(l.Kind >= Uniform && l.Kind <= Curvature) {
		return &Fault{FaultLoad, "", l.From, fmt.Sprintf("kind %d", l.Kind), "Uniform, Linear, Point, Moment or Curvature"}
	}
	if !finite(l.Start) || !finite(l.End) {
		return &Fault{FaultLoad, "", l.From, num(l.Start) + ", " + num(l.End), "finite values"}
	}
	if !within(b, l.From) {
		return outside(b, "", l.From)
	}
	if l.Kind.distributed() {
		return checkExtent(b, l)
	}
	for _, h := range b.Hinges {
		if l.Kind == Moment && math.Abs(h-l.From) <= near*b.Length {
			return &Fault{FaultHinge, "", l.From, "a moment at a hinge", "a moment on one side of it"}
		}
	}
	return nil
}

func checkExtent(b Beam, l *Load) *Fault {
	if !within(b, l.To) {
		return outside(b, "", l.To)
	}
	if !(l.To-l.From > near*b.Length) {
		return &Fault{FaultLoad, "", l.From, "an end at " + num(l.To) + " m", "an end beyond the start at " + num(l.From) + " m"}
	}
	if l.Kind == Uniform && l.End != 0 && l.End != l.Start {
		return &Fault{FaultLoad, "", l.From, num(l.Start) + " and " + num(l.End) + " N/m", "one value, or kind Linear"}
	}
	return nil
}

func ordinal(what string, i int) string { return fmt.Sprintf("%s %d", what, i+1) }

func within(b Beam, x float64) bool { return x >= -near*b.Length && x <= b.Length*(1+near) }

func outside(b Beam, part string, x float64) *Fault {
	return &Fault{FaultOutside, part, x, num(x) + " m", "0 to " + num(b.Length) + " m"}
}
