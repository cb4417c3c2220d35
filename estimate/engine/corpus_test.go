package engine_test

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"testing"

	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
)

// wideHeader are the further columns of the corpus.
var wideHeader = []string{"Horizontal load (kN/m)", "Moving load (kN)", "Dynamic factor", "Frequency floor (Hz)", "Same size as", "Load set", "Tributary width (m)", "Moment factor", "Net area factor", "Max depth (mm)"}

// designBases are those of the corpus, in turn.
var designBases = []string{"allowable", "en1993", "aisc-asd", "aisc-lrfd"}

// beamFamilies and strutFamilies are what a basis covers in bending, and in
// compression with the bending of own weight, with a grade of each.
var (
	beamFamilies = map[string][][2]string{
		"eu": {{"IPE", "S275"}, {"HEA", "S355"}, {"HEB", "S235"}, {"HEM", "S355"}, {"UPN", "S275"}, {"UPE", "S235"}, {"CHS", "S355"}, {"SHS", "S355H"}, {"RHS", "S275"}, {"PIPE", "A106 B"}},
		"us": {{"W", "A992"}, {"W", "A572 50"}, {"C", "A36"}, {"HSS", "A500 C"}, {"HSS-ROUND", "A500 B"}, {"PIPE", "A53 B"}},
	}
	strutFamilies = map[string][][2]string{
		"eu": {{"HEA", "S355"}, {"HEB", "S235"}, {"CHS", "S355"}, {"SHS", "S355H"}, {"PIPE", "A106 B"}},
		"us": {{"W", "A992"}, {"HSS", "A500 C"}, {"HSS-ROUND", "A500 B"}, {"PIPE", "A53 B"}},
	}
)

// widen gives the rows of randomRows the sections of a market and, to some, the
// further columns.
func widen(r *rand.Rand, rows [][]string, market string) [][]string {
	at := func(h string) int { return slices.Index(rows[0], h) }
	out := [][]string{slices.Concat(rows[0], wideHeader)}
	last := map[string]string{} // a mark by family
	for _, row := range rows[1:] {
		more := make([]string, len(wideHeader))
		set := func(h, v string) { more[slices.Index(wideHeader, h)] = v }
		families := beamFamilies[market]
		switch row[at("Support")] {
		case "not sized":
			out = append(out, slices.Concat(row, more))
			continue
		case "strut":
			families = strutFamilies[market]
			if r.IntN(3) == 0 {
				row[at("Axial load (kN)")] = "-" + row[at("Axial load (kN)")]
				set("Net area factor", "0.8")
			}
		default:
			widenBeam(r, row, at, set)
		}
		f := families[r.IntN(len(families))]
		row[at("Section or family")], row[at("Grade")] = f[0], f[1]
		if mark, ok := last[f[0]+f[1]]; ok && r.IntN(2) == 0 {
			set("Same size as", mark)
		}
		last[f[0]+f[1]] = row[at("Mark")]
		out = append(out, slices.Concat(row, more))
	}
	return out
}

func widenBeam(r *rand.Rand, row []string, at func(string) int, set func(h, v string)) {
	if r.IntN(3) == 0 {
		set("Horizontal load (kN/m)", fmt.Sprintf("%.2f", 0.1+0.3*r.Float64()))
	}
	if r.IntN(3) == 0 {
		set("Moving load (kN)", fmt.Sprintf("%.1f; %.1f @ %.2f", 1+4*r.Float64(), 1+4*r.Float64(), 0.8+r.Float64()))
		set("Dynamic factor", "1.2")
	}
	if r.IntN(3) == 0 {
		set("Frequency floor (Hz)", fmt.Sprint(3+r.IntN(3)))
	}
	if r.IntN(4) == 0 {
		row[at("Variable load (kN/m)")] = ""
		set("Load set", []string{"walkway", "snow"}[r.IntN(2)])
		set("Tributary width (m)", "1.1")
	}
	if r.IntN(4) == 0 {
		set("Moment factor", "1.1")
	}
	if r.IntN(6) == 0 {
		set("Max depth (mm)", "700")
	}
}

