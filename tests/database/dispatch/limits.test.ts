import { describe, expect, test } from "vitest";
import { acknowledgeAlarm } from "@/lib/alarms/acknowledge";
import { getAlarm } from "@/lib/alarms/read";
import { resumeCampaign } from "@/lib/campaigns/resume";
import type { Limit } from "@/lib/protocol/schema";
import { Alarm } from "@/models/alarm";
import { CampaignEvent } from "@/models/campaign-event";
import { Hold } from "@/models/hold";
import { Notification } from "@/models/notification";
import { Step } from "@/models/step";
import { Bench, type Truth } from "@/tests/factories/bench";
import { actor, buildPerson } from "@/tests/factories/person";
import { aDefinition } from "@/tests/factories/protocol";
import { limitOf } from "@/tests/numerics/limits/limit-facts";

const blocks = (times: number) =>
  aDefinition().blocks.map((block) =>
    block.kind === "repeat" ? { ...block, times, blocks: block.blocks.map((inner) => (inner.kind === "measure" ? { ...inner, repeats: 4 } : inner)) } : block,
  );

/** f0 in air moves by so many ppm from the fourth reference on; a liquid stays what it is. */
const airMoves = (bench: Bench, ppmOf: (reference: number) => number): Truth => {
  return ({ medium, sequence }) => {
    if (medium !== "air") return { f0Hz: 2100, q: 60 };
    const before = bench.handled.filter((step) => step.kind === "measure" && step.role === "reference" && step.sequence < sequence).length;
    return { f0Hz: 2400 * (1 + ppmOf(before + 1) * 1e-6), q: 1800 };
  };
};

async function benchWith(limits: Limit[], { times = 6, ppmOf = () => 0, ...more }: { times?: number; ppmOf?: (reference: number) => number } & Parameters<typeof aDefinition>[0] = {}) {
  await buildPerson({ role: "operator" });
  const bench = await Bench.make({ definition: { limits, blocks: blocks(times), ...more } });
  bench.truth = airMoves(bench, ppmOf);
  await bench.hello();
  return bench;
}

const alarmOf = (bench: Bench) => Alarm.findOne({ where: { campaignId: bench.campaign.id, source: "limit" } });
const references = (bench: Bench) => bench.handled.filter(({ role }) => role === "reference").length;

describe("return", () => {
  const limit = (does: Limit["does"], given = {}) => limitOf({ kind: "return", id: "back", tolerancePpm: 60, does, ...given });

  test("a sensor that does not come back: alarm, mail and hold as the limit says; it comes back, the alarm returns and clears", async () => {
    const bench = await benchWith([limit(["mail", "hold"])], { ppmOf: (reference) => (reference === 4 ? -90 : 0) });
    expect(await bench.run()).toBeUndefined();
    expect(references(bench)).toBe(4);
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("held");
    const alarm = await Alarm.findOne({ where: { campaignId: bench.campaign.id }, rejectOnEmpty: true });
    expect(alarm).toMatchObject({ source: "limit", limitId: "back", kind: "return", state: "unacknowledged", limitValue: 60, unit: "ppm" });
    expect(alarm.value).toBeCloseTo(-90, 0);
    expect(alarm.phaseId).not.toBeNull();
    expect(alarm.fitRunId).not.toBeNull();
    expect(await Hold.count({ where: { campaignId: bench.campaign.id, reason: "limit", releasedAt: null } })).toBe(1);
    const mails = await Notification.findAll({ where: { alarmId: alarm.id } });
    expect(mails.length).toBeGreaterThan(0);
    expect(mails[0].subject).toContain("air reference not back within its limit");

    const { series } = await getAlarm({ alarmId: alarm.id, now: bench.now });
    expect(series).toMatchObject({ unit: "ppm", low: -60, high: 60 });
    expect(series?.points).toHaveLength(4);
    expect(series?.points.at(-1)?.value).toBeCloseTo(-90, 0);

    const by = await actor("operator");
    await acknowledgeAlarm({ by, alarmId: alarm.id, now: bench.now });
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("held");
    await resumeCampaign({ by, campaignId: bench.campaign.id, from: "here", now: bench.now });
    await bench.run(() => references(bench) === 5);
    await alarm.reload();
    expect(alarm.state).toBe("cleared");
    expect(alarm.clearedBy).toBeNull();
  });

  test("what nobody looked at returns and stays open, and a further breach holds again", async () => {
    const bench = await benchWith([limit(["mail", "hold"])], { ppmOf: (reference) => (reference === 4 || reference === 6 ? 90 : 0) });
    await bench.run();
    const by = await actor("operator");
    await resumeCampaign({ by, campaignId: bench.campaign.id, from: "here", now: bench.now });
    const fill = await bench.run(() => references(bench) === 5);
    expect((await alarmOf(bench))?.state).toBe("returned");
    if (fill) await bench.carryOut(fill);
    await bench.run();
    expect(references(bench)).toBe(6);
    expect((await alarmOf(bench))?.state).toBe("unacknowledged");
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("held");
    expect(await Alarm.count({ where: { campaignId: bench.campaign.id } })).toBe(1);
  });

  test("cleanAgain cleans and measures the reference once more, and goes on when it is back", async () => {
    const bench = await benchWith([limit(["mail", "cleanAgain"])], {
      times: 5,
      cleaning: [{ id: "wash", kind: "rinse", slot: "sample", volumeMl: 10, times: 2 }],
      ppmOf: (reference) => (reference === 4 ? 90 : 0),
    });
    await bench.run();
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("finished");
    const rinses = await Step.findAll({ where: { campaignId: bench.campaign.id, kind: "rinse" } });
    expect(rinses).toHaveLength(1);
    const after = bench.handled.findIndex(({ kind }) => kind === "rinse");
    expect(bench.handled.slice(after).find(({ kind }) => kind === "measure")).toMatchObject({ role: "reference" });
    expect(references(bench)).toBe(6);
    expect((await alarmOf(bench))?.state).toBe("returned");
  });

  test("note leaves a line in the log and opens nothing", async () => {
    const bench = await benchWith([limit(["note"])], { times: 5, ppmOf: (reference) => (reference === 4 ? 90 : 0) });
    await bench.run();
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("finished");
    expect(await alarmOf(bench)).toBeNull();
    expect(await CampaignEvent.count({ where: { campaignId: bench.campaign.id, kind: "limit" } })).toBe(1);
  });

  test("stop ends the campaign", async () => {
    const bench = await benchWith([limit(["mail", "stop"])], { ppmOf: (reference) => (reference === 4 ? 90 : 0) });
    await bench.run();
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("stopped");
    expect((await alarmOf(bench))?.actionText).toBe("The campaign was stopped.");
  });
});

