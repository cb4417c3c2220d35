-- The tenant and its access. An organisation and its first token are inserted by
-- spanwright_owner (subcommand token, demo): the service cannot make either out of
-- nothing, because it must name an organisation that it is in.
set local role spanwright_owner;
set local search_path = spanwright;

create table organisation (
  id         uuid        primary key,
  name       text        not null check (length(name) between 1 and 200),
  created_at timestamptz not null default now()
);
call isolate('organisation', 'id');
grant select on organisation to spanwright_service, spanwright_reader;

-- A secret is 256 random bits; only its SHA-256 is stored. created_by is null for
-- a token that an administrator's command made.
create table token (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  public_id       text        not null check (length(public_id) between 8 and 64),
  secret_sha256   bytea       not null check (octet_length(secret_sha256) = 32),
  role            text        not null check (role in ('viewer', 'estimator', 'manager', 'administrator')),
  name            text        not null check (length(name) between 1 and 200),
  created_at      timestamptz not null default now(),
  created_by      uuid,
  expires_at      timestamptz,
  revoked_at      timestamptz,
  version         bigint      not null default 1 check (version >= 1),
  primary key (organisation_id, id),
  unique (organisation_id, public_id),
  foreign key (organisation_id, created_by) references token (organisation_id, id)
);
create index token_listing on token (organisation_id, created_at, id);
create index token_created_by on token (organisation_id, created_by);
-- Not unique: a unique key over all organisations would tell that an id exists.
create index token_public_id on token (public_id);
call isolate('token');
grant select, insert on token to spanwright_service;
grant update (name, expires_at, revoked_at, version) on token to spanwright_service;
grant select (organisation_id, id, public_id, role, name, created_at, created_by, expires_at, revoked_at, version)
  on token to spanwright_reader;

create table session (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  token_id        uuid        not null,
  secret_sha256   bytea       not null check (octet_length(secret_sha256) = 32),
  created_at      timestamptz not null default now(),
  expires_at      timestamptz not null,
  primary key (organisation_id, id),
  foreign key (organisation_id, token_id) references token (organisation_id, id)
);
create index session_token on session (organisation_id, token_id);
create index session_expiry on session (organisation_id, expires_at);
create index session_secret on session (secret_sha256);
call isolate('session');
grant select, insert, delete on session to spanwright_service;
grant update (expires_at) on session to spanwright_service;

-- Who asks is not known before one of these has answered, so that they look past
-- row-level security, for exactly one row. The caller compares the secret and
-- checks expiry and revocation.
create function token_by_public_id(wanted text)
returns table (organisation_id uuid, token_id uuid, secret_sha256 bytea, role text, name text,
               expires_at timestamptz, revoked_at timestamptz)
language sql stable strict security definer
set search_path = pg_catalog, pg_temp
as $$
  select t.organisation_id, t.id, t.secret_sha256, t.role, t.name, t.expires_at, t.revoked_at
  from spanwright.token t
  where t.public_id = wanted
$$;

create function session_by_hash(wanted bytea)
returns table (organisation_id uuid, session_id uuid, session_expires_at timestamptz,
               token_id uuid, role text, name text, token_expires_at timestamptz, revoked_at timestamptz)
language sql stable strict security definer
set search_path = pg_catalog, pg_temp
as $$
  select s.organisation_id, s.id, s.expires_at, t.id, t.role, t.name, t.expires_at, t.revoked_at
  from spanwright.session s
  join spanwright.token t on t.organisation_id = s.organisation_id and t.id = s.token_id
  where s.secret_sha256 = wanted
$$;

grant execute on function token_by_public_id(text), session_by_hash(bytea) to spanwright_service;

reset role;
