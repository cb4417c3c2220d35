package sheet

import (
	"bytes"
	"context"
	"fmt"
	"runtime"
	"runtime/metrics"
	"sync"
	"testing"

	"github.com/xuri/excelize/v2"
)

// The offline limit on members is 100,000.
const (
	largeRows    = 100_000
	largeColumns = 12
)

func largeLimits() Limits {
	l := DefaultLimits()
	l.Rows, l.Cells, l.Bytes = largeRows, largeRows*largeColumns, 64<<20
	return l
}

// largeBook is a workbook of 100,000 rows of 5 texts and 7 numbers.
var largeBook = sync.OnceValues(func() ([]byte, error) {
	f := excelize.NewFile()
	defer f.Close()
	w, err := f.NewStreamWriter("Sheet1")
	if err != nil {
		return nil, err
	}
	row := make([]any, largeColumns)
	for i := 1; i <= largeRows; i++ {
		row[0], row[1], row[2] = fmt.Sprint("B", i), fmt.Sprint("Loading quay ", i%50), i%9
		row[3], row[4], row[5] = float64(i)/7, "simple", float64(i%40)/10
		row[6], row[7], row[8] = float64(i%70)/10, "HEB", "S355"
		row[9], row[10], row[11] = i, float64(i)*0.1, 1.1
		if err := w.SetRow(fmt.Sprint("A", i), row); err != nil {
			return nil, err
		}
	}
	if err := w.Flush(); err != nil {
		return nil, err
	}
	var out bytes.Buffer
	if err := f.Write(&out); err != nil {
		return nil, err
	}
	return bytes.Clone(out.Bytes()), nil
})

// heapBytes is what live and not yet collected objects take.
func heapBytes(sample []metrics.Sample) uint64 {
	metrics.Read(sample)
	return sample[0].Value.Uint64()
}

func TestLargeWorkbookHeap(t *testing.T) {
	data, err := largeBook()
	if err != nil {
		t.Fatal(err)
	}
	sample := []metrics.Sample{{Name: "/memory/classes/heap/objects:bytes"}}
	runtime.GC()
	runtime.GC() // the second empties the pools that building has filled
	before := heapBytes(sample)
	var peak, live uint64
	rows, cells := 0, 0
	b, err := Open(data, "large.xlsx", "", largeLimits())
	if err != nil {
		t.Fatal(err)
	}
	err = b.Rows(context.Background(), "Sheet1", func(row int, c []Cell) error {
		rows, cells = rows+1, cells+len(c)
		if rows%100 == 0 {
			peak = max(peak, heapBytes(sample))
		}
		if rows%20_000 == 0 {
			runtime.GC()
			live = max(live, heapBytes(sample))
		}
		return nil
	})
	if err != nil || rows != largeRows || cells != largeRows*largeColumns {
		t.Fatalf("%d rows, %d cells, %v", rows, cells, err)
	}
	const bound = 30 << 20
	growth := func(x uint64) int64 { return int64(x) - int64(before) }
	t.Logf("file %.1f MB; growth at most %.2f MB with garbage, %.2f MB live", float64(len(data))/1e6, float64(growth(peak))/1e6, float64(growth(live))/1e6)
	if growth(peak) > bound || growth(live) > bound/10 {
		t.Errorf("grew by %d bytes, %d of them live", growth(peak), growth(live))
	}
	runtime.KeepAlive(data)
}

func BenchmarkRows(b *testing.B) {
	data, err := largeBook()
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(int64(len(data)))
	b.ReportAllocs()
	for b.Loop() {
		book, err := Open(data, "", "", largeLimits())
		if err != nil {
			b.Fatal(err)
		}
		if err := book.Rows(context.Background(), "Sheet1", func(int, []Cell) error { return nil }); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkBuilder(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		w := NewBuilder()
		w.Sheet("Lines", Column{Head: "Line", Width: 20}, Column{Head: "Amount"})
		for i := range 1000 {
			w.Row(TextOf("line"), NumberOf(fmt.Sprintf("%d.25", i), Money))
		}
		if _, err := w.Bytes(); err != nil {
			b.Fatal(err)
		}
	}
}
