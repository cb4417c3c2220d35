package sheet

import (
	"encoding/json"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestAddress(t *testing.T) {
	cases := []struct {
		a    Address
		want string
	}{
		{Address{"Schedule", 7, 3}, "Schedule!C7"}, {Address{"", 7, 3}, "C7"}, {Address{"Member list", 1, 27}, "'Member list'!AA1"},
		{Address{"It's", 1, 1}, "'It''s'!A1"}, {Address{"A1", 1, 1}, "'A1'!A1"}, {Address{"rc", 1, 1}, "'rc'!A1"}, {Address{"2nd", 1, 1}, "'2nd'!A1"},
		{Address{"Sheet1", 0, 0}, "Sheet1"}, {Address{"Träger", 2, 0}, "'Träger'!2"}, {Address{}, ""}, {Address{"", 1048576, 16384}, "XFD1048576"},
	}
	for _, c := range cases {
		if got := c.a.String(); got != c.want {
			t.Errorf("%+v is %q, want %q", c.a, got, c.want)
		}
	}
}

func TestLettersAndReferences(t *testing.T) {
	for column := 1; column <= maxColumn; column++ {
		c, row, ok := parseReference(Letters(column) + "12")
		if !ok || c != column || row != 12 {
			t.Fatalf("%d is %q, read as %d", column, Letters(column), c)
		}
	}
	for _, ref := range []string{"", "A", "1", "A0", "XFE1", "A1048577", "AAAA1", "A1B", "A-1", "Ä1", "A12345678"} {
		if c, row, ok := parseReference(ref); ok {
			t.Errorf("%q is column %d, row %d", ref, c, row)
		}
	}
	if c, row, ok := parseReference("$c$7"); !ok || c != 3 || row != 7 {
		t.Errorf("$c$7 is %d, %d, %v", c, row, ok)
	}
}

func TestFaultText(t *testing.T) {
	f := Fault{Address{"Schedule", 7, 3}, "Length (m)", "1,5", "is ambiguous", "write 1.5"}
	if got, want := f.Error(), `Schedule!C7 (Length (m)): "1,5" is ambiguous; write 1.5`; got != want {
		t.Errorf("got %s", got)
	}
	if got := (Fault{Problem: "has no head row"}).Error(); got != "has no head row" {
		t.Errorf("got %s", got)
	}
}

func TestFaultJSON(t *testing.T) {
	f := Fault{Address{"Schedule", 7, 28}, "Length", "x", "p", "r"}
	data, err := json.Marshal(f)
	if want := `{"sheet":"Schedule","row":7,"column":"AB","header":"Length","found":"x","problem":"p","remedy":"r"}`; err != nil || string(data) != want {
		t.Errorf("got %s, %v", data, err)
	}
	var back Fault
	if err := json.Unmarshal(data, &back); err != nil || back != f {
		t.Errorf("got %+v, %v", back, err)
	}
	for _, bad := range []string{`{"column":"7"}`, `{"row":"x"}`} {
		if err := json.Unmarshal([]byte(bad), &back); err == nil {
			t.Errorf("%s was read as %+v", bad, back)
		}
	}
}

func TestFaultsAreSorted(t *testing.T) {
	at := func(sheet string, row, column int, found string) Fault {
		return Fault{Address{sheet, row, column}, "", found, "is wrong", ""}
	}
	f := Faults{at("S", 10, 1, "e"), at("S", 9, 2, "c"), at("S", 9, 2, "d"), at("Job", 20, 1, "a"), at("S", 9, 1, "b")}
	if err := f.Err(); err == nil {
		t.Fatal("no error")
	}
	var order []string
	for _, x := range f {
		order = append(order, x.Found)
	}
	if diff := cmp.Diff([]string{"a", "b", "c", "d", "e"}, order); diff != "" {
		t.Error(diff)
	}
	if err := (Faults{}).Err(); err != nil {
		t.Errorf("an empty list is the error %v", err)
	}
}

func TestFaultsText(t *testing.T) {
	var f Faults
	for i := range 7 {
		f = append(f, Fault{Address: Address{Row: i + 1, Column: 1}, Problem: "is wrong"})
	}
	if got := f[:1].Error(); got != "1 fault\nA1: is wrong" {
		t.Errorf("got %q", got)
	}
	got := f.Error()
	if !strings.HasPrefix(got, "7 faults\nA1: is wrong\n") || !strings.HasSuffix(got, "A5: is wrong\nand 2 more") {
		t.Errorf("got %q", got)
	}
}
