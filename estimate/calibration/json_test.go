package calibration

import (
	"encoding/json"
	"errors"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

const soundJSON = `{"outturns": [{"job": "Pan walkway", "completed": "2023-09-30", "currency": "EUR", "kind": "trestles",
 "take_off_mass": 41800, "weighed_mass": "46.3 t", "costs": {"fabrication": "99000.50"},
 "estimate": {"class": "4", "currency": "EUR", "base_date": "2022-06-30", "base": {"fabrication": "90000"}, "p10": "80000"}, "source": "final account"}]}`

func TestJSONFaultsHavePointers(t *testing.T) {
	if _, err := ReadJSON([]byte(soundJSON), Options{}); err != nil {
		t.Fatalf("the sound text: %v", err)
	}
	for _, c := range []struct{ name, old, new, pointer, word string }{
		{"zero tonnage", `"46.3 t"`, `0`, "/outturns/0/weighed_mass", "without tonnage"},
		{"null tonnage", `"46.3 t"`, `null`, "/outturns/0/weighed_mass", "no value"},
		{"nested tonnage", `"46.3 t"`, `[1]`, "/outturns/0/weighed_mass", "no single value"},
		{"true tonnage", `"46.3 t"`, `true`, "/outturns/0/weighed_mass", "truth value"},
		{"missing tonnage", `"take_off_mass": 41800,`, ``, "/outturns/0/take_off_mass", "missing"},
		{"negative cost", `"99000.50"`, `"-1"`, "/outturns/0/costs/fabrication", "negative cost"},
		{"cost as a number", `"99000.50"`, `99000.5`, "/outturns/0/costs/fabrication", "JSON number"},
		{"unknown category", `"costs": {"fabrication"`, `"costs": {"fabricaton"`, "/outturns/0/costs/fabricaton", "did you mean costs/fabrication"},
		{"unknown key", `"source"`, `"sauce"`, "/outturns/0/sauce", "not known"},
		{"key twice", `"source"`, `"job": "x", "source"`, "/outturns/0/job", "stands twice"},
		{"key with a slash", `"source"`, `"a/b": 1, "source"`, "/outturns/0/a~1b", "not known"},
		{"base date too late", `"2022-06-30"`, `"2024-06-30"`, "/outturns/0/completed", "before the estimate base date"},
		{"date as a number", `"2022-06-30"`, `20220630`, "/outturns/0/estimate/base_date", "JSON number"},
		{"costs no object", `{"fabrication": "99000.50"}`, `7`, "/outturns/0/costs", "no object"},
	} {
		t.Run(c.name, func(t *testing.T) {
			text := strings.Replace(soundJSON, c.old, c.new, 1)
			_, err := ReadJSON([]byte(text), Options{})
			var faults Faults
			if !errors.As(err, &faults) {
				t.Fatalf("got %v, want faults", err)
			}
			if faults[0].Pointer != c.pointer || !strings.Contains(faults[0].Problem+faults[0].Remedy, c.word) {
				t.Errorf("got %+v, want %s with %q", faults[0], c.pointer, c.word)
			}
		})
	}
}

func TestJSONThatIsNone(t *testing.T) {
	for _, text := range []string{"", "[]", `{"jobs": []}`, `{"outturns": [}`, `{"outturns": []} x`, `{"outturns": [], "outturns": []}`, `{"outturns": [3]}`, `{"outturns": []}`} {
		if _, err := ReadJSON([]byte(text), Options{}); err == nil {
			t.Errorf("%q was accepted", text)
		}
	}
}

func TestJobTwiceInJSON(t *testing.T) {
	item := strings.TrimSuffix(strings.TrimPrefix(soundJSON, `{"outturns": [`), `]}`)
	_, err := ReadJSON([]byte(`{"outturns": [`+item+`,`+strings.Replace(item, "Pan walkway", "pan  WALKWAY", 1)+`]}`), Options{})
	want := Faults{{"/outturns/1/job", "pan WALKWAY", "is a job that stands at /outturns/0 already", "leave one of them out, or name them apart"}}
	var got Faults
	if !errors.As(err, &got) {
		t.Fatalf("got %v", err)
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// What is accepted is written and read back alike, and nothing panics.
func FuzzReadJSON(f *testing.F) {
	f.Add(soundJSON)
	f.Add(`{"outturns": [{"costs": {"a": {"b": 1}}, "estimate": null}]}`)
	f.Fuzz(func(t *testing.T, text string) {
		list, err := ReadJSON([]byte(text), Options{})
		if err != nil {
			return
		}
		data, err := json.Marshal(map[string]any{"outturns": list})
		if err != nil {
			t.Fatal(err)
		}
		again, err := ReadJSON(data, Options{})
		if err != nil {
			t.Fatalf("%s was written and not read: %v", data, err)
		}
		if diff := cmp.Diff(list, again, sameMoney); diff != "" {
			t.Errorf("(-first +second):\n%s", diff)
		}
	})
}
