import type { QueryInterface } from "sequelize";

/** Steps with their leases, phases, readings with their raw sweeps, fits and what is made of them. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    create table step (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      rig_id bigint not null references rig,
      sequence integer not null check (sequence >= 1),
      block_id text not null,
      protocol_version_id bigint not null references protocol_version,
      kind text not null check (kind in ('measure', 'fill', 'drain', 'rinse', 'dry', 'settle', 'wait', 'ask')),
      role text check (role in ('reference', 'check', 'sample', 'find')),
      medium text,
      slot text,
      set_point_c double precision,
      cycle integer not null,
      label text not null,
      detour text,
      params jsonb not null,
      mount_id bigint references mount,
      load_id bigint references load,
      state text not null check (state in ('ready', 'out', 'done', 'failed', 'skipped')),
      cursor jsonb not null,
      attempt integer not null default 0,
      empty_attempts integer not null default 0,
      stored integer not null default 0,
      stored_at_issue integer not null default 0,
      progressed boolean not null default false,
      lease text,
      lease_expires_at timestamptz,
      done jsonb,
      failure jsonb,
      due_at timestamptz,
      created_at timestamptz not null,
      given_at timestamptz,
      closed_at timestamptz,
      started_clock timestamptz,
      ended_clock timestamptz,
      unique (campaign_id, sequence),
      check ((kind = 'measure') = (medium is not null and role is not null)),
      check (state <> 'out' or (lease is not null and kind not in ('wait', 'ask'))),
      check ((state in ('done', 'failed', 'skipped')) = (closed_at is not null))
    );
    create unique index step_out on step (rig_id) where state = 'out';
    create unique index step_open on step (campaign_id) where state in ('ready', 'out');
    create index step_track on step (mount_id, medium, set_point_c, id desc) where kind = 'measure';
    create index step_due on step (due_at) where kind = 'wait' and state = 'ready';
    comment on column step.progressed is 'Heartbeats told of a physical act going on since it was last given out';
    comment on column step.empty_attempts is 'Attempts in a row that stored nothing new; maxAttempts counts these';

    create index step_rig_open on step (rig_id) where state in ('ready', 'out');

    create table step_lease (
      lease text primary key,
      ordinal bigint generated always as identity,
      step_id bigint not null references step,
      rig_id bigint not null references rig,
      agent_session_id bigint references agent_session,
      given_at timestamptz not null
    );
    create index step_lease_step on step_lease (step_id, ordinal desc);

    create table phase (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      step_id bigint not null unique references step,
      sequence integer not null,
      cycle integer not null,
      medium text not null,
      role text not null check (role in ('reference', 'check', 'sample')),
      set_point_c double precision,
      mount_id bigint references mount,
      load_id bigint references load,
      liquid_id bigint references liquid,
      readout text not null check (readout in ('velocity', 'displacement')),
      repeats integer not null,
      discard integer not null default 0,
      started_at timestamptz,
      ended_at timestamptz,
      closed_at timestamptz,
      unique (campaign_id, sequence)
    );
    create index phase_series on phase (campaign_id, medium, sequence);

    create table reading (
      step_id bigint not null references step,
      idx integer not null check (idx >= 0),
      taken_at timestamptz not null,
      at timestamptz not null,
      received_at timestamptz not null,
      duration_s double precision,
      temperature_c double precision,
      pressure_pa double precision,
      humidity_percent double precision,
      kind smallint not null,
      flags smallint not null default 0,
      content_hash bytea not null,
      primary key (step_id, idx)
    );
    comment on column reading.at is 'Rig time: taken_at brought to the server clock by the offset measured at heartbeats';
    comment on column reading.kind is '1 complex sweep, 2 magnitude sweep, 3 ring-down, 4 fitted on the rig';

    create table sweep (
      step_id bigint not null,
      idx integer not null,
      start_hz double precision,
      stop_hz double precision,
      points integer not null,
      data bytea not null,
      primary key (step_id, idx),
      foreign key (step_id, idx) references reading
    );
    alter table sweep alter column data set storage external;
    comment on column sweep.data is 'Little-endian float64: even complex re[n] im[n]; even magnitude m[n]; uneven grids put f[n] first (start_hz null); ring-down volts[n] with start_hz = sampleHz, stop_hz = startS; rig-fitted f0Hz q f0StdHz qStd amplitudeV';
    create trigger sweep_is_record before update or delete on sweep for each row execute function refuse_change();

    create table fit_run (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      settings jsonb not null,
      code_version text not null,
      current boolean not null,
      created_by bigint references person,
      created_at timestamptz not null
    );
    create unique index fit_run_current on fit_run (campaign_id) where current;

    create table fit (
      fit_run_id bigint not null references fit_run,
      step_id bigint not null,
      idx integer not null,
      f0_hz double precision,
      q double precision,
      f0_std_hz double precision,
      q_std double precision,
      f0_q_covariance double precision,
      amplitude_v double precision,
      noise_v double precision,
      flags smallint not null,
      primary key (fit_run_id, step_id, idx),
      foreign key (step_id, idx) references reading
    );

    create table track (
      mount_id bigint not null references mount,
      medium text not null,
      set_point_c double precision,
      f0_hz double precision not null check (f0_hz > 0),
      q double precision not null check (q > 0),
      step_id bigint not null references step,
      unique nulls not distinct (mount_id, medium, set_point_c)
    );
    comment on table track is 'The last good fit by mount, medium and set-point: what the next sweep is centred on';

    create table phase_summary (
      phase_id bigint not null references phase,
      fit_run_id bigint not null references fit_run,
      n integer not null,
      n_used integer not null,
      unusable integer not null,
      f0_mean double precision,
      f0_sd double precision,
      f0_u double precision,
      f0_r1 double precision,
      q_mean double precision,
      q_sd double precision,
      q_u double precision,
      q_r1 double precision,
      temperature_mean double precision,
      temperature_sd double precision,
      pressure_mean double precision,
      flag_counts jsonb not null default '{}',
      columns bytea not null,
      made_at timestamptz not null,
      primary key (phase_id, fit_run_id)
    );
    alter table phase_summary alter column columns set storage external;
    comment on column phase_summary.columns is 'The repeats in compact columns, little-endian: at float64[n] ms, f0 float64[n], q float64[n], f0Std float64[n], temperature float64[n], idx int32[n], flags uint16[n], leftOut uint8[n]; see lib/phases/columns.ts';

    create table exclusion (
      id bigint generated always as identity primary key,
      step_id bigint not null,
      idx integer not null,
      person_id bigint not null references person,
      at timestamptz not null,
      why text not null check (length(why) between 1 and 2000),
      undone_by bigint references person,
      undone_at timestamptz,
      foreign key (step_id, idx) references reading
    );
    create unique index exclusion_open on exclusion (step_id, idx) where undone_at is null;

    create table baseline (
      id bigint generated always as identity primary key,
      campaign_id bigint not null references campaign,
      mount_id bigint not null references mount,
      set_point_c double precision,
      readout text not null,
      fit_run_id bigint not null references fit_run,
      f0_hz double precision not null,
      q double precision not null,
      n integer not null check (n >= 1),
      complete_at timestamptz,
      unique nulls not distinct (campaign_id, mount_id, set_point_c, readout, fit_run_id)
    );
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop table baseline, exclusion, phase_summary, track, fit, fit_run, sweep, reading, phase, step_lease, step;
  `);
}
