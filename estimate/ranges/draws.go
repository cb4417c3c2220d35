package ranges

import "math/bits"

// uniforms gives the uniform numbers of one assumption, or stream of them, or common
// factor: a function of (seed, id, replicate, index) and of the trials in a replicate.
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
func (u *uniforms) fill(dst []float64, p *permutation, replicate, start int) {
	var places [blockSize]uint32
	var words [blockSize + 3]uint32
	p.places(places[:len(dst)], start)
	u.place.fill(words[:(len(dst)+3)&^3], uint32(replicate), uint32(start/4))
	step := 1 / float64(p.n) * 0x1p-32
	for i := range dst { // place and the middle of the word's interval: below 2⁵², exact
		dst[i] = (float64(int64(uint64(places[i])<<32|uint64(words[i]))) + 0.5) * step
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
	table []uint16            // rounds tables of 2^half entries
	bytes *[rounds][256]uint8 // the same where half is at most 8, else nil
}

// newPermutation returns storage for permutations of 0 to n − 1, 16 ≤ n ≤ 2³².
func newPermutation(n int) permutation {
	half := uint32(bits.Len(uint(n-1))+1) / 2
	p := permutation{n: uint32(n), half: half, table: make([]uint16, max(rounds<<half, 8))}
	if half <= 8 {
		p.bytes = new([rounds][256]uint8)
	}
	return p
}

// draw fills the tables from a stream for one replicate.
func (p *permutation) draw(s *stream, replicate int) {
	mask := uint32(1)<<p.half - 1
	for i := 0; i < len(p.table); i += 8 {
		a, b, c, d := s.words(uint32(replicate), uint32(i/8))
		for j, w := range [4]uint32{a, b, c, d} {
			p.table[i+2*j], p.table[i+2*j+1] = uint16(w&mask), uint16(w>>16&mask)
		}
	}
	if p.bytes != nil {
		for i, v := range p.table[:rounds<<p.half] {
			p.bytes[i>>p.half][i&int(mask)] = uint8(v)
		}
	}
}

// places sets dst to the places of indices start, start + 1, …, all below n.
func (p *permutation) places(dst []uint32, start int) {
	if p.bytes != nil {
		p.bytePlaces(dst, start)
		return
	}
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

// bytePlaces is places on byte tables, whose indices need no test. The high half
// of an index is constant along a row of the network.
func (p *permutation) bytePlaces(dst []uint32, start int) {
	t, n, half := p.bytes, p.n, p.half&15
	mask := uint32(1)<<half - 1
	for k := 0; k < len(dst); {
		first := uint32(start + k)
		row := dst[k:min(len(dst), k+int(mask-first&mask)+1)]
		k += len(row)
		high := uint8(first >> half)
		for j := range row {
			l, r := high, uint8(first&mask)+uint8(j)
			for {
				l ^= t[0][r]
				r ^= t[1][l]
				l ^= t[2][r]
				r ^= t[3][l]
				l ^= t[4][r]
				r ^= t[5][l]
				i := uint32(l)<<half | uint32(r)
				if i < n {
					row[j] = i
					break
				}
			}
		}
	}
}
