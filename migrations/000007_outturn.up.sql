-- Outturns of finished jobs, and calibrations: what was refitted from them, and what
-- somebody decided about it.
set local role spanwright_owner;
set local search_path = spanwright;

-- The columns beside content are a projection of it, to list by. A withdrawn outturn
-- stays as a row: calibrations rest on it.
create table outturn (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  posting_id      uuid        not null,
  job             text        not null check (length(job) between 1 and 200),
  kind            text        not null check (length(kind) between 1 and 200),
  completed       date        not null,
  content         bytea       not null check (octet_length(content) between 1 and 65536),
  sha256          bytea       not null check (octet_length(sha256) = 32),
  source_name     text        not null check (length(source_name) between 1 and 200),
  source_sha256   bytea       not null check (octet_length(source_sha256) = 32),
  version         bigint      not null default 1 check (version >= 1),
  created_at      timestamptz not null default now(),
  created_by      uuid        not null,
  withdrawn_at    timestamptz,
  primary key (organisation_id, id),
  foreign key (organisation_id, created_by) references token (organisation_id, id)
);
create index outturn_listing on outturn (organisation_id, created_at, id);
create index outturn_of_posting on outturn (organisation_id, posting_id, id);
create index outturn_created_by on outturn (organisation_id, created_by);
create unique index outturn_in_force on outturn (organisation_id, job) where withdrawn_at is null;
call isolate('outturn');
grant select, insert on outturn to spanwright_service;
grant update (version, withdrawn_at) on outturn to spanwright_service;
grant select on outturn to spanwright_reader;

-- Never changed but for the decision, which is taken once. made_number is the version
-- of the rate book that an acceptance has made.
create table calibration (
  organisation_id  uuid        not null references organisation (id),
  id               uuid        not null,
  rate_book_id     uuid        not null,
  rate_book_number integer     not null,
  proposal         bytea       not null check (octet_length(proposal) between 1 and 16777216),
  sha256           bytea       not null check (octet_length(sha256) = 32),
  evidence         bytea       not null check (octet_length(evidence) between 1 and 16777216),
  jobs             integer     not null check (jobs >= 1),
  left_out         integer     not null check (left_out >= 0),
  recommended      boolean     not null,
  statement        text        not null check (length(statement) <= 2000),
  state            text        not null check (state in ('proposed', 'accepted', 'declined')),
  reason           text        not null default '' check (length(reason) <= 2000),
  decision         jsonb       check (jsonb_typeof(decision) = 'object' and octet_length(decision::text) <= 1048576),
  made_number      integer,
  decided_at       timestamptz,
  decided_by       uuid,
  version          bigint      not null default 1 check (version >= 1),
  created_at       timestamptz not null default now(),
  created_by       uuid        not null,
  primary key (organisation_id, id),
  constraint calibration_decided check ((state = 'proposed') = (decided_at is null) and (state = 'proposed') = (decided_by is null)),
  constraint calibration_made check ((state = 'accepted') = (made_number is not null)),
  foreign key (organisation_id, rate_book_id, rate_book_number) references rate_book_version (organisation_id, rate_book_id, number),
  foreign key (organisation_id, rate_book_id, made_number) references rate_book_version (organisation_id, rate_book_id, number),
  foreign key (organisation_id, created_by) references token (organisation_id, id),
  foreign key (organisation_id, decided_by) references token (organisation_id, id)
);
create index calibration_listing on calibration (organisation_id, created_at, id);
create index calibration_rate_book on calibration (organisation_id, rate_book_id, rate_book_number);
create index calibration_made_number on calibration (organisation_id, rate_book_id, made_number);
create index calibration_created_by on calibration (organisation_id, created_by);
create index calibration_decided_by on calibration (organisation_id, decided_by);
call isolate('calibration');
grant select, insert on calibration to spanwright_service;
grant update (state, reason, decision, made_number, decided_at, decided_by, version) on calibration to spanwright_service;
grant select on calibration to spanwright_reader;

reset role;
