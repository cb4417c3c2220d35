package schedule

import (
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// dynamics are the dynamic factors of a row by the label of the load that each
// is for.
type dynamics struct {
	state   state
	byLabel map[string]float64
	bare    float64 // without a name; 0 where there is none
}

// Labels of the loads, as explanations and the register use them.
const (
	permanentLoad  = "permanent load"
	variableLoad   = "variable load"
	areaLoad       = "area load"
	pointLoad      = "point load"
	horizontalLoad = "horizontal load"
	movingLoad     = "moving load"
)

// struck are the loads that may have a dynamic factor: the variable ones.
var struck = []string{variableLoad, areaLoad, pointLoad, horizontalLoad, movingLoad}

const dynamicExample = `a factor such as 1.25, or "1.3 point; 1.2 variable"`

// dynamics reads Dynamic factor: "1.25", "1.3 point; 1.2 variable".
func (r *row) dynamics() dynamics {
	c := r.cells[colDynamic]
	if r.layout.lost[colDynamic] {
		return dynamics{state: bad}
	}
	if c.Kind != sheet.Text && c.Kind != sheet.Number {
		n := r.quantity(colDynamic, unit.Number, dynamic)
		return dynamics{state: n.state}
	}
	if strings.TrimSpace(c.Text) == "" {
		return dynamics{}
	}
	d := dynamics{state: given, byLabel: map[string]float64{}}
	for part := range strings.SplitSeq(c.Text, ";") {
		if wrong := r.oneDynamic(&d, c, part); wrong != nil {
			r.judge(colDynamic, wrong)
			return dynamics{state: bad}
		}
	}
	return d
}

func (r *row) oneDynamic(d *dynamics, c sheet.Cell, part string) *complaint {
	whole := shorten(c.Text)
	figure, name, _ := strings.Cut(strings.TrimSpace(part), " ")
	c.Text = figure
	n, wrong := readQuantity(c, r.comma, unit.Number, unit.Unit{}, dynamicExample)
	switch {
	case wrong != nil:
		return wrong
	case n.state == blank:
		return &complaint{whole, "has an empty place", dynamicExample}
	case !dynamic.holds(n.value):
		return &complaint{whole, "is out of bounds: " + figure, dynamic.words}
	case name == "" && d.bare != 0:
		return &complaint{whole, "has two factors without a name", dynamicExample}
	case name == "":
		d.bare = n.value
		return nil
	}
	label := ""
	key := strings.TrimSuffix(strings.TrimPrefix(fold(name), "on"), "load")
	for _, l := range struck {
		if key == strings.TrimSuffix(fold(l), "load") {
			label = l
		}
	}
	switch {
	case label == "":
		return &complaint{whole, "names no load that may have a dynamic factor: " + shorten(name), "one of variable, area, point, horizontal, moving"}
	case d.byLabel[label] != 0:
		return &complaint{whole, "names the " + label + " twice", dynamicExample}
	}
	d.byLabel[label] = n.value
	return nil
}

// strike lays the dynamic factors on the loads of a row. A factor for a load that
// the row does not have is a fault.
func (r *row) strike(loads []Load, f *fields) {
	d := f.dynamic
	if d.state != given {
		return
	}
	for i := range loads {
		l := &loads[i]
		kind := l.struckAs()
		factor := d.byLabel[kind]
		if factor == 0 && (kind == movingLoad || kind == pointLoad) {
			factor = d.bare
		}
		if factor != 1 {
			l.Dynamic = factor
		}
	}
	stands := map[string]bool{
		variableLoad: f.variable.state != blank, areaLoad: f.areaLoad.state != blank || f.width.state != blank,
		pointLoad:      f.point.state != blank || f.pointAt.state != blank,
		horizontalLoad: f.horizontal.state != blank, movingLoad: f.movingState != blank,
	}
	if r.setFaulty {
		return // the set may have held the load
	}
	found := r.cells[colDynamic].Text
	if d.bare != 0 && !stands[movingLoad] && !stands[pointLoad] {
		r.fault(colDynamic, found, "stands on no load: the row has no moving load and no point load", `name the load, such as "1.3 variable", or leave it blank`)
	}
	for _, label := range struck {
		if d.byLabel[label] != 0 && !stands[label] {
			r.fault(colDynamic, found, "is for a "+label+", and the row has none", "enter the load, or leave the factor out")
		}
	}
}

// struckAs is the name under which a dynamic factor finds the load.
func (l Load) struckAs() string {
	switch {
	case l.Nature == "permanent":
		return permanentLoad
	case l.Kind == "train":
		return movingLoad
	case l.Kind == "point":
		return pointLoad
	case l.Sideways:
		return horizontalLoad
	case l.Label == areaLoad:
		return areaLoad
	}
	return variableLoad
}
