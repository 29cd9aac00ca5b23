import { afterAll, beforeAll, expect, test } from "vitest";
import { heavy } from "@/lib/analysis/heavy";
import { offLoop } from "@/lib/analysis/off-loop";
import { driftQuery, stabilityQuery } from "@/lib/analysis/schema";
import { selectPhases, type SelectedPhase } from "@/lib/analysis/select-phases";
import { sequelize } from "@/lib/db";
import { fillCampaign } from "@/scripts/lib/bench-campaign";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { now } from "@/tests/factories/now";

afterAll(() => sequelize.close());

const MINUTE = 60_000;

let fitRunId: string;
let phases: SelectedPhase[];

beforeAll(async () => {
  const like = await buildCampaign({ state: "running" });
  await buildMount({ rigId: like.rigId as string, sensorId: like.sensorId as string });
  const filled = await fillCampaign({ like: like.id, repeats: 1200, phases: 12, now });
  fitRunId = filled.fitRunId;
  phases = await selectPhases(filled.campaignId, fitRunId, {});
}, MINUTE);

test(
  "what is computed in the other process is what would be computed here, each to the one who asked",
  async () => {
    const within = { phases, fitRunId, query: stabilityQuery.parse({}) };
    const ofQ = { phases: phases.slice(0, 5), fitRunId, query: stabilityQuery.parse({ quantity: "q", statistic: "mdev" }) };
    const line = { phases, query: driftQuery.parse({}) };
    const [a, b, c] = await Promise.all([offLoop("stability", within), offLoop("drift", line), offLoop("stability", ofQ)]);
    expect(a).toEqual(await heavy.stability(within));
    expect(a.points.length).toBeGreaterThan(3);
    expect(b).toEqual(heavy.drift(line));
    expect(c).toEqual(await heavy.stability(ofQ));
  },
  MINUTE,
);

test(
  "an error there is thrown here under its own name, and the next question is answered",
  async () => {
    const within = { phases, fitRunId, query: stabilityQuery.parse({}) };
    await expect(offLoop("stability", { ...within, query: { ...within.query, confidence: 2 } })).rejects.toMatchObject({ name: "RangeError" });
    expect(await offLoop("stability", within)).toEqual(await heavy.stability(within));
  },
  MINUTE,
);
