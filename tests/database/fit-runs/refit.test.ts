import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import { cancelRefit } from "@/lib/fit-runs/cancel";
import { carryOn, findWaitingRuns } from "@/lib/fit-runs/carry-on";
import { makeCurrent } from "@/lib/fit-runs/make-current";
import { compareFitRuns, findFitRuns, readFitRun } from "@/lib/fit-runs/read";
import { startRefit } from "@/lib/fit-runs/start-refit";
import type { Actor } from "@/lib/people/actor";
import { Bench } from "@/tests/factories/bench";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

let bench: Bench;
let by: Actor;
const now = new Date("2026-05-20T10:00:00Z");

const summaries = (fitRunId: string) =>
  rows<{ sequence: number; f0: number; q: number; columns: Buffer }>(
    `select p.sequence, s.f0_mean as f0, s.q_mean as q, s.columns from phase p join phase_summary s on s.phase_id = p.id where s.fit_run_id = $1 order by p.sequence`,
    [fitRunId],
  );
const currentRun = async () => (await row<{ id: string }>(`select id from fit_run where campaign_id = $1 and current`, [bench.campaign.id]))?.id as string;
const body = (given: object = {}) => ({ offsetSlope: true, why: "To see what the settings do", ...given });
const always = () => true;

beforeAll(async () => {
  by = await actor("researcher");
  bench = await Bench.make({
    definition: {
      limits: [
        { id: "q", kind: "return", toleranceQPercent: 3, does: ["mail", "hold"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 },
        { id: "f0", kind: "return", tolerancePpm: 1e5, does: ["mail"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 },
      ],
    },
  });
  await bench.hello();
  await bench.run();
});

describe("a campaign fitted again", () => {
  test("with the same settings gives the same values, bit for bit, and says so side by side", async () => {
    const before = await currentRun();
    const { id } = await startRefit({ by, campaignId: bench.campaign.id, body: body(), now });
    expect(await findWaitingRuns()).toContain(id);
    expect(await carryOn({ fitRunId: id, now, hasTime: always })).toBe(false);

    const run = await readFitRun({ fitRunId: id });
    expect(run).toMatchObject({ state: "ready", current: false, done: run.total, by: by.name, found: [] });
    expect(run.total).toBe(90);
    expect(await summaries(id)).toEqual(await summaries(before));
    const { phases, changes } = await compareFitRuns({ fitRunId: id });
    expect(phases).toHaveLength(6);
    for (const { ours, theirs } of phases) expect(ours).toEqual(theirs);
    for (const change of changes) expect(change).toMatchObject({ f0Ppm: 0, qPercent: 0 });
  });

  test("with another readout moves f0 as theory says, beside the first run, which stays current", async () => {
    const before = await currentRun();
    const { id } = await startRefit({ by, campaignId: bench.campaign.id, body: body({ readout: "displacement" }), now });
    await carryOn({ fitRunId: id, now, hasTime: always });
    expect(await currentRun()).toBe(before);
    const { changes } = await compareFitRuns({ fitRunId: id, with: before });
    // The same curve read as a displacement has its phase turned by f0/f: to first order nothing moves for a high Q, and 1/(2Q²) bounds it.
    for (const { medium, f0Ppm } of changes) expect(Math.abs(f0Ppm)).toBeLessThan(medium === "air" ? 1 : 1e6 / (2 * 60 ** 2));
    expect(changes.find(({ medium }) => medium === "sample")?.f0Ppm).not.toBe(0);
  });

  test("is taken up by another worker where one stopped, and by two at once without doubling anything", async () => {
    const { id } = await startRefit({ by, campaignId: bench.campaign.id, body: body(), now });
    let phases = 0;
    expect(await carryOn({ fitRunId: id, now, hasTime: () => phases++ < 3 })).toBe(true);
    expect((await readFitRun({ fitRunId: id })).state).toBe("waiting");
    expect(await Promise.all([carryOn({ fitRunId: id, now, hasTime: always }), carryOn({ fitRunId: id, now, hasTime: always })])).toEqual([false, false]);
    expect(await summaries(id)).toEqual(await summaries(await currentRun()));
    const fits = await row<{ n: number }>(`select count(*)::int as n from fit where fit_run_id = $1`, [id]);
    expect(fits?.n).toBe(90);
  });

  test("can be given up while it is being made, not afterwards", async () => {
    const { id } = await startRefit({ by, campaignId: bench.campaign.id, body: body(), now });
    expect(await cancelRefit({ by, fitRunId: id, now })).toEqual({ id, state: "cancelled" });
    expect(await cancelRefit({ by, fitRunId: id, now })).toEqual({ id, state: "cancelled" });
    expect(await carryOn({ fitRunId: id, now, hasTime: always })).toBe(false);
    expect((await readFitRun({ fitRunId: id })).state).toBe("cancelled");
    await expect(makeCurrent({ by, fitRunId: id, now })).rejects.toMatchObject({ status: 409 });
    await expect(cancelRefit({ by, fitRunId: await currentRun(), now })).rejects.toMatchObject({ status: 409 });
  });

  test("one at a time, by a researcher, of a campaign that has something to fit", async () => {
    const { id } = await startRefit({ by, campaignId: bench.campaign.id, body: body(), now });
    await expect(startRefit({ by, campaignId: bench.campaign.id, body: body(), now })).rejects.toMatchObject({ status: 409 });
    await cancelRefit({ by, fitRunId: id, now });
    await expect(startRefit({ by: await actor("operator"), campaignId: bench.campaign.id, body: body(), now })).rejects.toMatchObject({ status: 403 });
    const fresh = await Bench.make();
    await expect(startRefit({ by, campaignId: fresh.campaign.id, body: body(), now })).rejects.toMatchObject({ status: 409 });
    await expect(startRefit({ by, campaignId: "999999", body: body(), now })).rejects.toMatchObject({ status: 404 });
  });
});

describe("made current", () => {
  test("a limit that only the new fits break becomes an alarm found on refit, which holds and mails nothing", async () => {
    const campaignId = bench.campaign.id;
    const { id } = await startRefit({ by, campaignId, body: body(), now });
    await carryOn({ fitRunId: id, now, hasTime: always });
    // What fits with other settings would have found is written as the worker writes it.
    const phase = await row<{ phaseId: string; stepId: string }>(`select id as "phaseId", step_id as "stepId" from phase where campaign_id = $1 order by sequence desc limit 1`, [campaignId]);
    const found = [{ limitId: "q", kind: "return", ...phase, cycle: 3, value: -4.2, limit: 3, unit: "%", text: "air reference: Q is −4.2 % from the baseline, limit ± 3 %" }];
    await sequelize.query(`update fit_run set found = $2 where id = $1`, { bind: [id, JSON.stringify(found)] });

    expect(await makeCurrent({ by, fitRunId: id, now })).toEqual({ id, current: true });
    expect(await makeCurrent({ by, fitRunId: id, now })).toEqual({ id, current: true });
    expect((await findFitRuns({ campaignId })).items.filter(({ current }) => current).map((run) => run.id)).toEqual([id]);
    const alarms = await rows(`select limit_id as "limitId", found_on_refit as "foundOnRefit", state, fit_run_id as "fitRunId" from alarm where campaign_id = $1`, [campaignId]);
    expect(alarms).toEqual([{ limitId: "q", foundOnRefit: true, state: "unacknowledged", fitRunId: id }]);
    expect(await rows(`select n.id from notification n join alarm a on a.id = n.alarm_id where a.campaign_id = $1`, [campaignId])).toEqual([]);
    expect(await rows(`select id from hold where campaign_id = $1`, [campaignId])).toEqual([]);

    const again = await startRefit({ by, campaignId, body: body(), now });
    await carryOn({ fitRunId: again.id, now, hasTime: always });
    await sequelize.query(`update fit_run set found = $2 where id = $1`, { bind: [again.id, JSON.stringify(found)] });
    await makeCurrent({ by, fitRunId: again.id, now });
    expect(await rows(`select id from alarm where campaign_id = $1`, [campaignId])).toHaveLength(1);
  });

  test("limits are judged in the order in which phases were measured, as when they were new", async () => {
    const drifting = await Bench.make({
      definition: { limits: [{ id: "q", kind: "return", toleranceQPercent: 3, does: ["note"], clearAt: 0.8, falseAlarmsPerYear: 1, maxTimes: 2 }], baseline: { airReferences: 1 } },
    });
    drifting.truth = ({ medium, sequence }) => (medium === "air" ? { f0Hz: 2400, q: 1800 * (1 - 0.01 * sequence) } : { f0Hz: 2100, q: 60 });
    await drifting.hello();
    await drifting.run();
    const { id } = await startRefit({ by, campaignId: drifting.campaign.id, body: body(), now });
    await carryOn({ fitRunId: id, now, hasTime: always });
    const { found } = await readFitRun({ fitRunId: id });
    expect(found).toHaveLength(1);
    expect(found[0]).toMatchObject({ limitId: "q", cycle: 2 });
    const noted = await rows<{ text: string }>(`select text from campaign_event where campaign_id = $1 and kind = 'limit' order by id`, [drifting.campaign.id]);
    expect(noted[0].text).toContain(found[0].text);
  });

  test("while the campaign runs, phases that closed meanwhile are taken up first, and new readings are fitted as the run says", async () => {
    const running = await Bench.make();
    await running.hello();
    const stop = await running.run(({ cycle }) => cycle === 2);
    const campaignId = running.campaign.id;
    const { id } = await startRefit({ by, campaignId, body: body({ offsetSlope: false }), now });
    await carryOn({ fitRunId: id, now, hasTime: always });
    if (!stop) throw new Error("the campaign ended too early");
    await running.carryOut(stop);
    await running.run(({ cycle }) => cycle === 3);
    await makeCurrent({ by, fitRunId: id, now });
    const open = await running.next();
    if (open) await running.carryOut(open);
    await running.run();
    const bare = await rows(
      `select p.id from phase p where p.campaign_id = $1 and p.closed_at is not null and not exists (select 1 from phase_summary s where s.phase_id = p.id and s.fit_run_id = $2)`,
      [campaignId, id],
    );
    expect(bare).toEqual([]);
    const campaign = await row<{ state: string }>(`select state from campaign where id = $1`, [campaignId]);
    expect(campaign?.state).toBe("finished");
  });
});
