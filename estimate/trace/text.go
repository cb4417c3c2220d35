package trace

import (
	"fmt"
	"strings"
	"unicode/utf8"

	"spanwright/estimate/document"
	"spanwright/estimate/spread"
)

// textWidth is where lines for the terminal break.
const textWidth = 100

// deepest is the indent beyond which deeper levels are not moved further in.
const deepest = 16

// Text writes a tree for the terminal: each figure with its value, what it is, the
// numbers put in and on whose word, two spaces in for each level.
func Text(n Node) string {
	var b strings.Builder
	n.write(&b, 0)
	return b.String()
}

func (n Node) write(b *strings.Builder, level int) {
	indent := min(2*level, 2*deepest)
	head := strings.TrimSpace(n.Figure + " " + n.shownValue())
	wrap(b, indent, "", head+" ["+string(n.Kind)+"]")
	line := func(label, text string) {
		if text != "" {
			wrap(b, indent+2, label, text)
		}
	}
	line("", n.What)
	if n.Repeated {
		line("", "Explained elsewhere in this tree.")
		return
	}
	if n.Formula != "" && n.Formula != n.Arithmetic {
		line("how: ", n.Formula)
	}
	line("numbers: ", n.Arithmetic)
	line("rounding: ", n.Rounding)
	line("clause: ", n.Clause)
	line("source: ", n.provenance())
	if s := n.Spread; s != nil {
		line("spread: ", spreadText(*s))
	}
	for _, note := range n.Notes {
		line("note: ", note)
	}
	for _, c := range n.Children {
		c.write(b, level+1)
	}
	if n.Cut > 0 {
		rest := fmt.Sprintf("%d more", n.Cut)
		if len(n.Next) > 0 {
			rest += "; ask for " + strings.Join(n.Next, ", ")
		}
		wrap(b, indent+2, "… ", rest)
	}
}

func (n Node) shownValue() string {
	if n.Value == "" {
		return ""
	}
	if strings.Contains(n.Value, " ") {
		return "= " + strings.TrimSpace(n.Value+" "+n.Unit)
	}
	return "= " + with(n.Value, n.Unit)
}

// spreadText writes a spread in one line.
func spreadText(s spread.Spread) string {
	number := func(x float64) string { return grouped(text(document.Number(x))) }
	if s.Distribution == spread.Fixed {
		return "fixed at " + number(s.Likely)
	}
	bounds := s.Bounds
	if bounds == "" && s.Distribution == spread.Lognormal {
		bounds = spread.BoundsPercentiles
	}
	words := fmt.Sprintf("%s, low %s, likely %s, high %s", s.Distribution, number(s.Low), number(s.Base()), number(s.High))
	if bounds == spread.BoundsPercentiles {
		return words + " (low and high are P10 and P90)"
	}
	return words
}

// provenance joins source, version, owner, scope and confidence.
func (n Node) provenance() string {
	var words []string
	add := func(label, text string) {
		if text != "" {
			words = append(words, label+text)
		}
	}
	add("", n.Source)
	add("", shortHash(n.Version))
	add("set by ", n.Owner)
	add("scope ", n.Scope)
	add("confidence ", n.Confidence)
	return strings.Join(words, ", ")
}

// shortHash leaves of a hash what tells it apart.
func shortHash(version string) string {
	const letters = 12
	if sum, ok := strings.CutPrefix(version, "SHA-256 "); ok && len(sum) > letters {
		return "SHA-256 " + sum[:letters] + "…"
	}
	return version
}

// wrap writes a labelled text in lines of textWidth, continued under its start.
func wrap(b *strings.Builder, indent int, label, text string) {
	pad := strings.Repeat(" ", indent)
	b.WriteString(pad + label)
	at := indent + utf8.RuneCountInString(label)
	for i, word := range strings.Split(text, " ") {
		width := utf8.RuneCountInString(word)
		switch {
		case i == 0:
		case at+1+width > textWidth:
			b.WriteString("\n" + pad + "  ")
			at = indent + 2
		default:
			b.WriteString(" ")
			at++
		}
		b.WriteString(word)
		at += width
	}
	b.WriteString("\n")
}
