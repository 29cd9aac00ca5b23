import type { QueryInterface } from "sequelize";

/** A campaign fitted again: how far it is, what limits would have said of it, and who asked. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    alter table fit_run
      add column state text not null default 'ready' check (state in ('waiting', 'ready', 'cancelled')),
      add column total integer not null default 0 check (total >= 0),
      add column done integer not null default 0 check (done >= 0),
      add column why text check (length(why) between 1 and 2000),
      add column finished_at timestamptz,
      add column found jsonb not null default '[]',
      add check (not current or state = 'ready');
    create index fit_run_waiting on fit_run (id) where state = 'waiting';
    comment on column fit_run.found is 'Limits that its values break where the run of that time kept them; they become alarms "found on refit" when it is made current';
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop index fit_run_waiting;
    alter table fit_run drop column state, drop column total, drop column done, drop column why, drop column finished_at, drop column found;
  `);
}
