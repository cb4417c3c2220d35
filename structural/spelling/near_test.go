package spelling

import (
	"slices"
	"strings"
	"testing"
)

func TestNear(t *testing.T) {
	accepted := []string{"Quantity", "Length", "Support", "Grade"}
	for text, want := range map[string][]string{
		"lenght": {"Length"}, "QUANTITY": {"Quantity"}, "colour": nil, "": nil, strings.Repeat("length", 20): nil, "gradee": {"Grade"},
	} {
		if got := Near(text, accepted, strings.ToLower); !slices.Equal(got, want) {
			t.Errorf("%q: got %q, want %q", text, got, want)
		}
	}
	if got := DidYouMean(nil, "name a column"); got != "name a column" {
		t.Errorf("without a near miss: %q", got)
	}
	if got := DidYouMean([]string{"a", "b"}, ""); got != "did you mean a or b?" {
		t.Errorf("with two: %q", got)
	}
}
