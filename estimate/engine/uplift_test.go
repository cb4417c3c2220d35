package engine_test

import (
	"strings"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/ratebook"
)

func findingsOf(t *testing.T, csv, basis string) []document.Finding {
	t.Helper()
	s := readCSV(t, []byte(csv), table("Project", "P", "Scheme", "S", "Base date", "2026-06-01", "Standard", basis))
	return run(t, freeze(t, s, ratebook.Ratio(), nil, quick)).Findings
}

func messageOf(findings []document.Finding, code string) string {
	for _, f := range findings {
		if f.Code == code {
			return f.Message
		}
	}
	return ""
}

// By hand: 11 m with an overhang of 3 m, G 5 kN/m and about 0.8 of own weight, Q
// 24 kN/m on the overhang alone. At the root 0.9·5.8·(8/2 − 3²/16) = 17.9 kN press and
// 1.5·24·3²/16 = 20.3 kN lift, although the characteristic reaction stays above 0.
func TestUpliftIsLookedForUnderFactoredActions(t *testing.T) {
	const head = "Mark,Quantity,Length (m),Support,Overhang (m),Permanent load (kN/m),Variable load (kN/m),Section or family,Grade,Restraint spacing (m)\n"
	for basis, want := range map[string]string{"en1993": "0.9 G", "allowable": "0.9 G", "aisc-lrfd": "0.9D + 1.6L", "aisc-asd": "0.6D + L"} {
		if got := messageOf(findingsOf(t, head+"B1,1,11,overhang,3,5,24,IPE,S355,2\n", basis), "uplift"); !strings.Contains(got, want) || !strings.Contains(got, "at 0 m") {
			t.Errorf("%s: finding %q, want a lift at 0 m under %s", basis, got, want)
		}
	}
	if got := messageOf(findingsOf(t, head+"B1,1,11,overhang,3,5,4,IPE,S355,2\n", "en1993"), "uplift"); got != "" {
		t.Errorf("a light variable load: %q", got)
	}
}

// A deflection that compression would raise by more than a tenth is doubtful: N/Ncr
// of the HEA 200, 8 m, 400 kN is 0.35 (Ncr = π²·E·Iy/L² = 1138 kN with E = 199.95 GPa, by hand).
func TestDeflectionUnderCompressionIsDoubted(t *testing.T) {
	const head = "Mark,Quantity,Length (m),Support,Permanent load (kN/m),Variable load (kN/m),Axial load (kN),Section or family,Grade,Restraint spacing (m)\n"
	if got := messageOf(findingsOf(t, head+"B1,1,8,simple,0.2,0.3,400,HEA 200,S355,2\n", "en1993"), "compressed-deflection"); !strings.Contains(got, "0.35") {
		t.Errorf("got %q", got)
	}
	if got := messageOf(findingsOf(t, head+"B1,1,8,simple,0.2,0.3,10,HEA 200,S355,2\n", "en1993"), "compressed-deflection"); got != "" {
		t.Errorf("a light axial load: %q", got)
	}
}
