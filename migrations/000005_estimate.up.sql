-- Estimates: the frozen job, the document, and figures to list and compare by,
-- which are a projection of the document. Never changed, only superseded.
set local role spanwright_owner;
set local search_path = spanwright;

-- Money in the currency's major unit, masses in t, confidence as a probability.
-- contingency may be negative.
create table estimate (
  organisation_id      uuid        not null references organisation (id),
  id                   uuid        not null,
  scheme_id            uuid        not null,
  schedule_revision_id uuid        not null,
  rate_book_id         uuid        not null,
  rate_book_number     integer     not null,
  job                  bytea       not null check (octet_length(job) between 1 and 268435456),
  job_sha256           bytea       not null check (octet_length(job_sha256) = 32),
  document             bytea       not null check (octet_length(document) between 1 and 268435456),
  document_sha256      bytea       not null check (octet_length(document_sha256) = 32),
  engine_version       integer     not null check (engine_version >= 1),
  currency             char(3)     not null check (currency ~ '^[A-Z]{3}$'),
  base                 numeric     not null check (base not in ('NaN', 'Infinity', '-Infinity')),
  p10                  numeric     not null check (p10 not in ('NaN', 'Infinity', '-Infinity')),
  p50                  numeric     not null check (p50 not in ('NaN', 'Infinity', '-Infinity')),
  p80                  numeric     not null check (p80 not in ('NaN', 'Infinity', '-Infinity')),
  p90                  numeric     not null check (p90 not in ('NaN', 'Infinity', '-Infinity')),
  mean                 numeric     not null check (mean not in ('NaN', 'Infinity', '-Infinity')),
  contingency          numeric     not null check (contingency not in ('NaN', 'Infinity', '-Infinity')),
  confidence           numeric     not null check (confidence > 0 and confidence < 1),
  net_t                numeric     not null check (net_t >= 0 and net_t < 'Infinity'),
  delivered_t          numeric     not null check (delivered_t >= 0 and delivered_t < 'Infinity'),
  purchased_t          numeric     not null check (purchased_t >= 0 and purchased_t < 'Infinity'),
  unsafe_findings      integer     not null check (unsafe_findings >= 0),
  members              integer     not null check (members >= 0),
  created_at           timestamptz not null default now(),
  created_by           uuid        not null,
  primary key (organisation_id, id),
  check (p10 <= p50 and p50 <= p80 and p80 <= p90),
  foreign key (organisation_id, scheme_id) references scheme (organisation_id, id),
  foreign key (organisation_id, scheme_id, schedule_revision_id) references schedule_revision (organisation_id, scheme_id, id),
  foreign key (organisation_id, rate_book_id, rate_book_number) references rate_book_version (organisation_id, rate_book_id, number),
  foreign key (organisation_id, created_by) references token (organisation_id, id)
);
create index estimate_listing on estimate (organisation_id, created_at, id);
create index estimate_listing_of_scheme on estimate (organisation_id, scheme_id, created_at, id);
create index estimate_schedule_revision on estimate (organisation_id, scheme_id, schedule_revision_id);
create index estimate_rate_book on estimate (organisation_id, rate_book_id, rate_book_number);
create index estimate_created_by on estimate (organisation_id, created_by);
call isolate('estimate');
grant select, insert on estimate to spanwright_service;
grant select on estimate to spanwright_reader;

reset role;
