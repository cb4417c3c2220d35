package main

import (
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// mayImport is the map of DEVELOPERS.md: what each package may import of the
// project. A name that ends in "/" stands for every package below it.
var mayImport = map[string][]string{
	"structural/unit":        {},
	"structural/spelling":    {},
	"structural/material":    {"structural/unit", "structural/spelling"},
	"structural/section":     {"structural/unit", "structural/spelling"},
	"structural/action":      {"structural/unit"},
	"structural/beam":        {"structural/unit"},
	"structural/resistance":  {"structural/section", "structural/material"},
	"structural/arrangement": {"structural/beam", "structural/action", "structural/resistance", "structural/section", "structural/material", "structural/sizing"},
	"structural/sizing":      {"structural/beam", "structural/action", "structural/resistance", "structural/section", "structural/material"},

	"estimate/money":      {},
	"estimate/spread":     {},
	"estimate/assumption": {"estimate/spread"},
	"estimate/sheet":      {"structural/unit"},
	"estimate/schedule":   {"estimate/sheet", "estimate/assumption", "estimate/money", "estimate/spread", "structural/"},
	"estimate/cutting":    {},
	"estimate/takeoff":    {"estimate/schedule", "estimate/assumption", "estimate/spread", "estimate/money", "estimate/ratebook", "estimate/cutting", "structural/section"},
	"estimate/ratebook":   {"estimate/money", "estimate/spread", "estimate/assumption"},
	"estimate/pricing":    {"estimate/takeoff", "estimate/ratebook", "estimate/money", "estimate/spread", "estimate/assumption"},
	"estimate/ranges":     {"estimate/pricing", "estimate/spread"},
	"estimate/job":        {"estimate/money", "estimate/spread", "estimate/assumption", "estimate/schedule", "estimate/ratebook"},
	"estimate/document":   {"estimate/money", "estimate/spread", "estimate/assumption"},
	"estimate/engine": {"structural/", "estimate/money", "estimate/spread", "estimate/assumption", "estimate/schedule", "estimate/takeoff",
		"estimate/ratebook", "estimate/pricing", "estimate/ranges", "estimate/cutting", "estimate/job", "estimate/document"},
	"estimate/comparison":  {"structural/", "estimate/job", "estimate/document", "estimate/money", "estimate/ranges", "estimate/schedule", "estimate/ratebook", "estimate/assumption", "estimate/spread"},
	"estimate/bridge":      {"estimate/job", "estimate/document", "estimate/money", "estimate/spread", "estimate/schedule", "estimate/ratebook"},
	"estimate/calibration": {"estimate/money", "estimate/spread", "estimate/sheet", "structural/unit", "structural/spelling"},
	"estimate/trace":       {"estimate/document", "estimate/assumption", "estimate/spread", "estimate/money", "structural/spelling"},
	"estimate/calculator":  {"structural/", "estimate/document", "estimate/cutting", "estimate/ranges", "estimate/pricing", "estimate/spread"},
	"estimate/chart":       {"estimate/document", "estimate/money", "estimate/spread", "estimate/assumption"},
	"estimate/workbook":    {"estimate/document", "estimate/sheet", "estimate/chart", "estimate/money", "estimate/spread", "estimate/assumption"},

	"api/auth":      {},
	"api/service":   {"api/auth", "estimate/"},
	"api/store":     {"api/service", "api/auth", "estimate/money", "estimate/ratebook", "estimate/spread", "estimate/document", "migrations"},
	"api/localpg":   {},
	"api/pgtest":    {"api/localpg", "api/store", "migrations"},
	"api/dashboard": {"api/service", "api/auth", "estimate/document", "estimate/chart", "estimate/workbook", "estimate/money", "estimate/spread", "estimate/assumption"},
	"api": {"api/service", "api/auth", "estimate/document", "estimate/sheet", "estimate/workbook", "estimate/money", "estimate/spread",
		"estimate/assumption", "estimate/ratebook", "estimate/job", "estimate/schedule", "estimate/calculator", "estimate/trace", "estimate/comparison", "estimate/bridge", "estimate/calibration"},

	"migrations":     {},
	"testdata":       {},
	"cmd/spanwright": {"api/", "api", "estimate/", "structural/", "migrations", "testdata"},
}

// pure packages compute from what they are handed: no files, network, chance or
// clock.
var impure = []string{"os", "net", "net/http", "math/rand", "math/rand/v2", "crypto/rand", "os/exec", "syscall"}

func isPure(pkg string) bool {
	return strings.HasPrefix(pkg, "structural/") || (strings.HasPrefix(pkg, "estimate/") && pkg != "estimate/sheet" && pkg != "estimate/workbook")
}

// imports returns the imports of every package of the tree, tests apart, and
// where time.Now is called.
func imports(t *testing.T) (map[string][]string, map[string][]string) {
	t.Helper()
	root := filepath.Join("..", "..")
	found, clocks := map[string][]string{}, map[string][]string{}
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() && path != root && strings.HasPrefix(d.Name(), ".") {
			return filepath.SkipDir
		}
		if d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return nil
		}
		rel, err := filepath.Rel(root, filepath.Dir(path))
		if err != nil {
			return err
		}
		pkg := filepath.ToSlash(rel)
		src, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		f, err := parser.ParseFile(token.NewFileSet(), path, src, parser.ImportsOnly)
		if err != nil {
			return err
		}
		if _, ok := found[pkg]; !ok {
			found[pkg] = nil // also a package that imports nothing
		}
		for _, i := range f.Imports {
			name, err := strconv.Unquote(i.Path.Value)
			if err != nil {
				return err
			}
			found[pkg] = append(found[pkg], name)
		}
		if strings.Contains(string(src), "time.Now()") {
			clocks[pkg] = append(clocks[pkg], path)
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	return found, clocks
}

func TestImportsFollowTheMap(t *testing.T) {
	found, _ := imports(t)
	for pkg, list := range found {
		allowed, known := mayImport[pkg]
		if !known {
			t.Errorf("package %s is not on the map: add it here and in DEVELOPERS.md", pkg)
			continue
		}
		for _, name := range list {
			own, ok := strings.CutPrefix(name, "spanwright/")
			if !ok {
				continue
			}
			fits := func(a string) bool { return own == a || (strings.HasSuffix(a, "/") && strings.HasPrefix(own, a)) }
			if !slices.ContainsFunc(allowed, fits) {
				t.Errorf("%s imports %s, which the map does not allow", pkg, own)
			}
			if own == "api/pgtest" {
				t.Errorf("%s imports test support", pkg)
			}
		}
		if slices.Contains(list, "github.com/xuri/excelize/v2") && pkg != "estimate/sheet" {
			t.Errorf("%s imports excelize; only estimate/sheet may", pkg)
		}
	}
	for pkg := range mayImport {
		if _, ok := found[pkg]; !ok {
			t.Errorf("the map names %s, which is not there", pkg)
		}
	}
}

func TestPurePackagesHaveNoOutsideWorld(t *testing.T) {
	found, clocks := imports(t)
	for pkg, list := range found {
		if !isPure(pkg) {
			continue
		}
		for _, name := range list {
			if slices.Contains(impure, name) {
				t.Errorf("%s imports %s; pure packages are handed what they need", pkg, name)
			}
		}
		for _, path := range clocks[pkg] {
			t.Errorf("%s reads the clock", path)
		}
	}
}

// The layout has no other top-level entries and is two levels deep at the most.
func TestLayout(t *testing.T) {
	entries, err := os.ReadDir(filepath.Join("..", ".."))
	if err != nil {
		t.Fatal(err)
	}
	known := []string{"README.md", "DEVELOPERS.md", "LICENSE", "CHANGELOG.md", "go.mod", "go.sum", "cmd", "structural", "estimate", "api", "migrations", "deploy", "testdata"}
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") && !slices.Contains(known, e.Name()) {
			t.Errorf("top-level entry %s is outside the layout", e.Name())
		}
	}
	found, _ := imports(t)
	for pkg := range found {
		if strings.Count(pkg, "/") > 1 {
			t.Errorf("package %s lies deeper than two levels", pkg)
		}
	}
}
