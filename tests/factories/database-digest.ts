import { row, rows } from "@/lib/db";

/** When somebody was here, or a token last used, is noted with every call and is no part of what a call changes. */
const NOTED_WITH_EVERY_CALL: Readonly<Record<string, string>> = { person: "seen_at", access_token: "last_used_at", agent_token: "last_used_at" };

let query: string | undefined;

/** One text that differs as soon as any row of any table does. */
export async function databaseDigest(): Promise<string> {
  query ??= await digestQuery();
  return (await row<{ digest: string }>(query))?.digest ?? "";
}

async function digestQuery(): Promise<string> {
  const tables = await rows<{ name: string }>("select table_name as name from information_schema.tables where table_schema = 'public' and table_type = 'BASE TABLE' order by 1");
  const digests = tables.map(({ name }) => {
    const text = NOTED_WITH_EVERY_CALL[name] ? `(to_jsonb(t) - '${NOTED_WITH_EVERY_CALL[name]}')::text` : "t::text";
    return `(select count(*) || ':' || coalesce(sum(hashtextextended(${text}, 0)), 0) from "${name}" t)`;
  });
  return `select concat_ws(' ', ${digests.join(", ")}) as digest`;
}

/** Gives every table ids from a range of its own, so that the id of one thing never happens to be that of another. */
export async function partIds(): Promise<void> {
  const sequences = await rows<{ name: string }>("select relname as name from pg_class where relkind = 'S' and relnamespace = 'public'::regnamespace order by 1");
  for (const [i, { name }] of sequences.entries()) await rows(`select setval('"${name}"', ${(i + 1) * 1_000_000})`);
}

/** An id of something in each table that has any, by table. */
export async function oneIdOfEach(): Promise<Map<string, string>> {
  const tables = await rows<{ name: string }>("select table_name as name from information_schema.columns where table_schema = 'public' and column_name = 'id' and data_type = 'bigint' order by 1");
  const found = new Map<string, string>();
  for (const { name } of tables) {
    const one = await row<{ id: string | null }>(`select max(id)::text as id from "${name}"`);
    if (one?.id) found.set(name, one.id);
  }
  return found;
}
