package workbook

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// ties are lines whose product of quantity and unit price lies half-way between
// two minor units. Quantities have three decimals, rates and multipliers up to four.
func ties(t *testing.T, c money.Currency, count int) []plainLine {
	t.Helper()
	rates := []string{"1", "0.5", "3", "7.5", "19.25", "900", "2160", "0.35", "1.1", "1234.5", "98765.4321"}
	multipliers := [][]string{nil, {"1.05"}, {"1.15", "0.9725"}, {"1.1", "1.0001"}, {"0.9"}, {"3"}, {"1.25", "1.3", "0.8"}}
	categories := []string{"material", "fabrication", "coating", "inspection", "shipping", "erection"}
	half := decimal(t, "0.5")
	var out []plainLine
	for i := int64(1); len(out) < count && i < 4_000_000; i++ {
		// A step of 7919 thousandths, a prime, walks through small and large quantities.
		q := money.FromInt(i * 7919 % 98_000_003).Mul(decimal(t, "0.001"))
		rate, ms := rates[i%int64(len(rates))], multipliers[(i/11)%int64(len(multipliers))]
		unit := decimal(t, rate)
		for _, m := range ms {
			unit = unit.Mul(decimal(t, m))
		}
		p, err := money.Product(q, unit.Round(8).Round(c.MinorDigits+2))
		if err != nil {
			continue
		}
		minor := p
		for range c.MinorDigits {
			minor = minor.Mul(money.FromInt(10))
		}
		if below := c.Round(p).Sub(p); below.Sign() > 0 && minor.Sub(minor.Sub(half).Round(0)).Equal(half) {
			out = append(out, plainLine{fmt.Sprint("group ", i%3), categories[i%6], q.String(), rate, ms})
		}
	}
	if len(out) < count {
		t.Fatalf("only %d ties of %d found", len(out), count)
	}
	return out
}

// hard are lines that an unlucky rounding gets wrong: classical ties that no
// binary number holds, ties of large amounts, and products that differ from a
// tie in the ninth or a later decimal only.
var hard = []plainLine{
	{"a", "material", "1.005", "1", nil}, {"a", "material", "2.675", "1", nil}, {"a", "material", "0.285", "1", nil}, {"a", "material", "1.115", "1", nil},
	{"a", "material", "0.0005", "1", nil}, {"a", "material", "0.5", "1", nil}, {"a", "material", "1.5", "1", nil}, {"a", "material", "2.5", "1", nil},
	{"b", "coating", "0.005", "1", []string{"0.9999", "1.0001"}}, {"b", "coating", "0.0005", "1", []string{"0.9999", "1.0001"}},
	{"b", "coating", "0.5", "1", []string{"0.9999", "1.0001"}}, {"b", "coating", "1.005", "1", []string{"0.9999", "1.0001"}},
	{"b", "coating", "0.05", "0.1", []string{"0.9999", "1.0001"}},
	{"c", "erection", "9876543.215", "1000", nil}, {"c", "erection", "9876543.5", "1000.001", nil}, {"c", "erection", "1234567890.125", "1", nil},
	{"c", "erection", "987654321.2345", "1", nil}, {"c", "erection", "99999999.995", "100", nil}, {"c", "erection", "33333333.335", "3", nil},
	{"c", "erection", "1234567.8905", "10", nil}, {"c", "erection", "12345678.5", "1.05", []string{"1.1"}},
	{"d", "shipping", "0.000", "900", nil}, {"d", "shipping", "-1.005", "1", nil},
}

// recalculated is a workbook with the document that its recalculation must reach.
type recalculated struct {
	data []byte
	want document.Document
	base money.Decimal // as priced, before a change
}

