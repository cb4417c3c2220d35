package sheet

import (
	"bytes"
	"image"
	"image/png"
	"os"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"
	"pgregory.net/rapid"
)

var demoDay = time.Date(2026, 5, 1, 15, 0, 0, 0, time.UTC)

func demoBook() *Builder {
	b := NewBuilder()
	b.Sheet("Schedule", Column{"Mark", 12}, Column{"Mass (t)", 10}, Column{Head: "Price"}, Column{Head: "Date"})
	b.Row(TextOf("B1"), NumberOf("12.345", Mass), NumberOf("1234567.89", Money).Input(), DateOf(demoDay))
	b.Row(TextOf("=1+1"), NumberOf("-5", General), Formula("B2*2", "24.69", Money).Total(), Blank())
	b.Row()
	b.Row(Blank().Total(), Formula(`A2&"x"`, "B1x", General), TextOf("a note\nof two lines").Note(), NumberOf("0.07", Percent))
	b.Sheet("Member list")
	b.Row(TextOf(" no head "), Formula("Schedule!B2", "", General))
	b.Name("Total", "Schedule", "C3")
	return b
}

func TestBuilderRoundTrip(t *testing.T) {
	data, err := demoBook().Bytes()
	if err != nil {
		t.Fatal(err)
	}
	b, err := Open(data, "job.xlsx", MediaTypeXLSX, DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff([]string{"Schedule", "Member list"}, b.Sheets()); diff != "" || b.DecimalComma() {
		t.Error(diff)
	}
	got, err := readAll(b, "Schedule")
	want := []string{
		"1: A=text(Mark) B=text(Mass (t)) C=text(Price) D=text(Date)",
		"2: A=text(B1) B=number(12.345) C=number(1234567.89) D=date(2026-05-01)",
		"3: A=text(=1+1) B=number(-5) C=number(24.69)",
		"5: B=text(B1x) C=text(a note\nof two lines) D=number(7%)",
	}
	if diff := cmp.Diff(want, got); diff != "" || err != nil {
		t.Errorf("%v\n%s", err, diff)
	}
	got, err = readAll(b, "Member list")
	if diff := cmp.Diff([]string{"1: A=text( no head ) B=formula without a value(=Schedule!B2)"}, got); diff != "" || err != nil {
		t.Errorf("%v\n%s", err, diff)
	}
}

// What is drawn and set is looked up with the library's own reader.
func TestBuilderSettings(t *testing.T) {
	data, err := demoBook().Bytes()
	if err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if got, err := f.GetCellFormula("Schedule", "C3"); got != "B2*2" || err != nil {
		t.Errorf("formula %q, %v", got, err)
	}
	if got, err := f.GetCellValue("Schedule", "A3"); got != "'=1+1" || err != nil {
		t.Errorf("dangerous text is %q, %v", got, err)
	}
	if got, err := f.GetCellValue("Schedule", "C2"); got != "1,234,567.89" || err != nil {
		t.Errorf("shown as %q, %v", got, err)
	}
	panes, err := f.GetPanes("Schedule")
	if err != nil || !panes.Freeze || panes.YSplit != 1 {
		t.Errorf("panes %+v, %v", panes, err)
	}
	layout, err := f.GetPageLayout("Schedule")
	if err != nil || *layout.Orientation != "landscape" || *layout.FitToWidth != 1 || *layout.FitToHeight != 0 {
		t.Errorf("layout %+v, %v", layout, err)
	}
	props, err := f.GetSheetProps("Schedule")
	if err != nil || props.FitToPage == nil || !*props.FitToPage {
		t.Errorf("fit to page %+v, %v", props, err)
	}
	calc, err := f.GetCalcProps()
	if err != nil || calc.FullCalcOnLoad == nil || !*calc.FullCalcOnLoad {
		t.Errorf("calculation %+v, %v", calc, err)
	}
	names := map[string]string{}
	for _, n := range f.GetDefinedName() {
		names[n.Name] = n.RefersTo
	}
	if diff := cmp.Diff(map[string]string{"Total": "Schedule!$C$3", "_xlnm.Print_Titles": "Schedule!$1:$1"}, names); diff != "" {
		t.Error(diff)
	}
	if w, err := f.GetColWidth("Schedule", "A"); w != 12 || err != nil {
		t.Errorf("width %v, %v", w, err)
	}
}

func TestBuilderIsDeterministic(t *testing.T) {
	first, err := demoBook().Bytes()
	if err != nil {
		t.Fatal(err)
	}
	for range 8 { // the library's order of sheets is random
		again, err := demoBook().Bytes()
		if err != nil || !bytes.Equal(first, again) {
			t.Fatalf("other bytes, %v", err)
		}
	}
}

func TestBuilderChoicesAndPicture(t *testing.T) {
	var picture bytes.Buffer
	if err := png.Encode(&picture, image.NewGray(image.Rect(0, 0, 4, 4))); err != nil {
		t.Fatal(err)
	}
	b := NewBuilder()
	b.Sheet("Schedule", Column{Head: "Grade"})
	b.Row(TextOf("S355"))
	b.Choices("A2:A200", "Lists!$A$1:$A$2")
	b.Picture("C1", picture.Bytes(), "cumulative curve")
	b.Sheet("Lists")
	b.Row(TextOf("S235"))
	b.Row(TextOf("S355"))
	data, err := b.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	v, err := f.GetDataValidations("Schedule")
	if err != nil || len(v) != 1 || v[0].Sqref != "A2:A200" || !strings.Contains(v[0].Formula1, "Lists!$A$1:$A$2") {
		t.Errorf("choices %+v, %v", v, err)
	}
	p, err := f.GetPictures("Schedule", "C1")
	if err != nil || len(p) != 1 || !bytes.Equal(p[0].File, picture.Bytes()) || p[0].Format.AltText != "cumulative curve" {
		t.Errorf("%d pictures, %v", len(p), err)
	}
	if got, err := openRows(data, DefaultLimits(), "Schedule"); err != nil || len(got) != 2 {
		t.Errorf("got %v, %v", got, err)
	}
}

func TestBuilderRefusals(t *testing.T) {
	cases := []struct {
		what  string
		build func(*Builder)
		says  string
	}{
		{"nothing", func(*Builder) {}, "no sheet"},
		{"row first", func(b *Builder) { b.Row(TextOf("x")) }, "before the first sheet"},
		{"doubled sheet", func(b *Builder) { b.Sheet("A"); b.Sheet("a") }, "there already"},
		{"sheet name", func(b *Builder) { b.Sheet("a/b") }, "character"},
		{"long sheet name", func(b *Builder) { b.Sheet(strings.Repeat("x", 32)) }, "31"},
		{"sixteen digits", func(b *Builder) { b.Sheet("A"); b.Row(Blank(), NumberOf("1234567890123.456", Money)) }, "cell A!B1: \"1234567890123.456\" has 16"},
		{"no number", func(b *Builder) { b.Sheet("A"); b.Row(NumberOf("=1", Money)) }, "no decimal number"},
		{"empty number", func(b *Builder) { b.Sheet("A"); b.Row(NumberOf("", Money)) }, "no decimal number"},
		{"infinity", func(b *Builder) { b.Sheet("A"); b.Row(NumberOf("Inf", Money)) }, "no decimal number"},
		{"formula", func(b *Builder) { b.Sheet("A"); b.Row(Formula("=A1", "1", Money)) }, "no = before it"},
		{"long text", func(b *Builder) { b.Sheet("A"); b.Row(TextOf(strings.Repeat("x", 32768))) }, "32767"},
		{"early date", func(b *Builder) { b.Sheet("A"); b.Row(DateOf(time.Date(1899, 1, 1, 0, 0, 0, 0, time.UTC))) }, "1900"},
		{"name of no cell", func(b *Builder) { b.Sheet("A"); b.Name("N", "A", "here") }, "no cell"},
		{"name", func(b *Builder) { b.Sheet("A"); b.Name("1 N", "A", "A1") }, "name"},
		{"picture", func(b *Builder) { b.Sheet("A"); b.Picture("A1", []byte("x"), "") }, "image"},
		{"ended", func(b *Builder) { b.Sheet("A"); _, _ = b.Bytes() }, "ended already"},
	}
	for _, c := range cases {
		b := NewBuilder()
		c.build(b)
		if data, err := b.Bytes(); err == nil || data != nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %v, want %q", c.what, err, c.says)
		}
	}
}

func TestNumbersStayExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		digits := rapid.StringMatching(`[1-9][0-9]{0,12}\.[0-9]{2}`).Draw(t, "amount")
		x, err := exactFloat(digits)
		if err != nil {
			t.Fatal(err)
		}
		want := strings.TrimSuffix(strings.TrimRight(digits, "0"), ".")
		if !strings.Contains(digits, ".") {
			want = digits
		}
		if got := floatText(x); got != want {
			t.Fatalf("%s became %s", digits, got)
		}
	})
}

// A sheet of more than 16 MB goes through a temporary file of the library.
func TestLargeWorkbookLeavesNoTemporaryFile(t *testing.T) {
	dir := t.TempDir()
	t.Setenv("TMPDIR", dir)
	b := NewBuilder()
	b.Sheet("A")
	text := TextOf(strings.Repeat("x", 30_000))
	for range 700 {
		b.Row(text)
	}
	if entries, err := os.ReadDir(dir); err != nil || len(entries) != 1 {
		t.Errorf("while writing: %d files, %v; the test is pointless without one", len(entries), err)
	}
	if _, err := b.Bytes(); err != nil {
		t.Fatal(err)
	}
	if entries, err := os.ReadDir(dir); err != nil || len(entries) != 0 {
		t.Errorf("left behind: %v, %v", entries, err)
	}
}

