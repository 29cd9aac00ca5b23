"use client";

import type { DeviationCurve, DeviationPoint } from "@/components/charts/deviation";
import { quantityText, type PlotQuantity } from "@/components/charts/plot-quantity";
import { saveText, tableAsCsv } from "@/components/charts/save";
import { Button } from "@/components/ui/button";
import { PowerOfTen, Symbol } from "@/components/ui/quantity";
import { capitalised, formatCount, formatNumber } from "@/lib/format";
import { formatDuration } from "@/lib/format-time";

type StabilityNumbersProps = { curves: readonly DeviationCurve[]; band: string; file: string; quantity: PlotQuantity };

const six = (value: number) => formatNumber(Number(value.toPrecision(6)));

/** A group of columns a curve, by its own rising averaging times; from phase to phase below. */
export function StabilityNumbers({ curves, band, file, quantity }: StabilityNumbersProps) {
  const parts = [
    { head: "Within phases", of: (curve: DeviationCurve) => curve.within },
    { head: "From phase to phase", of: (curve: DeviationCurve) => curve.across ?? [] },
  ];
  const save = () => saveText(`${file}.csv`, "text/csv", tableAsCsv(asTable(curves, band, quantity)));
  return (
    <div>
      <div className="table-box">
        <table className="data-table" aria-label="Deviation by averaging time">
          <thead>
            <tr>{curves.map(({ id, label }) => <th key={id} colSpan={5} scope="colgroup"><b>{capitalised(label)}</b></th>)}</tr>
            <tr>
              {curves.flatMap(({ id }) => [
                <th key={`${id}-t`} scope="col">τ / s</th>,
                <th key={`${id}-n`} scope="col" className="right">Terms</th>,
                <th key={`${id}-d`} scope="col" className="right">{quantity.words} {quantity.symbol && <Symbol name={quantity.symbol} sub={quantity.sub} />}{quantity.unit && ` / ${quantity.unit}`}</th>,
                <th key={`${id}-b`} scope="col" className="right">{band}</th>,
                <th key={`${id}-k`} scope="col">Noise</th>,
              ])}
            </tr>
          </thead>
          {parts.map(({ head, of }) => {
            const rows = curves.reduce((most, curve) => Math.max(most, of(curve).length), 0);
            if (rows === 0) return null;
            return (
              <tbody key={head}>
                <tr><th scope="rowgroup" colSpan={5 * curves.length}>{head}</th></tr>
                {Array.from({ length: rows }, (_, i) => <tr key={i}>{curves.flatMap((curve) => cellsOf(curve.id, of(curve)[i]))}</tr>)}
              </tbody>
            );
          })}
        </table>
      </div>
      <div className="table-foot"><Button small onClick={save}>CSV</Button></div>
    </div>
  );
}

function cellsOf(id: string, point: DeviationPoint | undefined) {
  if (!point) return ["t", "n", "d", "b", "k"].map((cell) => <td key={`${id}-${cell}`} />);
  const { tau, n, deviation, low, high, noise, assumed } = point;
  return [
    <td key={`${id}-t`} className="num whitespace-nowrap">{six(tau)}&ensp;<span className="text-ink2">{formatDuration(tau)}</span></td>,
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
