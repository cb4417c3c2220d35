package dashboard

import (
	"fmt"
	"html/template"
	"net/http"
	"slices"
	"strconv"

	"github.com/google/uuid"

	"spanwright/api/service"
	"spanwright/estimate/chart"
	"spanwright/estimate/document"
	"spanwright/estimate/money"
)

// estimateView is a document as a page shows it.
type estimateView struct {
	Caution  string
	Headline headline
	Files    []link

	Curve, CategoryBars, TonnageBars template.HTML // drawings

	Percentiles []percentileRow
	Mean        percentileRow
	Method      string
	Warnings    []string
	Moves       []sensitivityRow
	MovesMethod string
	Risks       []riskRow
	Carbon      []carbonRow
	Class       string // what the estimate class rests on
	Categories  []categoryRow
	Total       categoryRow
	Groups      []groupRow
	AllGroups   groupRow
	MoreGroups  int // left out of the table
	Findings    findings
	Members     members
	Assumptions assumptions
	Inclusions  []string
	Exclusions  []string
	Notes       []string
	Facts       []fact
}

type link struct{ Text, URL, Note string }

// fact is one thing to know about how the estimate was made.
type fact struct {
	Name, Value string
	Code        bool // a digest or an id
}

// headline holds the figures of the first line.
type headline struct {
	Base, BaseExact          string
	BaseLies                 string          // "at P44"
	Range                    string          // P10 – P90
	Middle                   []percentileRow // between the ends of the range
	Confidence, AtConfidence string
	Contingency              string
	Negative, None           bool // the contingency is below zero, is zero
	Net, Delivered           string
	Purchased                string
	Members, Pieces          string
	Unsafe                   int
	Class                    int
	Money                    string // in which money
	RateBookNote             string
}

// percentileRow is a point of the range.
type percentileRow struct{ Name, Value, Error string }

// categoryRow is the cost of a category.
type categoryRow struct{ Name, Amount, Share, Mean, Range string }

// groupRow is the tonnage and cost of a group.
type groupRow struct {
	Name, Members, Pieces, Net, Delivered, Purchased, Amount string
}

const mostGroups = 300

// estimateView reads the document of a scheme's newest estimate.
func (d *dashboard) estimateView(r *http.Request, a service.Actor, project uuid.UUID, s scheme) (*estimateView, error) {
	stored, err := d.service.Document(r.Context(), a, s.head.ID)
	if err != nil {
		return nil, fmt.Errorf("document of estimate %s: %w", s.head.ID, err)
	}
	doc, err := document.Parse(stored)
	if err != nil {
		return nil, fmt.Errorf("document of estimate %s: %w", s.head.ID, err)
	}
	page, err := memberPage(r.URL.Query().Get("members"), len(doc.Members))
	if err != nil {
		return nil, err
	}
	v := newEstimateView(doc)
	v.Members = newMembers(doc, page, projectURL(project)+"?scheme="+s.ID.String())
	v.Findings.link(v.Members)
	v.Facts = facts(doc, s.head.DocumentSHA256)
	url := "/estimates/" + s.head.ID.String() + "/document."
	v.Files = []link{
		{"Workbook", url + "xlsx", "with live formulas"},
		{"CSV", url + "csv", "every priced line"},
		{"JSON", url + "json", "the whole document"},
	}
	return v, nil
}

// newEstimateView makes everything of the view that the document alone decides.
func newEstimateView(d document.Document) *estimateView {
	v := &estimateView{
		Caution: document.Caution, Headline: newHeadline(d),
		// The drawings escape every text of the document themselves.
		Curve:        template.HTML(chart.CumulativeCurve(d)),
		CategoryBars: template.HTML(chart.CategoryBars(d)),
		TonnageBars:  template.HTML(chart.TonnageBars(d)),
		Percentiles:  percentiles(d),
		Mean: percentileRow{"mean", chart.Money(float64(d.Range.Mean), d.Job.Currency),
			chart.Money(float64(d.Range.MeanSE), d.Job.Currency)},
		Method: d.Range.Method, Warnings: d.Range.Warnings,
		Findings: newFindings(d.Findings), Assumptions: newAssumptions(d.Assumptions),
		Inclusions: d.Inclusions, Exclusions: d.Exclusions, Notes: d.Notes,
	}
	v.Moves, v.MovesMethod, v.Risks, v.Carbon, v.Class = sensitivities(d), d.Range.SensitivityMethod, risks(d), carbon(d), d.Class.Why
	v.Categories, v.Total = categories(d)
	v.Groups, v.AllGroups, v.MoreGroups = groups(d)
	return v
}

