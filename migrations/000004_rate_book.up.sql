-- Rate books with their versions, and multipliers.
set local role spanwright_owner;
set local search_path = spanwright;

create table rate_book (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  name            text        not null check (length(name) between 1 and 200),
  version         bigint      not null default 1 check (version >= 1),
  current_number  integer     not null check (current_number >= 1),
  created_at      timestamptz not null default now(),
  updated_at      timestamptz not null default now(),
  primary key (organisation_id, id),
  unique (organisation_id, name)
);
create index rate_book_listing on rate_book (organisation_id, created_at, id);
call isolate('rate_book');
grant select, insert on rate_book to spanwright_service;
grant update (name, version, current_number, updated_at) on rate_book to spanwright_service;
grant select on rate_book to spanwright_reader;

-- created_by is null for the starting books that come with an organisation.
create table rate_book_version (
  organisation_id uuid        not null references organisation (id),
  rate_book_id    uuid        not null,
  number          integer     not null check (number >= 1),
  content         bytea       not null check (octet_length(content) between 1 and 16777216),
  sha256          bytea       not null check (octet_length(sha256) = 32),
  created_at      timestamptz not null default now(),
  created_by      uuid,
  primary key (organisation_id, rate_book_id, number),
  foreign key (organisation_id, rate_book_id) references rate_book (organisation_id, id),
  foreign key (organisation_id, created_by) references token (organisation_id, id)
);
create index rate_book_version_created_by on rate_book_version (organisation_id, created_by);
call isolate('rate_book_version');
grant select, insert on rate_book_version to spanwright_service;
grant select on rate_book_version to spanwright_reader;

-- What it is for: a project, or one scheme of it. A deleted one stays as a row, out
-- of force.
create table multiplier (
  organisation_id   uuid        not null references organisation (id),
  id                uuid        not null,
  project_id        uuid        not null,
  scheme_id         uuid,
  scope             text        not null check (scope in ('member', 'group', 'family', 'scheme', 'project', 'rate book')),
  subject           text        not null check (length(subject) <= 200),
  name              text        not null check (length(name) between 1 and 200),
  categories        text[]      not null check (categories <@ array['material', 'fabrication', 'coating', 'inspection',
                                  'shipping', 'erection', 'foundations', 'engineering', 'indirects', 'margin', 'owner']
                                  and cardinality(categories) <= 11),
  spread            jsonb       not null check (jsonb_typeof(spread) = 'object' and octet_length(spread::text) <= 8192),
  correlation_group text        not null default '' check (length(correlation_group) <= 80),
  reason            text        not null check (length(reason) <= 2000),
  author            text        not null check (length(author) between 1 and 200),
  version           bigint      not null default 1 check (version >= 1),
  created_at        timestamptz not null default now(),
  updated_at        timestamptz not null default now(),
  deleted_at        timestamptz,
  primary key (organisation_id, id),
  foreign key (organisation_id, project_id) references project (organisation_id, id),
  foreign key (organisation_id, project_id, scheme_id) references scheme (organisation_id, project_id, id),
  check (scope <> 'scheme' or scheme_id is not null)
);
create index multiplier_listing on multiplier (organisation_id, created_at, id);
create index multiplier_listing_of_project on multiplier (organisation_id, project_id, created_at, id);
create index multiplier_scheme on multiplier (organisation_id, project_id, scheme_id);
create unique index multiplier_in_force on multiplier (organisation_id, project_id, scheme_id, name, scope, subject)
  nulls not distinct where deleted_at is null;
call isolate('multiplier');
grant select, insert on multiplier to spanwright_service;
grant update (scope, subject, name, categories, spread, correlation_group, reason, author, version, updated_at, deleted_at)
  on multiplier to spanwright_service;
grant select on multiplier to spanwright_reader;

reset role;
