import type { QueryInterface } from "sequelize";

/**
 * Earlier data: files taken in whole, read by any worker, and the campaigns made of them.
 *
 * A step of an imported campaign has no rig, no protocol version and no cursor; the database knows by the origin it shares with
 * its campaign that it may. Air references without a mount have a baseline of their own.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    alter table campaign
      add constraint campaign_id_origin unique (id, origin),
      add constraint campaign_import_is_whole check (origin = 'protocol' or state = 'finished');

    alter table step
      add column origin text not null default 'protocol',
      alter column rig_id drop not null,
      alter column protocol_version_id drop not null,
      alter column cursor drop not null,
      drop constraint step_campaign_id_fkey,
      add constraint step_campaign_fkey foreign key (campaign_id, origin) references campaign (id, origin),
      add constraint step_of_protocol check (origin = 'import' or (rig_id is not null and protocol_version_id is not null and cursor is not null)),
      add constraint step_of_import check (origin = 'protocol' or (rig_id is null and kind = 'measure' and state = 'done'));

    alter table baseline alter column mount_id drop not null;

    create table import_run (
      id bigint generated always as identity primary key,
      name text not null check (length(name) between 1 and 200),
      sensor_id bigint references sensor,
      file_name text not null check (length(file_name) between 1 and 255),
      size_bytes bigint not null default 0 check (size_bytes >= 0),
      sha256 bytea check (length(sha256) = 32),
      mapping jsonb not null,
      format jsonb not null,
      state text not null check (state in ('receiving', 'waiting', 'running', 'done', 'refused', 'cancelled')),
      reserved_campaign_id bigint unique,
      campaign_id bigint unique references campaign,
      read_bytes bigint not null default 0,
      rows_read integer not null default 0,
      rows_stored integer not null default 0,
      phases integer not null default 0,
      problem jsonb,
      cancel_wanted boolean not null default false,
      created_by bigint not null references person,
      created_at timestamptz not null,
      started_at timestamptz,
      ended_at timestamptz,
      check ((state = 'done') = (campaign_id is not null)),
      check (campaign_id = reserved_campaign_id),
      check (state = 'receiving' or (sha256 is not null and reserved_campaign_id is not null)),
      check ((state in ('done', 'refused', 'cancelled')) = (ended_at is not null)),
      check ((state = 'refused') = (problem is not null))
    );
    create unique index import_run_file on import_run (sha256) where state in ('waiting', 'running', 'done');
    create index import_run_newest on import_run (created_at desc, id desc);
    create index import_run_open on import_run (id) where state in ('receiving', 'waiting', 'running');
    comment on column import_run.reserved_campaign_id is 'The id that the campaign will have: it exists when the import is done, not before';
    comment on column import_run.problem is 'Why it was refused, as the caller was told: detail, errors, rows';

    create table import_chunk (
      import_run_id bigint not null references import_run on delete cascade,
      n integer not null check (n >= 0),
      bytes bytea not null,
      primary key (import_run_id, n)
    );
    alter table import_chunk alter column bytes set storage external;
    comment on table import_chunk is 'The file as it came, until its import has ended: any worker can take it, without a disk in common';
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop table import_chunk, import_run;
    delete from baseline where mount_id is null;
    alter table baseline alter column mount_id set not null;
    alter table step
      drop constraint step_of_import,
      drop constraint step_of_protocol,
      drop constraint step_campaign_fkey,
      add constraint step_campaign_id_fkey foreign key (campaign_id) references campaign,
      alter column rig_id set not null,
      alter column protocol_version_id set not null,
      alter column cursor set not null,
      drop column origin;
    alter table campaign drop constraint campaign_import_is_whole, drop constraint campaign_id_origin;
  `);
}
