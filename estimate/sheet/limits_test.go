package sheet

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"strings"
	"testing"
)

// Every limit is met exactly, and passed by one.
func TestLimits(t *testing.T) {
	parts := workbookParts(sheetData(`<row><c><v>1</v></c><c><v>2</v></c></row><row r="1000"><c/></row><row r="1001"><c r="C1001" t="s"><v>0</v></c></row><row><c t="str"><v>äöü12</v></c></row>`))
	parts[1].text = strings.Replace(parts[1].text, "</sheets>", `<sheet name="T" r:id="rId1"/></sheets>`, 1)
	book, csv := zipped(t, parts...), []byte("1,2\n\n,,Mark\n\"äöü12\"\n")
	unzipped := 0
	for _, p := range parts {
		unzipped += len(p.text)
	}
	exact := Limits{UnzippedBytes: int64(unzipped), Sheets: 2, Rows: 3, Columns: 3, Cells: 4, SharedStrings: 3, TextLength: 10}
	cases := []struct {
		what  string
		lower func(*Limits)
		says  string
	}{
		{"bytes", func(l *Limits) { l.Bytes-- }, "bytes"},
		{"unzipped bytes", func(l *Limits) { l.UnzippedBytes-- }, "unpacks"},
		{"sheets", func(l *Limits) { l.Sheets-- }, "sheets"},
		{"rows", func(l *Limits) { l.Rows-- }, "more than 2 rows"},
		{"columns", func(l *Limits) { l.Columns-- }, "more than 2 columns"},
		{"cells", func(l *Limits) { l.Cells-- }, "more than 3 cells"},
		{"shared strings", func(l *Limits) { l.SharedStrings-- }, "more than 2 shared"},
		{"text length", func(l *Limits) { l.TextLength -= 6 }, "more than 4 characters"},
	}
	for _, file := range []struct {
		name, sheet string
		data        []byte
	}{{"xlsx", "S", book}, {"csv", "", csv}} {
		l := exact
		l.Bytes = int64(len(file.data))
		if rows, err := openRows(file.data, l, file.sheet); err != nil || len(rows) != 3 {
			t.Fatalf("%s at its limits: %v, %v", file.name, rows, err)
		}
		for _, c := range cases {
			lower := l
			c.lower(&lower)
			_, err := openRows(file.data, lower, file.sheet)
			if workbookOnly := c.what == "unzipped bytes" || c.what == "sheets" || c.what == "shared strings"; workbookOnly && file.name == "csv" {
				if err != nil {
					t.Errorf("csv, %s: %v", c.what, err)
				}
				continue
			}
			wantRefusal(t, file.name+", "+c.what, err, SizeLimit, c.says)
		}
	}
}

func TestTextLengthCountsCharacters(t *testing.T) {
	l := DefaultLimits()
	l.TextLength = 5
	for _, c := range []struct {
		text string
		ok   bool
	}{{"äöüßé", true}, {"äöüßéx", false}} {
		_, err := openRows([]byte(c.text+",1\n"), l, "")
		if (err == nil) != c.ok {
			t.Errorf("%s: %v", c.text, err)
		}
	}
}

func TestDefaultLimitsOfTheService(t *testing.T) {
	l := DefaultLimits()
	if l.Bytes != 20<<20 || l.Rows != 20_000 {
		t.Errorf("got %+v", l)
	}
}

// A part that unpacks to more than its header declares is refused while it is
// read: 8 MB of spaces behind a header that promises 100 bytes.
func TestBombWithFalseSizes(t *testing.T) {
	parts := workbookParts(sheetData(strings.Repeat(" ", 8<<20)))
	data := zipped(t, parts...)
	if len(data) > 20_000 {
		t.Fatalf("the bomb has %d bytes", len(data))
	}
	l := DefaultLimits()
	l.UnzippedBytes = 1 << 20
	_, err := openRows(data, l, "S")
	wantRefusal(t, "honest bomb", err, SizeLimit, "unpacks to more")

	// Sizes stand in the central directory, 24 bytes behind its signature.
	at := bytes.LastIndex(data, []byte("PK\x01\x02"))
	binary.LittleEndian.PutUint32(data[at+24:], 100)
	_, err = openRows(data, l, "S")
	wantRefusal(t, "lying bomb", err, Malformed, "not a valid zip file")
}

func TestDamagedArchives(t *testing.T) {
	data := zipped(t, workbookParts(sheetData(`<row><c><v>1</v></c></row>`))...)
	_, err := openRows(data[:len(data)-30], DefaultLimits(), "S")
	wantRefusal(t, "cut off", err, Malformed, "damaged archive")

	at := bytes.LastIndex(data, []byte("PK\x01\x02"))
	wrong := bytes.Clone(data)
	wrong[at+16] ^= 1 // checksum
	_, err = openRows(wrong, DefaultLimits(), "S")
	wantRefusal(t, "checksum", err, Malformed, "checksum")

	locked := bytes.Clone(data)
	locked[at+8] |= 1 // encryption flag
	_, err = openRows(locked, DefaultLimits(), "S")
	wantRefusal(t, "encrypted part", err, Unsupported, "encrypted")

	var many []part
	for i := range maxParts + 1 {
		many = append(many, part{fmt.Sprint("p", i), ""})
	}
	_, err = openRows(zipped(t, many...), DefaultLimits(), "S")
	wantRefusal(t, "many parts", err, SizeLimit, "files inside")
}

func TestManyMerges(t *testing.T) {
	var refs strings.Builder
	for i := range maxMerges + 1 {
		fmt.Fprintf(&refs, `<mergeCell ref="A%d"/>`, i+1)
	}
	xml := strings.Replace(sheetData(""), "</worksheet>", "<mergeCells>"+refs.String()+"</mergeCells></worksheet>", 1)
	_, err := openRows(zipped(t, workbookParts(xml)...), DefaultLimits(), "S")
	wantRefusal(t, "merges", err, SizeLimit, "merged ranges")
}