// The corpus holds what the engine can be asked for: every basis, the families of
// both markets, every kind of load and limit, groups and shortcuts.
func TestCorpusCoversItsGround(t *testing.T) {
	seen := map[string]int{}
	for i := range corpusSize {
		j := corpusJob(t, i)
		seen["basis "+j.Settings.DesignBasis]++
		for _, m := range j.Members {
			seen["family "+m.Family]++
			for _, l := range m.Loads {
				seen["load "+l.Kind]++
				if l.Sideways {
					seen["sideways"]++
				}
				if l.Dynamic > 1 {
					seen["dynamic"]++
				}
			}
			for what, is := range map[string]bool{"floor": m.FrequencyFloor > 0, "tied": m.SameSizeAs != "", "set": m.LoadSet != "", "C1": m.MomentFactor > 0, "net": m.NetAreaFactor > 0, "depth": m.MaxDepth > 0} {
				if is {
					seen[what]++
				}
			}
		}
	}
	for i := range corpusSize {
		j := corpusJob(t, i)
		seen["book "+j.Book.Kind]++
		seen["money "+j.Settings.Money]++
		seen["purchase "+j.Settings.Purchase]++
	}
	want := []string{"book ratio", "book unit-rate", "money base date", "money outturn", "purchase waste", "purchase first fit", "purchase least stock", "load uniform", "load point", "load train", "sideways", "dynamic", "floor", "tied", "set", "C1", "net", "depth"}
	for _, b := range designBases {
		want = append(want, "basis "+b)
	}
	for _, market := range beamFamilies {
		for _, f := range market {
			want = append(want, "family "+f[0])
		}
	}
	for _, w := range want {
		if seen[w] == 0 {
			t.Errorf("the corpus has no %s", w)
		}
	}
}

// corpusJob is the i-th job of the golden corpus.
func corpusJob(tb testing.TB, i int) job.Job {
	tb.Helper()
	r := rand.New(rand.NewPCG(uint64(i), 2026))
	book := variedBook(tb, r)
	basis := designBases[i%4]
	pairs := []string{"Project", fmt.Sprintf("Corpus %d", i), "Scheme", "one", "Currency", book.Currency, "Estimate class", fmt.Sprint(1 + i%5), "Standard", basis,
		"Base date", "2026-06-01", "Confidence", []string{"0.8", "0.5", "0.85"}[i%3], "Ground snow (kN/m²)", "1.2"}
	if basis == "allowable" {
		pairs = append(pairs, "Factor", []string{"1.67", "3", "4"}[i%3])
	}
	if i >= 36 { // the last ones are priced by unit rates, in four currencies and two moneys
		book = ratebook.UnitRate()
		pairs[slices.Index(pairs, "Currency")+1] = []string{"EUR", "USD", "JPY", "KWD"}[i%4]
		pairs = append(pairs, "Coating", []string{"C4 high", "hot-dip galvanised", "none", "C3 medium"}[i%4], "Execution class", []string{"EXC2", "EXC3", "AISC static"}[i%3],
			"Haul distance (km)", fmt.Sprint(40+10*i), "Site conditions", []string{"tidal", "over water; height", "weather"}[i%3])
		if i%2 == 1 {
			pairs = append(pairs, "Money", "outturn", "Spend date", fmt.Sprintf("20%d-03-01", 28+i%4))
		}
		if i%3 == 0 {
			pairs = append(pairs, "Stock lengths (m)", "12; 15.1", "Purchase", []string{"first fit", "least stock"}[i%2])
		}
	}
	rows := randomRows(r, 3+i%10)
	if i >= 12 { // the first ones keep to the columns of the first version
		rows = widen(r, rows, []string{"eu", "us"}[i/2%2])
	}
	return freeze(tb, readCSV(tb, toCSV(rows), table(pairs...)), book, nil, quick)
}
