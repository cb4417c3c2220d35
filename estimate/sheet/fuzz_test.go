package sheet

import (
	"context"
	"encoding/binary"
	"errors"
	"strings"
	"testing"
)

// smallLimits keep every fuzzed file cheap.
var smallLimits = Limits{Bytes: 64 << 10, UnzippedBytes: 256 << 10, Sheets: 4, Rows: 50, Columns: 30, Cells: 300, SharedStrings: 50, TextLength: 200}

// readChecked reads all sheets and checks what Rows promises.
func readChecked(t *testing.T, data []byte) {
	b, err := Open(data, "fuzz", "", smallLimits)
	for i := 0; err == nil && i < len(b.Sheets()); i++ {
		last, rows := 0, 0
		err = b.Rows(context.Background(), b.Sheets()[i], func(row int, cells []Cell) error {
			rows++
			if row <= last || len(cells) == 0 || rows > smallLimits.Rows {
				t.Fatalf("row %d with %d cells follows row %d", row, len(cells), last)
			}
			last = row
			checkCells(t, row, cells)
			return nil
		})
	}
	var e *OpenError
	if err != nil && (!errors.As(err, &e) || e.Problem == "" || e.Remedy == "") {
		t.Fatalf("an error without remedy: %#v", err)
	}
}

func checkCells(t *testing.T, row int, cells []Cell) {
	column := 0
	for _, c := range cells {
		if c.Column <= column || c.Column > smallLimits.Columns {
			t.Fatalf("row %d: column %d follows %d", row, c.Column, column)
		}
		column = c.Column
		if blank := strings.TrimSpace(c.Text) == ""; c.Kind == Empty || c.Kind == Text && blank || c.Kind == Merged && (c.Text != "" || c.Range == "") {
			t.Fatalf("row %d: %+v", row, c)
		}
		if c.Kind == Number {
			if _, ok := numberText(strings.TrimSuffix(c.Text, "%"), false); !ok {
				t.Fatalf("row %d: number %q", row, c.Text)
			}
		}
	}
}

func FuzzCSV(f *testing.F) {
	for _, s := range []string{"a,b\n1,2\n", "a;b\n1,5;\"x\"\"y\"\n", "sep=;\na;b", "\xef\xbb\xbfa\tb\r1,5\t2", "a,\"b\n", "12'-6 1/2\",x", "'=1,-1\n"} {
		f.Add([]byte(s))
	}
	f.Add(utf16Bytes("a;b\n1,5;2\n", binary.LittleEndian))
	f.Fuzz(readChecked)
}

// FuzzXLSX puts fuzzed text into the sheet, the shared texts and the workbook of
// an otherwise sound file, and reads the fuzzed text as a whole file as well.
func FuzzXLSX(f *testing.F) {
	sheet := sheetData(`<row r="1"><c r="A1" t="s"><v>0</v></c><c s="1"><v>5</v></c><c t="inlineStr"><is><t>x</t></is></c><c><f>A1</f></c></row>`)
	merged := strings.Replace(sheet, "</worksheet>", `<mergeCells><mergeCell ref="A1:B2"/></mergeCells></worksheet>`, 1)
	parts := workbookParts(sheet)
	f.Add([]byte(sheet), uint8(5))
	f.Add([]byte(merged), uint8(5))
	for i, p := range parts {
		f.Add([]byte(p.text), uint8(i))
	}
	f.Add(zipped(f, parts...), uint8(len(parts)))
	f.Fuzz(func(t *testing.T, data []byte, which uint8) {
		if int(which) >= len(parts) {
			readChecked(t, data)
			return
		}
		changed := append([]part{}, parts...)
		changed[which].text = string(data)
		readChecked(t, zipped(t, changed...))
	})
}
