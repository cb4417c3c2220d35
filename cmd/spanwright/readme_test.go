package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"spanwright/estimate/schedule"
)

// block replaces what stands between <!-- name --> and the next <!-- end -->.
func block(t *testing.T, text, name, content string) string {
	t.Helper()
	start := "<!-- " + name + " -->\n"
	before, rest, ok := strings.Cut(text, start)
	if !ok {
		t.Fatalf("README.md has no block %q", name)
	}
	_, after, ok := strings.Cut(rest, "<!-- end -->")
	if !ok {
		t.Fatalf("the block %q of README.md has no end", name)
	}
	return before + start + content + "<!-- end -->" + after
}

func columnTable(columns []schedule.Column) string {
	var b strings.Builder
	b.WriteString("| head | meaning | accepted | example |\n| --- | --- | --- | --- |\n")
	cell := func(s string) string { return strings.ReplaceAll(s, "|", "\\|") }
	for _, c := range columns {
		head := "`" + cell(c.Header) + "`"
		if c.Obligatory {
			head += " (obligatory)"
		}
		fmt.Fprintf(&b, "| %s | %s | %s | %s |\n", head, cell(c.Meaning), cell(c.Accepts), cell(c.Example))
	}
	return b.String()
}

// The README's tables and its excerpt are what the program says.
func TestReadmeIsTrue(t *testing.T) {
	file := filepath.Join("..", "..", "README.md")
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	code, out, errs := runProgram(t, nil, "price", "--rate-book", "unit-rate", testFile("brackwater.xlsx"))
	if code != 0 {
		t.Fatal(errs)
	}
	lines := strings.SplitAfter(out, "\n")
	excerpt := strings.Join(lines[:min(36, len(lines))], "")
	want := block(t, string(data), "price", "```text\n"+excerpt+"…\n```\n")
	want = block(t, want, "columns", columnTable(schedule.Columns()))
	want = block(t, want, "job", columnTable(schedule.JobKeys()))
	want = block(t, want, "risks", columnTable(schedule.RiskColumns()))
	want = block(t, want, "definition", columnTable(schedule.DefinitionColumns()))
	if *update {
		if err := os.WriteFile(file, []byte(want), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	if want != string(data) {
		t.Error("README.md does not say what the program says: run go test ./cmd/spanwright -run Readme -update")
	}
}
