// First migration: nothing older exists, so no old code has to survive it.
import { sql, type Kysely } from 'kysely'

export async function up(db: Kysely<unknown>): Promise<void> {
  for (const statements of [
    clock,
    people,
    studies,
    laboratories,
    results,
    analyses,
    publications,
    outbox,
    trail,
    grants,
  ]) {
    await sql.raw(statements).execute(db)
  }
}

// One clock for the whole product. The offset exists for tests and the demonstration: outside a private
// cluster it is neither settable nor heeded.
const clock = `
create schema vault;
create schema audit;

create table clock_setting (
  only_row boolean primary key default true constraint clock_setting_one_row check (only_row),
  shift interval not null default '0',
  frozen_at timestamptz
);
insert into clock_setting default values;

create function clock_now() returns timestamptz(3) language sql volatile security definer set search_path = public as $$
  select case when current_setting('cluster_name') = 'evenlot-private'
    then date_trunc('milliseconds', coalesce(frozen_at, clock_timestamp() + shift))
    else date_trunc('milliseconds', clock_timestamp()) end
  from clock_setting
$$;

create function set_clock(instant timestamptz, stand_still boolean) returns void language plpgsql security definer set search_path = public as $$
begin
  if current_setting('cluster_name') <> 'evenlot-private' then
    raise exception 'the clock can be set on a private cluster only';
  end if;
  update clock_setting set
    shift = case when instant is null then '0' else instant - clock_timestamp() end,
    frozen_at = case when stand_still then instant end;
end $$;
`

// The four tables of the sign-in library keep the names its adapter asks for.
const people = `
create table vault."User" (
  id uuid primary key default gen_random_uuid(),
  name text,
  email text not null constraint user_email_unique unique,
  "emailVerified" timestamptz(3),
  image text
);
create table vault."Account" (
  id uuid primary key default gen_random_uuid(),
  "userId" uuid not null references vault."User" (id) on delete cascade,
  type text not null, provider text not null, "providerAccountId" text not null,
  refresh_token text, access_token text, expires_at bigint, token_type text, scope text, id_token text, session_state text
);
create table vault."Session" (
  id uuid primary key default gen_random_uuid(),
  "userId" uuid not null references vault."User" (id) on delete cascade,
  "sessionToken" text not null constraint session_token_unique unique,
  expires timestamptz(3) not null
);
create table vault."VerificationToken" (
  identifier text not null,
  token text not null primary key,
  expires timestamptz(3) not null
);
create table vault.sign_in_request (
  request_id uuid primary key,
  address text not null,
  code_hash text not null,
  requested_at timestamptz(3) not null default clock_now(),
  expires_at timestamptz(3) not null
);
create index sign_in_request_address on vault.sign_in_request (address, requested_at);
create table vault.sign_in_code_attempt (
  request_id uuid not null references vault.sign_in_request on delete cascade,
  number integer not null constraint sign_in_code_attempt_five check (number between 1 and 5),
  attempted_at timestamptz(3) not null default clock_now(),
  primary key (request_id, number)
);
create table vault.rate_limit (key varchar(255) primary key, points integer not null default 0, expire bigint);

create table organisation (
  organisation_id uuid primary key default gen_random_uuid(),
  name text not null
);
create table vault.organisation_member (
  organisation_id uuid not null references organisation,
  person_id uuid not null references vault."User" (id),
  role text not null constraint organisation_member_role check (role in ('administrator', 'coordinator')),
  primary key (organisation_id, person_id, role)
);
`

