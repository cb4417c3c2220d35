package assumption

import (
	"slices"
	"testing"

	"spanwright/estimate/spread"
)

func entry(id, value string) Entry {
	return Entry{ID: id, Kind: Default, Statement: "s", Value: value, Source: "common practice, no source"}
}

func TestRegisterJoinsTheFeedsOfEqualEntries(t *testing.T) {
	var r Register
	a := entry("default/grade", "S275")
	a.Feeds = []string{"z", "a"}
	b := entry("default/grade", "S275")
	b.Feeds = []string{"a", "m"}
	for _, e := range []Entry{entry("b", "1"), a, b, entry("a", "1")} {
		if err := r.Add(e); err != nil {
			t.Fatal(err)
		}
	}
	if err := r.Feed("a", "base", "base"); err != nil {
		t.Fatal(err)
	}
	got := r.Entries()
	if len(got) != 3 || got[0].ID != "a" || got[1].ID != "b" || !slices.Equal(got[2].Feeds, []string{"a", "m", "z"}) || !slices.Equal(got[0].Feeds, []string{"base"}) {
		t.Errorf("got %+v", got)
	}
	if got[1].Feeds == nil {
		t.Error("an entry that feeds nothing has null feeds")
	}
	a.Feeds[0] = "changed"
	if r.Entries()[2].Feeds[0] == "changed" || r.Entries()[2].Feeds[2] == "changed" {
		t.Error("the register holds the caller's slice")
	}
}

func TestRegisterRefuses(t *testing.T) {
	var r Register
	if err := r.Add(entry("a", "1")); err != nil {
		t.Fatal(err)
	}
	other := entry("a", "1")
	s := spread.NewFixed(2)
	other.Spread = &s
	for name, e := range map[string]Entry{"another value": entry("a", "2"), "another spread": other, "no source": {ID: "b", Statement: "s"}, "no id": {Statement: "s", Source: "x"}} {
		if err := r.Add(e); err == nil {
			t.Errorf("%s was accepted", name)
		}
	}
	if err := r.Feed("missing", "base"); err == nil {
		t.Error("an unknown entry was fed")
	}
}

func TestSegmentsCannotBeTakenForSeparatorsOrPatterns(t *testing.T) {
	seen := map[string]string{}
	for _, name := range []string{"a/b", "a%2Fb", "a*", "a%2A", "{mark}", "plain", "%"} {
		s := Segment(name)
		for _, r := range s {
			if r == '/' || r == '*' || r == '{' || r == '}' {
				t.Errorf("Segment(%q) = %q holds %q", name, s, r)
			}
		}
		if old, ok := seen[s]; ok {
			t.Errorf("%q and %q have the segment %q", old, name, s)
		}
		seen[s] = name
	}
}
