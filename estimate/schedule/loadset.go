package schedule

import (
	"fmt"
	"slices"
	"strings"

	"spanwright/estimate/assumption"
	"spanwright/estimate/sheet"
	"spanwright/structural/action"
	"spanwright/structural/unit"
)

// loadSet is one ready set of loads with what the cell says beside its name.
type loadSet struct {
	use  action.Use
	site action.Site
}

const loadSetExample = "a load set such as walkway, conveyor belt 1 m density 900 kg/m³, or wind height 12 m face 0.5 m"

func useNames() []string {
	var names []string
	for _, u := range action.Uses() {
		names = append(names, string(u))
	}
	return names
}

func loadSetWords() string {
	return strings.Join(useNames(), ", ") + `; two are parted by ";"; a conveyor states its belt and density, wind its height, face and, for tubes, round`
}

// measure is one thing that a cell may state of a set.
type measure struct {
	word      string
	dimension unit.Dimension
	into      func(*action.Site) *float64
	use       action.Use
}

// measures are what a cell may state of a set, by the word that leads it.
var measures = []measure{
	{"belt", unit.Length, func(s *action.Site) *float64 { return &s.Belt }, action.Conveyor},
	{"density", unit.Number, func(s *action.Site) *float64 { return &s.Density }, action.Conveyor},
	{"height", unit.Length, func(s *action.Site) *float64 { return &s.Height }, action.Wind},
	{"face", unit.Length, func(s *action.Site) *float64 { return &s.Face }, action.Wind},
}

// loadSets reads Load set: "walkway", "conveyor belt 1 m density 900 kg/m³; snow".
func (r *row) loadSets(f *fields) []loadSet {
	if f.loadSet.state != given {
		return nil
	}
	var sets []loadSet
	for part := range strings.SplitSeq(f.loadSet.value, ";") {
		set, wrong := r.loadSet(part)
		if wrong == nil && slices.ContainsFunc(sets, func(o loadSet) bool { return o.use == set.use }) {
			wrong = &complaint{shorten(f.loadSet.value), "names " + string(set.use) + " twice", "each set once"}
		}
		if wrong != nil {
			r.setFaulty = true
			r.judge(colLoadSet, wrong)
			return nil
		}
		sets = append(sets, set)
	}
	return sets
}

// loadSet reads one set: its name, then words each followed by a value.
func (r *row) loadSet(part string) (loadSet, *complaint) {
	words := strings.Fields(part)
	lead := func(w string) int {
		return slices.IndexFunc(measures, func(m measure) bool { return strings.EqualFold(m.word, w) })
	}
	end := len(words)
	for i, w := range words {
		if lead(w) >= 0 || strings.EqualFold(w, "round") {
			end = i
			break
		}
	}
	name := strings.Join(words[:end], " ")
	use, err := action.ParseUse(name)
	if err != nil {
		return loadSet{}, &complaint{shorten(part), "names no load set", didYouMean(near(name, useNames()), "one of "+strings.Join(useNames(), ", "))}
	}
	set := loadSet{use: use}
	for words = words[end:]; len(words) > 0; {
		if strings.EqualFold(words[0], "round") && use == action.Wind {
			set.site.Round, words = true, words[1:]
			continue
		}
		i, n := lead(words[0]), 1
		if i < 0 || measures[i].use != use {
			return set, &complaint{shorten(part), fmt.Sprintf("%s does not ask for %q", use, words[0]), loadSetExample}
		}
		for n < len(words) && lead(words[n]) < 0 && !strings.EqualFold(words[n], "round") {
			n++
		}
		v, wrong := r.measure(strings.Join(words[1:n], " "), measures[i].dimension, part)
		if wrong != nil {
			return set, wrong
		}
		*measures[i].into(&set.site), words = v, words[n:]
	}
	return set, nil
}

// measure reads a length, or a density in kg/m³ or lb/ft³.
func (r *row) measure(text string, d unit.Dimension, part string) (float64, *complaint) {
	factor := 1.0
	if d == unit.Number {
		for suffix, f := range map[string]float64{"kg/m³": 1, "kg/m3": 1, "lb/ft³": poundPerFoot, "lb/ft3": poundPerFoot, "pcf": poundPerFoot} {
			if rest, ok := strings.CutSuffix(text, suffix); ok {
				text, factor = strings.TrimSpace(rest), f
			}
		}
	}
	n, wrong := readQuantity(sheet.Cell{Column: 1, Kind: sheet.Text, Text: text}, r.comma, d, r.layout.units[colLength], loadSetExample)
	switch {
	case wrong != nil:
		return 0, wrong
	case n.state == blank:
		return 0, &complaint{shorten(part), "leaves a value out", loadSetExample}
	}
	return unit.Round(n.value*factor, unit.Digits), nil
}

// poundPerFoot is 1 lb/ft³ in kg/m³: 0.45359237/0.3048³ (NIST SP 811, appendix B).
const poundPerFoot = 0.45359237 / (0.3048 * 0.3048 * 0.3048)

