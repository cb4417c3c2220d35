package beam_test

import (
	"fmt"

	"spanwright/structural/beam"
)

// A boom of 30 m held at one end and at 20 m, with a variable load that may
// stand on the span, on the overhang, on both or on neither.
func Example() {
	b := beam.Prismatic(30, 210e9*1e-3,
		beam.Support{X: 0, Kind: beam.Pinned}, beam.Support{X: 20, Kind: beam.Pinned})
	cases := []beam.Case{
		{{Kind: beam.Uniform, To: 30, Start: 2000}},
		{{Kind: beam.Uniform, To: 20, Start: 3000}},
		{{Kind: beam.Uniform, From: 20, To: 30, Start: 3000}},
	}
	terms := []beam.Term{{Case: 0, Factor: 1}, {Case: 1, Factor: 1, Free: true}, {Case: 2, Factor: 1, Free: true}}
	r, err := beam.Analyse(b, cases)
	if err != nil {
		fmt.Println(err)
		return
	}
	e := r.Envelope(terms)
	fmt.Printf("span %.1f kN.m, support %.1f kN.m\n", e.MomentMax.Value/1e3, e.MomentMin.Value/1e3)
	s, err := beam.Split(b, cases, terms)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, ratio := range beam.Compare(s, e) {
		if ratio.Unsafe {
			fmt.Printf("%s, %s: %.2f\n", ratio.Effect, ratio.Where, ratio.Ratio)
		}
	}
	// Output:
	// span 202.5 kN.m, support -250.0 kN.m
	// shear, span 1: 0.80
	// deflection, right overhang: 0.38
	// reaction, support at 20 m: 0.89
}
