import { afterAll, describe, expect, test } from "vitest";
import { resumeCampaign } from "@/lib/campaigns/resume";
import { sequelize } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";
import { Alarm } from "@/models/alarm";
import { Hold } from "@/models/hold";
import { Notification } from "@/models/notification";
import { Bench } from "@/tests/factories/bench";
import { actor, buildPerson } from "@/tests/factories/person";
import { limitOf } from "@/tests/numerics/limits/limit-facts";

afterAll(() => sequelize.close());

const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5 }, driveV: 0.1 };
const air = { kind: "measure" as const, medium: "air", repeats: 4, discard: 0, pauseS: 0, sweep };
const reference = { ...air, id: "air", role: "reference" as const };

type UntilClean = Extract<Definition["blocks"][number], { kind: "untilClean" }>;

const untilClean = (given: Partial<UntilClean> = {}): UntilClean => ({
  id: "clean",
  kind: "untilClean",
  tolerancePpm: 20,
  maxTimes: 3,
  otherwise: "hold",
  blocks: [{ id: "wash", kind: "rinse", slot: "sample", volumeMl: 10, times: 2 }],
  measure: { ...air, id: "check", role: "check" },
  ...given,
});

const end = { id: "end", kind: "drain" as const };

const done = (bench: Bench) => bench.handled.filter(({ role }) => role !== "find").map(({ kind, role }) => role ?? kind);

const count = (bench: Bench, what: string) => done(bench).filter((step) => step === what).length;

/** f0 in air moves by so many ppm in the phase at hand; phases of each role count from 1. */
function shiftAir(bench: Bench, ppmOf: (role: string, nth: number) => number) {
  bench.truth = () => {
    const role = bench.handled.at(-1)?.role ?? "";
    return { f0Hz: 2400 * (1 + ppmOf(role, count(bench, role)) * 1e-6), q: 1800 };
  };
}

async function benchWith(definition: Partial<Definition>, ppmOf: Parameters<typeof shiftAir>[1] = () => 0) {
  await buildPerson({ role: "operator" });
  const bench = await Bench.make({ definition });
  shiftAir(bench, ppmOf);
  await bench.hello();
  return bench;
}

async function stateOf({ campaign }: Bench) {
  await campaign.reload();
  return campaign.state;
}

const holdsOf = ({ campaign }: Bench) => Hold.findAll({ where: { campaignId: campaign.id }, order: ["id"] });
const systemAlarms = ({ campaign }: Bench) => Alarm.findAll({ where: { campaignId: campaign.id, source: "system" } });

describe("until clean", () => {
  test("a cell that is clean at once is cleaned once", async () => {
    const bench = await benchWith({ blocks: [reference, untilClean(), end] });
    expect(await bench.run()).toBeUndefined();
    expect(done(bench)).toEqual(["reference", "rinse", "check", "drain"]);
    expect(await stateOf(bench)).toBe("finished");
    expect(await systemAlarms(bench)).toEqual([]);
  });

  test("a cell that is clean after two turns is cleaned twice", async () => {
    const bench = await benchWith({ blocks: [reference, untilClean(), end] }, (role, nth) => (role === "check" && nth === 1 ? -60 : 0));
    await bench.run();
    expect(done(bench)).toEqual(["reference", "rinse", "check", "rinse", "check", "drain"]);
    expect(await stateOf(bench)).toBe("finished");
    expect(await systemAlarms(bench)).toEqual([]);
  });

  test("a Q that stays off counts where the block gives it a tolerance", async () => {
    const bench = await benchWith({ blocks: [reference, untilClean({ toleranceQPercent: 2, maxTimes: 2, otherwise: "continue" }), end] });
    bench.truth = () => ({ f0Hz: 2400, q: bench.handled.at(-1)?.role === "check" ? 1700 : 1800 });
    await bench.run();
    expect(count(bench, "check")).toBe(2);
  });

  test("a cell that is never clean holds for a limit and mails; going on here passes it", async () => {
    const bench = await benchWith({ blocks: [reference, untilClean(), end] }, (role) => (role === "check" ? -60 : 0));
    expect(await bench.run()).toBeUndefined();
    expect(done(bench)).toEqual(["reference", "rinse", "check", "rinse", "check", "rinse", "check"]);
    expect(await stateOf(bench)).toBe("held");
    const [hold, ...others] = await holdsOf(bench);
    expect(others).toEqual([]);
    expect(hold).toMatchObject({ reason: "limit", releasedAt: null });
    expect(hold.text).toMatch(/^Cleaning 3 times did not bring the air reference back within 20 ppm: f0 is -(59|60)\.\d ppm off\.$/);

    const [alarm, ...more] = await systemAlarms(bench);
    expect(more).toEqual([]);
    expect(alarm).toMatchObject({ kind: "not-clean", state: "unacknowledged", actionText: "The campaign holds." });
    expect(await Notification.count({ where: { alarmId: alarm.id } })).toBeGreaterThan(0);

    await resumeCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, from: "here", now: bench.now });
    expect(await bench.run()).toBeUndefined();
    expect(done(bench).slice(7)).toEqual(["drain"]);
    expect(await stateOf(bench)).toBe("finished");
  });

  test("a cell that is never clean is left so where the protocol says to continue", async () => {
    const bench = await benchWith({ blocks: [reference, untilClean({ otherwise: "continue" }), end] }, (role) => (role === "check" ? -60 : 0));
    await bench.run();
    expect(done(bench)).toEqual(["reference", "rinse", "check", "rinse", "check", "rinse", "check", "drain"]);
    expect(await stateOf(bench)).toBe("finished");
    expect(await holdsOf(bench)).toEqual([]);
  });

  test("a cell that is never clean stops the campaign where the protocol says so", async () => {
    const bench = await benchWith({ blocks: [reference, untilClean({ otherwise: "stop", maxTimes: 1 }), end] }, (role) => (role === "check" ? -60 : 0));
    await bench.run();
    expect(done(bench)).toEqual(["reference", "rinse", "check"]);
    expect(await stateOf(bench)).toBe("stopped");
    expect(bench.campaign.endText).toContain("Cleaning once did not bring the air reference back within 20 ppm");
  });

  test("with no reference yet one turn passes, whatever the check finds", async () => {
    const bench = await benchWith({ blocks: [untilClean(), reference, untilClean({ id: "later", blocks: [{ id: "later-wash", kind: "drain" }], measure: { ...air, id: "later-check", role: "check" } })] }, (role, nth) =>
      role === "check" && nth === 1 ? 500 : 0,
    );
    await bench.run();
    expect(done(bench)).toEqual(["rinse", "check", "reference", "drain", "check"]);
    expect(await stateOf(bench)).toBe("finished");
  });
});

