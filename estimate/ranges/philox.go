package ranges

import (
	"crypto/sha256"
	"encoding/binary"
)

// Constants of Philox4x32: multipliers and the steps of the key (Salmon, Moraes,
// Dror, Shaw 2011, "Parallel random numbers: as easy as 1, 2, 3", SC '11).
const (
	philoxM0 = 0xD2511F53
	philoxM1 = 0xCD9E8D57
	philoxW0 = 0x9E3779B9
	philoxW1 = 0xBB67AE85
)

// philox is Philox4x32-10: 128 random bits as a function of counter and key.
func philox(c0, c1, c2, c3, k0, k1 uint32) (uint32, uint32, uint32, uint32) {
	for range 10 {
		p0, p1 := uint64(philoxM0)*uint64(c0), uint64(philoxM1)*uint64(c2)
		c0, c1, c2, c3 = uint32(p1>>32)^c1^k0, uint32(p1), uint32(p0>>32)^c3^k1, uint32(p0)
		k0 += philoxW0
		k1 += philoxW1
	}
	return c0, c1, c2, c3
}

// stream is a random sequence of its own for every (seed, purpose, id): 64 bits
// of their hash are the key, 64 more the upper half of the counter. The lower
// half is replicate and index.
type stream struct{ k0, k1, c2, c3 uint32 }

// newStream hashes seed, purpose and id. Purposes hold no zero byte, so that no
// two pairs of purpose and id read alike.
func newStream(seed uint64, purpose, id string) stream {
	text := binary.LittleEndian.AppendUint64(nil, seed)
	text = append(append(append(text, purpose...), 0), id...)
	sum := sha256.Sum256(text)
	word := func(i int) uint32 { return binary.LittleEndian.Uint32(sum[4*i:]) }
	return stream{k0: word(0), k1: word(1), c2: word(2), c3: word(3)}
}

// words returns words 4·quad to 4·quad + 3 of the stream in a replicate.
func (s stream) words(replicate, quad uint32) (uint32, uint32, uint32, uint32) {
	return philox(quad, replicate, s.c2, s.c3, s.k0, s.k1)
}
