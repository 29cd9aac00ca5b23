import { gzipSync } from "node:zlib";
import { afterAll, describe, expect, test } from "vitest";
import { row, sequelize } from "@/lib/db";
import { dropAbandoned } from "@/lib/imports/receive";
import { buildImportRun } from "../../factories/import-run";
import { hours } from "../../factories/now";
import { buildSensor } from "../../factories/sensor";
import { at, ORIGIN, signedInAs } from "../../factories/session";
import { POST } from "@/app/api/imports/route";
import { aCampaign, csvOf, upload } from "../../factories/upload";

afterAll(() => sequelize.close());

const counts = () =>
  row(
    `select (select count(*) from campaign) as campaigns, (select count(*) from step) as steps, (select count(*) from phase) as phases, (select count(*) from reading) as readings,
            (select count(*) from fit_run) as runs, (select count(*) from import_chunk) as chunks, (select count(*) from import_run where state = 'receiving') as receiving`,
  );

type Problem = { status: number; body: { type?: string; detail?: string; errors?: { path: string; message: string }[]; errorCount?: number } };
const refused = async (file: string | Uint8Array<ArrayBuffer>, fields: Record<string, string | object> = {}) => (await upload({ file, fields })) as Problem;

describe("a refused file", () => {
  test("names the line and the reason of every bad row, and nothing of it is imported", async () => {
    const before = await counts();
    const lines = csvOf(aCampaign({ cycles: 2, repeats: 10 })).split("\n");
    lines[7] = lines[7].replace(/,air,[^,]*/, ",air,-3");
    lines[20] = lines[20].replace(/^[^,]*/, "yesterday");
    const { status, body } = await refused(lines.join("\n"));
    expect(status).toBe(422);
    expect(body.errors).toEqual([
      { path: "line 8, f0Hz", message: "“-3” must be above 0" },
      { path: "line 21, takenAt", message: "“yesterday” is not a time of the form chosen" },
    ]);
    expect(body.errorCount).toBe(2);
    expect(body.detail).toMatch(/line 8.*Nothing was imported\.$/);
    expect(await counts()).toEqual(before);
  });

  test("tells fifty of many errors and counts them all", async () => {
    const { body } = await refused(`takenAt,medium,f0Hz,q\n${"2026-03-01,air,x,1\n".repeat(300)}`);
    expect(body.errors).toHaveLength(50);
    expect(body.errorCount).toBe(300);
  });

  test("may be sent again when it is mended, even the same one with another mapping", async () => {
    const file = "time,what,hz,q\n2026-03-03T00:00:00Z,air,2400,1800\n";
    expect((await refused(file)).status).toBe(422);
    expect((await refused(file, { mapping: { time: "takenAt", what: "medium", hz: "f0Hz" } })).status).toBe(201);
  });

  test.each([
    ["without columns of ours", "a,b\n1,2\n", /no column is takenAt/],
    ["with nothing but a header", "takenAt,medium,f0Hz,q\n", /no rows below/],
    ["of blank lines", "\n\n  \n", /no line with the names of columns/],
    ["that is no text", Uint8Array.of(0, 1, 2, 3, 10, 0, 0), /NUL|cannot be read/],
    ["that looks like a workbook and is none", new Uint8Array(Buffer.from("PK\x03\x04 and more")), /no workbook/],
    ["with a cycle in each row", `takenAt,medium,f0Hz,q,cycle\n${Array.from({ length: 20_500 }, (_, i) => `${new Date(Date.UTC(2020, 0, 1) + i * 1000).toISOString()},air,2400,1800,${i}`).join("\n")}`, /20500 phases/],
  ])("%s is told so", async (_, file, reason) => {
    const { status, body } = await refused(file);
    expect(status).toBe(422);
    expect(body.detail).toMatch(reason);
  });

  test("whose text would run in a spreadsheet is stored as text and shielded on its way out", async () => {
    const { status, body } = (await upload({ file: "takenAt,medium,f0Hz,q\n2026-03-04T00:00:00Z,\"=HYPERLINK(\"\"http://longreed.example\"\",\"\"x\"\")\",2400,1800\n" })) as { status: number; body: { campaignId: string } };
    expect(status).toBe(201);
    expect(await row(`select medium from phase where campaign_id = $1`, [body.campaignId])).toEqual({ medium: '=HYPERLINK("http://longreed.example","x")' });
  });

  test("with a medium of control characters or none is refused", async () => {
    const { body } = await refused("takenAt,medium,f0Hz,q\n2026-03-05,a\u0007b,2400,1800\n2026-03-05,,2400,1800\n");
    expect(body.errors?.map(({ message }) => message)).toEqual(["holds a control character", "names no medium"]);
  });
});