// LibreOffice, an independent calculator, must reach the document's figures to the
// last digit, in currencies of no, two and three decimals: 40 random documents, and
// the same workbooks after one input was changed in the file, against what the same
// change of the inputs gives by exact decimals.
func TestRecalculationReachesTheDocument(t *testing.T) {
	demo := brackwater(t)
	books := map[string]recalculated{"demo": {write(t, demo), demo, demo.Totals.Base}}
	tied := tiedQuantities(t)
	books["tied quantities"] = recalculated{write(t, tied), tied, tied.Totals.Base}
	currencies := []string{"JPY", "EUR", "KWD"}
	for _, code := range currencies {
		c, err := money.FindCurrency(code)
		if err != nil {
			t.Fatal(err)
		}
		d := estimate(t, code, append(ties(t, c, 300), hard...))
		books["ties "+code] = recalculated{write(t, d), d, d.Totals.Base}
	}
	broken := 0
	for i := range 40 {
		d, g := unitRate(t, uint64(i), currencies[i%3], nil)
		broken += g.ties
		data := write(t, d)
		name := fmt.Sprintf("random %d", i)
		books[name] = recalculated{data, d, d.Totals.Base}
		id, cell := changeOf(g, i)
		to := fresh(g.values[id])
		after, _ := unitRate(t, uint64(i), currencies[i%3], map[string]string{id: to})
		if strings.HasPrefix(id, "multiplier/") && after.Totals.Base.Equal(d.Totals.Base) {
			t.Errorf("%s: %s moves nothing", name, id)
		}
		books[name+" changed"] = recalculated{changeCell(t, data, cell, to), after, d.Totals.Base}
	}
	t.Logf("%d workbooks, %d rounded ties in the random documents", len(books), broken)
	if broken < 40 {
		t.Errorf("the random documents round %d ties, too few to mean something", broken)
	}
	bytes := map[string][]byte{}
	for name, b := range books {
		bytes[name] = b.data
	}
	calculated := recalculate(t, bytes)
	for name, b := range books {
		t.Run(name, func(t *testing.T) { compare(t, b, calculated[name]) })
	}
}

// changeOf is the input that a document's change is made in, and the name of its
// cell: a multiplier in three of four, else a price, a shared factor of prices or
// an allowance.
func changeOf(g *generator, i int) (id, cell string) {
	others := []string{"rate/site labour", "exchange/USD", "allowance/growth/4", "escalation/steel/base date", "norm/site hours", "rate/margin", "carbon/A4"}
	cells := []string{"price_site_labour", "exchange_usd", "allowance_growth_4", "escalation_steel_base_date", "allowance_norm_site_hours", "fraction_margin", "carbon_a4"}
	if i%4 == 3 {
		k := i / 4 % len(others)
		return others[k], cells[k]
	}
	var multipliers []string
	for _, id := range sortedKeys(g.values) {
		if strings.HasPrefix(id, "multiplier/") {
			multipliers = append(multipliers, id)
		}
	}
	id = multipliers[i%len(multipliers)]
	return id, regexp.MustCompile("[^a-z0-9]+").ReplaceAllString(id, "_")
}

var definedName = regexp.MustCompile(`<definedName[^>]* name="([^"]*)"[^>]*>([^<]*)</definedName>`)

// changeCell puts a number in the cell of a name, as a person would in the sheet.
func changeCell(t *testing.T, data []byte, name, value string) []byte {
	t.Helper()
	all := parts(t, data, "")
	for _, m := range definedName.FindAllStringSubmatch(string(all["xl/workbook.xml"]), -1) {
		if m[1] != name {
			continue
		}
		sheetName, cell, _ := strings.Cut(strings.NewReplacer("$", "", "&#39;", "").Replace(m[2]), "!")
		part := partOf(t, all["xl/workbook.xml"], sheetName)
		pattern := regexp.MustCompile(`(<c r="` + cell + `"[^>]*>)<v>[^<]*</v>`)
		if !pattern.Match(all[part]) {
			t.Fatalf("%s: no number in %s of %s", name, cell, part)
		}
		all[part] = pattern.ReplaceAll(all[part], []byte("${1}<v>"+value+"</v>"))
		return archive(t, all)
	}
	t.Fatalf("no cell has the name %s", name)
	return nil
}

var sheetTag = regexp.MustCompile(`<sheet name="([^"]*)" sheetId="(\d+)"`)

