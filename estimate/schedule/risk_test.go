package schedule

import (
	"context"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"spanwright/estimate/sheet"
	"spanwright/estimate/spread"
)

// riskTable is invented, as are its amounts.
const riskTable = `Risk,Probability (%),Low,Likely,High,Owner,Source
piles meet rock,20,20000,"45,000",90000,marine engineer,"ground report, invented"
,,,,,,
Crane barge is free,12.5 %,-60000,-40000,-10000.5,,
ice,1,,5000,,,
"Storm  10 days",30,7000,7000,7000,,
`

var risksRead = []Risk{
	{Name: "Crane barge is free", Probability: 0.125, Impact: spread.NewTriangular(-60000, -40000, -10000.5)},
	{Name: "Storm 10 days", Probability: 0.3, Impact: spread.NewFixed(7000)},
	{Name: "ice", Probability: 0.01, Impact: spread.NewFixed(5000)},
	{Name: "piles meet rock", Probability: 0.2, Impact: spread.NewTriangular(20000, 45000, 90000), Owner: "marine engineer", Source: "ground report, invented"},
}

// sheets adds tables in CSV to a workbook; numbers in the texts become numbers.
func sheets(t *testing.T, tables map[string]string) func(f *excelize.File) {
	return func(f *excelize.File) {
		for name, text := range tables {
			book, err := sheet.Open([]byte(text), "", "", sheet.DefaultLimits())
			if err != nil {
				t.Fatal(err)
			}
			if _, err := f.NewSheet(name); err != nil {
				t.Fatal(err)
			}
			err = book.Rows(context.Background(), "", func(row int, cells []sheet.Cell) error {
				for _, c := range cells {
					at := sheet.Letters(c.Column) + strconv.Itoa(row)
					if x, err := strconv.ParseFloat(c.Text, 64); err == nil {
						_ = f.SetCellFloat(name, at, x, -1, 64) // checked by the values read
					} else {
						_ = f.SetCellStr(name, at, c.Text)
					}
				}
				return nil
			})
			if err != nil {
				t.Fatal(err)
			}
		}
	}
}

const annexJSON = `{"rows":[` + oneRow + `],
	"risks":[
		{"Risk":"piles meet rock","Probability (%)":20,"Low":20000,"Likely":45000,"High":90000,"Owner":"marine engineer","Source":"ground report, invented"},
		{"Probability (%)":"12.5 %","Risk":"Crane barge is free","Low":-60000,"Likely":-40000,"High":-10000.5},
		{"Risk":"ice","Probability (%)":1,"Low":null,"Likely":5000},
		{"Risk":"Storm 10 days","Probability (%)":30,"Low":7000,"Likely":7000,"High":7000}],
	"definition":[{"Item":"prices and quotations","State":"none"},{"Item":"execution class","State":"Defined","Remark":"EXC3 agreed"},{"Item":"loads and actions","State":"preliminary"}]}`

func TestRisksAndDefinitionInAllEncodings(t *testing.T) {
	check := func(name string, s Schedule, err error) {
		t.Helper()
		if err != nil {
			t.Errorf("%s: %v", name, err)
			return
		}
		if diff := cmp.Diff(risksRead, s.Risks); diff != "" {
			t.Errorf("%s: risks (-want +got):\n%s", name, diff)
		}
		if diff := cmp.Diff(definitionRead, s.Settings.Definition); diff != "" {
			t.Errorf("%s: definition (-want +got):\n%s", name, diff)
		}
		for _, r := range s.Risks {
			if err := r.Impact.Validate(); err != nil {
				t.Errorf("%s: %s: %v", name, r.Name, err)
			}
		}
	}
	s, err := readCSV(t, oneBeam, Options{RiskTable: []byte(riskTable), DefinitionTable: []byte(definitionTable)})
	check("CSV", s, err)
	comma := strings.NewReplacer(`"45,000"`, "45.000", `"ground report, invented"`, "ground report, invented", ",", ";", "12.5", "12,5", "10000.5", "10000,5").Replace(riskTable)
	comma = strings.Replace(comma, "ground report; invented", "ground report, invented", 1)
	s, err = readCSV(t, oneBeam, Options{RiskTable: []byte(comma), DefinitionTable: []byte(definitionTable)})
	check("CSV with decimal commas", s, err)
	s, err = Read(context.Background(), workbook(t, everyColumn, job, sheets(t, map[string]string{"risks": riskTable, "Definition": definitionTable})), Options{})
	check("XLSX", s, err)
	s, err = ReadJSON(context.Background(), []byte(annexJSON), Options{})
	check("JSON", s, err)
}