describe("clean again", () => {
  const limit = (given: { maxTimes?: number } = {}) => limitOf({ kind: "return", id: "back", tolerancePpm: 60, does: ["mail", "cleanAgain"], ...given });
  const cleaning = [{ id: "wash", kind: "rinse" as const, slot: "sample", volumeMl: 10, times: 2 }];
  const cycles = (times: number): Definition["blocks"] => [
    {
      id: "cycles",
      kind: "repeat",
      times,
      blocks: [reference, { id: "short", kind: "measure", medium: "air", role: "check", repeats: 4, discard: 0, pauseS: 0, sweep }],
    },
  ];
  const ordinary = ["reference", "check", "reference", "check", "reference", "check"];

  test("cleaning and the reference again come at the boundary after the broken reference, before the next phase", async () => {
    const bench = await benchWith({ limits: [limit()], cleaning, blocks: cycles(5) }, (role, nth) => (role === "reference" && nth === 4 ? -120 : 0));
    await bench.run();
    expect(done(bench)).toEqual([...ordinary, "reference", "rinse", "drain", "reference", "check", "reference", "check"]);
    expect(await stateOf(bench)).toBe("finished");
    expect(await holdsOf(bench)).toEqual([]);
  });

  test.each([
    { maxTimes: undefined, turns: 2, words: "Cleaning again 2 times did not bring it back within the limit." },
    { maxTimes: 1, turns: 1, words: "Cleaning again once did not bring it back within the limit." },
    { maxTimes: 3, turns: 3, words: "Cleaning again 3 times did not bring it back within the limit." },
  ])("a reference that stays away holds when $turns of $turns cleanings did not help, and going on here lets it pass", async ({ maxTimes, turns, words }) => {
    const bench = await benchWith({ limits: [limit(maxTimes === undefined ? {} : { maxTimes })], cleaning, blocks: cycles(4) }, (role, nth) => (role === "reference" && nth > 3 ? -120 : 0));
    expect(await bench.run()).toBeUndefined();
    const cleaned = Array.from({ length: turns }, () => ["rinse", "drain", "reference"]).flat();
    expect(done(bench)).toEqual([...ordinary, "reference", ...cleaned]);
    expect(await stateOf(bench)).toBe("held");
    expect(await holdsOf(bench)).toMatchObject([{ reason: "limit", text: words, releasedAt: null }]);
    expect(await Alarm.count({ where: { campaignId: bench.campaign.id, source: "limit", limitId: "back" } })).toBe(1);
    const [alarm] = await systemAlarms(bench);
    expect(await Notification.count({ where: { alarmId: alarm.id } })).toBeGreaterThan(0);

    await resumeCampaign({ by: await actor("operator"), campaignId: bench.campaign.id, from: "here", now: bench.now });
    await bench.run();
    expect(done(bench).slice(ordinary.length + 1 + cleaned.length)).toEqual(["check"]);
    expect(await stateOf(bench)).toBe("finished");
  });

  test("a reference that came back counts from nought: the next breach is cleaned as often again", async () => {
    const away = new Set([4, 6, 7]);
    const bench = await benchWith({ limits: [limit()], cleaning, blocks: cycles(5) }, (role, nth) => (role === "reference" && away.has(nth) ? -120 : 0));
    await bench.run();
    expect(done(bench)).toEqual([...ordinary, "reference", "rinse", "drain", "reference", "check", "reference", "rinse", "drain", "reference", "rinse", "drain", "reference", "check"]);
    expect(await stateOf(bench)).toBe("finished");
  });
});
