package schedule

import (
	"context"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestJointsAsTextAndList(t *testing.T) {
	want := []Joint{{"flanged tube", 3}, {"moment", 2}, {"pinned", 4}, {"site splice", 1}}
	for _, value := range []string{
		`"2 moment; 4 pinned; 1 site splice; 3 flanged tube"`,
		`" 3  Flanged-Tube;1 SITE SPLICE ; 4pinned; 2 moment;"`,
		`[{"kind":"pinned","count":4},{"count":2,"kind":"moment"},{"kind":"Flanged tube","count":3},{"kind":"site splice","count":1}]`,
	} {
		s, err := ReadJSON(context.Background(), []byte(`{"rows":[`+strings.Replace(oneRow, `{`, `{"Joints":`+value+`,`, 1)+`]}`), Options{})
		if err != nil {
			t.Errorf("%s: %v", value, err)
			continue
		}
		if diff := cmp.Diff(want, s.Members[0].Joints); diff != "" {
			t.Errorf("%s (-want +got):\n%s", value, diff)
		}
	}
}

func TestFaultsOfJointList(t *testing.T) {
	for value, problem := range map[string]string{
		`[{"kind":"momant","count":2}]`:                                   "no kind of joint",
		`[{"kind":"moment","count":0}]`:                                   "whole number",
		`[{"kind":"moment","count":1.5}]`:                                 "whole number",
		`[{"kind":"moment"}]`:                                             "whole number",
		`[{"count":2}]`:                                                   "names no kind",
		`[{"kind":"moment","count":"2"}]`:                                 "count holds 2",
		`[{"kind":["moment"],"count":2}]`:                                 "kind holds",
		`[{"kind":"moment","count":2,"each":1}]`:                          `the key "each" is not known`,
		`[{"kind":"moment","count":2,"count":3}]`:                         "stands twice",
		`[{"kind":"moment","count":2},{"kind":"moment","count":2}]`:       "second count",
		`{"kind":"moment","count":2}`:                                     "no list of joints",
		`[` + strings.Repeat(`{"kind":"moment","count":2},`, 500) + `{}]`: "no list of joints",
		`true`: "truth value",
	} {
		_, err := ReadJSON(context.Background(), []byte(`{"rows":[`+strings.Replace(oneRow, `{`, `{"Joints":`+value+`,`, 1)+`]}`), Options{})
		faults := faultsOf(t, err)
		if len(faults) != 1 || faults[0].Address.String() != "rows!1" || faults[0].Header != "Joints" || !strings.Contains(faults[0].Problem, problem) {
			t.Errorf("%s: faults %v, want one at rows!1 (Joints): %s", shorten(value), err, problem)
		}
	}
}

// Every fault of a cell is reported, not the first alone.
func TestAllFaultsOfJoints(t *testing.T) {
	_, err := readCSV(t, csvOf(with(t, change{rowB10, "Joints", "2 momant; 0 pinned; 1 glued; 1 site splice"})...), Options{})
	if faults := faultsOf(t, err); len(faults) != 3 {
		t.Errorf("%d faults, want 3: %v", len(faults), err)
	}
}

// Counted joints replace the allowance: its default is not taken.
func TestJointsTakeNoAllowance(t *testing.T) {
	s := mustRead(t, strings.NewReplacer("Variable load (kN/m)\n", "Variable load (kN/m),Joints\n", "1,1\n", "1,1,2 pinned\n").Replace(oneBeam), Options{})
	if id, taken := s.Members[0].Defaults["connection_class"]; taken || s.Members[0].ConnectionClass != simpleBeams {
		t.Errorf("class %s by default %q, want the class without a default", s.Members[0].ConnectionClass, id)
	}
	if _, entered := entriesByID(s)["default/connection class/simple beams"]; entered {
		t.Error("the allowance is in the register although no row takes it")
	}
}