test("drift: a steady creep opens an alarm on its slope while measuring goes on", async () => {
  const bench = await benchWith([limitOf({ kind: "drift", id: "creep", quantity: "f0", ppmPerDay: 5, does: ["mail"] })], { times: 8, ppmOf: (reference) => -20 * reference });
  await bench.run();
  await bench.campaign.reload();
  expect(bench.campaign.state).toBe("finished");
  const alarm = await alarmOf(bench);
  expect(alarm).toMatchObject({ kind: "drift", unit: "ppm/d", state: "unacknowledged", actionText: "Measuring goes on." });
  expect(alarm?.value).toBeLessThan(-5);
});

describe("count", () => {
  const pump = { outcome: "failed" as const, failure: { code: "pump" as const, message: "no flow", retry: true } };

  test("so many failed attempts in a row hold before the step is given up, and a step done returns the alarm", async () => {
    const bench = await benchWith([limitOf({ kind: "count", id: "tries", failedSteps: 2, does: ["mail", "hold"] })], { maxAttempts: 5 });
    const fill = await bench.run(({ kind }) => kind === "fill");
    if (!fill) throw new Error("no fill came");
    await bench.finish(fill, pump);
    expect(await alarmOf(bench)).toBeNull();
    const again = await bench.next();
    await bench.finish(again ?? fill, pump);
    expect(await alarmOf(bench)).toMatchObject({ kind: "count", value: 2, limitValue: 2, state: "unacknowledged" });
    await bench.campaign.reload();
    expect(bench.campaign.state).toBe("held");
    expect(await bench.next()).toBeUndefined();

    const by = await actor("operator");
    await resumeCampaign({ by, campaignId: bench.campaign.id, from: "here", now: bench.now });
    const third = await bench.next();
    expect(third?.id).toBe(fill.id);
    await bench.carryOut(third ?? fill);
    expect((await alarmOf(bench))?.state).toBe("returned");
  });

  test("a step done in between begins the count anew", async () => {
    const bench = await benchWith([limitOf({ kind: "count", id: "tries", failedSteps: 2, does: ["mail", "hold"] })]);
    for (let cycle = 0; cycle < 2; cycle++) {
      const fill = await bench.run(({ kind }) => kind === "fill");
      if (!fill) throw new Error("no fill came");
      await bench.finish(fill, pump);
      await bench.carryOut((await bench.next()) ?? fill);
    }
    expect(await alarmOf(bench)).toBeNull();
  });
});
