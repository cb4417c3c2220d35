package beam

import (
	"runtime"
	"sync"
	"syscall"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// fiveSpan is a continuous member of five spans with a uniform load and a force
// in the middle of each.
type fiveSpan struct {
	beam  Beam
	cases [1]Case
}

// fiveSpans draws members as wide as spans of 4 to 12 m, 5 to 30 kN/m, up to
// 100 kN and I of 5e-5 to 5e-4 m⁴ go, by a fixed linear congruential sequence.
func fiveSpans(n int) []fiveSpan {
	state := uint64(5)
	draw := func(lo, hi float64) float64 {
		state = state*6364136223846793005 + 1442695040888963407
		return lo + (hi-lo)*float64(state>>11)/(1<<53)
	}
	out := make([]fiveSpan, n)
	for i := range out {
		x := 0.0
		supports, loads := []Support{{X: 0, Kind: Pinned}}, Case{}
		for range 5 {
			l := draw(4, 12)
			loads = append(loads, Load{Kind: Uniform, From: x, To: x + l, Start: draw(5e3, 3e4)},
				Load{Kind: Point, From: x + l/2, Start: draw(0, 1e5)})
			x += l
			supports = append(supports, Support{X: x, Kind: Pinned})
		}
		out[i].beam = Prismatic(x, 210e9*draw(5e-5, 5e-4), supports...)
		out[i].cases[0] = loads
	}
	return out
}

// analyseAll analyses all members with so many workers and returns the sum of
// their largest moments.
func analyseAll(t testing.TB, members []fiveSpan, workers int) float64 {
	sums := make([]float64, workers)
	var wait sync.WaitGroup
	for w := range workers {
		wait.Go(func() {
			var a Analyser
			var e Envelope
			terms := []Term{{Case: 0, Factor: 1}}
			for i := w * len(members) / workers; i < (w+1)*len(members)/workers; i++ {
				r, err := a.Analyse(members[i].beam, members[i].cases[:])
				if err != nil {
					t.Error(err)
					return
				}
				r.EnvelopeInto(&e, terms)
				sums[w] += e.MomentMax.Value
			}
		})
	}
	wait.Wait()
	sum := 0.0
	for _, s := range sums {
		sum += s
	}
	return sum
}

// BenchmarkFiveSpan10000 finds reactions and all extremes of 10,000 members of
// five spans on all cores: go test -bench FiveSpan10000 ./structural/beam
func BenchmarkFiveSpan10000(b *testing.B) {
	members := fiveSpans(10000)
	before := cpu(b)
	b.ReportAllocs()
	for b.Loop() {
		analyseAll(b, members, runtime.GOMAXPROCS(0))
	}
	b.ReportMetric((cpu(b)-before)/float64(b.N), "cpu-s/op")
}

// cpu returns the processor time of the process, s.
func cpu(t testing.TB) float64 {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		t.Fatal(err)
	}
	return float64(u.Utime.Sec+u.Stime.Sec) + 1e-6*float64(u.Utime.Usec+u.Stime.Usec)
}

// An Analyser gives what Analyse gives, to the bit, whatever it did before, and
// does not allocate.
func TestAnalyserReuse(t *testing.T) {
	var a Analyser
	var got Envelope
	members := fiveSpans(20)
	free := []Term{{Case: 0, Factor: 1.5, Free: true}}
	for i := range members {
		m := &members[len(members)-1-i]
		b, cases := m.beam, m.cases[:]
		if i%3 == 1 { // fewer spans, a hinge, a spring and a settlement between
			b.Supports = append([]Support{{X: 0, Kind: Fixed}, {X: b.Length, Kind: Spring, Stiffness: 1e6, Settlement: 0.01}}, b.Supports[2])
			b.Hinges = []float64{b.Supports[2].X / 2}
		}
		want, err := Analyse(b, cases)
		if err != nil {
			t.Fatal(err)
		}
		r, err := a.Analyse(b, cases)
		if err != nil {
			t.Fatal(err)
		}
		for _, terms := range [][]Term{{{Case: 0, Factor: 1}}, free} {
			r.EnvelopeInto(&got, terms)
			e := want.Envelope(terms)
			if diff := cmpEnvelope(e, got); diff != "" {
				t.Errorf("member %d: %s", i, diff)
			}
		}
	}
	terms := []Term{{Case: 0, Factor: 1}}
	allocations := testing.AllocsPerRun(20, func() {
		r, err := a.Analyse(members[0].beam, members[0].cases[:])
		if err != nil {
			t.Fatal(err)
		}
		r.EnvelopeInto(&got, terms)
	})
	if allocations != 0 {
		t.Errorf("%g allocations a member, want none", allocations)
	}
	if one, two := analyseAll(t, members, 1), analyseAll(t, members, 2); !(one > 0 && two-one <= 1e-12*one && one-two <= 1e-12*one) {
		t.Errorf("sum %g with one worker, %g with two", one, two)
	}
}

func cmpEnvelope(want, got Envelope) string {
	return cmp.Diff(want, got, cmpopts.IgnoreUnexported(Envelope{}))
}