// A wrapped text asks for line breaks in its style and keeps what else it is.
func TestWrappedTexts(t *testing.T) {
	b := NewBuilder()
	b.Sheet("S", Column{Width: 8}, Column{Width: 40})
	b.Row(TextOf("a long text of five lines or so").Wrap(), TextOf("UNSAFE").Wrap().Total())
	b.Row(TextOf("short").Wrap(), TextOf("a text that is too long for its column, but not wrapped"))
	data, err := b.Bytes()
	if err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(bytes.NewReader(data))
	if err != nil {
		t.Fatal(err)
	}
	for cell, bold := range map[string]bool{"A1": false, "B1": true} {
		id, err := f.GetCellStyle("S", cell)
		if err != nil {
			t.Fatal(err)
		}
		s, err := f.GetStyle(id)
		if err != nil {
			t.Fatal(err)
		}
		if s.Alignment == nil || !s.Alignment.WrapText || (s.Font != nil && s.Font.Bold) != bold {
			t.Errorf("%s is drawn with %+v, %+v", cell, s.Alignment, s.Font)
		}
	}
	for row, want := range map[int]float64{1: 5 * lineHeight, 2: lineHeight} {
		if got, err := f.GetRowHeight("S", row); err != nil || got != want {
			t.Errorf("row %d is %v points high, %v, want %v", row, got, err, want)
		}
	}
}

func TestLinesOfWrappedTexts(t *testing.T) {
	for _, c := range []struct {
		text  string
		width int
		want  int
	}{{"", 10, 1}, {"ten chars.", 10, 1}, {"ten chars. and more", 10, 2}, {strings.Repeat("x", 25), 10, 3}, {"a " + strings.Repeat("x", 20) + " b", 10, 4}, {"ä ö ü", 5, 1}} {
		if got := lines(c.text, c.width); got != c.want {
			t.Errorf("%q in %d characters: %d lines, want %d", c.text, c.width, got, c.want)
		}
	}
}
