package dashboard_test

import (
	"encoding/json"
	"fmt"
	"net/http"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"golang.org/x/net/html"

	"spanwright/estimate/assumption"
	"spanwright/estimate/document"
)

// read parses a page.
func read(t *testing.T, body string) *html.Node {
	t.Helper()
	n, err := html.Parse(strings.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	return n
}

// find returns the elements that match, in the order of the document. A match is
// a tag, a tag with one class ("td.n"), or a tag with one attribute and its value
// ("th[scope=row]").
func find(n *html.Node, match string) []*html.Node {
	tag, class, _ := strings.Cut(match, ".")
	tag, attribute, _ := strings.Cut(tag, "[")
	key, value, _ := strings.Cut(strings.TrimSuffix(attribute, "]"), "=")
	var out []*html.Node
	for c := range n.Descendants() {
		if c.Type != html.ElementNode || tag != "" && c.Data != tag {
			continue
		}
		if class != "" && !slices.Contains(strings.Fields(get(c, "class")), class) || key != "" && get(c, key) != value {
			continue
		}
		out = append(out, c)
	}
	return out
}

func get(n *html.Node, key string) string {
	for _, a := range n.Attr {
		if a.Key == key {
			return a.Val
		}
	}
	return ""
}

// text is what a reader reads: all text with single spaces.
func text(n *html.Node) string {
	var b strings.Builder
	for c := range n.Descendants() {
		if c.Type == html.TextNode && (c.Parent == nil || c.Parent.Data != "style") {
			b.WriteString(c.Data)
			b.WriteByte(' ')
		}
	}
	return strings.Join(strings.FieldsFunc(b.String(), func(r rune) bool { return r == ' ' || r == '\n' || r == '\t' || r == '\u00a0' }), " ")
}

// page asks for a page as somebody signed in and expects it.
func page(t *testing.T, f *fixture, path string) *html.Node {
	t.Helper()
	a := ask(t, handler(t, f), "GET", path, "", true)
	if a.status != http.StatusOK {
		t.Fatalf("GET %s: %d", path, a.status)
	}
	return read(t, a.body)
}

func contains(t *testing.T, where, got string, want ...string) {
	t.Helper()
	for _, w := range want {
		if !strings.Contains(got, w) {
			t.Errorf("%s: %q is missing in %.3000q", where, w, got)
		}
	}
}

// one is a project with one scheme and one estimate of the document.
func one(t *testing.T, d document.Document) (*fixture, string) {
	t.Helper()
	f := newFixture()
	p := f.addProject("Brackwater loading quay", "EUR")
	f.addEstimate(t, f.addScheme(p, "Inner support"), d)
	return f, "/projects/" + p.ID.String()
}

func TestProjectList(t *testing.T) {
	f := full(t)
	n := page(t, f, "/")
	rows := find(find(n, "tbody")[0], "tr")
	if len(rows) != 2 {
		t.Fatalf("%d rows, want 2", len(rows))
	}
	contains(t, "first row", text(rows[0]), "Brackwater loading quay EUR, 3 schemes", "Inner support", "766 k EUR", "591 k – 1.06 M EUR", "962 k EUR P80", "127.858", "6 unsafe")
	contains(t, "second row", text(rows[1]), "Brackwater pan house gantry", "1 scheme", "no estimate yet")
	if got, want := get(find(rows[0], "a")[0], "href"), "/projects/"+f.projects[0].ID.String(); got != want {
		t.Errorf("link %s, want %s", got, want)
	}
}

func TestProjectListIsPaged(t *testing.T) {
	f := newFixture()
	for i := range 60 {
		f.addProject(fmt.Sprintf("Brackwater job & part %d", i), "GBP")
	}
	var seen []string
	for path := "/"; path != ""; {
		n := page(t, f, path)
		for _, th := range find(n, "th[scope=row]") {
			seen = append(seen, text(find(th, "a")[0]))
		}
		path = ""
		for _, a := range find(n, "a[rel=next]") {
			path = get(a, "href")
		}
	}
	if len(seen) != 60 || seen[0] != "Brackwater job & part 59" || seen[59] != "Brackwater job & part 0" {
		t.Errorf("the pages list %d projects: %q", len(seen), seen)
	}
}

func TestEmptyStates(t *testing.T) {
	f := newFixture()
	contains(t, "no projects", text(page(t, f, "/")), "No projects yet.")
	p := f.addProject("Brackwater sluice", "EUR")
	path := "/projects/" + p.ID.String()
	contains(t, "no scheme", text(page(t, f, path)), "This project has no scheme yet.")
	f.addScheme(p, "Portal")
	n := page(t, f, path)
	contains(t, "no estimate", text(n), "This scheme has no estimate yet.", "Portal shown below")
	if strings.Contains(text(n), document.Caution) {
		t.Error("a caution without sizes")
	}
}

func TestProjectShowsTheDocument(t *testing.T) {
	d := demo(t)
	f, path := one(t, d)
	n := page(t, f, path)
	main := find(n, "main")[0]
	headline := text(find(main, "dl.headline")[0])
	contains(t, "headline", headline, "Base estimate 766 k EUR 766 439.82 EUR; it lies at P44", "Range P10 – P90 591 k – 1.06 M EUR",
		"P50 793 k EUR", "P80 962 k EUR", "Contingency 196 k EUR P80, 962 k EUR, less the base", "Delivered mass 127.858 t", "6 unsafe")
	all := text(main)
	contains(t, "page", all, document.Caution, d.Job.Money, d.Job.RateBookNote, d.Range.Method, "Engine version 2",
		f.estimates[0].DocumentSHA256, "Base date 2026-06-01", "fabrication 276 173.28 36.0 % 292 k 203 k – 392 k",
		"Base estimate 766 439.82 100.0 % 813 k", "P50 793 k EUR 314 EUR", "Conveyor gallery 12 234 29.948 36.591 38.626 219 182.04",
		"All groups 48 552 103.342 127.858 135.595 766 439.82", "3 / 12 / 25 % triangular", "0.794 / 1 / 1.26 lognormal, ends are P10 and P90")
	for _, list := range [][]string{d.Inclusions, d.Exclusions, d.Notes} {
		contains(t, "lists", all, list...)
	}
	if got := len(find(main, "figure")); got != 3 {
		t.Errorf("%d drawings, want 3", got)
	}
	if got := len(find(main, "tr.member")); got != len(d.Members) {
		t.Errorf("%d members, want %d", got, len(d.Members))
	}
	entries := len(find(find(main, "table.register")[0], "th[scope=row]"))
	if entries != len(d.Assumptions) {
		t.Errorf("%d assumptions, want %d", entries, len(d.Assumptions))
	}
}

func TestMembersMarkWhatIsUnsafe(t *testing.T) {
	f, path := one(t, demo(t))
	n := page(t, f, path)
	doubted := map[string]string{}
	for _, tr := range find(n, "tr.doubted") {
		mark := find(tr, "th")[0].FirstChild.Data
		more := tr.NextSibling
		for more != nil && more.Type != html.ElementNode {
			more = more.NextSibling
		}
		doubted[mark] = text(tr) + " | " + text(more)
	}
	for _, mark := range []string{"AP10", "CG6", "CG12", "LB1", "PB5", "PB6"} {
		if _, ok := doubted[mark]; !ok {
			t.Errorf("%s is not marked", mark)
		}
	}
	if len(doubted) != 6 {
		t.Errorf("%d members are marked, want 6", len(doubted))
	}
	contains(t, "AP10", doubted["AP10"], "lateral-torsional buckling", "fails 1.16")
	// An inner support of two equal spans: 1 of 1.25·wL, 0.80 (handbook, continuous beam of two equal spans).
	contains(t, "CG6", doubted["CG6"], "unsafe", "split method unsafe in 4 of 11 effects", "reaction support at 6 m 20.7 25.9 kN 0.80 unsafe", "support moment support at 6 m 0 −15.6 kNm 0.00 unsafe")
}

// TestFindingsGravestFirst hands the findings over in the wrong order.
func TestFindingsGravestFirst(t *testing.T) {
	d := demo(t)
	d.Findings = []document.Finding{
		{Severity: document.Notice, Code: "a", Subject: "total", Message: "first"},
		{Severity: document.Unsafe, Code: "b", Subject: "AP1", Message: "second"},
		{Severity: document.Doubtful, Code: "c", Subject: "Towers", Message: "third"},
		{Severity: document.Unsafe, Code: "d", Subject: "TW1", Message: "fourth"},
	}
	f, path := one(t, d)
	var got []string
	for _, li := range find(find(page(t, f, path), "ul.findings")[0], "li") {
		if len(find(li, "svg")) != 1 {
			t.Errorf("%q has no icon", text(li))
		}
		got = append(got, text(li))
	}
	want := []string{"unsafe AP1 second", "unsafe TW1 fourth", "doubtful Towers third", "notice total first"}
	if !slices.Equal(got, want) {
		t.Errorf("findings %q, want %q", got, want)
	}
}

func TestNegativeContingencySaysSo(t *testing.T) {
	f, path := one(t, negative(t, demo(t)))
	n := page(t, f, path)
	contains(t, "headline", text(find(n, "dl.headline")[0]), "Contingency −175 k EUR negative: the base already lies above P10, 591 k EUR")
	contains(t, "schemes", text(find(n, "tr.selected")[0]), "−175 k EUR negative")
}

func TestSchemes(t *testing.T) {
	f := full(t)
	path := "/projects/" + f.projects[0].ID.String()
	if got := text(find(page(t, f, path), "h2[id=scheme]")[0]); got != "Scheme Inner support" {
		t.Errorf("shown by default: %q, want the scheme with the newest estimate", got)
	}
	for _, s := range f.schemes[:3] {
		n := page(t, f, path+"?scheme="+s.ID.String())
		if got := text(find(n, "h2[id=scheme]")[0]); got != "Scheme "+s.Name {
			t.Errorf("asked for %s, shown %q", s.Name, got)
		}
		if got := find(n, "a[aria-current=true]"); len(got) != 1 || text(got[0]) != s.Name {
			t.Errorf("%s is not marked as shown", s.Name)
		}
	}
	h := handler(t, f)
	for _, query := range []string{"?scheme=x", "?scheme=" + f.schemes[3].ID.String(), "?members=0", "?members=2", "?members=x"} {
		if a := ask(t, h, "GET", path+query, "", true); a.status != http.StatusNotFound {
			t.Errorf("%s: %d, want 404", query, a.status)
		}
	}
}

// large is a document with more of everything than a page shows at once.
func large(t *testing.T) document.Document {
	d := demo(t)
	m, g, a := d.Members[0], d.Groups[0], d.Assumptions[0]
	d.Members, d.Groups, d.Assumptions, d.Findings = nil, nil, nil, nil
	for i := range 600 {
		m.Mark, m.Group = "M"+strconv.Itoa(i+1), "G"+strconv.Itoa(i/100)
		g.Group, a.ID = "G"+strconv.Itoa(i), "allowance/"+strconv.Itoa(i)
		d.Members, d.Groups, d.Assumptions = append(d.Members, m), append(d.Groups, g), append(d.Assumptions, a)
		d.Findings = append(d.Findings, document.Finding{Severity: document.Unsafe, Subject: m.Mark, Message: "doubt"})
	}
	d.Assumptions[599].Kind = assumption.Default
	return d
}

func TestLargeDocuments(t *testing.T) {
	f, path := one(t, large(t))
	var marks []string
	for next := path; next != ""; {
		n := page(t, f, next)
		contains(t, "page", text(n), "300 further groups are in the workbook.", "400 further findings are in the workbook; in all there are 600 unsafe", "100 further entries are in the workbook.")
		for _, tr := range find(n, "tr.member") {
			marks = append(marks, find(tr, "th")[0].FirstChild.Data)
		}
		next = ""
		for _, a := range find(n, "a[rel=next]") {
			next = strings.TrimSuffix(get(a, "href"), "#members")
		}
	}
	if len(marks) != 600 || marks[0] != "M1" || marks[599] != "M600" {
		t.Errorf("the pages show %d members", len(marks))
	}
}

func TestFiles(t *testing.T) {
	d := demo(t)
	f, _ := one(t, d)
	h := handler(t, f)
	path := "/estimates/" + f.estimates[0].ID.String() + "/document."
	for extension, want := range map[string]struct{ contentType, begin string }{
		"json": {"application/json", `{"engine_version":2,`},
		"csv":  {"text/csv; charset=utf-8", ""},
		"xlsx": {"application/vnd.openxmlformats-officedocument.spreadsheetml.sheet", "PK"},
	} {
		a := ask(t, h, "GET", path+extension, "", true)
		if a.status != http.StatusOK || a.header.Get("Content-Type") != want.contentType || !strings.HasPrefix(a.body, want.begin) || len(a.body) < 1000 {
			t.Errorf("%s: %d, %s, %d bytes", extension, a.status, a.header.Get("Content-Type"), len(a.body))
		}
		name := regexp.MustCompile(`^attachment; filename=Brackwater-loading-quay_Inner-support_[0-9a-f]{8}\.` + extension + `$`)
		if got := a.header.Get("Content-Disposition"); !name.MatchString(got) {
			t.Errorf("%s: disposition %q", extension, got)
		}
		if got := a.header.Get("Cache-Control"); got != "no-store" {
			t.Errorf("%s: cache control %q", extension, got)
		}
	}
	if got := ask(t, h, "GET", path+"json", "", true).body; got != string(f.documents[f.estimates[0].ID]) || !json.Valid([]byte(got)) {
		t.Error("the JSON is not the stored bytes")
	}
}

func TestFileNamesAreHarmless(t *testing.T) {
	d := demo(t)
	d.Job.Project, d.Job.Scheme = "../\r\nSet-Cookie: x=1", "Überbau \"A\""
	f, _ := one(t, d)
	a := ask(t, handler(t, f), "GET", "/estimates/"+f.estimates[0].ID.String()+"/document.json", "", true)
	want := "attachment; filename=Set-Cookie-x-1_berbau-A_00000003.json"
	if got := a.header.Get("Content-Disposition"); got != want {
		t.Errorf("disposition %q, want %q", got, want)
	}
}
