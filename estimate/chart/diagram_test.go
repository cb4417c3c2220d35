package chart

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"math"
	"strings"
	"testing"
)

// overhang is a member of 6 m and 2 m under 10 kN/m. By hand: MB = −10·2²/2 = −20,
// RA = 30 − 20/6 = 26.67, span moment RA²/2w = 35.56 at 2.667 m.
func overhang() MemberDiagram {
	m := MemberDiagram{Title: "An overhang", Length: 8, Note: "Combination: characteristic.",
		Supports: []DiagramSupport{{0, "pinned"}, {6, "pinned"}}, Spans: []DiagramSpan{{0, 6}, {6, 8}}}
	for i := range 81 {
		x := float64(i) / 10
		moment, shear := 26.667*x-5*x*x, 26.667-10*x
		if x > 6 {
			moment, shear = -5*(8-x)*(8-x), 10*(8-x)
		}
		m.Moment.Points = append(m.Moment.Points, DiagramPoint{x, moment, moment})
		m.Shear.Points = append(m.Shear.Points, DiagramPoint{x, shear, shear})
		m.Deflection.Points = append(m.Deflection.Points, DiagramPoint{x, 0, 0})
	}
	m.Moment.Marks = []DiagramMark{{2.667, 35.56}, {6, -20}}
	m.Shear.Marks = []DiagramMark{{0, 26.67}, {6, -33.33}, {6, 20}}
	return m
}

func labels(d Drawing) []Label {
	var out []Label
	for _, s := range d.Shapes {
		if l, ok := s.(Label); ok {
			out = append(out, l)
		}
	}
	return out
}

func labelled(d Drawing, text string) (Label, bool) {
	for _, l := range labels(d) {
		if strings.ReplaceAll(l.Text, space, " ") == text {
			return l, true
		}
	}
	return Label{}, false
}

func TestDiagramsSayWhatTheyShow(t *testing.T) {
	d := Diagrams(overhang())
	for _, want := range []string{
		"An overhang", "6 m", "2 m", "35.6 kNm at 2.67 m", "−20.0 kNm at 6 m", "26.7 kN at 0 m", "−33.3 kN at 6 m", "20.0 kN at 6 m",
		"Bending moment, kNm: drawn on the tension side, sagging below the line", "Shear, kN: positive above the line",
		"Deflection, mm: down positive, exaggerated", "zero everywhere", "Combination: characteristic.",
		"Concept sizing for budgeting only, not for construction or lifting;", "local codes govern; a licensed engineer must design and check.",
	} {
		if _, ok := labelled(d, want); !ok {
			t.Errorf("no label %q", want)
		}
	}
	text := strings.ReplaceAll(d.Description, space, " ")
	for _, want := range []string{"Member of 8 m; supports: pinned at 0 m, pinned at 6 m.", "Bending moment from −20.0 to 35.", "Deflection is zero."} {
		if !strings.Contains(text, want) {
			t.Errorf("description %q does not say %q", text, want)
		}
	}
}

// Sagging moments lie below their line, hogging ones above; positive shear above.
func TestDiagramsTensionSide(t *testing.T) {
	d := Diagrams(overhang())
	at := func(text string) float64 {
		l, ok := labelled(d, text)
		if !ok {
			t.Fatalf("no label %q", text)
		}
		return l.At.Y
	}
	if sag, hog := at("35.6 kNm at 2.67 m"), at("−20.0 kNm at 6 m"); !(sag > hog+40) {
		t.Errorf("sagging label at %v, hogging at %v: sagging is not below", sag, hog)
	}
	if up, down := at("26.7 kN at 0 m"), at("−33.3 kN at 6 m"); !(up < down-40) {
		t.Errorf("positive shear at %v, negative at %v: positive is not above", up, down)
	}
}

