package schedule

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"spanwright/estimate/sheet"
	"spanwright/structural/section"
)

// Sheets of the template beside Schedule and Job.
const (
	helpSheet  = "Help"
	listsSheet = "Lists"
)

// templateRows is how many rows the template's drop-down lists reach.
const templateRows = 1000

// exampleRow fills the first row of the template, which reads without a fault.
var exampleRow = map[columnID]string{
	colMark: "B1", colGroup: "Loading boom", colQuantity: "4", colLength: "6.5", colSupport: simple, colPermanent: "2.5", colVariable: "4",
	colProduct: "IPE", colGrade: "S355", colKind: "beam", colDescription: "floor beam, axis 3", colRestraint: "2", colLimit: "L/250",
	colConnection: simpleBeams, colRemarks: "an example: write over it",
}

// jobValues fill the template's Job sheet: what most jobs look at first. All other
// keys stay blank and take what their row says.
var jobValues = map[jobID]string{
	jobProject: "Brackwater loading quay", jobScheme: "tower at the end", jobStandard: defaultBasis, jobClass: "5", jobCurrency: defaultCurrency, jobConfidence: "P80",
}

// Template returns an empty schedule as a workbook (XLSX) to be filled in: a sheet
// Schedule with every column, one example row and drop-down lists; a sheet Job with
// every key; empty sheets Definition and Risks; a sheet Help that explains every
// column and key; the lists. A list offers and does not bind: other entries are typed over it. Read reads it without a fault.
func Template() ([]byte, error) {
	b := sheet.NewBuilder()
	l := lists{}
	writeSchedule(b, &l)
	writeJob(b, &l)
	writeAnnex(b, &l, besides[besideDefinition], DefinitionColumns())
	writeAnnex(b, &l, besides[besideRisks], RiskColumns())
	writeHelp(b)
	l.write(b)
	data, err := b.Bytes()
	if err != nil {
		return nil, fmt.Errorf("template: %w", err)
	}
	return data, nil
}

func writeSchedule(b *sheet.Builder, l *lists) {
	heads, row := make([]sheet.Column, columnCount), make([]sheet.Value, columnCount)
	for i, c := range Columns() {
		heads[i] = sheet.Column{Head: c.Header, Width: float64(max(12, min(26, len(c.Header)+2)))}
		row[i] = valueOf(exampleRow[columnID(i)])
	}
	b.Sheet("Schedule", heads...)
	b.Row(row...)
	offer(b, l, Columns())
}

// writeAnnex writes a sheet with heads and drop-down lists and no row.
func writeAnnex(b *sheet.Builder, l *lists, name string, columns []Column) {
	heads := make([]sheet.Column, len(columns))
	for i, c := range columns {
		heads[i] = sheet.Column{Head: c.Header, Width: 26}
	}
	b.Sheet(name, heads...)
	offer(b, l, columns)
}

// offer lays the drop-down lists of the columns on the rows of the current sheet.
func offer(b *sheet.Builder, l *lists, columns []Column) {
	for i, c := range columns {
		if len(c.Choices) > 0 {
			name := sheet.Letters(i + 1)
			b.Choices(fmt.Sprintf("%s2:%s%d", name, name, templateRows), l.add(c))
		}
	}
}

func writeJob(b *sheet.Builder, l *lists) {
	blank, meaning := 12, 12 // wide enough for every text: rows do not grow with wrapped ones
	for _, c := range JobKeys() {
		blank, meaning = max(blank, utf8.RuneCountInString(c.Blank)), max(meaning, utf8.RuneCountInString(c.Meaning))
	}
	b.Sheet("Job", sheet.Column{Head: "Key", Width: 24}, sheet.Column{Head: "Value", Width: 28},
		sheet.Column{Head: "Where blank", Width: float64(blank)}, sheet.Column{Head: "Meaning", Width: float64(meaning)})
	for i, c := range JobKeys() {
		n := b.Row(sheet.TextOf(c.Header), valueOf(jobValues[jobID(i)]).Input(), sheet.TextOf(c.Blank), sheet.TextOf(c.Meaning))
		if len(c.Choices) > 0 {
			b.Choices("B"+strconv.Itoa(n), l.add(c))
		}
	}
}

