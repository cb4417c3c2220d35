package migrations_test

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
	"github.com/jackc/pgx/v5/pgxpool"

	"spanwright/api/pgtest"
)

// seed gives two organisations a row in every table, as the owner. $1 is the
// organisation; every other id is made from it, so that a tenant's rows are
// found again.
func seed(t *testing.T, db *pgtest.Database) [2]uuid.UUID {
	t.Helper()
	const hash = `sha256('x')`
	statements := []string{
		`insert into organisation (id, name) values ($1, 'Brackwater salt works')`,
		`insert into token (organisation_id, id, public_id, secret_sha256, role, name) values ($1, $1, 'public-' || $1, ` + hash + `, 'manager', 'quay')`,
		`update token set created_by = id where organisation_id = $1`,
		`insert into session (organisation_id, id, token_id, secret_sha256, expires_at) values ($1, $1, $1, sha256($1::text::bytea), now())`,
		`insert into project (organisation_id, id, name, currency, base_date, display_units) values ($1, $1, 'loading quay', 'EUR', '2026-01-01', 'metric')`,
		`insert into scheme (organisation_id, id, project_id, name) values ($1, $1, $1, 'inner support')`,
		`insert into schedule_revision (organisation_id, id, scheme_id, number, source_name, source_sha256, source, members, created_by)
			values ($1, $1, $1, 1, 'quay.csv', ` + hash + `, 'x', 1, $1)`,
		`insert into rate_book (organisation_id, id, name, current_number) values ($1, $1, 'ratio', 1)`,
		`insert into rate_book_version (organisation_id, rate_book_id, number, content, sha256, created_by) values ($1, $1, 1, 'x', ` + hash + `, $1)`,
		`insert into multiplier (organisation_id, id, project_id, scheme_id, scope, subject, name, categories, spread, reason, author)
			values ($1, $1, $1, $1, 'scheme', '', 'tide', '{erection}', '{"likely": 1.2}', 'tidal work', 'estimator')`,
		`insert into estimate (organisation_id, id, scheme_id, schedule_revision_id, rate_book_id, rate_book_number, job, job_sha256,
			document, document_sha256, engine_version, currency, base, p10, p50, p80, p90, mean, contingency, confidence,
			net_t, delivered_t, purchased_t, unsafe_findings, members, created_by)
			values ($1, $1, $1, $1, $1, 1, 'x', ` + hash + `, 'x', ` + hash + `, 1, 'EUR', 100, 90, 105, 120, 130, 108, 20, 0.8, 1, 1, 1, 0, 1, $1)`,
		`insert into idempotency (organisation_id, token_id, operation, key, fingerprint, status, resource_id) values ($1, $1, 'create', 'k', ` + hash + `, 201, $1)`,
		`insert into outturn (organisation_id, id, posting_id, job, kind, completed, content, sha256, source_name, source_sha256, created_by)
			values ($1, $1, $1, 'pan house footbridge', 'trestles', '2025-09-30', 'x', ` + hash + `, 'outturns.csv', ` + hash + `, $1)`,
		`insert into calibration (organisation_id, id, rate_book_id, rate_book_number, proposal, sha256, evidence, jobs, left_out, recommended, statement,
			state, decision, made_number, decided_at, decided_by, created_by)
			values ($1, $1, $1, 1, 'x', ` + hash + `, 'x', 20, 0, true, 'better', 'accepted', '{}', 1, now(), $1, $1)`,
		`insert into audit_event (organisation_id, id, actor_token_id, actor_name, actor_role, request_id, action, subject_kind, subject_id)
			values ($1, $1, $1, 'quay', 'manager', 'r', 'create', 'project', $1)`,
	}
	var ids [2]uuid.UUID
	for i := range ids {
		ids[i] = uuid.Must(uuid.NewV7())
		for _, sql := range statements {
			sql = strings.ReplaceAll(sql, "$1", "'"+ids[i].String()+"'") // a parameter would have one type only
			if _, err := db.Owner.Exec(t.Context(), sql); err != nil {
				t.Fatalf("%s: %v", sql, err)
			}
		}
	}
	return ids
}