// Every label stays on the drawing, and no two extremes of a lane overlap, with one
// span and with fifty.
func TestDiagramLabelsKeepApart(t *testing.T) {
	many := MemberDiagram{Title: "Fifty spans", Length: 200}
	for i := range 51 {
		x := 4 * float64(i)
		many.Supports = append(many.Supports, DiagramSupport{x, "pinned"})
		if i > 0 {
			many.Spans = append(many.Spans, DiagramSpan{x - 4, x})
		}
		many.Moment.Points = append(many.Moment.Points, DiagramPoint{x, 0, -10}, DiagramPoint{x, 8, 0})
		many.Moment.Marks = append(many.Moment.Marks, DiagramMark{x, -10}, DiagramMark{x, 8})
	}
	for name, m := range map[string]MemberDiagram{"overhang": overhang(), "fifty": many} {
		d := Diagrams(m)
		var taken []rect
		for _, l := range labels(d) {
			w := textWidth(l.Text, l.Size)
			left := l.At.X
			if l.Anchor == Middle {
				left -= w / 2
			}
			if left < 0 || left+w > d.Width+60 || l.At.Y < 0 || l.At.Y > d.Height {
				t.Errorf("%s: label %q at %v leaves the drawing", name, l.Text, l.At)
			}
			if !l.Halo {
				continue
			}
			r := rect{left, l.At.Y - 9, left + w, l.At.Y + 2}
			for _, o := range taken {
				if r.meets(o) {
					t.Errorf("%s: label %q overlaps another", name, l.Text)
				}
			}
			taken = append(taken, r)
		}
	}
	if _, ok := labelled(Diagrams(many), "50 × 4 m"); !ok {
		t.Error("fifty equal spans are not dimensioned as 50 × 4 m")
	}
}

func TestDiagramSupportKinds(t *testing.T) {
	base := len(Diagrams(MemberDiagram{Length: 10}).Shapes)
	seen := map[string]string{}
	for _, kind := range []string{"pinned", "fixed", "spring", "guided"} {
		for _, x := range []float64{0, 5, 10} {
			m := MemberDiagram{Length: 10, Supports: []DiagramSupport{{x, kind}}}
			d := Diagrams(m)
			if len(d.Shapes) < base+3 {
				t.Errorf("%s at %v: %d shapes, without a support %d", kind, x, len(d.Shapes), base)
			}
			if x == 5 {
				body := string(d.SVG()[strings.Index(string(d.SVG()), "</desc>"):])
				if other, ok := seen[body]; ok {
					t.Errorf("%s is drawn as %s", kind, other)
				}
				seen[body] = kind
			}
		}
	}
	with := Diagrams(MemberDiagram{Length: 10, Hinges: []float64{4}})
	if len(with.Shapes) != base+1 || !strings.Contains(with.Description, "Hinges at 4") {
		t.Errorf("a hinge adds %d shapes; description %q", len(with.Shapes)-base, with.Description)
	}
}

// The bytes are the same each time, well-formed, free of NaN, and coloured by
// variables alone.
func TestDiagramsSVG(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	bad := overhang()
	bad.Moment.Points = append(bad.Moment.Points, DiagramPoint{nan, 1, 1}, DiagramPoint{8, inf, -inf})
	bad.Shear.Marks = append(bad.Shear.Marks, DiagramMark{1, nan}, DiagramMark{nan, 30}, DiagramMark{1, inf})
	bad.Spans = append(bad.Spans, DiagramSpan{nan, inf})
	bad.Title = "<script>&"
	for name, m := range map[string]MemberDiagram{"plain": overhang(), "bad": bad, "empty": {}, "no length": {Length: nan}} {
		svg := Diagrams(m).SVG()
		if !bytes.Equal(svg, Diagrams(m).SVG()) {
			t.Errorf("%s: the bytes differ from call to call", name)
		}
		for _, word := range []string{"NaN", "Inf", "<script"} {
			if bytes.Contains(svg, []byte(word)) {
				t.Errorf("%s: the drawing holds %q", name, word)
			}
		}
		d := xml.NewDecoder(bytes.NewReader(svg))
		for {
			if _, err := d.Token(); errors.Is(err, io.EOF) {
				break
			} else if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
		}
	}
	if svg := Diagrams(overhang()).SVG(); bytes.Count(svg, []byte("#")) != bytes.Count(svg, []byte("var(--chart-")) {
		t.Error("a colour stands outside a variable")
	}
}