const studies = `
create table study (
  study_id uuid primary key default gen_random_uuid(),
  organisation_id uuid not null references organisation,
  short_name text not null,
  title text not null,
  method text not null,
  purpose text not null,
  limit_factor numeric not null default 2.8 constraint study_limit_factor check (limit_factor > 0),
  created_at timestamptz(3) not null default clock_now(),
  created_by uuid not null references vault."User" (id),
  constraint study_short_name_unique unique (organisation_id, short_name)
);
create table study_state (
  study_id uuid not null references study,
  number integer not null,
  state text not null constraint study_state_known check (state in ('draft', 'open', 'closed', 'in-review', 'published')),
  entered_at timestamptz(3) not null default clock_now(),
  entered_by uuid not null references vault."User" (id),
  reason text,
  primary key (study_id, number)
);
create table study_deadline (
  study_id uuid not null references study,
  number integer not null,
  due_at timestamptz(3) not null,
  zone text not null,
  local_time text not null,
  set_at timestamptz(3) not null default clock_now(),
  set_by uuid not null references vault."User" (id),
  primary key (study_id, number)
);
create table measurand (
  study_id uuid not null references study,
  measurand_id uuid not null default gen_random_uuid(),
  position integer not null,
  name text not null,
  unit text not null,
  decimals integer not null constraint measurand_decimals check (decimals between 0 and 12),
  has_true_zero boolean not null default true,
  primary key (study_id, measurand_id),
  constraint measurand_name_unique unique (study_id, name)
);
create table material (
  study_id uuid not null references study,
  material_id uuid not null default gen_random_uuid(),
  position integer not null,
  name text not null,
  description text not null default '',
  primary key (study_id, material_id),
  constraint material_name_unique unique (study_id, name)
);
create table nesting_level (
  study_id uuid not null references study,
  position integer not null,
  name text not null,
  count integer not null constraint nesting_level_count check (count between 1 and 50),
  primary key (study_id, position),
  constraint nesting_level_name_unique unique (study_id, name)
);
create table vault.committee_member (
  study_id uuid not null references study,
  person_id uuid not null references vault."User" (id),
  role text not null constraint committee_member_role check (role in ('chair', 'member', 'observer')),
  added_at timestamptz(3) not null default clock_now(),
  added_by uuid not null references vault."User" (id),
  primary key (study_id, person_id)
);
`

// Codes stand in the study's own tables; which laboratory is behind one stands in the vault.
const laboratories = `
create table participant (
  study_id uuid not null references study,
  participant_id uuid not null default gen_random_uuid(),
  code text not null,
  primary key (study_id, participant_id),
  constraint participant_code_unique unique (study_id, code)
);
create table vault.laboratory (
  organisation_id uuid not null references organisation,
  laboratory_id uuid not null default gen_random_uuid(),
  name text not null,
  city text not null default '',
  country text not null default '',
  primary key (organisation_id, laboratory_id),
  constraint laboratory_name_unique unique (organisation_id, name)
);
create table vault.invitation (
  study_id uuid not null references study,
  invitation_id uuid not null default gen_random_uuid(),
  organisation_id uuid not null,
  laboratory_id uuid not null,
  address text not null,
  contact_name text not null,
  zone text not null,
  invited_at timestamptz(3) not null default clock_now(),
  invited_by uuid not null references vault."User" (id),
  primary key (study_id, invitation_id),
  foreign key (organisation_id, laboratory_id) references vault.laboratory,
  constraint invitation_laboratory_unique unique (study_id, laboratory_id)
);
create table vault.invitation_link (
  study_id uuid not null,
  invitation_id uuid not null,
  number integer not null,
  token_hash text not null constraint invitation_link_token_unique unique,
  issued_at timestamptz(3) not null default clock_now(),
  issued_by uuid references vault."User" (id),
  primary key (study_id, invitation_id, number),
  foreign key (study_id, invitation_id) references vault.invitation
);
create table vault.invitation_answer (
  study_id uuid not null,
  invitation_id uuid not null,
  answer text not null constraint invitation_answer_known check (answer in ('accepted', 'declined')),
  answered_at timestamptz(3) not null default clock_now(),
  primary key (study_id, invitation_id),
  foreign key (study_id, invitation_id) references vault.invitation
);
create table vault.identity (
  study_id uuid not null,
  participant_id uuid not null,
  invitation_id uuid not null,
  primary key (study_id, participant_id),
  foreign key (study_id, participant_id) references participant,
  foreign key (study_id, invitation_id) references vault.invitation,
  constraint identity_invitation_unique unique (study_id, invitation_id)
);
create table vault.contact (
  study_id uuid not null,
  participant_id uuid not null,
  person_id uuid not null references vault."User" (id),
  primary key (study_id, participant_id, person_id),
  foreign key (study_id, participant_id) references participant
);
create index contact_person on vault.contact (person_id);
create table vault.extension_request (
  study_id uuid not null,
  request_id uuid not null default gen_random_uuid(),
  participant_id uuid not null,
  message text not null,
  requested_at timestamptz(3) not null default clock_now(),
  requested_by uuid not null references vault."User" (id),
  primary key (study_id, request_id),
  foreign key (study_id, participant_id) references participant
);
create table vault.extension (
  study_id uuid not null,
  participant_id uuid not null,
  number integer not null,
  due_at timestamptz(3) not null,
  reason text not null constraint extension_reason_length check (length(btrim(reason)) >= 10),
  granted_at timestamptz(3) not null default clock_now(),
  granted_by uuid not null references vault."User" (id),
  primary key (study_id, participant_id, number),
  foreign key (study_id, participant_id) references participant
);
`

