package sheet

import (
	"encoding/binary"
	"testing"
	"unicode/utf16"

	"github.com/google/go-cmp/cmp"
)

func TestCSVRows(t *testing.T) {
	cases := []struct {
		what, text string
		want       []string
	}{
		{"plain", "Mark,Length\r\nB1,6\r\n", []string{"1: A=text(Mark) B=text(Length)", "2: A=text(B1) B=text(6)"}},
		{"no last line end", "a,b\nc,d", []string{"1: A=text(a) B=text(b)", "2: A=text(c) B=text(d)"}},
		{"old line ends", "a,b\rc,d\r", []string{"1: A=text(a) B=text(b)", "2: A=text(c) B=text(d)"}},
		{"empty lines and cells count", "a,b\n\n,\n ,x\n", []string{"1: A=text(a) B=text(b)", "4: B=text(x)"}},
		{"quotes", "\"a,\"\"b\"\"\",\"c\nd\",\"\"\ne,f\n", []string{"1: A=text(a,\"b\") B=text(c\nd)", "2: A=text(e) B=text(f)"}},
		{"inch marks", "12'-6 1/2\",\"3' 4\"\"\"\n", []string{"1: A=text(12'-6 1/2\") B=text(3' 4\")"}},
		{"errors and apostrophes", "#N/A,'=1,'-5,'quoted\n", []string{"1: A=error value(#N/A) B=text(=1) C=text(-5) D=text('quoted)"}},
		{"BOM", "\xef\xbb\xbfä;b\n1,5;2\n", []string{"1: A=text(ä) B=text(b)", "2: A=text(1,5) B=text(2)"}},
		{"tab", "a\tb,c\n1\t2\n", []string{"1: A=text(a) B=text(b,c)", "2: A=text(1) B=text(2)"}},
		{"sep line", "sep=;\r\na,b;c\r\n", []string{"2: A=text(a,b) B=text(c)"}},
		{"one column", "a b\nc\n", []string{"1: A=text(a b)", "2: A=text(c)"}},
		{"head with commas", "Mark;Length, m;Load, kN/m\nA;6,5;2,3\n", []string{"1: A=text(Mark) B=text(Length, m) C=text(Load, kN/m)", "2: A=text(A) B=text(6,5) C=text(2,3)"}},
		{"separators in quotes", "\"a;b;c\",d\n\"e;f\",g\n", []string{"1: A=text(a;b;c) B=text(d)", "2: A=text(e;f) B=text(g)"}},
	}
	for _, c := range cases {
		got, err := openRows([]byte(c.text), DefaultLimits(), "")
		if diff := cmp.Diff(c.want, got); diff != "" || err != nil {
			t.Errorf("%s: %v\n%s", c.what, err, diff)
		}
	}
}

func TestCSVRefusals(t *testing.T) {
	cases := []struct{ what, text, says string }{
		{"open quote", "a,b\n1,\"x\ny\n", "at B2 has a quoted field that never ends"},
		{"behind quote", "a,b\n\"x\"y,1\n", "at A2 has text behind the closing quote"},
		{"only a BOM", "\xef\xbb\xbf \n", "empty"},
		{"blank UTF-16", "\xff\xfe \x00\n\x00", "empty"},
	}
	for _, c := range cases {
		_, err := openRows([]byte(c.text), DefaultLimits(), "")
		wantRefusal(t, c.what, err, Malformed, c.says)
	}
}

func utf16Bytes(text string, order binary.AppendByteOrder) []byte {
	var out []byte
	for _, u := range utf16.Encode([]rune(text)) {
		out = order.AppendUint16(out, u)
	}
	return out
}

func TestUTF16(t *testing.T) {
	text := "Marke;Länge 🏗\nB1;6,5\n"
	want := []string{"1: A=text(Marke) B=text(Länge 🏗)", "2: A=text(B1) B=text(6,5)"}
	for what, data := range map[string][]byte{
		"little endian":           utf16Bytes(text, binary.LittleEndian),
		"big endian":              utf16Bytes(text, binary.BigEndian),
		"little endian with mark": utf16Bytes("\ufeff"+text, binary.LittleEndian),
		"big endian with mark":    utf16Bytes("\ufeff"+text, binary.BigEndian),
	} {
		got, err := openRows(data, DefaultLimits(), "")
		if diff := cmp.Diff(want, got); diff != "" || err != nil {
			t.Errorf("%s: %v\n%s", what, err, diff)
		}
	}
	for what, data := range map[string][]byte{
		"odd":             append([]byte("\xff\xfe"), utf16Bytes("ab", binary.LittleEndian)[:3]...),
		"lone surrogate":  []byte("\xff\xfea\x00\x00\xd8"),
		"wrong surrogate": []byte("\xff\xfe\x00\xd8a\x00"),
		"control":         []byte("\xff\xfe\x01\x00a\x00"),
	} {
		_, err := openRows(data, DefaultLimits(), "")
		wantRefusal(t, what, err, Malformed, "UTF-16 but damaged")
	}
}

func TestDecimalComma(t *testing.T) {
	cases := []struct {
		what, text string
		want       bool
	}{
		{"semicolon implies it", "a;b\n1;2\n", true},
		{"semicolon with commas", "a;b\n1,5;2\n", true},
		{"semicolon with points", "a;b\n1.5;2\n", false},
		{"semicolon with point and unit", "a;b\n1.5 kN/m;2\n", false},
		{"semicolon with both", "a;b\n1.5;2,5\n", true},
		{"groups by point", "a;b\n1.234,5;2\n", true},
		{"many groups by point", "a;b\n1.234.567;2\n", true},
		{"groups by comma", "a;b\n1,234.5;2\n", false},
		{"many groups by comma", "a;b\n1,234,567;2\n", false},
		{"leading zero", "a;b\n0.125;1.234\n", false},
		{"no whole part", "a;b\n.125;1.234\n", false},
		{"dates are no evidence", "a;b\n1.5.2026;2\n", true},
		{"marks are no evidence", "a;b\nB1.5;1.5.b\n", true},
		{"doubtful comma", "a;b\n1,234;2\n", true},
		{"tab with commas", "a\tb\n1,5\t2\n", true},
		{"tab with both", "a\tb\n1,5\t2.5\n", false},
		{"tab with nothing", "a\tb\n1\t2\n", false},
		{"tab with points", "a\tb\n1.234\t2\n", false},
		{"comma", "a,b\n\"1,5\",2\n", false},
	}
	for _, c := range cases {
		b, err := Open([]byte(c.text), "", "", DefaultLimits())
		if err != nil || b.DecimalComma() != c.want {
			t.Errorf("%s: %v, want %v (%v)", c.what, b != nil && b.DecimalComma(), c.want, err)
		}
	}
	for _, text := range []string{"a;b\n1.234;2.500\n", "a\tb\n1,234\t2\n"} {
		_, err := Open([]byte(text), "", "", DefaultLimits())
		wantRefusal(t, text, err, Malformed, "thousands or decimals")
	}
}
