package dashboard_test

import (
	"slices"
	"strings"
	"testing"

	"golang.org/x/net/html"
)

// TestNoMarkupFromTexts hands in markup in every text. The page must have the
// same elements as for harmless texts, no script and no handler.
func TestNoMarkupFromTexts(t *testing.T) {
	f, path := one(t, hostile(t, demo(t)))
	f.name, f.projects[0].Name, f.projects[0].BaseDate, f.schemes[0].Name, f.estimates[0].CreatedBy = nasty, nasty, nasty, nasty, nasty
	f.addProject(longWord, nasty)
	for _, p := range []string{"/", path} {
		n := page(t, f, p)
		contains(t, p, text(n), "<script>alert(1)</script>")
		for c := range n.Descendants() {
			if c.Type != html.ElementNode {
				continue
			}
			if slices.Contains([]string{"script", "img", "iframe", "object", "base", "style"}, c.Data) {
				t.Errorf("%s: element %s", p, c.Data)
			}
			for _, a := range c.Attr {
				if strings.HasPrefix(a.Key, "on") || a.Key == "style" || strings.Contains(strings.ToLower(a.Val), "javascript:") && (a.Key == "href" || a.Key == "src") {
					t.Errorf("%s: %s has the attribute %s=%q", p, c.Data, a.Key, a.Val)
				}
			}
		}
	}
}

// TestStructure checks what assistive programs lean on, on every page in every state.
func TestStructure(t *testing.T) {
	f := full(t)
	project := "/projects/" + f.projects[0].ID.String()
	empty := newFixture()
	odd, oddPath := one(t, hostile(t, demo(t)))
	big, bigPath := one(t, large(t))
	for _, c := range []struct {
		f    *fixture
		path string
	}{{f, "/"}, {empty, "/"}, {f, project}, {f, project + "?scheme=" + f.estimates[1].Scheme.String()}, {f, project + "?scheme=" + f.schemes[1].ID.String()},
		{f, "/sign-in"}, {f, "/nowhere"}, {odd, oddPath}, {big, bigPath}} {
		a := ask(t, handler(t, c.f), "GET", c.path, "", true)
		t.Run(c.path, func(t *testing.T) { checkStructure(t, read(t, a.body)) })
	}
}

func checkStructure(t *testing.T, n *html.Node) {
	t.Helper()
	for match, want := range map[string]int{"html[lang=en]": 1, "main": 1, "h1": 1, "title": 1, "a.skip": 1, "header": 1, "script": 0} {
		got := len(find(n, match))
		if match == "title" {
			got = len(find(find(n, "head")[0], "title"))
		}
		if got != want {
			t.Errorf("%d × %s, want %d", got, match, want)
		}
	}
	level, ids, labels := 0, map[string]bool{}, map[string]bool{}
	for c := range n.Descendants() {
		if c.Type != html.ElementNode {
			continue
		}
		if id := get(c, "id"); id != "" {
			if ids[id] {
				t.Errorf("id %q stands twice", id)
			}
			ids[id] = true
		}
		if len(c.Data) == 2 && c.Data[0] == 'h' && c.Data[1] >= '1' && c.Data[1] <= '6' {
			next := int(c.Data[1] - '0')
			if next > level+1 {
				t.Errorf("heading %q of level %d follows level %d", text(c), next, level)
			}
			level = next
		}
		if c.Data == "label" {
			labels[get(c, "for")] = true
		}
	}
	checkReferences(t, n, ids, labels)
	for _, table := range find(n, "table") {
		if caption := find(table, "caption"); len(caption) == 0 || text(caption[0]) == "" {
			t.Errorf("a table without a caption: %.80q", text(table))
		}
		for _, th := range find(table, "th") {
			if !slices.Contains([]string{"col", "row", "rowgroup"}, get(th, "scope")) {
				t.Errorf("th %q has the scope %q", text(th), get(th, "scope"))
			}
		}
	}
}

// checkReferences checks that what points at an id finds it.
func checkReferences(t *testing.T, n *html.Node, ids, labels map[string]bool) {
	t.Helper()
	for c := range n.Descendants() {
		for _, a := range c.Attr {
			if a.Key == "aria-labelledby" || a.Key == "aria-describedby" {
				for _, id := range strings.Fields(a.Val) {
					if !ids[id] {
						t.Errorf("%s of %s: nothing has the id %q", a.Key, c.Data, id)
					}
				}
			}
			if target, ok := strings.CutPrefix(a.Val, "#"); ok && a.Key == "href" && !ids[target] {
				t.Errorf("a link leads to %q, which is not there", a.Val)
			}
		}
		if c.Data == "input" && get(c, "type") == "password" && !labels[get(c, "id")] {
			t.Error("a field without a label")
		}
	}
}
