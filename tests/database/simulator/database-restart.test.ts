import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { afterAll, beforeAll, expect, test } from "vitest";
import { startFastPath } from "@/jobs/fast-path";
import { rows, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { freePort } from "@/scripts/lib/ports.mjs";
import { startPostgres } from "@/scripts/lib/postgres.mjs";
import { migrate } from "@/scripts/migrate";
import { sleep } from "@/rig-simulator/clock";
import { serveAgentRoutes } from "./agent-routes";
import { runCampaign } from "./run-campaign";

const home = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-restart-"));
let cluster: Awaited<ReturnType<typeof startPostgres>>;
let server: Awaited<ReturnType<typeof serveAgentRoutes>>;
let stopFastPath: () => Promise<void>;

// The test ends its server, so it has one of its own.
beforeAll(async () => {
  cluster = await startPostgres({ directory: home, port: await freePort(), durable: false });
  process.env.DATABASE_URL = cluster.urlOf("postgres");
  await migrate(process.env.DATABASE_URL);
  server = await serveAgentRoutes();
  stopFastPath = await startFastPath({ onError: () => {}, onMail: async () => {}, onRefit: async () => {}, onImport: async () => {}, onAdvanced: async () => {} });
});
afterAll(async () => {
  await server.stop();
  await stopFastPath();
  await listener().close();
  await sequelize.close();
  await cluster.stop();
  fs.rmSync(home, { recursive: true, force: true });
});

test("PostgreSQL stopped and started again under a running campaign: it ends as the undisturbed one, every repeat once", { timeout: 90_000 }, async () => {
  const calm = await runCampaign(server.url);
  expect(calm.state).toBe("finished");

  let restarts = 0;
  const disturbed = await runCampaign(server.url, {
    rig: { repeatable: ["fill", "rinse", "drain", "dry"] },
    beside: async ({ campaignId }, signal) => {
      for (const sequence of [3, 6, 10]) {
        while (!(await hasComeTo(campaignId, sequence))) await sleep(20, signal);
        await cluster.stop();
        await sleep(100, signal);
        await cluster.startAgain();
        restarts++;
      }
    },
  });
  expect(restarts).toBe(3);
  expect(disturbed).toEqual(calm);
});

const hasComeTo = async (campaignId: string, sequence: number): Promise<boolean> =>
  (await rows(`select id from step where campaign_id = $1 and sequence >= $2`, [campaignId, sequence]).catch(() => [])).length > 0;
