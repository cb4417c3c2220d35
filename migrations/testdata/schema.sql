CREATE SCHEMA spanwright;
ALTER SCHEMA spanwright OWNER TO spanwright_owner;
CREATE SCHEMA spanwright_migration;
ALTER SCHEMA spanwright_migration OWNER TO spanwright_owner;
CREATE PROCEDURE spanwright.isolate(IN tenant_table regclass, IN organisation_column name DEFAULT 'organisation_id'::name)
    LANGUAGE plpgsql
    SET search_path TO 'pg_catalog', 'pg_temp'
    AS $_$
declare
  condition text := format($c$%I = nullif(current_setting('app.organisation', true), '')::uuid$c$, organisation_column);
begin
  execute format('alter table %s enable row level security', tenant_table);
  execute format('alter table %s force row level security', tenant_table);
  execute format('create policy organisation_isolation on %s to spanwright_service, spanwright_reader using (%s) with check (%s)',
    tenant_table, condition, condition);
end
$_$;
ALTER PROCEDURE spanwright.isolate(IN tenant_table regclass, IN organisation_column name) OWNER TO spanwright_owner;
CREATE FUNCTION spanwright.session_by_hash(wanted bytea) RETURNS TABLE(organisation_id uuid, session_id uuid, session_expires_at timestamp with time zone, token_id uuid, role text, name text, token_expires_at timestamp with time zone, revoked_at timestamp with time zone)
    LANGUAGE sql STABLE STRICT SECURITY DEFINER
    SET search_path TO 'pg_catalog', 'pg_temp'
    AS $$
  select s.organisation_id, s.id, s.expires_at, t.id, t.role, t.name, t.expires_at, t.revoked_at
  from spanwright.session s
  join spanwright.token t on t.organisation_id = s.organisation_id and t.id = s.token_id
  where s.secret_sha256 = wanted
$$;
ALTER FUNCTION spanwright.session_by_hash(wanted bytea) OWNER TO spanwright_owner;
CREATE FUNCTION spanwright.token_by_public_id(wanted text) RETURNS TABLE(organisation_id uuid, token_id uuid, secret_sha256 bytea, role text, name text, expires_at timestamp with time zone, revoked_at timestamp with time zone)
    LANGUAGE sql STABLE STRICT SECURITY DEFINER
    SET search_path TO 'pg_catalog', 'pg_temp'
    AS $$
  select t.organisation_id, t.id, t.secret_sha256, t.role, t.name, t.expires_at, t.revoked_at
  from spanwright.token t
  where t.public_id = wanted
