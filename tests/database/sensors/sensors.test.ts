import { afterAll, describe, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { createSensor } from "@/lib/sensors/create";
import { findSensors, getSensor } from "@/lib/sensors/read";
import { sensorBody, sensorChange } from "@/lib/sensors/schema";
import { updateSensor } from "@/lib/sensors/update";
import { auditedActions } from "../../factories/audit";
import { buildMount } from "../../factories/mount";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildSensor } from "../../factories/sensor";

afterAll(() => sequelize.close());

const given = { kind: "wire" as const, nominalF0Hz: 2400, nominalQ: 1800 };

describe("createSensor", () => {
  test("records it, with who did", async () => {
    const { id } = await createSensor({ by: await actor("researcher"), now, serial: "WR-1", ...given });
    expect(await getSensor(id)).toMatchObject({ serial: "WR-1", readout: "velocity", mount: null, campaign: null, campaigns: 0 });
    expect(await auditedActions("sensor", id)).toEqual(["create"]);
  });

  test("a serial number is given once", async () => {
    const by = await actor("researcher");
    await createSensor({ by, now, serial: "WR-2", ...given });
    await expect(createSensor({ by, now, serial: "WR-2", ...given })).rejects.toMatchObject({ status: 409 });
  });

  test("an operator mounts sensors but does not make them", async () => {
    await expect(createSensor({ by: await actor("operator"), now, serial: "WR-3", ...given })).rejects.toMatchObject({ status: 403 });
  });

  test.each([
    ["a frequency of zero", { serial: "A", kind: "wire", nominalF0Hz: 0, nominalQ: 10 }],
    ["a kind that is none", { serial: "A", kind: "drum", nominalF0Hz: 1, nominalQ: 10 }],
    ["a radius given in micrometres", { serial: "A", ...given, radiusM: 50 }],
  ])("its schema refuses %s", (_, body) => {
    expect(sensorBody.safeParse(body).success).toBe(false);
  });

  test("the serial number never changes", () => {
    expect(sensorChange.safeParse({ serial: "other" }).success).toBe(false);
  });
});

describe("updateSensor", () => {
  test("a mounted sensor is not retired", async () => {
    const mount = await buildMount();
    await expect(updateSensor({ by: await actor("researcher"), now, sensorId: mount.sensorId, retired: true })).rejects.toMatchObject({ status: 409 });
  });

  test("null takes a note away, what is not named stays", async () => {
    const sensor = await buildSensor({ note: "bent" });
    const changed = await updateSensor({ by: await actor("researcher"), now, sensorId: sensor.id, note: null, nominalQ: 900 });
    expect(changed).toMatchObject({ note: null, nominalQ: 900, nominalF0Hz: 2400, kind: "wire" });
    expect(await auditedActions("sensor", sensor.id)).toEqual(["update"]);
  });
});

test("the list finds by serial number and says where each sensor is", async () => {
  const mount = await buildMount({ sensorId: (await buildSensor({ serial: "QX-77" })).id });
  const { items } = await findSensors({ limit: 10, retired: "false", search: "qx-7" });
  expect(items).toEqual([expect.objectContaining({ serial: "QX-77", mount: expect.objectContaining({ id: mount.id, rigId: mount.rigId }) })]);
});
