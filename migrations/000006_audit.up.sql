-- Idempotency records and the audit trail, both written in the transaction of the
-- effect that they are about.
set local role spanwright_owner;
set local search_path = spanwright;

-- status, resource_id and body are null only inside the transaction that has
-- claimed the key and not yet had its effect. The column fingerprint covers the
-- request that the key stands for.
create table idempotency (
  organisation_id uuid        not null references organisation (id),
  token_id        uuid        not null,
  operation       text        not null check (length(operation) between 1 and 100),
  key             text        not null check (length(key) between 1 and 255),
  fingerprint     bytea       not null check (octet_length(fingerprint) = 32),
  status          integer     check (status between 100 and 599),
  resource_id     uuid,
  body            bytea       check (octet_length(body) <= 67108864),
  created_at      timestamptz not null default now(),
  primary key (organisation_id, token_id, operation, key),
  foreign key (organisation_id, token_id) references token (organisation_id, id)
);
create index idempotency_age on idempotency (organisation_id, created_at);
call isolate('idempotency');
grant select, insert, delete on idempotency to spanwright_service;
grant update (status, resource_id, body) on idempotency to spanwright_service;

-- Append-only by privilege. actor_token_id is null when an administrator's command
-- acted. It has no foreign key on purpose: the trail outlives what it speaks of.
create table audit_event (
  organisation_id uuid        not null references organisation (id),
  id              uuid        not null,
  at              timestamptz not null default now(),
  actor_token_id  uuid,
  actor_name      text        not null check (length(actor_name) between 1 and 200),
  actor_role      text        not null check (length(actor_role) between 1 and 40),
  request_id      text        not null check (length(request_id) <= 200),
  action          text        not null check (length(action) between 1 and 100),
  subject_kind    text        not null check (length(subject_kind) between 1 and 100),
  subject_id      uuid        not null,
  before          jsonb,
  after           jsonb,
  primary key (organisation_id, id)
);
create index audit_event_listing on audit_event (organisation_id, at, id);
create index audit_event_of_subject on audit_event (organisation_id, subject_kind, subject_id, at, id);
call isolate('audit_event');
grant select, insert on audit_event to spanwright_service;
grant select on audit_event to spanwright_reader;

reset role;
