package schedule

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

const setHead = "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m),Horizontal load (kN/m),Tributary width (m),Load set\n"

// loadsOf gives N/m by label of the only row.
func loadsOf(s Schedule) map[string]float64 {
	got := map[string]float64{}
	for _, l := range s.Members[0].Loads {
		got[l.Label] = l.Value
	}
	return got
}

// A set fills blank cells alone; what is posted stands. Values by hand from the
// sources that the ready loads name: 0.4 kN/m² deck and 1.5 kN/m per metre of belt
// (common practice, no source), 3 kN/m² (EN 1991-1-1:2002 table 6.2), 60 psf (ASCE
// 7-22 table 4.3-1), 0.8·sk (EN 1991-1-3:2003 5.2), all from memory.
func TestLoadSetsFillBlankCells(t *testing.T) {
	const g = 9.80665
	burden := 0.11 * 900 * g
	for _, c := range []struct {
		name, row, job string
		want           map[string]float64
	}{
		{"both cells", ",,,2,walkway", "", map[string]float64{"walkway deck": 800, "walkway people": 6000}},
		{"permanent posted", "1,,,2,walkway", "", map[string]float64{"permanent load": 1000, "walkway people": 6000}},
		{"variable posted as none", ",0,,2,walkway", "", map[string]float64{"walkway deck": 800}},
		{"of ASCE 7", ",,,2,Walkway", "Standard,aisc-lrfd\n", map[string]float64{"walkway deck": 800, "walkway people": 5745.63108}},
		{"conveyor", ",,,,conveyor belt 1 m density 900 kg/m³", "", map[string]float64{"conveyor machinery": 1500, "conveyor burden": burden, "conveyor spillage": 0.3 * burden}},
		{"snow beside a walkway", ",,,2,walkway; snow", "Ground snow (kN/m²),1\n", map[string]float64{"walkway deck": 800, "walkway people": 6000, "snow": 1600}},
		// ce = 2.35 at 10 m in category II (EN 1991-1-4:2005 figure 4.2, to half its last digit), cf = 2
		{"wind alone", "1,2,,,wind height 10 m face 0.5 m", "Wind speed (m/s),26\nTerrain,II\n", map[string]float64{"permanent load": 1000, "variable load": 2000, "wind": 992.72}},
	} {
		s, err := readCSV(t, setHead+"B1,1,6,IPE,"+c.row+"\n", Options{JobTable: []byte("Key,Value\n" + c.job)})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		near := cmp.Comparer(func(a, b float64) bool { return a-b <= 2.2e-3*b && b-a <= 2.2e-3*b })
		if diff := cmp.Diff(c.want, loadsOf(s), near); diff != "" {
			t.Errorf("%s (-want +got):\n%s", c.name, diff)
		}
	}
}

// Every filled load is in the register with its source and the figures that it
// feeds.
func TestReadyLoadsEnterTheRegister(t *testing.T) {
	s := mustRead(t, setHead+"B1,1,6,CHS,,,,2,walkway; wind height 12 m face 0.3 m round\n", Options{JobTable: []byte("Wind speed (m/s),60 mph\nTerrain,ii\n")})
	if s.Settings.WindSpeed != 26.8224 || s.Settings.Terrain != "II" {
		t.Errorf("site %v m/s, terrain %q", s.Settings.WindSpeed, s.Settings.Terrain)
	}
	sources := map[string]string{}
	for field, id := range s.Members[0].Defaults {
		e, ok := entriesByID(s)[id]
		if label, ready := strings.CutPrefix(field, "load "); ready {
			sources[label] = e.Source
			if !ok || len(e.Feeds) == 0 || e.Value == "" || e.Unit != "kN/m" {
				t.Errorf("%s: %+v", label, e)
			}
		}
	}
	for label, want := range map[string]string{"walkway deck": "common practice", "walkway people": "EN 1991-1-1", "wind": "EN 1991-1-4"} {
		if !strings.HasPrefix(sources[label], want) {
			t.Errorf("%s comes from %q, want %s", label, sources[label], want)
		}
	}
}

// What the Job sheet lacks is one fault, however many rows ask for it; a faulty
// setting is not reported again by the rows.
func TestSiteIsAskedForOnce(t *testing.T) {
	rows := setHead + "B1,1,6,IPE,1,1,,,wind height 10 m face 0.5 m\nB2,1,6,IPE,1,1,,,wind height 10 m face 0.5 m\n"
	for job, at := range map[string]string{
		"Project,P\n": "I2", "Wind speed (m/s),26\n": "I2", "Wind speed (m/s),26\nTerrain,C\n": "I2",
		"Wind speed (m/s),gale\nTerrain,II\n": "Job!B1", "Wind speed (m/s),26\nTerrain,hills\n": "Job!B2", "Wind speed (m/s),-1\nTerrain,II\n": "Job!B1",
	} {
		_, err := readCSV(t, rows, Options{JobTable: []byte(job)})
		if faults := faultsOf(t, err); len(faults) != 1 || faults[0].Address.String() != at {
			t.Errorf("%q: faults %v, want one at %s", job, err, at)
		}
	}
}

// A set that does not fill a cell leaves it blank, which never means zero.
func TestLoadSetsDoNotExcuseOtherBlanks(t *testing.T) {
	for row, at := range map[string]string{",,,2,pipe level empty": "F2", ",2,,2,snow": "E2", ",,,,wind height 10 m face 0.5 m": "E2 F2"} {
		_, err := readCSV(t, setHead+"B1,1,6,IPE,"+row+"\n", Options{JobTable: []byte("Wind speed (m/s),26\nTerrain,II\nGround snow (kN/m²),1\n")})
		var got []string
		for _, f := range faultsOf(t, err) {
			got = append(got, f.Address.String())
		}
		want := strings.Fields(at)
		if row == ",2,,2,snow" {
			want = []string{"E2", "I2"} // and snow, which is variable, finds no blank cell
		}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("%q (-want +got):\n%s", row, diff)
		}
	}
}
