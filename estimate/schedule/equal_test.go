package schedule

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"testing"
	"unicode/utf16"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"spanwright/estimate/sheet"
)

// same compares schedules apart from the rows that they came from.
func same(a, b Schedule) string { return cmp.Diff(a, b, cmpopts.IgnoreFields(Member{}, "Row")) }

// number parts of cells are turned by a function, units replaced in headers.
func convert(t *testing.T, rows [][]string, from, to string, factor float64) [][]string {
	t.Helper()
	out := make([][]string, len(rows))
	for i, r := range rows {
		out[i] = slices.Clone(r)
	}
	for j, header := range rows[0] {
		if !strings.Contains(header, "("+from+")") && !strings.Contains(header, "("+from+",") {
			continue
		}
		out[0][j] = strings.Replace(header, "("+from, "("+to, 1)
		for i := range rows[1:] {
			parts := strings.Split(rows[i+1][j], "; ")
			for k, p := range parts {
				text, word, _ := strings.Cut(p, " ")
				if x, err := strconv.ParseFloat(text, 64); err == nil {
					parts[k] = strings.TrimSpace(strconv.FormatFloat(x/factor, 'g', 13, 64) + " " + word)
				}
			}
			out[i+1][j] = strings.Join(parts, "; ")
		}
	}
	return out
}

// Exact definitions of the foot (1959) and the pound-force (NIST SP 811, appendix B).
const (
	footInMetres = 0.3048
	kipInKN      = 4.4482216152605
)

func TestSameInOtherUnits(t *testing.T) {
	want := mustRead(t, csvOf(everyColumn...), Options{})
	rows := convert(t, everyColumn, "m", "ft", footInMetres)
	rows = convert(t, rows, "kN/m", "kip/ft", kipInKN/footInMetres)
	rows = convert(t, rows, "kN", "kip", kipInKN)
	rows = convert(t, rows, "kN/m²", "ksf", kipInKN/footInMetres/footInMetres)
	rows = convert(t, rows, "m³", "yd³", 27*footInMetres*footInMetres*footInMetres)
	if rows[1][3] == "6" || rows[1][5] == "2.5" || rows[7][17] == "0 fixed; 28; 42" {
		t.Fatalf("the test converts nothing: %q", rows[1])
	}
	if diff := same(want, mustRead(t, csvOf(rows...), Options{})); diff != "" {
		t.Errorf("in feet and kips (-want +got):\n%s", diff)
	}
}

func TestSameUnderShuffle(t *testing.T) {
	want := mustRead(t, csvOf(everyColumn...), Options{})
	rapid.Check(t, func(rt *rapid.T) {
		order := rapid.Permutation(indices(len(everyColumn)-1)).Draw(rt, "rows")
		columns := rapid.Permutation(indices(len(everyColumn[0]))).Draw(rt, "columns")
		rows := [][]string{pick(everyColumn[0], columns)}
		for _, i := range order {
			rows = append(rows, pick(everyColumn[i+1], columns))
		}
		got, err := readCSV(t, csvOf(rows...), Options{})
		if err != nil {
			rt.Fatal(err)
		}
		if diff := same(want, got); diff != "" {
			rt.Fatalf("shuffled (-want +got):\n%s", diff)
		}
	})
}

func indices(n int) []int {
	list := make([]int, n)
	for i := range list {
		list[i] = i
	}
	return list
}

func pick(row []string, order []int) []string {
	out := make([]string, len(order))
	for k, i := range order {
		out[k] = row[i]
	}
	return out
}

func TestSameInOtherEncodings(t *testing.T) {
	want := mustRead(t, csvOf(everyColumn...), Options{})
	comma := strings.NewReplacer(".", ",")
	var lines []string
	for i, r := range everyColumn {
		cells := slices.Clone(r)
		for j := range cells {
			if i > 0 {
				cells[j] = comma.Replace(cells[j])
			}
			cells[j] = strconv.Quote(cells[j])
		}
		lines = append(lines, strings.Join(cells, ";"))
	}
	text := strings.Join(lines, "\r\n") + "\r\n"
	for name, data := range map[string][]byte{"UTF-8": []byte(text), "UTF-16": utf16LE(text)} {
		book, err := sheet.Open(data, "test.csv", "", sheet.DefaultLimits())
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if !book.DecimalComma() {
			t.Fatalf("%s: decimal commas are not found", name)
		}
		got, err := Read(context.Background(), book, Options{})
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if diff := same(want, got); diff != "" {
			t.Errorf("semicolons and decimal commas in %s (-want +got):\n%s", name, diff)
		}
	}
	got, err := Read(context.Background(), workbook(t, everyColumn, nil, nil), Options{})
	if err != nil {
		t.Fatal(err)
	}
	if diff := same(want, got); diff != "" {
		t.Errorf("as a workbook (-want +got):\n%s", diff)
	}
}