// reason is how the database refused: its code, or what else went wrong.
func reason(err error) string {
	var pgErr *pgconn.PgError
	switch {
	case err == nil:
		return "accepted"
	case errors.As(err, &pgErr) && strings.Contains(pgErr.Message, "row-level security policy"):
		return "row-level security"
	case errors.As(err, &pgErr):
		return pgErr.Code
	}
	return err.Error()
}

func constraint(err error) string {
	var pgErr *pgconn.PgError
	if errors.As(err, &pgErr) {
		return pgErr.ConstraintName
	}
	return ""
}

const (
	accepted     = "accepted"
	bySecurity   = "row-level security"
	noPrivilege  = "42501" // insufficient_privilege
	noForeignKey = "23503" // foreign_key_violation
)

// tables lists the tables of the schema from the catalogue, so that a new one
// cannot be forgotten.
func tables(t *testing.T, db *pgtest.Database) []string {
	t.Helper()
	return texts(t, db, `select relname from pg_class where relnamespace = 'spanwright'::regnamespace and relkind in ('r', 'p', 'f', 'v', 'm') order by relname`)
}

// attempt runs a statement under the setting of an organisation (uuid.Nil: none)
// and takes it back.
func attempt(t *testing.T, pool *pgxpool.Pool, organisation uuid.UUID, sql string, args ...any) error {
	t.Helper()
	return under(t, pool, organisation, func(tx pgx.Tx) error {
		_, err := tx.Exec(t.Context(), sql, args...)
		return err
	})
}

// count counts rows under the setting of an organisation. A role that may not
// read the table counts as seeing nothing, and says so.
func count(t *testing.T, pool *pgxpool.Pool, organisation uuid.UUID, sql string, args ...any) (n int, refused bool) {
	t.Helper()
	err := under(t, pool, organisation, func(tx pgx.Tx) error { return tx.QueryRow(t.Context(), sql, args...).Scan(&n) })
	if reason(err) == noPrivilege {
		return 0, true
	}
	if err != nil {
		t.Fatalf("%s: %v", sql, err)
	}
	return n, false
}