// partOf is the part of a sheet; the writer numbers them in their order.
func partOf(t *testing.T, workbook []byte, name string) string {
	t.Helper()
	for _, m := range sheetTag.FindAllStringSubmatch(string(workbook), -1) {
		if m[1] == name {
			return "xl/worksheets/sheet" + m[2] + ".xml"
		}
	}
	t.Fatalf("no sheet %q", name)
	return ""
}

// headed finds a column by its head.
func headed(t *testing.T, rows [][]string, head string) int {
	t.Helper()
	for i, s := range rows[0] {
		if s == head {
			return i
		}
	}
	t.Fatalf("no column %q in %q", head, rows[0])
	return 0
}

func compare(t *testing.T, b recalculated, book map[string][][]string) {
	t.Helper()
	d := b.want
	// equal tells whether a calculated text is the amount; the file has as many
	// digits as the float needs, and the amount at most 15.
	equal := func(where, got string, want money.Decimal) {
		t.Helper()
		x, err := strconv.ParseFloat(got, 64)
		if err != nil || x != want.Float64() {
			t.Errorf("%s: LibreOffice calculates %q, the document says %s", where, got, want)
		}
	}
	lines, code := book[linesSheet], d.Job.Currency
	quantity, unit, amount := headed(t, lines, "quantity"), headed(t, lines, "unit price"), headed(t, lines, "amount, "+code)
	for i, l := range d.Lines {
		what := fmt.Sprintf("%s: %s × %s × %v", l.ID, l.Quantity, l.Rate, l.Multipliers)
		equal(what+" quantity", lines[1+i][quantity], l.Quantity)
		equal(what+" unit price", lines[1+i][unit], l.UnitPrice)
		equal(what, lines[1+i][amount], l.Amount)
	}
	equal("base on Lines", lines[1+len(d.Lines)][amount], d.Totals.Base)
	for i, c := range d.Categories {
		equal(c.Category, book[categoriesSheet][1+i][1], c.Amount)
	}
	equal("base on Categories", book[categoriesSheet][1+len(d.Categories)][1], d.Totals.Base)
	for i, g := range d.Groups {
		equal(g.Group, book[groupsSheet][1+i][1], g.Amount)
		equal(g.Group+" delivered", book[groupsSheet][1+i][3], g.Delivered)
	}
	equal("base on Groups", book[groupsSheet][1+len(d.Groups)][1], d.Totals.Base)
	compareQuantities(t, d, book, equal)
	compareSummary(t, b, book[summarySheet], equal)
}

func compareQuantities(t *testing.T, d document.Document, book map[string][][]string, equal func(string, string, money.Decimal)) {
	t.Helper()
	row, at := 1, headed(t, book[takeoffSheet], "quantity")
	for i, it := range d.Items {
		equal(it.ID+" purchased", book[itemsSheet][1+i][3], it.Purchased)
		for _, q := range it.Quantities {
			equal(it.ID+" "+q.Driver, book[takeoffSheet][row][at], q.Value)
			row++
		}
	}
	if d.Carbon == nil {
		return
	}
	for i, l := range d.Carbon.Lines {
		equal(l.ID, book[carbonSheet][1+i][7], l.Amount)
	}
	equal("carbon", book[carbonSheet][1+len(d.Carbon.Lines)][7], d.Carbon.Total)
	for i, m := range d.Carbon.Modules {
		equal("carbon "+m.Module, book[carbonSheet][2+len(d.Carbon.Lines)+i][7], m.Amount)
	}
}

func compareSummary(t *testing.T, b recalculated, rows [][]string, equal func(string, string, money.Decimal)) {
	t.Helper()
	want := map[string]money.Decimal{"base estimate": b.want.Totals.Base, "base as priced by the service": b.base,
		"difference": b.want.Totals.Base.Sub(b.base), "delivered, t": b.want.Totals.Delivered}
	if b.want.Totals.Base.Equal(b.base) {
		want["contingency"] = b.want.Totals.Contingency
	}
	seen := 0
	for _, r := range rows {
		if w, ok := want[r[0]]; ok {
			equal(r[0]+" on Summary", r[1], w)
			seen++
		}
	}
	if seen != len(want) {
		t.Errorf("found %d of %d totals on Summary", seen, len(want))
	}
}
