package engine

import (
	"spanwright/estimate/document"
	"spanwright/estimate/schedule"
)

// inputsOf are the numbers that a row states, in the units in which they are shown:
// the leaves of a trace.
func inputsOf(m schedule.Member) []document.Measure {
	var out []document.Measure
	add := func(name string, value, scale float64, unit string) {
		if value != 0 {
			out = append(out, document.Measure{Symbol: name, Value: document.Number(value / scale), Unit: unit})
		}
	}
	add("length", m.Length, 1, "m")
	add("quantity", float64(m.Quantity), 1, "pcs")
	for _, l := range m.Loads {
		name := l.Label
		if l.Dynamic > 1 {
			add("dynamic factor on "+name, l.Dynamic, 1, "")
		}
		switch l.Kind {
		case "point":
			add(name, l.Value, 1000, "kN")
			add("position of "+name, l.Position, 1, "m")
		case "train":
			for _, w := range l.Wheels {
				add("wheel of "+name, w, 1000, "kN")
			}
		default:
			add(name, l.Value, 1000, "kN/m")
		}
	}
	add("axial load", m.Axial, 1000, "kN")
	add("restraint spacing", m.Restraint, 1, "m")
	add("effective length factor", m.LengthFactor, 1, "")
	add("deflection limit", m.DeflectionLimit, 1, "")
	add("frequency floor", m.FrequencyFloor, 1, "Hz")
	add("moment factor", m.MomentFactor, 1, "")
	add("net area factor", m.NetAreaFactor, 1, "")
	add("mass if not sized", m.LineMass, 1, "kg/m")
	add("mass if not sized", m.AreaMass, 1, "kg/m²")
	add("area", m.Area, 1, "m²")
	add("concrete", m.Concrete, 1, "m³")
	for _, j := range m.Joints {
		add("joints, "+j.Kind, float64(j.Count), 1, "pcs")
	}
	return out
}
