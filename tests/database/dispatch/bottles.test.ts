import { afterAll, expect, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import { recordLoad } from "@/lib/rigs/record-load";
import { Bench } from "@/tests/factories/bench";
import { buildLoad } from "@/tests/factories/load";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

test("a fill waits for the right bottle when another liquid stands on its port", async () => {
  const bench = await Bench.make();
  await bench.hello();
  const slot = await row<{ lotId: string }>(`select lot_id as "lotId" from campaign_slot where campaign_id = $1`, [bench.campaign.id]);
  await buildLoad({ rigId: bench.rig.id, port: 1 });
  expect(await bench.run(({ kind }) => kind === "fill")).toBeUndefined();
  expect(await rows(`select kind, port from operator_task where campaign_id = $1 and state = 'open'`, [bench.campaign.id])).toEqual([{ kind: "load", port: 1 }]);

  await recordLoad({ by: await actor("operator"), now: bench.now, rigId: bench.rig.id, port: 1, lotId: slot?.lotId as string, volumeMl: 500, how: "replace" });
  expect(await bench.next()).toMatchObject({ kind: "fill", params: { port: 1 } });
});
