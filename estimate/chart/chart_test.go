package chart

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"regexp"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// drawings returns every drawing of a document, the curve with and without a budget.
func drawings(d document.Document, budget float64) []Drawing {
	return []Drawing{Curve(d), Curve(d, WithBudget(budget)), Categories(d), Tonnage(d)}
}

// texts are the labels of a drawing with no-break spaces made plain.
func texts(d Drawing) []string {
	var out []string
	for _, s := range d.Shapes {
		if l, ok := s.(Label); ok {
			out = append(out, plain(l.Text))
		}
	}
	return out
}

func plain(s string) string { return strings.ReplaceAll(s, space, " ") }

func TestCurveSaysItsFigures(t *testing.T) {
	d := brackwater(t)
	got := strings.Join(texts(Curve(d, WithBudget(1.4e6))), "\n")
	// Quantiles of the lognormal with median 1.13e6 and σ 0.21 by NormalDist of
	// Python 3.11's statistics: P10 863373, P80 1348453, P90 1478966; 1053482.17
	// lies at 0.3692 and 1.4e6 at 0.8462.
	for _, want := range []string{
		"P10  0.863 M EUR", "P50  1.13 M EUR", "P80  1.35 M EUR", "P90  1.48 M EUR",
		"base 1.05 M EUR, P37", "chosen P80, contingency 0.295 M EUR", "budget 1.40 M EUR, P85",
		"total cost, M EUR, base-date money",
	} {
		if !strings.Contains(got, want) {
			t.Errorf("no label %q among\n%s", want, got)
		}
	}
	desc := plain(Curve(d).Description)
	for _, want := range []string{"loading quay", "scheme inner support", "P10 863 k EUR", "Base estimate 1.05 M EUR, P37", "contingency 295 k EUR"} {
		if !strings.Contains(desc, want) {
			t.Errorf("description lacks %q: %s", want, desc)
		}
	}
	if strings.Contains(desc, "udget") {
		t.Error("a budget is described that nobody gave")
	}
}

// The dots must lie where their value and probability are on the axes that the
// ticks show.
func TestCurveGeometry(t *testing.T) {
	d := brackwater(t)
	c := Curve(d)
	var dots []Point
	tick := map[string]Point{}
	for _, s := range c.Shapes {
		switch s := s.(type) {
		case Dot:
			dots = append(dots, s.Centre)
		case Label:
			tick[plain(s.Text)] = s.At
		}
	}
	x1, x2 := tick["0.8"].X, tick["1.4"].X
	y0, y100 := tick["0 %"].Y, tick["100 %"].Y
	if x1 == 0 || x2 == 0 || y0 == 0 || y100 == 0 || len(dots) != 4 {
		t.Fatalf("ticks or dots are missing: %v, %d dots", tick, len(dots))
	}
	for i, p := range []document.Percentile{d.Range.Percentiles[3], d.Range.Percentiles[2], d.Range.Percentiles[1], d.Range.Percentiles[0]} {
		wantX := x1 + (float64(p.Value)-0.8e6)/0.6e6*(x2-x1)
		wantY := y0 + float64(p.P)*(y100-y0) - 4 // labels stand 4 below their line
		if math.Abs(dots[i].X-wantX) > 0.01 || math.Abs(dots[i].Y-wantY) > 0.01 {
			t.Errorf("P%v is at %v, want %v, %v", p.P, dots[i], wantX, wantY)
		}
	}
}

func TestBarsSayTheirFigures(t *testing.T) {
	d := brackwater(t)
	got := strings.Join(texts(Categories(d)), "|")
	for _, want := range []string{"|base, k EUR|P10|P90|", "|fabrication|469|361|640|", "|inspection|39.2|21.0|61.0|"} {
		if !strings.Contains(got, want) {
			t.Errorf("no %q in %s", want, got)
		}
	}
	got = strings.Join(texts(Tonnage(d)), "|")
	if want := "|boom|61.2|78.2|conveyor gallery, salt store…|44.1|52.0|trestles|31.9|36.6|walkway|12.9|14.8|stairs and rails|4.31|5.10|"; !strings.Contains(got, want) {
		t.Errorf("groups are %s, want %s", got, want)
	}
}

func TestManyGroupsAreFolded(t *testing.T) {
	d := brackwater(t)
	d.Groups = nil
	for i := range 30 {
		d.Groups = append(d.Groups, document.Group{Group: fmt.Sprintf("bay %02d", i), Net: money.FromInt(1), Delivered: money.FromInt(int64(2 + i))})
	}
	got := strings.Join(texts(Tonnage(d)), "|")
	// The seven lightest: 2 + 3 + … + 8 = 35 t delivered, 7 t net.
	if !strings.Contains(got, "|7 other groups|7.00|35.0|") || strings.Contains(got, "bay 06") || !strings.Contains(got, "bay 07") {
		t.Errorf("folded groups: %s", got)
	}
}

