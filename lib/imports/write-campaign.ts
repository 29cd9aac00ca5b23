import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, row, rows } from "@/lib/db";
import type { PhaseRows, RowKeys } from "@/lib/imports/split-phases";
import { notify } from "@/lib/notify";
import { FIT_CODE_VERSION } from "@/lib/readings/fit-code-version";
import type { FitSettings } from "@/models/json";

export type CampaignToWrite = {
  campaignId: string;
  name: string;
  sensorId: string | null;
  readout: "velocity" | "displacement";
  fileName: string;
  by: { id: string; name: string; role: "administrator" | "researcher" | "operator" | "viewer" };
  media: readonly string[];
  phases: readonly PhaseRows[];
  keys: RowKeys;
  order: Uint32Array;
  now: Date;
};

export const SETTINGS: FitSettings = { offsetSlope: true };

/** A finished campaign with its fit run and a measured step and an open phase for each run of rows. Air is a reference, all else a sample. */
export async function writeCampaign(transaction: Transaction, given: CampaignToWrite): Promise<{ fitRunId: string; stepIds: string[] }> {
  const { campaignId, name, sensorId, readout, fileName, by, media, phases, keys, order, now } = given;
  const from = new Date(keys.at[order[0]]);
  const to = new Date(keys.at[order[order.length - 1]]);
  await change(
    `insert into campaign (id, name, sensor_id, state, origin, created_by, created_at, started_at, started_clock, ended_at, ended_clock, end_text)
     overriding system value values ($1, $2, $3, 'finished', 'import', $4, $5, $6, $6, $7, $7, $8)`,
    [campaignId, name, sensorId, by.id, now, from, to, `Imported from ${fileName}`],
    transaction,
  );
  const run = await row<{ id: string }>(
    `insert into fit_run (campaign_id, settings, code_version, current, created_at) values ($1, $2, $3, true, $4) returning id`,
    [campaignId, JSON.stringify(SETTINGS), FIT_CODE_VERSION, now],
    transaction,
  );
  const stepIds: string[] = [];
  for (let start = 0; start < phases.length; start += 5000) {
    stepIds.push(...(await writeSteps(transaction, { ...given, from: start, phases: phases.slice(start, start + 5000) })));
  }
  await change(
    `insert into phase (campaign_id, step_id, sequence, cycle, medium, role, set_point_c, readout, repeats)
     select campaign_id, id, sequence, cycle, medium, role, set_point_c, $2, stored from step where campaign_id = $1`,
    [campaignId, readout],
    transaction,
  );
  await recordEvent(transaction, { campaignId, now, kind: "import", who: by.name, text: `Imported ${order.length} readings of ${media.join(", ")} in ${phases.length} phases from ${fileName}` });
  await audit(transaction, { by, now, action: "import", entity: "campaign", entityId: campaignId, detail: { name, fileName, readings: order.length, phases: phases.length } });
  await notify(`changed:campaign:${campaignId}`, transaction);
  return { fitRunId: run?.id ?? "", stepIds };
}

async function writeSteps(transaction: Transaction, { campaignId, media, phases, keys, order, now, from }: CampaignToWrite & { from: number }): Promise<string[]> {
  const at = (i: number) => new Date(keys.at[order[i]]);
  const role = (medium: number) => (media[medium] === "air" ? "reference" : "sample");
  const made = await rows<{ id: string }>(
    `insert into step (campaign_id, origin, sequence, block_id, kind, role, medium, set_point_c, cycle, label, params, state, stored, created_at, closed_at, started_clock, ended_clock)
     select $1, 'import', sequence, 'import', 'measure', role, medium, set_point_c, cycle, case when role = 'reference' then 'Air reference' else 'Measure ' || medium end,
            jsonb_build_object('repeats', repeats), 'done', repeats, $2, $2, from_at, to_at
       from unnest($3::int[], $4::text[], $5::text[], $6::float8[], $7::int[], $8::int[], $9::timestamptz[], $10::timestamptz[]) as t (sequence, role, medium, set_point_c, cycle, repeats, from_at, to_at)
      order by sequence returning id`,
    [
      campaignId,
      now,
      phases.map((_, i) => from + i + 1),
      phases.map(({ medium }) => role(medium)),
      phases.map(({ medium }) => media[medium]),
      phases.map(({ setPointC }) => setPointC),
      phases.map(({ cycle }) => cycle),
      phases.map((phase) => phase.to - phase.from),
      phases.map((phase) => at(phase.from)),
      phases.map((phase) => at(phase.to - 1)),
    ],
    transaction,
  );
  return made.map(({ id }) => id);
}
