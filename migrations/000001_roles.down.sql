-- The roles stay: other databases of the cluster may use them.
set local role spanwright_owner;
set local search_path = spanwright;

drop procedure isolate(regclass, name);
revoke select on spanwright_migration.schema_migrations from spanwright_service, spanwright_reader;
revoke usage on schema spanwright_migration from spanwright_service, spanwright_reader;
drop schema spanwright;

alter default privileges for role spanwright_owner grant execute on functions to public;
alter default privileges for role spanwright_owner grant usage on types to public;

reset role;
