import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { GET } from "@/app/api/campaigns/[id]/readings/route";
import { rows, sequelize } from "@/lib/db";
import { COLUMNS } from "@/lib/readings/stream";
import { Bench } from "@/tests/factories/bench";
import { at, request, signedInAs } from "@/tests/factories/session";

afterAll(() => sequelize.close());

let id: string;
let cookie: string;

beforeAll(async () => {
  const bench = await Bench.make();
  id = bench.campaign.id;
  await bench.hello();
  await bench.run();
  ({ cookie } = await signedInAs("viewer"));
}, 60_000);

const read = (query: string) => GET(request("GET", `/api/campaigns/${id}/readings?${query}`, { cookie }), at({ id }));
const lines = async (query: string) => (await (await read(query)).text()).split("\n");

describe("readings as CSV", () => {
  test("one line of heads, LF, every repeat once, ordered by sequence and index", async () => {
    const [head, ...body] = await lines("format=csv");
    expect(head).toBe(COLUMNS.join(","));
    expect(body.pop()).toBe("");
    const keys = body.map((line) => line.split(",")).map((fields) => [Number(fields[1]), Number(fields[3])] as const);
    expect(keys).toHaveLength(3 * 30);
    expect(keys).toEqual(keys.toSorted(([a, b], [c, d]) => a - c || b - d));
    expect(new Set(keys.map(String)).size).toBe(keys.length);
  });

  test("numbers read back as the very values that are stored", async () => {
    const stored = await rows<{ f0: number; q: number }>(
      `select f.f0_hz as f0, f.q from fit f join fit_run r on r.id = f.fit_run_id and r.current join step s on s.id = f.step_id
        where s.campaign_id = $1 and s.role <> 'find' order by s.sequence, f.idx`,
      [id],
    );
    const [, ...body] = await lines("format=csv");
    const [f0, q] = [COLUMNS.indexOf("f0Hz"), COLUMNS.indexOf("q")];
    expect(body.slice(0, -1).map((line) => line.split(",")).map((fields) => ({ f0: Number(fields[f0]), q: Number(fields[q]) }))).toEqual(stored);
  });

  test("a medium and a cycle bound what comes", async () => {
    const [, ...body] = await lines("format=csv&medium=air&cycle=2");
    expect(body.slice(0, -1)).toHaveLength(10);
    for (const line of body.slice(0, -1)) expect(line.split(",")[5]).toBe("air");
  });

  test("JSON holds the same readings in the same order", async () => {
    const { items } = (await (await read("format=json")).json()) as { items: { sequence: number; index: number; f0Hz: number; flags: string[] }[] };
    const [, ...body] = await lines("format=csv");
    expect(items.map(({ sequence, index, f0Hz }) => `${sequence},${index},${f0Hz}`)).toEqual(body.slice(0, -1).map((line) => line.split(",")).map((fields) => `${fields[1]},${fields[3]},${fields[COLUMNS.indexOf("f0Hz")]}`));
    expect(Array.isArray(items[0]?.flags)).toBe(true);
  });

  test("a campaign that is not there is 404 before anything is sent", async () => {
    expect((await GET(request("GET", "/api/campaigns/999999/readings?format=csv", { cookie }), at({ id: "999999" }))).status).toBe(404);
  });
});
