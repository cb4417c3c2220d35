package material

import (
	"maps"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// A36 is for shapes, plates and bars, A53 and A106 for pipe (their scopes); EN
// 10365 series come in EN 10025-2 steels; hollow sections in the grades of EN
// 10210-1 and EN 10219-1. What is merely not stocked: common practice, no source.
func TestSuits(t *testing.T) {
	for _, c := range []struct {
		family, grade  string
		want           Level
		reason, remedy string // parts of them
	}{
		{"IPE", "S355", Suitable, "EN 10025-2", ""},
		{"ipe", "s 355 J2", Suitable, "EN 10025-2", ""},
		{"HEB", "A36", Doubtful, "not stocked in A36", "S275"},
		{"HEA", "A106 B", Refused, "pipe steels", "S235"},
		{"CHS", "S355J2H", Suitable, "EN 10219-1", ""},
		{"W", "A992", Suitable, "A992", ""},
		{"W", "A572 Gr 50", Suitable, "A992 is what is stocked", ""},
		{"W", "S355", Doubtful, "not stocked", "A992"},
		{"IPE", "A992", Refused, "rolled W shapes alone", "S355"},
		{"C", "A992", Refused, "rolled W shapes alone", "A36"},
		{"WELDED-I", "A992", Refused, "rolled W shapes alone", "A572 50"},
		{"WELDED-BOX", "S460M", Suitable, "EN 10025-4", ""},
		{"HSS", "A500 C", Suitable, "0.93", ""},
		{"HSS", "A53 B", Refused, "round pipe only", "A500 C"},
		{"HSS-ROUND", "A53 B", Doubtful, "schedule", "PIPE"},
		{"HSS", "A992", Refused, "", "A500"},
		{"SHS", "S355MH", Suitable, "EN 10219-1", ""},
		{"CHS", "S355NH", Suitable, "EN 10210-1", ""},
		{"UPN", "S355H", Refused, "hollow sections", "S355"},
		{"UPE", "S275", Suitable, "EN 10025-2", ""},
		{"L", "S355", Suitable, "EN 10056-1", ""},
		{"PIPE", "A500 B", Doubtful, "HSS-ROUND", "A53 B"},
		{"FLAT", "1.4301", Suitable, "EN 10088", ""},
		{"W", "1.4401", Refused, "stainless", "WELDED-I"},
		{"SHS", "S235", Suitable, "S235JRH", ""},
		{"RHS", "A36", Refused, "no hollow sections", "S235"},
		{"CHS", "A53 B", Doubtful, "schedule", "PIPE"},
		{"PIPE", "A53 B", Suitable, "B36.10M", ""},
		{"PIPE", "A106 Gr. B", Suitable, "B36.10M", ""},
		{"PIPE", "A36", Refused, "pipe is not made to it", "A53 B"},
		{"PIPE", "S355", Doubtful, "made to order", "CHS"},
		{"WELDED-I", "S355", Suitable, "plate", ""},
		{"FLAT", "A36", Suitable, "A36", ""},
		{"ROUND", "A53 B", Refused, "pipe steels", "A36"},
		{"IPE", "S999", Refused, "unknown steel grade", "S235, S275, S355, S275N"},
		{"BEAM", "S355", Refused, `"BEAM"`, "CHANNEL, CHS, FLAT, HEA, HEB, HEM, HSS, HSS-ROUND, IPE, L, PIPE, RHS, ROUND, SHS, TEE, UPE, UPN, W, WELDED-BOX, WELDED-I"},
		{"", "", Refused, `""`, "CHS, FLAT"},
	} {
		v := Suits(c.family, c.grade)
		if v.Level != c.want || !strings.Contains(v.Reason, c.reason) || !strings.Contains(v.Remedy, c.remedy) {
			t.Errorf("Suits(%q, %q) = %v, %+v; want %v, reason with %q, remedy with %q", c.family, c.grade, v.Level, v, c.want, c.reason, c.remedy)
		}
	}
}

func TestEveryPairHasAVerdict(t *testing.T) {
	d, err := load()
	if err != nil {
		t.Fatal(err)
	}
	families := slices.Sorted(maps.Keys(d.families))
	want := []string{"C", "CHANNEL", "CHS", "FLAT", "HEA", "HEB", "HEM", "HSS", "HSS-ROUND", "IPE", "L", "PIPE", "RHS", "ROUND", "SHS", "TEE", "UPE", "UPN", "W", "WELDED-BOX", "WELDED-I"}
	if diff := cmp.Diff(want, families); diff != "" {
		t.Errorf("families (-want +got):\n%s", diff)
	}
	if got, want := len(d.verdicts), len(families)*len(d.names); got != want {
		t.Errorf("%d verdicts, want %d", got, want)
	}
	for _, f := range families {
		suitable := 0
		for _, g := range d.names {
			v, ok := d.verdicts[pair{f, g}]
			if !ok || v.Reason == "" || (v.Remedy == "") != (v.Level == Suitable) {
				t.Errorf("%s in %s: %+v, on record %v", f, g, v, ok)
			}
			if v.Level == Suitable {
				suitable++
			}
		}
		if suitable == 0 {
			t.Errorf("family %s has no suitable grade", f)
		}
	}
}

func TestReadVerdictsRefuses(t *testing.T) {
	const head = "families,grades,level,reason,remedy\n"
	for name, c := range map[string]struct{ rows, want string }{
		"level": {"IPE,S235,maybe,r,m\n", `"maybe"`},
		"twice": {"IPE HEA,S235,suitable,r,\nHEA,S235,refused,r,m\n", "HEA in S235 stands in two rows"},
		"none":  {"", "want a header"},
	} {
		d := &data{families: map[string]bool{}, verdicts: map[pair]Verdict{}}
		if err := d.readVerdicts([]byte(head + c.rows)); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want an error with %q", name, err, c.want)
		}
	}
}

func TestLevelString(t *testing.T) {
	for level, want := range map[Level]string{Suitable: "suitable", Doubtful: "doubtful", Refused: "refused", 9: "level 9"} {
		if got := level.String(); got != want {
			t.Errorf("Level(%d) = %q, want %q", uint8(level), got, want)
		}
	}
}

// Sizing asks for every candidate: exact names must be answered without work.
func TestSuitsExactNamesDoNotAllocate(t *testing.T) {
	if n := testing.AllocsPerRun(100, func() { Suits("HEB", "S355") }); n != 0 {
		t.Errorf("Suits allocates %g times for exact names; want none", n)
	}
	if exact, spelt := Suits("WELDED-I", "A572 50"), Suits("welded-i ", "astm A572 gr 50"); exact != spelt {
		t.Errorf("exact %+v, spelt %+v", exact, spelt)
	}
}

func BenchmarkSuits(b *testing.B) {
	for b.Loop() {
		Suits("HEB", "S355")
	}
}
