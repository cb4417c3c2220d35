package migrations_test

import (
	"flag"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/jackc/pgx/v5"

	"spanwright/api/pgtest"
	"spanwright/api/store"
	"spanwright/migrations"
)

var update = flag.Bool("update", false, "write testdata/schema.sql anew")

// dump is the schema as pg_dump prints it, without what differs between its
// minor versions: comments, settings, the random key of \restrict.
func dump(t *testing.T, db *pgtest.Database) string {
	t.Helper()
	cmd := exec.Command(filepath.Join(pgtest.BinDir(t), "pg_dump"), "--schema-only", "--dbname="+db.AdminURL)
	var stderr strings.Builder
	cmd.Stderr = &stderr
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("pg_dump: %v: %s", err, stderr.String())
	}
	var b strings.Builder
	for line := range strings.Lines(string(out)) {
		switch {
		case strings.HasPrefix(line, "--"), strings.HasPrefix(line, "SET "), strings.HasPrefix(line, `\`),
			strings.HasPrefix(line, "SELECT pg_catalog.set_config"), strings.TrimSpace(line) == "":
		default:
			b.WriteString(line)
		}
	}
	return b.String()
}

func TestSchemaIsTheCommittedOne(t *testing.T) {
	const golden = "testdata/schema.sql"
	got := dump(t, pgtest.New(t))
	if *update {
		if err := os.WriteFile(golden, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(golden)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(string(want), got); diff != "" {
		t.Errorf("schema differs from %s (PostgreSQL 15); go test ./migrations -run Committed -update writes it anew (-want +got):\n%s", golden, diff)
	}
}

// Each migration is undone and done again; the schema must come out the same.
func TestDownAndUpAgain(t *testing.T) {
	db := pgtest.New(t)
	want := dump(t, db)
	for version := migrations.Latest; version > 0; version-- {
		to := uint(version - 1)
		if err := store.Down(t.Context(), db.AdminURL, to); err != nil {
			t.Fatal(err)
		}
		if got, _, err := store.Version(t.Context(), db.Admin); got != to || err != nil {
			t.Fatalf("version = %d, %v, want %d", got, err, to)
		}
		if to == 0 {
			nothingIsLeft(t, db)
		}
		if err := store.Migrate(t.Context(), db.AdminURL); err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(want, dump(t, db)); diff != "" {
			t.Errorf("schema after down to %d and up again (-before +after):\n%s", to, diff)
		}
	}
}

// nothingIsLeft checks that only the version table, empty, remains.
func nothingIsLeft(t *testing.T, db *pgtest.Database) {
	t.Helper()
	const query = `
select 'schema ' || nspname from pg_namespace where nspname = 'spanwright'
union all select 'relation ' || oid::regclass from pg_class
  where relkind in ('r', 'p', 'v', 'm', 'S', 'f') and relnamespace::regnamespace::text !~ '^(pg_|information_schema|spanwright_migration)'
union all select 'function ' || oid::regprocedure from pg_proc where pronamespace::regnamespace::text !~ '^(pg_|information_schema)'
union all select 'default privilege ' || defaclobjtype::text from pg_default_acl
union all select 'version ' || version from spanwright_migration.schema_migrations
union all select 'grant ' || grantee from information_schema.table_privileges where table_schema = 'spanwright_migration' and grantee <> 'spanwright_owner'`
	for _, left := range texts(t, db, query) {
		t.Errorf("after all migrations were undone: %s", left)
	}
}

// texts runs a query of one text column as the administrator.
func texts(t *testing.T, db *pgtest.Database, query string, args ...any) []string {
	t.Helper()
	rows, err := db.Admin.Query(t.Context(), query, args...)
	if err != nil {
		t.Fatal(err)
	}
	got, err := pgx.CollectRows(rows, pgx.RowTo[string])
	if err != nil {
		t.Fatal(err)
	}
	return got
}

// DESIGN: foreign keys bypass row-level security and unique keys tell that a row
// exists, so that every key begins with the organisation.
func TestEveryKeyBeginsWithTheOrganisation(t *testing.T) {
	db := pgtest.New(t)
	const query = `
select c.conrelid::regclass || ' ' || c.conname from pg_constraint c
where c.connamespace = 'spanwright'::regnamespace and c.contype in ('p', 'u', 'f', 'x')
  and c.conrelid <> 'spanwright.organisation'::regclass
  and (select attname from pg_attribute where attrelid = c.conrelid and attnum = c.conkey[1]) <> 'organisation_id'
union all
select i.indexrelid::regclass::text from pg_index i join pg_class t on t.oid = i.indrelid
where t.relnamespace = 'spanwright'::regnamespace and i.indisunique and t.relname <> 'organisation'
  and coalesce((select attname from pg_attribute where attrelid = t.oid and attnum = i.indkey[0]), '') <> 'organisation_id'
union all
select 'no foreign key to organisation: ' || t.oid::regclass from pg_class t
where t.relnamespace = 'spanwright'::regnamespace and t.relkind in ('r', 'p') and t.relname <> 'organisation'
  and not exists (select from pg_constraint c where c.conrelid = t.oid and c.confrelid = 'spanwright.organisation'::regclass)
order by 1`
	for _, got := range texts(t, db, query) {
		t.Errorf("%s", got)
	}
	if _, err := db.Owner.Exec(t.Context(), `
		create table sloppy (organisation_id uuid references organisation, id uuid primary key, name text);
		create unique index sloppy_name on sloppy (lower(name))`); err != nil {
		t.Fatal(err)
	}
	want := []string{"sloppy sloppy_pkey", "sloppy_name", "sloppy_pkey"}
	if diff := cmp.Diff(want, texts(t, db, query)); diff != "" {
		t.Errorf("findings on a sloppy table (-want +got):\n%s", diff)
	}
}

// Without an index on its columns a foreign key makes each change of the table
// that it points to a scan.
func TestEveryForeignKeyHasAnIndex(t *testing.T) {
	db := pgtest.New(t)
	const query = `
select c.conrelid::regclass || ' ' || c.conname from pg_constraint c
where c.connamespace = 'spanwright'::regnamespace and c.contype = 'f'
  and not exists (select from pg_index i where i.indrelid = c.conrelid
    and (i.indkey::int2[])[0:cardinality(c.conkey) - 1] @> c.conkey)`
	for _, got := range texts(t, db, query) {
		t.Errorf("foreign key without index: %s", got)
	}
}

func TestChecks(t *testing.T) {
	db := pgtest.New(t)
	org := seed(t, db)[0]
	tests := []struct{ name, sql, want string }{
		{"currency in small letters", "update project set currency = 'eur'", "project_currency_check"},
		{"empty name", "update project set name = ''", "project_name_check"},
		{"long name", "update project set name = repeat('x', 201)", "project_name_check"},
		{"unknown role", "update token set role = 'root'", "token_role_check"},
		{"short hash", `update token set secret_sha256 = '\x00'`, "token_secret_sha256_check"},
		{"unknown category", "update multiplier set categories = '{tax}'", "multiplier_categories_check"},
		{"unknown scope", "update multiplier set scope = 'world'", "multiplier_scope_check"},
		{"scheme scope without scheme", "update multiplier set scope = 'scheme', scheme_id = null", "multiplier_check"},
		{"spread that is no object", "update multiplier set spread = '3'", "multiplier_spread_check"},
		{"not a number", "update estimate set base = 'NaN'", "estimate_base_check"},
		{"mass not a number", "update estimate set net_t = 'NaN'", "estimate_net_t_check"},
		{"confidence not a number", "update estimate set confidence = 'NaN'", "estimate_confidence_check"},
		{"percentiles out of order", "update estimate set p50 = p80 + 1", "estimate_check"},
		{"revision of another scheme", "update estimate set scheme_id = gen_random_uuid()", "estimate_organisation_id_scheme_id_fkey"},
		{"outturn without a job", "update outturn set job = ''", "outturn_job_check"},
		{"decided by nobody", "update calibration set decided_by = null", "calibration_decided"},
		{"accepted without a version", "update calibration set made_number = null", "calibration_made"},
		{"unknown state", "update calibration set state = 'perhaps', made_number = null", "calibration_state_check"},
		{"status", "update idempotency set status = 42", "idempotency_status_check"},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			_, err := db.Owner.Exec(t.Context(), test.sql+" where organisation_id = $1", org)
			if got := constraint(err); got != test.want {
				t.Errorf("constraint %q (%v), want %q", got, err, test.want)
			}
		})
	}
}
