import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import type { TestProject } from "vitest/node";
import { migrate } from "@/scripts/migrate";
import { freePort } from "@/scripts/lib/ports.mjs";
import { startPostgres } from "@/scripts/lib/postgres.mjs";
import { createDatabase, dropDatabase, urlOf } from "./server";

declare module "vitest" {
  interface ProvidedContext {
    /** Address of the server's own database, and the name of the migrated one to copy. */
    postgres: { serverUrl: string; template: string };
  }
}

/** One PostgreSQL for the whole run, with a migrated database that each test file copies. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const server = await testServer();
  const template = `longreed_template_${process.pid}`;
  try {
    await createDatabase(server.url, template);
    await migrate(urlOf(server.url, template));
  } catch (error) {
    await server.stop();
    throw error;
  }
  project.provide("postgres", { serverUrl: server.url, template });

  return async () => {
    await dropDatabase(server.url, template);
    await server.stop();
  };
}

/** The server given by LONGREED_TEST_DATABASE_URL, or one of our own in a temporary folder. */
export async function testServer(): Promise<{ url: string; stop: () => Promise<void> }> {
  const given = process.env.LONGREED_TEST_DATABASE_URL;
  if (given) return { url: given, stop: async () => undefined };

  const home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-test-"));
  const cluster = await startPostgres({ directory: home, port: await freePort(), durable: false });
  return {
    url: cluster.urlOf("postgres"),
    async stop() {
      await cluster.stop();
      fs.rmSync(home, { recursive: true, force: true });
    },
  };
}
