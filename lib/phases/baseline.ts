import type { Transaction } from "sequelize";
import { change, row } from "@/lib/db";

export type BaselineKey = {
  campaignId: string;
  /** Null for a campaign that knows of no mount, an imported one. */
  mountId: string | null;
  setPointC: number | null;
  readout: string;
  fitRunId: string;
};

/** Of a campaign without a protocol, which would say how many. */
export const IMPORTED_AIR_REFERENCES = 3;

export type Baseline = { f0Hz: number; q: number; n: number; complete: boolean };

/**
 * The mean of the first n air references of a mount at a set-point. While it is incomplete each further reference moves it;
 * once complete it stays. Returns undefined before the first reference with a value.
 */
export async function updateBaseline(transaction: Transaction, key: BaselineKey, { airReferences, now }: { airReferences: number; now: Date }): Promise<Baseline | undefined> {
  const present = await findBaseline(transaction, key);
  if (present?.complete) return present;
  const mean = await row<{ f0Hz: number | null; q: number | null; n: number }>(
    `select avg(f0_mean) as "f0Hz", avg(q_mean) as q, count(*)::int as n
       from (select s.f0_mean, s.q_mean from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $5
              where p.campaign_id = $1 and p.mount_id is not distinct from $2 and p.set_point_c is not distinct from $3 and p.readout = $4
                and p.medium = 'air' and p.role = 'reference' and p.closed_at is not null and s.f0_mean is not null
              order by p.sequence limit $6) first`,
    [key.campaignId, key.mountId, key.setPointC, key.readout, key.fitRunId, airReferences],
    transaction,
  );
  if (!mean || mean.f0Hz === null || mean.q === null) return undefined;
  const complete = mean.n >= airReferences;
  await change(
    `insert into baseline (campaign_id, mount_id, set_point_c, readout, fit_run_id, f0_hz, q, n, complete_at)
     values ($1, $2, $3, $4, $5, $6, $7, $8, $9)
     on conflict (campaign_id, mount_id, set_point_c, readout, fit_run_id)
     do update set f0_hz = excluded.f0_hz, q = excluded.q, n = excluded.n, complete_at = excluded.complete_at`,
    [key.campaignId, key.mountId, key.setPointC, key.readout, key.fitRunId, mean.f0Hz, mean.q, mean.n, complete ? now : null],
    transaction,
  );
  return { f0Hz: mean.f0Hz, q: mean.q, n: mean.n, complete };
}

export async function findBaseline(transaction: Transaction | undefined, key: BaselineKey): Promise<Baseline | undefined> {
  return row<Baseline>(
    `select f0_hz as "f0Hz", q, n, complete_at is not null as complete from baseline
      where campaign_id = $1 and mount_id is not distinct from $2 and set_point_c is not distinct from $3 and readout = $4 and fit_run_id = $5`,
    [key.campaignId, key.mountId, key.setPointC, key.readout, key.fitRunId],
    transaction,
  );
}
