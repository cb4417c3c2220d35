package api

import (
	"fmt"
	"regexp"
	"testing"
)

// A list is walked by its links: every item once, newest first, no link on the last.
func TestPaging(t *testing.T) {
	w := newWorld(t)
	for i := range 7 {
		w.want(201, call{method: "POST", path: "/v1/projects", body: fmt.Sprintf(`{"name":"P%d"}`, i)})
	}
	link := regexp.MustCompile(`^<(/v1/projects\?limit=3&cursor=[^>]+)>; rel="next"$`)
	path, seen := "/v1/projects?limit=3", []string{}
	for page := 1; path != ""; page++ {
		rec, body := w.want(200, call{method: "GET", path: path})
		for _, item := range body["items"].([]any) {
			seen = append(seen, item.(map[string]any)["name"].(string))
		}
		next, _ := body["next"].(string)
		m := link.FindStringSubmatch(rec.Header().Get("Link"))
		if (next != "") != (m != nil) || (next == "") != (page == 3) {
			t.Fatalf("page %d: next %q, Link %q", page, next, rec.Header().Get("Link"))
		}
		path = ""
		if m != nil {
			path = m[1]
		}
	}
	if got := fmt.Sprint(seen); got != "[P6 P5 P4 P3 P2 P1 P0]" {
		t.Errorf("walked %s", got)
	}
}

// An empty list is [] and has no next page.
func TestEmptyList(t *testing.T) {
	w := newWorld(t)
	rec, _ := w.want(200, call{method: "GET", path: "/v1/projects"})
	if got := rec.Body.String(); got != "{\"items\":[]}\n" {
		t.Errorf("answered %s", got)
	}
}
