package dashboard

import (
	"slices"

	"spanwright/estimate/document"
)

const mostFindings = 200

// findings are the doubts of a document, gravest first.
type findings struct {
	Unsafe, Doubtful, Notice int // of all, shown or not
	Rows                     []findingRow
	More                     int // left out of the list
}

// findingRow is one finding.
type findingRow struct {
	Severity         string
	Subject, Message string
	Anchor           string // of the member on the same page, or empty
}

var gravity = []document.Severity{document.Unsafe, document.Doubtful, document.Notice}

// newFindings orders by gravity, otherwise as the document does, and keeps the
// first mostFindings; a severity that is not known comes first.
func newFindings(all []document.Finding) findings {
	sorted := slices.Clone(all)
	slices.SortStableFunc(sorted, func(a, b document.Finding) int {
		return slices.Index(gravity, a.Severity) - slices.Index(gravity, b.Severity)
	})
	var f findings
	for i, x := range sorted {
		switch x.Severity {
		case document.Unsafe:
			f.Unsafe++
		case document.Doubtful:
			f.Doubtful++
		case document.Notice:
			f.Notice++
		}
		if i < mostFindings {
			f.Rows = append(f.Rows, findingRow{Severity: string(x.Severity), Subject: x.Subject, Message: x.Message})
		}
	}
	f.More = len(all) - len(f.Rows)
	return f
}

// link points the findings at the members that are on the page.
func (f *findings) link(m members) {
	anchors := map[string]string{}
	for _, g := range m.Groups {
		for _, r := range g.Rows {
			anchors[r.Mark] = r.Anchor
		}
	}
	for i := range f.Rows {
		f.Rows[i].Anchor = anchors[f.Rows[i].Subject]
	}
}
