import { afterAll, expect, test, vi } from "vitest";
import { findAuditEvents } from "@/lib/audit/find";
import { createCampaign } from "@/lib/campaigns/create";
import { sequelize } from "@/lib/db";
import { createRig } from "@/lib/rigs/create";
import { updateRig } from "@/lib/rigs/update";
import { buildLoad } from "@/tests/factories/load";
import { buildProtocolVersion } from "@/tests/factories/protocol";
import { buildSensor } from "@/tests/factories/sensor";
import { now } from "@/tests/factories/now";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

test("a page names what its events are about and what they speak of, in one query more, whatever their number", async () => {
  const by = await actor("administrator");
  const { id: rigId } = await createRig({ by, now, name: "North bench", timeZone: "Europe/Berlin", ports: 4, wasteCapacityMl: 5000 });
  await updateRig({ by, now, rigId, wasteCapacityMl: 10_000 });
  const { lotId } = await buildLoad({ rigId });
  const { id: campaignId } = await createCampaign({ by, now, rigId, sensorId: (await buildSensor({ serial: "WR-1" })).id, protocolVersionId: (await buildProtocolVersion()).id, slots: { sample: { port: 1, lotId } }, name: "Ageing" });

  const asked = vi.spyOn(sequelize, "query");
  const { items } = await findAuditEvents({ by, limit: 50 });
  expect(asked).toHaveBeenCalledTimes(2);
  asked.mockRestore();

  const [made, changed] = items;
  expect(made).toMatchObject({ entity: "campaign", about: `C-${campaignId} Ageing` });
  expect(made.lines).toEqual(expect.arrayContaining([{ field: "rig", to: "North bench" }, { field: "sensor", to: "WR-1" }, { field: "slots", to: expect.stringMatching(/^sample port 1, lot Liquid \d+, LT-\d+$/) }]));
  expect(changed).toMatchObject({ entity: "rig", about: "North bench", lines: [{ field: "waste capacity / mL", from: "5\u2009000", to: "10\u2009000" }] });
});