$$;
ALTER FUNCTION spanwright.token_by_public_id(wanted text) OWNER TO spanwright_owner;
CREATE TABLE spanwright.audit_event (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    at timestamp with time zone DEFAULT now() NOT NULL,
    actor_token_id uuid,
    actor_name text NOT NULL,
    actor_role text NOT NULL,
    request_id text NOT NULL,
    action text NOT NULL,
    subject_kind text NOT NULL,
    subject_id uuid NOT NULL,
    before jsonb,
    after jsonb,
    CONSTRAINT audit_event_action_check CHECK (((length(action) >= 1) AND (length(action) <= 100))),
    CONSTRAINT audit_event_actor_name_check CHECK (((length(actor_name) >= 1) AND (length(actor_name) <= 200))),
    CONSTRAINT audit_event_actor_role_check CHECK (((length(actor_role) >= 1) AND (length(actor_role) <= 40))),
    CONSTRAINT audit_event_request_id_check CHECK ((length(request_id) <= 200)),
    CONSTRAINT audit_event_subject_kind_check CHECK (((length(subject_kind) >= 1) AND (length(subject_kind) <= 100)))
);
ALTER TABLE ONLY spanwright.audit_event FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.audit_event OWNER TO spanwright_owner;
CREATE TABLE spanwright.calibration (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    rate_book_id uuid NOT NULL,
    rate_book_number integer NOT NULL,
    proposal bytea NOT NULL,
    sha256 bytea NOT NULL,
    evidence bytea NOT NULL,
    jobs integer NOT NULL,
    left_out integer NOT NULL,
    recommended boolean NOT NULL,
    statement text NOT NULL,
    state text NOT NULL,
    reason text DEFAULT ''::text NOT NULL,
    decision jsonb,
    made_number integer,
    decided_at timestamp with time zone,
    decided_by uuid,
    version bigint DEFAULT 1 NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    created_by uuid NOT NULL,
    CONSTRAINT calibration_decided CHECK ((((state = 'proposed'::text) = (decided_at IS NULL)) AND ((state = 'proposed'::text) = (decided_by IS NULL)))),
    CONSTRAINT calibration_decision_check CHECK (((jsonb_typeof(decision) = 'object'::text) AND (octet_length((decision)::text) <= 1048576))),
    CONSTRAINT calibration_evidence_check CHECK (((octet_length(evidence) >= 1) AND (octet_length(evidence) <= 16777216))),
    CONSTRAINT calibration_jobs_check CHECK ((jobs >= 1)),
    CONSTRAINT calibration_left_out_check CHECK ((left_out >= 0)),
    CONSTRAINT calibration_made CHECK (((state = 'accepted'::text) = (made_number IS NOT NULL))),
    CONSTRAINT calibration_proposal_check CHECK (((octet_length(proposal) >= 1) AND (octet_length(proposal) <= 16777216))),
    CONSTRAINT calibration_reason_check CHECK ((length(reason) <= 2000)),
    CONSTRAINT calibration_sha256_check CHECK ((octet_length(sha256) = 32)),
    CONSTRAINT calibration_state_check CHECK ((state = ANY (ARRAY['proposed'::text, 'accepted'::text, 'declined'::text]))),
    CONSTRAINT calibration_statement_check CHECK ((length(statement) <= 2000)),
    CONSTRAINT calibration_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.calibration FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.calibration OWNER TO spanwright_owner;
CREATE TABLE spanwright.estimate (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    scheme_id uuid NOT NULL,
    schedule_revision_id uuid NOT NULL,
    rate_book_id uuid NOT NULL,
    rate_book_number integer NOT NULL,
    job bytea NOT NULL,
    job_sha256 bytea NOT NULL,
    document bytea NOT NULL,
    document_sha256 bytea NOT NULL,
    engine_version integer NOT NULL,
    currency character(3) NOT NULL,
    base numeric NOT NULL,
    p10 numeric NOT NULL,
    p50 numeric NOT NULL,
    p80 numeric NOT NULL,
    p90 numeric NOT NULL,
    mean numeric NOT NULL,
    contingency numeric NOT NULL,
    confidence numeric NOT NULL,
    net_t numeric NOT NULL,
    delivered_t numeric NOT NULL,
    purchased_t numeric NOT NULL,
    unsafe_findings integer NOT NULL,
    members integer NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    created_by uuid NOT NULL,
    CONSTRAINT estimate_base_check CHECK ((base <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_check CHECK (((p10 <= p50) AND (p50 <= p80) AND (p80 <= p90))),
    CONSTRAINT estimate_confidence_check CHECK (((confidence > (0)::numeric) AND (confidence < (1)::numeric))),
    CONSTRAINT estimate_contingency_check CHECK ((contingency <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_currency_check CHECK ((currency ~ '^[A-Z]{3}$'::text)),
    CONSTRAINT estimate_delivered_t_check CHECK (((delivered_t >= (0)::numeric) AND (delivered_t < 'Infinity'::numeric))),
    CONSTRAINT estimate_document_check CHECK (((octet_length(document) >= 1) AND (octet_length(document) <= 268435456))),
    CONSTRAINT estimate_document_sha256_check CHECK ((octet_length(document_sha256) = 32)),
    CONSTRAINT estimate_engine_version_check CHECK ((engine_version >= 1)),
    CONSTRAINT estimate_job_check CHECK (((octet_length(job) >= 1) AND (octet_length(job) <= 268435456))),
    CONSTRAINT estimate_job_sha256_check CHECK ((octet_length(job_sha256) = 32)),
    CONSTRAINT estimate_mean_check CHECK ((mean <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_members_check CHECK ((members >= 0)),
    CONSTRAINT estimate_net_t_check CHECK (((net_t >= (0)::numeric) AND (net_t < 'Infinity'::numeric))),
    CONSTRAINT estimate_p10_check CHECK ((p10 <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_p50_check CHECK ((p50 <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_p80_check CHECK ((p80 <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_p90_check CHECK ((p90 <> ALL (ARRAY['NaN'::numeric, 'Infinity'::numeric, '-Infinity'::numeric]))),
    CONSTRAINT estimate_purchased_t_check CHECK (((purchased_t >= (0)::numeric) AND (purchased_t < 'Infinity'::numeric))),
    CONSTRAINT estimate_unsafe_findings_check CHECK ((unsafe_findings >= 0))
);
ALTER TABLE ONLY spanwright.estimate FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.estimate OWNER TO spanwright_owner;
CREATE TABLE spanwright.idempotency (
    organisation_id uuid NOT NULL,
    token_id uuid NOT NULL,
    operation text NOT NULL,
    key text NOT NULL,
    fingerprint bytea NOT NULL,
    status integer,
    resource_id uuid,
    body bytea,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    CONSTRAINT idempotency_body_check CHECK ((octet_length(body) <= 67108864)),
    CONSTRAINT idempotency_fingerprint_check CHECK ((octet_length(fingerprint) = 32)),
    CONSTRAINT idempotency_key_check CHECK (((length(key) >= 1) AND (length(key) <= 255))),
    CONSTRAINT idempotency_operation_check CHECK (((length(operation) >= 1) AND (length(operation) <= 100))),
    CONSTRAINT idempotency_status_check CHECK (((status >= 100) AND (status <= 599)))
);
ALTER TABLE ONLY spanwright.idempotency FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.idempotency OWNER TO spanwright_owner;
CREATE TABLE spanwright.multiplier (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    project_id uuid NOT NULL,
    scheme_id uuid,
    scope text NOT NULL,
    subject text NOT NULL,
    name text NOT NULL,
    categories text[] NOT NULL,
    spread jsonb NOT NULL,
    correlation_group text DEFAULT ''::text NOT NULL,
    reason text NOT NULL,
    author text NOT NULL,
    version bigint DEFAULT 1 NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    updated_at timestamp with time zone DEFAULT now() NOT NULL,
    deleted_at timestamp with time zone,
    CONSTRAINT multiplier_author_check CHECK (((length(author) >= 1) AND (length(author) <= 200))),
    CONSTRAINT multiplier_categories_check CHECK (((categories <@ ARRAY['material'::text, 'fabrication'::text, 'coating'::text, 'inspection'::text, 'shipping'::text, 'erection'::text, 'foundations'::text, 'engineering'::text, 'indirects'::text, 'margin'::text, 'owner'::text]) AND (cardinality(categories) <= 11))),
    CONSTRAINT multiplier_check CHECK (((scope <> 'scheme'::text) OR (scheme_id IS NOT NULL))),
    CONSTRAINT multiplier_correlation_group_check CHECK ((length(correlation_group) <= 80)),
    CONSTRAINT multiplier_name_check CHECK (((length(name) >= 1) AND (length(name) <= 200))),
    CONSTRAINT multiplier_reason_check CHECK ((length(reason) <= 2000)),
    CONSTRAINT multiplier_scope_check CHECK ((scope = ANY (ARRAY['member'::text, 'group'::text, 'family'::text, 'scheme'::text, 'project'::text, 'rate book'::text]))),
    CONSTRAINT multiplier_spread_check CHECK (((jsonb_typeof(spread) = 'object'::text) AND (octet_length((spread)::text) <= 8192))),
    CONSTRAINT multiplier_subject_check CHECK ((length(subject) <= 200)),
    CONSTRAINT multiplier_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.multiplier FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.multiplier OWNER TO spanwright_owner;
CREATE TABLE spanwright.organisation (
    id uuid NOT NULL,
    name text NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    CONSTRAINT organisation_name_check CHECK (((length(name) >= 1) AND (length(name) <= 200)))
);
ALTER TABLE ONLY spanwright.organisation FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.organisation OWNER TO spanwright_owner;
CREATE TABLE spanwright.outturn (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    posting_id uuid NOT NULL,
    job text NOT NULL,
    kind text NOT NULL,
    completed date NOT NULL,
    content bytea NOT NULL,
    sha256 bytea NOT NULL,
    source_name text NOT NULL,
    source_sha256 bytea NOT NULL,
    version bigint DEFAULT 1 NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    created_by uuid NOT NULL,
    withdrawn_at timestamp with time zone,
    CONSTRAINT outturn_content_check CHECK (((octet_length(content) >= 1) AND (octet_length(content) <= 65536))),
    CONSTRAINT outturn_job_check CHECK (((length(job) >= 1) AND (length(job) <= 200))),
    CONSTRAINT outturn_kind_check CHECK (((length(kind) >= 1) AND (length(kind) <= 200))),
    CONSTRAINT outturn_sha256_check CHECK ((octet_length(sha256) = 32)),
    CONSTRAINT outturn_source_name_check CHECK (((length(source_name) >= 1) AND (length(source_name) <= 200))),
    CONSTRAINT outturn_source_sha256_check CHECK ((octet_length(source_sha256) = 32)),
    CONSTRAINT outturn_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.outturn FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.outturn OWNER TO spanwright_owner;
CREATE TABLE spanwright.project (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    name text NOT NULL,
    currency character(3) NOT NULL,
    base_date date,
    display_units text NOT NULL,
    version bigint DEFAULT 1 NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    updated_at timestamp with time zone DEFAULT now() NOT NULL,
    CONSTRAINT project_currency_check CHECK ((currency ~ '^[A-Z]{3}$'::text)),
    CONSTRAINT project_display_units_check CHECK (((length(display_units) >= 1) AND (length(display_units) <= 40))),
    CONSTRAINT project_name_check CHECK (((length(name) >= 1) AND (length(name) <= 200))),
    CONSTRAINT project_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.project FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.project OWNER TO spanwright_owner;
CREATE TABLE spanwright.rate_book (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    name text NOT NULL,
    version bigint DEFAULT 1 NOT NULL,
    current_number integer NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    updated_at timestamp with time zone DEFAULT now() NOT NULL,
    CONSTRAINT rate_book_current_number_check CHECK ((current_number >= 1)),
    CONSTRAINT rate_book_name_check CHECK (((length(name) >= 1) AND (length(name) <= 200))),
    CONSTRAINT rate_book_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.rate_book FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.rate_book OWNER TO spanwright_owner;
CREATE TABLE spanwright.rate_book_version (
    organisation_id uuid NOT NULL,
    rate_book_id uuid NOT NULL,
    number integer NOT NULL,
    content bytea NOT NULL,
    sha256 bytea NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    created_by uuid,
    CONSTRAINT rate_book_version_content_check CHECK (((octet_length(content) >= 1) AND (octet_length(content) <= 16777216))),
    CONSTRAINT rate_book_version_number_check CHECK ((number >= 1)),
    CONSTRAINT rate_book_version_sha256_check CHECK ((octet_length(sha256) = 32))
);
ALTER TABLE ONLY spanwright.rate_book_version FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.rate_book_version OWNER TO spanwright_owner;
CREATE TABLE spanwright.schedule_revision (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    scheme_id uuid NOT NULL,
    number integer NOT NULL,
    source_name text NOT NULL,
    source_sha256 bytea NOT NULL,
    source bytea NOT NULL,
    job_defaults bytea,
    definition bytea,
    risks bytea,
    members integer NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    created_by uuid NOT NULL,
    CONSTRAINT schedule_revision_definition_check CHECK ((octet_length(definition) <= 1048576)),
    CONSTRAINT schedule_revision_job_defaults_check CHECK ((octet_length(job_defaults) <= 1048576)),
    CONSTRAINT schedule_revision_members_check CHECK ((members >= 0)),
    CONSTRAINT schedule_revision_number_check CHECK ((number >= 1)),
    CONSTRAINT schedule_revision_risks_check CHECK ((octet_length(risks) <= 1048576)),
    CONSTRAINT schedule_revision_source_check CHECK (((octet_length(source) >= 1) AND (octet_length(source) <= 67108864))),
    CONSTRAINT schedule_revision_source_name_check CHECK (((length(source_name) >= 1) AND (length(source_name) <= 255))),
    CONSTRAINT schedule_revision_source_sha256_check CHECK ((octet_length(source_sha256) = 32))
);
ALTER TABLE ONLY spanwright.schedule_revision FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.schedule_revision OWNER TO spanwright_owner;
CREATE TABLE spanwright.scheme (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    project_id uuid NOT NULL,
    name text NOT NULL,
    version bigint DEFAULT 1 NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    updated_at timestamp with time zone DEFAULT now() NOT NULL,
    CONSTRAINT scheme_name_check CHECK (((length(name) >= 1) AND (length(name) <= 200))),
    CONSTRAINT scheme_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.scheme FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.scheme OWNER TO spanwright_owner;
CREATE TABLE spanwright.session (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    token_id uuid NOT NULL,
    secret_sha256 bytea NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    expires_at timestamp with time zone NOT NULL,
    CONSTRAINT session_secret_sha256_check CHECK ((octet_length(secret_sha256) = 32))
);
ALTER TABLE ONLY spanwright.session FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.session OWNER TO spanwright_owner;
CREATE TABLE spanwright.token (
    organisation_id uuid NOT NULL,
    id uuid NOT NULL,
    public_id text NOT NULL,
    secret_sha256 bytea NOT NULL,
    role text NOT NULL,
    name text NOT NULL,
    created_at timestamp with time zone DEFAULT now() NOT NULL,
    created_by uuid,
    expires_at timestamp with time zone,
    revoked_at timestamp with time zone,
    version bigint DEFAULT 1 NOT NULL,
    CONSTRAINT token_name_check CHECK (((length(name) >= 1) AND (length(name) <= 200))),
    CONSTRAINT token_public_id_check CHECK (((length(public_id) >= 8) AND (length(public_id) <= 64))),
    CONSTRAINT token_role_check CHECK ((role = ANY (ARRAY['viewer'::text, 'estimator'::text, 'manager'::text, 'administrator'::text]))),
    CONSTRAINT token_secret_sha256_check CHECK ((octet_length(secret_sha256) = 32)),
    CONSTRAINT token_version_check CHECK ((version >= 1))
);
ALTER TABLE ONLY spanwright.token FORCE ROW LEVEL SECURITY;
ALTER TABLE spanwright.token OWNER TO spanwright_owner;
CREATE TABLE spanwright_migration.schema_migrations (
    version bigint NOT NULL,
    dirty boolean NOT NULL
);
ALTER TABLE spanwright_migration.schema_migrations OWNER TO spanwright_owner;
ALTER TABLE ONLY spanwright.audit_event
    ADD CONSTRAINT audit_event_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.calibration
    ADD CONSTRAINT calibration_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.estimate
    ADD CONSTRAINT estimate_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.idempotency
    ADD CONSTRAINT idempotency_pkey PRIMARY KEY (organisation_id, token_id, operation, key);
ALTER TABLE ONLY spanwright.multiplier
    ADD CONSTRAINT multiplier_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.organisation
    ADD CONSTRAINT organisation_pkey PRIMARY KEY (id);
ALTER TABLE ONLY spanwright.outturn
    ADD CONSTRAINT outturn_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.project
    ADD CONSTRAINT project_organisation_id_name_key UNIQUE (organisation_id, name);
ALTER TABLE ONLY spanwright.project
    ADD CONSTRAINT project_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.rate_book
    ADD CONSTRAINT rate_book_organisation_id_name_key UNIQUE (organisation_id, name);
ALTER TABLE ONLY spanwright.rate_book
    ADD CONSTRAINT rate_book_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.rate_book_version
    ADD CONSTRAINT rate_book_version_pkey PRIMARY KEY (organisation_id, rate_book_id, number);
ALTER TABLE ONLY spanwright.schedule_revision
    ADD CONSTRAINT schedule_revision_organisation_id_scheme_id_id_key UNIQUE (organisation_id, scheme_id, id);
ALTER TABLE ONLY spanwright.schedule_revision
    ADD CONSTRAINT schedule_revision_organisation_id_scheme_id_number_key UNIQUE (organisation_id, scheme_id, number);
ALTER TABLE ONLY spanwright.schedule_revision
    ADD CONSTRAINT schedule_revision_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.scheme
    ADD CONSTRAINT scheme_organisation_id_project_id_id_key UNIQUE (organisation_id, project_id, id);
ALTER TABLE ONLY spanwright.scheme
    ADD CONSTRAINT scheme_organisation_id_project_id_name_key UNIQUE (organisation_id, project_id, name);
ALTER TABLE ONLY spanwright.scheme
    ADD CONSTRAINT scheme_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.session
    ADD CONSTRAINT session_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright.token
    ADD CONSTRAINT token_organisation_id_public_id_key UNIQUE (organisation_id, public_id);
ALTER TABLE ONLY spanwright.token
    ADD CONSTRAINT token_pkey PRIMARY KEY (organisation_id, id);
ALTER TABLE ONLY spanwright_migration.schema_migrations
    ADD CONSTRAINT schema_migrations_pkey PRIMARY KEY (version);
CREATE INDEX audit_event_listing ON spanwright.audit_event USING btree (organisation_id, at, id);
CREATE INDEX audit_event_of_subject ON spanwright.audit_event USING btree (organisation_id, subject_kind, subject_id, at, id);
CREATE INDEX calibration_created_by ON spanwright.calibration USING btree (organisation_id, created_by);
CREATE INDEX calibration_decided_by ON spanwright.calibration USING btree (organisation_id, decided_by);
CREATE INDEX calibration_listing ON spanwright.calibration USING btree (organisation_id, created_at, id);
CREATE INDEX calibration_made_number ON spanwright.calibration USING btree (organisation_id, rate_book_id, made_number);
CREATE INDEX calibration_rate_book ON spanwright.calibration USING btree (organisation_id, rate_book_id, rate_book_number);
CREATE INDEX estimate_created_by ON spanwright.estimate USING btree (organisation_id, created_by);
CREATE INDEX estimate_listing ON spanwright.estimate USING btree (organisation_id, created_at, id);
CREATE INDEX estimate_listing_of_scheme ON spanwright.estimate USING btree (organisation_id, scheme_id, created_at, id);
CREATE INDEX estimate_rate_book ON spanwright.estimate USING btree (organisation_id, rate_book_id, rate_book_number);
CREATE INDEX estimate_schedule_revision ON spanwright.estimate USING btree (organisation_id, scheme_id, schedule_revision_id);
CREATE INDEX idempotency_age ON spanwright.idempotency USING btree (organisation_id, created_at);
CREATE UNIQUE INDEX multiplier_in_force ON spanwright.multiplier USING btree (organisation_id, project_id, scheme_id, name, scope, subject) NULLS NOT DISTINCT WHERE (deleted_at IS NULL);
CREATE INDEX multiplier_listing ON spanwright.multiplier USING btree (organisation_id, created_at, id);
CREATE INDEX multiplier_listing_of_project ON spanwright.multiplier USING btree (organisation_id, project_id, created_at, id);
CREATE INDEX multiplier_scheme ON spanwright.multiplier USING btree (organisation_id, project_id, scheme_id);
CREATE INDEX outturn_created_by ON spanwright.outturn USING btree (organisation_id, created_by);
CREATE UNIQUE INDEX outturn_in_force ON spanwright.outturn USING btree (organisation_id, job) WHERE (withdrawn_at IS NULL);
CREATE INDEX outturn_listing ON spanwright.outturn USING btree (organisation_id, created_at, id);
CREATE INDEX outturn_of_posting ON spanwright.outturn USING btree (organisation_id, posting_id, id);
CREATE INDEX project_listing ON spanwright.project USING btree (organisation_id, created_at, id);
CREATE INDEX rate_book_listing ON spanwright.rate_book USING btree (organisation_id, created_at, id);
CREATE INDEX rate_book_version_created_by ON spanwright.rate_book_version USING btree (organisation_id, created_by);
CREATE INDEX schedule_revision_created_by ON spanwright.schedule_revision USING btree (organisation_id, created_by);
CREATE INDEX schedule_revision_listing ON spanwright.schedule_revision USING btree (organisation_id, created_at, id);
CREATE INDEX scheme_listing ON spanwright.scheme USING btree (organisation_id, created_at, id);
CREATE INDEX scheme_listing_of_project ON spanwright.scheme USING btree (organisation_id, project_id, created_at, id);
CREATE INDEX session_expiry ON spanwright.session USING btree (organisation_id, expires_at);
CREATE INDEX session_secret ON spanwright.session USING btree (secret_sha256);
CREATE INDEX session_token ON spanwright.session USING btree (organisation_id, token_id);
CREATE INDEX token_created_by ON spanwright.token USING btree (organisation_id, created_by);
CREATE INDEX token_listing ON spanwright.token USING btree (organisation_id, created_at, id);
CREATE INDEX token_public_id ON spanwright.token USING btree (public_id);
ALTER TABLE ONLY spanwright.audit_event
    ADD CONSTRAINT audit_event_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.calibration
    ADD CONSTRAINT calibration_organisation_id_created_by_fkey FOREIGN KEY (organisation_id, created_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.calibration
    ADD CONSTRAINT calibration_organisation_id_decided_by_fkey FOREIGN KEY (organisation_id, decided_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.calibration
    ADD CONSTRAINT calibration_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.calibration
    ADD CONSTRAINT calibration_organisation_id_rate_book_id_made_number_fkey FOREIGN KEY (organisation_id, rate_book_id, made_number) REFERENCES spanwright.rate_book_version(organisation_id, rate_book_id, number);
ALTER TABLE ONLY spanwright.calibration
    ADD CONSTRAINT calibration_organisation_id_rate_book_id_rate_book_number_fkey FOREIGN KEY (organisation_id, rate_book_id, rate_book_number) REFERENCES spanwright.rate_book_version(organisation_id, rate_book_id, number);
ALTER TABLE ONLY spanwright.estimate
    ADD CONSTRAINT estimate_organisation_id_created_by_fkey FOREIGN KEY (organisation_id, created_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.estimate
    ADD CONSTRAINT estimate_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.estimate
    ADD CONSTRAINT estimate_organisation_id_rate_book_id_rate_book_number_fkey FOREIGN KEY (organisation_id, rate_book_id, rate_book_number) REFERENCES spanwright.rate_book_version(organisation_id, rate_book_id, number);
ALTER TABLE ONLY spanwright.estimate
    ADD CONSTRAINT estimate_organisation_id_scheme_id_fkey FOREIGN KEY (organisation_id, scheme_id) REFERENCES spanwright.scheme(organisation_id, id);
ALTER TABLE ONLY spanwright.estimate
    ADD CONSTRAINT estimate_organisation_id_scheme_id_schedule_revision_id_fkey FOREIGN KEY (organisation_id, scheme_id, schedule_revision_id) REFERENCES spanwright.schedule_revision(organisation_id, scheme_id, id);
ALTER TABLE ONLY spanwright.idempotency
    ADD CONSTRAINT idempotency_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.idempotency
    ADD CONSTRAINT idempotency_organisation_id_token_id_fkey FOREIGN KEY (organisation_id, token_id) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.multiplier
    ADD CONSTRAINT multiplier_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.multiplier
    ADD CONSTRAINT multiplier_organisation_id_project_id_fkey FOREIGN KEY (organisation_id, project_id) REFERENCES spanwright.project(organisation_id, id);
ALTER TABLE ONLY spanwright.multiplier
    ADD CONSTRAINT multiplier_organisation_id_project_id_scheme_id_fkey FOREIGN KEY (organisation_id, project_id, scheme_id) REFERENCES spanwright.scheme(organisation_id, project_id, id);
ALTER TABLE ONLY spanwright.outturn
    ADD CONSTRAINT outturn_organisation_id_created_by_fkey FOREIGN KEY (organisation_id, created_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.outturn
    ADD CONSTRAINT outturn_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.project
    ADD CONSTRAINT project_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.rate_book
    ADD CONSTRAINT rate_book_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.rate_book_version
    ADD CONSTRAINT rate_book_version_organisation_id_created_by_fkey FOREIGN KEY (organisation_id, created_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.rate_book_version
    ADD CONSTRAINT rate_book_version_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.rate_book_version
    ADD CONSTRAINT rate_book_version_organisation_id_rate_book_id_fkey FOREIGN KEY (organisation_id, rate_book_id) REFERENCES spanwright.rate_book(organisation_id, id);
ALTER TABLE ONLY spanwright.schedule_revision
    ADD CONSTRAINT schedule_revision_organisation_id_created_by_fkey FOREIGN KEY (organisation_id, created_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.schedule_revision
    ADD CONSTRAINT schedule_revision_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.schedule_revision
    ADD CONSTRAINT schedule_revision_organisation_id_scheme_id_fkey FOREIGN KEY (organisation_id, scheme_id) REFERENCES spanwright.scheme(organisation_id, id);
ALTER TABLE ONLY spanwright.scheme
    ADD CONSTRAINT scheme_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.scheme
    ADD CONSTRAINT scheme_organisation_id_project_id_fkey FOREIGN KEY (organisation_id, project_id) REFERENCES spanwright.project(organisation_id, id);
ALTER TABLE ONLY spanwright.session
    ADD CONSTRAINT session_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE ONLY spanwright.session
    ADD CONSTRAINT session_organisation_id_token_id_fkey FOREIGN KEY (organisation_id, token_id) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.token
    ADD CONSTRAINT token_organisation_id_created_by_fkey FOREIGN KEY (organisation_id, created_by) REFERENCES spanwright.token(organisation_id, id);
ALTER TABLE ONLY spanwright.token
    ADD CONSTRAINT token_organisation_id_fkey FOREIGN KEY (organisation_id) REFERENCES spanwright.organisation(id);
ALTER TABLE spanwright.audit_event ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.calibration ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.estimate ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.idempotency ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.multiplier ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.organisation ENABLE ROW LEVEL SECURITY;
CREATE POLICY organisation_isolation ON spanwright.audit_event TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.calibration TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.estimate TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.idempotency TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.multiplier TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.organisation TO spanwright_service, spanwright_reader USING ((id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.outturn TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.project TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.rate_book TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.rate_book_version TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.schedule_revision TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.scheme TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.session TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
CREATE POLICY organisation_isolation ON spanwright.token TO spanwright_service, spanwright_reader USING ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid)) WITH CHECK ((organisation_id = (NULLIF(current_setting('app.organisation'::text, true), ''::text))::uuid));
ALTER TABLE spanwright.outturn ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.project ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.rate_book ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.rate_book_version ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.schedule_revision ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.scheme ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.session ENABLE ROW LEVEL SECURITY;
ALTER TABLE spanwright.token ENABLE ROW LEVEL SECURITY;
GRANT USAGE ON SCHEMA spanwright TO spanwright_service;
GRANT USAGE ON SCHEMA spanwright TO spanwright_reader;
GRANT USAGE ON SCHEMA spanwright_migration TO spanwright_service;
GRANT USAGE ON SCHEMA spanwright_migration TO spanwright_reader;
REVOKE ALL ON PROCEDURE spanwright.isolate(IN tenant_table regclass, IN organisation_column name) FROM PUBLIC;
REVOKE ALL ON FUNCTION spanwright.session_by_hash(wanted bytea) FROM PUBLIC;
GRANT ALL ON FUNCTION spanwright.session_by_hash(wanted bytea) TO spanwright_service;
REVOKE ALL ON FUNCTION spanwright.token_by_public_id(wanted text) FROM PUBLIC;
GRANT ALL ON FUNCTION spanwright.token_by_public_id(wanted text) TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.audit_event TO spanwright_service;
GRANT SELECT ON TABLE spanwright.audit_event TO spanwright_reader;
GRANT SELECT,INSERT ON TABLE spanwright.calibration TO spanwright_service;
GRANT SELECT ON TABLE spanwright.calibration TO spanwright_reader;
GRANT UPDATE(state) ON TABLE spanwright.calibration TO spanwright_service;
GRANT UPDATE(reason) ON TABLE spanwright.calibration TO spanwright_service;
GRANT UPDATE(decision) ON TABLE spanwright.calibration TO spanwright_service;
GRANT UPDATE(made_number) ON TABLE spanwright.calibration TO spanwright_service;
GRANT UPDATE(decided_at) ON TABLE spanwright.calibration TO spanwright_service;
GRANT UPDATE(decided_by) ON TABLE spanwright.calibration TO spanwright_service;
GRANT UPDATE(version) ON TABLE spanwright.calibration TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.estimate TO spanwright_service;
GRANT SELECT ON TABLE spanwright.estimate TO spanwright_reader;
GRANT SELECT,INSERT,DELETE ON TABLE spanwright.idempotency TO spanwright_service;
GRANT UPDATE(status) ON TABLE spanwright.idempotency TO spanwright_service;
GRANT UPDATE(resource_id) ON TABLE spanwright.idempotency TO spanwright_service;
GRANT UPDATE(body) ON TABLE spanwright.idempotency TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.multiplier TO spanwright_service;
GRANT SELECT ON TABLE spanwright.multiplier TO spanwright_reader;
GRANT UPDATE(scope) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(subject) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(name) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(categories) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(spread) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(correlation_group) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(reason) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(author) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(version) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(updated_at) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT UPDATE(deleted_at) ON TABLE spanwright.multiplier TO spanwright_service;
GRANT SELECT ON TABLE spanwright.organisation TO spanwright_service;
GRANT SELECT ON TABLE spanwright.organisation TO spanwright_reader;
GRANT SELECT,INSERT ON TABLE spanwright.outturn TO spanwright_service;
GRANT SELECT ON TABLE spanwright.outturn TO spanwright_reader;
GRANT UPDATE(version) ON TABLE spanwright.outturn TO spanwright_service;
GRANT UPDATE(withdrawn_at) ON TABLE spanwright.outturn TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.project TO spanwright_service;
GRANT SELECT ON TABLE spanwright.project TO spanwright_reader;
GRANT UPDATE(name) ON TABLE spanwright.project TO spanwright_service;
GRANT UPDATE(currency) ON TABLE spanwright.project TO spanwright_service;
GRANT UPDATE(base_date) ON TABLE spanwright.project TO spanwright_service;
GRANT UPDATE(display_units) ON TABLE spanwright.project TO spanwright_service;
GRANT UPDATE(version) ON TABLE spanwright.project TO spanwright_service;
GRANT UPDATE(updated_at) ON TABLE spanwright.project TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.rate_book TO spanwright_service;
GRANT SELECT ON TABLE spanwright.rate_book TO spanwright_reader;
GRANT UPDATE(name) ON TABLE spanwright.rate_book TO spanwright_service;
GRANT UPDATE(version) ON TABLE spanwright.rate_book TO spanwright_service;
GRANT UPDATE(current_number) ON TABLE spanwright.rate_book TO spanwright_service;
GRANT UPDATE(updated_at) ON TABLE spanwright.rate_book TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.rate_book_version TO spanwright_service;
GRANT SELECT ON TABLE spanwright.rate_book_version TO spanwright_reader;
GRANT SELECT,INSERT ON TABLE spanwright.schedule_revision TO spanwright_service;
GRANT SELECT ON TABLE spanwright.schedule_revision TO spanwright_reader;
GRANT SELECT,INSERT ON TABLE spanwright.scheme TO spanwright_service;
GRANT SELECT ON TABLE spanwright.scheme TO spanwright_reader;
GRANT UPDATE(name) ON TABLE spanwright.scheme TO spanwright_service;
GRANT UPDATE(version) ON TABLE spanwright.scheme TO spanwright_service;
GRANT UPDATE(updated_at) ON TABLE spanwright.scheme TO spanwright_service;
GRANT SELECT,INSERT,DELETE ON TABLE spanwright.session TO spanwright_service;
GRANT UPDATE(expires_at) ON TABLE spanwright.session TO spanwright_service;
GRANT SELECT,INSERT ON TABLE spanwright.token TO spanwright_service;
GRANT SELECT(organisation_id) ON TABLE spanwright.token TO spanwright_reader;
GRANT SELECT(id) ON TABLE spanwright.token TO spanwright_reader;
GRANT SELECT(public_id) ON TABLE spanwright.token TO spanwright_reader;
GRANT SELECT(role) ON TABLE spanwright.token TO spanwright_reader;
GRANT UPDATE(name) ON TABLE spanwright.token TO spanwright_service;
GRANT SELECT(name) ON TABLE spanwright.token TO spanwright_reader;
GRANT SELECT(created_at) ON TABLE spanwright.token TO spanwright_reader;
GRANT SELECT(created_by) ON TABLE spanwright.token TO spanwright_reader;
GRANT UPDATE(expires_at) ON TABLE spanwright.token TO spanwright_service;
GRANT SELECT(expires_at) ON TABLE spanwright.token TO spanwright_reader;
GRANT UPDATE(revoked_at) ON TABLE spanwright.token TO spanwright_service;
GRANT SELECT(revoked_at) ON TABLE spanwright.token TO spanwright_reader;
GRANT UPDATE(version) ON TABLE spanwright.token TO spanwright_service;
GRANT SELECT(version) ON TABLE spanwright.token TO spanwright_reader;
GRANT SELECT ON TABLE spanwright_migration.schema_migrations TO spanwright_service;
GRANT SELECT ON TABLE spanwright_migration.schema_migrations TO spanwright_reader;
ALTER DEFAULT PRIVILEGES FOR ROLE spanwright_owner REVOKE ALL ON TYPES  FROM PUBLIC;
ALTER DEFAULT PRIVILEGES FOR ROLE spanwright_owner REVOKE ALL ON FUNCTIONS  FROM PUBLIC;