func under(t *testing.T, pool *pgxpool.Pool, organisation uuid.UUID, fn func(pgx.Tx) error) error {
	t.Helper()
	tx, err := pool.Begin(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	defer tx.Rollback(context.Background())
	if organisation != uuid.Nil {
		if _, err := tx.Exec(t.Context(), "select set_config('app.organisation', $1, true)", organisation.String()); err != nil {
			t.Fatal(err)
		}
	}
	return fn(tx)
}

// checkIsolation looks for any way between two organisations that seed has made,
// in every table, and returns what it found.
func checkIsolation(t *testing.T, db *pgtest.Database, org [2]uuid.UUID) []string {
	t.Helper()
	var findings []string
	for _, table := range tables(t, db) {
		for _, finding := range slices.Concat(
			checkCatalogue(t, db, table), checkReading(t, db, table, org), checkWriting(t, db, table, org), checkReferences(t, db, table, org)) {
			findings = append(findings, table+": "+finding)
		}
	}
	return findings
}

func checkCatalogue(t *testing.T, db *pgtest.Database, table string) []string {
	t.Helper()
	return texts(t, db, `
select 'not a plain table' from pg_class where oid = $1::regclass and relkind <> 'r'
union all select 'row-level security is off' from pg_class where oid = $1::regclass and not relrowsecurity
union all select 'row-level security is not forced on the owner' from pg_class where oid = $1::regclass and not relforcerowsecurity
union all select 'no policy for role ' || r.rolname from pg_roles r where r.rolname in ('spanwright_service', 'spanwright_reader')
  and not exists (select from pg_policy p where p.polrelid = $1::regclass and r.oid = any (p.polroles)
    and p.polcmd = '*' and p.polqual is not null and p.polwithcheck is not null)
union all select 'more than one policy: they are joined by or' from pg_policy where polrelid = $1::regclass having count(*) > 1`, "spanwright."+table)
}

func organisationColumn(table string) string {
	if table == "organisation" {
		return "id"
	}
	return "organisation_id"
}

func checkReading(t *testing.T, db *pgtest.Database, table string, org [2]uuid.UUID) []string {
	t.Helper()
	var findings []string
	all, column := "select count(*) from "+table, organisationColumn(table)
	theirs := all + " where " + column + " = $1"
	for role, pool := range map[string]*pgxpool.Pool{"service": db.Service, "reader": db.Reader} {
		own, refused := count(t, pool, org[1], all)
		if refused && role == "service" {
			findings = append(findings, "the service may not read it")
		}
		if !refused && own != 1 {
			findings = append(findings, fmt.Sprintf("%s sees %d rows under its organisation, want its own one (does seed fill the table?)", role, own))
		}
		for _, look := range []struct {
			name string
			as   uuid.UUID
			sql  string
			args []any
		}{
			{"without the setting", uuid.Nil, all, nil},
			{"without the setting, by organisation", uuid.Nil, theirs, []any{org[0]}},
			{"under another organisation", org[1], theirs, []any{org[0]}},
			{"under an organisation that does not exist", uuid.New(), all, nil},
		} {
			if n, _ := count(t, pool, look.as, look.sql, look.args...); n != 0 {
				findings = append(findings, fmt.Sprintf("%s sees %d rows %s", role, n, look.name))
			}
		}
		if id := idColumn(t, db, table); id != "" {
			if n, _ := count(t, pool, org[1], all+" where "+id+" = $1", org[0]); n != 0 {
				findings = append(findings, role+" sees a row by its guessed id")
			}
		}
	}
	return findings
}

// idColumn is the column of the primary key after the organisation; seed gives it
// the organisation's id as its value.
func idColumn(t *testing.T, db *pgtest.Database, table string) string {
	t.Helper()
	columns := texts(t, db, `select attname from pg_constraint c join pg_attribute a on a.attrelid = c.conrelid and a.attnum = any (c.conkey)
		where c.conrelid = $1::regclass and c.contype = 'p' and atttypid = 'uuid'::regtype and attname <> 'organisation_id'`, "spanwright."+table)
	if len(columns) == 0 {
		return ""
	}
	return columns[0]
}

// row is the row of an organisation as the owner sees it, by column.
func row(t *testing.T, db *pgtest.Database, table string, organisation uuid.UUID) map[string]any {
	t.Helper()
	var text []byte
	err := db.Owner.QueryRow(t.Context(), "select to_jsonb(t) from "+table+" t where "+organisationColumn(table)+" = $1", organisation).Scan(&text)
	if errors.Is(err, pgx.ErrNoRows) {
		return nil
	}
	if err != nil {
		t.Fatal(err)
	}
	var values map[string]any
	if err := json.Unmarshal(text, &values); err != nil {
		t.Fatal(err)
	}
	return values
}

func insert(t *testing.T, db *pgtest.Database, as uuid.UUID, table string, values map[string]any) error {
	t.Helper()
	text, err := json.Marshal(values)
	if err != nil {
		t.Fatal(err)
	}
	return attempt(t, db.Service, as, "insert into "+table+" select * from jsonb_populate_record(null::"+table+", $1)", text)
}

func checkWriting(t *testing.T, db *pgtest.Database, table string, org [2]uuid.UUID) []string {
	t.Helper()
	theirs := row(t, db, table, org[0])
	if theirs == nil {
		return []string{"seed does not fill it"}
	}
	want := bySecurity
	if table == "organisation" {
		want = noPrivilege // only the owner makes organisations
	}
	var findings []string
	for name, as := range map[string]uuid.UUID{"under another organisation": org[1], "without the setting": uuid.Nil} {
		if got := reason(insert(t, db, as, table, theirs)); got != want {
			findings = append(findings, fmt.Sprintf("insert of a foreign row %s: %s, want %s", name, got, want))
		}
	}
	column := organisationColumn(table)
	for _, sql := range []string{
		"delete from " + table + " where " + column + " = $1",
		"update " + table + " set " + column + " = $2 where " + column + " = $1",
	} {
		tag := int64(0)
		err := under(t, db.Service, org[1], func(tx pgx.Tx) error {
			args := []any{org[0], org[1]}[:strings.Count(sql, "$")]
			done, err := tx.Exec(t.Context(), sql, args...)
			tag = done.RowsAffected()
			return err
		})
		if got := reason(err); tag != 0 || (err != nil && got != noPrivilege) {
			findings = append(findings, fmt.Sprintf("%q touched %d rows: %s", sql, tag, got))
		}
	}
	return findings
}

// checkReferences takes an own row, lets each foreign key in turn point to the
// other organisation's row, and wants the insert refused by that key; and, so
// that the refusal means something, an own reference accepted.
func checkReferences(t *testing.T, db *pgtest.Database, table string, org [2]uuid.UUID) []string {
	t.Helper()
	keys := texts(t, db, `
select string_agg(a.attname, ',' order by a.attname) from pg_constraint c
join pg_attribute a on a.attrelid = c.conrelid and a.attnum = any (c.conkey)
where c.conrelid = $1::regclass and c.contype = 'f' and c.confrelid <> 'spanwright.organisation'::regclass
  and a.attname <> 'organisation_id' group by c.oid order by 1`, "spanwright."+table)
	own, theirs := row(t, db, table, org[1]), row(t, db, table, org[0])
	if own == nil || theirs == nil || len(keys) == 0 {
		return nil
	}
	fresh := func() map[string]any { // escapes the unique keys of the row that exists
		values := map[string]any{}
		for column, value := range own {
			values[column] = value
		}
		for column, value := range map[string]any{"id": uuid.NewString(), "public_id": uuid.NewString(), "name": uuid.NewString(), "key": uuid.NewString(), "job": uuid.NewString(), "number": 2} {
			if _, has := values[column]; has {
				values[column] = value
			}
		}
		return values
	}
	var findings []string
	if got := reason(insert(t, db, org[1], table, fresh())); got != accepted {
		findings = append(findings, "insert of an own row: "+got)
	}
	for _, key := range keys {
		values := fresh()
		for _, column := range strings.Split(key, ",") {
			if theirs[column] == nil {
				findings = append(findings, "seed leaves "+column+" empty")
			}
			values[column] = theirs[column]
		}
		if got := reason(insert(t, db, org[1], table, values)); got != noForeignKey {
			findings = append(findings, fmt.Sprintf("insert with the other organisation's %s: %s, want %s", key, got, noForeignKey))
		}
	}
	return findings
}

func TestOrganisationsAreIsolated(t *testing.T) {
	db := pgtest.New(t)
	org := seed(t, db)
	if names := tables(t, db); len(names) < 12 {
		t.Fatalf("tables %v: too few were enumerated", names)
	}
	for _, finding := range checkIsolation(t, db, org) {
		t.Error(finding)
	}
}

// The check must see each kind of damage, else it proves nothing.
func TestIsolationCheckFindsDamage(t *testing.T) {
	tests := []struct{ name, sql, want string }{
		{"policy dropped", "drop policy organisation_isolation on scheme", "scheme: no policy for role spanwright_service"},
		{"disabled", "alter table estimate disable row level security", "estimate: service sees 2 rows without the setting"},
		{"not forced", "alter table token no force row level security", "token: row-level security is not forced"},
		{"everybody reads", "alter policy organisation_isolation on audit_event using (true)", "audit_event: reader sees 1 rows under another organisation"},
		{"everybody writes", "alter policy organisation_isolation on project with check (true)", "project: insert of a foreign row without the setting: 23505"},
		{"second policy", "create policy support on multiplier using (reason <> '')", "multiplier: more than one policy"},
		{"reader left out", "alter policy organisation_isolation on scheme to spanwright_service", "scheme: no policy for role spanwright_reader"},
		{"key without organisation", `alter table scheme drop constraint scheme_organisation_id_project_id_fkey;
			create unique index on project (id); alter table scheme add foreign key (project_id) references project (id)`,
			"scheme: insert with the other organisation's project_id: accepted"},
		{"forgotten table", "create table forgotten (organisation_id uuid, id uuid); grant select on forgotten to spanwright_service", "forgotten: row-level security is off"},
		{"view", "create view leak as select * from estimate; grant select on leak to spanwright_service", "leak: service sees 2 rows without the setting"},
	}
	for _, test := range tests {
		t.Run(test.name, func(t *testing.T) {
			db := pgtest.New(t)
			org := seed(t, db)
			if _, err := db.Owner.Exec(t.Context(), test.sql); err != nil {
				t.Fatal(err)
			}
			findings := checkIsolation(t, db, org)
			if !slices.ContainsFunc(findings, func(f string) bool { return strings.Contains(f, test.want) }) {
				t.Errorf("findings %q, want one with %q", findings, test.want)
			}
		})
	}
}
