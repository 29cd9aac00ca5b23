import { row } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { flagNames } from "@/lib/numerics/resonance/flags";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import type { Readout } from "@/lib/numerics/resonance/types";
import type { SweepAnswer } from "@/lib/readings/schema";
import { decodeSweep, type StoredSweep } from "@/lib/readings/decode-sweep";

type Found = StoredSweep & {
  sequence: number;
  index: number;
  medium: string;
  cycle: number;
  at: Date;
  f0Hz: number | null;
  f0StdHz: number | null;
  q: number | null;
  qStd: number | null;
  flags: number;
  readout: Readout;
  dwellS: number | null;
};

/** The newest sweep of a campaign, or the one named, with its fitted curve. @throws AppError 404 when there is none. */
export async function readSweep({ campaignId, sequence, index }: { campaignId: string; sequence?: number; index?: number }): Promise<SweepAnswer> {
  const found = await row<Found>(
    `select s.sequence, r.idx as index, s.medium, s.cycle, r.at, r.kind, w.start_hz as "startHz", w.stop_hz as "stopHz", w.points, w.data,
            f.f0_hz as "f0Hz", f.f0_std_hz as "f0StdHz", f.q, f.q_std as "qStd", coalesce(f.flags, r.flags) as flags,
            coalesce(v.definition->>'readout', (select readout from phase where step_id = s.id)) as readout, (s.params->'sweep'->>'dwellS')::float8 as "dwellS"
       from (select * from step where campaign_id = $1 and kind = 'measure' and stored > 0 and ($2::int is null or sequence = $2)
              order by sequence desc limit 1) s
       left join protocol_version v on v.id = s.protocol_version_id
       join lateral (select * from reading where step_id = s.id and ($3::int is null or idx = $3) order by idx desc limit 1) r on true
       join sweep w on w.step_id = r.step_id and w.idx = r.idx
       left join fit_run run on run.campaign_id = $1 and run.current
       left join fit f on f.fit_run_id = run.id and f.step_id = r.step_id and f.idx = r.idx`,
    [campaignId, sequence ?? null, index ?? null],
  );
  if (!found) throw notFound("sweep");
  const { f0Hz, f0StdHz, q, qStd, medium, cycle, points } = found;
  const about = { sequence: found.sequence, index: found.index, medium, cycle, points, f0Hz, f0StdHz, q, qStd };
  return { ...about, takenAt: found.at.toISOString(), flags: flagNames(found.flags), curve: curveOf(found) };
}

function curveOf(found: Found): SweepAnswer["curve"] {
  const record = decodeSweep(found);
  if (record.form !== "sweep") return null;
  const { sweep } = record;
  const measured = sweep.kind === "complex" ? sweep.re.map((re, i) => Math.hypot(re, sweep.im[i])) : sweep.magnitude;
  const fit = fitResonance(sweep, { readout: found.readout, dwellS: found.dwellS ?? undefined });
  if (fit.flags.includes("failed")) return { frequencyHz: [...sweep.frequencyHz], measuredV: [...measured], fittedV: [] };
  const { re, im } = evaluateResonance(sweep.frequencyHz, { readout: found.readout, f0Hz: fit.f0Hz, q: fit.q, a: fit.a, b: fit.b, c: fit.c });
  return { frequencyHz: [...sweep.frequencyHz], measuredV: [...measured], fittedV: [...re.map((value, i) => Math.hypot(value, im[i]))] };
}
