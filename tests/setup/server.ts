import pg from "pg";

/** The address of another database on the same server. */
export function urlOf(serverUrl: string, database: string): string {
  const url = new URL(serverUrl);
  url.pathname = `/${database}`;
  return url.href;
}

export async function createDatabase(serverUrl: string, name: string, template?: string): Promise<void> {
  await onServer(serverUrl, `CREATE DATABASE "${name}"${template ? ` TEMPLATE "${template}"` : ""}`);
}

export async function dropDatabase(serverUrl: string, name: string): Promise<void> {
  await onServer(serverUrl, `DROP DATABASE IF EXISTS "${name}" WITH (FORCE)`);
}

async function onServer(serverUrl: string, sql: string): Promise<void> {
  const client = new pg.Client({ connectionString: serverUrl });
  await client.connect();
  try {
    await client.query(sql);
  } finally {
    await client.end();
  }
}
