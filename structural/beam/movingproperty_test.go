package beam

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"
)

func drawTrain(t *rapid.T, length float64) Train {
	n := rapid.IntRange(1, 4).Draw(t, "wheels")
	var out Train
	for i := range n {
		out.Loads = append(out.Loads, rapid.Float64Range(0, 1e5).Draw(t, "load"))
		if i > 0 {
			out.Spacings = append(out.Spacings, rapid.Float64Range(0.02, 0.7).Draw(t, "spacing")*length)
		}
	}
	return out
}

// standing returns the wheels on the member; one within 1e-9 of an end counts as
// on it.
func standing(train Train, b Beam, lead float64, direction int) Case {
	var c Case
	at := lead
	for i, p := range train.Loads {
		if i > 0 {
			at -= float64(direction) * train.Spacings[i-1]
		}
		if at >= -1e-9*b.Length && at <= b.Length*(1+1e-9) {
			c = append(c, Load{Kind: Point, From: min(max(at, 0), b.Length), Start: p})
		}
	}
	return c
}

// brute compares a train's bounds at one section with static states.
type brute struct {
	beam      Beam
	train     Train
	x         float64
	side      Side
	analyser  Analyser
	bounds    [3]PlacedBounds // moment, shear, deflection
	reactions [][2]PlacedBounds
	size      [3]float64
}

func newBrute(t *rapid.T) *brute {
	b := drawBeam(t)
	for i := range b.Supports {
		b.Supports[i].Settlement = 0
	}
	out := &brute{beam: b, train: drawTrain(t, b.Length)}
	ln, fault := newLines(b)
	if fault != nil {
		t.Fatal(fault)
	}
	places := []float64{rapid.Float64Range(0.001, 0.999).Draw(t, "x") * b.Length, 0, b.Length, b.Segments[0].To}
	for _, s := range b.Supports {
		places = append(places, s.X)
	}
	out.x = rapid.SampledFrom(places).Draw(t, "place")
	out.side = rapid.SampledFrom([]Side{Left, Right}).Draw(t, "side")
	p := &Passage{moving: newMoving(ln, out.train)}
	out.bounds[0], out.bounds[1], out.bounds[2] = p.At(out.x, out.side)
	out.reactions = p.moving.reactions()
	out.size = trainSizes(t, b, out.train)
	return out
}

// state returns the effects and reactions with the train in one position.
func (b *brute) state(t *rapid.T, lead float64, direction int) (v [3]float64, F []Reaction) {
	r, err := b.analyser.Analyse(b.beam, []Case{standing(b.train, b.beam, lead, direction)})
	if err != nil {
		t.Fatal(err)
	}
	v[1], v[0], _, v[2] = r.At(0, b.x, b.side)
	return v, r.Reactions(0)
}

// none asks that no sampled position is beyond the bounds.
func (b *brute) none(t *rapid.T) {
	for i := range 160 {
		direction := 1 - 2*(i%2)
		lead := (float64(i/2)/79*3 - 1) * (b.beam.Length + b.train.length())
		v, F := b.state(t, lead, direction)
		for k := range v {
			beyond(t, "effect", v[k], b.bounds[k], b.size[k])
		}
		for k := range F {
			beyond(t, "force", F[k].F, b.reactions[k][0], b.size[1])
			beyond(t, "couple", F[k].M, b.reactions[k][1], b.size[0])
		}
	}
}

// reached asks that the position stated with a bound gives it.
func (b *brute) reached(t *rapid.T, what string, at Placed, size float64, value func([3]float64, []Reaction) float64) {
	off := math.Abs(at.Value) // of the empty member
	for _, nudge := range nudges {
		if at.Direction != 0 {
			off = math.Min(off, math.Abs(value(b.state(t, at.Lead+nudge*b.beam.Length, at.Direction))-at.Value))
		}
	}
	if !(off <= 2e-7*size) {
		t.Fatalf("%s: the stated position %+v gives another value, off by %g of %g", what, at, off, size)
	}
}

// Brute force by the static solver: no sampled position of the train is beyond
// the bounds at a section, and the position stated with a bound gives it.
func TestTrainBruteForce(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := newBrute(t)
		b.none(t)
		for k, bounds := range b.bounds {
			effect := func(v [3]float64, _ []Reaction) float64 { return v[k] }
			b.reached(t, "largest effect", bounds.Max, b.size[k], effect)
			b.reached(t, "least effect", bounds.Min, b.size[k], effect)
		}
		for k, r := range b.reactions {
			force := func(_ [3]float64, F []Reaction) float64 { return F[k].F }
			couple := func(_ [3]float64, F []Reaction) float64 { return F[k].M }
			b.reached(t, "largest force", r[0].Max, b.size[1], force)
			b.reached(t, "least force", r[0].Min, b.size[1], force)
			b.reached(t, "largest couple", r[1].Max, b.size[0], couple)
			b.reached(t, "least couple", r[1].Min, b.size[0], couple)
		}
	})
}

// nudges of the lead, in lengths of the member: shears jump where a wheel stands
// at the section, and all effects where it falls off a free end.
var nudges = [3]float64{0, -3e-9, 3e-9}

func beyond(t *rapid.T, what string, v float64, b PlacedBounds, size float64) {
	if !(v <= b.Max.Value+1e-8*size && v >= b.Min.Value-1e-8*size) {
		t.Fatalf("%s %g outside [%g, %g], size %g", what, v, b.Min.Value, b.Max.Value, size)
	}
}

