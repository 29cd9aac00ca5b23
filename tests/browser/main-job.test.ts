import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, expect, inject, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import { createAgentToken } from "@/lib/rigs/tokens";
import { drift } from "@/lib/numerics/drift/drift";
import type { StabilityAnswer, DriftAnswer } from "@/lib/analysis/schema";
import { startRig } from "@/rig-simulator/start-rig";
import { account, signIn, browserOfTests } from "@/tests/browser/browser";
import { inbox, type Mail } from "@/tests/browser/inbox";
import { expectedDeviation, readTruth, type Measured } from "@/tests/browser/truth";
import { writeProtocol } from "@/tests/browser/write-protocol";
import { buildLiquid } from "@/tests/factories/liquid";
import { buildLoad } from "@/tests/factories/load";
import { buildLot } from "@/tests/factories/lot";
import { buildMount } from "@/tests/factories/mount";
import { buildRig } from "@/tests/factories/rig";
import { buildSensor } from "@/tests/factories/sensor";

const browser = browserOfTests();
const folder = mkdtempSync(path.join(tmpdir(), "longreed-truth-"));
const truthFile = path.join(folder, "truth.jsonl");
const simulator = new AbortController();
let simulating: Promise<void> = Promise.resolve();

afterAll(async () => {
  simulator.abort();
  await simulating;
  await sequelize.close();
  rmSync(folder, { recursive: true, force: true });
});

const CYCLES = 8;
const REPEATS = 40;
const PATIENCE = { timeout: 120_000, interval: 500 };

/** A rig without an agent yet, a mounted wire, and 2-propanol on port 2. */
async function furnish() {
  const administrator = await account("administrator", "A. Quill");
  const rig = await buildRig({ name: "Test bench", clock: "simulated", ports: 2, abilities: null });
  const sensor = await buildSensor({ serial: "WR-2301", nominalF0Hz: 2400, nominalQ: 2200 });
  await buildMount({ rigId: rig.id, sensorId: sensor.id, from: new Date("2026-01-01T00:00:00Z") });
  const liquid = await buildLiquid({ name: "2-Propanol", letter: "P", model: "2-propanol", ghs: ["H225", "H319", "H336"], flashPointC: 12 });
  const lot = await buildLot({ liquidId: liquid.id, code: "P-77" });
  await buildLoad({ rigId: rig.id, port: 2, lotId: lot.id, volumeMl: 2000 });
  const { token } = await createAgentToken({ by: { ...administrator, role: "administrator" }, now: new Date(), rigId: rig.id, name: "bench computer" });
  return { rig, sensor, lot, token };
}

