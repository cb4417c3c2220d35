package ranges

import (
	"fmt"
	"testing"
)

// Source: known-answer vectors of philox4x32-10 published with Salmon, Moraes,
// Dror, Shaw 2011 (kat_vectors), from memory.
func TestPhiloxKnownAnswers(t *testing.T) {
	const ones = 0xffffffff
	for _, c := range []struct {
		counter [4]uint32
		key     [2]uint32
		want    string
	}{
		{[4]uint32{}, [2]uint32{}, "6627e8d5 e169c58d bc57ac4c 9b00dbd8"},
		{[4]uint32{ones, ones, ones, ones}, [2]uint32{ones, ones}, "408f276d 41c83b0e a20bc7c6 6d5451fd"},
		{[4]uint32{0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344}, [2]uint32{0xa4093822, 0x299f31d0}, "d16cfe09 94fdcceb 5001e420 24126ea1"},
	} {
		keys := newPhiloxKeys(c.key[0], c.key[1])
		a, b, x, y := philox(c.counter[0], c.counter[1], c.counter[2], c.counter[3], &keys)
		if got := fmt.Sprintf("%08x %08x %08x %08x", a, b, x, y); got != c.want {
			t.Errorf("counter %x, key %x: %s, want %s", c.counter, c.key, got, c.want)
		}
	}
}

func TestStreamsDiffer(t *testing.T) {
	seen := map[stream]string{}
	for _, seed := range []uint64{0, 1, 1 << 63} {
		for _, purpose := range []string{"assumption place", "assumption order", "group place"} {
			for _, id := range []string{"", "a", "b", "ab", "rate.steel", "rate.steel "} {
				name := fmt.Sprintf("%d/%s/%s", seed, purpose, id)
				s := newStream(seed, purpose, id)
				if other, ok := seen[s]; ok {
					t.Errorf("%s and %s share a stream", name, other)
				}
				seen[s] = name
			}
		}
	}
}

func BenchmarkUniforms(b *testing.B) {
	u, p, dst := newUniforms(1, "assumption", "a"), newPermutation(4096), make([]float64, blockSize)
	p.draw(&u.order, 0)
	b.ReportAllocs()
	for b.Loop() {
		u.fill(dst, &p, 0, 512)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/blockSize, "ns/draw")
}
