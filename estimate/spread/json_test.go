package spread

import (
	"encoding/json"
	"errors"
	"strings"
	"testing"
)

// A value that a distribution needs and that is not written is missing, not zero.
func TestABlankValueIsNotZero(t *testing.T) {
	for text, field := range map[string]string{
		`{"distribution":"fixed"}`:                                  "likely",
		`{"distribution":"pert","low":1,"high":2}`:                  "likely",
		`{"distribution":"pert"}`:                                   "low",
		`{"distribution":"triangular","low":1,"likely":2}`:          "high",
		`{"distribution":"uniform","high":2}`:                       "low",
		`{"distribution":"lognormal","low":2}`:                      "high",
		`{"distribution":"triangular","likely":null,"low":1}`:       "likely",
		`{"distribution":"lognormal","low":1,"high":2}`:             "",
		`{"distribution":"fixed","likely":0}`:                       "",
		`{"distribution":"triangular","low":0,"likely":0,"high":1}`: "",
	} {
		var s Spread
		if err := json.Unmarshal([]byte(text), &s); err != nil {
			t.Fatalf("%s: %v", text, err)
		}
		err := s.Validate()
		var fault *Error
		switch {
		case field == "" && err != nil:
			t.Errorf("%s: %v", text, err)
		case field != "" && (!errors.As(err, &fault) || fault.Found != "nothing"):
			t.Errorf("%s: got %v, want %s to be missing", text, err, field)
		}
	}
	var s Spread
	if err := json.Unmarshal([]byte(`{"distribution":"fixed","likely":1,"liekly":2}`), &s); err == nil || !strings.Contains(err.Error(), "liekly") {
		t.Errorf("an unknown field: %v", err)
	}
}

func TestASpreadIsReadAsItWasWritten(t *testing.T) {
	for _, s := range []Spread{NewFixed(0), NewFixed(3), NewTriangular(0, 0, 1), NewPERT(-1, 0, 2), NewUniform(0, 1), NewLognormal(1, 2), LogDeviation(0.2),
		{Distribution: PERT, Low: 1, Likely: 2, High: 4, Bounds: BoundsPercentiles}} {
		data, err := json.Marshal(s)
		if err != nil {
			t.Fatal(err)
		}
		var again Spread
		if err := json.Unmarshal(data, &again); err != nil || again != s {
			t.Errorf("%s: read as %+v (%v), want %+v", data, again, err, s)
		}
	}
}
