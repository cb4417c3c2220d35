package schedule

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// Joint counts the joints of one kind that belong to one piece.
type Joint struct {
	Kind  string `json:"kind" enum:"moment,pinned,flanged tube,site splice"`
	Count int    `json:"count"`
}

// The kinds of counted joints, as they stand in Joint.Kind.
const (
	JointMoment      = "moment"       // carries a moment: end plate, haunch, welded
	JointPinned      = "pinned"       // carries no moment: fin plate, cleats, bearing
	JointFlangedTube = "flanged tube" // ring flanges between tubes
	JointSiteSplice  = "site splice"  // joins two parts of a piece on site
)

// JointKinds returns the kinds of counted joints.
func JointKinds() []string {
	return []string{JointMoment, JointPinned, JointFlangedTube, JointSiteSplice}
}

const jointExample = `"2 moment; 4 pinned"`

// mostJoints is the number of joints of one kind that a piece may have: more is a
// slip of the pen.
const mostJoints = 10_000

// joints reads Joints, "2 moment; 4 pinned", or its JSON list, sorted by kind.
// Every fault of the cell is reported.
func (r *row) joints() ([]Joint, state) {
	c := r.cells[colJoints]
	if r.layout.lost[colJoints] {
		return nil, bad
	}
	var parts []jointText
	var wrong *complaint
	switch c.Kind {
	case nestedKind:
		parts, wrong = jointList(c.Text)
	default:
		var t text
		if t, wrong = readText(c, longestText, jointExample); wrong == nil {
			parts = jointParts(t.value)
		}
	}
	if wrong != nil {
		r.judge(colJoints, wrong)
		return nil, bad
	}
	var list []Joint
	before := len(r.faults)
	for _, p := range parts {
		j, wrong := p.read(r.comma && c.Kind == sheet.Text)
		if wrong == nil && slices.ContainsFunc(list, func(k Joint) bool { return k.Kind == j.Kind }) {
			wrong = &complaint{shorten(p.whole()), "is a second count of " + j.Kind, "one count of each kind"}
		}
		if wrong != nil {
			r.judge(colJoints, wrong)
			continue
		}
		list = append(list, j)
	}
	switch {
	case len(r.faults) > before:
		return nil, bad
	case len(list) == 0:
		return nil, blank
	}
	slices.SortFunc(list, func(a, b Joint) int { return strings.Compare(a.Kind, b.Kind) })
	return list, given
}

// jointText is one joint as written.
type jointText struct{ count, kind string }

func (p jointText) whole() string { return strings.TrimSpace(p.count + " " + p.kind) }

// jointParts parts "2 moment; 4 pinned". Empty parts are left out.
func jointParts(text string) []jointText {
	var parts []jointText
	for part := range strings.SplitSeq(text, ";") {
		if part = strings.TrimSpace(part); part == "" {
			continue
		}
		var p jointText
		if i := strings.IndexFunc(part, notFigure); i >= 0 {
			p = jointText{part[:i], strings.TrimSpace(part[i:])}
		} else {
			p = jointText{count: part}
		}
		parts = append(parts, p)
	}
	return parts
}

func notFigure(r rune) bool { return !strings.ContainsRune("+-.,0123456789", r) }

func (p jointText) read(comma bool) (Joint, *complaint) {
	const wants = "does not begin with a whole number from 1 to 10,000"
	remedy := "the number of joints of a piece before each kind: " + jointExample
	if p.count == "" {
		return Joint{}, &complaint{shorten(p.whole()), wants, remedy}
	}
	kind, wrong := jointKind(p)
	if wrong != nil {
		return Joint{}, wrong
	}
	c := sheet.Cell{Kind: sheet.Text, Text: p.count}
	n, wrong := readQuantity(c, comma, unit.Number, unit.Unit{}, jointExample)
	if wrong != nil || n.state == blank || !(n.value >= 1 && n.value <= mostJoints) || n.value != float64(int(n.value)) {
		return Joint{}, &complaint{shorten(p.whole()), wants, remedy}
	}
	return Joint{kind, int(n.value)}, nil
}

func jointKind(p jointText) (string, *complaint) {
	kinds := JointKinds()
	if p.kind == "" {
		return "", &complaint{shorten(p.whole()), "names no kind of joint", "the number and its kind, such as " + jointExample + "; kinds are " + strings.Join(kinds, ", ")}
	}
	i := slices.IndexFunc(kinds, func(k string) bool { return fold(k) == fold(p.kind) })
	if i < 0 {
		return "", &complaint{shorten(p.whole()), "names no kind of joint: " + shorten(p.kind), didYouMean(near(p.kind, kinds), "one of "+strings.Join(kinds, ", "))}
	}
	return kinds[i], nil
}

// jointList reads the JSON form: a list of objects of kind and count.
func jointList(raw string) ([]jointText, *complaint) {
	d := newDecoder([]byte(raw))
	var parts []jointText
	err := sheet.EachItem(d, func(int) error {
		p, err := jointObject(d)
		parts = append(parts, p)
		return err
	})
	if err == nil {
		if _, end := d.Token(); !errors.Is(end, io.EOF) {
			err = errors.New("something follows the end")
		}
	}
	if err != nil {
		return nil, &complaint{shorten(raw), "is no list of joints: " + err.Error(), `a text such as ` + jointExample + `, or a list such as [{"kind": "moment", "count": 2}]`}
	}
	return parts, nil
}

func jointObject(d *json.Decoder) (jointText, error) {
	var p jointText
	seen := map[string]bool{}
	err := sheet.EachKey(d, func(key string) error {
		if seen[key] {
			return fmt.Errorf("the key %q stands twice", shorten(key))
		}
		seen[key] = true
		c, err := readValue(d)
		switch {
		case err != nil:
			return err
		case key == "kind" && (c.Kind == sheet.Text || c.Kind == sheet.Empty):
			p.kind = strings.Join(strings.Fields(c.Text), " ")
		case key == "count" && (c.Kind == sheet.Number || c.Kind == sheet.Empty):
			p.count = c.Text
		case key == "kind", key == "count":
			return fmt.Errorf("%s holds %s", key, shorten(c.Text))
		default:
			return fmt.Errorf("the key %q is not known; accepted are kind and count", shorten(key))
		}
		return nil
	})
	return p, err
}
