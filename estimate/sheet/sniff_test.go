package sheet

import "testing"

const oleMagic = "\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"

func TestOtherFormats(t *testing.T) {
	encrypted := oleMagic
	for _, c := range "EncryptedPackage" {
		encrypted += string(c) + "\x00"
	}
	cases := []struct {
		what, data string
		kind       OpenKind
		says       string
	}{
		{"nothing", "", Malformed, "is empty"},
		{"spaces", " \r\n\t", Malformed, "is empty"},
		{"old workbook", oleMagic + "rest", Unsupported, ".xls"},
		{"encrypted workbook", encrypted, Unsupported, "encrypted"},
		{"PDF", "%PDF-1.7\n", Unsupported, "PDF"},
		{"RTF", "{\\rtf1", Unsupported, "RTF"},
		{"gzip", "\x1f\x8b\x08", Unsupported, "gzip"},
		{"picture", "\x89PNG\r\n", Unsupported, "picture"},
		{"HTML", "<html><table>", Unsupported, "HTML"},
		{"XML", "\xef\xbb\xbf<?xml version='1.0'?>", Unsupported, "XML"},
		{"JSON", ` {"members": []}`, Unsupported, "JSON"},
		{"JSON list", `[{"mark": 1}]`, Unsupported, "JSON"},
		{"binary", "a,b\x00c\n", Unsupported, "control characters"},
		{"8-bit code page", "Mark,b\nTr\xe4ger,1\n", Unsupported, "byte 0xE4 in line 2"},
		{"empty archive", "PK\x05\x06" + "\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00\x00", Unsupported, "no XLSX"},
		{"broken archive", "PK\x03\x04rest", Malformed, "damaged archive"},
	}
	for _, c := range cases {
		_, err := Open([]byte(c.data), "job.bin", "", DefaultLimits())
		wantRefusal(t, c.what, err, c.kind, c.says)
		wantRefusal(t, c.what, err, c.kind, `"job.bin"`)
	}
}

func TestDeclaredMediaType(t *testing.T) {
	book, csv := zipped(t, workbookParts(sheetData(""))...), []byte("a,b\n")
	cases := []struct {
		media     string
		book, csv bool
	}{
		{"", true, true}, {"application/octet-stream", true, true}, {"application/vnd.ms-excel", true, true},
		{MediaTypeXLSX, true, false}, {"Application/Zip", true, false}, {MediaTypeCSV, false, true},
		{"text/csv; charset=utf-8; header=present", false, true}, {"text/plain", false, true},
		{"application/json", false, false}, {"text/html", false, false}, {";;", false, false},
	}
	for _, c := range cases {
		if _, err := Open(book, "", c.media, DefaultLimits()); (err == nil) != c.book {
			t.Errorf("workbook as %q: %v", c.media, err)
		} else if err != nil {
			wantRefusal(t, c.media, err, Unsupported, "declared as")
		}
		if _, err := Open(csv, "", c.media, DefaultLimits()); (err == nil) != c.csv {
			t.Errorf("CSV as %q: %v", c.media, err)
		} else if err != nil {
			wantRefusal(t, c.media, err, Unsupported, "declared as")
		}
	}
}

func TestOpenKindNames(t *testing.T) {
	for k, want := range map[OpenKind]string{Malformed: "malformed", SizeLimit: "size limit", Unsupported: "unsupported", 9: "unknown kind"} {
		if k.String() != want {
			t.Errorf("%d is %q", k, k)
		}
	}
	if got := Kind(99).String(); got != "unknown kind" {
		t.Errorf("got %q", got)
	}
}