// helpWidths are those of the columns of Help in characters; longer texts run over
// several rows.
var helpWidths = []int{11, 34, 9, 60, 48, 34, 26}

func writeHelp(b *sheet.Builder) {
	columns := make([]sheet.Column, len(helpWidths))
	for i, head := range []string{"Sheet", "Head or key", "Needed", "Meaning", "Accepted", "Where blank", "Example"} {
		columns[i] = sheet.Column{Head: head, Width: float64(helpWidths[i])}
	}
	b.Sheet(helpSheet, columns...)
	for _, part := range []struct {
		name string
		list []Column
	}{{"Schedule", Columns()}, {besides[besideJob], JobKeys()}, {besides[besideDefinition], DefinitionColumns()}, {besides[besideRisks], RiskColumns()}} {
		for _, c := range part.list {
			needed := ""
			if c.Obligatory {
				needed = "always"
			}
			helpRows(b, part.name, c.Header, needed, c.Meaning, c.Accepts, c.Blank, c.Example)
		}
	}
}

// helpRows writes texts side by side, each in as many rows as it needs.
func helpRows(b *sheet.Builder, texts ...string) {
	cells, longest := make([][]string, len(texts)), 0
	for i, t := range texts {
		cells[i] = wrap(t, helpWidths[i])
		longest = max(longest, len(cells[i]))
	}
	for n := range longest {
		row := make([]sheet.Value, len(texts))
		for i, lines := range cells {
			if n < len(lines) {
				row[i] = sheet.TextOf(lines[n])
			}
		}
		b.Row(row...)
	}
}

// wrap breaks a text between words into lines of at most width characters; a word
// that is longer stands alone.
func wrap(text string, width int) []string {
	var lines []string
	for _, word := range strings.Fields(text) {
		last := len(lines) - 1
		if last >= 0 && utf8.RuneCountInString(lines[last])+1+utf8.RuneCountInString(word) <= width {
			lines[last] += " " + word
		} else {
			lines = append(lines, word)
		}
	}
	return lines
}

// valueOf is a number where the text is one.
func valueOf(text string) sheet.Value {
	if text == "" {
		return sheet.Blank()
	}
	if _, err := strconv.ParseFloat(text, 64); err == nil {
		return sheet.NumberOf(text, sheet.General)
	}
	return sheet.TextOf(text)
}

// lists are the columns of the sheet Lists, equal ones held once.
type lists struct {
	heads  []string
	values [][]string
}

// add keeps the choices of a column and returns where they will stand.
func (l *lists) add(c Column) string {
	i := slices.IndexFunc(l.values, func(v []string) bool { return slices.Equal(v, c.Choices) })
	if i < 0 {
		i = len(l.values)
		l.heads, l.values = append(l.heads, c.Header), append(l.values, c.Choices)
	}
	name := sheet.Letters(i + 1)
	return fmt.Sprintf("%s!$%s$2:$%s$%d", listsSheet, name, name, len(c.Choices)+1)
}

func (l *lists) write(b *sheet.Builder) {
	heads, longest := make([]sheet.Column, len(l.heads)), 0
	for i, h := range l.heads {
		heads[i] = sheet.Column{Head: h, Width: 22}
		longest = max(longest, len(l.values[i]))
	}
	b.Sheet(listsSheet, heads...)
	for n := range longest {
		row := make([]sheet.Value, len(l.values))
		for i, v := range l.values {
			if n < len(v) {
				row[i] = sheet.TextOf(v[n])
			}
		}
		b.Row(row...)
	}
}

func list(words ...string) func() []string { return func() []string { return slices.Clone(words) } }

// families are those that a member can be sized from.
func families() []string {
	var names []string
	for _, f := range section.Families() {
		if f.Sizes > 0 {
			names = append(names, f.Name)
		}
	}
	return names
}

// kinds are the usual ones; any other text is a kind too.
func kinds() []string {
	return []string{"beam", "cross beam", "bracket", "purlin", "boom", "column", "post", "leg", "tower", "chord", "diagonal", "bracing", "grating", "handrail", "stair", "ladder", "base plate", KindFoundation}
}

func limitChoices() []string {
	return []string{"L/180", "L/200", "L/250", "L/300", "L/360", "L/500", "none"}
}

func terrainNames() []string { return slices.Clone(terrains) }