// A return is never changed: a later one has the next number. What was typed, and the file it came in, could
// betray a laboratory by its manner of writing, and so lies in the vault beside who sent it and when.
const results = `
create table vault.draft (
  study_id uuid not null,
  participant_id uuid not null,
  entries jsonb not null,
  remark text not null default '',
  version integer not null,
  saved_at timestamptz(3) not null default clock_now(),
  saved_by uuid not null references vault."User" (id),
  primary key (study_id, participant_id),
  foreign key (study_id, participant_id) references participant
);
create table vault.upload (
  study_id uuid not null,
  upload_id uuid not null default gen_random_uuid(),
  participant_id uuid not null,
  file_name text not null,
  bytes bytea not null,
  sha256 text not null,
  uploaded_at timestamptz(3) not null default clock_now(),
  uploaded_by uuid not null references vault."User" (id),
  primary key (study_id, upload_id),
  foreign key (study_id, participant_id) references participant
);
alter table vault.upload alter column bytes set storage external;
create table vault.upload_check (
  study_id uuid not null,
  upload_id uuid not null,
  number integer not null,
  decimal_mark text constraint upload_check_decimal_mark check (decimal_mark in ('comma', 'point')),
  asked_at timestamptz(3) not null default clock_now(),
  started_at timestamptz(3),
  finished_at timestamptz(3),
  outcome text constraint upload_check_outcome check (outcome in ('checked', 'refused')),
  code text,
  message text,
  report jsonb,
  primary key (study_id, upload_id, number),
  foreign key (study_id, upload_id) references vault.upload
);
create table result_return (
  study_id uuid not null,
  return_id uuid not null default gen_random_uuid(),
  participant_id uuid not null,
  number integer not null,
  primary key (study_id, return_id),
  foreign key (study_id, participant_id) references participant,
  constraint result_return_number_unique unique (study_id, participant_id, number)
);
create table vault.receipt (
  study_id uuid not null,
  return_id uuid not null,
  participant_id uuid not null,
  submission_key text not null,
  body_digest text not null,
  receipt_number text not null,
  received_at timestamptz(3) not null default clock_now(),
  submitted_by uuid not null references vault."User" (id),
  source text not null constraint receipt_source check (source in ('sheet', 'file')),
  upload_id uuid,
  remark text not null default '',
  primary key (study_id, return_id),
  foreign key (study_id, return_id) references result_return,
  foreign key (study_id, upload_id) references vault.upload,
  constraint receipt_key_unique unique (study_id, participant_id, submission_key),
  constraint receipt_number_unique unique (study_id, receipt_number)
);
create table test_result (
  study_id uuid not null,
  return_id uuid not null,
  measurand_id uuid not null,
  material_id uuid not null,
  place integer[] not null,
  value numeric not null constraint test_result_finite check (value not in ('NaN', 'Infinity', '-Infinity')),
  censored text constraint test_result_censored check (censored in ('<', '>')),
  primary key (study_id, return_id, measurand_id, material_id, place),
  foreign key (study_id, return_id) references result_return,
  foreign key (study_id, measurand_id) references measurand,
  foreign key (study_id, material_id) references material
);
create table vault.reported_text (
  study_id uuid not null,
  return_id uuid not null,
  measurand_id uuid not null,
  material_id uuid not null,
  place integer[] not null,
  text text not null,
  source_cell text,
  primary key (study_id, return_id, measurand_id, material_id, place)
);
`

