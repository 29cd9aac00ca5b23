import type { QueryInterface } from "sequelize";

/** Protocols with frozen versions, campaigns, their holds and amendments. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    create table protocol (
      id bigint generated always as identity primary key,
      name text not null check (length(name) between 1 and 200),
      draft jsonb,
      draft_saved_at timestamptz,
      created_by bigint references person,
      created_at timestamptz not null,
      retired_at timestamptz
    );
    create unique index protocol_name on protocol (lower(name)) where retired_at is null;

    create table protocol_version (
      id bigint generated always as identity primary key,
      protocol_id bigint not null references protocol,
      version integer not null check (version >= 1),
      definition jsonb not null,
      note text,
      created_by bigint references person,
      created_at timestamptz not null,
      unique (protocol_id, version)
    );
    create trigger protocol_version_is_record before update or delete on protocol_version
      for each row execute function refuse_change();

    create table campaign (
      id bigint generated always as identity primary key,
      rig_number integer,
      name text not null,
      protocol_version_id bigint references protocol_version,
      sensor_id bigint references sensor,
      rig_id bigint references rig,
      mount_id bigint references mount,
      state text not null check (state in ('draft', 'queued', 'running', 'held', 'finished', 'stopped', 'failed')),
      origin text not null default 'protocol' check (origin in ('protocol', 'import')),
      priority integer not null default 0 check (priority between -100 and 100),
      start_at timestamptz,
      created_by bigint references person,
      created_at timestamptz not null,
      queued_at timestamptz,
      started_at timestamptz,
      started_clock timestamptz,
      ended_at timestamptz,
      ended_clock timestamptz,
      end_text text,
      cursor jsonb,
      cursor_text text,
      parking text not null default 'none' check (parking in ('none', 'wanted', 'running', 'parked')),
      set_aside boolean not null default false,
      needs_advance boolean not null default false,
      planned jsonb,
      check (origin = 'import' or (protocol_version_id is not null and sensor_id is not null and rig_id is not null)),
      check ((state in ('finished', 'stopped', 'failed')) = (ended_at is not null)),
      check (state in ('draft', 'queued') or origin = 'import' or (started_at is not null and cursor is not null)
             or state in ('stopped', 'failed')),
      unique (rig_id, rig_number)
    );
    create unique index campaign_on_rig on campaign (rig_id)
      where origin = 'protocol' and not set_aside and (state in ('running', 'held') or parking in ('wanted', 'running'));
    comment on column campaign.parking is 'wanted: as soon as the step in hand is over; running: park steps go out although the campaign is held or stopped';
    create index campaign_queue on campaign (rig_id, priority desc, queued_at) where state = 'queued';
    create index campaign_advance on campaign (id) where needs_advance;
    create index campaign_state on campaign (state, started_at desc);
    create index campaign_sensor on campaign (sensor_id);

    create function refuse_started_delete() returns trigger language plpgsql as $$
    begin
      if old.started_at is not null then
        raise exception 'A started campaign is never deleted' using errcode = 'restrict_violation';
      end if;
      return old;
    end $$;
    create trigger campaign_is_kept before delete on campaign for each row execute function refuse_started_delete();

    create table campaign_slot (
      campaign_id bigint not null references campaign on delete cascade,
      slot text not null,
      port integer not null,
      lot_id bigint not null references lot,
      primary key (campaign_id, slot),
      unique (campaign_id, port)
    );

    create table caution_acknowledgement (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      code text not null,
      message text not null,
      person_id bigint not null references person,
      at timestamptz not null,
      unique (campaign_id, code)
    );

    create table hold (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      reason text not null check (reason in ('person', 'task', 'limit', 'failure', 'silence', 'takeOver', 'setAside')),
      text text not null,
      opened_by bigint references person,
      opened_at timestamptz not null,
      opened_clock timestamptz,
      released_by bigint references person,
      released_at timestamptz,
      released_clock timestamptz,
      check (released_at >= opened_at)
    );
    create index hold_campaign on hold (campaign_id, opened_at);
    create unique index hold_open_once on hold (campaign_id, reason)
      where released_at is null and reason in ('person', 'silence', 'takeOver', 'setAside');
    create index hold_open on hold (campaign_id) where released_at is null;

    create table amendment (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      from_sequence integer not null,
      from_version_id bigint not null references protocol_version,
      to_version_id bigint not null references protocol_version,
      cursor_before jsonb not null,
      cursor_after jsonb not null,
      why text not null,
      person_id bigint not null references person,
      at timestamptz not null
    );

    create table campaign_event (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign on delete cascade,
      at timestamptz not null,
      clock timestamptz,
      kind text not null,
      who text not null,
      text text not null,
      sequence integer,
      reading_index integer
    );
    create index campaign_event_campaign on campaign_event (campaign_id, id desc);

    create table campaign_note (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      person_id bigint not null references person,
      text text not null check (length(text) between 1 and 5000),
      at timestamptz not null
    );
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop table campaign_note, campaign_event, amendment, hold, caution_acknowledgement, campaign_slot, campaign, protocol_version, protocol;
    drop function refuse_started_delete();
  `);
}