describe("an upload that is not as it should be", () => {
  const send = async (body: BodyInit | null, headers: Record<string, string> = {}) => {
    const { cookie } = await signedInAs("researcher");
    const response = await POST(new Request(`${ORIGIN}/api/imports`, { method: "POST", headers: { cookie, origin: ORIGIN, ...headers }, body }), at());
    return { status: response.status, body: (await response.json()) as Problem["body"] };
  };

  test.each([
    ["of no multipart", JSON.stringify({ name: "x" }), { "content-type": "application/json" }, 415],
    ["without a boundary", "x", { "content-type": "multipart/form-data; " }, 400],
    ["cut off", '--b\r\ncontent-disposition: form-data; name="file"; filename="a.csv"\r\n\r\ntakenAt,', { "content-type": "multipart/form-data; boundary=b" }, 400],
    ["of nothing", null, { "content-type": "multipart/form-data; boundary=b" }, 400],
    ["too large by its own word", "x", { "content-type": "multipart/form-data; boundary=b", "content-length": "999999999999" }, 413],
    ["in an encoding of its own", "x", { "content-type": "multipart/form-data; boundary=b", "content-encoding": "br" }, 415],
  ])("%s is refused", async (_, body, headers, status) => {
    const before = await counts();
    expect((await send(body, headers)).status).toBe(status);
    expect(await counts()).toEqual(before);
  });

  test.each([
    [{ name: "" }, "name"],
    [{ mapping: "{" }, "mapping"],
    [{ mapping: { a: "f1Hz" } }, "mapping.a"],
    [{ mapping: { a: { field: "f0Hz", unit: "miles" } } }, "mapping.a"],
    [{ format: { timeZone: "Mars/Olympus" } }, "format.timeZone"],
    [{ sensorId: "x" }, "sensorId"],
    [{ colour: "red" }, "colour"],
    [{ name: "a\u0000b" }, "name"],
  ])("with %j names the field", async (fields, path) => {
    const { status, body } = (await upload({ file: csvOf(aCampaign({ cycles: 1, repeats: 3 })), fields })) as Problem;
    expect(status).toBe(400);
    expect(body.errors?.map((error) => error.path).some((one) => one.startsWith(path))).toBe(true);
  });

  test("without a file, or with an empty one, says so", async () => {
    expect(((await upload({})) as Problem).body.errors).toEqual([{ path: "file", message: "is missing" }]);
    expect(((await upload({ file: "" })) as Problem).body.errors).toEqual([{ path: "file", message: "is empty" }]);
  });

  test("for a sensor that is not there is refused at its field", async () => {
    const { status, body } = (await upload({ file: csvOf(aCampaign({ cycles: 1, repeats: 4 })), fields: { sensorId: "999999999" } })) as Problem;
    expect(status).toBe(422);
    expect(body.errors?.[0].path).toBe("sensorId");
  });

  test("may be gzip-encoded as a whole", async () => {
    const text = `--b\r\ncontent-disposition: form-data; name="name"\r\n\r\nPacked\r\n--b\r\ncontent-disposition: form-data; name="file"; filename="a.csv"\r\n\r\n${csvOf(aCampaign({ cycles: 1, repeats: 5, begin: "2026-03-06T00:00:00Z" }))}\r\n--b--\r\n`;
    expect((await send(gzipSync(text), { "content-type": "multipart/form-data; boundary=b", "content-encoding": "gzip" })).status).toBe(201);
  });
});

describe("who may", () => {
  test.each(["viewer", "operator"] as const)("a %s may not import", async (role) => {
    const before = await counts();
    expect((await upload({ role, file: csvOf(aCampaign({ cycles: 1, repeats: 3 })) })).status).toBe(403);
    expect(await counts()).toEqual(before);
  });

  test("an administrator may, for a sensor", async () => {
    const sensor = await buildSensor();
    const { status, body } = await upload({ role: "administrator", file: csvOf(aCampaign({ cycles: 1, repeats: 6, begin: "2026-03-07T00:00:00Z" })), fields: { sensorId: sensor.id } });
    expect(status).toBe(201);
    expect(await row(`select sensor_id as "sensorId" from campaign where id = $1`, [body.campaignId])).toEqual({ sensorId: sensor.id });
  });
});

test("what a process was receiving when it was lost is dropped after a day", async () => {
  await buildImportRun({ state: "receiving", sha256: null, reservedCampaignId: null });
  expect(await dropAbandoned({ now: hours(23) })).toBe(0);
  expect(await dropAbandoned({ now: hours(25) })).toBe(1);
});