const analyses = `
create table exclusion (
  study_id uuid not null,
  exclusion_id uuid not null default gen_random_uuid(),
  participant_id uuid not null,
  measurand_id uuid not null,
  material_id uuid not null,
  reason text not null constraint exclusion_reason_length check (length(btrim(reason)) >= 10),
  decided_at timestamptz(3) not null default clock_now(),
  decided_by uuid not null references vault."User" (id),
  primary key (study_id, exclusion_id),
  foreign key (study_id, participant_id) references participant,
  foreign key (study_id, measurand_id) references measurand,
  foreign key (study_id, material_id) references material
);
create table exclusion_lifted (
  study_id uuid not null,
  exclusion_id uuid not null,
  reason text not null constraint exclusion_lifted_reason_length check (length(btrim(reason)) >= 10),
  lifted_at timestamptz(3) not null default clock_now(),
  lifted_by uuid not null references vault."User" (id),
  primary key (study_id, exclusion_id),
  foreign key (study_id, exclusion_id) references exclusion
);
create table analysis_request (
  study_id uuid not null references study,
  number integer not null,
  requested_at timestamptz(3) not null default clock_now(),
  requested_by uuid not null references vault."User" (id),
  primary key (study_id, number)
);
create table analysis (
  study_id uuid not null,
  analysis_id uuid not null default gen_random_uuid(),
  number integer not null,
  engine_version text not null,
  settings text not null,
  digest text not null,
  made_at timestamptz(3) not null default clock_now(),
  primary key (study_id, analysis_id),
  foreign key (study_id, number) references analysis_request,
  constraint analysis_number_unique unique (study_id, number)
);
create table analysis_document (
  study_id uuid not null,
  analysis_id uuid not null,
  measurand_id uuid not null,
  input_csv text not null,
  input_digest text not null,
  document text not null,
  primary key (study_id, analysis_id, measurand_id),
  foreign key (study_id, analysis_id) references analysis,
  foreign key (study_id, measurand_id) references measurand
);
`

// Publishing takes two rows by two people; the check holds it even against a faulty program.
const publications = `
create table publication_proposal (
  study_id uuid not null,
  proposal_id uuid not null default gen_random_uuid(),
  analysis_id uuid not null,
  snapshot text not null,
  digest text not null,
  proposed_at timestamptz(3) not null default clock_now(),
  proposed_by uuid not null references vault."User" (id),
  primary key (study_id, proposal_id),
  foreign key (study_id, analysis_id) references analysis,
  constraint publication_proposal_author unique (study_id, proposal_id, proposed_by)
);
create table publication_proposal_withdrawn (
  study_id uuid not null,
  proposal_id uuid not null,
  reason text not null constraint publication_proposal_withdrawn_reason check (length(btrim(reason)) >= 10),
  withdrawn_at timestamptz(3) not null default clock_now(),
  withdrawn_by uuid not null references vault."User" (id),
  primary key (study_id, proposal_id),
  foreign key (study_id, proposal_id) references publication_proposal
);
create table publication (
  study_id uuid not null,
  proposal_id uuid not null,
  slug text not null constraint publication_slug_unique unique,
  published_on date not null,
  proposed_by uuid not null,
  confirmed_by uuid not null references vault."User" (id),
  confirmed_at timestamptz(3) not null default clock_now(),
  primary key (study_id, proposal_id),
  foreign key (study_id, proposal_id, proposed_by) references publication_proposal (study_id, proposal_id, proposed_by),
  constraint publication_two_people check (confirmed_by <> proposed_by),
  constraint publication_once unique (study_id)
);
`

