import { Symbol } from "@/components/ui/quantity";
import type { StabilityAnswer } from "@/lib/analysis/schema";
import { formatNumber, formatPower, superscript } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";

export type NamedAnswers = { id: string; name: string; within: StabilityAnswer | undefined; across: StabilityAnswer | undefined };

type Parts = NonNullable<StabilityAnswer["parts"]>;

const DAY_S = 86_400;

/** `1.24(8) × 10⁻¹³`; a part that is not there, or less than its uncertainty, as what it may be at most, k = 2. */
export function partText(value: number, u: number | null): string {
  if (!Number.isFinite(value)) return "";
  if (u === null) return value > 0 ? formatPower(value) : "not known";
  if (value === 0 || value < u) return u > 0 && Number.isFinite(u) ? `below ${formatPower(value + 2 * u)}` : "none";
  const power = Math.floor(Math.log10(value));
  if (!(u > 0) || !Number.isFinite(u)) return formatPower(value);
  const decimals = Math.max(0, Math.min(3, power - Math.floor(Math.log10(u))));
  const digits = Math.round((u / 10 ** power) * 10 ** decimals);
  return `${formatNumber(value / 10 ** power, { decimals })}(${digits})\u2009×\u200910${superscript(power)}`;
}

/** White, flicker, random walk and drift of each curve, and where it is steadiest. */
export function NoiseTable({ curves, unit }: { curves: readonly NamedAnswers[]; unit: "Hz" | "" }) {
  const rows = curves.flatMap(({ id, name, within, across }) => [
    ...(within?.parts ? [{ id: `${id}-w`, name, view: "within phases", parts: within.parts }] : []),
    ...(across?.parts ? [{ id: `${id}-a`, name, view: "phase to phase", parts: across.parts }] : []),
  ]);
  if (rows.length === 0) return <p className="text-ink2">Parts need at least two averaging times.</p>;
  const squared = unit ? `${unit}²` : "";
  return (
    <div className="table-box">
      <table className="data-table" aria-label="Noise parts">
        <thead>
          <tr>
            <th scope="col">Curve</th>
            <th scope="col" className="right">White <Symbol name="h" sub="0" /> / {squared ? `(${squared} s)` : "s"}</th>
            <th scope="col" className="right">Flicker <Symbol name="h" sub="−1" />{squared && ` / ${squared}`}</th>
            <th scope="col" className="right">Random walk <Symbol name="h" sub="−2" /> / {squared ? `(${squared}/s)` : "(1/s)"}</th>
            <th scope="col" className="right">Drift, size / {unit ? `(${unit}/d)` : "(1/d)"}</th>
            <th scope="col">Least deviation</th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ id, name, view, parts }) => (
            <tr key={id}>
              <td className="whitespace-nowrap">{name} <span className="text-ink2">{view}</span></td>
              <td className="right num whitespace-nowrap">{partText(parts.white, parts.u.white)}</td>
              <td className="right num whitespace-nowrap">{partText(parts.flicker, parts.u.flicker)}</td>
              <td className="right num whitespace-nowrap">{partText(parts.randomWalk, parts.u.randomWalk)}</td>
              <td className="right num whitespace-nowrap">{partText(parts.driftPerS * DAY_S, parts.u.driftPerS === null ? null : parts.u.driftPerS * DAY_S)}</td>
              <td className="min-w-[230px]">{bestText(parts, unit)}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function bestText({ best: { tauS, deviation, fromS, toS } }: Parts, unit: string): string {
  const range = toS > 1.05 * fromS ? `; as good within 5 % from ${formatDuration(fromS)} to ${formatDuration(toS)}` : "";
  return `${formatPower(deviation)}${unit && `\u00a0${unit}`} over ${formatDuration(tauS)}${range}`;
}
