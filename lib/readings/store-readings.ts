import type { Transaction } from "sequelize";
import { noteContact, type RigRow } from "@/lib/agents/contact";
import { LEASE_S, type Agent } from "@/lib/agents/contract";
import type { Wish } from "@/lib/agents/schema";
import { wishFor } from "@/lib/agents/wish";
import { inTransaction, row, rows } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import { flagBits } from "@/lib/numerics/resonance/flags";
import { rigTimes } from "@/lib/readings/clock-correction";
import { contentHash } from "@/lib/readings/content-hash";
import { insertReadings } from "@/lib/readings/insert-readings";
import type { ReadingsBody } from "@/lib/readings/parse-readings";
import type { ReadingInput } from "@/lib/readings/reading";

type StoreReadings = { agent: Agent; session?: string; stepId: string; body: ReadingsBody; now: Date };

type Target = {
  id: string;
  campaignId: string;
  repeats: number | null;
  state: string;
  startedClock: Date | null;
  lease: string | null;
  leased: boolean;
  campaignState: string;
  parking: string;
  detour: string | null;
};

export type Stored = {
  stored: number[];
  alreadyStored: number[];
  differs: number[];
  lease: "current" | "superseded";
  wish: Wish;
  leaseExpiresAt?: string;
};

/**
 * Stores raw readings before anything is computed of them. A lease guards giving out and finishing, never data: any lease
 * ever given to this rig for the step is good, whatever has become of the campaign. The same reading again is a success.
 */
export function storeReadings({ agent, session, stepId, body, now }: StoreReadings): Promise<Stored> {
  return inTransaction(async (transaction) => {
    const rig = await noteContact(transaction, { agent, session, now, anySession: true });
    const step = await findTarget(transaction, stepId, agent.rigId, body.lease);
    checkIndices(step, body.readings);

    const times = await rigTimes(transaction, { rig, takenAt: body.readings.map(({ takenAt }) => takenAt), now });
    const closed = step.state === "done" || step.state === "failed" || step.state === "skipped";
    const flags = body.readings.map((_, i) => flagBits([...(closed ? (["late"] as const) : []), ...(plausible(times[i], step, rig, now) ? [] : (["clock"] as const))]));
    const hashes = body.readings.map(contentHash);
    const leaseExpiresAt = step.lease === body.lease && step.state === "out" ? new Date(now.getTime() + LEASE_S * 1000) : undefined;
    const stored = await insertReadings(transaction, { stepId, readings: body.readings, times, flags, hashes, leaseExpiresAt, now });
    const repeated = body.readings.map(({ index }, i) => ({ index, hash: hashes[i] })).filter(({ index }) => !stored.has(index));
    const { alreadyStored, differs } = await compare(transaction, stepId, repeated);
    return {
      stored: [...stored].sort((a, b) => a - b),
      alreadyStored,
      differs,
      lease: leaseExpiresAt ? "current" : "superseded",
      wish: wishFor({ state: step.campaignState, parking: step.parking, detour: step.detour }),
      ...(leaseExpiresAt ? { leaseExpiresAt: leaseExpiresAt.toISOString() } : {}),
    };
  });
}

async function findTarget(transaction: Transaction, stepId: string, rigId: string, lease: string): Promise<Target> {
  const step = await row<Target>(
    `select s.id, s.campaign_id as "campaignId", (s.params->>'repeats')::int as repeats, s.state, s.started_clock as "startedClock", s.lease,
            exists (select 1 from step_lease l where l.lease = $3 and l.step_id = s.id and l.rig_id = $2) as leased,
            c.state as "campaignState", c.parking, s.detour
       from step s join campaign c on c.id = s.campaign_id where s.id = $1 and s.rig_id = $2 for no key update of s`,
    [stepId, rigId, lease],
    transaction,
  );
  if (!step) throw notFound("step on this rig");
  if (!step.leased) throw conflict("This lease was never given out for this step", "lease-lost");
  return step;
}

function checkIndices({ repeats }: Target, readings: readonly ReadingInput[]) {
  if (repeats === null) throw impossible("Only a `measure` step takes readings");
  const errors = readings
    .map(({ index }, i) => ({ index, path: `readings.${i}.index` }))
    .filter(({ index }) => index >= repeats)
    .map(({ index, path }) => ({ path, message: `the step has ${repeats} repeats, so the last index is ${repeats - 1}, not ${index}` }));
  if (errors.length > 0) throw impossible(errors[0].message, { errors });
}

const SLACK_MS = 60_000;

/**
 * From the step's first giving out to now, with a minute's grace. A simulated clock is reported only now and then, so its
 * readings may run ahead of the last report.
 */
function plausible(at: Date, { startedClock }: Target, rig: RigRow, now: Date): boolean {
  if (startedClock && at.getTime() < startedClock.getTime() - SLACK_MS) return false;
  return rig.clock === "simulated" || at.getTime() <= now.getTime() + SLACK_MS;
}

type Repeated = { index: number; hash: Buffer };

async function compare(transaction: Transaction, stepId: string, repeated: readonly Repeated[]) {
  if (repeated.length === 0) return { alreadyStored: [], differs: [] };
  const kept = await rows<{ idx: number; contentHash: Buffer }>(
    `select idx, content_hash as "contentHash" from reading where step_id = $1 and idx = any($2)`,
    [stepId, repeated.map(({ index }) => index)],
    transaction,
  );
  const hashes = new Map(kept.map(({ idx, contentHash: hash }) => [idx, hash]));
  const same = ({ index, hash }: Repeated) => hashes.get(index)?.equals(hash) ?? false;
  return {
    alreadyStored: repeated.filter(same).map(({ index }) => index),
    differs: repeated.filter((reading) => !same(reading)).map(({ index }) => index),
  };
}
