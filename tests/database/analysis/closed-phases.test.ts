import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { readBackToAir } from "@/lib/analysis/back-to-air";
import { readDrift } from "@/lib/analysis/drift";
import { refreshResults } from "@/lib/analysis/refresh-results";
import { forgetOldResults } from "@/lib/analysis/results";
import { driftQuery, seriesQuery, stabilityQuery, type SeriesAnswer } from "@/lib/analysis/schema";
import { readSeries } from "@/lib/analysis/series";
import { readStability } from "@/lib/analysis/stability";
import { change, inTransaction, row, rows, sequelize } from "@/lib/db";
import { flagBits } from "@/lib/numerics/resonance/flags";
import { refreshPhase } from "@/lib/phases/close-phase";
import { fillLevels } from "@/lib/phases/fill-levels";
import { fillCampaign } from "@/scripts/lib/bench-campaign";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { now } from "@/tests/factories/now";
import { buildPerson } from "@/tests/factories/person";

afterAll(() => sequelize.close());

const PHASES = 3;
const EACH = 800;
const FAR = { idx: 417, hz: 2400.7 };

let campaignId: string;
let fitRunId: string;
let steps: { stepId: string; phaseId: string }[];

const refresh = (stepId: string) => inTransaction((transaction) => refreshPhase(transaction, { stepId, now }));

/** Three phases of 800 repeats; the first ten are discarded in the second, where some have no fit, some no temperature, and one lies far off. */
beforeEach(async () => {
  const like = await buildCampaign({ state: "running" });
  await buildMount({ rigId: like.rigId as string, sensorId: like.sensorId as string });
  ({ campaignId, fitRunId } = await fillCampaign({ like: like.id, repeats: PHASES * EACH, phases: PHASES, now }));
  steps = await rows(`select step_id as "stepId", id as "phaseId" from phase where campaign_id = $1 order by sequence`, [campaignId]);
  const { stepId } = steps[1];
  await change(`update phase set discard = 10 where step_id = $1`, [stepId]);
  await change(`update fit set f0_hz = null, q = null where step_id = $1 and idx between 200 and 220`, [stepId]);
  await change(`update fit set f0_hz = $2 where step_id = $1 and idx = $3`, [stepId, FAR.hz, FAR.idx]);
  await change(`update reading set temperature_c = null where step_id = $1 and idx % 3 = 0`, [stepId]);
  await refresh(stepId);
}, 60_000);

const forgetLevels = async () => {
  await change(`delete from phase_level`);
  await change(`update phase_summary set digest = null, earliest_at = null, latest_at = null, course = null`);
};

async function exclude(stepId: string, idx: number): Promise<void> {
  const { id } = await buildPerson();
  await change(`insert into exclusion (step_id, idx, person_id, at, why) values ($1, $2, $3, $4, 'a knock on the bench')`, [stepId, idx, id, now]);
  await refresh(stepId);
}

/** Asks in few and in many points, of all and of windows: every bucket has to hold what the repeats between its ends say. */
async function holdToRepeats(repeats: SeriesAnswer, quantity: "f0" | "q" | "temperature"): Promise<void> {
  const time = (share: number) => repeats.buckets[Math.floor(share * (repeats.buckets.length - 1))].from;
  const windows = [{}, { from: time(0.2), to: time(0.9) }, { from: time(0.4) }, { to: time(0.55) }];
  for (const points of [10, 24, 60, 300]) {
    for (const window of windows) {
      const answer = await readSeries(campaignId, seriesQuery.parse({ quantity, points, ...window }));
      expect(answer.buckets.length).toBeLessThanOrEqual(points);
      for (const { phaseId, from, to, min, max, mean, n } of answer.buckets) {
        const inside = repeats.buckets.filter((one) => one.phaseId === phaseId && one.from >= from && one.to <= to).map((one) => one.mean);
        expect({ n: inside.length, min: Math.min(...inside), max: Math.max(...inside) }).toEqual({ n, min, max });
        expect(mean).toBeCloseTo(inside.reduce((sum, value) => sum + value, 0) / n, 9);
      }
      const inWindow = repeats.buckets.filter((one) => (!window.from || one.from >= window.from) && (!window.to || one.from <= window.to));
      expect(answer.n).toBe(inWindow.length);
    }
  }
}

