package beam

import "testing"

// A wheel P, then two of them 2 m apart, on two spans of l with an overhang of o:
// moments P l/4 and P o, the reaction of the inner support P, of two wheels
// P (2 - 2/l) whether they stand on one side or astride (elementary statics).
func TestSplitTrains(t *testing.T) {
	const l, o, P, EI = 8.0, 3.0, 5e4, 1e7
	pin := func(x float64) Support { return Support{X: x, Kind: Pinned} }
	b := Prismatic(2*l+o, EI, pin(0), pin(l), Support{X: 2 * l, Kind: Pinned, Settlement: 0.01})
	cases := []Case{{{Kind: Uniform, To: 2*l + o, Start: 1e3}}}
	trains := []Train{{Loads: []float64{P}}, {Loads: []float64{P, P}, Spacings: []float64{2}}}
	r, err := AnalyseTrains(b, cases, trains)
	if err != nil {
		t.Fatal(err)
	}
	one, err := SplitTrains(b, cases, trains, []Term{{Case: r.TrainCase(0), Factor: 1}})
	if err != nil {
		t.Fatal(err)
	}
	two, err := SplitTrains(b, cases, trains, []Term{{Case: r.TrainCase(1), Factor: 1}, {Case: 0, Factor: 1}})
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range []struct {
		name      string
		got, want float64
	}{
		{"span moment", one.Pieces[0].MomentMax.Value, P * l / 4},
		{"overhang moment", one.Pieces[2].MomentMin.Value, -P * o},
		{"shear", one.Pieces[1].ShearMax.Value, P},
		{"tip", one.Pieces[2].DeflectionMax.Value, P * o * o * o / (3 * EI)},
		{"end reaction", one.Reactions[0].F, P},
		{"inner reaction", one.Reactions[1].F, P},
		{"two wheels and load, inner reaction", two.Reactions[1].F, P*(2-2/l) + 1e3*l},
		{"two wheels and load, outer support", two.Reactions[2].F, 2*P + 1e3*(l/2+o)},
	} {
		closer(t, row.name, row.got, row.want, P*l, 1e-6)
	}
	ratios := Compare(one, r.Envelope([]Term{{Case: r.TrainCase(0), Factor: 1}}))
	if len(ratios) == 0 {
		t.Error("no ratios")
	}
	if _, err := SplitTrains(b, cases, trains, []Term{{Case: 4, Factor: 1}}); err == nil {
		t.Error("a term without a case is taken")
	}
	if _, err := SplitTrains(b, cases, []Train{{}}, nil); err == nil {
		t.Error("a train without wheels is taken")
	}
}

// Without trains the split method is as it was.
func TestSplitTrainsFixed(t *testing.T) {
	b := Prismatic(6, 1e7, Support{Kind: Fixed}, Support{X: 6, Kind: Fixed})
	s, err := SplitTrains(b, nil, []Train{{Loads: []float64{1e4}}}, []Term{{Case: 0, Factor: 1}})
	if err != nil {
		t.Fatal(err)
	}
	// fixed both ends: P a b²/l² is largest at l/3, 4/27 P l
	closer(t, "moment", s.Pieces[0].MomentMin.Value, -4.0/27*1e4*6, 1e4, 1e-6)
	closer(t, "couple", s.Reactions[1].M, 4.0/27*1e4*6, 1e4, 1e-9)
}
