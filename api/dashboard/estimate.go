package dashboard

import (
	"fmt"
	"mime"
	"net/http"
	"strconv"
	"strings"

	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/chart"
	"spanwright/estimate/document"
	"spanwright/estimate/workbook"
)

// estimateRow is the head of an estimate in a table.
type estimateRow struct {
	Base         string
	Range        string // P10 – P90
	Confidence   string // percentile that the contingency reaches
	AtConfidence string
	Contingency  string
	Negative     bool // the contingency is below zero
	Delivered    string
	Unsafe       int
	Made         moment
	By           string
}

func newEstimateRow(e service.Estimate) *estimateRow {
	return &estimateRow{
		Base:         chart.Money(e.Base.Float64(), e.Currency),
		Range:        interval(e.P10.Float64(), e.P90.Float64(), e.Currency),
		Confidence:   percentile(e.Confidence),
		AtConfidence: chart.Money(e.Base.Add(e.Contingency).Float64(), e.Currency),
		Contingency:  chart.Money(e.Contingency.Float64(), e.Currency),
		Negative:     e.Contingency.Sign() < 0,
		Delivered:    exact(e.Delivered),
		Unsafe:       e.Unsafe,
		Made:         momentOf(e.CreatedAt),
		By:           e.CreatedBy,
	}
}

// files are the forms in which a document is taken away.
var files = map[string]struct {
	contentType string
	write       func(document.Document, []byte) ([]byte, error)
}{
	"document.json": {"application/json", func(_ document.Document, stored []byte) ([]byte, error) { return stored, nil }},
	"document.xlsx": {"application/vnd.openxmlformats-officedocument.spreadsheetml.sheet",
		func(d document.Document, _ []byte) ([]byte, error) { return workbook.XLSX(d) }},
	"document.csv": {"text/csv; charset=utf-8", func(d document.Document, _ []byte) ([]byte, error) { return workbook.CSV(d) }},
}

// estimateFile serves a document as JSON (the canonical bytes), workbook or CSV.
func (d *dashboard) estimateFile(w http.ResponseWriter, r *http.Request, a service.Actor) error {
	file, ok := files[r.PathValue("file")]
	id, err := uuid.Parse(r.PathValue("id"))
	if !ok || err != nil {
		return errNoPage
	}
	stored, err := d.service.Document(r.Context(), a, id)
	if err != nil {
		return err
	}
	var doc document.Document
	data, err := d.service.Export(r.Context(), func() ([]byte, error) {
		var err error
		if doc, err = document.Parse(stored); err != nil {
			return nil, err
		}
		return file.write(doc, stored)
	})
	if err != nil {
		return fmt.Errorf("estimate %s: %w", id, err)
	}
	_, extension, _ := strings.Cut(r.PathValue("file"), ".")
	w.Header().Set("Content-Type", file.contentType)
	w.Header().Set("Content-Length", strconv.Itoa(len(data)))
	w.Header().Set("Content-Disposition", mime.FormatMediaType("attachment", map[string]string{"filename": fileName(doc, id) + "." + extension}))
	_, _ = w.Write(data)
	return nil
}

// fileName names a file after project, scheme and the random end of the
// estimate's id, in characters that every file system takes.
func fileName(d document.Document, id uuid.UUID) string {
	text := id.String()
	parts := []string{slug(d.Job.Project), slug(d.Job.Scheme), text[len(text)-8:]}
	return strings.Trim(strings.Join(parts, "_"), "_")
}

// slug keeps the letters and digits of ASCII, at most 40 of them, and joins the
// rest as single hyphens.
func slug(s string) string {
	words := strings.FieldsFunc(s, func(r rune) bool {
		return !('a' <= r && r <= 'z' || 'A' <= r && r <= 'Z' || '0' <= r && r <= '9')
	})
	text := strings.Join(words, "-")
	return strings.Trim(text[:min(len(text), 40)], "-")
}
