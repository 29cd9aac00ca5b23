import type { QueryInterface } from "sequelize";

/** Rigs, the agents that drive them, sensors with their mounts, liquids with their lots, and bottles on ports. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    create table rig (
      id bigint generated always as identity primary key,
      name text not null unique check (length(name) between 1 and 200),
      time_zone text not null,
      clock text not null default 'real' check (clock in ('real', 'simulated')),
      ports integer not null check (ports between 0 and 99),
      waste_capacity_ml double precision check (waste_capacity_ml > 0),
      waste_ml double precision not null default 0 check (waste_ml >= 0),
      abilities jsonb,
      agent_state text check (agent_state in ('idle', 'working', 'fault')),
      agent_message text,
      temperature_c double precision,
      last_contact_at timestamptz,
      reported_clock timestamptz,
      clock_offset_ms double precision,
      campaigns_started integer not null default 0,
      created_at timestamptz not null,
      retired_at timestamptz
    );
    comment on column rig.reported_clock is 'Last clock that the agent reported: protocol time of a simulated rig; never goes back';

    create table agent_token (
      id bigint generated always as identity primary key,
      rig_id bigint not null references rig,
      name text not null check (length(name) between 1 and 200),
      token_hash bytea not null unique,
      last4 text not null,
      created_by bigint references person,
      created_at timestamptz not null,
      last_used_at timestamptz,
      revoked_at timestamptz
    );
    create index agent_token_rig on agent_token (rig_id);

    create table agent_session (
      id bigint generated always as identity primary key,
      rig_id bigint not null references rig,
      agent_token_id bigint not null references agent_token,
      session text not null unique,
      agent_name text not null,
      agent_version text not null,
      instance text,
      repeatable text[] not null default '{}',
      started_at timestamptz not null,
      last_seen_at timestamptz not null,
      ended_at timestamptz
    );
    create unique index agent_session_open on agent_session (rig_id) where ended_at is null;

    create table heartbeat (
      id bigint generated always as identity primary key,
      rig_id bigint not null references rig,
      at timestamptz not null,
      clock timestamptz not null,
      offset_ms double precision,
      state text not null,
      step_id bigint,
      temperature_c double precision,
      waste_ml double precision,
      message text
    );
    create index heartbeat_rig on heartbeat (rig_id, at desc);

    create table maintenance_window (
      id bigint generated always as identity primary key,
      rig_id bigint not null references rig,
      period tstzrange not null check (not isempty(period)),
      why text not null,
      created_by bigint not null references person,
      created_at timestamptz not null,
      withdrawn_at timestamptz,
      exclude using gist (rig_id with =, period with &&) where (withdrawn_at is null)
    );

    create table sensor (
      id bigint generated always as identity primary key,
      serial text not null unique check (length(serial) between 1 and 100),
      kind text not null check (kind in ('wire', 'tube', 'fork', 'plate')),
      readout text not null default 'velocity' check (readout in ('velocity', 'displacement')),
      nominal_f0_hz double precision not null check (nominal_f0_hz > 0),
      nominal_q double precision not null check (nominal_q > 0),
      radius_m double precision check (radius_m > 0),
      note text,
      created_at timestamptz not null,
      retired_at timestamptz
    );

    create table mount (
      id bigint generated always as identity primary key,
      sensor_id bigint not null references sensor,
      rig_id bigint not null references rig,
      position integer not null default 1 check (position between 1 and 99),
      period tstzrange not null check (not isempty(period) and lower(period) is not null),
      mounted_by bigint references person,
      ended_by bigint references person,
      note text,
      created_at timestamptz not null,
      exclude using gist (sensor_id with =, period with &&),
      exclude using gist (rig_id with =, position with =, period with &&)
    );

    create table liquid (
      id bigint generated always as identity primary key,
      name text not null unique check (length(name) between 1 and 200),
      letter text not null unique check (letter ~ '^[A-Z][A-Z0-9]?$'),
      model text not null,
      mass_fraction double precision check (mass_fraction between 0 and 1),
      property_table jsonb,
      ghs text[] not null default '{}',
      flash_point_c double precision,
      waste text,
      not_with text[] not null default '{}',
      created_at timestamptz not null,
      retired_at timestamptz
    );

    create table lot (
      id bigint generated always as identity primary key,
      liquid_id bigint not null references liquid,
      code text not null check (length(code) between 1 and 100),
      received_at timestamptz,
      expires_at timestamptz,
      certificate jsonb not null default '[]',
      created_at timestamptz not null,
      unique (liquid_id, code)
    );

    create table attachment (
      id bigint generated always as identity primary key,
      lot_id bigint references lot,
      sensor_id bigint references sensor,
      name text not null,
      media_type text not null,
      content bytea not null,
      sha256 bytea not null,
      added_by bigint not null references person,
      added_at timestamptz not null,
      check (num_nonnulls(lot_id, sensor_id) = 1)
    );

    create table load (
      id bigint generated always as identity primary key,
      rig_id bigint not null references rig,
      port integer not null check (port between 1 and 99),
      lot_id bigint not null references lot,
      volume_ml double precision not null check (volume_ml > 0),
      how text not null check (how in ('replace', 'topUp')),
      loaded_by bigint references person,
      loaded_at timestamptz not null
    );
    create index load_port on load (rig_id, port, loaded_at desc);

    create table port (
      rig_id bigint not null references rig,
      number integer not null check (number between 1 and 99),
      load_id bigint references load,
      remaining_ml double precision not null default 0 check (remaining_ml >= 0),
      primary key (rig_id, number)
    );
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop table port, load, attachment, lot, liquid, mount, sensor, maintenance_window, heartbeat, agent_session, agent_token, rig;
  `);
}
