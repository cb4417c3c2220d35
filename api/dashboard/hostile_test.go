package dashboard_test

import (
	"strings"
	"testing"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

// nasty is text that must come out as text: markup, an attribute's end, a URL of
// a script, a template's braces, marks of direction, a word without an end.
const nasty = `<script>alert(1)</script>"'><img src=x onerror=alert(2)>javascript:alert(3){{.}}` + "\u202eabc\u202c" + `&lt;`

var longWord = strings.Repeat("Brackwater", 19)

// hostile fills the texts of a document with nasty ones and long ones.
func hostile(t *testing.T, d document.Document) document.Document {
	t.Helper()
	j := &d.Job
	for _, s := range []*string{&j.Project, &j.Scheme, &j.Source, &j.DesignBasis, &j.BaseDate, &j.Money, &j.RateBook, &j.RateBookNote, &j.ReferencePrice, &d.Range.Method} {
		*s = nasty
	}
	d.Range.Warnings = []string{nasty, longWord}
	d.Inclusions, d.Exclusions, d.Notes = []string{nasty}, []string{longWord}, []string{nasty, longWord}
	d.Findings = []document.Finding{
		{Severity: document.Notice, Subject: nasty, Message: nasty},
		{Severity: document.Doubtful, Subject: longWord, Message: longWord},
		{Severity: document.Unsafe, Subject: "AP1", Message: nasty},
	}
	for i := range d.Members {
		m := &d.Members[i]
		if i%2 == 0 {
			m.Mark, m.Kind, m.Description, m.Arrangement, m.Section, m.Grade, m.Governing = nasty, nasty, nasty, nasty, nasty, nasty, nasty
		} else {
			m.Mark, m.Description, m.Section = longWord, longWord, longWord
		}
		for k := range m.Checks {
			m.Checks[k].ID, m.Checks[k].Clause = nasty, nasty
		}
		for k := range m.Ratios {
			m.Ratios[k].Effect, m.Ratios[k].Where, m.Ratios[k].Unit = nasty, longWord, nasty
		}
		for k := range m.Rejected {
			m.Rejected[k].Section = nasty
		}
	}
	for i := range d.Groups {
		d.Groups[i].Group = nasty
	}
	for i := range d.Categories {
		d.Categories[i].Category = longWord
	}
	for i := range d.Assumptions {
		a := &d.Assumptions[i]
		a.ID, a.Statement, a.Source, a.Clause, a.Owner = nasty, nasty, longWord, nasty, nasty
		a.Confidence, a.Scope, a.Unit, a.Value = assumption.Confidence(nasty), nasty, nasty, nasty
	}
	return d
}
