package workbook

import (
	"fmt"
	"runtime"
	"testing"
	"time"

	"spanwright/estimate/document"
)

// large is a document of many items like those of a seed, with ten lines each and
// percentages of all of them.
func large(t testing.TB, items int) document.Document {
	_, g := unitRate(t, 1, "EUR", nil)
	g.d = estimate(t, "EUR", nil)
	for i := range items {
		g.item(i)
	}
	for _, it := range g.d.Items {
		g.itemLines(it)
	}
	g.wholeStructure()
	g.totals()
	return g.d
}

// Ten thousand lines are written in seconds, and what is held grows no faster than
// the lines. The bound leaves room for a busy machine.
func TestTenThousandLines(t *testing.T) {
	d := large(t, 1112)
	if len(d.Lines) < 10_000 {
		t.Fatalf("only %d lines", len(d.Lines))
	}
	var before, after runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&before)
	start := time.Now()
	data := write(t, d)
	took := time.Since(start)
	runtime.ReadMemStats(&after)
	t.Logf("%d lines, %d quantities: %v, %.1f MB written, %.0f MB allocated in all", len(d.Lines), 10*len(d.Items), took.Round(time.Millisecond),
		float64(len(data))/1e6, float64(after.TotalAlloc-before.TotalAlloc)/1e6)
	if took > 30*time.Second {
		t.Errorf("it took %v", took)
	}
}

func BenchmarkXLSX(b *testing.B) {
	for _, items := range []int{12, 112, 1112} {
		d := large(b, items)
		b.Run(fmt.Sprint(len(d.Lines), " lines"), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := XLSX(d); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
