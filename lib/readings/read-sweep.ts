import { row } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { flagNames } from "@/lib/numerics/resonance/flags";
import type { Readout } from "@/lib/numerics/resonance/types";
import { decodeSweep, type StoredSweep } from "@/lib/readings/decode-sweep";
import { describeSweep } from "@/lib/readings/describe-sweep";
import { readSweepPlace } from "@/lib/readings/read-sweep-place";
import type { SweepAnswer, SweepQuery } from "@/lib/readings/schema";
import type { FitSettings } from "@/models/json";

type Found = StoredSweep & {
  stepId: string;
  fitRunId: string | null;
  settings: FitSettings | null;
  sequence: number;
  index: number;
  medium: string;
  cycle: number;
  at: Date;
  f0Hz: number | null;
  f0StdHz: number | null;
  q: number | null;
  qStd: number | null;
  amplitudeV: number | null;
  noiseV: number | null;
  flags: number;
  readout: Readout | null;
  dwellS: number | null;
  driveV: number | null;
  durationS: number | null;
  temperatureC: number | null;
  pressurePa: number | null;
  humidityPercent: number | null;
};

const FORMS = { 1: "sweep", 2: "magnitude", 3: "ringDown", 4: "fitted" } as const;

/** The newest sweep of a campaign, or the one named, with its fitted curve; of a named one also its place in the phase. @throws AppError 404 when there is none. */
export async function readSweep({ campaignId, medium, at: taken, ...asked }: { campaignId: string } & SweepQuery): Promise<SweepAnswer> {
  const { sequence, index, fitRunId } = taken ? { ...asked, ...(await takenAt({ campaignId, medium, at: taken })) } : asked;
  const found = await row<Found>(
    `select s.id as "stepId", run.id as "fitRunId", run.settings, s.sequence, r.idx as index, s.medium, s.cycle, r.at, r.kind, w.start_hz as "startHz", w.stop_hz as "stopHz",
            w.points, w.data, f.f0_hz as "f0Hz", f.f0_std_hz as "f0StdHz", f.q, f.q_std as "qStd", f.amplitude_v as "amplitudeV", f.noise_v as "noiseV",
            coalesce(f.flags, r.flags) as flags, coalesce(v.definition->>'readout', (select readout from phase where step_id = s.id)) as readout,
            (s.params->'sweep'->>'dwellS')::float8 as "dwellS", (s.params->'sweep'->>'driveV')::float8 as "driveV", r.duration_s as "durationS",
            r.temperature_c as "temperatureC", r.pressure_pa as "pressurePa", r.humidity_percent as "humidityPercent"
       from (select * from step where campaign_id = $1 and kind = 'measure' and stored > 0 and ($2::int is null or sequence = $2)
              order by sequence desc limit 1) s
       left join protocol_version v on v.id = s.protocol_version_id
       join lateral (select * from reading where step_id = s.id and ($3::int is null or idx = $3) order by idx desc limit 1) r on true
       join sweep w on w.step_id = r.step_id and w.idx = r.idx
       left join fit_run run on run.campaign_id = $1 and case when $4::bigint is null then run.current else run.id = $4 end
       left join fit f on f.fit_run_id = run.id and f.step_id = r.step_id and f.idx = r.idx`,
    [campaignId, sequence ?? null, index ?? null, fitRunId ?? null],
  );
  if (!found) throw notFound("sweep");
  const { stepId, settings, at, flags, kind, amplitudeV, noiseV, medium: of, cycle, points, f0Hz, f0StdHz, q, qStd, dwellS, driveV, durationS, temperatureC, pressurePa, humidityPercent } = found;
  const readout = settings?.readout ?? found.readout ?? "velocity";
  const named = sequence !== undefined && index !== undefined;
  return {
    sequence: found.sequence,
    index: found.index,
    medium: of,
    cycle,
    points,
    f0Hz,
    f0StdHz,
    q,
    qStd,
    fitRunId: found.fitRunId,
    dwellS,
    driveV,
    durationS,
    temperatureC,
    pressurePa,
    humidityPercent,
    readout,
    takenAt: at.toISOString(),
    flags: flagNames(flags),
    form: FORMS[kind as keyof typeof FORMS],
    snr: amplitudeV !== null && noiseV ? amplitudeV / noiseV : null,
    noiseV,
    ...describeSweep(decodeSweep(found), { readout, offsetSlope: settings?.offsetSlope ?? true, dwellS: dwellS ?? undefined }),
    ...(named && { place: await readSweepPlace({ campaignId, stepId, sequence: found.sequence, index: found.index, fitRunId: found.fitRunId }) }),
  };
}

type TakenAt = { campaignId: string; medium?: string; at: Date };

/** The repeat nearest to a time, of the phase that it lies in, or that began last before it. */
async function takenAt({ campaignId, medium, at }: TakenAt): Promise<{ sequence: number; index: number }> {
  const found = await row<{ sequence: number; index: number }>(
    `select p.sequence, r.idx as index
       from (select step_id, sequence from phase where campaign_id = $1 and started_at is not null and ($2::text is null or medium = $2)
              order by started_at <= $3 desc, abs(extract(epoch from started_at - $3)) limit 1) p
       join lateral (select idx from reading where step_id = p.step_id order by abs(extract(epoch from at - $3)), idx limit 1) r on true`,
    [campaignId, medium ?? null, at],
  );
  if (!found) throw notFound("repeat");
  return found;
}