func TestFaultsOfRisks(t *testing.T) {
	const head = "Risk,Probability (%),Low,Likely,High\n"
	for _, c := range []struct{ table, at, problem, remedy string }{
		{head + ",20,1,2,3\n", "Risks!A2", "Risk is blank", "name"},
		{head + "ice,20,1,2,3\nIce,20,1,2,3\n", "Risks!A3", "in row 2 already", "one row"},
		{head + strings.Repeat("x", 61) + ",20,1,2,3\n", "Risks!A2", "61 characters", "60"},
		{head + "ice,,1,2,3\n", "Risks!B2", "probability is blank", "below 100 %"},
		{head + "ice,0,1,2,3\n", "Risks!B2", "out of bounds", "above 0"},
		{head + "ice,-5,1,2,3\n", "Risks!B2", "out of bounds", "above 0"},
		{head + "ice,100,1,2,3\n", "Risks!B2", "is certain", "belongs into the schedule"},
		{head + "ice,101,1,2,3\n", "Risks!B2", "out of bounds", "below 100 %"},
		{head + "ice,NaN,1,2,3\n", "Risks!B2", "not a number", "percentage"},
		{"Risk,Probability,Likely\nice,20,2\n", "Risks!B2", "no unit", "%"},
		{head + "ice,20,1,,3\n", "Risks!D2", "likely amount is blank", "alone or between"},
		{head + "ice,20,,2,3\n", "Risks!C2", "blank, and High is given", "both"},
		{head + "ice,20,1,2,\n", "Risks!E2", "blank, and Low is given", "both"},
		{head + "ice,20,3,2,1\n", "Risks!D2", "out of order", "low ≤ likely ≤ high"},
		{head + "ice,20,-1,-2,-3\n", "Risks!D2", "out of order", "negative"},
		{head + "ice,20,,0,\n", "Risks!D2", "changes no cost", "negative"},
		{head + "ice,20,1,2 m,3\n", "Risks!D2", "m is a length", "plain number"},
		{head + "ice,20,1,2,1e13\n", "Risks!E2", "out of bounds", "1e12"},
		{"Risk,Chance,Likely\nice,20,2\n", "Risks!B1", "not known", "did you mean Probability (%)"},
		{"Risk,Probability (%),Likly\nice,20,2\n", "Risks!C1", "not known", "did you mean Likely"},
		{"Risk,Probability (kg),Likely\nice,20,2\n", "Risks!B1", "wrong unit", "Probability (%)"},
		{"Risk,Likely\nice,2\n", "Risks!1", "column is missing", "add a column Probability (%)"},
	} {
		_, err := readCSV(t, oneBeam, Options{RiskTable: []byte(c.table)})
		faults := faultsOf(t, err)
		if len(faults) != 1 || faults[0].Address.String() != c.at || !strings.Contains(faults[0].Problem, c.problem) || !strings.Contains(faults[0].Remedy, c.remedy) {
			t.Errorf("%q: faults %v, want one at %s: %s; %s", c.table, err, c.at, c.problem, c.remedy)
		}
	}
}

func TestFaultsOfRisksInJSON(t *testing.T) {
	for _, c := range []struct{ part, at, header, problem string }{
		{`"risks":[{"Risk":"ice","Probability (%)":20,"Likely":1},{"Risk":"storm","Probability (%)":200,"Likely":1}]`, "risks!2", "Probability (%)", "out of bounds"},
		{`"risks":[{"Risk":"ice","Probability (%)":20,"Likely":1,"Likely":2}]`, "risks!1", "Likely", "twice"},
		{`"risks":[{"Risk":"ice","Probability (%)":20,"Likely":[1,2]}]`, "risks!1", "Likely", "no single value"},
		{`"risks":[{"Risk":"ice","Probability (%)":20,"Likely":1},{"Risc":"x"}]`, "risks!2", "", "not known"},
		{`"risks":[{"Risk":"ice","Likely":1}]`, "risks", "Probability (%)", "column is missing"},
		{`"definition":[{"Item":"member sizes","State":true}]`, "definition!1", "State", "truth value"},
		{`"definition":[{"Item":"member sizes"}]`, "definition", "State", "column is missing"},
	} {
		_, err := ReadJSON(context.Background(), []byte(`{"rows":[`+oneRow+`],`+c.part+`}`), Options{})
		faults := faultsOf(t, err)
		if len(faults) == 0 || faults[0].Address.String() != c.at || faults[0].Header != c.header || !strings.Contains(faults[0].Problem, c.problem) {
			t.Errorf("%s: faults %v, want one at %s (%s): %s", c.part, err, c.at, c.header, c.problem)
		}
	}
}

// Rows, settings, checklist and risks are judged together.
func TestFaultsOfAllPartsAtOnce(t *testing.T) {
	posted := `{"rows":[` + strings.Replace(oneRow, `:6`, `:-6`, 1) + `],"job":{"Purchase":"first fit","Money":"outturn"},
		"definition":[{"Item":"member sizes","State":"sure"}],"risks":[{"Risk":"ice","Probability (%)":0,"Likely":1}]}`
	_, err := ReadJSON(context.Background(), []byte(posted), Options{})
	var at []string
	for _, f := range faultsOf(t, err) {
		at = append(at, f.Address.String()+" "+f.Header)
	}
	want := []string{"definition!1 State", "job Purchase", "job Money", "risks!1 Probability (%)", "rows!1 Length (m)"}
	if diff := cmp.Diff(want, at); diff != "" {
		t.Errorf("faults (-want +got):\n%s", diff)
	}
}

// A sheet that is nearly named as one that is read is not passed over.
func TestMisnamedSheets(t *testing.T) {
	for name, want := range map[string]string{"Risk": "Risks", "Definitions": "Definition", "Notes": "", "Lists": "", "Tasks": ""} {
		_, err := Read(context.Background(), workbook(t, everyColumn, job, sheets(t, map[string]string{name: "a,b\n"})), Options{})
		faults := faultsOf(t, err)
		if want == "" && len(faults) > 0 || want != "" && (len(faults) != 1 || faults[0].Address.String() != name || !strings.Contains(faults[0].Remedy, "name it "+want)) {
			t.Errorf("%s: faults %v, want one that names %q", name, err, want)
		}
	}
}

func TestEmptyAnnexes(t *testing.T) {
	for _, part := range []string{`"risks":[]`, `"definition":[]`, `"risks":[{}],"definition":[{}]`} {
		s, err := ReadJSON(context.Background(), []byte(`{"rows":[`+oneRow+`],`+part+`}`), Options{})
		if err != nil || s.Risks != nil || s.Settings.Definition != nil || s.Settings.EstimateClass != 5 {
			t.Errorf("%s: %v, %+v", part, err, s.Risks)
		}
	}
}
