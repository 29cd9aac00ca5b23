import { afterAll, describe, expect, test } from "vitest";
import { rows, sequelize } from "@/lib/db";
import { upload } from "../../factories/upload";
import { workbookOf } from "../../factories/workbook";

afterAll(() => sequelize.close());

const HEAD = ["Time", "Medium", "f0 / Hz", "Q", "T / °C"];
const mapping = { Time: "takenAt", Medium: "medium", "f0 / Hz": "f0Hz", "T / °C": "temperatureC" };
const at = (s: number) => new Date(Date.UTC(2026, 2, 2, 8, 0, s));

describe("a workbook", () => {
  test("is imported from its first sheet: dates in the zone chosen, formulas by their values, gaps as gaps", async () => {
    const file = workbookOf([
      HEAD,
      [at(0), "air", 2400.25, 1800, 20.5],
      [at(10), "air", { formula: "C2+0.5", value: 2400.75 }, 1801, null],
      ["2026-03-02 08:00:20", "air", "2401.25", 1802, 20.25],
    ]);
    const { status, body } = await upload({ file, fileName: "old.xlsx", fields: { mapping, format: { timeZone: "Europe/Berlin" } } });
    expect(body.errors).toBeUndefined();
    expect(status).toBe(201);
    const read = await rows(`select r.at, f.f0_hz as f0, f.q, r.temperature_c as t from step s join reading r on r.step_id = s.id join fit f on f.step_id = r.step_id and f.idx = r.idx where s.campaign_id = $1 order by r.idx`, [body.campaignId]);
    expect(read).toEqual([
      { at: new Date("2026-03-02T07:00:00Z"), f0: 2400.25, q: 1800, t: 20.5 },
      { at: new Date("2026-03-02T07:00:10Z"), f0: 2400.75, q: 1801, t: null },
      { at: new Date("2026-03-02T07:00:20Z"), f0: 2401.25, q: 1802, t: 20.25 },
    ]);
  });

  test("is refused with the row and the reason; what a formula failed at is no number", async () => {
    const { status, body } = await upload({ file: workbookOf([HEAD, [at(0), "air", { formula: "1/0", value: "#DIV/0!" }, 1800, 20], [at(10), "=1+1", 2400, 1800, 20]]), fields: { mapping } });
    expect(status).toBe(422);
    expect(body.errors).toEqual([{ path: "line 2, f0 / Hz", message: "“#DIV/0!” is not a number" }]);
  });
});