describe("series from levels", () => {
  test.each(["f0", "q", "temperature"] as const)("%s: every bucket holds the number, extremes and mean of the repeats between its ends", async (quantity) => {
    await holdToRepeats(await readSeries(campaignId, seriesQuery.parse({ quantity, points: 5000 })), quantity);
  });

  test.each(["f0", "q", "temperature"] as const)("%s of a phase under way, put together in the database, likewise", async (quantity) => {
    const closed = await readSeries(campaignId, seriesQuery.parse({ quantity, points: 5000 }));
    await change(`delete from phase_summary where phase_id <> $1`, [steps[0].phaseId]);
    expect(await readSeries(campaignId, seriesQuery.parse({ quantity, points: 5000 }))).toEqual(closed);
    await holdToRepeats(closed, quantity);
  });

  test("all points of one phase together are near as even as from the repeats", async () => {
    const { buckets } = await readSeries(campaignId, seriesQuery.parse({ points: 24 }));
    const sizes = buckets.filter(({ phaseId }) => phaseId === steps[0].phaseId).map(({ n }) => n);
    expect(sizes).toHaveLength(8);
    for (const n of sizes) expect(Math.abs(n - EACH / 8)).toBeLessThanOrEqual(EACH / 128 + 1);
  });

  test("a plot of the whole campaign reads no columns, one of a stretch only those of the phases that its ends cut", async () => {
    const whole = await readSeries(campaignId, seriesQuery.parse({ points: 30 }));
    const second = whole.buckets.filter(({ phaseId }) => phaseId === steps[1].phaseId);
    await change(`update phase_summary set columns = '' where phase_id <> $1`, [steps[1].phaseId]);
    expect(await readSeries(campaignId, seriesQuery.parse({ points: 30 }))).toEqual(whole);
    const cut = await readSeries(campaignId, seriesQuery.parse({ points: 10, from: second[3].from }));
    expect(new Set(cut.buckets.map(({ phaseId }) => phaseId))).toEqual(new Set([steps[1].phaseId, steps[2].phaseId]));
  });

  test("what is left out is counted, in the whole and in a window, as it is from the repeats", async () => {
    const queries = [{ points: 12 }, { points: 12, quantity: "temperature" }].map((query) => seriesQuery.parse(query));
    const fromLevels = await Promise.all(queries.map((query) => readSeries(campaignId, query)));
    expect(fromLevels[0].leftOut).toBe(10 + 21);
    await forgetLevels();
    const fromColumns = await Promise.all(queries.map((query) => readSeries(campaignId, query)));
    expect(fromLevels.map(({ n, leftOut }) => ({ n, leftOut }))).toEqual(fromColumns.map(({ n, leftOut }) => ({ n, leftOut })));
  });

  test("an excluded repeat is gone from every level", async () => {
    const most = (answer: SeriesAnswer) => Math.max(...answer.buckets.map(({ max }) => max));
    const asked = [3, 30, 5000].map((points) => seriesQuery.parse({ points: Math.max(10, points) }));
    for (const query of asked) expect(most(await readSeries(campaignId, query))).toBe(FAR.hz);
    await exclude(steps[1].stepId, FAR.idx);
    for (const query of asked) expect(most(await readSeries(campaignId, query))).toBeLessThan(2400.1);
  });
});

describe("phases closed by a version without levels", () => {
  test("are drawn from their columns, and the same from the levels that the worker fills in", async () => {
    const query = seriesQuery.parse({ points: 5000 });
    const [before, back] = [await readSeries(campaignId, query), await readBackToAir(campaignId)];
    const digests = () => rows(`select phase_id, digest, earliest_at, latest_at from phase_summary where fit_run_id = $1 order by phase_id`, [fitRunId]);
    const kept = await digests();
    await forgetLevels();
    expect(await readSeries(campaignId, query)).toEqual(before);
    expect(await readBackToAir(campaignId)).toEqual(back);
    await fillLevels();
    expect(await digests()).toEqual(kept);
    expect(await readSeries(campaignId, query)).toEqual(before);
    expect(await readBackToAir(campaignId)).toEqual(back);
  });
});

