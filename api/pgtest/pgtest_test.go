package pgtest_test

import (
	"os"
	"os/exec"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/jackc/pgx/v5/pgxpool"

	"spanwright/api/localpg"
	"spanwright/api/pgtest"
	"spanwright/migrations"
)

// envBare makes the test binary run without [pgtest.Main].
const envBare = "SPANWRIGHT_PGTEST_BARE"

func TestMain(m *testing.M) {
	if os.Getenv(envBare) != "" {
		os.Exit(m.Run())
	}
	pgtest.Main(m)
}

func TestEachTestHasItsOwnDatabase(t *testing.T) {
	first, second := pgtest.New(t), pgtest.New(t)
	const insert = "insert into organisation (id, name) values ('00000000-0000-7000-8000-000000000001', 'Brackwater')"
	if _, err := first.Owner.Exec(t.Context(), insert); err != nil {
		t.Fatal(err)
	}
	for _, test := range []struct {
		db   *pgtest.Database
		want int
	}{{first, 1}, {second, 0}} {
		var rows, version int
		if err := test.db.Owner.QueryRow(t.Context(), "select (select count(*) from organisation), (select version from spanwright_migration.schema_migrations)").Scan(&rows, &version); err != nil {
			t.Fatal(err)
		}
		if rows != test.want || version != migrations.Latest {
			t.Errorf("%s: %d rows, version %d, want %d, %d", test.db.Name, rows, version, test.want, migrations.Latest)
		}
	}
}

func TestPoolsConnectAsTheirRoles(t *testing.T) {
	db := pgtest.New(t)
	got := map[string]string{}
	for name, pool := range map[string]*pgxpool.Pool{"admin": db.Admin, "owner": db.Owner, "service": db.Service, "reader": db.Reader} {
		var role string
		if err := pool.QueryRow(t.Context(), "select session_user").Scan(&role); err != nil {
			t.Fatal(err)
		}
		got[name] = role
	}
	want := map[string]string{"admin": localpg.Superuser, "owner": "spanwright_owner", "service": "spanwright_service", "reader": "spanwright_reader"}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Errorf("roles (-want +got):\n%s", diff)
	}
}

// again runs one test of this binary in a process of its own and wants it to fail.
func again(t *testing.T, test string, env ...string) string {
	t.Helper()
	cmd := exec.Command(os.Args[0], "-test.run=^"+test+"$")
	cmd.Env = append(os.Environ(), env...)
	out, err := cmd.CombinedOutput()
	if err == nil {
		t.Errorf("%s passed with %q, want a failure", test, env)
	}
	return string(out)
}

func TestMissingBinariesFailAndDoNotSkip(t *testing.T) {
	out := again(t, "TestEachTestHasItsOwnDatabase", localpg.EnvBinDir+"=/nonexistent")
	for _, want := range []string{"--- FAIL", "postgres and initdb of PostgreSQL 15 or newer"} {
		if !strings.Contains(out, want) {
			t.Errorf("output %q, want %q in it", out, want)
		}
	}
}

func TestWithoutMain(t *testing.T) {
	if out := again(t, "TestEachTestHasItsOwnDatabase", envBare+"=1"); !strings.Contains(out, "pgtest.Main(m)") {
		t.Errorf("output %q, want the advice to call pgtest.Main", out)
	}
}

func BenchmarkNew(b *testing.B) {
	for b.Loop() {
		pgtest.New(b)
	}
}
