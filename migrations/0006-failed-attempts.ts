import type { QueryInterface } from "sequelize";

/** Failed attempts of a step, for the limit on how many may fail in a row: `empty_attempts` starts anew whenever readings came. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`alter table step add column failed_attempts integer not null default 0 check (failed_attempts >= 0);`);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`alter table step drop column failed_attempts;`);
}
