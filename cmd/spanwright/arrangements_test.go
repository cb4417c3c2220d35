package main

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The arrangement study of the demo's boom in money: every feasible way has a base and
// a range, the one that is not feasible its reason, and the text is in the same order.
func TestArrangementsInMoney(t *testing.T) {
	flags := []string{"arrangements", "--trials", "64"}
	code, out, errs := runProgram(t, []byte(demoBoom), append(flags, "--format", "json", "-")...)
	if code != 0 {
		t.Fatalf("%d %s", code, errs)
	}
	var a struct {
		Arrangements []struct {
			Name, Reason string
			Priced       bool
		}
		Comparison struct {
			Caution string
			Schemes []struct {
				ID, Base string
				Mean     float64
			}
		}
	}
	if err := json.Unmarshal([]byte(out), &a); err != nil {
		t.Fatal(err)
	}
	n := len(a.Comparison.Schemes)
	if n < 8 || len(a.Arrangements) != n+1 || a.Comparison.Caution == "" {
		t.Fatalf("%d schemes of %d ways", n, len(a.Arrangements))
	}
	for i, s := range a.Comparison.Schemes {
		if s.ID != a.Arrangements[i].Name || s.Base == "" || i > 0 && s.Mean < a.Comparison.Schemes[i-1].Mean {
			t.Errorf("scheme %d is %+v beside %+v", i, s, a.Arrangements[i])
		}
	}
	if last := a.Arrangements[n]; last.Priced || last.Reason == "" {
		t.Errorf("the last way %+v", last)
	}
	_, text, _ := runProgram(t, []byte(demoBoom), append(flags, "-")...)
	if !(strings.Index(text, a.Arrangements[0].Name) < strings.Index(text, a.Arrangements[1].Name)) || !strings.Contains(text, "Without a price: ") {
		t.Errorf("text %.500s", text)
	}
}

func TestArrangementsRefused(t *testing.T) {
	keys := filepath.Join(t.TempDir(), "job.json")
	if err := os.WriteFile(keys, []byte(`{"Grade":"S235","Currency":"XXQ"}`), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		study string
		args  []string
		want  string
	}{
		{`{"length_m":-1}`, nil, "/length_m"},
		{`{"spam":1}`, nil, "unknown field"},
		{demoBoom, []string{"--job", keys}, "2 faults in the settings"},
		{demoBoom, []string{"--rate-book", "no/such/book.json"}, "no such file"},
		{demoBoom, []string{"--replicates", "3"}, "32 or more"},
		{demoBoom, []string{"--trials", "64", "--format", "pdf"}, "accepted: text, json"},
	} {
		code, out, errs := runProgram(t, []byte(c.study), append(append([]string{"arrangements"}, c.args...), "-")...)
		if code != 1 || out != "" || !strings.Contains(errs, c.want) {
			t.Errorf("%.30s %v: %d %q %s, want %q", c.study, c.args, code, out, errs, c.want)
		}
	}
}