// trainSizes returns the scales of moment, shear and deflection: what the whole
// train does at the worst of some places.
func trainSizes(t *rapid.T, b Beam, train Train) [3]float64 {
	total := 1.0
	for _, p := range train.Loads {
		total += p
	}
	out := [3]float64{total * b.Length * 1e-3, total, 0}
	for i := range 9 {
		r, err := Analyse(b, []Case{{{Kind: Point, From: b.Length * float64(i) / 8, Start: total}}})
		if err != nil {
			t.Fatal(err)
		}
		s := sizes(r, 0)
		out[0], out[1], out[2] = math.Max(out[0], s[1]), math.Max(out[1], s[0]), math.Max(out[2], s[3])
	}
	return out
}

// A train beside other actions: the envelope at a place is the sum of the
// others' and of the train's own bounds, and the extremes are those of the places.
func TestTrainWithOtherActions(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBeam(t)
		cases := []Case{drawCase(t, b.Length, 3), drawCase(t, b.Length, 3)}
		train := drawTrain(t, b.Length)
		alone, err := MoveTrain(b, train)
		if err != nil {
			t.Fatal(err)
		}
		r, err := AnalyseTrains(b, cases, []Train{{Loads: []float64{1}}, train})
		if err != nil {
			t.Fatal(err)
		}
		plain := analyse(t, b, cases)
		factor := rapid.Float64Range(-2, 2).Draw(t, "factor")
		others := []Term{{Case: 0, Factor: 1.35}, {Case: 1, Factor: 1.5, Free: true}}
		terms := append(others[:2:2], Term{Case: r.TrainCase(1), Factor: factor})
		e := r.Envelope(terms)
		most := [3]float64{}
		for _, x := range r.Stations() {
			for _, side := range []Side{Left, Right} {
				var got, other [3]Bounds
				var own [3]PlacedBounds
				got[1], got[0], got[2] = r.EnvelopeAt(terms, x, side)
				other[1], other[0], other[2] = plain.EnvelopeAt(others, x, side)
				own[0], own[1], own[2] = alone.At(x, side)
				size := [3]float64{1, 1, 1e-8}
				for k, b := range [3][2]Extreme{{e.MomentMax, e.MomentMin}, {e.ShearMax, e.ShearMin}, {e.DeflectionMax, e.DeflectionMin}} {
					size[k] += math.Max(b[0].Value, -b[1].Value) + math.Abs(factor)*alone.moving.size[k]*alone.moving.units()[k]
					want := other[k]
					want.move(factor, Bounds{own[k].Max.Value, own[k].Min.Value})
					over, under := got[k].Max-want.Max, want.Min-got[k].Min
					if !(over >= -1e-6*size[k] && under >= -1e-6*size[k] && over <= 2e-3*size[k] && under <= 2e-3*size[k]) {
						t.Fatalf("effect %d at %g: got %v, want %v", k, x, got[k], want)
					}
					if !(got[k].Max <= b[0].Value+1e-9*size[k] && got[k].Min >= b[1].Value-1e-9*size[k]) {
						t.Fatalf("effect %d at %g: %v beyond the extremes %v", k, x, got[k], b)
					}
					most[k] = math.Max(most[k], size[k])
				}
			}
		}
		trainAttained(t, r, terms, e, most)
	})
}

// trainAttained asks for the extremes at their own places.
func trainAttained(t *rapid.T, r *Response, terms []Term, e Envelope, size [3]float64) {
	for k, b := range [3][2]Extreme{{e.MomentMax, e.MomentMin}, {e.ShearMax, e.ShearMin}, {e.DeflectionMax, e.DeflectionMin}} {
		var hi, lo [2][3]Bounds
		for i, side := range []Side{Left, Right} {
			hi[i][1], hi[i][0], hi[i][2] = r.EnvelopeAt(terms, b[0].X, side)
			lo[i][1], lo[i][0], lo[i][2] = r.EnvelopeAt(terms, b[1].X, side)
		}
		if got := math.Max(hi[0][k].Max, hi[1][k].Max); !(math.Abs(got-b[0].Value) <= 1e-8*size[k]) {
			t.Fatalf("effect %d: maximum %v, at its place %g", k, b[0], got)
		}
		if got := math.Min(lo[0][k].Min, lo[1][k].Min); !(math.Abs(got-b[1].Value) <= 1e-8*size[k]) {
			t.Fatalf("effect %d: minimum %v, at its place %g", k, b[1], got)
		}
	}
}

func TestTrainFaults(t *testing.T) {
	b := Prismatic(10, 1e7, Support{Kind: Pinned}, Support{X: 10, Kind: Pinned})
	for _, row := range []struct {
		name  string
		train Train
	}{
		{"no wheels", Train{}},
		{"spacings", Train{Loads: []float64{1, 2}}},
		{"NaN load", Train{Loads: []float64{math.NaN()}}},
		{"uplift", Train{Loads: []float64{-1}}},
		{"spacing zero", Train{Loads: []float64{1, 2}, Spacings: []float64{0}}},
		{"NaN spacing", Train{Loads: []float64{1, 2}, Spacings: []float64{math.NaN()}}},
		{"too many", Train{Loads: make([]float64, largestTrain+1), Spacings: make([]float64, largestTrain)}},
		{"too long", Train{Loads: make([]float64, 3), Spacings: []float64{1e308, 1e308}}},
	} {
		_, err := MoveTrain(b, row.train)
		var fault *Fault
		if !errors.As(err, &fault) || fault.Kind != FaultTrain {
			t.Errorf("%s: %v, want a fault of kind %q", row.name, err, FaultTrain)
		}
	}
	if _, err := MoveTrain(Prismatic(10, 1e7, Support{Kind: Pinned}), Train{Loads: []float64{1}}); err == nil {
		t.Error("a train on a mechanism is analysed")
	}
}
