package ranges

import "math/bits"

// uniforms gives the uniform numbers of one assumption or common factor: a
// function of (seed, id, replicate, index) and of the trials in a replicate.
// Within a replicate they are a Latin hypercube sample (McKay, Beckman, Conover
// 1979, Technometrics 21): each of the n strata of width 1/n is hit once, in an
// order of the stream's own, at a random place inside. It takes the part of the
// total that is additive in the assumptions out of the sampling error.
type uniforms struct {
	place stream // where in its stratum a draw lies
	order stream // which stratum an index takes
}

// newUniforms returns the numbers of an id; kind parts assumptions from groups.
func newUniforms(seed uint64, kind, id string) uniforms {
	return uniforms{place: newStream(seed, kind+" place", id), order: newStream(seed, kind+" order", id)}
}

// fill sets dst, of at most blockSize, to the numbers of indices start, start + 1,
// …, in the open interval 0 to 1. start is a multiple of 4; p is order's
// permutation for this replicate.
func (u uniforms) fill(dst []float64, p *permutation, replicate, start int) {
	var places [blockSize + 3]uint32
	var words [blockSize + 3]uint32
	p.places(places[:len(dst)], start)
	for i := 0; i < len(dst); i += 4 {
		w := words[i : i+4]
		w[0], w[1], w[2], w[3] = u.place.words(uint32(replicate), uint32((start+i)/4))
	}
	step := 1 / float64(p.n)
	for i := range dst {
		inside := (float64(words[i]) + 0.5) * 0x1p-32
		dst[i] = (float64(places[i]) + inside) * step
	}
}

// rounds of the Feistel network. Four make a pseudo-random permutation of random
// round functions (Luby, Rackoff 1988, SIAM Journal on Computing 17); two more
// because the halves are short here.
const rounds = 6

// permutation is a random order of 0 to n − 1: a Feistel network on twice half
// bits with random tables as round functions, walked until it lands below n.
type permutation struct {
	n     uint32
	half  uint32
	table []uint16 // rounds tables of 2^half entries
}

// newPermutation returns storage for permutations of 0 to n − 1, 16 ≤ n ≤ 2³².
func newPermutation(n int) permutation {
	half := uint32(bits.Len(uint(n-1))+1) / 2
	return permutation{n: uint32(n), half: half, table: make([]uint16, max(rounds<<half, 8))}
}

// draw fills the tables from a stream for one replicate.
func (p *permutation) draw(s stream, replicate int) {
	mask := uint32(1)<<p.half - 1
	for i := 0; i < len(p.table); i += 8 {
		a, b, c, d := s.words(uint32(replicate), uint32(i/8))
		for j, w := range [4]uint32{a, b, c, d} {
			p.table[i+2*j], p.table[i+2*j+1] = uint16(w&mask), uint16(w>>16&mask)
		}
	}
}

// places sets dst to the places of indices start, start + 1, …, all below n.
func (p *permutation) places(dst []uint32, start int) {
	t, n, half := p.table, p.n, p.half&15
	size := uint32(1) << half
	for k := range dst {
		i := uint32(start + k)
		for {
			l, r := i>>half, i&(size-1)
			l ^= uint32(t[r])
			r ^= uint32(t[size+l])
			l ^= uint32(t[2*size+r])
			r ^= uint32(t[3*size+l])
			l ^= uint32(t[4*size+r])
			r ^= uint32(t[5*size+l])
			i = l<<half | r
			if i < n {
				break
			}
		}
		dst[k] = i
	}
}
