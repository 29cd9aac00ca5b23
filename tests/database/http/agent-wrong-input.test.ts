import { gzipSync } from "node:zlib";
import { xoroshiro128plus } from "pure-rand/generator/XoroShiro";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { POST as heartbeat } from "@/app/api/agent/heartbeat/route";
import { POST as hello } from "@/app/api/agent/hello/route";
import { POST as finish } from "@/app/api/agent/steps/[id]/finish/route";
import { POST as readings } from "@/app/api/agent/steps/[id]/readings/route";
import { POST as next } from "@/app/api/agent/steps/next/route";
import type { StepAnswer } from "@/lib/agents/schema";
import { sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { hashToken, newToken } from "@/lib/tokens";
import { fitStep } from "@/lib/readings/fit-step";
import { AgentToken } from "@/models/agent-token";
import { Bench } from "@/tests/factories/bench";
import { databaseDigest } from "@/tests/factories/database-digest";
import { agentToken, ORIGIN } from "@/tests/factories/session";
import { placesIn, withText, type Place } from "@/tests/factories/wrong-json";

const routes = { hello, heartbeat, next, readings, finish };
type Route = keyof typeof routes;

const SEED = 20_260_514;
const GENERATED = 2000;
const MIB = 1024 * 1024;

let bench: Bench;
let step: StepAnswer;
let old: StepAnswer;
let token: string;
let valid: Record<Route, Record<string, unknown>>;

beforeAll(async () => {
  bench = await Bench.make({ clock: "real" });
  await bench.hello();
  old = (await bench.run(({ kind, role }) => kind === "measure" && role !== "find")) as StepAnswer;
  await bench.upload(old, [0, 1]);
  step = (await bench.next()) as StepAnswer;
  token = await tokenOf(bench.rig.id);
  const values = Array.from({ length: 11 }, (_, i) => i / 10);
  const at = { index: 2, takenAt: "2026-05-14T08:00:00Z", durationS: 1, temperatureC: 20, pressurePa: 1e5, humidityPercent: 40 };
  valid = {
    hello: {
      agent: { name: "a", version: "1", instance: "i" },
      clock: "2026-05-14T08:00:00Z",
      replace: true,
      abilities: { minHz: 1, maxHz: 1e5, maxPoints: 4001, maxDriveV: 1, minTemperatureC: 5, maxTemperatureC: 60, ports: 4, kinds: ["measure"], repeatable: ["drain"] },
    },
    heartbeat: {
      clock: "2026-05-14T08:00:00Z",
      state: "working",
      stepId: step.id,
      lease: step.lease,
      done: { volumeMl: 1, times: 1, seconds: 1 },
      temperatureC: 20,
      ports: [{ port: 1, volumeMl: 5 }],
      wasteMl: 10,
      message: "well",
    },
    next: { waitS: 0, clock: "2026-05-14T08:00:00Z" },
    readings: {
      lease: step.lease,
      readings: [
        { ...at, sweep: { startHz: 2300, stopHz: 2500, re: values, im: values } },
        { ...at, index: 3, sweep: { startHz: 2300, stopHz: 2500, magnitude: values } },
        { ...at, index: 4, frequencyHz: values.map((v) => 2300 + v), re: values, im: values },
        { ...at, index: 5, ringDown: { sampleHz: 1e4, startS: 0, volts: Array.from({ length: 16 }, () => 0.5) } },
        { ...at, index: 6, fitted: { f0Hz: 2400, q: 1800, f0StdHz: 0.1, qStd: 1, amplitudeV: 0.01 } },
      ],
    },
    finish: { lease: step.lease, outcome: "failed", failure: { code: "pump", message: "stuck", retry: true } },
  };
});
afterAll(async () => {
  await listener().close();
  await sequelize.close();
});

async function tokenOf(rigId: string): Promise<string> {
  const made = newToken("agent");
  await AgentToken.create({ rigId, name: "wrong input", tokenHash: made.hash, last4: made.last4, createdAt: bench.now });
  return made.token;
}

type Sent = { route: Route; body?: BodyInit; id?: string; headers?: Record<string, string>; as?: string };

async function send({ route, body, id = step.id, headers = {}, as = token }: Sent): Promise<Response> {
  const request = new Request(`${ORIGIN}/api/agent/${route}`, {
    method: "POST",
    headers: { "content-type": "application/json", authorization: `Bearer ${as}`, ...headers },
    body: body ?? JSON.stringify(valid[route]),
  });
  return routes[route](request, { params: Promise.resolve(route === "readings" || route === "finish" ? { id } : {}) });
}

async function refuses(sent: Sent, statuses: number[], about: string): Promise<void> {
  const answer = await send(sent);
  const text = await answer.text();
  expect(statuses, `${about}: ${answer.status} ${text.slice(0, 300)}`).toContain(answer.status);
  expect(answer.headers.get("content-type"), about).toBe("application/problem+json");
  expect(JSON.parse(text), about).toMatchObject({ type: expect.stringMatching(/^\/problems\/[a-z-]+$/), title: expect.any(String), status: answer.status, detail: expect.any(String) });
  expect(text, about).not.toMatch(/\bat .*\.ts:|select |SequelizeDatabaseError/);
}

async function changesNothing(work: () => Promise<void>): Promise<void> {
  const before = await databaseDigest();
  await work();
  expect(await databaseDigest()).toBe(before);
}

const everyRoute = Object.keys(routes) as Route[];

describe.each(everyRoute)("wrong bodies of %s", (route) => {
  test("what is no JSON object is 400, what is too large 413, what is of another type 415; nothing changes", async () => {
    await changesNothing(async () => {
      for (const text of ["{", "nul", "[]", "null", "7", '"text"', "{}}", '{"a":1', "\u0000", "{'a':1}", "[".repeat(100_000), `{"a":${"[".repeat(50_000)}${"]".repeat(50_000)}}`]) {
        if (route === "next" && text.startsWith('{"a":[')) continue;
        await refuses({ route, body: text }, [400], `${route} ${text.slice(0, 12)}`);
      }
      await refuses({ route, body: new Uint8Array([0x7b, 0x22, 0xff, 0xfe, 0x22, 0x7d]) }, [400], `${route} not UTF-8`);
      await refuses({ route, body: "x".repeat(9 * MIB) }, [413], `${route} 9 MiB`);
      await refuses({ route, body: gzipSync("x".repeat(9 * MIB)), headers: { "content-encoding": "gzip" } }, [413], `${route} 9 MiB inside gzip`);
      await refuses({ route, body: "no gzip", headers: { "content-encoding": "gzip" } }, [400], `${route} bad gzip`);
      await refuses({ route, body: gzipSync(JSON.stringify(valid[route])).subarray(0, 30), headers: { "content-encoding": "gzip" } }, [400], `${route} short gzip`);
      for (const type of ["text/plain", "application/x-www-form-urlencoded", "multipart/form-data; boundary=x", "application/json; charset=latin1", "nonsense"])
        await refuses({ route, headers: { "content-type": type } }, [415], `${route} ${type}`);
      await refuses({ route, headers: { "content-encoding": "br" } }, [415], `${route} br`);
    });
  });

  test("without a good token it is 401, and nothing changes", async () => {
    const revoked = await tokenOf(bench.rig.id);
    await AgentToken.update({ revokedAt: new Date() }, { where: { tokenHash: hashToken(revoked) } });
    await changesNothing(async () => {
      for (const as of ["", " ", "x", "\u00e4", revoked, `${token}x`, "' or 1=1 --", "a".repeat(10_000)]) await refuses({ route, as }, [401], `${route} token ${as.slice(0, 10)}`);
      await refuses({ route, headers: { authorization: `Basic ${token}` } }, [401], `${route} Basic`);
    });
  });
});

describe("things of others and of before", () => {
  test("another rig's step is 404 for its readings and its end, whatever the lease", async () => {
    const other = await agentToken();
    await changesNothing(async () => {
      for (const route of ["readings", "finish"] as const) await refuses({ route, as: other.token }, [404], route);
    });
  });

  test("ids that are none of ours are 404", async () => {
    await changesNothing(async () => {
      for (const id of ["0", "-1", "1.5", "NaN", "99999999999999999999", "9223372036854775807", "1e3", "0x1", " 1", "1;drop table step", "%00", "\u0000", "../1", "１", "a".repeat(5000), "[object Object]", ""])
        for (const route of ["readings", "finish"] as const) await refuses({ route, id }, [404], `${route} ${id.slice(0, 20)}`);
    });
  });

  test("a lease of before may not finish, one never given may do nothing, a session that has ended may not act", async () => {
    await changesNothing(async () => {
      await refuses({ route: "finish", body: JSON.stringify({ lease: old.lease, outcome: "done" }) }, [409], "old lease");
      await refuses({ route: "finish", body: JSON.stringify({ lease: "never-given", outcome: "done" }) }, [409], "no lease");
      await refuses({ route: "readings", body: JSON.stringify({ ...valid.readings, lease: "never-given" }) }, [409], "no lease");
      await refuses({ route: "finish", body: JSON.stringify({ lease: step.lease, outcome: "done" }) }, [422], "readings missing");
      const header = { "agent-session": "ended' or 1=1 --" };
      for (const route of ["heartbeat", "next", "finish"] as const) await refuses({ route, headers: header }, [409], `${route} session`);
    });
  });

  test("an index beyond the repeats is 422, the same index twice in one batch 400", async () => {
    const [first] = valid.readings.readings as object[];
    const batch = (...list: object[]) => JSON.stringify({ lease: step.lease, readings: list });
    await changesNothing(async () => {
      for (const index of [10, 11, 2_000_000_000]) await refuses({ route: "readings", body: batch({ ...first, index }) }, [422], `index ${index}`);
      await refuses({ route: "readings", body: batch(first, first) }, [400], "index twice");
      await refuses({ route: "readings", body: batch(...Array.from({ length: 501 }, (_, index) => ({ ...first, index }))) }, [400], "501 readings");
    });
  });
});

/** Numbers of the seeded stream, from 0 to below n. */
function dice(seed: number): (n: number) => number {
  const random = xoroshiro128plus(seed);
  return (n) => (random.unsafeNext() >>> 0) % n;
}

/** JSON texts that cannot stand where this value stands. */
function wrongFor(value: unknown): string[] {
  const always = ["null", '"\\u0000"', '"\\ud800"', "[[]]", '{"__proto__":{"x":1}}', '""'];
  if (typeof value === "number") return [...always, "1e999", "-1e999", '"1"', '"NaN"', "true", "[]", "{}", "-1e308", '"１"'];
  if (typeof value === "string") return [...always, "1", "1e999", "false", "[]", "{}", JSON.stringify("x".repeat(70_000)), '"\' or 1=1 --\\u0000"'];
  if (typeof value === "boolean") return [...always, "1", "0", '"true"', "[]"];
  if (Array.isArray(value)) return [...always, "1", '"[]"', "{}", `[${"null,".repeat(5000)}null]`, '[1,"2"]'];
  return [...always, "1", "[]", '"{}"', "true"];
}

/** Where the wrong text happens to be allowed. */
function isAllowed({ path, value }: Place, text: string): boolean {
  const name = String(path.at(-1));
  if (text === '""' && name === "message") return true;
  if (text === "-1e308") return ["startS", "amplitudeV"].includes(name) === false && (path.includes("re") || path.includes("im") || path.includes("magnitude") || path.includes("volts") || name === "temperatureC" || name === "minTemperatureC");
  if (text === "[]") return name === "ports" || name === "kinds" || name === "repeatable";
  if (text === "{}" || text.includes("__proto__")) return name === "done" && typeof value === "object";
  return false;
}

test(`${GENERATED} generated requests with one thing wrong are 400, 404, 409 or 422, and nothing changes (seed ${SEED})`, { timeout: 120_000 }, async () => {
  const roll = dice(SEED);
  let batch: string[] = [];
  let before = await databaseDigest();
  for (let n = 0; n < GENERATED; n++) {
    const route = everyRoute[roll(everyRoute.length)];
    const places = [...placesIn(valid[route])];
    const place = places[roll(places.length)];
    const texts = wrongFor(place.value).filter((text) => !isAllowed(place, text));
    const text = texts[roll(texts.length)];
    const about = `#${n} ${route} ${place.path.join(".")} = ${text.slice(0, 40)}`;
    batch.push(about);
    await refuses({ route, body: withText(valid[route], place.path, text) }, [400, 404, 409, 422], about);
    if (n % 50 === 49) {
      const after = await databaseDigest();
      expect(after === before, `something changed in one of\n${batch.join("\n")}`).toBe(true);
      before = after;
      batch = [];
    }
  }
});

test("what is extreme but allowed is taken or refused, and never an error of ours", async () => {
  const extremes: [Route, (string | number)[], string][] = [
    ...["0000-01-01T00:00:00Z", "9999-12-31T23:59:59.999999999-23:59", "0000-01-01T00:00:00+23:59", "1969-12-31T23:59:59Z"].flatMap((time): [Route, (string | number)[], string][] => [
      ["heartbeat", ["clock"], JSON.stringify(time)],
      ["next", ["clock"], JSON.stringify(time)],
      ["hello", ["clock"], JSON.stringify(time)],
      ["readings", ["readings", 0, "takenAt"], JSON.stringify(time)],
    ]),
    ...["temperatureC", "wasteMl"].map((name): [Route, (string | number)[], string] => ["heartbeat", [name], "1.7976931348623157e308"]),
    ["heartbeat", ["ports", 0, "volumeMl"], "1.7976931348623157e308"],
    ["heartbeat", ["ports", 0, "port"], "99"],
    ["heartbeat", ["done", "times"], "9007199254740991"],
    ["heartbeat", ["stepId"], '"999999999999999999"'],
    ["heartbeat", ["stepId"], '"9999999999999999999"'],
    ["heartbeat", ["message"], JSON.stringify("\u202e𝔘\u0001".repeat(500))],
    ["hello", ["abilities", "maxHz"], "1.7976931348623157e308"],
    ["readings", ["readings", 0, "sweep", "re", 0], "1.7976931348623157e308"],
    ["readings", ["readings", 3, "ringDown", "volts", 0], "-1.7976931348623157e308"],
    ["readings", ["readings", 0, "sweep", "stopHz"], "5e-324"],
    ["readings", ["readings", 4, "fitted", "q"], "1e-300"],
    ["readings", ["readings", 0, "index"], "9007199254740993"],
  ];
  for (const [route, path, text] of extremes) {
    const answer = await send({ route, body: withText(valid[route], path, text) });
    expect(answer.status, `${route} ${path.join(".")} = ${text}: ${await answer.clone().text()}`).toBeLessThan(500);
  }
  expect(await fitStep({ stepId: step.id, now: bench.now })).toBeGreaterThan(0);
});

test("the bodies that the others are made from are good", async () => {
  for (const route of ["heartbeat", "readings", "next"] as const) expect([200, 204], route).toContain((await send({ route })).status);
});
