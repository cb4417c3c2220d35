package engine_test

import (
	"context"
	"encoding/csv"
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/money"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
)

// quick is the smallest sampling that a job may have.
var quick = job.Sampling{Seed: 7, Replicates: 32, Trials: 64}

// readCSV reads a schedule and its job table as a user would post them.
func readCSV(tb testing.TB, data, table []byte) schedule.Schedule {
	tb.Helper()
	book, err := sheet.Open(data, "schedule.csv", "text/csv", sheet.DefaultLimits())
	if err != nil {
		tb.Fatal(err)
	}
	s, err := schedule.Read(context.Background(), book, schedule.Options{MaxMembers: 20000, JobTable: table})
	if err != nil {
		tb.Fatal(err)
	}
	return s
}

func freeze(tb testing.TB, s schedule.Schedule, book ratebook.Book, edited []ratebook.Multiplier, sampling job.Sampling) job.Job {
	tb.Helper()
	j, err := job.Freeze(s, job.Source{Name: "schedule.csv"}, book, edited, sampling)
	if err != nil {
		tb.Fatal(err)
	}
	j.EngineVersion, j.Data = document.EngineVersion, engine.Data()
	return j
}

func run(tb testing.TB, j job.Job) document.Document {
	tb.Helper()
	d, err := engine.Run(context.Background(), j, nil)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

// header is the order in which the tests write their rows.
var header = []string{"Mark", "Group", "Kind", "Quantity", "Length (m)", "Support", "Permanent load (kN/m)", "Variable load (kN/m)",
	"Point load (kN)", "Point position (m)", "Axial load (kN)", "Overhang (m)", "Section or family", "Grade", "Connection class", "Mass if not sized (kg/m)"}

// randomRows writes n rows that can be sized, over families and supports.
func randomRows(r *rand.Rand, n int) [][]string {
	families := []string{"IPE", "HEA", "HEB", "CHS", "SHS", "RHS", "PIPE"}
	supports := []string{"simple", "cantilever", "fixed both ends", "propped", "overhang", "two equal spans", "strut", "not sized"}
	classes := []string{"", "simple beams", "trestles", "lattice", "tube booms", "none"}
	rows := [][]string{header}
	f := func(low, high float64, places int) string {
		return fmt.Sprintf("%.*f", places, low+(high-low)*r.Float64())
	}
	for i := range n {
		family, support := families[r.IntN(len(families))], supports[r.IntN(len(supports))]
		grade := []string{"S235", "S275", "S355"}[r.IntN(3)]
		if family == "PIPE" {
			grade = []string{"A53 B", "A106 B"}[r.IntN(2)]
		}
		row := map[string]string{"Mark": fmt.Sprintf("M%d", i+1), "Group": fmt.Sprintf("Group %d", r.IntN(4)+1), "Quantity": fmt.Sprint(1 + r.IntN(40)),
			"Length (m)": f(2, 7, 3), "Support": support, "Section or family": family, "Grade": grade, "Connection class": classes[r.IntN(len(classes))]}
		switch support {
		case "strut":
			row["Axial load (kN)"] = f(10, 120, 1)
		case "not sized":
			row["Section or family"], row["Grade"], row["Kind"], row["Mass if not sized (kg/m)"] = "", "", "handrail", f(8, 40, 2)
		case "cantilever":
			row["Length (m)"] = f(1, 2.5, 3)
			row["Permanent load (kN/m)"], row["Variable load (kN/m)"] = f(0.2, 2, 2), f(0, 3, 2)
		default:
			row["Permanent load (kN/m)"], row["Variable load (kN/m)"] = f(0.2, 3, 2), f(0, 5, 2)
			if support == "overhang" {
				row["Overhang (m)"] = f(0.3, 1.1, 3)
			}
			if r.IntN(3) == 0 {
				row["Point load (kN)"], row["Point position (m)"] = f(1, 10, 1), f(0.5, 1.5, 2)
			}
		}
		cells := make([]string, len(header))
		for k, h := range header {
			cells[k] = row[h]
		}
		rows = append(rows, cells)
	}
	return rows
}

func toCSV(rows [][]string) []byte {
	var b strings.Builder
	w := csv.NewWriter(&b)
	_ = w.WriteAll(rows) // a strings.Builder does not fail
	return []byte(b.String())
}

func table(pairs ...string) []byte {
	rows := [][]string{{"Key", "Value"}}
	for i := 0; i+1 < len(pairs); i += 2 {
		rows = append(rows, []string{pairs[i], pairs[i+1]})
	}
	return toCSV(rows)
}

// variedBook changes the starting book: currency, spreads of every kind,
// multipliers at every scope.
func variedBook(tb testing.TB, r *rand.Rand) ratebook.Book {
	tb.Helper()
	b := ratebook.Ratio()
	b.Currency = []string{"EUR", "USD", "JPY", "KWD"}[r.IntN(4)]
	b.ReferencePrice = decimal(tb, []string{"900", "887.5", "1001", "745.25"}[r.IntN(4)])
	vary := func(f ratebook.Figure) ratebook.Figure {
		m := float64(int(f.Spread.Base()*1000+float64(r.IntN(50)))) / 1000
		switch r.IntN(5) {
		case 0:
			f.Spread = spread.NewFixed(m)
		case 1:
			f.Spread = spread.NewTriangular(0.9*m, m, 1.3*m)
		case 2:
			f.Spread = spread.NewPERT(0.8*m, m, 1.5*m)
		}
		return f
	}
	price := vary(*b.MaterialPrice)
	b.MaterialPrice = &price
	for _, c := range ratebook.Categories() {
		if f, ok := b.Ratios[c]; ok {
			b.Ratios[c] = vary(f)
		}
	}
	for i, scope := range []ratebook.Scope{ratebook.ProjectScope, ratebook.SchemeScope, ratebook.GroupScope, ratebook.FamilyScope, ratebook.MemberScope} {
		if r.IntN(2) == 0 {
			continue
		}
		subject := map[ratebook.Scope]string{ratebook.GroupScope: "Group 2", ratebook.FamilyScope: "IPE", ratebook.MemberScope: "M1"}[scope]
		b.Multipliers = append(b.Multipliers, ratebook.Multiplier{Name: "site difficulty", Scope: scope, Subject: subject, Categories: []string{ratebook.Erection, ratebook.Shipping},
			Spread: spread.NewTriangular(1, 1.1+float64(i)/20, 1.6), Group: "labour", Reason: "test", Author: "test"})
	}
	if err := b.Validate(); err != nil {
		tb.Fatal(err)
	}
	return b
}

func decimal(tb testing.TB, text string) money.Decimal {
	tb.Helper()
	d, err := money.Parse(text)
	if err != nil {
		tb.Fatal(err)
	}
	return d
}

// reread parses a job from its stored bytes.
func reread(tb testing.TB, stored []byte) job.Job {
	tb.Helper()
	j, err := job.Parse(stored)
	if err != nil {
		tb.Fatal(err)
	}
	return j
}
