import fc from "fast-check";
import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { z } from "zod";
import { sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { databaseDigest, partIds } from "../../factories/database-digest";
import { refusedBySchema, requestsOf, type GeneratedRequest } from "../../factories/generated-request";
import { prepareCall, PREPARED_CALLS, sendPrepared, type PreparedCall } from "../../factories/prepared-call";

const SEED = 20_260_514;
/** With those of the agents' routes there are 10 000. */
const GENERATED = process.env.LONGREED_FULL === "1" ? 8000 : 2000;
const BATCH = 50;

/** What a call may answer to a request that its schemas allow and the laboratory does not. */
const PROMISED = [400, 403, 404, 409, 410, 413, 422, 429];
/** A question changes nothing, so that no state of anything stands against it. */
const PROMISED_TO_QUESTIONS = [400, 404];

const calls = PREPARED_CALLS.filter(({ operation, path }) => operation.access !== "agent" && path !== "/api/health" && (operation.body || operation.query));
const prepared = new Map<string, PreparedCall>();

beforeAll(async () => {
  vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-05-14T12:00:00Z") });
  await partIds();
  for (const call of calls) prepared.set(call.name, await prepareCall({ call }));
}, 120_000);
afterAll(async () => {
  vi.useRealTimers();
  await listener().close();
  await sequelize.close();
});

type Answered = { status: number; text: string; type: string | null };

async function send({ call, body, query }: GeneratedRequest): Promise<Answered> {
  const answer = await sendPrepared(prepared.get(call) as PreparedCall, { body, query });
  const type = answer.headers.get("content-type");
  // A stream of changes goes on as long as it was asked to.
  const isEndless = type?.startsWith("text/event-stream") ?? false;
  if (isEndless) await answer.body?.cancel();
  return { status: answer.status, text: isEndless ? "" : await answer.text(), type };
}

const problem = z.looseObject({ type: z.string().regex(/^\/problems\/[a-z-]+$/), title: z.string(), status: z.int(), detail: z.string(), errors: z.array(z.object({ path: z.string(), message: z.string() })).optional() });

/** What is wrong with a refusal itself, in words; undefined when nothing is. */
function faultOf({ status, text, type }: Answered, promised: readonly number[]): string | undefined {
  if (!promised.includes(status)) return `${status} is not promised: ${text.slice(0, 300)}`;
  if (type !== "application/problem+json" || !problem.safeParse(jsonOf(text)).success) return `${type} is no problem: ${text.slice(0, 300)}`;
  if (/\bat .*\.ts:|select |Sequelize/.test(text)) return `too much is told: ${text.slice(0, 300)}`;
  return undefined;
}

/** One of the named fields is the one that was made wrong, one inside of it, what holds it, or one that belongs to it. */
function faultOfFields({ status, text }: Answered, { place }: GeneratedRequest): string | undefined {
  if (status === 429 || place === undefined) return undefined;
  const paths = (problem.parse(jsonOf(text)).errors ?? []).map(({ path }) => path);
  const near = paths.some((path) => path === "" || `${place}.`.startsWith(`${path}.`) || `${path}.`.startsWith(`${place}.`) || (place.includes(".") && holderOf(path) === holderOf(place)));
  return near ? undefined : `the named fields are ${paths.join(", ")}`;
}

const holderOf = (path: string) => path.slice(0, path.lastIndexOf(".") + 1);

function jsonOf(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

test(`${GENERATED} generated requests (seed ${SEED}): the promised status, a problem that names the field, no error of ours, and nothing changed by what was refused`, { timeout: 600_000 }, async () => {
  const perCall = Math.ceil(GENERATED / calls.length);
  const requests = calls.flatMap((call, i) => fc.sample(requestsOf(prepared.get(call.name) as PreparedCall), { numRuns: perCall, seed: SEED + i }).map((request) => ({ call, request }))).slice(0, GENERATED);

  const faults: string[] = [];
  let before = await databaseDigest();
  let batch: string[] = [];
  const nothingChanged = async () => {
    if (batch.length === 0) return;
    const after = await databaseDigest();
    if (after !== before) faults.push(`something was changed by one of\n${batch.join("\n")}`);
    before = after;
    batch = [];
  };

  for (const [n, { call, request }] of requests.entries()) {
    const about = `#${n} ${call.name}: ${request.about}`;
    const refused = refusedBySchema(call, request);
    const mayChange = !refused && call.method !== "GET";
    if (mayChange) await nothingChanged();
    const answered = await send(request);
    const fault = refused ? faultOf(answered, [400, 429]) ?? faultOfFields(answered, request) : answered.status < 300 ? undefined : faultOf(answered, call.method === "GET" ? PROMISED_TO_QUESTIONS : PROMISED);
    if (fault) faults.push(`${about}: ${fault}`);
    if (mayChange && answered.status < 300) {
      prepared.set(call.name, await prepareCall({ call }));
      before = await databaseDigest();
      continue;
    }
    batch.push(about);
    if (mayChange || batch.length >= BATCH) await nothingChanged();
  }
  await nothingChanged();
  expect(faults.slice(0, 20)).toEqual([]);
});
