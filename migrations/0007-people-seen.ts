import type { QueryInterface } from "sequelize";

/** When a person was last here. Null for whoever has not been since, so that nothing is made up for the past; the column adds no scan. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`alter table person add column seen_at timestamptz`);
}

export async function down({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`alter table person drop column seen_at`);
}
