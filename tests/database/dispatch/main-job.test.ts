import { afterAll, beforeAll, expect, test } from "vitest";
import { rows, row, sequelize } from "@/lib/db";
import { Bench } from "@/tests/factories/bench";

afterAll(() => sequelize.close());

let bench: Bench;

beforeAll(async () => {
  bench = await Bench.make();
  await bench.hello();
  await bench.run();
});

test("a campaign runs from queue to end and counts every repeat once", async () => {
  const campaign = await row<{ state: string; rigNumber: number }>(`select state, rig_number as "rigNumber" from campaign where id = $1`, [bench.campaign.id]);
  expect(campaign).toEqual({ state: "finished", rigNumber: 1 });
  const phases = await rows<{ medium: string; n: number; nUsed: number; cycle: number }>(
    `select p.medium, p.cycle, s.n, s.n_used as "nUsed" from phase p join phase_summary s on s.phase_id = p.id where p.campaign_id = $1 order by p.sequence`,
    [bench.campaign.id],
  );
  expect(phases).toEqual([1, 2, 3].flatMap((cycle) => [
    { medium: "air", cycle, n: 10, nUsed: 10 },
    { medium: "sample", cycle, n: 20, nUsed: 20 },
  ]));
});

test("the resonance is searched once in each medium, then followed", () => {
  const measured = bench.handled.filter(({ kind }) => kind === "measure").map(({ role, cycle, params }) => `${cycle} ${role} ${"medium" in params ? params.medium : ""}`);
  expect(measured.filter((text) => text.includes("find"))).toEqual(["1 find air", "1 find sample"]);
  expect(measured.slice(0, 2)).toEqual(["1 find air", "1 reference air"]);
});

test("sequence numbers follow each other without a hole", () => {
  expect(bench.handled.map(({ sequence }) => sequence)).toEqual(bench.handled.map((_, i) => i + 1));
});

test("phase values hold the truth within five of their uncertainties", async () => {
  const phases = await rows<{ medium: string; f0: number; u: number; q: number; uQ: number }>(
    `select p.medium, s.f0_mean as f0, s.f0_u as u, s.q_mean as q, s.q_u as "uQ" from phase p join phase_summary s on s.phase_id = p.id where p.campaign_id = $1`,
    [bench.campaign.id],
  );
  expect(phases).toHaveLength(6);
  for (const { medium, f0, u, q, uQ } of phases) {
    const truth = bench.truth({ medium, sequence: 1, index: 0 });
    expect(Math.abs(f0 - truth.f0Hz)).toBeLessThan(5 * u);
    expect(Math.abs(q - truth.q)).toBeLessThan(5 * uQ);
    expect(u).toBeGreaterThan(0);
  }
});

test("the baseline is the mean of the first three references", async () => {
  const baseline = await row<{ f0Hz: number; n: number; complete: boolean }>(
    `select f0_hz as "f0Hz", n, complete_at is not null as complete from baseline where campaign_id = $1`,
    [bench.campaign.id],
  );
  const mean = await row<{ f0: number }>(
    `select avg(s.f0_mean) as f0 from phase p join phase_summary s on s.phase_id = p.id where p.campaign_id = $1 and p.role = 'reference'`,
    [bench.campaign.id],
  );
  expect(baseline).toMatchObject({ n: 3, complete: true });
  expect(baseline?.f0Hz).toBeCloseTo(mean?.f0 ?? NaN, 9);
});

test("a phase of one repeat has the standard errors of its fit, of f0 and of Q", async () => {
  const single = await Bench.make({ definition: { blocks: [{ id: "one", kind: "measure", medium: "air", role: "reference", repeats: 1, discard: 0, pauseS: 0, sweep: { centre: "track", span: { halfWidths: 8 }, points: 101, dwell: { s: 0.1 }, driveV: 0.1 } }] } });
  await single.hello();
  await single.run();
  const found = await row<{ f0U: number; f0Std: number; qU: number; qStd: number }>(
    `select s.f0_u as "f0U", f.f0_std_hz as "f0Std", s.q_u as "qU", f.q_std as "qStd" from phase p join phase_summary s on s.phase_id = p.id
       join fit f on f.step_id = p.step_id and f.fit_run_id = s.fit_run_id where p.campaign_id = $1`,
    [single.campaign.id],
  );
  expect(found?.f0U).toBe(found?.f0Std);
  expect(found?.qU).toBe(found?.qStd);
  expect(found?.qU).toBeGreaterThan(0);
});