test("the main job: protocol, queue, drift and pump failure mailed, an operator's phone, numbers that agree with the truth", { timeout: 420_000 }, async () => {
  const { appUrl } = inject("laboratory");
  const { token } = await furnish();
  const researcher = await account("researcher", "R. Tollan");
  const operator = await account("operator", "O. Pellick");

  // The rig's agent says hello, so that a protocol can be checked against it.
  simulating = startRig(
    { url: appUrl, token, scenario: "quick", seed: 7, speed: "fast", clockStart: "2026-01-05T08:00:00Z" },
    { signal: simulator.signal, truthFile, log: () => {} },
  );

  const desk = await browser.open();
  await signIn(desk, researcher);
  await writeProtocol(desk, { name: "Eight fills of 2-propanol", cycles: CYCLES, repeats: REPEATS });

  await desk.getByRole("link", { name: "Queue a campaign" }).click();
  await chooseWord(desk, "Sensor", /^WR-2301/);
  await chooseWord(desk, "Rig", /^Test bench/);
  await desk.getByLabel("Port for sample").selectOption("2");
  await desk.getByRole("button", { name: "Acknowledge as R. Tollan" }).first().waitFor();
  const acknowledge = desk.getByRole("button", { name: "Acknowledge as R. Tollan" });
  while ((await acknowledge.count()) > 0) await acknowledge.first().click();
  await desk.getByRole("button", { name: "Queue", exact: true }).first().click();
  await desk.waitForURL(/\/campaigns\/(C-)?\d+$/);
  const campaignId = /(\d+)$/.exec(new URL(desk.url()).pathname)?.[1] as string;

  // The pump fails in cycle 5: the campaign halts by itself and says so while the page is open.
  await desk.getByText("Halted").first().waitFor({ timeout: 120_000 });
  const pump = await mailAbout(/Test bench halted/, operator.email);
  expect(pump.subject).toMatch(/fill/i);
  expect(pump.text).toMatch(/Where: Test bench; sensor WR-2301; campaign C-\d+/);
  expect(pump.text).toMatch(/halted Mon 5 Jan \d\d:\d\d \(the rig's simulated time\)/);
  expect(pump.text).toContain("The step was given up and the campaign holds.");
  expect(pump.text).toContain(`${appUrl}/alarms/`);
  const away = await mailAbout(/air reference/, researcher.email);
  expect(away.text).toMatch(/ppm from the baseline|moves away from the baseline/);

  // An operator on a phone takes it on and lets it go on.
  const phone = await browser.open({ phone: true });
  await signIn(phone, operator);
  await phone.goto("/tasks");
  await phone.getByRole("button", { name: "I have this" }).first().click();
  await expect.poll(() => takenBy(campaignId), PATIENCE).toContain(operator.name);
  await phone.goto(`/campaigns/${campaignId}`);
  await phone.getByRole("button", { name: "Go on" }).click();
  await phone.getByRole("dialog").getByRole("button", { name: "Go on" }).click();

  await expect.poll(() => stateOf(campaignId), PATIENCE).toBe("finished");
  await desk.getByText("Finished").first().waitFor();
  await everyRepeatOnce(campaignId);

  await desk.getByRole("heading", { name: /Repeats/ }).waitFor();
  await desk.getByText(/drifts by/).first().waitFor();
  await desk.getByRole("button", { name: /^Statistic: Overlapping/ }).waitFor();

  // What the pages show comes from these answers; they agree with what the resonator really did.
  const answer = async <T>(call: string) => (await (await desk.request.get(`/api/campaigns/${campaignId}/${call}`)).json()) as T;
  const truth = readTruth(truthFile);
  const measured = (await answer<{ items: Measured[] }>("readings?medium=sample")).items;
  const { points } = await answer<StabilityAnswer>("stability?medium=sample&confidence=0.99");
  for (const { m, lower, upper } of points.filter((point) => point.edf >= 20)) {
    const expected = expectedDeviation(measured, truth, m);
    expect(expected).toBeGreaterThan(lower);
    expect(expected).toBeLessThan(upper);
  }
  expect(points.filter((point) => point.edf >= 20).length).toBeGreaterThanOrEqual(2);

  const air = await answer<DriftAnswer>("drift?medium=air&quantity=f0");
  const trueMeans = await trueMeansOf(campaignId, air, truth);
  const start = Date.parse(air.values[0].at);
  const trueLine = drift({ atDays: Float64Array.from(air.values, ({ at }) => (Date.parse(at) - start) / 86_400_000), values: trueMeans });
  expect(Math.abs((air.slopePerDay ?? NaN) - (trueLine?.slopePerDay ?? NaN))).toBeLessThan(2 * (air.u ?? NaN));
  expect(air.slopePerDay).toBeLessThan(0);
});

async function chooseWord(page: Awaited<ReturnType<typeof browser.open>>, label: string, option: RegExp) {
  await page.getByRole("button", { name: new RegExp(`^${label}:`) }).click();
  await page.getByRole("menuitemradio", { name: option }).click();
}

async function mailAbout(subject: RegExp, address: string): Promise<Mail> {
  let found: Mail | undefined;
  await expect
    .poll(async () => {
      found = (await inbox()).find((mail) => (subject.test(mail.subject) || subject.test(mail.text)) && mail.to.some((to) => to.address === address));
      return found !== undefined;
    }, PATIENCE)
    .toBe(true);
  return found as Mail;
}

const stateOf = async (campaignId: string) => (await row<{ state: string }>(`select state from campaign where id = $1`, [campaignId]))?.state;

const takenBy = async (campaignId: string) =>
  (await rows<{ name: string }>(`select p.name from alarm a join person p on p.id = a.acknowledged_by where a.campaign_id = $1`, [campaignId])).map(({ name }) => name);

async function everyRepeatOnce(campaignId: string) {
  const counts = await rows<{ medium: string; phases: number; repeats: number; distinct: number }>(
    `select p.medium, count(distinct p.id)::int as phases, count(*)::int as repeats, count(distinct (p.cycle, r.idx))::int as "distinct"
       from phase p join reading r on r.step_id = p.step_id where p.campaign_id = $1 group by 1 order by 1`,
    [campaignId],
  );
  const each = { phases: CYCLES, repeats: CYCLES * REPEATS, distinct: CYCLES * REPEATS };
  expect(counts).toEqual([{ medium: "air", ...each }, { medium: "sample", ...each }]);
}

/** Mean of the true f0 over the repeats of each phase, in the order of the drift's values. */
async function trueMeansOf(campaignId: string, { values }: DriftAnswer, truth: ReturnType<typeof readTruth>): Promise<Float64Array> {
  const phases = await rows<{ id: string; sequence: number; discard: number }>(`select id, sequence, discard from phase where campaign_id = $1`, [campaignId]);
  const byId = new Map(phases.map((phase) => [phase.id, phase]));
  return Float64Array.from(values, ({ phaseId }) => {
    const { sequence = 0, discard = 0 } = byId.get(phaseId) ?? {};
    const kept = [...truth.values()].filter((one) => one.sequence === sequence && one.index >= discard);
    return kept.reduce((sum, { f0Hz }) => sum + f0Hz, 0) / kept.length;
  });
}