// extremes are documents that a careless drawing breaks on.
func extremes(t testing.TB) map[string]document.Document {
	good := brackwater(t)
	out := map[string]document.Document{"empty": {}, "demo": good}
	add := func(name string, change func(*document.Document)) {
		d := good
		change(&d)
		out[name] = d
	}
	constant := func(v float64) func(*document.Document) {
		return func(d *document.Document) {
			d.Range = document.Range{}
			for i := 0; i <= 100; i++ {
				d.Range.Curve = append(d.Range.Curve, document.Number(v))
			}
			for _, p := range []document.Number{0.1, 0.5, 0.8, 0.9} {
				d.Range.Percentiles = append(d.Range.Percentiles, document.Percentile{P: p, Value: document.Number(v)})
			}
			d.Totals.Base, _ = money.FromFloat(v, 2)
			d.Totals.AtConfidence, d.Totals.Contingency = d.Totals.Base, money.Zero
		}
	}
	add("fixed", constant(1e6))
	add("zero", func(d *document.Document) {
		constant(0)(d)
		d.Categories = []document.Category{{Category: "material"}}
		d.Groups = []document.Group{{Group: "boom"}}
	})
	add("negative", constant(-5e5))
	add("one category", func(d *document.Document) { d.Categories = d.Categories[:1]; d.Groups = d.Groups[:1] })
	add("huge", func(d *document.Document) {
		d.Range = lognormal(1e18, 0.5, 1e18, 0.8)
		d.Categories = []document.Category{{Category: "material", P10: 1e300, P90: 1.7e308}}
	})
	add("tiny", func(d *document.Document) { d.Range = lognormal(1e-7, 0.2, 1e-7, 0.8) })
	add("not numbers", func(d *document.Document) {
		d.Range = lognormal(1e6, 0.2, 1e6, 0.8)
		d.Range.Percentiles[0].Value = document.Number(math.NaN())
		d.Range.BaseAt = document.Number(math.NaN())
		d.Categories = []document.Category{{Category: "material", P10: document.Number(math.NaN()), P90: document.Number(math.Inf(1))}}
	})
	add("curve not a number", func(d *document.Document) { d.Range.Curve = []document.Number{1, document.Number(math.NaN()), 3} })
	add("curve falls", func(d *document.Document) { d.Range.Curve = []document.Number{3, 2, 1} })
	add("two points", func(d *document.Document) { d.Range.Curve = []document.Number{1, 2} })
	add("hostile text", func(d *document.Document) {
		d.Job.Project = `<script>alert("1")</script>&'` + "\x00\x1b\xff"
		d.Job.Money = "</svg><b>"
		d.Categories = []document.Category{{Category: `"><img src=x>`}}
		d.Groups = []document.Group{{Group: strings.Repeat("very long name ", 40)}}
	})
	return out
}

var idPattern = regexp.MustCompile(`aria-labelledby="(\S+-title) (\S+-desc)"`)

// Every drawing is well-formed XML with a title, a description and no number
// that is none, and is the same when drawn again.
func TestSVGIsSoundForEveryDocument(t *testing.T) {
	for name, d := range extremes(t) {
		for i, draw := range drawings(d, 1.2e6) {
			svg := draw.SVG()
			if again := drawings(d, 1.2e6)[i].SVG(); !bytes.Equal(svg, again) {
				t.Errorf("%s, %s: two drawings differ", name, draw.Name)
			}
			if strings.Contains(string(svg), "NaN") || strings.Contains(string(svg), "Inf") {
				t.Errorf("%s, %s: holds what is no number:\n%s", name, draw.Name, svg)
			}
			for _, bad := range []string{"<script", "<img", "<b>", "style", "http://", "https://"} {
				rest := strings.Replace(string(svg), `xmlns="http://www.w3.org/2000/svg"`, "", 1)
				if strings.Contains(rest, bad) {
					t.Errorf("%s, %s: holds %q", name, draw.Name, bad)
				}
			}
			elements := elementTexts(t, name, svg)
			m := idPattern.FindSubmatch(svg)
			if m == nil || elements["title#"+string(m[1])] == "" || elements["desc#"+string(m[2])] == "" {
				t.Errorf("%s, %s: title and description are not what aria-labelledby names", name, draw.Name)
			}
		}
	}
}

// elementTexts parses XML and returns the text of each element with an id.
func elementTexts(t *testing.T, name string, svg []byte) map[string]string {
	t.Helper()
	out := map[string]string{}
	dec := xml.NewDecoder(bytes.NewReader(svg))
	key := ""
	for {
		tok, err := dec.Token()
		if errors.Is(err, io.EOF) {
			return out
		}
		if err != nil {
			t.Fatalf("%s: not well-formed: %v\n%s", name, err, svg)
		}
		switch tok := tok.(type) {
		case xml.StartElement:
			key = ""
			for _, a := range tok.Attr {
				if a.Name.Local == "id" {
					key = tok.Name.Local + "#" + a.Value
				}
			}
		case xml.CharData:
			if key != "" {
				out[key] += string(tok)
			}
		case xml.EndElement:
			key = ""
		}
	}
}

// box is the extent of a label by the estimated width of its text.
func (l Label) box() (x1, y1, x2, y2 float64) {
	w := textWidth(l.Text, l.Size)
	x1 = l.At.X
	switch l.Anchor {
	case Middle:
		x1 -= w / 2
	case End:
		x1 -= w
	}
	return x1, l.At.Y - 0.75*l.Size, x1 + w, l.At.Y + 0.2*l.Size
}

