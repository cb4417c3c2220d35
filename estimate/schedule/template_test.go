package schedule

import (
	"bytes"
	"context"
	"slices"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"spanwright/estimate/sheet"
)

func template(t *testing.T) []byte {
	t.Helper()
	data, err := Template()
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// The template reads without a fault: its example row is a member, its Job sheet
// gives what it shows.
func TestTemplateReads(t *testing.T) {
	book, err := sheet.Open(template(t), "template.xlsx", sheet.MediaTypeXLSX, sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	s, err := Read(context.Background(), book, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if len(s.Members) != 1 || s.Members[0].Mark != "B1" || s.Members[0].Family != "IPE" || s.Members[0].Restraint != 2 {
		t.Errorf("members %+v", s.Members)
	}
	if s.Settings.DesignBasis != "allowable" || s.Settings.Confidence != 0.8 || s.Settings.Factor != 3 {
		t.Errorf("settings %+v", s.Settings)
	}
	if again := template(t); !bytes.Equal(again, template(t)) {
		t.Error("two templates differ")
	}
}

// What is filled into the template's new sheets, keys and columns is read back.
func TestTemplateFilled(t *testing.T) {
	f, err := excelize.OpenReader(bytes.NewReader(template(t)))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	set := func(name, cell string, value any) {
		t.Helper()
		if err := f.SetCellValue(name, cell, value); err != nil {
			t.Fatal(err)
		}
	}
	for i, c := range DefinitionColumns() {
		set("Definition", sheet.Letters(i+1)+"2", c.Example)
	}
	for i, c := range RiskColumns() {
		set("Risks", sheet.Letters(i+1)+"2", c.Example)
	}
	for _, id := range []jobID{jobStock, jobKerf, jobPurchase, jobMoney, jobSpendDate, jobConditions, jobHaul, jobTax, jobOwner, jobReserve} {
		set("Job", "B"+strconv.Itoa(int(id)+2), jobKeys[id].Example)
	}
	for _, id := range []columnID{colConcrete, colJoints} {
		set("Schedule", sheet.Letters(int(id)+1)+"2", columns[id].Example)
	}
	var b bytes.Buffer
	if err := f.Write(&b); err != nil {
		t.Fatal(err)
	}
	book, err := sheet.Open(b.Bytes(), "template.xlsx", sheet.MediaTypeXLSX, sheet.DefaultLimits())
	if err != nil {
		t.Fatal(err)
	}
	s, err := Read(context.Background(), book, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if m := s.Members[0]; m.Concrete != 2.4 || len(m.Joints) != 3 {
		t.Errorf("member %+v", m)
	}
	if got := s.Settings; got.Purchase != PurchaseFirstFit || len(got.StockLengths) != 2 || len(got.SiteConditions) != 2 || got.HaulDistance != 120e3 || got.TaxRate != 0.2 || got.SpendDate != "2027-06-30" || got.ManagementReserve.String() != "150000.00" {
		t.Errorf("settings %+v", got)
	}
	if len(s.Settings.Definition) != 1 || len(s.Risks) != 1 || s.Risks[0].Impact.High != 90000 {
		t.Errorf("definition %+v, risks %+v", s.Settings.Definition, s.Risks)
	}
}

// Every column and key has its cell, every list its drop-down, and the help says
// what each accepts.
func TestTemplateHoldsEveryColumn(t *testing.T) {
	f, err := excelize.OpenReader(bytes.NewReader(template(t)))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if got := f.GetSheetList(); !slices.Equal(got, []string{"Schedule", "Job", "Definition", "Risks", "Help", "Lists"}) {
		t.Fatalf("sheets %v", got)
	}
	rows := func(name string) [][]string {
		r, err := f.GetRows(name)
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	schedule, job, help := rows("Schedule"), rows("Job"), rows("Help")
	for i, c := range Columns() {
		if schedule[0][i] != c.Header {
			t.Errorf("column %d is %q, want %q", i+1, schedule[0][i], c.Header)
		}
	}
	for i, c := range JobKeys() {
		if job[i+1][0] != c.Header {
			t.Errorf("key %d is %q, want %q", i+1, job[i+1][0], c.Header)
		}
	}
	var explained []string
	for _, row := range help[1:] {
		if row[1] != "" {
			explained = append(explained, row[1])
		}
		for i, cell := range row {
			if utf8.RuneCountInString(cell) > helpWidths[i] {
				t.Errorf("help: %q does not fit its column", cell)
			}
		}
	}
	var want []string
	for _, c := range slices.Concat(Columns(), JobKeys(), DefinitionColumns(), RiskColumns()) {
		want = append(want, c.Header)
	}
	if diff := cmp.Diff(want, explained); diff != "" {
		t.Errorf("the help explains (-want +got):\n%s", diff)
	}
	checkLists(t, f, "Schedule", Columns())
	checkLists(t, f, "Job", JobKeys())
	for name, list := range map[string][]Column{"Definition": DefinitionColumns(), "Risks": RiskColumns()} {
		checkLists(t, f, name, list)
		got := rows(name)
		if len(got) != 1 {
			t.Fatalf("%s: %d rows, want the heads alone", name, len(got))
		}
		for i, c := range list {
			if got[0][i] != c.Header {
				t.Errorf("%s: column %d is %q, want %q", name, i+1, got[0][i], c.Header)
			}
		}
	}
}

// checkLists holds the drop-down lists of a sheet against the choices of its columns:
// as many, none that refuses other entries, and each offering words of its column.
func checkLists(t *testing.T, f *excelize.File, name string, columns []Column) {
	t.Helper()
	lists, err := f.GetDataValidations(name)
	if err != nil {
		t.Fatal(err)
	}
	want := 0
	for i, c := range columns {
		if len(c.Choices) == 0 {
			continue
		}
		want++
		cell := sheet.Letters(i+1) + "2"
		if name == "Job" {
			cell = "B" + strconv.Itoa(i+2)
		}
		k := slices.IndexFunc(lists, func(v *excelize.DataValidation) bool { return v.Sqref == cell || strings.HasPrefix(v.Sqref, cell+":") })
		if k < 0 {
			t.Errorf("%s: %s has no list at %s", name, c.Header, cell)
			continue
		}
		if lists[k].ShowErrorMessage {
			t.Errorf("%s: the list of %s refuses other entries", name, c.Header)
		}
		from := strings.ReplaceAll(strings.TrimPrefix(lists[k].Formula1, "Lists!"), "$", "")
		first, _, _ := strings.Cut(from, ":")
		if got, err := f.GetCellValue("Lists", first); err != nil || got != c.Choices[0] {
			t.Errorf("%s: the list of %s begins with %q at %s, want %q (%v)", name, c.Header, got, lists[k].Formula1, c.Choices[0], err)
		}
	}
	if len(lists) != want {
		t.Errorf("%s: %d lists, want %d", name, len(lists), want)
	}
}

// What a list offers is read: each choice in the example row, or on the Job sheet,
// is no fault of its own cell.
func TestChoicesAreRead(t *testing.T) {
	heads, example := make([]string, columnCount), make([]string, columnCount)
	for i, c := range Columns() {
		heads[i], example[i] = c.Header, exampleRow[columnID(i)]
	}
	at := func(id columnID, value string) error {
		row := slices.Clone(example)
		row[id] = value
		_, err := readCSV(t, csvOf(heads, row), Options{})
		return err
	}
	for i, c := range Columns() {
		for _, choice := range c.Choices {
			for _, f := range faultsOf(t, at(columnID(i), choice)) {
				if f.Header == c.Header && !strings.Contains(f.Problem, "does not suit") && !strings.Contains(f.Problem, "is not complete") && !strings.Contains(f.Problem, "fills nothing") && !strings.Contains(f.Problem, "needs ") {
					t.Errorf("%s: the choice %q is a fault: %v", c.Header, choice, f)
				}
			}
		}
	}
	for _, c := range JobKeys() {
		for _, choice := range c.Choices {
			_, err := readCSV(t, oneBeam, Options{JobTable: []byte(csvOf([]string{c.Header, choice}))})
			for _, f := range faultsOf(t, err) {
				if !strings.Contains(f.Problem, "does not suit") && !strings.Contains(f.Problem, "no Stock lengths are given") && !strings.Contains(f.Problem, "needs the Spend date") {
					t.Errorf("%s: the choice %q is a fault: %v", c.Header, choice, f)
				}
			}
		}
	}
}
