-- Projects, their schemes, and the schedules posted to a scheme.
set local role spanwright_owner;
set local search_path = spanwright;

create table project (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  name            text        not null check (length(name) between 1 and 200),
  currency        char(3)     not null check (currency ~ '^[A-Z]{3}$'),
  base_date       date,
  display_units   text        not null check (length(display_units) between 1 and 40),
  version         bigint      not null default 1 check (version >= 1),
  created_at      timestamptz not null default now(),
  updated_at      timestamptz not null default now(),
  primary key (organisation_id, id),
  unique (organisation_id, name)
);
create index project_listing on project (organisation_id, created_at, id);
call isolate('project');
grant select, insert on project to spanwright_service;
grant update (name, currency, base_date, display_units, version, updated_at) on project to spanwright_service;
grant select on project to spanwright_reader;

create table scheme (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  project_id      uuid        not null,
  name            text        not null check (length(name) between 1 and 200),
  version         bigint      not null default 1 check (version >= 1),
  created_at      timestamptz not null default now(),
  updated_at      timestamptz not null default now(),
  primary key (organisation_id, id),
  unique (organisation_id, project_id, name),
  unique (organisation_id, project_id, id),
  foreign key (organisation_id, project_id) references project (organisation_id, id)
);
create index scheme_listing on scheme (organisation_id, created_at, id);
create index scheme_listing_of_project on scheme (organisation_id, project_id, created_at, id);
call isolate('scheme');
grant select, insert on scheme to spanwright_service;
grant update (name, version, updated_at) on scheme to spanwright_service;
grant select on scheme to spanwright_reader;

-- Each accepted posting, as it was posted; never changed.
create table schedule_revision (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  scheme_id       uuid        not null,
  number          integer     not null check (number >= 1),
  source_name     text        not null check (length(source_name) between 1 and 255),
  source_sha256   bytea       not null check (octet_length(source_sha256) = 32),
  source          bytea       not null check (octet_length(source) between 1 and 67108864),
  job_defaults    bytea       check (octet_length(job_defaults) <= 1048576),
  definition      bytea       check (octet_length(definition) <= 1048576),
  risks           bytea       check (octet_length(risks) <= 1048576),
  members         integer     not null check (members >= 0),
  created_at      timestamptz not null default now(),
  created_by      uuid        not null,
  primary key (organisation_id, id),
  unique (organisation_id, scheme_id, number),
  unique (organisation_id, scheme_id, id),
  foreign key (organisation_id, scheme_id) references scheme (organisation_id, id),
  foreign key (organisation_id, created_by) references token (organisation_id, id)
);
create index schedule_revision_listing on schedule_revision (organisation_id, created_at, id);
create index schedule_revision_created_by on schedule_revision (organisation_id, created_by);
call isolate('schedule_revision');
grant select, insert on schedule_revision to spanwright_service;
grant select on schedule_revision to spanwright_reader;

reset role;
