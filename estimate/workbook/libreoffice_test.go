package workbook

import (
	"archive/zip"
	"bytes"
	"context"
	"encoding/csv"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"
)

// parts returns the parts of an archive whose name begins with one of the
// prefixes.
func parts(t *testing.T, data []byte, prefixes ...string) map[string][]byte {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	out := map[string][]byte{}
	for _, f := range z.File {
		for _, p := range prefixes {
			if !strings.HasPrefix(f.Name, p) {
				continue
			}
			r, err := f.Open()
			if err != nil {
				t.Fatal(err)
			}
			if out[f.Name], err = io.ReadAll(r); err != nil {
				t.Fatal(err)
			}
		}
	}
	return out
}

var textPattern = regexp.MustCompile(`<t[^>]*>([^<]+)</t>`)

// textsOf returns the texts of cells in a part of a workbook.
func textsOf(xml []byte) []string {
	var out []string
	for _, m := range textPattern.FindAllSubmatch(xml, -1) {
		out = append(out, string(m[1]))
	}
	return out
}

var formulaPattern = regexp.MustCompile(`(<f>[^<]*</f>)<v>[^<]*</v>`)

// withoutCachedValues takes the cached value from every formula, so that a
// program that opens the workbook must calculate. It returns how many there were.
func withoutCachedValues(t *testing.T, data []byte) ([]byte, int) {
	t.Helper()
	count := 0
	all := parts(t, data, "")
	for name, part := range all {
		if strings.HasPrefix(name, "xl/worksheets/sheet") {
			count += len(formulaPattern.FindAll(part, -1))
			all[name] = formulaPattern.ReplaceAll(part, []byte("$1"))
		}
	}
	return archive(t, all), count
}

// archive zips the parts of a workbook.
func archive(t *testing.T, all map[string][]byte) []byte {
	t.Helper()
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for name, part := range all {
		f, err := w.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := f.Write(part); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// recalculate lets LibreOffice calculate workbooks without their cached values
// and returns, by name and sheet, their records. One start of LibreOffice takes
// them all. It fails where soffice is missing.
func recalculate(t *testing.T, books map[string][]byte) map[string]map[string][][]string {
	t.Helper()
	soffice, err := exec.LookPath("soffice")
	if err != nil {
		t.Fatalf("this test needs LibreOffice (libreoffice-calc-nogui): %v", err)
	}
	dir := t.TempDir()
	// 44 comma, 34 quote, 76 UTF-8; values as they are, not as shown; -1: every sheet.
	args := []string{"--headless", "-env:UserInstallation=file://" + filepath.Join(dir, "profile"),
		"--convert-to", "csv:Text - txt - csv (StarCalc):44,34,76,1,,0,false,false,false,false,false,-1", "--outdir", dir}
	for name, data := range books {
		bare, formulas := withoutCachedValues(t, data)
		if formulas == 0 {
			t.Fatalf("%s: the workbook has no formula with a cached value", name)
		}
		file := filepath.Join(dir, name+".xlsx")
		if err := os.WriteFile(file, bare, 0o600); err != nil {
			t.Fatal(err)
		}
		args = append(args, file)
	}
	ctx, cancel := context.WithTimeout(context.Background(), 5*time.Minute)
	defer cancel()
	if answer, err := exec.CommandContext(ctx, soffice, args...).CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, answer)
	}
	out := map[string]map[string][][]string{}
	for name := range books {
		out[name] = map[string][][]string{}
		found, err := filepath.Glob(filepath.Join(dir, name+"-*.csv"))
		if err != nil || len(found) == 0 {
			t.Fatalf("%s: LibreOffice wrote no sheet, %v", name, err)
		}
		for _, file := range found {
			s := strings.TrimSuffix(strings.TrimPrefix(filepath.Base(file), name+"-"), ".csv")
			out[name][s] = records(t, file)
		}
	}
	return out
}

func records(t *testing.T, file string) [][]string {
	t.Helper()
	text, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(bytes.NewReader(text))
	r.FieldsPerRecord = -1
	out, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return out
}
