package engine_test

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"
	"unicode/utf16"

	"spanwright/estimate/document"
	"spanwright/estimate/ratebook"
)

func readFile(t *testing.T, name string) []byte {
	t.Helper()
	data, err := os.ReadFile("../../testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func readRows(t *testing.T, data []byte) [][]string {
	t.Helper()
	rows, err := csv.NewReader(bytes.NewReader(data)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

// customary replaces a column's unit by a US customary one and converts its
// bare numbers. Factors: NIST SP 811, appendix B.8 (from memory): 1 ft = 0.3048 m,
// 1 lbf = 4.4482216152605 N, g0 = 9.80665 m/s².
var customary = map[string]struct {
	unit   string
	factor float64 // old unit in new units
}{
	"(m)":    {"(ft)", 1 / 0.3048},
	"(kN)":   {"(kip)", 1 / 4.4482216152605},
	"(kN/m)": {"(klf)", 0.3048 / 4.4482216152605},
	"(kg/m)": {"(lb/ft)", 0.3048 / 0.45359237},
	"(m²)":   {"(ft²)", 1 / (0.3048 * 0.3048)},
}

func toCustomary(t *testing.T, rows [][]string) {
	t.Helper()
	for k := range rows[0] {
		for old, c := range customary {
			if !strings.Contains(rows[0][k], old) {
				continue
			}
			rows[0][k] = strings.Replace(rows[0][k], old, c.unit, 1)
			for _, row := range rows[1:] {
				row[k] = convert(t, row[k], c.factor)
			}
			break
		}
	}
}

// convert converts each bare number of a cell; a number with its own unit stays.
func convert(t *testing.T, cell string, factor float64) string {
	t.Helper()
	if cell == "" || strings.Contains(cell, "kg") {
		return cell
	}
	parts := strings.Split(cell, ";")
	for i, p := range parts {
		x, err := strconv.ParseFloat(strings.TrimSpace(p), 64)
		if err != nil {
			t.Fatal(err)
		}
		parts[i] = strconv.FormatFloat(x*factor, 'g', -1, 64)
	}
	return strings.Join(parts, "; ")
}

func shuffle(rows [][]string, r *rand.Rand) [][]string {
	columns := r.Perm(len(rows[0]))
	out := make([][]string, len(rows))
	for i, row := range rows {
		out[i] = make([]string, len(row))
		for k, c := range columns {
			out[i][k] = row[c]
		}
	}
	r.Shuffle(len(out)-1, func(a, b int) { out[a+1], out[b+1] = out[b+1], out[a+1] })
	return out
}

// semicolonUTF16 writes decimal commas, semicolons and UTF-16 with a byte order
// mark, as a spreadsheet in such a locale would.
func semicolonUTF16(t *testing.T, rows [][]string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	w.Comma = ';'
	for _, row := range rows {
		out := make([]string, len(row))
		for k, c := range row {
			out[k] = c
			if _, err := strconv.ParseFloat(strings.Fields(c + " x")[0], 64); err == nil || strings.Contains(c, ";") {
				out[k] = strings.ReplaceAll(c, ".", ",")
			}
		}
		if err := w.Write(out); err != nil {
			t.Fatal(err)
		}
	}
	w.Flush()
	units := utf16.Encode([]rune("\ufeff" + b.String()))
	out := make([]byte, 0, 2*len(units))
	for _, u := range units {
		out = append(out, byte(u), byte(u>>8))
	}
	return out
}

// The order of rows and columns, units, separators and encoding are no part of
// the job: the result is the same to the last byte.
func TestTheSameJobInAnotherFormGivesTheSameResult(t *testing.T) {
	base := readRows(t, readFile(t, "brackwater.csv"))
	jobTable := readFile(t, "brackwater-job.csv")
	result := func(data []byte) string {
		d := run(t, freeze(t, readCSV(t, data, jobTable), ratebook.Ratio(), nil, quick))
		return canonical(t, d)
	}
	want := result(toCSV(base))
	r := rand.New(rand.NewPCG(5, 5))
	us := readRows(t, toCSV(base))
	toCustomary(t, us)
	for name, data := range map[string][]byte{
		"shuffled":                toCSV(shuffle(base, r)),
		"ft and kip":              toCSV(us),
		"semicolons and UTF-16":   semicolonUTF16(t, base),
		"all of it":               semicolonUTF16(t, shuffle(us, r)),
		"with a byte order mark":  append([]byte("\xef\xbb\xbf"), toCSV(base)...),
		"with Windows line ends":  bytes.ReplaceAll(toCSV(base), []byte("\n"), []byte("\r\n")),
		"with empty rows between": bytes.ReplaceAll(toCSV(base), []byte("\nPB1,"), []byte("\n"+strings.Repeat(",", len(base[0])-1)+"\nPB1,")),
	} {
		if got := result(data); got != want {
			t.Errorf("%s: the result differs: %s", name, firstDifference(got, want))
		}
	}
}

func canonical(t *testing.T, d document.Document) string {
	t.Helper()
	data, _, err := d.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

func firstDifference(a, b string) string {
	for i := range min(len(a), len(b)) {
		if a[i] != b[i] {
			return fmt.Sprintf("…%s… and …%s…", a[max(0, i-60):min(len(a), i+40)], b[max(0, i-60):min(len(b), i+40)])
		}
	}
	return "in length"
}
