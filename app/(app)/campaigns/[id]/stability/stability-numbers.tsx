"use client";

import type { DeviationCurve, DeviationPoint } from "@/components/charts/deviation";
import { quantityText, type PlotQuantity } from "@/components/charts/plot-quantity";
import { saveText, tableAsCsv } from "@/components/charts/save";
import { Button } from "@/components/ui/button";
import { PowerOfTen } from "@/components/ui/quantity";
import { formatCount, formatNumber } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";

type StabilityNumbersProps = { curves: readonly DeviationCurve[]; band: string; file: string; quantity: PlotQuantity };

const six = (value: number) => formatNumber(Number(value.toPrecision(6)));

/** One row an averaging time, one group of columns a curve; from phase to phase below. */
export function StabilityNumbers({ curves, band, file, quantity }: StabilityNumbersProps) {
  const parts = [
    { head: "within phases", of: (curve: DeviationCurve) => curve.within },
    { head: "phase to phase", of: (curve: DeviationCurve) => curve.across ?? [] },
  ];
  const save = () => saveText(`${file}.csv`, "text/csv", tableAsCsv(asTable(curves, band, quantity)));
  return (
    <div>
      <div className="table-box">
        <table className="data-table" aria-label="Deviation by averaging time">
          <thead>
            <tr>
              <th />
              {curves.map(({ id, label }) => <th key={id} colSpan={4} scope="colgroup"><b>{label}</b></th>)}
            </tr>
            <tr>
              <th scope="col">τ / s</th>
              {curves.flatMap(({ id }) => [
                <th key={`${id}-n`} scope="col" className="right">Terms</th>,
                <th key={`${id}-d`} scope="col" className="right">{quantityText(quantity)}</th>,
                <th key={`${id}-b`} scope="col" className="right">{band}</th>,
                <th key={`${id}-k`} scope="col">Noise</th>,
              ])}
            </tr>
          </thead>
          {parts.map(({ head, of }) => (
            <tbody key={head}>
              {timesOf(curves.flatMap(of)).map((tau, i) => (
                <tr key={tau}>
                  <td className="num whitespace-nowrap">{six(tau)}&ensp;<span className="text-ink2">{formatDuration(tau)}{i === 0 && head !== "within phases" && `, ${head}`}</span></td>
                  {curves.flatMap((curve) => cellsOf(curve.id, of(curve).find((point) => point.tau === tau)))}
                </tr>
              ))}
            </tbody>
          ))}
        </table>
      </div>
      <div className="table-foot"><Button small onClick={save}>CSV</Button></div>
    </div>
  );
}

const timesOf = (points: readonly DeviationPoint[]): number[] => [...new Set(points.map(({ tau }) => tau))].sort((a, b) => a - b);

function cellsOf(id: string, point: DeviationPoint | undefined) {
  if (!point) return ["n", "d", "b", "k"].map((cell) => <td key={`${id}-${cell}`} />);
  const { n, deviation, low, high, noise, assumed } = point;
  return [
    <td key={`${id}-n`} className="right num">{formatCount(n)}</td>,
    <td key={`${id}-d`} className="right num whitespace-nowrap"><PowerOfTen value={deviation} decimals={2} /></td>,
    <td key={`${id}-b`} className="right num whitespace-nowrap">{bandText(deviation, low, high)}</td>,
    <td key={`${id}-k`} className="whitespace-nowrap">{noise}{assumed && "*"}</td>,
  ];
}

/** The band in the power of ten of its deviation: `0.98 to 1.04`. */
function bandText(deviation: number, low: number, high: number): string {
  const power = 10 ** Math.floor(Math.log10(deviation));
  return Number.isFinite(power) && power > 0 ? `${formatNumber(low / power, { decimals: 2 })} to ${formatNumber(high / power, { decimals: 2 })}` : "";
}

function asTable(curves: readonly DeviationCurve[], band: string, quantity: PlotQuantity) {
  const row = (label: string, view: string) => ({ tau, n, deviation, low, high, noise, assumed }: DeviationPoint) => [label, view, tau, n, deviation, low, high, `${noise ?? ""}${assumed ? "*" : ""}`];
  return {
    columns: ["curve", "view", "tau / s", "terms", quantityText(quantity), `${band} from`, `${band} to`, "noise"].map((head) => ({ head })),
    rows: curves.flatMap((curve) => [...curve.within.map(row(curve.label, "within phases")), ...(curve.across ?? []).map(row(curve.label, "phase to phase"))]),
  };
}
