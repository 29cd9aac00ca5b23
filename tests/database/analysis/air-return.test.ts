import { afterAll, beforeAll, expect, test } from "vitest";
import { readAirReturn } from "@/lib/analysis/air-return";
import { airReturnQuery } from "@/lib/analysis/schema";
import { change, inTransaction, rows, sequelize } from "@/lib/db";
import { closePhase } from "@/lib/phases/close-phase";
import { fillCampaign } from "@/scripts/lib/bench-campaign";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { now } from "@/tests/factories/now";

afterAll(() => sequelize.close());

const PHASES = 30;
const EACH = 40;
/** Repeats are 10 s apart; after drying f0 stands 0.2 mHz too low and returns within minutes. */
const COOLING = { hz: -2e-4, tauS: 60 };

let like: string;

beforeAll(async () => {
  const campaign = await buildCampaign({ state: "running" });
  await buildMount({ rigId: campaign.rigId as string, sensorId: campaign.sensorId as string });
  like = campaign.id;
}, 60_000);

/** Air references with a fill before each; f0 moves by so many ppm and Q by so many percent from one to the next. */
async function campaignThat({ f0Ppm, qPercent, cooling = 0 }: { f0Ppm: number; qPercent: number; cooling?: number }): Promise<string> {
  const { campaignId } = await fillCampaign({ like, repeats: PHASES * EACH, phases: PHASES, now });
  // In two steps, as no two may have one number in between.
  for (const table of ["step", "phase"]) {
    await change(`update ${table} set sequence = sequence + 1000 where campaign_id = $1`, [campaignId]);
    await change(`update ${table} set sequence = (sequence - 1000) * 10 where campaign_id = $1`, [campaignId]);
  }
  await change(
    `insert into step (campaign_id, rig_id, sequence, block_id, protocol_version_id, kind, cycle, label, params, mount_id, state, cursor, stored, created_at, closed_at, started_clock, ended_clock)
     select campaign_id, rig_id, sequence - 5, 'fill', protocol_version_id, 'fill', cycle, 'Fill', '{}', mount_id, 'done', '{}', 0, created_at, closed_at, started_clock - interval '2 hours', started_clock - interval '1 hour'
       from step where campaign_id = $1 and kind = 'measure'`,
    [campaignId],
  );
  await change(
    `update fit f set f0_hz = f.f0_hz * (1 + $2::float8 * 1e-6 * s.cycle) + $4::float8 * exp(-f.idx * 10 / $5::float8), q = f.q * (1 + $3::float8 / 100 * s.cycle) from step s where s.id = f.step_id and s.campaign_id = $1`,
    [campaignId, f0Ppm, qPercent, cooling, COOLING.tauS],
  );
  for (const { id } of await rows<{ id: string }>(`select id from step where campaign_id = $1 and kind = 'measure' order by sequence`, [campaignId])) {
    await inTransaction((transaction) => closePhase(transaction, { stepId: id, now }));
  }
  return campaignId;
}

const judged = async (given: Parameters<typeof campaignThat>[0]) => readAirReturn(await campaignThat(given), airReturnQuery.parse({}));

test("what grows with loss is residue, what grows without is ageing, and what does not grow is neither", { timeout: 120_000 }, async () => {
  const residue = await judged({ f0Ppm: -0.5, qPercent: -0.1 });
  expect(residue).toMatchObject({ verdict: "residue", n: PHASES, growth: { q: "falls" }, cleanedAgain: { takesOff: "untried" } });
  expect(residue.growth?.totalPpm).toBeLessThan(-10);
  expect(await judged({ f0Ppm: -0.5, qPercent: 0 })).toMatchObject({ verdict: "ageing", growth: { q: "quiet" } });
  expect((await judged({ f0Ppm: 0.004, qPercent: 0 })).verdict).toBe("none");
});

test("the return after drying is found with its time constant, and how many repeats to leave out", { timeout: 120_000 }, async () => {
  const { cooling } = await judged({ f0Ppm: 0, qPercent: 0, cooling: COOLING.hz });
  expect(cooling?.transient?.isSignificant).toBe(true);
  const { amplitude = NaN, amplitudeU = NaN, tauS = NaN, tauU = NaN } = cooling?.transient ?? {};
  expect(Math.abs(amplitude - COOLING.hz)).toBeLessThan(4 * amplitudeU);
  expect(Math.abs(tauS - COOLING.tauS)).toBeLessThan(4 * tauU);
  expect(cooling?.discard.repeats).toBeGreaterThan(10);
  expect(cooling?.discard.repeats).toBeLessThan(EACH / 2);
});

test("too few references are said to be too few, and a campaign without any has an empty answer", { timeout: 60_000 }, async () => {
  const campaignId = await campaignThat({ f0Ppm: 0, qPercent: 0 });
  expect(await readAirReturn(campaignId, airReturnQuery.parse({ cycles: "1-6" }))).toMatchObject({ verdict: "too few", n: 6, growth: null });
  expect(await readAirReturn((await buildCampaign({ state: "queued" })).id, airReturnQuery.parse({}))).toMatchObject({ verdict: "too few", n: 0, cooling: null });
});
