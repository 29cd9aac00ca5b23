import { afterAll, beforeAll, expect, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import { excludeReadings, takeBackExclusion } from "@/lib/exclusions/exclude";
import { findExclusions } from "@/lib/exclusions/find";
import type { Actor } from "@/lib/people/actor";
import { Bench } from "@/tests/factories/bench";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

let bench: Bench;
let by: Actor;
let phaseId: string;
const now = new Date("2026-05-20T10:00:00Z");
const KNOCKED = 7;

beforeAll(async () => {
  by = await actor("researcher");
  bench = await Bench.make();
  bench.truth = ({ medium, index }) => (medium === "air" ? { f0Hz: index === KNOCKED ? 2400.2 : 2400, q: 1800 } : { f0Hz: 2100, q: 60 });
  await bench.hello();
  await bench.run();
  phaseId = (await row<{ id: string }>(`select id from phase where campaign_id = $1 and medium = 'air' order by sequence limit 1`, [bench.campaign.id]))?.id as string;
});

const summary = () => row<{ n: number; nUsed: number; f0: number }>(`select n, n_used as "nUsed", f0_mean as f0 from phase_summary where phase_id = $1`, [phaseId]);
const exclude = (given: object = {}) => excludeReadings({ by, campaignId: bench.campaign.id, phaseId, indices: [KNOCKED], why: "Somebody leaned on the bench", now, ...given });

test("a repeat that is left out counts no longer, and counts again when it is taken back in; both stay on record", async () => {
  const before = await summary();
  const { ids, phase } = await exclude();
  expect(ids).toHaveLength(1);
  expect(phase).toMatchObject({ n: 10, nUsed: 9 });
  // One of ten repeats was 200 mHz off: without it the mean falls by 20 mHz and the ten become nine.
  expect((before?.f0 as number) - (phase.f0.mean as number)).toBeCloseTo(0.02, 2);
  expect(await summary()).toMatchObject({ nUsed: 9, f0: phase.f0.mean });
  expect(await exclude({ why: "Again" })).toEqual({ ids: [], phase });

  const back = await takeBackExclusion({ by, exclusionId: ids[0], why: "It was the other bench", now });
  expect(back.phase.nUsed).toBe(10);
  expect(await summary()).toEqual(before);
  expect(await takeBackExclusion({ by, exclusionId: ids[0], why: "It was the other bench", now })).toEqual(back);
  const { items } = await findExclusions({ campaignId: bench.campaign.id, query: { limit: 10 } });
  expect(items).toEqual([expect.objectContaining({ index: KNOCKED, why: "Somebody leaned on the bench", by: by.name, takenBackBy: by.name, takenBackAt: now.toISOString() })]);
  const events = await rows<{ text: string }>(`select text from campaign_event where campaign_id = $1 and kind = 'exclusion' order by id`, [bench.campaign.id]);
  expect(events.map(({ text }) => text)).toEqual(["Left out a repeat in air, cycle 1: Somebody leaned on the bench", "Took repeat 8 in air, cycle 1, back in: It was the other bench"]);
});

test("what was not measured, another campaign's phase and an operator are refused, and nothing is changed", async () => {
  const other = await Bench.make();
  await expect(exclude({ indices: [KNOCKED, 99] })).rejects.toMatchObject({ status: 422, members: { errors: [expect.objectContaining({ path: "indices" })] } });
  await expect(exclude({ campaignId: other.campaign.id })).rejects.toMatchObject({ status: 404 });
  await expect(exclude({ by: await actor("operator") })).rejects.toMatchObject({ status: 403 });
  await expect(takeBackExclusion({ by, exclusionId: "999999", why: "x", now })).rejects.toMatchObject({ status: 404 });
  expect(await rows(`select id from exclusion where undone_at is null`)).toEqual([]);
});
