package schedule

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

const trainHead = "Mark,Quantity,Length (ft),Section or family,Permanent load (klf),Variable load (klf),Moving load"

// Wheels take the unit of their header, distances that of Length; both may carry
// their own. 1 kip is 4448.2216152605 N, 1 ft 0.3048 m (NIST SP 811, appendix B).
func TestUnitsOfMovingLoads(t *testing.T) {
	for cell, want := range map[string]Load{
		"10; 8 @ 5":           {Wheels: []float64{44482.21615, 35585.77292}, Spacings: []float64{1.524}},
		"10;8@5":              {Wheels: []float64{44482.21615, 35585.77292}, Spacings: []float64{1.524}},
		"40 kN; 40 kN @ 2 m":  {Wheels: []float64{40000, 40000}, Spacings: []float64{2}},
		"1;1;1;1 @ 1 m":       {Wheels: []float64{4448.221615, 4448.221615, 4448.221615, 4448.221615}, Spacings: []float64{1, 1, 1}},
		"1; 1; 1 @ 1 m; 20\"": {Wheels: []float64{4448.221615, 4448.221615, 4448.221615}, Spacings: []float64{1, 0.508}},
		"10":                  {Wheels: []float64{44482.21615}},
	} {
		s := mustRead(t, csvOf(strings.Split(trainHead+" (kip)", ","), []string{"B1", "1", "20", "IPE", "1", "1", cell}), Options{})
		loads := s.Members[0].Loads
		got := loads[len(loads)-1]
		want.Nature, want.Kind, want.Free, want.Label = "variable", "train", true, "moving load"
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("%q (-want +got):\n%s", cell, diff)
		}
	}
}

func TestMovingLoadWithoutUnit(t *testing.T) {
	_, err := readCSV(t, trainHead+"\nB1,1,20,IPE,1,1,10\nB2,1,20,IPE,1,1,10; 10 @ 4\n", Options{})
	faults := faultsOf(t, err)
	if len(faults) != 1 || faults[0].Address.String() != "G1" || !strings.Contains(faults[0].Problem, "names no unit") {
		t.Errorf("faults %v, want one at G1", err)
	}
}

// A bare factor is for what moves or strikes; a name wins over it.
func TestDynamicFactorsFindTheirLoads(t *testing.T) {
	head := []string{"Mark", "Quantity", "Length (m)", "Section or family", "Permanent load (kN/m)", "Variable load (kN/m)", "Point load (kN)", "Point position (m)", "Moving load (kN)", "Dynamic factor"}
	for cell, want := range map[string]map[string]float64{
		"1.25":                                 {"point load": 1.25, "moving load": 1.25},
		"1.25; 1.4 point":                      {"point load": 1.4, "moving load": 1.25},
		"1.1 variable load; 1.2 Moving loads":  nil,
		"1.1 variable load; 1.2 on the moving": nil,
		"1.1 variable; 1.2 on moving load":     {"variable load": 1.1, "moving load": 1.2},
		"1":                                    {},
	} {
		s, err := readCSV(t, csvOf(head, []string{"B1", "1", "6", "IPE", "1", "2", "5", "3", "40; 40 @ 2", cell}), Options{})
		if want == nil {
			if len(faultsOf(t, err)) != 1 {
				t.Errorf("%q: %v, want one fault", cell, err)
			}
			continue
		}
		if err != nil {
			t.Errorf("%q: %v", cell, err)
			continue
		}
		got := map[string]float64{}
		for _, l := range s.Members[0].Loads {
			if l.Dynamic != 0 {
				got[l.Label] = l.Dynamic
			}
		}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("%q (-want +got):\n%s", cell, diff)
		}
	}
}

const sameHead = "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m),Same size as\n"

// A row may name one that stands below it; a chain is one group.
func TestSameSizeChains(t *testing.T) {
	s := mustRead(t, sameHead+"B1,1,6,IPE,1,1,B3\nB2,1,6,IPE,1,1,B1\nB3,1,6,IPE,1,1,\n", Options{})
	if got := []string{s.Members[0].SameSizeAs, s.Members[1].SameSizeAs, s.Members[2].SameSizeAs}; !cmp.Equal(got, []string{"B3", "B1", ""}) {
		t.Errorf("ties %v", got)
	}
}

// A faulty mark is one fault: who names it is not blamed, nor who names a row that
// is faulty itself.
func TestSameSizeDoesNotRepeatFaults(t *testing.T) {
	for name, csv := range map[string]string{
		"mark missing":      "B1,1,6,IPE,1,1,B3\n,1,6,IPE,1,1,\n",
		"mark twice":        "B1,1,6,IPE,1,1,B3\nB1,1,6,HEA,1,1,\n",
		"section not known": "B1,1,6,IPE,1,1,B3\nB3,1,6,IPF,1,1,\n",
		"support not known": "B1,1,6,IPE,1,1,B3\nB3,1,6,,1,1,\n",
	} {
		_, err := readCSV(t, sameHead+csv, Options{})
		if faults := faultsOf(t, err); len(faults) != 1 {
			t.Errorf("%s: %d faults, want 1: %v", name, len(faults), err)
		}
	}
}