// ready fills the load cells that are blank from the row's load sets and returns
// the loads. A set fills the permanent cell with its permanent actions, the
// variable cell with its vertical variable ones where no area load stands there,
// and the horizontal cell with wind.
func (r *row) ready(m *Member, f *fields, d *taken) []Load {
	sets := r.loadSets(f)
	if len(sets) == 0 {
		return nil
	}
	free := map[string]bool{
		permanentLoad:  f.permanent.state == blank,
		variableLoad:   f.variable.state == blank && f.areaLoad.state == blank,
		horizontalLoad: f.horizontal.state == blank,
	}
	var loads []Load
	for _, set := range sets {
		actions, ok := r.actions(set, f)
		if !ok {
			r.setFaulty = true
			return loads
		}
		for _, a := range actions {
			l, cell := readyLoad(a.Action)
			if !free[cell] {
				continue
			}
			loads = append(loads, l)
			d.take(readyField+l.Label, r.defaults.load(set, l, a.Source))
			switch cell {
			case permanentLoad:
				f.permanent.state = given
			case variableLoad:
				f.variable.state = given
			case horizontalLoad:
				f.horizontal.state = given
			}
		}
	}
	m.LoadSet = f.loadSet.value
	if len(loads) == 0 {
		r.fault(colLoadSet, f.loadSet.value, "fills nothing: the load cells that it is for hold values", "clear the cells that it shall fill, or leave it blank")
	}
	return loads
}

// actions asks for the actions of a set; what it lacks is reported where it would
// stand.
func (r *row) actions(set loadSet, f *fields) ([]action.Sourced, bool) {
	at, s := set.site, r.job.Settings
	at.Width, at.WindSpeed, at.Terrain, at.GroundSnow = f.width.value, s.WindSpeed, s.Terrain, s.GroundSnow
	if strings.HasPrefix(s.DesignBasis, "aisc") {
		at.Code = action.ASCE
	}
	byWidth := set.use != action.Conveyor && set.use != action.Wind
	switch {
	case byWidth && f.width.state == bad, r.lostSite(set.use):
		return nil, false
	case byWidth && f.width.state == blank:
		r.missing(colWidth, "the load set "+string(set.use)+" needs the tributary width", "enter it, or clear Load set")
		return nil, false
	}
	if lack := lacking(set.use, at); lack != "" {
		if !r.siteLacks[lack] {
			r.siteLacks[lack] = true
			r.fault(colLoadSet, f.loadSet.value, "needs "+lack, "add it to the Job sheet, or clear Load set")
		}
		return nil, false
	}
	list, err := action.Ready(set.use, at)
	if err != nil {
		r.fault(colLoadSet, f.loadSet.value, "is not complete: "+err.Error(), loadSetExample)
		return nil, false
	}
	return list, true
}

// lacking names what the Job sheet does not say of the site; it is reported once.
func lacking(u action.Use, at action.Site) string {
	exposures, words := terrains[:5], "Terrain of EN 1991-1-4"
	if at.Code == action.ASCE {
		exposures, words = terrains[5:], "Terrain as an exposure of ASCE 7"
	}
	switch {
	case u == action.Wind && at.WindSpeed == 0:
		return jobKeys[jobWindSpeed].Header
	case u == action.Wind && !slices.Contains(exposures, at.Terrain):
		return words + ", one of " + strings.Join(exposures, ", ")
	case u == action.Snow && at.GroundSnow == 0:
		return jobKeys[jobGroundSnow].Header
	}
	return ""
}

// lostSite tells whether a setting that the use needs has its fault reported.
func (r *row) lostSite(u action.Use) bool {
	switch u {
	case action.Wind:
		return r.job.lost(jobWindSpeed) || r.job.lost(jobTerrain)
	case action.Snow:
		return r.job.lost(jobGroundSnow)
	}
	return false
}

// readyLoad turns an action of a set into a load and names the cell that it fills.
func readyLoad(a action.Action) (Load, string) {
	l := Load{Nature: "variable", Kind: "uniform", Value: unit.Round(a.Value, unit.Digits), Free: a.Free, Label: a.Label}
	switch {
	case a.Direction == action.Horizontal:
		l.Sideways = true
		return l, horizontalLoad
	case a.Nature == action.Permanent:
		l.Nature = "permanent"
		return l, permanentLoad
	}
	return l, variableLoad
}

// load enters a ready load with the source of its value.
func (d *defaults) load(set loadSet, l Load, source string) string {
	value := fixedText(l.Value / 1000)
	where := ""
	switch set.use {
	case action.Conveyor:
		where = fmt.Sprintf(", for a belt of %s and %s kg/m³", metres(set.site.Belt), fixedText(set.site.Density))
	case action.Wind:
		where = fmt.Sprintf(", at %s on a face of %s", metres(set.site.Height), metres(set.site.Face))
	}
	return d.enter(assumption.Entry{
		ID: "default/load/" + assumption.Segment(l.Label) + "/" + assumption.Segment(value), Kind: assumption.Default,
		Statement: "Blank load cells of rows with the load set " + string(set.use) + " take the load “" + l.Label + "”" + where + ".",
		Value:     value, Unit: "kN/m", Source: source, Owner: "Spanwright", Confidence: assumption.Low,
	})
}
