import type { QueryInterface } from "sequelize";

/**
 * Phases as plots draw them, and the newest answer to what people ask of a campaign's analysis: a page about a million repeats
 * reads a few hundred kilobytes of these instead of 47 MB of columns.
 *
 * The new columns of `phase_summary` are null for phases closed before; those are read from their columns until the worker has
 * filled them in, so the table is changed without a scan.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    alter table phase_summary
      add column digest bytea,
      add column earliest_at timestamptz,
      add column latest_at timestamptz,
      add column course double precision[];
    comment on column phase_summary.digest is 'SHA-256 of columns: equal digests are equal repeats';
    comment on column phase_summary.earliest_at is 'Least and greatest time of all its repeats, those left out included';
    comment on column phase_summary.course is 'f0 in Hz over the whole phase, those left out included: means of at most 24 equal parts, null where a part has no fit';
    create index phase_summary_unfilled on phase_summary (phase_id, fit_run_id) where digest is null;

    create table phase_level (
      fit_run_id bigint not null,
      phase_id bigint not null,
      quantity text not null check (quantity in ('f0', 'q', 'temperature')),
      parts integer not null check (parts >= 1),
      buckets bytea not null,
      primary key (fit_run_id, quantity, parts, phase_id),
      foreign key (phase_id, fit_run_id) references phase_summary on delete cascade
    );
    alter table phase_level alter column buckets set storage external;
    comment on table phase_level is 'The repeats of a closed phase that are not left out, in at most so many parts';
    comment on column phase_level.buckets is 'Little-endian: from ms float64[n], to ms float64[n], min float64[n], max float64[n], mean float64[n], count float64[n]; see lib/phases/buckets.ts';

    create table analysis_result (
      campaign_id bigint not null references campaign on delete cascade,
      question_hash bytea not null,
      question json not null,
      code bytea not null,
      content bytea not null,
      answer json not null,
      made_at timestamptz not null,
      asked_at timestamptz not null,
      primary key (campaign_id, question_hash)
    );
    create index analysis_result_asked on analysis_result (asked_at);
    comment on column analysis_result.content is 'SHA-256 of all that the answer was made from; an answer with another content is out of date';
    comment on column analysis_result.code is 'SHA-256 of the program that made it';
  `);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
    drop table analysis_result, phase_level;
    drop index phase_summary_unfilled;
    alter table phase_summary drop column digest, drop column earliest_at, drop column latest_at, drop column course;
  `);
}