// checkLabels reports labels that overlap or leave the drawing.
func checkLabels(d Drawing) error {
	var labels []Label
	for _, s := range d.Shapes {
		if l, ok := s.(Label); ok {
			labels = append(labels, l)
		}
	}
	for i, l := range labels {
		x1, y1, x2, y2 := l.box()
		if x1 < 0 || y1 < 0 || x2 > d.Width+0.01 || y2 > d.Height {
			return fmt.Errorf("%s: label %q leaves the drawing: %.1f to %.1f of %.1f", d.Name, l.Text, x1, x2, d.Width)
		}
		for _, m := range labels[:i] {
			a1, b1, a2, b2 := m.box()
			if x1 < a2 && a1 < x2 && y1 < b2 && b1 < y2 {
				return fmt.Errorf("%s: labels %q and %q overlap", d.Name, l.Text, m.Text)
			}
		}
	}
	return nil
}

func TestLabelsStandApart(t *testing.T) {
	for name, d := range extremes(t) {
		for _, draw := range drawings(d, 1.2e6) {
			if err := checkLabels(draw); err != nil {
				t.Errorf("%s: %v", name, err)
			}
		}
	}
	demo := brackwater(t)
	rapid.Check(t, func(t *rapid.T) {
		d := demo
		median := math.Pow(10, rapid.Float64Range(0, 11).Draw(t, "magnitude"))
		deviation := rapid.Float64Range(1e-9, 0.9).Draw(t, "deviation")
		near := func(name string) float64 {
			return median * math.Exp(deviation*rapid.Float64Range(-4, 4).Draw(t, name))
		}
		confidence := float64(rapid.IntRange(51, 99).Draw(t, "confidence")) / 100
		base := near("base")
		d.Range = lognormal(median, deviation, base, confidence)
		d.Totals.Base, _ = money.FromFloat(base, 2)
		d.Totals.Confidence = document.Number(confidence)
		for _, p := range d.Range.Percentiles {
			if float64(p.P) == confidence {
				d.Totals.AtConfidence, _ = money.FromFloat(float64(p.Value), 2)
			}
		}
		d.Totals.Contingency = d.Totals.AtConfidence.Sub(d.Totals.Base)
		for _, draw := range drawings(d, near("budget")) {
			if err := checkLabels(draw); err != nil {
				t.Fatal(err)
			}
		}
	})
}

func TestTwoCurvesOnOnePageHaveDifferentIDs(t *testing.T) {
	d := brackwater(t)
	e := d
	e.Job.Scheme = "tower at the end"
	a, b := idPattern.Find(CumulativeCurve(d)), idPattern.Find(CumulativeCurve(e))
	if len(a) == 0 || bytes.Equal(a, b) {
		t.Errorf("ids %s and %s", a, b)
	}
}

// Contrast by WCAG 2.2, definitions of contrast ratio and relative luminance;
// the checks of the formula itself are the ratio 21 of black on white, given
// there, and 4.54 of #767676 on white (from memory).
func TestContrast(t *testing.T) {
	if got := contrast(t, "#000000", "#ffffff"); math.Abs(got-21) > 1e-9 {
		t.Errorf("black on white: %v, want 21", got)
	}
	if got := contrast(t, "#767676", "#ffffff"); math.Abs(got-4.54) > 0.005 {
		t.Errorf("#767676 on white: %v, want 4.54", got)
	}
	for name, c := range map[string]Colours{"light": Light, "dark": Dark} {
		for _, i := range []Ink{Text, Muted, Base, Budget} {
			if got := contrast(t, c[i], c[Paper]); got < 4.5 {
				t.Errorf("%s: %s on paper has contrast %.2f, want at least 4.5", name, i, got)
			}
		}
		if got := contrast(t, c[Accent], c[Paper]); got < 3 {
			t.Errorf("%s: accent on paper has contrast %.2f, want at least 3", name, got)
		}
		if got := contrast(t, c[Accent], c[Soft]); got < 3 {
			t.Errorf("%s: accent on soft has contrast %.2f, want at least 3", name, got)
		}
	}
	if got, want := Light.Variables(), "--chart-ink:#1d2a33;"; !strings.HasPrefix(got, want) || strings.Count(got, "#") != 8 {
		t.Errorf("variables %q", got)
	}
}

func contrast(t *testing.T, a, b string) float64 {
	t.Helper()
	luminance := func(colour string) float64 {
		var c [3]int
		if _, err := fmt.Sscanf(colour, "#%02x%02x%02x", &c[0], &c[1], &c[2]); err != nil {
			t.Fatalf("colour %q: %v", colour, err)
		}
		l := 0.0
		for i, weight := range []float64{0.2126, 0.7152, 0.0722} {
			v := float64(c[i]) / 255
			if v <= 0.04045 {
				v /= 12.92
			} else {
				v = math.Pow((v+0.055)/1.055, 2.4)
			}
			l += weight * v
		}
		return l
	}
	x, y := luminance(a), luminance(b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}
