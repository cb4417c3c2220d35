package workbook

import (
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"pgregory.net/rapid"

	"spanwright/estimate/document"
)

func TestTable(t *testing.T) {
	got := Table(brackwater(t))
	for _, want := range []string{
		"UNSAFE: 2 findings; listed below.",
		"base          658 k EUR (657821.21), at P35\n",
		"range         P10 550 k EUR, P50 710 k EUR, P80 841 k EUR, P90 918 k EUR\n",
		"contingency   183 k EUR (182864.99), which reaches P80 at 841 k EUR\n",
		"tonnage       net 106.057 t, delivered 129.596 t, purchased 136.305 t; 4 members, 13 pieces\n",
		"category       base, EUR         P10         P90\n",
		"fabrication    318929.66   287 k EUR   415 k EUR\n",
		"base estimate  657821.21\n",
		"B1      2  37.00 m  CHS 508 × 16  S355   deflection          0.97  UNSAFE shortcut\n",
		"T1      8  12.00 m  HEB 300       S235   flexural buckling   1.08  UNSAFE fails\n",
		"W1      1  60.00 m  not sized\n",
		"UNSAFE    B1: The split method would be unsafe here",
		"          and the reactions shown come from the exact envelope.\n",
		"notice    total: No stairs are in the schedule.\n",
		"2 inclusions, 3 exclusions and 3 assumptions",
	} {
		if !strings.Contains(got, want) {
			t.Errorf("no %q in the table", want)
		}
	}
	if t.Failed() {
		t.Log("\n" + got)
	}
}

// checkLines reports the first line that is too wide or not printable.
func checkLines(table string) string {
	for _, line := range strings.Split(table, "\n") {
		if utf8.RuneCountInString(line) > lineWidth {
			return "too wide: " + line
		}
		if strings.ContainsFunc(line, func(r rune) bool { return !unicode.IsPrint(r) }) || strings.HasSuffix(line, " ") {
			return "not printable: " + line
		}
	}
	return ""
}

// No text of a posted schedule can widen the table or reach the terminal's
// control codes.
func TestTableStaysInItsWidth(t *testing.T) {
	if fault := checkLines(Table(brackwater(t))); fault != "" {
		t.Error(fault)
	}
	demo := brackwater(t)
	rapid.Check(t, func(t *rapid.T) {
		texts := rapid.OneOf(rapid.String(), rapid.StringOfN(rapid.RuneFrom([]rune("a\x1b[2J\u202e\u0085é \t\n")), 0, 300, -1))
		d := demo
		d.Job.Project, d.Job.Scheme, d.Caution = texts.Draw(t, "project"), texts.Draw(t, "scheme"), texts.Draw(t, "caution")
		d.Members = append([]document.Member{}, d.Members...)
		m := &d.Members[0]
		m.Mark, m.Section, m.Grade, m.Governing = texts.Draw(t, "mark"), texts.Draw(t, "section"), texts.Draw(t, "grade"), texts.Draw(t, "governing")
		d.Groups = []document.Group{{Group: texts.Draw(t, "group")}}
		d.Categories = []document.Category{{Category: texts.Draw(t, "category")}}
		d.Findings = []document.Finding{{Severity: document.Doubtful, Subject: texts.Draw(t, "subject"), Message: texts.Draw(t, "message")}}
		d.Range.Warnings = []string{texts.Draw(t, "warning")}
		if fault := checkLines(Table(d)); fault != "" {
			t.Fatal(fault)
		}
	})
}
