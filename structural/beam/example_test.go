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

// Two wheels of 30 kN, 4 m apart, on a simple span of 20 m.
func ExampleMoveTrain() {
	b := beam.Prismatic(20, 1e8, beam.Support{Kind: beam.Pinned}, beam.Support{X: 20, Kind: beam.Pinned})
	p, err := beam.MoveTrain(b, beam.Train{Loads: []float64{30e3, 30e3}, Spacings: []float64{4}})
	if err != nil {
		fmt.Println(err)
		return
	}
	m := p.Extremes().Moment.Max
	fmt.Printf("%.1f kN.m at %.0f m, lead at %.0f m\n", m.Value/1e3, m.X, m.Lead)
	// Output: 243.0 kN.m at 9 m, lead at 13 m
}

// A simple span of 6 m, 50 kg/m: π/2 √(EI/m) / L².
func ExampleFrequency() {
	b := beam.Prismatic(6, 1.7e7, beam.Support{Kind: beam.Pinned}, beam.Support{X: 6, Kind: beam.Pinned})
	f, err := beam.Frequency(b, []beam.Mass{{From: 0, To: 6, PerMetre: 50}})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.2f Hz\n", f)
	// Output: 25.44 Hz
}

// A pair of supports under a uniform load, for the least moment.
func ExamplePlaceSupports() {
	load := beam.Case{{Kind: beam.Uniform, To: 10, Start: 1e3}}
	p, err := beam.PlaceSupports(beam.Prismatic(10, 1e7), []beam.Case{load}, []beam.Term{{Case: 0, Factor: 1}},
		beam.Layout{Free: 2, Symmetric: true}, beam.LeastMoment)
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.3f m and %.3f m\n", p.X[0], p.X[1])
	// Output: 2.071 m and 7.929 m
}
