import { afterAll, describe, expect, test } from "vitest";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { rows, sequelize } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";
import { Alarm } from "@/models/alarm";
import { Hold } from "@/models/hold";
import { Notification } from "@/models/notification";
import { Bench } from "@/tests/factories/bench";
import { actor, buildPerson } from "@/tests/factories/person";

afterAll(() => sequelize.close());

const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5 }, driveV: 0.1 };
const air = { kind: "measure" as const, medium: "air", role: "reference" as const, repeats: 6, discard: 0, pauseS: 0, sweep };
const blocks = [{ ...air, id: "first" }, { ...air, id: "second" }];

/** f0 in Hz by the step at hand: its role, and how many of its role there have been with it. */
async function benchWith(definition: Partial<Definition>, f0Of: (role: string, nth: number) => number) {
  await buildPerson({ role: "operator" });
  const bench = await Bench.make({ definition: { blocks, ...definition } });
  bench.truth = () => {
    const role = bench.handled.at(-1)?.role ?? "";
    return { f0Hz: f0Of(role, bench.handled.filter((step) => step.role === role).length), q: 1800 };
  };
  await bench.hello();
  return bench;
}

const rolesOf = ({ handled }: Bench) => handled.map(({ role }) => role);

async function stateOf({ campaign }: Bench) {
  await campaign.reload();
  return campaign.state;
}

/** Phases in order, with their value and how many readings are kept. */
const phasesOf = ({ campaign }: Bench) =>
  rows<{ sequence: number; blockId: string; f0Hz: number | null; readings: number }>(
    `select p.sequence, s.block_id as "blockId", su.f0_mean as "f0Hz", (select count(*)::int from reading r where r.step_id = p.step_id) as readings
       from phase p join step s on s.id = p.step_id join phase_summary su on su.phase_id = p.id
      where p.campaign_id = $1 order by p.sequence`,
    [campaign.id],
  );

async function expectFailure({ campaign }: Bench, text: string) {
  expect(await Hold.findAll({ where: { campaignId: campaign.id, releasedAt: null } })).toMatchObject([{ reason: "failure", text }]);
  const alarms = await Alarm.findAll({ where: { campaignId: campaign.id } });
  expect(alarms).toMatchObject([{ source: "system", kind: "measurement", state: "unacknowledged" }]);
  expect(await Notification.count({ where: { alarmId: alarms[0].id } })).toBeGreaterThan(0);
}

const FAR_HZ = 3100;

describe("the search before the first measurement", () => {
  test("a resonance far from the nominal value is found where the protocol says to search", async () => {
    const bench = await benchWith({ search: { fromHz: 2900, toHz: 3300, points: 1201 } }, () => FAR_HZ);
    await bench.run();
    expect(rolesOf(bench)).toEqual(["find", "reference", "reference"]);
    expect(bench.handled[0].params).toMatchObject({ sweep: { startHz: 2900, stopHz: 3300, points: 1201 } });
    expect(await stateOf(bench)).toBe("finished");
    const phases = await phasesOf(bench);
    expect(phases).toHaveLength(2);
    for (const { f0Hz } of phases) expect(f0Hz).toBeCloseTo(FAR_HZ, 2);
  });

  test("a search that finds nothing holds with failure and mails; going on here searches again", async () => {
    const bench = await benchWith({}, (role, nth) => (role === "find" && nth === 1 ? FAR_HZ : 2400));
    expect(await bench.run()).toBeUndefined();
    expect(rolesOf(bench)).toEqual(["find"]);
    expect(await stateOf(bench)).toBe("held");
    expect(await phasesOf(bench)).toEqual([]);
    await expectFailure(bench, "No resonance was found in air.");

    await resumeCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, from: "here", now: bench.now });
    await bench.run();
    expect(rolesOf(bench)).toEqual(["find", "find", "reference", "reference"]);
    expect(await stateOf(bench)).toBe("finished");
  });
});

describe("a resonance that jumped out of the tracked sweep", () => {
  const JUMPED_HZ = 2430;

  test("is searched for and measured once more; the first phase keeps its readings and has no value", async () => {
    const bench = await benchWith({}, (role, nth) => ((role === "reference" && nth >= 2) || (role === "find" && nth >= 2) ? JUMPED_HZ : 2400));
    await bench.run();
    expect(rolesOf(bench)).toEqual(["find", "reference", "reference", "find", "reference"]);
    expect(await stateOf(bench)).toBe("finished");
    const [first, lost, again, ...more] = await phasesOf(bench);
    expect(more).toEqual([]);
    expect(first.f0Hz).toBeCloseTo(2400, 2);
    expect(lost).toMatchObject({ blockId: "second", f0Hz: null, readings: 6 });
    expect(again).toMatchObject({ blockId: "second", readings: 6 });
    expect(again.f0Hz).toBeCloseTo(JUMPED_HZ, 2);
    expect(again.sequence).toBe(lost.sequence + 2);
    expect(await Hold.count({ where: { campaignId: bench.campaign.id } })).toBe(0);
  });

  test("and is lost a second time holds with failure and mails", async () => {
    const bench = await benchWith({}, (role, nth) => (role === "reference" && nth >= 2 ? JUMPED_HZ : 2400));
    expect(await bench.run()).toBeUndefined();
    expect(rolesOf(bench)).toEqual(["find", "reference", "reference", "find", "reference"]);
    expect(await stateOf(bench)).toBe("held");
    const [, lost, again] = await phasesOf(bench);
    expect(lost).toMatchObject({ f0Hz: null, readings: 6 });
    expect(again).toMatchObject({ f0Hz: null, readings: 6 });
    await expectFailure(bench, "Air reference: more than half the fits were unusable, twice.");
  });
});
