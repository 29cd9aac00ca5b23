import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { change, row, rows, sequelize } from "@/lib/db";
import { excludeReadings, takeBackExclusion } from "@/lib/exclusions/exclude";
import { readSweep } from "@/lib/readings/read-sweep";
import { Bench } from "@/tests/factories/bench";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

const KNOCKED = 7;
const now = new Date("2026-05-20T10:00:00Z");

let bench: Bench;
let campaignId: string;
let first: { sequence: number; phaseId: string; repeats: number };

beforeAll(async () => {
  bench = await Bench.make();
  bench.truth = ({ medium, index }) => (medium === "air" ? { f0Hz: index === KNOCKED ? 2400.2 : 2400, q: 1800, temperatureC: 25 } : { f0Hz: 2100, q: 60 });
  await bench.hello();
  await bench.run();
  campaignId = bench.campaign.id;
  first = (await row<typeof first>(`select sequence, id as "phaseId", repeats from phase where campaign_id = $1 and medium = 'air' order by sequence limit 1`, [campaignId])) as typeof first;
}, 60_000);

const at = (index: number) => readSweep({ campaignId, sequence: first.sequence, index });

describe("one sweep", () => {
  test("comes with both quadratures, the fitted curve, and all eight parameters with uncertainty and correlation", async () => {
    const { curve, parameters, snr, judged, readout, f0Hz, f0StdHz, form } = await at(0);
    expect(form).toBe("sweep");
    expect(curve?.re).toHaveLength(curve?.frequencyHz.length ?? -1);
    expect(curve?.fittedIm).toHaveLength(curve?.frequencyHz.length ?? -1);
    expect(curve?.re?.map((re, i) => Math.hypot(re, curve.im?.[i] ?? NaN))).toEqual(curve?.measuredV);
    expect(parameters?.map(({ name }) => name)).toEqual(["f0Hz", "q", "aRe", "aIm", "bRe", "bIm", "cRe", "cIm"]);
    expect(parameters?.[0]).toMatchObject({ value: f0Hz, correlationWithF0: 1 });
    expect((parameters?.[0].u ?? NaN) / (f0StdHz ?? NaN)).toBeCloseTo(1, 3);
    for (const { u, correlationWithF0 } of parameters ?? []) {
      expect(u).toBeGreaterThan(0);
      expect(Math.abs(correlationWithF0 ?? 2)).toBeLessThanOrEqual(1 + 1e-9);
    }
    expect(readout).toBe("velocity");
    expect(snr).toBeGreaterThan(0);
    expect(judged?.pointsInBand).toBeGreaterThan(2);
  });

  test("knows its neighbours, over the ends of its phase too, and the newest has none after it", async () => {
    const { place } = await at(3);
    expect(place).toMatchObject({ previous: { sequence: first.sequence, index: 2 }, next: { sequence: first.sequence, index: 4 }, n: first.repeats });
    const steps = await rows<{ sequence: number; stored: number }>(`select sequence, stored from step where campaign_id = $1 and kind = 'measure' and stored > 0 order by sequence`, [campaignId]);
    const own = steps.findIndex(({ sequence }) => sequence === first.sequence);
    const end = await at(first.repeats - 1);
    expect(end.place?.next).toEqual({ sequence: steps[own + 1].sequence, index: 0 });
    const last = steps[steps.length - 1];
    expect((await readSweep({ campaignId, sequence: last.sequence, index: last.stored - 1 })).place?.next).toBeNull();
  });

  test("the next flagged one is found in its phase and in a later one", async () => {
    await change(`update fit set flags = 0`);
    await change(`update phase_summary set flag_counts = '{}'`);
    expect((await at(0)).place?.nextFlagged).toBeNull();
    const liquid = await row<{ stepId: string; sequence: number; phaseId: string }>(`select step_id as "stepId", sequence, id as "phaseId" from phase where campaign_id = $1 and medium <> 'air' order by sequence limit 1`, [campaignId]);
    await change(`update fit set flags = 32 where step_id = $1 and idx = 2`, [liquid?.stepId]);
    await change(`update phase_summary set flag_counts = '{"noisy": 1}' where phase_id = $1`, [liquid?.phaseId]);
    expect((await at(0)).place?.nextFlagged).toEqual({ sequence: liquid?.sequence, index: 2 });
    await change(`update fit f set flags = 32 from step s where s.id = f.step_id and s.campaign_id = $1 and s.sequence = $2 and f.idx = 5`, [campaignId, first.sequence]);
    expect((await at(0)).place?.nextFlagged).toEqual({ sequence: first.sequence, index: 5 });
    expect((await at(5)).place?.nextFlagged).toEqual({ sequence: liquid?.sequence, index: 2 });
  });

  test("says what the phase value would be without it, which is what it becomes, and back again", async () => {
    const by = await actor("researcher");
    const before = (await at(KNOCKED)).place;
    expect(before?.excluded).toBeNull();
    expect((before?.f0?.mean ?? 0) - (before?.otherwise.f0?.mean ?? 0)).toBeGreaterThan(0.01);
    const { ids, phase } = await excludeReadings({ by, campaignId, phaseId: first.phaseId, indices: [KNOCKED], why: "a knock", now });
    expect(phase.f0).toEqual(before?.otherwise.f0);
    const out = (await at(KNOCKED)).place;
    expect(out).toMatchObject({ excluded: { id: ids[0], by: by.name, why: "a knock" }, f0: before?.otherwise.f0, otherwise: { f0: before?.f0 } });
    expect(out?.values.find(({ index }) => index === KNOCKED)?.leftOut).toBe(true);
    await takeBackExclusion({ by, exclusionId: ids[0], why: "the other bench", now });
    expect((await at(KNOCKED)).place).toEqual(before);
  });

  test("is found by the time at which it was taken, in the medium asked for", async () => {
    const { takenAt } = await at(4);
    expect(await readSweep({ campaignId, medium: "air", at: new Date(Date.parse(takenAt) + 1) })).toMatchObject({ sequence: first.sequence, index: 4, medium: "air" });
    const liquid = await readSweep({ campaignId, medium: "sample", at: new Date(takenAt) });
    expect(liquid).toMatchObject({ medium: "sample", index: 0 });
    await expect(readSweep({ campaignId, medium: "nothing", at: now })).rejects.toMatchObject({ status: 404 });
  });

  test("the newest alone has no place looked up: the campaign's page asks for it every few seconds", async () => {
    expect(await readSweep({ campaignId })).not.toHaveProperty("place");
    await expect(at(999)).rejects.toMatchObject({ status: 404 });
  });
});
