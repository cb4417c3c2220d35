package workbook

import (
	"archive/zip"
	"bytes"
	"context"
	"encoding/csv"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"time"

	"spanwright/estimate/document"
	"spanwright/estimate/money"
	"spanwright/estimate/sheet"
)

// parts returns the parts of an archive whose name begins with one of the
// prefixes.
func parts(t *testing.T, data []byte, prefixes ...string) map[string][]byte {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	out := map[string][]byte{}
	for _, f := range z.File {
		for _, p := range prefixes {
			if !strings.HasPrefix(f.Name, p) {
				continue
			}
			r, err := f.Open()
			if err != nil {
				t.Fatal(err)
			}
			if out[f.Name], err = io.ReadAll(r); err != nil {
				t.Fatal(err)
			}
		}
	}
	return out
}

var textPattern = regexp.MustCompile(`<t[^>]*>([^<]+)</t>`)

// textsOf returns the texts of cells in a part of a workbook.
func textsOf(xml []byte) []string {
	var out []string
	for _, m := range textPattern.FindAllSubmatch(xml, -1) {
		out = append(out, string(m[1]))
	}
	return out
}

var formulaPattern = regexp.MustCompile(`(<f>[^<]*</f>)<v>[^<]*</v>`)

// withoutCachedValues takes the cached value from every formula, so that a
// program that opens the workbook must calculate. It returns how many there were.
func withoutCachedValues(t *testing.T, data []byte) ([]byte, int) {
	t.Helper()
	count := 0
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for name, part := range parts(t, data, "") {
		if strings.HasPrefix(name, "xl/worksheets/sheet") {
			count += len(formulaPattern.FindAll(part, -1))
			part = formulaPattern.ReplaceAll(part, []byte("$1"))
		}
		f, err := w.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := f.Write(part); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes(), count
}

// recalculate lets LibreOffice calculate workbooks without their cached values
// and returns, by name and sheet, their records. One start of LibreOffice takes
// them all. It fails where soffice is missing.
func recalculate(t *testing.T, books map[string][]byte) map[string]map[string][][]string {
	t.Helper()
	soffice, err := exec.LookPath("soffice")
	if err != nil {
		t.Fatalf("this test needs LibreOffice (libreoffice-calc-nogui): %v", err)
	}
	dir := t.TempDir()
	// 44 comma, 34 quote, 76 UTF-8; values as they are, not as shown; -1: every sheet.
	args := []string{"--headless", "-env:UserInstallation=file://" + filepath.Join(dir, "profile"),
		"--convert-to", "csv:Text - txt - csv (StarCalc):44,34,76,1,,0,false,false,false,false,false,-1", "--outdir", dir}
	for name, data := range books {
		bare, formulas := withoutCachedValues(t, data)
		if formulas == 0 {
			t.Fatalf("%s: the workbook has no formula with a cached value", name)
		}
		file := filepath.Join(dir, name+".xlsx")
		if err := os.WriteFile(file, bare, 0o600); err != nil {
			t.Fatal(err)
		}
		args = append(args, file)
	}
	ctx, cancel := context.WithTimeout(context.Background(), 3*time.Minute)
	defer cancel()
	if answer, err := exec.CommandContext(ctx, soffice, args...).CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, answer)
	}
	out := map[string]map[string][][]string{}
	for name := range books {
		out[name] = map[string][][]string{}
		for _, s := range []string{summarySheet, linesSheet, categoriesSheet, groupsSheet, takeoffSheet} {
			out[name][s] = records(t, filepath.Join(dir, name+"-"+s+".csv"))
		}
	}
	return out
}

