import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { readBackToAir } from "@/lib/analysis/back-to-air";
import { readDrift } from "@/lib/analysis/drift";
import { driftQuery, seriesQuery, stabilityAnswer, stabilityQuery } from "@/lib/analysis/schema";
import { readSeries } from "@/lib/analysis/series";
import { readStability } from "@/lib/analysis/stability";
import { rows, sequelize } from "@/lib/db";
import { Bench } from "@/tests/factories/bench";
import { buildCampaign } from "@/tests/factories/campaign";
import { aDefinition } from "@/tests/factories/protocol";

afterAll(() => sequelize.close());

const AIR_HZ = 2400;
const DRIFT_HZ_PER_DAY = 0.05;
const CYCLES = 8;
const AIR_REPEATS = 12;

let bench: Bench;
let campaignId: string;
let startMs: number;

/** Eight cycles a quarter of a day apart, air drifting down; in one phase one repeat far above and one as far below. */
beforeAll(async () => {
  const definition = aDefinition({
    baseline: { airReferences: 2 },
    limits: [{ id: "back", kind: "return", tolerancePpm: 50, does: ["note"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 }],
  });
  const [turns] = definition.blocks;
  if (turns?.kind === "repeat") {
    turns.times = CYCLES;
    for (const block of turns.blocks) if (block.kind === "measure") block.repeats = block.medium === "air" ? AIR_REPEATS : 6;
  }
  bench = await Bench.make({ definition });
  campaignId = bench.campaign.id;
  startMs = bench.clockMs;
  bench.truth = ({ medium, sequence, index }) => {
    const days = (bench.clockMs + index * 1000 - startMs) / 86_400_000;
    const far = sequence > 15 && sequence < 20 && (index === 5 || index === 7) ? 0.4 * (index - 6) : 0;
    return medium === "air" ? { f0Hz: AIR_HZ - DRIFT_HZ_PER_DAY * days + far, q: 1800, temperatureC: 25 } : { f0Hz: 2100, q: 60, temperatureC: 25.5 };
  };
  await bench.hello();
  let phases = 0;
  for (;;) {
    const step = await bench.next();
    if (!step) break;
    if (step.kind === "measure" && "medium" in step.params && step.params.medium === "air" && step.role === "reference" && phases++ > 0) bench.clockMs += 6 * 3_600_000;
    await bench.carryOut(step);
  }
}, 120_000);

describe("series", () => {
  test("all repeats of a medium are there, and the far one is in a bucket however few there are", async () => {
    for (const points of [10, 20, 5000]) {
      const { buckets, n, unit } = await readSeries(campaignId, seriesQuery.parse({ medium: "air", points }));
      expect({ n, unit }).toEqual({ n: CYCLES * AIR_REPEATS, unit: "Hz" });
      expect(buckets.length).toBeLessThanOrEqual(points);
      expect(buckets.reduce((sum, bucket) => sum + bucket.n, 0)).toBe(n);
      expect(Math.max(...buckets.map(({ max }) => max))).toBeGreaterThan(AIR_HZ + 0.3);
    }
  });

  test("a window holds its own repeats only", async () => {
    const whole = await readSeries(campaignId, seriesQuery.parse({ medium: "air", points: 5000 }));
    const [, second, third] = [...new Set(whole.buckets.map(({ phaseId }) => phaseId))].map((phase) => whole.buckets.filter(({ phaseId }) => phaseId === phase));
    const { buckets } = await readSeries(campaignId, seriesQuery.parse({ medium: "air", points: 5000, from: second[0].from, to: third.at(-1)?.to }));
    expect(buckets).toEqual([...second, ...third]);
  });

  test("temperature is that of the medium asked for", async () => {
    const { buckets, unit } = await readSeries(campaignId, seriesQuery.parse({ medium: "sample", quantity: "temperature" }));
    expect(unit).toBe("°C");
    for (const { mean } of buckets) expect(mean).toBeCloseTo(25.5, 6);
  });
});

describe("drift", () => {
  test("the slope of the bench is found inside the interval that is quoted", async () => {
    const { slopePerDay, lower, upper, u, n, ppmPerDay, unit } = await readDrift(campaignId, driftQuery.parse({}));
    expect({ n, unit }).toEqual({ n: CYCLES, unit: "Hz" });
    expect(lower).toBeLessThan(-DRIFT_HZ_PER_DAY);
    expect(upper).toBeGreaterThan(-DRIFT_HZ_PER_DAY);
    expect(Math.abs((slopePerDay ?? 0) + DRIFT_HZ_PER_DAY)).toBeLessThan(0.05 * DRIFT_HZ_PER_DAY);
    expect(u).toBeGreaterThan(0);
    expect(ppmPerDay).toBeCloseTo(((slopePerDay ?? 0) / AIR_HZ) * 1e6, 2);
  });

  test("cycles bound what is fitted, and two phase values carry no line", async () => {
    expect(await readDrift(campaignId, driftQuery.parse({ cycles: "1-5" }))).toMatchObject({ n: 5 });
    expect(await readDrift(campaignId, driftQuery.parse({ cycles: "2-3" }))).toMatchObject({ n: 2, slopePerDay: null, used: "2 phase values; at least three are needed" });
  });

  test("compensation that does not exist is refused, not left out in silence", async () => {
    await expect(readDrift(campaignId, driftQuery.parse({ compensate: "temperature" }))).rejects.toMatchObject({ status: 422 });
  });
});

describe("stability", () => {
  test("within phases the time between repeats is that of the bench, and no term reaches over a gap", async () => {
    const { tau0S, points, unit, reference, used } = await readStability(campaignId, stabilityQuery.parse({ medium: "sample" }));
    expect(tau0S).toBeCloseTo(1, 6);
    expect(unit).toBe("1");
    expect(reference).toBeCloseTo(2100, 2);
    expect(points[0]).toMatchObject({ m: 1, n: CYCLES * 5 });
    expect(used).toContain(`${CYCLES} stretches`);
  });

  test("a pure drift shows from phase to phase as drift: deviation D τ / √2 at one step", async () => {
    const { tau0S, points } = await readStability(campaignId, stabilityQuery.parse({ view: "phases", normalise: "absolute", statistic: "adev" }));
    const stepDays = (tau0S ?? 0) / 86_400;
    expect(points[0].deviation).toBeCloseTo((DRIFT_HZ_PER_DAY * stepDays) / Math.SQRT2, 3);
  });

  test("a curve of few points answers what it can, and null for what it cannot tell", async () => {
    const short = await readStability(campaignId, stabilityQuery.parse({ medium: "sample" }));
    expect(short.points.length).toBeLessThan(4);
    expect(stabilityAnswer.parse(JSON.parse(JSON.stringify(short)))).toEqual(short);
    expect(Object.values(short.parts?.u ?? {})).toContain(null);
  });

  test("too few values answer no points and say why", async () => {
    expect(await readStability(campaignId, stabilityQuery.parse({ view: "phases", cycles: "1-2" }))).toMatchObject({ points: [], used: expect.stringContaining("at least three") });
  });
});

describe("back to air", () => {
  test("each reference is measured against the mean of the first two, and the limit stands beside", async () => {
    const { items, baselineHz, limitPpm } = await readBackToAir(campaignId);
    expect(items).toHaveLength(CYCLES);
    expect(baselineHz).toBeCloseTo((items[0].f0Hz + items[1].f0Hz) / 2, 9);
    expect(limitPpm).toBe(50);
    for (const { f0Hz, shiftPpm } of items) expect(shiftPpm).toBeCloseTo((f0Hz / (baselineHz ?? NaN) - 1) * 1e6, 9);
    expect(items.map(({ after }) => after)).toEqual([null, ...Array(CYCLES - 1).fill("sample")]);
  });

  test("the uncertainty of a shift holds that of the baseline, less what a phase shares with it", async () => {
    const { items } = await readBackToAir(campaignId);
    const [a, b, , d] = items.map(({ u }) => u ?? NaN);
    const base2 = (a ** 2 + b ** 2) / 4;
    const inHz = ({ shiftU, baselineHz }: (typeof items)[number]) => ((shiftU ?? NaN) * (baselineHz ?? NaN)) / 1e6;
    expect(inHz(items[3])).toBeCloseTo(Math.sqrt(d ** 2 + base2), 9);
    expect(inHz(items[0])).toBeCloseTo(Math.sqrt(a ** 2 + base2 - a ** 2), 9);
  });

  test("the course of a phase averages to nothing about its value", async () => {
    const { items } = await readBackToAir(campaignId);
    for (const { courseMHz } of items) {
      expect(courseMHz).toHaveLength(AIR_REPEATS);
      expect(courseMHz.reduce<number>((sum, value) => sum + (value ?? NaN), 0) / AIR_REPEATS).toBeCloseTo(0, 3);
    }
  });
});

describe("before anything was measured", () => {
  test("every question has an empty answer", async () => {
    const { id } = await buildCampaign();
    expect(await readSeries(id, seriesQuery.parse({}))).toEqual({ unit: "Hz", n: 0, leftOut: 0, buckets: [] });
    expect(await readDrift(id, driftQuery.parse({}))).toMatchObject({ n: 0, slopePerDay: null });
    expect(await readStability(id, stabilityQuery.parse({}))).toMatchObject({ points: [] });
    expect(await readBackToAir(id)).toMatchObject({ items: [], baselineHz: null });
  });

  test("a campaign that does not exist is 404, and a fit run of another campaign too", async () => {
    await expect(readSeries("999999", seriesQuery.parse({}))).rejects.toMatchObject({ status: 404 });
    const { id } = await buildCampaign();
    const [{ fitRunId }] = await rows<{ fitRunId: string }>(`select id as "fitRunId" from fit_run where campaign_id = $1`, [campaignId]);
    await expect(readDrift(id, driftQuery.parse({ fitRunId }))).rejects.toMatchObject({ status: 404 });
  });
});
