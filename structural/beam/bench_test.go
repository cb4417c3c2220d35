package beam

import "testing"

// spans returns a continuous member of n spans of 6 m with, as cases, its own
// weight, a permanent load and one variable load for each span.
func spanned(t testing.TB, n int) (*Response, []Term) {
	t.Helper()
	length := 6 * float64(n)
	b := Prismatic(length, 1)
	cases := []Case{{{Kind: Uniform, To: length, Start: 1}}, {{Kind: Uniform, To: length, Start: 5e3}}}
	terms := []Term{{Case: 0, Factor: 800}, {Case: 1, Factor: 1.35}}
	for i := range n + 1 {
		b.Supports = append(b.Supports, Support{X: 6 * float64(i), Kind: Pinned})
		if i > 0 {
			cases = append(cases, Case{{Kind: Uniform, From: 6 * float64(i-1), To: 6 * float64(i), Start: 8e3}})
			terms = append(terms, Term{Case: i + 1, Factor: 1.5, Free: true})
		}
	}
	r, err := Analyse(b, cases)
	if err != nil {
		t.Fatal(err)
	}
	return r, terms
}

func benchEnvelope(b *testing.B, n int, into func(*Response, *Envelope, []Term)) {
	r, terms := spanned(b, n)
	var e Envelope
	b.ReportAllocs()
	for b.Loop() {
		into(r, &e, terms)
	}
}

func BenchmarkEnvelope1(b *testing.B) { benchEnvelope(b, 1, (*Response).EnvelopeInto) }
func BenchmarkEnvelope5(b *testing.B) { benchEnvelope(b, 5, (*Response).EnvelopeInto) }
func BenchmarkForces1(b *testing.B)   { benchEnvelope(b, 1, (*Response).EnvelopeForces) }
func BenchmarkForces5(b *testing.B)   { benchEnvelope(b, 5, (*Response).EnvelopeForces) }

func BenchmarkAnalyse5(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		spanned(b, 5)
	}
}

// benchTrain finds the bounds of four wheels on n spans.
func benchTrain(b *testing.B, n int) {
	r, _ := spanned(b, n)
	m := Beam{Length: 6 * float64(n), Segments: []Segment{{To: 6 * float64(n), EI: 1}}}
	for _, x := range r.supports {
		m.Supports = append(m.Supports, Support{X: x, Kind: Pinned})
	}
	t := Train{Loads: []float64{9e4, 9e4, 7e4, 7e4}, Spacings: []float64{3.6, 1.2, 3}}
	var e Envelope
	b.ReportAllocs()
	for b.Loop() {
		r, err := AnalyseTrains(m, nil, []Train{t})
		if err != nil {
			b.Fatal(err)
		}
		b.ReportMetric(float64(len(r.x)), "pieces")
		r.EnvelopeInto(&e, []Term{{Case: 0, Factor: 1}})
	}
}

func BenchmarkTrain1(b *testing.B) { benchTrain(b, 1) }
func BenchmarkTrain5(b *testing.B) { benchTrain(b, 5) }
