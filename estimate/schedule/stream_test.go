package schedule

import (
	"context"
	"fmt"
	"runtime"
	"strings"
	"testing"

	"spanwright/estimate/sheet"
)

// A hundred thousand rows cost little beyond the members that are kept.
func TestHundredThousandRows(t *testing.T) {
	var b strings.Builder
	b.WriteString("Mark,Group,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Section or family,Grade\n")
	const rows = 100_000
	for i := range rows {
		fmt.Fprintf(&b, "B%d,Deck %d,2,%d.5,simple,1.5,2,IPE,S355\n", i, i%10, 4+i%8)
	}
	limits := sheet.DefaultLimits()
	limits.Rows, limits.Cells = rows+1, 20*rows
	book, err := sheet.Open([]byte(b.String()), "", "", limits)
	if err != nil {
		t.Fatal(err)
	}
	var before, after runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&before)
	s, err := Read(context.Background(), book, Options{})
	if err != nil {
		t.Fatal(err)
	}
	runtime.GC()
	runtime.ReadMemStats(&after)
	perRow := float64(after.HeapAlloc-before.HeapAlloc) / rows
	t.Logf("%d members, %.0f bytes held per row", len(s.Members), perRow)
	// A member is about 450 bytes with its supports and loads of 300 and the ids
	// that it feeds; the cells of its row alone would be 9 × 56.
	if !(perRow < 2000) {
		t.Errorf("%.0f bytes held per row, want under 2000", perRow)
	}
	runtime.KeepAlive(s)
}
