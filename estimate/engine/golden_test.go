package engine_test

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"flag"
	"os"
	"strconv"
	"testing"

	"spanwright/estimate/document"
	"spanwright/estimate/engine"
)

var updateGolden = flag.Bool("update", false, "write the golden digests of this engine version")

const corpusSize = 50

// digests are those of the stages of one job.
type digests struct {
	Sizing, Takeoff, Pricing, Range, Document string
}

func digest(tb testing.TB, v any) string {
	tb.Helper()
	data, err := json.Marshal(v)
	if err != nil {
		tb.Fatal(err)
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:8])
}

func digestsOf(tb testing.TB, d document.Document) digests {
	tb.Helper()
	_, sum, err := d.Canonical()
	if err != nil {
		tb.Fatal(err)
	}
	return digests{
		Sizing: digest(tb, d.Members), Takeoff: digest(tb, d.Items),
		Pricing: digest(tb, []any{d.Lines, d.Categories[0].Amount}), Range: digest(tb, d.Range), Document: sum[:16],
	}
}

// The digests of 50 jobs over families, supports, books and spreads are kept for
// each engine version. A digest that changes needs a new version and an entry in
// changes.json that says for which stage.
func TestGoldenDigests(t *testing.T) {
	const file = "testdata/golden.json"
	got := map[string]digests{}
	for i := range corpusSize {
		got[strconv.Itoa(i)] = digestsOf(t, run(t, corpusJob(t, i)))
	}
	all := map[string]map[string]digests{}
	version := strconv.Itoa(document.EngineVersion)
	if data, err := os.ReadFile(file); err == nil {
		if err := json.Unmarshal(data, &all); err != nil {
			t.Fatal(err)
		}
	}
	if *updateGolden {
		all[version] = got
		data, err := json.MarshalIndent(all, "", " ")
		if err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(file, append(data, '\n'), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, ok := all[version]
	if !ok {
		t.Fatalf("no golden digests for engine version %s: run go test ./estimate/engine -run Golden -update", version)
	}
	for i, g := range got {
		if g != want[i] {
			t.Errorf("job %s: the digests are %+v, those of engine version %s are %+v; a changed result needs a new EngineVersion and an entry in changes.json", i, g, version, want[i])
		}
	}
}

func TestEveryEngineVersionHasAChangeEntry(t *testing.T) {
	changes, err := engine.Changes()
	if err != nil {
		t.Fatal(err)
	}
	seen := map[int]bool{}
	for _, c := range changes {
		seen[c.Version] = true
		if c.Stage == "" || c.New == "" || c.Affected == "" {
			t.Errorf("change of version %d: stage, new and affected are obligatory: %+v", c.Version, c)
		}
	}
	for v := 1; v <= document.EngineVersion; v++ {
		if !seen[v] {
			t.Errorf("engine version %d has no entry in changes.json", v)
		}
	}
	if len(seen) != document.EngineVersion {
		t.Errorf("changes.json names %d versions, the engine is at %d", len(seen), document.EngineVersion)
	}
}

// The same job gives the same bytes, also from its stored form.
func TestRunAgainGivesTheSameBytes(t *testing.T) {
	j := corpusJob(t, 4)
	first, _, err := run(t, j).Canonical()
	if err != nil {
		t.Fatal(err)
	}
	stored, _, err := j.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	again := reread(t, stored)
	second, _, err := run(t, again).Canonical()
	if err != nil {
		t.Fatal(err)
	}
	if string(first) != string(second) {
		t.Error("the document of the stored job differs from that of the job")
	}
	parsed, err := document.Parse(first)
	if err != nil {
		t.Fatal(err)
	}
	third, _, err := parsed.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	if string(first) != string(third) {
		t.Error("a document read and written again differs")
	}
}
