package schedule

import (
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestNaturalOrder(t *testing.T) {
	want := []string{"", "2", "10", "A", "B", "B1", "B02", "B2", "B2a", "B02b", "B10", "B10-1", "B10-2", "B10-12", "b1"}
	got := slices.Clone(want)
	slices.Reverse(got)
	slices.SortFunc(got, naturalCompare)
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("order (-want +got):\n%s", diff)
	}
}

// The order is total: only equal marks tie, and it has no cycles.
func TestNaturalOrderIsTotal(t *testing.T) {
	marks := rapid.StringMatching(`[AB]{0,2}0{0,2}[0-9]{0,3}[a-b]{0,2}0?[0-9]?`)
	rapid.Check(t, func(rt *rapid.T) {
		a, b, c := marks.Draw(rt, "a"), marks.Draw(rt, "b"), marks.Draw(rt, "c")
		if (naturalCompare(a, b) == 0) != (a == b) {
			rt.Fatalf("%q and %q tie", a, b)
		}
		if naturalCompare(a, b) < 0 != (naturalCompare(b, a) > 0) {
			rt.Fatalf("%q and %q are not in one order", a, b)
		}
		if naturalCompare(a, b) < 0 && naturalCompare(b, c) < 0 && !(naturalCompare(a, c) < 0) {
			rt.Fatalf("%q < %q < %q is a cycle", a, b, c)
		}
	})
}
