package chart

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Colours are the values of the inks on one ground.
type Colours map[Ink]string

// Light and Dark are the palettes of light and dark pages. Text inks keep a
// contrast of at least 4.5 : 1 against the paper (WCAG 2.2, 1.4.3), marks 3 : 1
// (1.4.11).
var (
	Light = Colours{
		Text: "#1d2a33", Muted: "#566570", Rule: "#d5dce0", Accent: "#2a6f7c", Soft: "#dbe9ea",
		Base: "#8a5300", Budget: "#9c2f4f", Paper: "#ffffff",
	}
	Dark = Colours{
		Text: "#e6ecef", Muted: "#a3b1ba", Rule: "#37454e", Accent: "#6fbccb", Soft: "#22414a",
		Base: "#e2ab5a", Budget: "#f08ca6", Paper: "#141b20",
	}
)

var inks = []Ink{Text, Muted, Rule, Accent, Soft, Base, Budget, Paper}

// Variables returns the palette as CSS declarations, "--chart-ink:#1d2a33;…", for
// a page to put on the root of each of its themes.
func (c Colours) Variables() string {
	var b strings.Builder
	for _, i := range inks {
		fmt.Fprintf(&b, "--chart-%s:%s;", i, c[i])
	}
	return b.String()
}

// colour is the ink's variable, falling back on the light palette, so that the
// drawing is also complete as a file of its own.
func colour(i Ink) string {
	if i == None {
		return "none"
	}
	return "var(--chart-" + string(i) + "," + Light[i] + ")"
}

// SVG returns the drawing as a self-contained SVG element without a fixed size:
// it takes the width of its place. Colours are presentation attributes, which a
// strict content security policy lets through. The ids of title and description
// carry a digest of the drawing, so that several may stand on one page.
func (d Drawing) SVG() []byte {
	var body bytes.Buffer
	for _, s := range d.Shapes {
		writeShape(&body, s)
	}
	sum := sha256.Sum256(append([]byte(d.Title+"\x00"+d.Description+"\x00"), body.Bytes()...))
	id := d.Name + "-" + hex.EncodeToString(sum[:4])
	var b bytes.Buffer
	fmt.Fprintf(&b, `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 %s %s" role="img" aria-labelledby="%s-title %s-desc"`,
		num(d.Width), num(d.Height), id, id)
	b.WriteString(` font-family="system-ui,'Liberation Sans',Arial,sans-serif" font-variant="tabular-nums">` + "\n")
	fmt.Fprintf(&b, "<title id=\"%s-title\">%s</title>\n<desc id=\"%s-desc\">%s</desc>\n", id, escape(d.Title), id, escape(d.Description))
	b.Write(body.Bytes())
	b.WriteString("</svg>\n")
	return b.Bytes()
}

func writeShape(b *bytes.Buffer, s Shape) {
	switch s := s.(type) {
	case Path:
		writePath(b, s)
	case Dot:
		fmt.Fprintf(b, `<circle cx="%s" cy="%s" r="%s" fill="%s" stroke="%s" stroke-width="1.5"/>`+"\n",
			num(s.Centre.X), num(s.Centre.Y), num(s.Radius), colour(s.Fill), colour(s.Stroke))
	case Label:
		writeLabel(b, s)
	}
}

func writePath(b *bytes.Buffer, p Path) {
	b.WriteString(`<path d="`)
	for i, q := range p.Points {
		letter := "L"
		if i == 0 {
			letter = "M"
		}
		b.WriteString(letter + num(q.X) + " " + num(q.Y))
	}
	if p.Closed {
		b.WriteString("Z")
	}
	fmt.Fprintf(b, `" fill="%s"`, colour(p.Fill))
	if p.Stroke != None {
		fmt.Fprintf(b, ` stroke="%s" stroke-width="%s" stroke-linejoin="round"`, colour(p.Stroke), num(p.Width))
	}
	if len(p.Dash) > 0 {
		parts := make([]string, len(p.Dash))
		for i, l := range p.Dash {
			parts[i] = num(l)
		}
		fmt.Fprintf(b, ` stroke-dasharray="%s"`, strings.Join(parts, " "))
	}
	b.WriteString("/>\n")
}

func writeLabel(b *bytes.Buffer, l Label) {
	fmt.Fprintf(b, `<text x="%s" y="%s" font-size="%s" text-anchor="%s" fill="%s"`,
		num(l.At.X), num(l.At.Y), num(l.Size), l.Anchor, colour(l.Ink))
	if l.Bold {
		b.WriteString(` font-weight="600"`)
	}
	if l.Halo {
		fmt.Fprintf(b, ` stroke="%s" stroke-width="4" stroke-linejoin="round" paint-order="stroke"`, colour(Paper))
	}
	fmt.Fprintf(b, ">%s</text>\n", escape(l.Text))
}

// num writes a coordinate with at most two decimals, which hides differences of
// the last bits between machines.
func num(x float64) string {
	return strconv.FormatFloat(math.Round(x*100)/100+0, 'f', -1, 64)
}

// escape makes text safe inside an element or attribute and drops the control
// characters that XML 1.0 (section 2.2) has no place for.
func escape(s string) string {
	s = strings.Map(func(r rune) rune {
		if r < ' ' && r != '\t' && r != '\n' || r == 0xFFFE || r == 0xFFFF {
			return -1
		}
		return r
	}, strings.ToValidUTF8(s, "\uFFFD"))
	return escaper.Replace(s)
}

var escaper = strings.NewReplacer("&", "&amp;", "<", "&lt;", ">", "&gt;", `"`, "&quot;", "'", "&#39;")
