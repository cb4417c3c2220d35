package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"spanwright/estimate/schedule"
)

// The template goes the user's way: written, then priced as it is.
func TestTemplateIsPriced(t *testing.T) {
	file := filepath.Join(t.TempDir(), "schedule.xlsx")
	if code, out, errs := runProgram(t, nil, "template", "--out", file); code != 0 || out != "" {
		t.Fatalf("code %d, printed %q, %s", code, out, errs)
	}
	code, out, errs := runProgram(t, nil, "price", "--trials", "64", file)
	if code != 0 || !strings.Contains(out, "B1") || !strings.Contains(out, "Brackwater") {
		t.Errorf("code %d, %s\n%s", code, errs, out)
	}
}

func TestTemplateOnStandardOutput(t *testing.T) {
	want, err := schedule.Template()
	if err != nil {
		t.Fatal(err)
	}
	if code, out, errs := runProgram(t, nil, "template"); code != 0 || !bytes.Equal([]byte(out), want) {
		t.Errorf("code %d, %d bytes, want %d; %s", code, len(out), len(want), errs)
	}
}

func TestTemplateRefusesArguments(t *testing.T) {
	if code, _, errs := runProgram(t, nil, "template", "schedule.xlsx"); code != 2 || !strings.Contains(errs, "usage: spanwright template") {
		t.Errorf("code %d, %s", code, errs)
	}
	missing := filepath.Join(t.TempDir(), "no", "folder.xlsx")
	if code, _, errs := runProgram(t, nil, "template", "--out", missing); code != 1 || errs == "" {
		t.Errorf("code %d, %s", code, errs)
	}
	if _, err := os.Stat(missing); err == nil {
		t.Error("a file was written")
	}
}
