package schedule

import (
	"context"
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/estimate/sheet"
)

// stated gives the first items of the checklist a state.
func stated(n int, state string) []DefinitionEntry {
	var list []DefinitionEntry
	for _, item := range DefinitionItems()[:n] {
		list = append(list, DefinitionEntry{Item: item, State: state})
	}
	return list
}

// Scores by hand from the weights 15, 15, 10, 15, 10, 10, 5, 5, 10, 5; bands of ASTM
// E2516 and AACE 17R-97, 0 to 2, 1 to 15, 10 to 40, 30 to 70, 50 to 100 % (from
// memory), the less defined class where two overlap.
func TestClassFromDefinition(t *testing.T) {
	all := len(DefinitionItems())
	for _, c := range []struct {
		name    string
		entries []DefinitionEntry
		class   int
		score   float64
		says    string
	}{
		{"nothing", nil, 5, 0, "covers 0 to 2 %; not yet defined: loads and actions"},
		{"all none", stated(all, StateNone), 5, 0, "prices and quotations."},
		{"one preliminary", stated(1, StatePreliminary), 4, 0.0225, "scores 2.25 %"},
		{"all preliminary", stated(all, StatePreliminary), 4, 0.15, "covers 1 to 15 %"},
		{"loads and layout", stated(2, StateDefined), 4, 0.3, "covers 10 to 40 %"},
		{"loads to supports", stated(3, StateDefined), 4, 0.4, "not yet defined: member sizes"},
		{"loads to sizes", stated(4, StateDefined), 4, 0.55, "covers 30 to 70 %"},
		{"loads to site", stated(5, StateDefined), 4, 0.65, "covers 30 to 70 %"},
		{"loads to access", stated(6, StateDefined), 4, 0.75, "covers 50 to 100 %"},
		{"one left preliminary", append(stated(all-1, StateDefined), DefinitionEntry{Item: DefinitionItems()[all-1], State: StatePreliminary}), 3, 0.9575, "class 3 is the best"},
		{"all defined", stated(all, StateDefined), 1, 1, "covers 50 to 100 %."},
		{"unknown words", []DefinitionEntry{{Item: "colour", State: StateDefined}, {Item: "loads and actions", State: "sure"}}, 5, 0, "loads and actions"},
		{"item twice", append(stated(1, StateNone), stated(1, StateDefined)...), 5, 0, "loads and actions"},
	} {
		class, score, why := ClassFromDefinition(c.entries)
		if class != c.class || score != c.score || !strings.Contains(why, c.says) || !strings.Contains(why, fmt.Sprintf("class %d ", class)) {
			t.Errorf("%s: class %d, score %v, %q; want %d, %v, %q", c.name, class, score, why, c.class, c.score, c.says)
		}
	}
}

func TestWeightsOfChecklist(t *testing.T) {
	sum := 0
	for _, c := range checklist {
		sum += c.weight
	}
	if sum != 100 {
		t.Errorf("the weights sum to %d %%, want 100", sum)
	}
}

// More definition never gives a less defined class.
func TestClassIsMonotonic(t *testing.T) {
	entries := stated(len(DefinitionItems()), StateNone)
	last, _, _ := ClassFromDefinition(entries)
	for _, state := range []string{StatePreliminary, StateDefined} {
		for i := range entries {
			entries[i].State = state
			class, _, _ := ClassFromDefinition(entries)
			if class > last {
				t.Errorf("%s %s: class %d after %d", entries[i].Item, state, class, last)
			}
			last = class
		}
	}
}

const definitionTable = "Item,State,Remark\nExecution class,Defined,EXC3 agreed\nLoads and actions,preliminary,\n,,\nprices and quotations,none,\n"

var definitionRead = []DefinitionEntry{
	{Item: "loads and actions", State: StatePreliminary}, {Item: "execution class", State: StateDefined, Remark: "EXC3 agreed"}, {Item: "prices and quotations", State: StateNone},
}

