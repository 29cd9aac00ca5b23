import type { QueryInterface } from "sequelize";

/** People, their ways in, and the record of what anybody changed. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    create extension if not exists btree_gist;

    create function refuse_change() returns trigger language plpgsql as $$
    begin
      raise exception '% is a record: it is never changed or deleted', tg_table_name using errcode = 'restrict_violation';
    end $$;

    create table person (
      id bigint generated always as identity primary key,
      email text not null check (email = lower(email) and email ~ '^[^@[:space:]]+@[^@[:space:]]+$'),
      name text not null check (length(name) between 1 and 200),
      role text not null check (role in ('administrator', 'researcher', 'operator', 'viewer')),
      password_hash text,
      session_version integer not null default 1,
      notify jsonb not null default '{}',
      created_at timestamptz not null,
      closed_at timestamptz,
      unique (email)
    );

    create table invitation (
      id bigint generated always as identity primary key,
      email text not null,
      name text not null,
      role text not null check (role in ('administrator', 'researcher', 'operator', 'viewer')),
      token_hash bytea not null unique,
      invited_by bigint not null references person,
      created_at timestamptz not null,
      expires_at timestamptz not null,
      accepted_at timestamptz,
      withdrawn_at timestamptz,
      person_id bigint references person,
      check (expires_at > created_at)
    );
    create unique index invitation_open on invitation (email) where accepted_at is null and withdrawn_at is null;

    create table password_reset (
      id bigint generated always as identity primary key,
      person_id bigint not null references person,
      token_hash bytea not null unique,
      created_at timestamptz not null,
      expires_at timestamptz not null,
      used_at timestamptz
    );

    create table access_token (
      id bigint generated always as identity primary key,
      person_id bigint not null references person,
      name text not null check (length(name) between 1 and 200),
      token_hash bytea not null unique,
      last4 text not null,
      scope text not null check (scope in ('read', 'write')),
      created_at timestamptz not null,
      expires_at timestamptz,
      revoked_at timestamptz,
      last_used_at timestamptz
    );
    create index access_token_person on access_token (person_id);

    create table audit_event (
      id bigint generated always as identity primary key,
      at timestamptz not null,
      person_id bigint references person,
      rig_id bigint,
      who text not null,
      action text not null,
      entity text not null,
      entity_id text not null,
      detail jsonb not null default '{}',
      request_id text
    );
    create index audit_event_at on audit_event (at desc, id desc);
    create index audit_event_entity on audit_event (entity, entity_id, id desc);
    create trigger audit_event_is_record before update or delete on audit_event
      for each row execute function refuse_change();

    create table idempotency_key (
      person_id bigint not null references person,
      key text not null check (length(key) between 1 and 255),
      call text not null,
      body_hash bytea not null,
      status integer,
      answer jsonb,
      created_at timestamptz not null,
      primary key (person_id, key)
    );
    create index idempotency_key_age on idempotency_key (created_at);

    create table setting (
      name text primary key,
      value jsonb not null
    );
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop table setting, idempotency_key, audit_event, access_token, password_reset, invitation, person;
    drop function refuse_change();
  `);
}
