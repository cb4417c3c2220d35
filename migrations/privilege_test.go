package migrations_test

import (
	"bytes"
	"crypto/sha256"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/uuid"

	"spanwright/api/pgtest"
)

// privileges lists what a role may do with each table: whole-table privileges,
// then the columns that it may update or alone select.
const privileges = `
select relname || ': ' || concat_ws(' ',
    (select string_agg(p, ' ' order by p) from unnest(array['SELECT', 'INSERT', 'UPDATE', 'DELETE', 'TRUNCATE', 'REFERENCES', 'TRIGGER']) p
      where has_table_privilege($1, c.oid, p)),
    'UPDATE(' || (select string_agg(attname, ',' order by attnum) from pg_attribute a where a.attrelid = c.oid and attnum > 0 and not attisdropped
      and has_column_privilege($1, c.oid, attnum, 'UPDATE')) || ')',
    'SELECT(' || (select string_agg(attname, ',' order by attnum) from pg_attribute a where a.attrelid = c.oid and attnum > 0 and not attisdropped
      and has_column_privilege($1, c.oid, attnum, 'SELECT') and not has_table_privilege($1, c.oid, 'SELECT')) || ')')
from pg_class c where relnamespace = 'spanwright'::regnamespace and relkind in ('r', 'p', 'v', 'm', 'f') order by relname`

func TestPrivileges(t *testing.T) {
	db := pgtest.New(t)
	tests := map[string][]string{
		"spanwright_service": {
			"audit_event: INSERT SELECT",
			"calibration: INSERT SELECT UPDATE(state,reason,decision,made_number,decided_at,decided_by,version)",
			"estimate: INSERT SELECT",
			"idempotency: DELETE INSERT SELECT UPDATE(status,resource_id,body)",
			"multiplier: INSERT SELECT UPDATE(scope,subject,name,categories,spread,correlation_group,reason,author,version,updated_at,deleted_at)",
			"organisation: SELECT",
			"outturn: INSERT SELECT UPDATE(version,withdrawn_at)",
			"project: INSERT SELECT UPDATE(name,currency,base_date,display_units,version,updated_at)",
			"rate_book: INSERT SELECT UPDATE(name,version,current_number,updated_at)",
			"rate_book_version: INSERT SELECT",
			"schedule_revision: INSERT SELECT",
			"scheme: INSERT SELECT UPDATE(name,version,updated_at)",
			"session: DELETE INSERT SELECT UPDATE(expires_at)",
			"token: INSERT SELECT UPDATE(name,expires_at,revoked_at,version)",
		},
		"spanwright_reader": {
			"audit_event: SELECT", "calibration: SELECT", "estimate: SELECT", "idempotency: ", "multiplier: SELECT", "organisation: SELECT", "outturn: SELECT",
			"project: SELECT", "rate_book: SELECT", "rate_book_version: SELECT", "schedule_revision: SELECT", "scheme: SELECT", "session: ",
			"token: SELECT(organisation_id,id,public_id,role,name,created_at,created_by,expires_at,revoked_at,version)",
		},
	}
	for role, want := range tests {
		if diff := cmp.Diff(want, texts(t, db, privileges, role)); diff != "" {
			t.Errorf("%s (-want +got):\n%s", role, diff)
		}
	}
}

func TestImmutableTablesRefuseChanges(t *testing.T) {
	db := pgtest.New(t)
	org := seed(t, db)
	for _, table := range []string{"estimate", "schedule_revision", "rate_book_version", "audit_event"} {
		for _, sql := range []string{
			"update " + table + " set organisation_id = organisation_id",
			"delete from " + table, "truncate " + table,
			"alter table " + table + " disable row level security", "drop table " + table + " cascade",
		} {
			if got := reason(attempt(t, db.Service, org[0], sql)); got != noPrivilege {
				t.Errorf("%q as the service: %s, want %s", sql, got, noPrivilege)
			}
		}
		if n, _ := count(t, db.Service, org[0], "select count(*) from "+table); n != 1 {
			t.Errorf("%s has %d rows, want 1", table, n)
		}
	}
}

func TestSecretsAreKeptFromTheReader(t *testing.T) {
	db := pgtest.New(t)
	org := seed(t, db)
	for _, sql := range []string{
		"select secret_sha256 from token", "select * from token", "select count(*) from session", "select count(*) from idempotency",
		"select * from spanwright.token_by_public_id('x')", "select * from spanwright.session_by_hash('x')",
	} {
		if got := reason(attempt(t, db.Reader, org[0], sql)); got != noPrivilege {
			t.Errorf("%q as the reader: %s, want %s", sql, got, noPrivilege)
		}
	}
}

