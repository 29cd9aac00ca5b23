import { randomUUID } from "node:crypto";
import { afterAll, inject } from "vitest";
import { createDatabase, dropDatabase, urlOf } from "./server";

const { serverUrl, template } = inject("postgres");
const name = `longreed_${randomUUID().replaceAll("-", "")}`;
await createDatabase(serverUrl, name, template);
process.env.DATABASE_URL = urlOf(serverUrl, name);
process.env.AUTH_SECRET = "a secret of the tests, of no use elsewhere";
process.env.APP_URL = "https://longreed.example";
process.env.SMTP_URL = "smtp://127.0.0.1:1";

// Hooks run last to first: the test file has closed its own connections by then.
afterAll(() => dropDatabase(serverUrl, name));

/**
 * The address of the migrated, empty database of this test file. The file is loaded before each test file of the
 * project, so that DATABASE_URL names this database before any model is imported; it is dropped at the end.
 */
export function testDatabase(): { url: string } {
  return { url: urlOf(serverUrl, name) };
}
