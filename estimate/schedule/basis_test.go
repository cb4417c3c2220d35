package schedule

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"spanwright/structural/resistance"
)

func readJob(t *testing.T, pairs ...string) Settings {
	t.Helper()
	rows := [][]string{{"Key", "Value"}}
	for i := 0; i < len(pairs); i += 2 {
		rows = append(rows, pairs[i:i+2])
	}
	return mustRead(t, oneBeam, Options{JobTable: []byte(csvOf(rows...))}).Settings
}

func TestSpellingsOfDesignBases(t *testing.T) {
	for found, want := range map[string]string{
		"allowable": "allowable", "Allowable stress": "allowable",
		"en1993": "en1993", "EN 1993-1-1": "en1993", "EN 1993-1-1:2005": "en1993", "Eurocode 3": "en1993",
		"aisc-asd": "aisc-asd", "AISC 360 ASD": "aisc-asd", "AISC 360-22 (ASD)": "aisc-asd",
		"AISC 360 LRFD": "aisc-lrfd", "AISC-LRFD": "aisc-lrfd",
	} {
		if got := readJob(t, "Standard", found).DesignBasis; got != want {
			t.Errorf("%q is read as %q, want %q", found, got, want)
		}
	}
}

// The names are those of the resistances.
func TestDesignBasesExist(t *testing.T) {
	allowable, err := resistance.Allowable(defaultFactor)
	if err != nil {
		t.Fatal(err)
	}
	en, err := resistance.EN1993(resistance.Partial{})
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff([]string{allowable.Name(), en.Name(), resistance.ASD, resistance.LRFD}, basisNames()); diff != "" {
		t.Errorf("names (-want +got):\n%s", diff)
	}
}

// The factor belongs to allowable alone: elsewhere it is neither taken nor entered.
func TestFactorBelongsToAllowable(t *testing.T) {
	s := mustRead(t, oneBeam, Options{JobTable: []byte("Standard,en1993\n")})
	if s.Settings.Factor != 0 {
		t.Errorf("factor %v under en1993, want 0", s.Settings.Factor)
	}
	if _, ok := entriesByID(s)[factorEntry]; ok {
		t.Error("the default factor is in the register of a job under en1993")
	}
	_, err := readCSV(t, oneBeam, Options{JobTable: []byte("Standard,en1993\nFactor,3\n")})
	faults := faultsOf(t, err)
	if len(faults) != 1 || faults[0].Address.String() != "Job!B2" || !strings.Contains(faults[0].Problem, "Standard says en1993") {
		t.Errorf("faults %v, want one at Job!B2", err)
	}
	_, err = readCSV(t, oneBeam, Options{JobTable: []byte("Standard,en1994\nFactor,3\n")})
	if faults := faultsOf(t, err); len(faults) != 1 || faults[0].Address.String() != "Job!B1" {
		t.Errorf("faults %v, want one at Job!B1: the factor is not judged by a basis that is not known", err)
	}
}

func TestFrequencyFloorOfTheJob(t *testing.T) {
	if got := readJob(t, "Frequency floor (Hz)", "4").FrequencyFloor; got != 4 {
		t.Errorf("floor %v, want 4", got)
	}
	csv := "Mark,Quantity,Length (m),Section or family,Permanent load (kN/m),Variable load (kN/m),Frequency floor (Hz)\nB1,1,6,IPE,1,1,\nB2,1,6,IPE,1,1,none\nB3,1,6,IPE,1,1,3\n"
	s := mustRead(t, csv, Options{JobTable: []byte("Frequency floor (Hz),4\n")})
	var got []float64
	for _, m := range s.Members {
		got = append(got, m.FrequencyFloor)
	}
	if diff := cmp.Diff([]float64{4, 0, 3}, got); diff != "" {
		t.Errorf("floors (-want +got):\n%s", diff)
	}
	if got := readJob(t, "Frequency floor (Hz)", "none").FrequencyFloor; got != 0 {
		t.Errorf("floor %v, want none", got)
	}
}

// Each family has a default grade that suits it: the usual one of its market
// (common practice, no source).
func TestDefaultGradesSuitTheirFamilies(t *testing.T) {
	for family, want := range map[string]string{
		"IPE": "S235", "HEB": "S235", "UPN": "S235", "UPE": "S235", "L": "S235", "CHS": "S235", "SHS": "S235",
		"W": "A992", "C": "A36", "HSS": "A500 C", "HSS-ROUND": "A500 C", "PIPE": "A53 B",
	} {
		s := mustRead(t, strings.Replace(oneBeam, ",IPE,", ","+family+",", 1), Options{})
		if got := s.Members[0]; got.Grade != want || got.Family != family {
			t.Errorf("%s: family %s in %s, want %s", family, got.Family, got.Grade, want)
		}
		for id := range entriesByID(s) {
			if strings.HasPrefix(id, "structural/grade/") {
				t.Errorf("%s: the default grade is doubtful: %s", family, id)
			}
		}
	}
}