func TestRolesAndOwners(t *testing.T) {
	db := pgtest.New(t)
	const query = `
select 'role ' || rolname || ' is too strong' from pg_roles where rolname in ('spanwright_service', 'spanwright_reader')
  and (rolsuper or rolbypassrls or rolcreaterole or rolcreatedb or rolreplication)
union all select 'role ' || r.rolname || ' is a member of ' || m.roleid::regrole from pg_auth_members m join pg_roles r on r.oid = m.member
  where r.rolname in ('spanwright_service', 'spanwright_reader')
union all select 'the owner lacks or exceeds its attributes' from pg_roles where rolname = 'spanwright_owner'
  and (rolsuper or not rolbypassrls or rolcreaterole or rolcreatedb)
union all select 'relation ' || oid::regclass || ' belongs to ' || relowner::regrole from pg_class
  where relnamespace::regnamespace::text like 'spanwright%' and relowner <> 'spanwright_owner'::regrole
union all select 'function ' || oid::regprocedure || ' belongs to ' || proowner::regrole from pg_proc
  where pronamespace::regnamespace::text like 'spanwright%' and proowner <> 'spanwright_owner'::regrole
union all select 'schema ' || nspname || ' belongs to ' || nspowner::regrole from pg_namespace
  where nspname like 'spanwright%' and nspowner <> 'spanwright_owner'::regrole
union all select 'public may use schema ' || nspname from pg_namespace where nspname like 'spanwright%' and has_schema_privilege('public', oid, 'usage')
union all select r || ' may create in schema ' || nspname from pg_namespace, unnest(array['spanwright_service', 'spanwright_reader']) r
  where nspname like 'spanwright%' and has_schema_privilege(r, oid, 'create')
union all select 'function ' || oid::regprocedure || ' has no fixed search path' from pg_proc
  where pronamespace = 'spanwright'::regnamespace and not coalesce('search_path=pg_catalog, pg_temp' = any (proconfig), false)
union all select 'public may execute ' || oid::regprocedure from pg_proc
  where pronamespace = 'spanwright'::regnamespace and has_function_privilege('public', oid, 'execute')
union all select 'service may execute ' || oid::regprocedure from pg_proc
  where pronamespace = 'spanwright'::regnamespace and has_function_privilege('spanwright_service', oid, 'execute')
  and proname not in ('token_by_public_id', 'session_by_hash')`
	for _, finding := range texts(t, db, query) {
		t.Error(finding)
	}
	// What a later migration makes must be closed to public without saying so.
	if _, err := db.Owner.Exec(t.Context(), "create function later() returns int language sql set search_path = pg_catalog, pg_temp as 'select 1'"); err != nil {
		t.Fatal(err)
	}
	if got := texts(t, db, query); len(got) != 0 {
		t.Errorf("after a new function: %q", got)
	}
	if _, err := db.Owner.Exec(t.Context(), "grant execute on function later() to public"); err != nil {
		t.Fatal(err)
	}
	want := []string{"public may execute later()", "service may execute later()"}
	if diff := cmp.Diff(want, texts(t, db, query)); diff != "" {
		t.Errorf("after a careless grant (-want +got):\n%s", diff)
	}
}

func TestTokenAndSessionAreFoundBeforeTheOrganisationIsKnown(t *testing.T) {
	db := pgtest.New(t)
	org := seed(t, db)
	hash := sha256.Sum256([]byte("x"))
	type found struct {
		Organisation, Token uuid.UUID
		Role, Name          string
	}
	want := found{org[1], org[1], "manager", "quay"}

	var got found
	var secret []byte
	var expires, revoked *time.Time
	err := db.Service.QueryRow(t.Context(), "select * from token_by_public_id($1)", "public-"+org[1].String()).
		Scan(&got.Organisation, &got.Token, &secret, &got.Role, &got.Name, &expires, &revoked)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(want, got); diff != "" || !bytes.Equal(secret, hash[:]) || expires != nil || revoked != nil {
		t.Errorf("token: %s secret %x, expires %v, revoked %v", diff, secret, expires, revoked)
	}

	if _, err := db.Owner.Exec(t.Context(), "update token set revoked_at = now(), expires_at = now() where organisation_id = $1", org[1]); err != nil {
		t.Fatal(err)
	}
	got = found{}
	var session uuid.UUID
	var sessionExpires time.Time
	sum := sha256.Sum256([]byte(org[1].String()))
	err = db.Service.QueryRow(t.Context(), "select * from session_by_hash($1)", sum[:]).
		Scan(&got.Organisation, &session, &sessionExpires, &got.Token, &got.Role, &got.Name, &expires, &revoked)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(want, got); diff != "" || session != org[1] || expires == nil || revoked == nil {
		t.Errorf("session: %s id %v, token expires %v, revoked %v, want both", diff, session, expires, revoked)
	}

	for _, sql := range []string{
		"select count(*) from token_by_public_id('public-unknown')", "select count(*) from token_by_public_id(null)",
		"select count(*) from session_by_hash('unknown')", "select count(*) from session_by_hash(null)",
	} {
		if n, _ := count(t, db.Service, uuid.Nil, sql); n != 0 {
			t.Errorf("%q = %d, want 0", sql, n)
		}
	}
}
