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

// philoxKeys are the keys of the ten rounds.
type philoxKeys [20]uint32

// newPhiloxKeys steps the key.
func newPhiloxKeys(k0, k1 uint32) philoxKeys {
	var k philoxKeys
	for i := 0; i < len(k); i += 2 {
		k[i], k[i+1] = k0, k1
		k0 += philoxW0
		k1 += philoxW1
	}
	return k
}

// philoxRound is one round.
func philoxRound(c0, c1, c2, c3, k0, k1 uint32) (uint32, uint32, uint32, uint32) {
	p0, p1 := uint64(philoxM0)*uint64(c0), uint64(philoxM1)*uint64(c2)
	return uint32(p1>>32) ^ c1 ^ k0, uint32(p1), uint32(p0>>32) ^ c3 ^ k1, uint32(p0)
}

// philox is Philox4x32-10: 128 random bits as a function of counter and key. The
// rounds are written out: a loop takes half as long again.
func philox(c0, c1, c2, c3 uint32, k *philoxKeys) (uint32, uint32, uint32, uint32) {
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[0], k[1])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[2], k[3])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[4], k[5])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[6], k[7])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[8], k[9])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[10], k[11])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[12], k[13])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[14], k[15])
	c0, c1, c2, c3 = philoxRound(c0, c1, c2, c3, k[16], k[17])
	return philoxRound(c0, c1, c2, c3, k[18], k[19])
}

// stream is a random sequence of its own for every (seed, purpose, id): 64 bits
// of their hash are the key, 64 more the upper half of the counter. The lower
// half is replicate and index.
type stream struct {
	keys   philoxKeys
	c2, c3 uint32
}

// newStream hashes seed, purpose and id. Purposes hold no zero byte, so that no
// two pairs of purpose and id read alike.
func newStream(seed uint64, purpose, id string) stream {
	text := binary.LittleEndian.AppendUint64(nil, seed)
	text = append(append(append(text, purpose...), 0), id...)
	sum := sha256.Sum256(text)
	word := func(i int) uint32 { return binary.LittleEndian.Uint32(sum[4*i:]) }
	return stream{keys: newPhiloxKeys(word(0), word(1)), c2: word(2), c3: word(3)}
}

// words returns words 4·quad to 4·quad + 3 of the stream in a replicate.
func (s *stream) words(replicate, quad uint32) (uint32, uint32, uint32, uint32) {
	return philox(quad, replicate, s.c2, s.c3, &s.keys)
}

// fill sets dst, a multiple of 4 long, to the words from 4·quad on.
func (s *stream) fill(dst []uint32, replicate, quad uint32) {
	for i := 0; i+4 <= len(dst); i += 4 {
		w := dst[i : i+4 : i+4]
		w[0], w[1], w[2], w[3] = s.words(replicate, quad)
		quad++
	}
}
