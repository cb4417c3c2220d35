package trace_test

import (
	"context"
	"os"
	"path/filepath"
	"sync"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
)

// estimate runs a schedule through the engine as an offline user would.
func estimate(tb testing.TB, data, table []byte, book ratebook.Book, edited []ratebook.Multiplier, risks ...schedule.Risk) document.Document {
	tb.Helper()
	cells, err := sheet.Open(data, "schedule.csv", "text/csv", sheet.DefaultLimits())
	if err != nil {
		tb.Fatal(err)
	}
	s, err := schedule.Read(context.Background(), cells, schedule.Options{MaxMembers: 20000, JobTable: table})
	if err != nil {
		tb.Fatal(err)
	}
	s.Risks = risks
	j, err := job.Freeze(s, job.Source{Name: "schedule.csv", SHA256: "00ff"}, book, edited, job.Sampling{Seed: 7, Replicates: 32, Trials: 64})
	if err != nil {
		tb.Fatal(err)
	}
	j.EngineVersion, j.Data = document.EngineVersion, engine.Data()
	d, err := engine.Run(context.Background(), j, nil)
	if err != nil {
		tb.Fatal(err)
	}
	return stored(tb, d)
}

// stored is a document as it is read back from its stored bytes: a trace must not
// need more.
func stored(tb testing.TB, d document.Document) document.Document {
	tb.Helper()
	data, _, err := d.Canonical()
	if err != nil {
		tb.Fatal(err)
	}
	again, err := document.Parse(data)
	if err != nil {
		tb.Fatal(err)
	}
	return again
}

func demoFile(tb testing.TB, name string) []byte {
	tb.Helper()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", name))
	if err != nil {
		tb.Fatal(err)
	}
	return data
}

// estimates are the demo's two schemes with both starting books, and a job with
// what they lack, in every design basis.
var estimates = sync.OnceValue(func() map[string]func(testing.TB) document.Document {
	out := map[string]func(testing.TB) document.Document{}
	keep := func(name string, make func(testing.TB) document.Document) {
		var once sync.Once
		var d document.Document
		out[name] = func(tb testing.TB) document.Document {
			once.Do(func() { d = make(tb) })
			return d
		}
	}
	for _, scheme := range []string{"brackwater", "brackwater-end-tower"} {
		for name, book := range map[string]func() ratebook.Book{"ratio": ratebook.Ratio, "unit-rate": ratebook.UnitRate} {
			keep(scheme+", "+name, func(tb testing.TB) document.Document {
				return estimate(tb, demoFile(tb, scheme+".csv"), demoFile(tb, scheme+"-job.csv"), book(), nil)
			})
		}
	}
	for _, basis := range []string{"allowable", "en1993", "aisc-asd", "aisc-lrfd"} {
		keep("extended, "+basis, func(tb testing.TB) document.Document {
			return estimate(tb, []byte(extended), []byte(extendedJob+"Standard,"+basis+"\n"), ratebook.UnitRate(), tides, rock)
		})
	}
	return out
})

// extended has what the demo lacks: counted joints, concrete, trains, weak-axis
// loads, tension, frequency floors, ready loads, rows of one size, outturn money,
// a cutting plan, tax and reserve. All loads are invented.
const extended = `Mark,Group,Kind,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Axial load (kN),Section or family,Grade,Mass if not sized (kg/m),Area (m²),Horizontal load (kN/m),Moving load (kN),Dynamic factor,Net area factor,Frequency floor (Hz),Load set,Joints,Concrete (m³),Same size as,Tributary width (m)
B1,Gallery / east,beam,6,16.2,simple,1,2,,HEB,S275,,,,,,,,,,,,
B2,Gallery / east,beam,8,6,simple,1,1,,IPE 300,S275,,,0.6,,1.2 horizontal,,,,2 moment,,,
B3,Gallery / east,beam,5,6,simple,1,0,,HEB,S275,,,,30; 20 @ 1.5,1.15,,,,,,,
B4,Bridge 100 %,tie,7,5,simple,0.4,0.6,-130,RHS,S355,,,,,,0.8,,,,,,
B5,Bridge 100 %,beam,4,5,simple,1,2,,HEA,S275,,,,,,,4,,,,,
B6,Bridge 100 %,beam,4,5,simple,,,,HEA,S275,,,,,,,,walkway,,,,1.2
B7,Bridge 100 %,post,9,4,strut,,,80,CHS,S275,,,,,,,,,1 pinned,,,
B8,Bridge 100 %,post,9,4,strut,,,20,CHS,S275,,,,,,,,,,,B7,
G1,Bridge 100 %,grating,10,8,not sized,,,,,,28.5 kg/m²,12,,,,,,,,,,
F1,Footings,foundation,4,,not sized,,,,,,,,,,,,,,,2.5,,
`

const extendedJob = `Key,Value
Project,Brackwater salt works
Scheme,extended
Base date,2026-07-01
Estimate class,3
Currency,USD
Stock lengths,12; 15 m
Purchase,least stock
Tax,20 %
Management reserve,150000
Spend date,2027-06-30
Money,outturn
Haul distance,120 km
Coating,hot-dip galvanised
Execution class,EXC3
Site conditions,tidal
`

var (
	tides = []ratebook.Multiplier{{Name: "tides", Scope: ratebook.GroupScope, Subject: "Bridge 100 %", Categories: []string{ratebook.Erection},
		Spread: spread.NewTriangular(1, 1.2, 1.6), Reason: "tidal work", Author: "test", Version: 3}}
	rock = schedule.Risk{Name: "piles meet rock", Probability: 0.2, Impact: spread.NewTriangular(20000, 45000, 90000), Owner: "marine engineer", Source: "invented"}
)
