package sheet

import (
	"archive/zip"
	"bytes"
	"context"
	"errors"
	"fmt"
	"strings"
	"testing"
)

// part is one file of a workbook made by hand.
type part struct{ name, text string }

const relNS = "http://schemas.openxmlformats.org/officeDocument/2006/relationships/"

var rootRels = part{"_rels/.rels", `<Relationships><Relationship Id="rId1" Type="` + relNS + `officeDocument" Target="xl/workbook.xml"/></Relationships>`}

// workbookParts makes the smallest workbook with one sheet "S".
func workbookParts(sheetXML string) []part {
	return []part{
		rootRels,
		{"xl/workbook.xml", `<?xml version="1.0" encoding="UTF-8"?><workbook xmlns:r="x"><sheets><sheet name="S" sheetId="7" r:id="rId1"/></sheets></workbook>`},
		{"xl/_rels/workbook.xml.rels", `<Relationships><Relationship Id="rId1" Type="` + relNS + `worksheet" Target="worksheets/sheet1.xml"/>` +
			`<Relationship Id="rId2" Type="` + relNS + `sharedStrings" Target="/xl/sharedStrings.xml"/>` +
			`<Relationship Id="rId3" Type="` + relNS + `styles" Target="styles.xml"/></Relationships>`},
		{"xl/sharedStrings.xml", `<sst><si><t>Mark</t></si><si><r><t>Len</t></r><r><rPr><b/></rPr><t>gth &lt;m&gt;</t></r><rPh><t>no</t></rPh></si><si><t xml:space="preserve"> a_x000D_b_x005F_ </t></si></sst>`},
		{"xl/styles.xml", `<styleSheet><numFmts><numFmt numFmtId="164" formatCode="yyyy\-mm\-dd"/><numFmt numFmtId="165" formatCode="0.0&quot;d&quot;"/></numFmts>` +
			`<cellXfs><xf numFmtId="0"/><xf numFmtId="14"/><xf numFmtId="164"/><xf numFmtId="165"/><xf numFmtId="9"/><xf numFmtId="46"/></cellXfs></styleSheet>`},
		{"xl/worksheets/sheet1.xml", sheetXML},
	}
}

func zipped(t testing.TB, parts ...part) []byte {
	t.Helper()
	var out bytes.Buffer
	z := zip.NewWriter(&out)
	for _, p := range parts {
		w, err := z.Create(p.name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := w.Write([]byte(p.text)); err != nil {
			t.Fatal(err)
		}
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

func sheetData(rows string) string {
	return `<worksheet><dimension ref="A1"/><sheetData>` + rows + `</sheetData></worksheet>`
}

// dump writes cells as "row: A=kind(text)[range] …" for comparison.
func dump(row int, cells []Cell) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%d:", row)
	for _, c := range cells {
		fmt.Fprintf(&b, " %s=%v(%s)", Letters(c.Column), c.Kind, c.Text)
		if c.Range != "" {
			b.WriteString("[" + c.Range + "]")
		}
	}
	return b.String()
}

func readAll(b *Book, sheet string) ([]string, error) {
	var rows []string
	err := b.Rows(context.Background(), sheet, func(row int, cells []Cell) error {
		rows = append(rows, dump(row, cells))
		return nil
	})
	return rows, err
}

// openRows opens and reads one sheet.
func openRows(data []byte, l Limits, sheet string) ([]string, error) {
	b, err := Open(data, "job", "", l)
	if err != nil {
		return nil, err
	}
	return readAll(b, sheet)
}

// wantRefusal checks kind, words and the presence of a remedy.
func wantRefusal(t *testing.T, what string, err error, kind OpenKind, says string) {
	t.Helper()
	var e *OpenError
	if !errors.As(err, &e) {
		t.Errorf("%s: got %v, want an *OpenError that says %q", what, err, says)
		return
	}
	if e.Kind != kind || !strings.Contains(e.Error(), says) || e.Remedy == "" {
		t.Errorf("%s: got %v, %q; want %v and %q", what, e.Kind, e.Error(), kind, says)
	}
}
