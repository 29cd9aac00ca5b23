import type { QueryInterface } from "sequelize";

/** What needs a person: alarms, tasks, and the mail that tells of them. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    create table alarm (
      id bigint generated always as identity primary key,
      campaign_id bigint references campaign,
      rig_id bigint not null references rig,
      sensor_id bigint references sensor,
      source text not null check (source in ('limit', 'system')),
      limit_id text,
      kind text not null,
      state text not null check (state in ('unacknowledged', 'acknowledged', 'returned', 'cleared')),
      shelved_until timestamptz,
      opened_at timestamptz not null,
      opened_clock timestamptz,
      phase_id bigint references phase,
      step_id bigint references step,
      fit_run_id bigint references fit_run,
      value double precision,
      limit_value double precision,
      unit text,
      text text not null,
      action_text text,
      found_on_refit boolean not null default false,
      acknowledged_by bigint references person,
      acknowledged_at timestamptz,
      returned_at timestamptz,
      cleared_by bigint references person,
      cleared_at timestamptz,
      clear_note text,
      check ((source = 'limit') = (limit_id is not null)),
      check ((state = 'cleared') = (cleared_at is not null))
    );
    create unique index alarm_open_limit on alarm (campaign_id, limit_id) where state <> 'cleared' and source = 'limit';
    create unique index alarm_open_system on alarm (rig_id, kind) where state <> 'cleared' and source = 'system';
    create index alarm_list on alarm (state, opened_at desc);
    create index alarm_campaign on alarm (campaign_id, opened_at);

    create table alarm_event (
      id bigint generated always as identity primary key,
      alarm_id bigint not null references alarm,
      at timestamptz not null,
      kind text not null,
      who text not null,
      text text not null
    );
    create index alarm_event_alarm on alarm_event (alarm_id, id);

    create table operator_task (
      id bigint generated always as identity primary key,
      rig_id bigint not null references rig,
      campaign_id bigint references campaign,
      step_id bigint references step,
      hold_id bigint references hold,
      kind text not null check (kind in ('ask', 'mount', 'load', 'waste', 'look', 'lot', 'other')),
      instruction text not null,
      urgency text not null default 'normal' check (urgency in ('low', 'normal', 'high')),
      port integer,
      state text not null check (state in ('open', 'answered', 'withdrawn')),
      created_at timestamptz not null,
      due_at timestamptz,
      answer text check (answer in ('done', 'cannot')),
      note text,
      answered_by bigint references person,
      answered_at timestamptz,
      check ((state = 'answered') = (answer is not null))
    );
    create index operator_task_open on operator_task (rig_id, created_at) where state = 'open';
    create index operator_task_campaign on operator_task (campaign_id);

    create table notification (
      id bigint generated always as identity primary key,
      alarm_id bigint references alarm,
      operator_task_id bigint references operator_task,
      campaign_id bigint references campaign,
      person_id bigint not null references person,
      kind text not null,
      address text not null,
      subject text not null,
      body_text text not null,
      body_html text not null,
      state text not null check (state in ('waiting', 'sent', 'failed')),
      tries integer not null default 0,
      error text,
      created_at timestamptz not null,
      sent_at timestamptz,
      unique nulls not distinct (alarm_id, operator_task_id, campaign_id, person_id, kind)
    );
    create index notification_waiting on notification (id) where state = 'waiting';
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`drop table notification, operator_task, alarm_event, alarm;`);
}
