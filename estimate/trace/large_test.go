package trace_test

import (
	"fmt"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/document"
	"spanwright/estimate/trace"
)

// large is the demo with every member two hundred times, under other marks in the
// same items: 10,000 members. Its sums are those of the demo and do not recompute,
// which is not what it is for.
func large(tb testing.TB) document.Document {
	d := estimates()["brackwater, unit-rate"](tb)
	members := d.Members
	d.Members = nil
	for i := 0; len(d.Members) < 10_000; i++ {
		m := members[i%len(members)]
		m.Mark = fmt.Sprintf("%s copy %d", m.Mark, i/len(members))
		d.Members = append(d.Members, m)
	}
	return d
}

var asked = []string{"contingency", "category/fabrication", "group/Towers/amount", "item/Towers/CHS/size/lattice/purchased", "member/LB1 copy 7/net"}

// One tracer answers many at once, each as it does alone.
func TestTracerIsSafeForConcurrentUse(t *testing.T) {
	d := estimates()["brackwater, unit-rate"](t)
	tracer := trace.New(d)
	var wait sync.WaitGroup
	for range 4 {
		wait.Go(func() {
			for _, id := range []string{"base", "group/Towers/amount", "category/fabrication"} {
				got, err := tracer.Tree(id, trace.Limits{Nodes: 400})
				if err != nil {
					t.Error(err)
					continue
				}
				want, err := trace.New(d).Tree(id, trace.Limits{Nodes: 400})
				if diff := cmp.Diff(want, got); err != nil || diff != "" {
					t.Errorf("%s: %v %s", id, err, diff)
				}
			}
		})
	}
	wait.Wait()
}

// Of a document of 10,000 members a tree to depth 3 stays small work: it allocates
// less than a few times for each node and each term of its sums.
func TestDepthThreeOfManyMembersIsLittleWork(t *testing.T) {
	tracer := trace.New(large(t))
	for _, id := range asked {
		made := testing.AllocsPerRun(1, func() {
			if _, err := tracer.Tree(id, trace.Limits{Depth: 3, Nodes: trace.MostNodes}); err != nil {
				t.Fatal(err)
			}
		})
		if made > 250_000 {
			t.Errorf("%s: %v allocations", id, made)
		}
	}
}

func BenchmarkDepthThreeOf10000Members(b *testing.B) {
	d := large(b)
	b.Run("index", func(b *testing.B) {
		for range b.N {
			trace.New(d)
		}
	})
	tracer := trace.New(d)
	for _, id := range asked {
		b.Run(id, func(b *testing.B) {
			for range b.N {
				if _, err := tracer.Tree(id, trace.Limits{Depth: 3, Nodes: trace.MostNodes}); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
