import { change, inTransaction, row, rows } from "@/lib/db";
import { updateBaseline } from "@/lib/phases/baseline";
import { closePhase } from "@/lib/phases/close-phase";

const PHASE_HOURS = 8;
const REPEAT_S = 10;

/** Between −1 and 1, the same for the same phase and repeat. */
const NOISE = `(mod(abs(hashint8(s.sequence * 1000003::bigint + i)::bigint), 20001) / 1e4 - 1)`;

type Given = {
  /** The campaign whose protocol, sensor and rig it has; its sensor is mounted. */
  like: string;
  repeats: number;
  phases: number;
  now: Date;
};

/**
 * A finished campaign of air references with so many fitted repeats in all, f0 drifting by −10 µHz a phase: readings and fits are
 * made in the database, phases are closed as the product closes them. Raw sweeps there are none.
 */
export async function fillCampaign({ like, repeats, phases, now }: Given): Promise<{ campaignId: string; fitRunId: string }> {
  const made = await row<{ campaignId: string; fitRunId: string; mountId: string }>(
    `with campaign as (
       insert into campaign (protocol_version_id, sensor_id, rig_id, name, state, created_at, started_at, started_clock, ended_at, ended_clock, cursor)
       select protocol_version_id, sensor_id, rig_id, $1, 'finished', $4, $4, $4::timestamptz - make_interval(hours => $2), $4, $4, '{}' from campaign where id = $3
       returning id, sensor_id),
     run as (insert into fit_run (campaign_id, settings, code_version, current, created_at) select id, '{"offsetSlope": true}', 'bench', true, $4 from campaign returning id)
     select campaign.id as "campaignId", run.id as "fitRunId", m.id as "mountId" from campaign, run, mount m where m.sensor_id = campaign.sensor_id order by m.id limit 1`,
    [`${repeats} repeats`, phases * PHASE_HOURS, like, now],
  );
  if (!made) throw new Error(`there is no campaign ${like} whose sensor is mounted`);
  const { campaignId, fitRunId, mountId } = made;
  const each = Math.floor(repeats / phases);
  await change(
    `insert into step (campaign_id, rig_id, sequence, block_id, protocol_version_id, kind, role, medium, cycle, label, params, mount_id, state, cursor, stored, created_at, closed_at, started_clock, ended_clock)
     select c.id, c.rig_id, n, 'measure', c.protocol_version_id, 'measure', 'reference', 'air', n, 'Air', jsonb_build_object('repeats', $2::int), $3, 'done', '{}', $2, $5, $5,
            c.started_clock + make_interval(hours => n * ${PHASE_HOURS}), c.started_clock + make_interval(hours => n * ${PHASE_HOURS}, secs => $2 * ${REPEAT_S})
       from campaign c, generate_series(1, $4::int) n where c.id = $1`,
    [campaignId, each, mountId, phases, now],
  );
  await change(
    `insert into phase (campaign_id, step_id, sequence, cycle, medium, role, mount_id, readout, repeats)
     select campaign_id, id, sequence, cycle, medium, role, mount_id, 'velocity', $2 from step where campaign_id = $1`,
    [campaignId, each],
  );
  await change(
    `insert into reading (step_id, idx, taken_at, at, received_at, temperature_c, kind, content_hash)
     select s.id, i, time, time, time, 20 + 0.01 * sin(i / 300.0), 1, '' from step s, generate_series(0, $2::int - 1) i,
            lateral (select s.started_clock + make_interval(secs => i * ${REPEAT_S}) as time) t where s.campaign_id = $1`,
    [campaignId, each],
  );
  await change(
    `insert into fit (fit_run_id, step_id, idx, f0_hz, q, f0_std_hz, flags)
     select $2, s.id, i, 2400 - 1e-5 * s.sequence + 1e-4 * ${NOISE}, 2000 + ${NOISE}, 1e-4, 0 from step s, generate_series(0, $3::int - 1) i where s.campaign_id = $1`,
    [campaignId, fitRunId, each],
  );
  await change(`analyze step, phase, reading, fit`);
  for (const { id } of await rows<{ id: string }>(`select id from step where campaign_id = $1 order by sequence`, [campaignId])) {
    await inTransaction(async (transaction) => {
      await closePhase(transaction, { stepId: id, now });
      await updateBaseline(transaction, { campaignId, mountId, setPointC: null, readout: "velocity", fitRunId }, { airReferences: 3, now });
    });
  }
  return { campaignId, fitRunId };
}
