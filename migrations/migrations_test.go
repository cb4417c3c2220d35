package migrations_test

import (
	"io/fs"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"spanwright/api/pgtest"
	"spanwright/migrations"
)

func TestMain(m *testing.M) { pgtest.Main(m) }

var fileName = regexp.MustCompile(`^(\d{6})_[a-z_]+\.(up|down)\.sql$`)

func TestFilesAreCompleteAndLatestIsTheLast(t *testing.T) {
	names, err := fs.Glob(migrations.FS, "*")
	if err != nil {
		t.Fatal(err)
	}
	seen := map[int]map[string]int{}
	highest := 0
	for _, name := range names {
		m := fileName.FindStringSubmatch(name)
		if m == nil {
			t.Errorf("file %q, want NNNNNN_name.up.sql or NNNNNN_name.down.sql", name)
			continue
		}
		number, err := strconv.Atoi(m[1])
		if err != nil {
			t.Fatal(err)
		}
		if seen[number] == nil {
			seen[number] = map[string]int{}
		}
		seen[number][m[2]]++
		highest = max(highest, number)
	}
	if highest != migrations.Latest {
		t.Errorf("Latest = %d, the last file has number %d", migrations.Latest, highest)
	}
	for number := 1; number <= highest; number++ {
		if seen[number]["up"] != 1 || seen[number]["down"] != 1 {
			t.Errorf("migration %d has %d up and %d down files, want one of each", number, seen[number]["up"], seen[number]["down"])
		}
	}
}

// Objects must belong to the owner and names must not depend on the login's path.
func TestFilesSetRoleAndPath(t *testing.T) {
	names, err := fs.Glob(migrations.FS, "*.sql")
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range names {
		text, err := fs.ReadFile(migrations.FS, name)
		if err != nil {
			t.Fatal(err)
		}
		for _, want := range []string{"set local role spanwright_owner;", "set local search_path = spanwright;", "reset role;"} {
			if !strings.Contains(string(text), want) {
				t.Errorf("%s lacks %q", name, want)
			}
		}
		if strings.Contains(string(text), "commit;") {
			t.Errorf("%s ends its transaction itself", name)
		}
	}
}
