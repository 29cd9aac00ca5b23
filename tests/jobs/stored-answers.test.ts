import { afterAll, expect, test } from "vitest";
import { startFastPath } from "@/jobs/fast-path";
import { readDrift } from "@/lib/analysis/drift";
import { driftQuery } from "@/lib/analysis/schema";
import { change, inTransaction, row, rows, sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { refreshPhase } from "@/lib/phases/close-phase";
import { fillCampaign } from "@/scripts/lib/bench-campaign";
import { buildCampaign } from "@/tests/factories/campaign";
import { buildMount } from "@/tests/factories/mount";
import { now } from "@/tests/factories/now";
import { waitUntil } from "./wait-until";

afterAll(async () => {
  await listener().close();
  await sequelize.close();
});

const nothing = async () => undefined;

test("when a phase has changed, the worker answers anew what was asked, and only that", async () => {
  const like = await buildCampaign({ state: "running" });
  await buildMount({ rigId: like.rigId as string, sensorId: like.sensorId as string });
  const { campaignId, fitRunId } = await fillCampaign({ like: like.id, repeats: 100, phases: 5, now });
  const errors: unknown[] = [];
  const end = await startFastPath({ onError: (_, error) => errors.push(error), onMail: nothing, onRefit: nothing, onImport: nothing, onAdvanced: nothing });

  const query = driftQuery.parse({});
  const before = await readDrift(campaignId, query);
  const [{ stepId }] = await rows<{ stepId: string }>(`select step_id as "stepId" from phase where campaign_id = $1 order by sequence limit 1`, [campaignId]);
  await change(`update fit set f0_hz = f0_hz + 0.01 where fit_run_id = $1 and step_id = $2`, [fitRunId, stepId]);
  const stored = () => row<{ content: Buffer; answer: typeof before }>(`select content, answer from analysis_result where campaign_id = $1`, [campaignId]);
  const first = await stored();
  await inTransaction((transaction) => refreshPhase(transaction, { stepId, now }));

  const anew = await waitUntil("another answer", async () => {
    const found = await stored();
    return found && first && !found.content.equals(first.content) ? found : undefined;
  });
  expect(anew.answer.slopePerDay).not.toBe(before.slopePerDay);
  expect(await readDrift(campaignId, query)).toEqual(anew.answer);
  expect(await rows(`select 1 from analysis_result where campaign_id = $1`, [campaignId])).toHaveLength(1);
  await end();
  expect(errors).toEqual([]);
}, 60_000);
