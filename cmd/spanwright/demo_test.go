package main

import (
	"bytes"
	"context"
	"io"
	"net/http"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"sync"
	"testing"
	"time"
)

// output is a writer that tests can look into while the program runs.
type output struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (o *output) Write(p []byte) (int, error) {
	o.mu.Lock()
	defer o.mu.Unlock()
	return o.b.Write(p)
}

func (o *output) String() string {
	o.mu.Lock()
	defer o.mu.Unlock()
	return o.b.String()
}

var (
	addressLine = regexp.MustCompile(`pages\s+(http://127\.0\.0\.1:\d+)/`)
	tokenLine   = regexp.MustCompile(`token\s+(swt_\S+)`)
)

// runDemo starts the demo, hands its address and token to use, and stops it as
// Ctrl-C would.
func runDemo(t *testing.T, dir string, use func(address, token string)) {
	t.Helper()
	ctx, cancel := context.WithCancel(t.Context())
	var out, errs output
	p := &program{stdin: strings.NewReader(""), stdout: &out, stderr: &errs, getenv: func(string) string { return "" }}
	done := make(chan int, 1)
	go func() { done <- p.main(ctx, []string{"demo", "--data", dir, "--port", "0"}) }()
	deadline := time.Now().Add(2 * time.Minute)
	for !strings.Contains(out.String(), "curl") {
		select {
		case code := <-done:
			t.Fatalf("the demo ended with %d: %s", code, errs.String())
		case <-time.After(50 * time.Millisecond):
		}
		if time.Now().After(deadline) {
			t.Fatalf("the demo is not ready: %s%s", out.String(), errs.String())
		}
	}
	use(addressLine.FindStringSubmatch(out.String())[1], tokenLine.FindStringSubmatch(out.String())[1])
	cancel()
	if code := <-done; code != 0 {
		t.Errorf("the demo ended with %d: %s", code, errs.String())
	}
}

func fetch(t *testing.T, url, token string) string {
	t.Helper()
	r, err := http.NewRequestWithContext(t.Context(), http.MethodGet, url, nil)
	if err != nil {
		t.Fatal(err)
	}
	if token != "" {
		r.Header.Set("Authorization", "Bearer "+token)
	}
	res, err := http.DefaultClient.Do(r)
	if err != nil {
		t.Fatal(err)
	}
	defer res.Body.Close()
	body, err := io.ReadAll(res.Body)
	if err != nil {
		t.Fatal(err)
	}
	return res.Status + "\n" + string(body)
}

// The demo loads its job once, keeps its data and its token between runs, and
// stops cleanly.
func TestDemoStartsStopsAndKeepsItsData(t *testing.T) {
	parent, err := os.MkdirTemp("", "spanwright-demo-test-")
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { os.RemoveAll(parent) })
	if err := os.Chmod(parent, 0o711); err != nil {
		t.Fatal(err)
	}
	dir := filepath.Join(parent, "data")
	var first, second, token string
	runDemo(t, dir, func(address, tok string) {
		token = tok
		first = fetch(t, address+"/v1/projects", tok)
		for path, want := range map[string]string{"/readyz": "200", "/sign-in": "token", "/openapi.json": "3.1", "/docs/": "200"} {
			if got := fetch(t, address+path, ""); !strings.Contains(got, want) {
				t.Errorf("%s: got %.200s", path, got)
			}
		}
	})
	if strings.Count(first, "Brackwater loading quay") != 1 {
		t.Errorf("the demo's projects: %s", first)
	}
	runDemo(t, dir, func(address, tok string) {
		if tok != token {
			t.Error("the second start has another token")
		}
		second = fetch(t, address+"/v1/projects", tok)
	})
	if first != second {
		t.Errorf("the projects changed between two starts:\n%s\n%s", first, second)
	}
}