func utf16LE(text string) []byte {
	data := []byte{0xff, 0xfe}
	for _, u := range utf16.Encode([]rune(text)) {
		data = append(data, byte(u), byte(u>>8))
	}
	return data
}

// toJSON writes a table as posted JSON; numbers in the texts become numbers.
func toJSON(t *testing.T, rows, job [][]string) []byte {
	t.Helper()
	value := func(text string) any {
		if _, err := strconv.ParseFloat(text, 64); err == nil && json.Valid([]byte(text)) {
			return json.Number(text)
		}
		return text
	}
	posted := map[string]any{}
	var list []map[string]any
	for _, r := range rows[1:] {
		m := map[string]any{}
		for j, text := range r {
			if text != "" {
				m[rows[0][j]] = value(text)
			}
		}
		list = append(list, m)
	}
	posted["rows"] = list
	if job != nil {
		settings := map[string]any{}
		for _, r := range job[1:] {
			settings[r[0]] = value(r[1])
		}
		posted["job"] = settings
	}
	data, err := json.Marshal(posted)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func TestSameAsJSON(t *testing.T) {
	want, err := Read(context.Background(), workbook(t, everyColumn, job, nil), Options{})
	if err != nil {
		t.Fatal(err)
	}
	got, err := ReadJSON(context.Background(), toJSON(t, everyColumn, job), Options{})
	if err != nil {
		t.Fatal(err)
	}
	if diff := same(want, got); diff != "" {
		t.Errorf("as JSON (-want +got):\n%s", diff)
	}
	if at := got.Members[0].Row.String(); at != "rows!2" {
		t.Errorf("B2 comes from %s, want rows!2", at)
	}
}

// No content of any cell makes the reader panic, and one bad cell never hides that
// the schedule is refused: the answer is a schedule or a list of faults.
func TestAnyCellContent(t *testing.T) {
	texts := rapid.OneOf(
		rapid.String(), rapid.StringMatching(`-?[0-9]{1,3}([.,][0-9]{1,3})? ?(m|ft|kN|kN/m|kip/ft|ton|kg/m)?`),
		rapid.SampledFrom([]string{"", "NaN", "Inf", "1e308", "-0", "0", "6/12", "fixed", "; ;", "0 fixed fixed", "2 moment; 1 pinned", "; 3 moment", "12; ; 15 m", "yes", "over water;", "L/", "P", "%", "=1+1", "IPE", "#N/A", "null"}),
		rapid.StringMatching(`[A-Za-z ]{0,8} ?[\(\[][a-z/²,+ ]{0,6}[\)\]]`),
	)
	rapid.Check(t, func(rt *rapid.T) {
		rows := with(t)
		for range rapid.IntRange(1, 6).Draw(rt, "changes") {
			i := rapid.IntRange(0, len(rows)-1).Draw(rt, "row")
			j := rapid.IntRange(0, len(rows[0])-1).Draw(rt, "column")
			rows[i][j] = texts.Draw(rt, "text")
		}
		settings := [][]string{{"Key", "Value"}, {"Factor", texts.Draw(rt, "factor")}, {"Confidence", texts.Draw(rt, "confidence")}, {texts.Draw(rt, "key"), "1"}}
		for _, key := range []string{"Stock lengths (m)", "Kerf", "Purchase", "Money", "Spend date", "Site conditions", "Haul distance", "Tax (%)", "Owner's costs", "Management reserve"} {
			settings = append(settings, []string{key, texts.Draw(rt, key)})
		}
		check := func(s Schedule, err error) {
			if err == nil && len(s.Members) == 0 {
				rt.Fatal("neither members nor faults")
			}
			var f sheet.Faults
			if errors.As(err, &f) {
				for _, one := range f {
					if one.Problem == "" || one.Remedy == "" {
						rt.Fatalf("a fault without problem or remedy: %+v", one)
					}
				}
			}
		}
		check(ReadJSON(context.Background(), toJSON(t, rows, settings), Options{}))
		book, err := sheet.Open([]byte(csvOf(rows...)), "", "", sheet.DefaultLimits())
		if err != nil {
			return
		}
		check(Read(context.Background(), book, Options{JobTable: []byte(csvOf(settings...))}))
	})
}

func BenchmarkReadJSON(b *testing.B) {
	var rows []string
	for i := range 10_000 {
		rows = append(rows, fmt.Sprintf(`{"Mark":"B%d","Quantity":1,"Length (m)":6,"Section or family":"IPE","Permanent load (kN/m)":1,"Variable load (kN/m)":2}`, i))
	}
	data := []byte(`{"rows":[` + strings.Join(rows, ",") + `]}`)
	for b.Loop() {
		if _, err := ReadJSON(context.Background(), data, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
