import { afterAll, describe, expect, test } from "vitest";
import { readBackToAir } from "@/lib/analysis/back-to-air";
import { driftQuery, seriesQuery, stabilityQuery } from "@/lib/analysis/schema";
import { readDrift } from "@/lib/analysis/drift";
import { readSeries } from "@/lib/analysis/series";
import { readStability } from "@/lib/analysis/stability";
import { campaignQuery, phaseQuery } from "@/lib/campaigns/answers";
import { findPhases } from "@/lib/campaigns/phases";
import { findCampaigns, getCampaign } from "@/lib/campaigns/read";
import { readStrip } from "@/lib/campaigns/strip";
import { rows, sequelize } from "@/lib/db";
import { carryOn } from "@/lib/fit-runs/carry-on";
import { refitBody } from "@/lib/fit-runs/schema";
import { startRefit } from "@/lib/fit-runs/start-refit";
import { meanAndSd } from "@/lib/numerics/statistics/mean-and-sd";
import { readSweep } from "@/lib/readings/read-sweep";
import { readingsQuery } from "@/lib/readings/schema";
import { streamReadings } from "@/lib/readings/stream";
import { auditedActions } from "../../factories/audit";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { aCampaign, csvOf, upload } from "../../factories/upload";

afterAll(() => sequelize.close());

const given = aCampaign({ cycles: 6, repeats: 20 });
let campaignId: Promise<string> | undefined;
const imported = () => (campaignId ??= upload({ file: csvOf(given) }).then(({ body }) => String(body.campaignId)));

describe("an imported campaign", () => {
  test("has a finished state, no rig and no protocol, its readings and one phase a run of medium and cycle", async () => {
    const campaign = await getCampaign({ campaignId: await imported(), now });
    expect(campaign).toMatchObject({ state: "finished", origin: "import", rig: null, protocol: null, name: "Old readings", progress: { repeats: 240 } });
    expect(campaign.startedClock).toBe(given[0].takenAt);
    expect(campaign.endedClock).toBe(given[given.length - 1].takenAt);
    expect(campaign.media.map(({ medium, repeats }) => [medium, repeats])).toEqual([["air", 120], ["Water", 120]]);
    const { items } = await findPhases({ campaignId: campaign.id, query: phaseQuery.parse({}) });
    expect(items.map(({ cycle, medium, role, n, nUsed }) => [cycle, medium, role, n, nUsed])).toEqual(
      Array.from({ length: 12 }, (_, i) => [Math.floor(i / 2) + 1, i % 2 === 0 ? "air" : "Water", i % 2 === 0 ? "reference" : "sample", 20, 20]),
    );
    expect(await auditedActions("campaign", campaign.id)).toEqual(["import"]);
  });

  test("has the phase values of its readings", async () => {
    const { items } = await findPhases({ campaignId: await imported(), query: phaseQuery.parse({ medium: "Water" }) });
    items.forEach((phase, i) => {
      const f0 = meanAndSd(Float64Array.from(given.slice(40 * i + 20, 40 * i + 40), ({ f0Hz }) => f0Hz));
      expect(phase.f0.mean).toBeCloseTo(f0.mean, 9);
      expect(phase.f0.sd).toBeCloseTo(f0.sd, 9);
      expect(phase.temperatureC.mean).toBeCloseTo(20, 2);
    });
  });

  test("gives out the very numbers that came in", async () => {
    const response = await streamReadings(await imported(), readingsQuery.parse({}));
    const { items } = (await response.json()) as { items: { takenAt: string; medium: string; f0Hz: number; q: number; temperatureC: number; cycle: number; flags: string[] }[] };
    expect(items.map(({ takenAt, medium, f0Hz, q, temperatureC, cycle }) => ({ takenAt, medium, f0Hz, q, temperatureC, cycle }))).toEqual(given);
    expect(items.every(({ flags }) => flags.length === 0)).toBe(true);
  });

  test("is read by everything that reads campaigns", async () => {
    const id = await imported();
    const series = await readSeries(id, seriesQuery.parse({ medium: "air" }));
    expect(series.n).toBe(120);
    const stability = await readStability(id, stabilityQuery.parse({ medium: "Water", view: "within" }));
    expect(stability.tau0S).toBeCloseTo(10, 6);
    expect(stability.points.length).toBeGreaterThan(2);
    const cycles = await readStability(id, stabilityQuery.parse({ medium: "air", view: "phases" }));
    expect(cycles.points.length).toBeGreaterThan(0);
    const drift = await readDrift(id, driftQuery.parse({ medium: "air" }));
    expect(drift.values).toHaveLength(6);
    expect(drift.slopePerDay).not.toBeNull();
    const back = await readBackToAir(id);
    expect(back.items).toHaveLength(6);
    expect(back.items.every(({ shiftPpm, shiftU }) => shiftPpm !== null && shiftU !== null)).toBe(true);
    const strip = await readStrip({ campaignId: id, now });
    expect(strip.segments.filter(({ kind }) => kind !== "end")).toHaveLength(12);
    expect(strip.trace).toHaveLength(6);
    const sweep = await readSweep({ campaignId: id });
    expect(sweep).toMatchObject({ curve: null, medium: "Water", cycle: 6 });
    const { items } = await findCampaigns({ query: campaignQuery.parse({ search: "Old readings" }), now });
    const item = items.find((one) => one.id === id);
    const air = [0, 1, 2, 3, 4, 5].map((cycle) => meanAndSd(Float64Array.from(given.slice(40 * cycle, 40 * cycle + 20), ({ f0Hz }) => f0Hz)).mean);
    expect(item?.air?.shiftMHz).toBeCloseTo(1e3 * (air[5] - (air[0] + air[1] + air[2]) / 3), 6);
  });

  test("can be fitted again, beside what there is, with a baseline of its own", async () => {
    const id = await imported();
    const { id: fitRunId } = await startRefit({ by: await actor("researcher"), campaignId: id, body: refitBody.parse({ why: "To see", offsetSlope: false }), now });
    expect(await carryOn({ fitRunId, now, hasTime: () => true })).toBe(false);
    const [own, again] = await Promise.all([findPhases({ campaignId: id, query: phaseQuery.parse({}) }), findPhases({ campaignId: id, query: phaseQuery.parse({ fitRunId }) })]);
    expect(again.items.map(({ f0 }) => f0)).toEqual(own.items.map(({ f0 }) => f0));
    expect(await rows(`select n from baseline where fit_run_id = $1`, [fitRunId])).toEqual([{ n: 3 }]);
  });

  test("has nothing that only a rig can have: the database refuses a step of a protocol without a rig", async () => {
    const id = await imported();
    await expect(rows(`update step set origin = 'protocol' where campaign_id = $1`, [id])).rejects.toThrow();
    await expect(rows(`update campaign set state = 'running', ended_at = null where id = $1`, [id])).rejects.toThrow();
  });
});
