-- Roles, the schema, and who may do what in it by default.
--
-- Roles belong to the cluster, not to the database: several databases of one
-- cluster may be migrated at once, hence the two exceptions. They are made
-- without a password; where sockets are not trusted, the administrator sets one
-- (alter role … password …). Where the migrating login may not create roles, the
-- administrator creates the three beforehand and makes the login a member of
-- spanwright_owner.
do $$
begin
  begin
    if not exists (select from pg_roles where rolname = 'spanwright_owner') then
      -- Policies are forced on the owner's own tables too; without bypassrls
      -- neither a data migration nor the search for a token could see a row.
      create role spanwright_owner login bypassrls;
    end if;
  exception when duplicate_object or unique_violation then null;
  end;
  begin
    if not exists (select from pg_roles where rolname = 'spanwright_service') then
      create role spanwright_service login;
    end if;
  exception when duplicate_object or unique_violation then null;
  end;
  begin
    if not exists (select from pg_roles where rolname = 'spanwright_reader') then
      create role spanwright_reader login;
    end if;
  exception when duplicate_object or unique_violation then null;
  end;
  if not exists (select from pg_roles where rolname = 'spanwright_owner' and rolbypassrls) then
    raise exception 'role spanwright_owner must bypass row-level security'
      using hint = 'alter role spanwright_owner bypassrls';
  end if;
  if exists (select from pg_roles where rolname in ('spanwright_service', 'spanwright_reader')
             and (rolsuper or rolbypassrls)) then
    raise exception 'roles spanwright_service and spanwright_reader must not bypass row-level security'
      using hint = 'alter role … nosuperuser nobypassrls';
  end if;
end
$$;

create schema spanwright authorization spanwright_owner;

-- The version table is made before the first migration, by whoever migrates.
alter schema spanwright_migration owner to spanwright_owner;
alter table spanwright_migration.schema_migrations owner to spanwright_owner;

set local role spanwright_owner;
set local search_path = spanwright;

alter default privileges for role spanwright_owner revoke all on tables from public;
alter default privileges for role spanwright_owner revoke all on sequences from public;
alter default privileges for role spanwright_owner revoke all on functions from public;
alter default privileges for role spanwright_owner revoke all on types from public;
alter default privileges for role spanwright_owner revoke all on schemas from public;

grant usage on schema spanwright to spanwright_service, spanwright_reader;
grant usage on schema spanwright_migration to spanwright_service, spanwright_reader;
grant select on spanwright_migration.schema_migrations to spanwright_service, spanwright_reader;

-- Called once for every table: rows are seen and written only by the organisation
-- that the transaction has set. Without the setting the comparison is with null
-- and nothing is seen; the text '' is what a finished transaction leaves of it.
create procedure isolate(tenant_table regclass, organisation_column name default 'organisation_id')
language plpgsql set search_path = pg_catalog, pg_temp
as $$
declare
  condition text := format($c$%I = nullif(current_setting('app.organisation', true), '')::uuid$c$, organisation_column);
begin
  execute format('alter table %s enable row level security', tenant_table);
  execute format('alter table %s force row level security', tenant_table);
  execute format('create policy organisation_isolation on %s to spanwright_service, spanwright_reader using (%s) with check (%s)',
    tenant_table, condition, condition);
end
$$;

reset role;
