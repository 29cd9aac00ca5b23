import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { readDrift } from "@/lib/analysis/drift";
import { driftQuery, stabilityQuery } from "@/lib/analysis/schema";
import { readStability } from "@/lib/analysis/stability";
import { change, inTransaction, rows, sequelize } from "@/lib/db";
import { closePhase } from "@/lib/phases/close-phase";
import { fillCampaign } from "@/scripts/lib/bench-campaign";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { now } from "@/tests/factories/now";

afterAll(() => sequelize.close());

const PHASES = 40;
const EACH = 60;
/** The simulated sensor: Hz per K at 20 °C, about the temperature of each repeat. */
const HZ_PER_K = -0.148;
const DISTORTED = 64;
const BENT = 4;

let campaignId: string;

/** Forty air references whose temperature wanders by tenths of a kelvin; in the third two repeats are bent, 0.5 Hz off, one is distorted. */
beforeAll(async () => {
  const like = await buildCampaign({ state: "running" });
  await buildMount({ rigId: like.rigId as string, sensorId: like.sensorId as string });
  ({ campaignId } = await fillCampaign({ like: like.id, repeats: PHASES * EACH, phases: PHASES, now }));
  await change(
    `update reading r set temperature_c = 20 + 0.2 * sin(s.sequence * 1.7) + 0.05 * sin(r.idx / 9.0), duration_s = 8 from step s where s.id = r.step_id and s.campaign_id = $1`,
    [campaignId],
  );
  await change(
    `update fit f set f0_hz = f.f0_hz + $2 * (r.temperature_c - 20) from reading r, step s where r.step_id = f.step_id and r.idx = f.idx and s.id = r.step_id and s.campaign_id = $1`,
    [campaignId, HZ_PER_K],
  );
  const steps = await rows<{ id: string }>(`select id from step where campaign_id = $1 order by sequence`, [campaignId]);
  await change(`update fit set flags = ${BENT}, f0_hz = f0_hz + 0.5 where step_id = $1 and idx in (20, 40)`, [steps[2].id]);
  await change(`update fit set flags = ${DISTORTED} where step_id = $1 and idx = 30`, [steps[2].id]);
  for (const { id } of steps) await inTransaction((transaction) => closePhase(transaction, { stepId: id, now }));
}, 120_000);

describe("temperature compensation", () => {
  test("drift recovers the coefficient of the sensor within its uncertainty and brings the phase values together", async () => {
    const raw = await readDrift(campaignId, driftQuery.parse({}));
    const compensated = await readDrift(campaignId, driftQuery.parse({ compensate: "temperature" }));
    const linear = compensated.compensation?.terms.find(({ name }) => name === "linear");
    expect(linear?.u).toBeGreaterThan(0);
    expect(Math.abs((linear?.value ?? NaN) - HZ_PER_K)).toBeLessThan(4 * (linear?.u ?? NaN));
    expect(linear?.u).toBeLessThan(0.005);
    const spread = (values: readonly { value: number }[]) => Math.max(...values.map(({ value }) => value)) - Math.min(...values.map(({ value }) => value));
    expect(spread(compensated.values)).toBeLessThan(spread(raw.values) / 20);
    expect(raw.compensation).toBeUndefined();
    expect(compensated.values[0].temperatureC).toBeCloseTo(20, 0);
    expect(compensated.values[0].commonU).toBeGreaterThan(0);
    expect(compensated.used).toContain("brought to");
  });

  test("stability follows the compensated repeats and phase values, with what the coefficient's uncertainty can add", async () => {
    for (const view of ["within", "phases"] as const) {
      const raw = await readStability(campaignId, stabilityQuery.parse({ view }));
      const compensated = await readStability(campaignId, stabilityQuery.parse({ view, compensate: "temperature" }));
      const [before, after] = [raw.points[view === "within" ? 4 : 0], compensated.points[view === "within" ? 4 : 0]];
      expect(after.deviation).toBeLessThan(before.deviation / 5);
      expect(after.compensationU).toBeGreaterThan(0);
      expect(after.compensationU).toBeLessThan(before.deviation / 5);
      expect(before).not.toHaveProperty("compensationU");
    }
  });

  test("a campaign with too few phases is refused with the reason", async () => {
    const asked = { compensate: "temperature", cycles: "1-5" };
    await expect(readDrift(campaignId, driftQuery.parse(asked))).rejects.toMatchObject({ status: 422, message: expect.stringContaining("at least 12 phase values") });
    await expect(readStability(campaignId, stabilityQuery.parse(asked))).rejects.toMatchObject({ status: 422, message: expect.stringContaining("there are 5") });
  });
});

describe("what is used", () => {
  test("readings are counted by why they are left out, and a person may let flagged ones in or take others out", async () => {
    const usual = await readStability(campaignId, stabilityQuery.parse({}));
    expect(usual.readings).toEqual({ n: PHASES * EACH, used: PHASES * EACH - 2, reasons: { bent: 2 }, flaggedButUsed: { distorted: 1 } });
    const all = await readStability(campaignId, stabilityQuery.parse({ leaveOut: "none" }));
    expect(all.readings).toEqual({ n: PHASES * EACH, used: PHASES * EACH, reasons: {}, flaggedButUsed: { bent: 2, distorted: 1 } });
    expect(all.points[0].deviation).toBeGreaterThan(1.05 * usual.points[0].deviation);
    const strict = await readStability(campaignId, stabilityQuery.parse({ leaveOut: "bent,distorted" }));
    expect(strict.readings?.reasons).toEqual({ bent: 2, distorted: 1 });
    expect(stabilityQuery.safeParse({ leaveOut: "odd" }).success).toBe(false);
  });

  test("pauses of 2 s in 10 s are stated, and corrected when asked: the averaging times are then those of measuring", async () => {
    const stated = await readStability(campaignId, stabilityQuery.parse({}));
    expect(stated.deadTime).toMatchObject({ repeatS: 8, r: 1.25, treatment: "stated" });
    expect(stated.deadTime?.deadShare).toBeCloseTo(0.2, 9);
    const corrected = await readStability(campaignId, stabilityQuery.parse({ deadTime: "corrected" }));
    expect(corrected.deadTime?.treatment).toBe("corrected");
    expect(corrected.points.map(({ tauS }) => tauS)).toEqual(stated.points.map(({ m }) => 8 * m));
    expect((await readStability(campaignId, stabilityQuery.parse({ statistic: "mdev", deadTime: "corrected" }))).deadTime?.treatment).toBe("not available");
  });

  test("noise parts come with their uncertainties whatever the statistic", async () => {
    const { parts } = await readStability(campaignId, stabilityQuery.parse({ compensate: "temperature" }));
    expect(parts?.white).toBeGreaterThan(0);
    expect(parts?.u.white).toBeGreaterThan(0);
    expect(parts?.best.fromS).toBeLessThanOrEqual(parts?.best.tauS ?? 0);
    const other = await readStability(campaignId, stabilityQuery.parse({ compensate: "temperature", statistic: "hdev" }));
    expect(other.parts).toEqual(parts);
  });
});

test("drift tells of trend, ageing and steps", async () => {
  const { mannKendall, ageing, steps, alpha } = await readDrift(campaignId, driftQuery.parse({ compensate: "temperature" }));
  expect(mannKendall?.tau).toBeLessThan(0);
  expect(ageing?.preferred).toMatch(/ageing|line/);
  expect(steps).toEqual([]);
  expect(alpha).toBeLessThanOrEqual(0);
});
