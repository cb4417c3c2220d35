package sheet

import (
	"errors"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// The signs are those of the OWASP page on CSV injection (from memory).
func TestNeutralise(t *testing.T) {
	cases := map[string]string{
		"": "", "B1": "B1", "=1": "'=1", "+1": "'+1", "-1": "'-1", "@x": "'@x", "\tx": "'\tx", "\rx": "'\rx", "\nx": "'\nx",
		"'=1": "''=1", "'quoted'": "'quoted'", "a=b": "a=b", "'": "'",
	}
	for text, want := range cases {
		if got := Neutralise(text); got != want {
			t.Errorf("Neutralise(%q) = %q, want %q", text, got, want)
		}
		if got := restore(want); got != text {
			t.Errorf("restore(%q) = %q, want %q", want, got, text)
		}
	}
}

func TestNeutraliseIsUndone(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.StringOf(rapid.SampledFrom([]rune("'=+-@\t\r\nab "))).Draw(t, "text")
		if got := restore(Neutralise(text)); got != text {
			t.Fatalf("%q became %q", text, got)
		}
	})
}

func TestWriteCSV(t *testing.T) {
	var out strings.Builder
	err := WriteCSV(&out, [][]Value{
		{TextOf("Mark"), TextOf("a \"b\""), TextOf("x,y"), TextOf("two\nlines")},
		{TextOf("=cmd"), NumberOf("-5.20", Money), Formula("A1", "0.07", Percent), Formula("A1", "-x", General), DateOf(demoDay), Blank()},
		{},
	})
	want := "Mark,\"a \"\"b\"\"\",\"x,y\",\"two\nlines\"\r\n'=cmd,-5.20,0.07,'-x,2026-05-01,\r\n\r\n"
	if out.String() != want || err != nil {
		t.Errorf("got %q, %v", out.String(), err)
	}
	for _, v := range []Value{NumberOf("=1", General), NumberOf("1;2", General), DateOf(time.Time{})} {
		if err := WriteCSV(&out, [][]Value{{}, {Blank(), v}}); err == nil || !strings.Contains(err.Error(), "B2") {
			t.Errorf("%+v: %v", v, err)
		}
	}
}

func TestCSVRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		cell := rapid.StringOf(rapid.SampledFrom([]rune("'=+-@\t\r\n\",; abcä1.")))
		texts := rapid.SliceOfN(rapid.SliceOfN(cell, 2, 4), 1, 5).Draw(t, "texts")
		rows, want := make([][]Value, len(texts)), []string(nil)
		for i, row := range texts {
			var cells []Cell
			rows[i] = []Value{TextOf("m")} // so that the comma is found
			cells = append(cells, Cell{Column: 1, Kind: Text, Text: "m"})
			for j, text := range row {
				rows[i] = append(rows[i], TextOf(text))
				if strings.TrimSpace(text) != "" {
					cells = append(cells, Cell{Column: j + 2, Kind: Text, Text: text})
				}
			}
			want = append(want, dump(i+1, cells))
		}
		var out strings.Builder
		if err := WriteCSV(&out, rows); err != nil {
			t.Fatal(err)
		}
		got, err := openRows([]byte("sep=,\n"+out.String()), DefaultLimits(), "")
		for i := range got {
			_, got[i], _ = strings.Cut(got[i], ":")
			_, want[i], _ = strings.Cut(want[i], ":")
		}
		if diff := cmp.Diff(want, got); diff != "" || err != nil {
			t.Fatalf("%v\n%s", err, diff)
		}
	})
}

type brokenWriter struct{}

func (brokenWriter) Write([]byte) (int, error) { return 0, errors.New("disk full") }

func TestWriteCSVReportsTheWriter(t *testing.T) {
	if err := WriteCSV(brokenWriter{}, [][]Value{{TextOf("x")}}); err == nil || !strings.Contains(err.Error(), "disk full") {
		t.Errorf("got %v", err)
	}
}