func newHeadline(d document.Document) headline {
	t, currency := d.Totals, d.Job.Currency
	h := headline{
		Base: chart.Money(t.Base.Float64(), currency), BaseExact: exact(t.Base) + space + currency,
		BaseLies: lies(float64(d.Range.BaseAt)), Middle: middle(percentiles(d)),
		Range:      tenToNinety(d, currency),
		Confidence: percentile(float64(t.Confidence)), AtConfidence: chart.Money(t.AtConfidence.Float64(), currency),
		Contingency: chart.Money(t.Contingency.Float64(), currency),
		Negative:    t.Contingency.Sign() < 0, None: t.Contingency.IsZero(),
		Net: exact(t.Net), Delivered: exact(t.Delivered), Purchased: exact(t.Purchased),
		Members: count(t.Members), Pieces: count(t.Pieces), Unsafe: t.Unsafe, Class: d.Job.EstimateClass,
		Money: d.Job.Money, RateBookNote: d.Job.RateBookNote,
	}
	return h
}

// tenToNinety writes the range from P10 to P90, or a dash where the document
// has not both.
func tenToNinety(d document.Document, currency string) string {
	ends := map[document.Number]float64{}
	for _, p := range d.Range.Percentiles {
		ends[p.P] = float64(p.Value)
	}
	low, ok := ends[0.1]
	high, both := ends[0.9]
	if !ok || !both {
		return dash
	}
	return interval(low, high, currency)
}

func percentiles(d document.Document) []percentileRow {
	var out []percentileRow
	for _, p := range d.Range.Percentiles {
		out = append(out, percentileRow{percentile(float64(p.P)), chart.Money(float64(p.Value), d.Job.Currency), chart.Money(float64(p.SE), d.Job.Currency)})
	}
	return out
}

// middle leaves out the ends of the range, which stand above it.
func middle(rows []percentileRow) []percentileRow {
	return slices.DeleteFunc(rows, func(r percentileRow) bool { return r.Name == "P10" || r.Name == "P90" })
}

// categories lists the categories to the minor unit; they sum to the base.
func categories(d document.Document) ([]categoryRow, categoryRow) {
	var out []categoryRow
	for _, c := range d.Categories {
		out = append(out, categoryRow{c.Category, exact(c.Amount), share(c.Amount, d.Totals.Base),
			chart.Money(float64(c.Mean), ""), interval(float64(c.P10), float64(c.P90), "")})
	}
	return out, categoryRow{"Base estimate", exact(d.Totals.Base), share(d.Totals.Base, d.Totals.Base),
		chart.Money(float64(d.Range.Mean), ""), tenToNinety(d, "")}
}

func share(part, whole money.Decimal) string {
	if whole.Sign() <= 0 {
		return dash
	}
	return places(100*part.Float64()/whole.Float64(), 1) + space + "%"
}

// groups lists the groups in the document's order, at most mostGroups, with
// their sum and how many were left out.
func groups(d document.Document) ([]groupRow, groupRow, int) {
	var out []groupRow
	for _, g := range d.Groups[:min(len(d.Groups), mostGroups)] {
		out = append(out, groupRow{g.Group, count(g.Members), count(g.Pieces), exact(g.Net), exact(g.Delivered), exact(g.Purchased), exact(g.Amount)})
	}
	t := d.Totals
	return out, groupRow{"All groups", count(t.Members), count(t.Pieces), exact(t.Net), exact(t.Delivered), exact(t.Purchased), exact(t.Base)},
		len(d.Groups) - len(out)
}

// facts say from what and how the estimate was made.
func facts(d document.Document, documentSHA256 string) []fact {
	j := d.Job
	all := []fact{
		{"Design basis", j.DesignBasis + factor(d), false},
		{"Estimate class", strconv.Itoa(j.EstimateClass), false},
		{"Base date", j.BaseDate, false},
		{"Money", j.Money, false},
		{"Rate book", j.RateBook, false},
		{"Reference price", j.ReferencePrice + space + j.Currency + "/t", false},
		{"Schedule", j.Source, false},
		{"Engine version", strconv.Itoa(d.EngineVersion), false},
		{"Document SHA-256", documentSHA256, true},
		{"Job SHA-256", j.JobSHA256, true},
		{"Schedule SHA-256", j.SourceSHA256, true},
		{"Rate book SHA-256", j.RateBookSHA256, true},
		{"Section catalogue SHA-256", j.CatalogueSHA256, true},
		{"Grades SHA-256", j.GradesSHA256, true},
	}
	var out []fact
	for _, f := range all {
		if f.Value != "" && !(f.Name == "Reference price" && j.ReferencePrice == "") {
			out = append(out, f)
		}
	}
	return out
}

func factor(d document.Document) string {
	if d.Job.Factor == 0 {
		return ""
	}
	return ", factor " + plain(float64(d.Job.Factor))
}
