import { createHash } from "node:crypto";
import { change, row } from "@/lib/db";
import { conflict, impossible, invalid } from "@/lib/errors";
import { Answer } from "@/lib/http/respond";
import { IdempotencyKey } from "@/models/idempotency-key";

/** How long an answer is kept. */
const KEPT_DAYS = 30;

/** After this a call that never finished is taken for dead: the process that worked at it is gone. */
const DEAD_AFTER_S = 600;

type Call = { personId: string; key: string; call: string; body: Buffer; now: Date; status: number; shownOnce: boolean };

/**
 * Runs a POST once per key. The same key again gets the first answer; with another body or address 422; while the first is
 * at work 409. An error is not kept: what failed changed nothing, so that a repeat is a new try.
 */
export async function once(call: Call, work: () => Promise<unknown>): Promise<unknown> {
  const fresh = await claim(call);
  if (!fresh) return earlier(call);

  let result: unknown;
  try {
    result = await work();
  } catch (error) {
    await forget(call);
    throw error;
  }
  if (result instanceof Response) {
    await forget(call);
    return result;
  }
  const { status, data } = result instanceof Answer ? result : { status: call.status, data: result };
  await IdempotencyKey.update(
    { status: data === undefined ? 204 : status, answer: call.shownOnce ? null : (data ?? null) },
    { where: { personId: call.personId, key: call.key } },
  );
  return result;
}

/** The header's key: a quoted string as the IETF draft has it, or the bare text. */
export function idempotencyKey(request: Request): string | undefined {
  const header = request.headers.get("idempotency-key");
  if (header === null) return undefined;
  const key = /^"(.*)"$/.exec(header)?.[1] ?? header;
  if (key.length < 1 || key.length > 255) throw invalid([{ path: "Idempotency-Key", message: "must have 1 to 255 characters" }]);
  return key;
}

/** Deletes what is past its 30 days; answers how many. */
export function forgetOldKeys({ now }: { now: Date }): Promise<number> {
  return change("delete from idempotency_key where created_at < $1::timestamptz - make_interval(days => $2)", [now, KEPT_DAYS]);
}

async function claim({ personId, key, call, body, now }: Call): Promise<boolean> {
  const claimed = await row(
    `insert into idempotency_key as k (person_id, key, call, body_hash, created_at) values ($1, $2, $3, $4, $5)
     on conflict (person_id, key) do update set call = excluded.call, body_hash = excluded.body_hash, status = null, answer = null,
       created_at = excluded.created_at
       where k.created_at < excluded.created_at - make_interval(days => $6)
     returning key`,
    [personId, key, call, sha256(body), now, KEPT_DAYS],
  );
  return claimed !== undefined;
}

async function earlier({ personId, key, call, body, now, shownOnce }: Call): Promise<unknown> {
  const first = await IdempotencyKey.findOne({ where: { personId, key } });
  if (!first) throw conflict("The first call with this Idempotency-Key has just failed; send it again", "in-progress");
  if (first.call !== call || !first.bodyHash.equals(sha256(body))) {
    throw impossible("This Idempotency-Key was used for another request; take a new key", undefined, "key-reused");
  }
  if (first.status === null) {
    const ageS = (now.getTime() - first.createdAt.getTime()) / 1000;
    throw ageS < DEAD_AFTER_S
      ? conflict("The first call with this Idempotency-Key is still at work; ask again in a second", "in-progress")
      : conflict("The first call with this Idempotency-Key never ended. Look whether it took effect, then use a new key", "never-ended");
  }
  if (shownOnce) throw conflict("This was made by an earlier call with the same key; its secret was shown once and is not kept", "shown-once");
  return new Answer(first.status, first.status === 204 ? undefined : first.answer);
}

const forget = ({ personId, key }: Call) => IdempotencyKey.destroy({ where: { personId, key } });

const sha256 = (body: Buffer) => createHash("sha256").update(body).digest();