const outbox = `
create table vault.mail (
  mail_id uuid primary key default gen_random_uuid(),
  study_id uuid references study,
  kind text not null,
  recipient text not null,
  subject_ids jsonb not null,
  dedupe_key text constraint mail_dedupe_key_unique unique,
  queued_at timestamptz(3) not null default clock_now()
);
create index mail_study on vault.mail (study_id, queued_at);
create table vault.mail_attempt (
  mail_id uuid not null references vault.mail,
  number integer not null,
  started_at timestamptz(3) not null default clock_now(),
  finished_at timestamptz(3),
  outcome text constraint mail_attempt_outcome check (outcome in ('sent', 'refused', 'deferred', 'dropped')),
  detail text,
  primary key (mail_id, number)
);
`

const trail = `
create table audit.chain (
  study_id uuid primary key,
  sequence integer not null,
  hash text not null
);
create table audit.entry (
  study_id uuid not null,
  sequence integer not null,
  at timestamptz(3) not null,
  actor_id uuid,
  actor_role text not null,
  action text not null,
  version integer not null,
  body text not null,
  previous_hash text not null,
  hash text not null,
  primary key (study_id, sequence)
);
create function audit.refuse_change() returns trigger language plpgsql as $$
begin
  raise exception 'audit entries are never changed';
end $$;
create trigger entry_unchangeable before update or delete on audit.entry for each row execute function audit.refuse_change();
create trigger entry_untruncatable before truncate on audit.entry for each statement execute function audit.refuse_change();
`

const grants = `
revoke all on schema public from public;
grant usage on schema public to app, reader;
grant usage on schema vault, audit to app;

grant select, insert on all tables in schema public, vault, audit to app;
revoke insert, select on clock_setting from app;
grant update on study, vault."User", vault."Account", vault."Session", vault.draft, vault.rate_limit, audit.chain to app;
grant update (name, unit, decimals, has_true_zero, position) on measurand to app;
grant update (name, description, position) on material to app;
grant update (name, count) on nesting_level to app;
grant update (name, city, country) on vault.laboratory to app;
grant update (address, contact_name, zone) on vault.invitation to app;
grant update (role) on vault.committee_member to app;
grant update (started_at, finished_at, outcome, code, message, report) on vault.upload_check to app;
grant update (finished_at, outcome, detail) on vault.mail_attempt to app;
grant delete on measurand, material, nesting_level, vault."Account", vault."Session", vault."VerificationToken",
  vault.sign_in_request, vault.sign_in_code_attempt, vault.rate_limit, vault.draft, vault.committee_member to app;

grant select on organisation, measurand, material, nesting_level, participant, result_return, test_result, analysis_document to reader;
grant select (study_id, organisation_id, short_name, title, method, purpose, limit_factor) on study to reader;
grant select (study_id, number, state) on study_state to reader;
grant select (study_id, number, due_at, zone, local_time) on study_deadline to reader;
grant select (study_id, exclusion_id, participant_id, measurand_id, material_id, reason) on exclusion to reader;
grant select (study_id, exclusion_id) on exclusion_lifted to reader;
grant select (study_id, analysis_id, number, engine_version, settings, digest) on analysis to reader;
grant select (study_id, proposal_id, analysis_id, snapshot, digest) on publication_proposal to reader;
grant select (study_id, proposal_id, slug, published_on) on publication to reader;

revoke all on function set_clock(timestamptz, boolean), clock_now() from public;
grant execute on function clock_now() to app, reader;
grant execute on function set_clock(timestamptz, boolean) to app;
`