func records(t *testing.T, file string) [][]string {
	t.Helper()
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(bytes.NewReader(text))
	r.FieldsPerRecord = -1
	out, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// ties are lines whose exact product lies half-way between two minor units.
// Quantities have three decimals, rates and multipliers up to four.
func ties(t *testing.T, c money.Currency, count int) []priced {
	t.Helper()
	rates := []string{"1", "0.5", "3", "7.5", "19.25", "900", "2160", "0.35", "1.1", "1234.5", "98765.4321"}
	multipliers := [][]string{nil, {"1.05"}, {"1.15", "0.9725"}, {"1.1", "1.0001"}, {"0.9"}, {"3"}, {"1.25", "1.3", "0.8"}}
	categories := []string{"material", "fabrication", "coating", "inspection", "shipping", "erection"}
	half := decimal(t, "0.5")
	var out []priced
	for i := int64(1); len(out) < count && i < 4_000_000; i++ {
		// A step of 7919 thousandths, a prime, walks through small and large quantities.
		q := money.FromInt(i * 7919 % 98_000_003).Mul(decimal(t, "0.001"))
		rate, ms := rates[i%int64(len(rates))], multipliers[(i/11)%int64(len(multipliers))]
		factors := []money.Decimal{q, decimal(t, rate)}
		for _, m := range ms {
			factors = append(factors, decimal(t, m))
		}
		p, err := money.Product(factors...)
		if err != nil {
			continue
		}
		minor := p
		for range c.MinorDigits {
			minor = minor.Mul(money.FromInt(10))
		}
		if below := c.Round(p).Sub(p); below.Sign() > 0 && minor.Sub(minor.Sub(half).Round(0)).Equal(half) {
			out = append(out, priced{fmt.Sprint("group ", i%3), categories[i%6], q.String(), rate, ms})
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
var hard = []priced{
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

// LibreOffice, an independent calculator, must reach the document's amounts to
// the last digit, in currencies of no, two and three decimals.
func TestRecalculationReachesTheDocument(t *testing.T) {
	docs := map[string]document.Document{"demo": brackwater(t)}
	for _, code := range []string{"JPY", "EUR", "KWD"} {
		c, err := money.FindCurrency(code)
		if err != nil {
			t.Fatal(err)
		}
		docs[code] = estimate(t, code, append(ties(t, c, 300), hard...))
	}
	books := map[string][]byte{}
	for name, d := range docs {
		books[name] = write(t, d)
	}
	calculated := recalculate(t, books)
	for name, d := range docs {
		t.Run(name, func(t *testing.T) { compare(t, d, calculated[name]) })
	}
}

func compare(t *testing.T, d document.Document, book map[string][][]string) {
	t.Helper()
	// equal tells whether a calculated text is the amount; the file has as many
	// digits as the float needs, and the amount at most 15.
	equal := func(where, got string, want money.Decimal) {
		t.Helper()
		x, err := strconv.ParseFloat(got, 64)
		if err != nil || x != want.Float64() {
			t.Errorf("%s: LibreOffice calculates %q, the document says %s", where, got, want)
		}
	}
	amount := 7 + mostMultipliers(d)
	lines := book[linesSheet]
	for i, l := range d.Lines {
		equal(fmt.Sprintf("%s: %s × %s × %v", l.ID, l.Quantity, l.Rate, l.Multipliers), lines[1+i][amount], l.Amount)
	}
	equal("base on Lines", lines[1+len(d.Lines)][amount], d.Totals.Base)
	for i, cat := range d.Categories {
		equal(cat.Category, book[categoriesSheet][1+i][1], cat.Amount)
	}
	equal("base on Categories", book[categoriesSheet][1+len(d.Categories)][1], d.Totals.Base)
	for i, g := range d.Groups {
		equal(g.Group, book[groupsSheet][1+i][1], g.Amount)
	}
	equal("base on Groups", book[groupsSheet][1+len(d.Groups)][1], d.Totals.Base)
	seen := 0
	for _, r := range book[summarySheet] {
		switch r[0] {
		case "base estimate":
			equal("base on Summary", r[1], d.Totals.Base)
			seen++
		case "contingency":
			equal("contingency on Summary", r[1], d.Totals.Contingency)
			seen++
		}
	}
	if seen != 2 {
		t.Errorf("found %d of 2 totals on Summary", seen)
	}
}

// The formulas are what the sheet's reader sees: the usual product is rounded to
// eight places first.
func TestFormulas(t *testing.T) {
	d := estimate(t, "EUR", []priced{
		{"boom", "material", "81.915", "900", nil},
		{"boom", "fabrication", "0.005", "1", []string{"0.9999", "1.0001"}},
		{"boom", "fabrication", "1234567890.125", "1", nil},
	})
	xml := parts(t, write(t, d), "xl/worksheets/sheet")
	var all string
	for _, x := range xml {
		all += string(x)
	}
	for _, want := range []string{
		"<f>ROUND(ROUND(E2*G2,8),2)</f><v>73723.5</v>",
		"<f>ROUND(ROUND(E3*G3*H3*I3,11),2)</f><v>0</v>",
		"<f>ROUND(ROUND(E4*G4,5),2)</f><v>1234567890.13</v>",
		"<f>ROUND(SUM(J2:J4),2)</f><v>1234641613.63</v>",
		"<f>ROUND(SUMIF(Lines!$C$2:$C$4,A2,Lines!$J$2:$J$4),2)</f><v>73723.5</v>",
		"<f>Lines!J5</f><v>1234641613.63</v>",
	} {
		if !strings.Contains(all, want) {
			t.Errorf("no %s in the sheets", want)
		}
	}
	names := parts(t, write(t, d), "xl/workbook.xml")["xl/workbook.xml"]
	for _, name := range []string{NameBase, NameContingency, NameAtConfidence, "percentile_10", "percentile_50", "percentile_80", "percentile_90"} {
		if !regexp.MustCompile(`<definedName[^>]* name="` + name + `"[^>]*>Summary!\$B\$\d+</definedName>`).Match(names) {
			t.Errorf("no name %s in %s", name, names)
		}
	}
	if sheet.Letters(10) != "J" {
		t.Error("the amounts stand in another column than this test reads")
	}
}
