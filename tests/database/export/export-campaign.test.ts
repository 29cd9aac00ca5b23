import { readSheet } from "read-excel-file/node";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { row, rows, sequelize } from "@/lib/db";
import { excludeReadings } from "@/lib/exclusions/exclude";
import { exportCampaign } from "@/lib/export/export-campaign";
import type { ExportQuery } from "@/lib/export/schema";
import { Bench } from "@/tests/factories/bench";
import { actor } from "@/tests/factories/person";

afterAll(() => sequelize.close());

const now = new Date("2026-05-20T10:00:00Z");
let campaignId: string;

beforeAll(async () => {
  const bench = await Bench.make();
  await bench.hello();
  await bench.run();
  campaignId = bench.campaign.id;
  // What a spreadsheet would run, were it no text.
  await sequelize.query(`update campaign set name = '=HYPERLINK("http://127.0.0.1/","look")' where id = $1`, { bind: [campaignId] });
  const phase = await row<{ id: string }>(`select id from phase where campaign_id = $1 order by sequence limit 1`, [campaignId]);
  await excludeReadings({ by: await actor("researcher"), campaignId, phaseId: phase?.id as string, indices: [3], why: "A knock", now });
});

const exported = (query: Partial<ExportQuery>) => exportCampaign({ campaignId, query: { what: "phases", format: "json", ...query }, now });
const bytes = async (query: Partial<ExportQuery>) => Buffer.from(await (await exported(query)).arrayBuffer());
type Document = { about: Record<string, string | number>; columns: { name: string; unit: string }[]; items: Record<string, unknown>[] };
const document = async (what: ExportQuery["what"]) => (await (await exported({ what })).json()) as Document;

describe("readings", () => {
  test("are the same, row for row, as CSV, JSON and spreadsheet, and those of the database", async () => {
    const { items, columns } = await document("readings");
    const stored = await rows<{ f0: number; sequence: number; idx: number }>(
      `select f.f0_hz as f0, s.sequence, f.idx from step s join phase p on p.step_id = s.id join fit f on f.step_id = s.id where s.campaign_id = $1 order by s.sequence, f.idx`,
      [campaignId],
    );
    expect(items.map(({ f0Hz, sequence, index }) => ({ f0: f0Hz, sequence, idx: index }))).toEqual(stored);
    expect(items.filter(({ excluded }) => excluded)).toEqual([expect.objectContaining({ index: 3 })]);

    const [head, ...lines] = (await bytes({ what: "readings", format: "csv" })).toString("utf8").trimEnd().split("\n");
    expect(head.split(",")).toEqual(columns.map(({ name }) => name));
    expect(lines.map((line) => Number(line.split(",")[columns.findIndex(({ name }) => name === "f0Hz")]))).toEqual(stored.map(({ f0 }) => f0));

    const [names, units, ...cells] = await readSheet(await bytes({ what: "readings", format: "xlsx" }), "readings");
    expect(names).toEqual(columns.map(({ name }) => name));
    expect(units[columns.findIndex(({ name }) => name === "f0Hz")]).toBe("Hz");
    expect(cells.map((line) => line[columns.findIndex(({ name }) => name === "f0Hz")])).toEqual(stored.map(({ f0 }) => f0));
  });
});

describe("phases", () => {
  test("carry value, uncertainty, count and the fit run behind them", async () => {
    const { items } = await document("phases");
    const stored = await rows(
      `select p.sequence, s.f0_mean as "f0Hz", s.f0_u as "f0UHz", s.n_used as "nUsed", s.fit_run_id as "fitRunId" from phase p join phase_summary s on s.phase_id = p.id
        where p.campaign_id = $1 order by p.sequence`,
      [campaignId],
    );
    expect(items.map(({ sequence, f0Hz, f0UHz, nUsed, fitRunId }) => ({ sequence, f0Hz, f0UHz, nUsed, fitRunId }))).toEqual(stored);
  });
});

describe("results", () => {
  test("name quantity, medium, unit and what was used, with intervals", async () => {
    const { items } = await document("results");
    const drift = items.filter(({ result }) => String(result).startsWith("drift"));
    expect(drift.map(({ quantity, medium, unit }) => `${quantity} ${medium} ${unit}`)).toEqual(["f0 air Hz/d", "q air 1/d", "f0 sample Hz/d", "q sample 1/d"]);
    const deviations = items.filter(({ result }) => result === "overlapping Allan deviation within phases");
    expect(deviations.length).toBeGreaterThan(0);
    for (const { value, lower, upper, level, tauS } of deviations as Record<string, number>[]) {
      expect(lower).toBeLessThan(value);
      expect(upper).toBeGreaterThan(value);
      expect(level).toBe(0.683);
      expect(tauS).toBeGreaterThan(0);
    }
    expect(items.filter(({ result }) => String(result).startsWith("shift")).map(({ unit }) => unit)).toEqual(["ppm", "ppm", "ppm"]);
  });
});

test("every file says where its numbers come from, and no text of it is a formula", async () => {
  const { about } = await document("phases");
  expect(about).toMatchObject({ Campaign: `C-${campaignId}`, "Protocol version": 1, Readout: "velocity", "Offset slope fitted": "yes", Exported: now.toISOString() });
  const front = await readSheet(await bytes({ format: "xlsx" }), "about");
  expect(front).toContainEqual(["Name", `=HYPERLINK("http://127.0.0.1/","look")`]);
  const answer = await exported({ format: "xlsx" });
  expect(answer.headers.get("content-disposition")).toBe(`attachment; filename="C-${campaignId}-phases.xlsx"`);
  await answer.body?.cancel();
});

test("a campaign or fit run that is not there is refused before anything is sent", async () => {
  await expect(exportCampaign({ campaignId: "999999", query: { what: "phases", format: "csv" }, now })).rejects.toMatchObject({ status: 404 });
  await expect(exported({ fitRunId: "999999" })).rejects.toMatchObject({ status: 404 });
});
