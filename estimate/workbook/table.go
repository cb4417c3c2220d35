package workbook

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"spanwright/estimate/chart"
	"spanwright/estimate/document"
)

// lineWidth is the most characters of a line of Table.
const lineWidth = 110

// Table returns the estimate as plain text for a terminal: at most 110
// characters a line, no colour codes, no control characters. The caution and
// what is unsafe come first.
func Table(d document.Document) string {
	t := &page{}
	t.wrap("", d.Caution)
	if d.Totals.Unsafe > 0 {
		t.wrap("", unsafeBanner(d.Totals.Unsafe)+"; listed below.")
	}
	t.line()
	t.headline(d)
	t.categories(d)
	t.groups(d)
	t.members(d)
	t.findings(d)
	t.line()
	t.line(fmt.Sprintf("%d inclusions, %d exclusions and %d assumptions are listed in the workbook and in the JSON document.",
		len(d.Inclusions), len(d.Exclusions), len(d.Assumptions)))
	return t.text.String()
}

// unsafeBanner says how many findings are unsafe.
func unsafeBanner(n int) string {
	if n == 1 {
		return unsafeMark + ": 1 finding"
	}
	return fmt.Sprintf("%s: %d findings", unsafeMark, n)
}

// page collects lines.
type page struct{ text strings.Builder }

func (p *page) line(parts ...string) {
	p.text.WriteString(strings.TrimRight(strings.Join(parts, ""), " "))
	p.text.WriteByte('\n')
}

// wrap writes words in lines, the second and later ones indented as far as lead
// is long.
func (p *page) wrap(lead, s string) {
	indent := strings.Repeat(" ", utf8.RuneCountInString(lead))
	line, empty := lead, true
	for _, word := range strings.Fields(plain(s)) {
		for _, part := range pieces(word, lineWidth-len(indent)) {
			if !empty && utf8.RuneCountInString(line)+1+utf8.RuneCountInString(part) > lineWidth {
				p.line(line)
				line, empty = indent, true
			}
			if !empty {
				line += " "
			}
			line += part
			empty = false
		}
	}
	p.line(line)
}

// pieces cuts a word that is longer than a line.
func pieces(word string, limit int) []string {
	runes := []rune(word)
	var out []string
	for len(runes) > limit {
		out = append(out, string(runes[:limit]))
		runes = runes[limit:]
	}
	return append(out, string(runes))
}

// plain makes text safe for a terminal: what is no printable character becomes a
// space, so that a name cannot move the cursor or hide a line.
func plain(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsPrint(r) && r != utf8.RuneError {
			return r
		}
		return ' '
	}, s)
}

// row is one label of the headline with its text.
func (p *page) row(label, s string) { p.wrap(fmt.Sprintf("%-14s", label), s) }

func (p *page) headline(d document.Document) {
	j, t := d.Job, d.Totals
	money := func(x float64) string { return plain(chart.Money(x, j.Currency)) }
	p.row("project", j.Project+", scheme "+j.Scheme)
	p.row("stated in", fmt.Sprintf("%s, %s; estimate class %d, design basis %s", j.Currency, j.Money, j.EstimateClass, j.DesignBasis))
	p.row("base", fmt.Sprintf("%s (%s), at %s", money(t.Base.Float64()), t.Base, percentileShort(d.Range.BaseAt)))
	var shown []string
	for _, q := range d.Range.Percentiles {
		shown = append(shown, percentileLabel(q.P)+" "+money(float64(q.Value)))
	}
	p.row("range", strings.Join(shown, ", "))
	p.row("contingency", fmt.Sprintf("%s (%s), which reaches %s at %s", money(t.Contingency.Float64()), t.Contingency,
		percentileLabel(t.Confidence), money(t.AtConfidence.Float64())))
	p.row("tonnage", fmt.Sprintf("net %s t, delivered %s t, purchased %s t; %d members, %d pieces", t.Net, t.Delivered, t.Purchased, t.Members, t.Pieces))
	if d.Carbon != nil {
		p.row("carbon", fmt.Sprintf("%s kg CO₂e, %.4g for each delivered tonne; %s", d.Carbon.Total, float64(d.Carbon.PerTonne), carbonModules(d.Carbon)))
	}
	if words := shippingWords(d.Shipping); words != "" {
		p.row("shipping", words)
	}
	if t.Reserve.Sign() > 0 {
		p.row("reserve", t.Reserve.String()+" held outside the range by who approves")
	}
	if t.Tax.Sign() > 0 {
		p.row("tax", t.Tax.String()+" on the cost at "+percentileLabel(t.Confidence)+", outside every other figure")
	}
	for i, s := range d.Range.Sensitivities {
		label := ""
		if i == 0 {
			label = "firm up next"
		}
		if i < firmest && s.Narrowing > 2*s.NarrowingSE && s.Narrowing > 0 {
			p.row(label, fmt.Sprintf("%s: narrows P10 to P90 by %s, %.0f %% of the variance", s.Assumption, money(float64(s.Narrowing)), 100*float64(s.Share)))
		}
	}
	for _, w := range d.Range.Warnings {
		p.row("warning", w)
	}
}

// firmest is how many assumptions the headline names that would narrow the range
// most.
const firmest = 3

// shippingWords sums up how the pieces travel, and which do not fit.
func shippingWords(s document.Shipping) string {
	vehicles, splices, permits := 0, 0, 0
	for _, l := range s.Loads {
		vehicles, splices, permits = vehicles+l.Vehicles, splices+l.Splices, permits+l.Permits
	}
	if vehicles == 0 {
		return ""
	}
	out := fmt.Sprintf("vehicles by group %d, permit loads %d, site splices %d", vehicles, permits, splices)
	marks := map[string]bool{}
	for _, b := range s.Breaches {
		marks[b.Mark] = true
	}
	if len(marks) > 0 {
		names := slices.Sorted(maps.Keys(marks))
		out += fmt.Sprintf("; rows that do not fit an envelope: %s", strings.Join(names, ", "))
	}
	return out
}

