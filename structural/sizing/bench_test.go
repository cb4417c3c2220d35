package sizing

import (
	"math/rand/v2"
	"testing"

	"spanwright/structural/action"
	"spanwright/structural/section"
)

// fourHundred returns 400 sections, lightest first.
func fourHundred(b *testing.B) []section.Section {
	all := series(b, "IPE", "HEA", "HEB", "CHS", "SHS", "RHS")
	if len(all) < 400 {
		b.Fatalf("only %d sections", len(all))
	}
	kept := make([]section.Section, 0, 400)
	for i := range 400 {
		kept = append(kept, all[i*len(all)/400])
	}
	return kept
}

// tenThousand returns simple spans of 2 to 14 m under 2 to 40 kN/m.
func tenThousand() []Member {
	g := rand.New(rand.NewPCG(1, 2))
	members := make([]Member, 10000)
	for i := range members {
		l := 2 + 12*g.Float64()
		members[i] = Member{
			Length: l, Supports: pinned(0, l), DeflectionLimit: 360, RestraintSpacing: l / float64(1+g.IntN(4)),
			Actions: []action.Action{{Nature: action.Permanent, Value: 1e3}, {Value: 1e3 + 38e3*g.Float64()}},
		}
	}
	return members
}

// One operation sizes 10,000 members against 400 sections.
func BenchmarkSizeTenThousand(b *testing.B) {
	candidates, members, s := fourHundred(b), tenThousand(), setup(b, 1.5, "S355")
	b.ReportAllocs()
	passed := 0
	for b.Loop() {
		passed = 0
		for _, m := range members {
			p, err := Prepare(m, s)
			if err != nil {
				b.Fatal(err)
			}
			r, err := Lightest(p, candidates)
			if err != nil {
				b.Fatal(err)
			}
			if r.Passes {
				passed++
			}
		}
	}
	b.ReportMetric(float64(passed), "passed")
}

// The same through a Sizer, with every explanation.
func BenchmarkSizerTenThousand(b *testing.B) {
	candidates, members, s := fourHundred(b), tenThousand(), setup(b, 1.5, "S355")
	b.ReportAllocs()
	for b.Loop() {
		z, err := NewSizer(s, candidates)
		if err != nil {
			b.Fatal(err)
		}
		for _, m := range members {
			if _, err := z.Lightest(m); err != nil {
				b.Fatal(err)
			}
		}
	}
}

func BenchmarkPrepare(b *testing.B) {
	members, s := tenThousand(), setup(b, 1.5, "S355")
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		if _, err := Prepare(members[i%len(members)], s); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkUtilisation(b *testing.B) {
	candidates, s := fourHundred(b), setup(b, 1.5, "S355")
	p := prepare(b, tenThousand()[0], s)
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		if _, _, err := p.Utilisation(&candidates[i%len(candidates)]); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkExplain(b *testing.B) {
	s := setup(b, 1.5, "S355")
	p := prepare(b, tenThousand()[0], s)
	ipe := named(b, "IPE 400")
	b.ReportAllocs()
	for b.Loop() {
		if _, err := p.Explain(ipe); err != nil {
			b.Fatal(err)
		}
	}
}
