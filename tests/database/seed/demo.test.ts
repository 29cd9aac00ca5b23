import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { startFastPath } from "@/jobs/fast-path";
import { row, rows, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { passwordMatches } from "@/lib/people/password";
import { anchorOf } from "@/scripts/seed/anchor";
import { seedDemo } from "@/scripts/seed/demo";
import { Kept } from "@/scripts/seed/kept";
import { begin, end, readMarker } from "@/scripts/seed/marker";
import { Progress } from "@/scripts/seed/progress";
import { runCampaign, type Standing } from "@/scripts/seed/run-campaign";
import { type DemoLaboratory, setUp } from "@/scripts/seed/set-up";
import { buildPerson } from "../../factories/person";
import { serveAgentRoutes } from "../simulator/agent-routes";

const begunAt = new Date("2026-05-14T13:20:00Z");
const anchor = anchorOf(begunAt);
const password = "a common password of the tests";

let dataFolder: string;
let kept: Kept;
let server: Awaited<ReturnType<typeof serveAgentRoutes>>;
let stopFastPath: () => Promise<void>;
const errors: unknown[] = [];

beforeAll(async () => {
  dataFolder = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-seed-"));
  kept = new Kept(dataFolder);
  server = await serveAgentRoutes();
  stopFastPath = await startFastPath({ onError: (_, error) => errors.push(error), onMail: async () => {}, onRefit: async () => {}, onImport: async () => {}, onAdvanced: async () => {} });
});
afterAll(async () => {
  await server.stop();
  await stopFastPath();
  await listener().close();
  await sequelize.close();
  fs.rmSync(dataFolder, { recursive: true });
});

/** How many rows there are of what a seeding makes, the audit log included: a second one may add nothing. */
async function counts(): Promise<Record<string, number>> {
  const tables = ["person", "rig", "port", "load", "liquid", "lot", "sensor", "mount", "agent_token", "protocol", "protocol_version", "campaign", "campaign_slot", "audit_event"];
  const found = await Promise.all(tables.map((table) => row<{ n: number }>(`select count(*)::int as n from ${table}`)));
  return Object.fromEntries(tables.map((table, i) => [table, found[i]?.n ?? 0]));
}

const modeOf = (name: string) => fs.statSync(path.join(dataFolder, name)).mode & 0o777;

describe("a database that is somebody's own", () => {
  it("is refused while it holds people whom the demo did not make, and left as it was", async () => {
    const { id, email } = await buildPerson();
    await expect(seedDemo({ password, dataFolder, url: server.url, say: () => undefined })).rejects.toThrow(email);
    expect(await readMarker()).toBeUndefined();
    expect(await counts()).toMatchObject({ person: 1, rig: 0, liquid: 0 });
    await row(`delete from person where id = $1 returning id`, [id]);
  });
});

describe("setting up", () => {
  let laboratory: DemoLaboratory;
  beforeEach(async () => {
    laboratory = await setUp({ password, kept, anchor });
  });

  it("makes an account of every role with the common password, three rigs, five sensors, four protocols and a campaign on each rig", async () => {
    const people = await rows<{ email: string; role: string; hash: string }>(`select email, role, password_hash as hash from person order by id`);
    expect(people.map(({ email, role }) => [email, role])).toEqual(["administrator", "researcher", "operator", "viewer"].map((role) => [`${role}@longreed.example`, role]));
    for (const { hash } of people) expect(await passwordMatches(hash, password)).toBe(true);
    expect(await counts()).toMatchObject({ rig: 3, port: 9, load: 9, liquid: 5, sensor: 5, mount: 3, protocol: 4, campaign: 3 });
    const queued = await rows<{ state: string }>(`select state from campaign`);
    expect(queued.every(({ state }) => state === "queued")).toBe(true);
  });

  it("acknowledges every caution in the researcher's name", async () => {
    const words = await rows<{ name: string; message: string }>(
      `select p.name, a.message from caution_acknowledgement a join person p on p.id = a.person_id where a.campaign_id = $1`,
      [laboratory.campaigns.north],
    );
    expect(words.map(({ message }) => message).join()).toContain("2-Propanol is flammable");
    expect(new Set(words.map(({ name }) => name))).toEqual(new Set(["M. Tollan"]));
  });

  it("adds nothing when all is there, and keeps tokens to its owner", async () => {
    const before = await counts();
    const again = await setUp({ password, kept, anchor });
    expect(await counts()).toEqual(before);
    expect(again.rigs).toEqual(laboratory.rigs);
    expect(modeOf("demo-tokens.json")).toBe(0o600);
  });

  it("takes a new token where the data folder lost the old one, which is withdrawn", async () => {
    fs.rmSync(path.join(dataFolder, "demo-tokens.json"));
    const again = await setUp({ password, kept, anchor });
    expect(again.rigs.north.token).not.toBe(laboratory.rigs.north.token);
    const valid = await rows(`select id from agent_token where revoked_at is null`);
    expect(valid).toHaveLength(3);
  });

  it("measures on where it was interrupted, every repeat once, until the campaign asks for a person", { timeout: 120_000 }, async () => {
    const seen: Standing[] = [];
    const run = (isThere: (standing: Standing) => boolean) =>
      runCampaign({
        name: "Cold room",
        campaignId: laboratory.campaigns.cold,
        rig: laboratory.rigs.cold,
        kept,
        url: server.url,
        clockStart: anchor.clockStart.cold,
        isThere: (standing) => seen.push(standing) > 0 && isThere(standing),
        progress: new Progress(() => undefined),
      });
    await run(({ repeats }) => repeats > 150);
    expect(seen.at(-1)?.state).toBe("running");
    await run(({ state }) => state === "held");
    const holds = await rows(`select reason, text from hold where campaign_id = $1 and released_at is null`, [laboratory.campaigns.cold]);
    expect(holds).toEqual([{ reason: "task", text: expect.stringContaining("desiccant") }]);

    const media = await rows(
      `select medium, count(*)::int as n, count(distinct (s.sequence, r.idx))::int as different
         from reading r join step s on s.id = r.step_id where s.campaign_id = $1 and s.role <> 'find' group by medium order by medium`,
      [laboratory.campaigns.cold],
    );
    expect(media).toEqual([
      { medium: "Tarn mix 3", n: 480, different: 480 },
      { medium: "air", n: 240, different: 240 },
    ]);
    const [task] = await rows<{ kind: string; instruction: string }>(`select kind, instruction from operator_task where state = 'open'`);
    expect(task).toMatchObject({ kind: "ask", instruction: expect.stringContaining("desiccant") });
    expect(errors).toEqual([]);
  });

  it("stops a rig's clock where it is told to, and gives the step in hand back", { timeout: 120_000 }, async () => {
    const until = new Date(anchor.clockStart.south.getTime() + 4 * 3_600_000);
    await runCampaign({
      name: "South bench",
      campaignId: laboratory.campaigns.south,
      rig: laboratory.rigs.south,
      kept,
      url: server.url,
      clockStart: anchor.clockStart.south,
      until,
      isThere: () => false,
      progress: new Progress(() => undefined),
    });
    const last = await row<{ state: string; takenAt: Date; durationS: number }>(
      `select s.state, r.taken_at as "takenAt", r.duration_s as "durationS" from reading r join step s on s.id = r.step_id
        where s.campaign_id = $1 order by s.sequence desc, r.idx desc limit 1`,
      [laboratory.campaigns.south],
    );
    expect((last?.takenAt.getTime() ?? Infinity) + (last?.durationS ?? 0) * 1000).toBeLessThanOrEqual(until.getTime());
    const open = await rows(`select state, stored > 0 as begun, empty_attempts as empty from step where campaign_id = $1 and state in ('ready', 'out')`, [laboratory.campaigns.south]);
    expect(open).toEqual([{ state: "ready", begun: true, empty: 0 }]);
  });
});

describe("a demo that is complete", () => {
  it("is left alone at once, and its rigs follow the server to another address", async () => {
    const marker = await begin(begunAt).catch(() => undefined);
    expect(marker).toBeUndefined();
    await end({ begunAt, done: false });
    const entry = { url: "http://127.0.0.1:3000", token: "t", scenario: "quick", seed: 1, speed: "real" };
    kept.writeRigs([entry]);
    const before = await counts();
    const said: string[] = [];
    await seedDemo({ password, dataFolder, url: "http://127.0.0.1:4400", say: (line) => said.push(line) });
    expect(said).toEqual([]);
    expect(await counts()).toEqual(before);
    expect(kept.rigs()).toEqual([{ ...entry, url: "http://127.0.0.1:4400" }]);
    expect(modeOf("demo-rigs.json")).toBe(0o600);
  });
});
