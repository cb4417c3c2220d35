package api

import (
	"strings"
	"testing"

	"spanwright/api/service"
)

func TestHealth(t *testing.T) {
	w := newWorld(t)
	w.store.broken, w.store.ready = errDatabase, errDatabase
	_, body := w.want(200, call{method: "GET", path: "/healthz", token: "none"})
	if body["status"] != "up" || body["version"] != "1.2.3" {
		t.Errorf("answered %v", body)
	}
}

func TestReadiness(t *testing.T) {
	w := newWorld(t)
	_, body := w.want(200, call{method: "GET", path: "/readyz", token: "none"})
	if body["status"] != "ready" {
		t.Errorf("answered %v", body)
	}
	w.store.ready = &service.Error{Kind: service.Internal, Message: "the schema is newer than the program", Err: errDatabase}
	if p := w.refused(503, call{method: "GET", path: "/readyz", token: "none"}); p.Detail != "the schema is newer than the program" {
		t.Errorf("detail %q", p.Detail)
	}
	w.store.ready = errDatabase
	p := w.refused(503, call{method: "GET", path: "/readyz", token: "none"})
	if strings.Contains(p.Detail, "db.internal") || p.Detail == "" || !strings.Contains(w.log.String(), "db.internal") {
		t.Errorf("detail %q; the reason belongs into the log", p.Detail)
	}
}