describe("stored answers", () => {
  const stability = (query = {}) => readStability(campaignId, stabilityQuery.parse(query));
  const drift = () => readDrift(campaignId, driftQuery.parse({}));
  const all = async () => ({ within: await stability(), q: await stability({ quantity: "q", statistic: "mdev" }), phases: await stability({ view: "phases" }), drift: await drift() });
  const fresh = async () => {
    await change(`delete from analysis_result where campaign_id = $1`, [campaignId]);
    return all();
  };
  /** Marks the stored answers, so that it shows which are given out. */
  const mark = () => change(`update analysis_result set answer = json_build_object('used', 'stored') where campaign_id = $1`, [campaignId]);
  const stored = { used: "stored" };

  test("equal the ones computed, and are given out as long as nothing they are made from changes", async () => {
    const first = await all();
    expect(first.within.points.length).toBeGreaterThan(5);
    expect(await all()).toEqual(first);
    expect(await fresh()).toEqual(first);
    await mark();
    expect(await all()).toEqual({ within: stored, q: stored, phases: stored, drift: stored });
  });

  test("of another question are another's: statistic, quantity, view and confidence each count", async () => {
    await all();
    await mark();
    for (const query of [{ statistic: "adev" }, { quantity: "q" }, { confidence: 0.9 }, { normalise: "absolute" }, { taus: "decade" }]) expect(await stability(query)).not.toEqual(stored);
  });

  test.each<[string, () => Promise<void>]>([
    ["an exclusion", () => exclude(steps[1].stepId, FAR.idx)],
    [
      "a late reading",
      async () => {
        const { stepId } = steps[2];
        await change(`insert into reading (step_id, idx, taken_at, at, received_at, kind, content_hash) select step_id, $2, at + interval '10 s', at + interval '10 s', $3, 1, '' from reading where step_id = $1 and idx = $2 - 1`, [stepId, EACH, now]);
        await change(`insert into fit (fit_run_id, step_id, idx, f0_hz, q, flags) values ($1, $2, $3, 2400.001, 2001, 0)`, [fitRunId, stepId, EACH]);
        await refresh(stepId);
      },
    ],
    [
      "another fit run made current",
      async () => {
        await change(`update fit_run set current = false where id = $1`, [fitRunId]);
        const run = await row<{ id: string }>(`insert into fit_run (campaign_id, settings, code_version, current, created_at) values ($1, '{"offsetSlope": false}', 'another', true, $2) returning id`, [campaignId, now]);
        await change(`insert into fit select $1, step_id, idx, f0_hz * (1 + 1e-7 * (idx % 3)), q + idx % 5, f0_std_hz, q_std, f0_q_covariance, amplitude_v, noise_v, flags from fit where fit_run_id = $2`, [run?.id, fitRunId]);
        for (const { stepId } of steps) await refresh(stepId);
      },
    ],
  ])("are computed anew after %s, though no time has passed", async (_, happens) => {
    const before = await all();
    await happens();
    const after = await all();
    for (const kind of ["within", "phases", "drift"] as const) expect(after[kind]).not.toEqual(before[kind]);
    expect(after).toEqual(await fresh());
  });

  test("tell an exclusion of a repeat that did not count anyway: it may count where its flag is let in", async () => {
    const { stepId } = steps[0];
    await change(`update fit set flags = $2 where step_id = $1 and idx = 50`, [stepId, flagBits(["edge"])]);
    await refresh(stepId);
    const before = [await stability(), await stability({ leaveOut: "failed" })];
    await exclude(stepId, 50);
    const after = [await stability(), await stability({ leaveOut: "failed" })];
    expect(after[1]).not.toEqual(before[1]);
    await change(`delete from analysis_result where campaign_id = $1`, [campaignId]);
    expect([await stability(), await stability({ leaveOut: "failed" })]).toEqual(after);
  });

  test("are brought up to date in the background, without making a question look asked for", async () => {
    await all();
    const askedAt = () => rows(`select question_hash, asked_at from analysis_result where campaign_id = $1 order by question_hash`, [campaignId]);
    const before = await askedAt();
    await exclude(steps[1].stepId, FAR.idx);
    await refreshResults({ campaignId });
    expect(await askedAt()).toEqual(before);
    const expected = await all();
    await mark();
    expect(await all()).toEqual({ within: stored, q: stored, phases: stored, drift: stored });
    expect(await fresh()).toEqual(expected);
  });

  test("take in the phase under way when it closes; one that is alone is shown from its first repeats on", async () => {
    await change(`delete from phase_summary where phase_id = $1`, [steps[2].phaseId]);
    expect((await stability()).used).toContain("of 2 phases");
    await change(`delete from phase_summary where fit_run_id = $1`, [fitRunId]);
    expect((await stability()).used).toContain("of 3 phases");
    await Promise.all(steps.map(({ stepId }) => refresh(stepId)));
    expect((await stability()).used).toContain("of 3 phases");
  });

  test("are not kept under what was before when a phase changes while they are computed", async () => {
    const [before] = await Promise.all([stability(), exclude(steps[1].stepId, FAR.idx)]);
    const after = await stability();
    await change(`update exclusion set undone_by = person_id, undone_at = $2 where step_id = $1`, [steps[1].stepId, now]);
    await refresh(steps[1].stepId);
    const undone = await stability();
    expect(undone).not.toEqual(after);
    await change(`delete from analysis_result where campaign_id = $1`, [campaignId]);
    expect(await stability()).toEqual(undone);
    expect([after, undone]).toContainEqual(before);
  });

  test("are forgotten when nobody has asked for a fortnight, and not a day sooner", async () => {
    await all();
    const count = async () => (await row<{ n: number }>(`select count(*)::int as n from analysis_result where campaign_id = $1`, [campaignId]))?.n;
    const later = (days: number) => new Date(Date.now() + days * 86_400_000);
    await forgetOldResults({ now: later(13) });
    expect(await count()).toBe(4);
    await forgetOldResults({ now: later(15) });
    expect(await count()).toBe(0);
  });

  test("are kept of two hundred questions a campaign, the last asked", async () => {
    await change(
      `insert into analysis_result (campaign_id, question_hash, question, code, content, answer, made_at, asked_at)
       select $1, convert_to(n::text, 'UTF8'), '{}', '', '', '{}', now(), now() - make_interval(mins => n) from generate_series(1, 205) n`,
      [campaignId],
    );
    await forgetOldResults({ now: new Date() });
    const left = await rows<{ n: number }>(`select convert_from(question_hash, 'UTF8')::int as n from analysis_result where campaign_id = $1 order by 1`, [campaignId]);
    expect(left.map(({ n }) => n)).toEqual(Array.from({ length: 200 }, (_, i) => i + 1));
  });
});