func TestDefinitionGivesTheClass(t *testing.T) {
	for _, c := range []struct {
		table, job string
		class      int
		says       string // of the register; empty where the class is no default
	}{
		{"", "", 5, "least defined"},
		{definitionTable, "", 4, "scores 7.25 %"}, // 0.15 × 15 + 5
		{definitionTable, "3", 3, ""},
	} {
		o := Options{JobTable: oneKey("Estimate class", c.job)}
		var want []DefinitionEntry
		if c.table != "" {
			o.DefinitionTable, want = []byte(c.table), definitionRead
		}
		s := mustRead(t, oneBeam, o)
		e, taken := entriesByID(s)["default/estimate class"]
		if s.Settings.EstimateClass != c.class || taken != (c.says != "") || !strings.Contains(e.Statement, c.says) || taken && e.Value != fmt.Sprint(c.class) {
			t.Errorf("class %d by %+v, want %d by %q", s.Settings.EstimateClass, e, c.class, c.says)
		}
		if diff := cmp.Diff(want, s.Settings.Definition); diff != "" {
			t.Errorf("definition (-want +got):\n%s", diff)
		}
	}
}

func TestFaultsOfDefinition(t *testing.T) {
	for _, c := range []struct{ table, at, problem, remedy string }{
		{"Item,State\nloads and action,defined\n", "Definition!A2", "no item of the checklist", "did you mean loads and actions"},
		{"Item,State\ncolour,defined\n", "Definition!A2", "no item of the checklist", "support arrangement"},
		{"Item,State\nmember sizes,preliminery\n", "Definition!B2", "no state of definition", "did you mean preliminary"},
		{"Item,State\nmember sizes,\n", "Definition!B2", "State is blank", "none, preliminary, defined"},
		{"Item,State\n,defined\n", "Definition!A2", "Item is blank", "member sizes"},
		{"Item,State\nmember sizes,none\nMember  Sizes,none\n", "Definition!A3", "in row 2 already", "one row"},
		{"Item,Sate\nmember sizes,none\n", "Definition!B1", "not known", "did you mean State"},
		{"Item,Maturity\nmember sizes,none\n", "Definition!B1", "not known", "did you mean State"},
		{"Item,State,State\nmember sizes,none,none\n", "Definition!C1", "second column State", "leave one"},
		{"Item,Remark\nmember sizes,none\n", "Definition!1", "column is missing", "add a column State"},
		{"Item,State,\nmember sizes,none,x\nexecution class,none,x\n", "Definition!C2", "without a header", "clear it"},
		{"member sizes,none\n", "Definition!1", "no header row", "Item, State, Remark"},
		{"Item,State\n" + strings.Repeat("member sizes,none\n", mostAnnexRows+1), "Definition!1002", "more than 1000 rows", "join"},
	} {
		_, err := readCSV(t, oneBeam, Options{DefinitionTable: []byte(c.table)})
		faults := slices.DeleteFunc(faultsOf(t, err), func(f sheet.Fault) bool { return len(c.table) > 1000 && strings.Contains(f.Problem, "already") })
		if len(faults) != 1 || faults[0].Address.String() != c.at || !strings.Contains(faults[0].Problem, c.problem) || !strings.Contains(faults[0].Remedy, c.remedy) {
			t.Errorf("%q: faults %v, want one at %s: %s; %s", shorten(c.table), faults, c.at, c.problem, c.remedy)
		}
	}
}

func TestDefinitionTwice(t *testing.T) {
	for _, o := range []Options{{DefinitionTable: []byte(definitionTable)}, {RiskTable: []byte(riskTable)}} {
		if _, err := ReadJSON(context.Background(), []byte(`{"rows":[`+oneRow+`],"definition":[],"risks":[]}`), o); err == nil || !strings.Contains(err.Error(), "accepted is one of them") {
			t.Errorf("a list in the posting and a table beside it are both taken: %v", err)
		}
		book, err := sheet.Open(template(t), "template.xlsx", sheet.MediaTypeXLSX, sheet.DefaultLimits())
		if err != nil {
			t.Fatal(err)
		}
		if _, err := Read(context.Background(), book, o); err == nil || !strings.Contains(err.Error(), "accepted is one of them") {
			t.Errorf("a sheet and a table beside it are both taken: %v", err)
		}
	}
}
