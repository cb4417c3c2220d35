package sheet

import (
	"context"
	"errors"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestCellKinds(t *testing.T) {
	xml := sheetData(`<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1" t="s"><v>1</v></c><c r="D1" t="s"><v>2</v></c></row>` +
		`<row r="3"><c t="inlineStr"><is><t>it&apos;s &#x2265; 1</t></is></c><c><v>0.30000000000000004</v></c><c r="C3"><v>1E3</v></c><c s="1"><v>45778</v></c><c s="2"><v>45778.4375</v></c>` +
		`<c s="3"><v>2.5</v></c><c s="4"><v>0.07</v></c><c s="5"><v>0.5</v></c></row>` +
		`<row r="4"><c r="A4" t="b"><v>1</v></c><c r="B4" t="b"><v>0</v></c><c r="C4" t="e"><v>#N/A</v></c><c r="D4"><f>SUM(A1:A2)</f></c><c r="E4"><f>1+1</f><v>2</v></c>` +
		`<c r="F4" t="str"><f>"a"&amp;"b"</f><v>ab</v></c><c r="G4" t="str"><f>""</f><v></v></c><c r="H4" t="str"><f>X1</f></c><c r="I4"><f t="shared" si="0"/></c><c r="J4" t="d"><v>2026-05-01T00:00:00Z</v></c><c r="K4" s="1"><v>-5</v></c></row>` +
		`<row r="5"><c r="A5" s="2"/><c r="B5" t="inlineStr"><is><t>  </t></is></c></row>` +
		`<row r="9"><c r="B9" t="inlineStr"><is><r><t>rich </t></r><r><t>text</t></r></is></c><c r="C9" t="inlineStr"><is><t>&apos;=1</t></is></c><c r="D9" t="str"><v><![CDATA[a<b]]></v></c></row>`)
	got, err := openRows(zipped(t, workbookParts(xml)...), DefaultLimits(), "S")
	if err != nil {
		t.Fatal(err)
	}
	// 45778 is 1 May 2025: 36526 is 1 January 2000 (from memory), and 9252 days lie between.
	want := []string{
		"1: A=text(Mark) B=text(Length <m>) D=text( a\rb_ )",
		"3: A=text(it's ≥ 1) B=number(0.3) C=number(1000) D=date(2025-05-01) E=date(2025-05-01T10:30:00) F=number(2.5) G=number(7%) H=date(12:00:00)",
		"4: A=boolean(TRUE) B=boolean(FALSE) C=error value(#N/A) D=formula without a value(=SUM(A1:A2)) E=number(2) F=text(ab) H=formula without a value(=X1) I=formula without a value(=) J=date(2026-05-01) K=error value(#######)",
		"9: B=text(rich text) C=text(=1) D=text(a<b)",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestPrefixedNamesAndBOM(t *testing.T) {
	parts := workbookParts("\xef\xbb\xbf<?xml version='1.0'?><!-- c --><x:worksheet xmlns:x='u'><x:sheetData><x:row x:r='2'><x:c r='B2'><x:v>5</x:v></x:c></x:row></x:sheetData></x:worksheet>\n")
	got, err := openRows(zipped(t, parts...), DefaultLimits(), "S")
	if err != nil || len(got) != 1 || got[0] != "2: B=number(5)" {
		t.Errorf("got %v, %v", got, err)
	}
}

func Test1904(t *testing.T) {
	parts := workbookParts(sheetData(`<row><c s="1"><v>44316</v></c></row>`))
	parts[1].text = strings.Replace(parts[1].text, "<sheets>", `<workbookPr date1904="1"/><sheets>`, 1)
	got, err := openRows(zipped(t, parts...), DefaultLimits(), "S")
	// The two systems lie 1462 days apart (ISO/IEC 29500-1, 18.17.4.1): 45778 - 1462.
	if err != nil || len(got) != 1 || got[0] != "1: A=date(2025-05-01)" {
		t.Errorf("got %v, %v", got, err)
	}
}

func TestMergedCells(t *testing.T) {
	rows := `<row r="1"><c r="A1"><v>1</v></c><c r="B1"><v>2</v></c><c r="C1"><v>3</v></c></row>` +
		`<row r="2"><c r="A2"><v>9</v></c><c r="C2"><v>4</v></c></row><row r="3"><c r="D3"><v>5</v></c></row><row r="4"><c r="E4"><v>6</v></c></row>`
	xml := strings.Replace(sheetData(rows), "</worksheet>", `<mergeCells count="2"><mergeCell ref="A1:B2"/><mergeCell ref="E3:XFD4"/></mergeCells></worksheet>`, 1)
	l := DefaultLimits()
	l.Columns = 6
	got, err := openRows(zipped(t, workbookParts(xml)...), l, "S")
	want := []string{
		"1: A=number(1)[A1:B2] B=merged cell()[A1:B2] C=number(3)",
		"2: A=merged cell()[A1:B2] B=merged cell()[A1:B2] C=number(4)",
		"3: D=number(5) F=merged cell()[E3:XFD4]",
	}
	if diff := cmp.Diff(want, got); diff != "" || err != nil {
		t.Errorf("%v\n%s", err, diff)
	}
	overlap := strings.Replace(xml, "E3:XFD4", "B2:C3", 1)
	_, err = openRows(zipped(t, workbookParts(overlap)...), l, "S")
	wantRefusal(t, "overlap", err, Malformed, "overlap")
	_, err = openRows(zipped(t, workbookParts(strings.Replace(xml, "A1:B2", "B2:A1", 1))...), l, "S")
	wantRefusal(t, "backward range", err, Malformed, "no range")
}

func TestMalformedSheets(t *testing.T) {
	long := strings.Repeat("x", 70_000)
	cases := []struct{ what, xml, says string }{
		{"no end", `<worksheet><sheetData><row>`, "ends early"},
		{"crossed tags", `<worksheet><sheetData></worksheet></sheetData>`, "not open"},
		{"other root", `<html/>`, "begins with <html>"},
		{"second root", sheetData("") + "<x/>", "goes on behind"},
		{"text behind", sheetData("") + "x", "outside"},
		{"document type", `<!DOCTYPE x [<!ENTITY a "b">]>` + sheetData(""), "document type"},
		{"entity", sheetData(`<row><c t="str"><v>&a;</v></c></row>`), "unknown entity"},
		{"bare ampersand", sheetData(`<row><c t="str"><v>a & b</v></c></row>`), "& without"},
		{"zero character", sheetData(`<row><c t="str"><v>&#0;</v></c></row>`), "unknown entity"},
		{"encoding", `<?xml version="1.0" encoding="windows-1252"?>` + sheetData(""), "windows-1252"},
		{"not UTF-8", sheetData(`<row><c t="str"><v>` + "\xff" + `</v></c></row>`), "not UTF-8"},
		{"deep", strings.Repeat("<worksheet>", 80), "nested"},
		{"long tag", `<worksheet a="` + long + `"/>`, "too long"},
		{"row order", sheetData(`<row r="2"/><row r="2"/>`), `row "2" follows row 2`},
		{"row number", sheetData(`<row r="1048577"/>`), "1048577"},
		{"cell order", sheetData(`<row><c r="B1"/><c r="A1"/></row>`), `cell "A1"`},
		{"cell of another row", sheetData(`<row r="3"><c r="A4"/></row>`), `cell "A4"`},
		{"column beyond", sheetData(`<row><c r="XFE1"/></row>`), "XFE1"},
		{"number", sheetData(`<row><c><v>abc</v></c></row>`), `at S!A1 holds "abc"`},
		{"infinite", sheetData(`<row><c><v>1e999</v></c></row>`), "holds"},
		{"NaN", sheetData(`<row><c><v>NaN</v></c></row>`), "holds"},
		{"hexadecimal", sheetData(`<row><c><v>0x10</v></c></row>`), "holds"},
		{"boolean", sheetData(`<row><c t="b"><v>2</v></c></row>`), "holds"},
		{"unknown type", sheetData(`<row><c t="zz"><v>2</v></c></row>`), "zz"},
		{"shared text", sheetData(`<row><c t="s"><v>3</v></c></row>`), "shared text"},
		{"negative shared text", sheetData(`<row><c t="s"><v>-1</v></c></row>`), "shared text"},
		{"date", sheetData(`<row><c t="d"><v>yesterday</v></c></row>`), "holds"},
	}
	for _, c := range cases {
		rows, err := openRows(zipped(t, workbookParts(c.xml)...), DefaultLimits(), "S")
		wantRefusal(t, c.what, err, Malformed, c.says)
		if len(rows) > 0 && c.what != "second root" {
			t.Errorf("%s: rows %v were handed out", c.what, rows)
		}
	}
}

func TestMalformedPackages(t *testing.T) {
	good := workbookParts(sheetData(""))
	without := func(i int) []part { return append(append([]part{}, good[:i]...), good[i+1:]...) }
	with := func(p ...part) []part { return append(append([]part{}, good...), p...) }
	replaced := func(i int, from, to string) []part {
		c := append([]part{}, good...)
		c[i].text = strings.Replace(c[i].text, from, to, 1)
		return c
	}
	cases := []struct {
		what  string
		parts []part
		kind  OpenKind
		says  string
	}{
		{"no root links", without(0), Unsupported, "no XLSX workbook"},
		{"no workbook", without(1), Malformed, "lacks its part"},
		{"no links", without(2), Malformed, "without its part"},
		{"no shared texts", without(3), Malformed, "sharedStrings"},
		{"no sheet", without(5), Malformed, "sheet1.xml"},
		{"no sheets", replaced(1, `<sheet name="S" sheetId="7" r:id="rId1"/>`, ""), Malformed, "no worksheet"},
		{"sheet names", replaced(1, `</sheets>`, `<sheet name="s" r:id="rId1"/></sheets>`), Malformed, "two sheets"},
		{"doubled part", with(part{"XL/Workbook.xml", ""}), Malformed, "twice"},
		{"path out", with(part{"../x", ""}), Malformed, "unsafe"},
		{"absolute path", with(part{"/etc/x", ""}), Malformed, "unsafe"},
		{"backslash", with(part{`xl\x`, ""}), Malformed, "unsafe"},
		{"dots inside", with(part{"xl/../x", ""}), Malformed, "unsafe"},
		{"binary workbook", replaced(0, "workbook.xml", "workbook.bin"), Unsupported, ".xlsb"},
		{"text document", replaced(0, "xl/workbook.xml", "word/document.xml"), Unsupported, "text document"},
		{"OpenDocument", []part{{"mimetype", "application/vnd.oasis.opendocument.spreadsheet"}, {"content.xml", "<x/>"}}, Unsupported, "OpenDocument"},
		{"entity in the links", replaced(0, "<Relationships>", "<!DOCTYPE x><Relationships>"), Malformed, "document type"},
	}
	for _, c := range cases {
		_, err := openRows(zipped(t, c.parts...), DefaultLimits(), "S")
		wantRefusal(t, c.what, err, c.kind, c.says)
	}
	external := replaced(2, `Target="worksheets/sheet1.xml"`, `Target="http://x.example/a.xml" TargetMode="External"`)
	_, err := openRows(zipped(t, external...), DefaultLimits(), "S")
	wantRefusal(t, "external sheet", err, Malformed, "without its part")
}

func TestRowsStops(t *testing.T) {
	data := zipped(t, workbookParts(sheetData(`<row><c><v>1</v></c></row><row><c><v>2</v></c></row>`))...)
	for _, d := range [][]byte{data, []byte("a,b\nc,d\n")} {
		b, err := Open(d, "", "", DefaultLimits())
		if err != nil {
			t.Fatal(err)
		}
		name := b.Sheets()[0]
		calls, mine := 0, errors.New("mine")
		err = b.Rows(context.Background(), name, func(int, []Cell) error { calls++; return mine })
		if err != mine || calls != 1 {
			t.Errorf("%d calls, %v", calls, err)
		}
		ctx, cancel := context.WithCancel(context.Background())
		cancel()
		err = b.Rows(ctx, name, func(int, []Cell) error { calls++; return nil })
		if err != context.Canceled || calls != 1 {
			t.Errorf("after cancelling: %d calls, %v", calls, err)
		}
		_, err = readAll(b, "other")
		wantRefusal(t, "another sheet", err, Malformed, `no sheet "other"`)
	}
}