func carbonModules(c *document.Carbon) string {
	var out []string
	for _, m := range c.Modules {
		out = append(out, m.Module+" "+m.Amount.String())
	}
	return strings.Join(out, ", ")
}

// percentileShort is a probability as a percentile to three figures.
func percentileShort(p document.Number) string {
	return "P" + strconv.FormatFloat(100*float64(p), 'g', 3, 64)
}

func (p *page) categories(d document.Document) {
	g := grid{columns: []column{{head: "category"}, {head: "base, " + d.Job.Currency, right: true},
		{head: "P10", right: true}, {head: "P90", right: true}}}
	for _, c := range d.Categories {
		g.add(c.Category, c.Amount.String(), chart.Money(float64(c.P10), d.Job.Currency), chart.Money(float64(c.P90), d.Job.Currency))
	}
	g.add("base estimate", d.Totals.Base.String(), "", "")
	g.write(p)
}

func (p *page) groups(d document.Document) {
	g := grid{columns: []column{{head: "group"}, {head: "pieces", right: true}, {head: "net, t", right: true},
		{head: "delivered, t", right: true}, {head: "base, " + d.Job.Currency, right: true}}}
	for _, x := range d.Groups {
		g.add(x.Group, strconv.Itoa(x.Pieces), x.Net.String(), x.Delivered.String(), x.Amount.String())
	}
	g.write(p)
}

func (p *page) members(d document.Document) {
	g := grid{columns: []column{{head: "mark"}, {head: "no.", right: true}, {head: "length", right: true},
		{head: "section"}, {head: "grade"}, {head: "governing check"},
		{head: "util.", right: true}, {head: ""}}}
	marks := unsafeMembers(d)
	for _, m := range d.Members {
		section, utilisation := m.Section, strconv.FormatFloat(float64(m.Utilisation), 'f', 2, 64)
		if section == "" {
			section, utilisation = m.Treatment, ""
		}
		length := strconv.FormatFloat(float64(m.Length), 'f', 2, 64) + " m"
		if m.ConcreteItem != "" && m.Length == 0 {
			length, section = "", "concrete"
		}
		mark := marks[m.Mark]
		if _, reasons, found := strings.Cut(mark, ": "); found {
			mark = unsafeMark + " " + reasons
		}
		g.add(m.Mark, strconv.Itoa(m.Quantity), length, section, m.Grade, m.Governing, utilisation, mark)
	}
	g.write(p)
}

func (p *page) findings(d document.Document) {
	if len(d.Findings) == 0 {
		return
	}
	p.line()
	for _, f := range d.Findings {
		severity := string(f.Severity)
		if f.Severity == document.Unsafe {
			severity = unsafeMark
		}
		p.wrap(fmt.Sprintf("%-10s", severity), shorten(plain(f.Subject), 40)+": "+f.Message)
	}
}

// column is one column of a grid. Texts stand to the left and are cut where the
// line is full; figures stand to the right and are never cut.
type column struct {
	head  string
	right bool
}

// grid is a table of cells under heads.
type grid struct {
	columns []column
	rows    [][]string
}

func (g *grid) add(cells ...string) {
	for i := range cells {
		cells[i] = plain(strings.ReplaceAll(cells[i], "\u00a0", " "))
	}
	g.rows = append(g.rows, cells)
}

// narrowest is the width below which a column of texts is not cut.
const narrowest = 6

// widths makes each column as wide as its longest cell, then takes from the
// widest columns of texts what the line cannot hold.
func (g *grid) widths() []int {
	widths := make([]int, len(g.columns))
	total := 2 * (len(widths) - 1)
	for i, c := range g.columns {
		widths[i] = utf8.RuneCountInString(c.head)
		for _, r := range g.rows {
			widths[i] = max(widths[i], utf8.RuneCountInString(r[i]))
		}
		total += widths[i]
	}
	for total > lineWidth {
		widest := -1
		for i, c := range g.columns {
			if !c.right && widths[i] > narrowest && (widest < 0 || widths[i] > widths[widest]) {
				widest = i
			}
		}
		if widest < 0 {
			break
		}
		widths[widest]--
		total--
	}
	return widths
}

// write writes the grid under a line of heads.
func (g *grid) write(p *page) {
	if len(g.rows) == 0 {
		return
	}
	widths := g.widths()
	heads := make([]string, len(g.columns))
	total := 2 * (len(widths) - 1)
	for i, c := range g.columns {
		heads[i] = c.head
		total += widths[i]
	}
	p.line()
	g.writeRow(p, heads, widths)
	p.line(strings.Repeat("-", min(total, lineWidth)))
	for _, r := range g.rows {
		g.writeRow(p, r, widths)
	}
}

func (g *grid) writeRow(p *page, row []string, widths []int) {
	cells := make([]string, len(row))
	for i, c := range g.columns {
		cells[i] = row[i]
		if !c.right {
			cells[i] = shorten(row[i], widths[i])
		}
		cells[i] = pad(cells[i], widths[i], c.right)
	}
	p.line(strings.Join(cells, "  "))
}

func pad(s string, width int, right bool) string {
	space := strings.Repeat(" ", max(0, width-utf8.RuneCountInString(s)))
	if right {
		return space + s
	}
	return s + space
}

// shorten cuts s to at most limit characters, the last an ellipsis.
func shorten(s string, limit int) string {
	runes := []rune(s)
	if len(runes) <= limit {
		return s
	}
	return strings.TrimRight(string(runes[:limit-1]), " ") + "…"
}
