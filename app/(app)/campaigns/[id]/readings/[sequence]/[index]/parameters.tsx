import { Symbol } from "@/components/ui/quantity";
import { formatNumber, formatUncertain, NO_VALUE } from "@/lib/format";
import type { SweepAnswer } from "@/lib/readings/schema";
import { unitFor } from "./sweep-views";

type Parameter = NonNullable<SweepAnswer["parameters"]>[number];

const WHAT: Record<Parameter["name"], { symbol: string; sub?: string; part?: string; what: string; unit: "Hz" | "" | "V" }> = {
  f0Hz: { symbol: "f", sub: "0", what: "undamped natural frequency", unit: "Hz" },
  q: { symbol: "Q", what: "quality factor", unit: "" },
  aRe: { symbol: "a", part: "in phase", what: "size and direction of the resonance", unit: "V" },
  aIm: { symbol: "a", part: "quadrature", what: "", unit: "V" },
  bRe: { symbol: "b", part: "in phase", what: "offset, ohmic and crosstalk", unit: "V" },
  bIm: { symbol: "b", part: "quadrature", what: "", unit: "V" },
  cRe: { symbol: "c", part: "in phase", what: "slope of the offset over the sweep", unit: "V" },
  cIm: { symbol: "c", part: "quadrature", what: "", unit: "V" },
};

/** Every fitted parameter with its standard uncertainty and how it goes with f0. */
export function Parameters({ sweep }: { sweep: SweepAnswer }) {
  const { parameters = [] } = sweep;
  const rows: Parameter[] = parameters.length > 0 ? parameters : givenOf(sweep);
  if (rows.length === 0) return <p className="text-ink2">Nothing could be fitted.</p>;
  return (
    <div className="table-box">
      <table className="data-table" aria-label="Parameters of the fit">
        <thead>
          <tr>
            <th scope="col">Parameter</th>
            <th scope="col">What</th>
            <th scope="col" className="right">Value</th>
            <th scope="col" className="right">Standard uncertainty</th>
            <th scope="col">Unit</th>
            <th scope="col" className="right">Correlation with <Symbol name="f" sub="0" /></th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ name, value, u, correlationWithF0 }) => {
            const { symbol, sub, part, what, unit } = WHAT[name];
            const [shownUnit, scale] = unit === "V" ? unitFor([value]) : ([unit, 1] as const);
            return (
              <tr key={name}>
                <td className="whitespace-nowrap"><Symbol name={symbol} sub={sub} />{part && `, ${part}`}</td>
                <td className="min-w-[160px] text-ink2">{what}</td>
                <td className="right num whitespace-nowrap">{formatUncertain(value * scale, u === null ? null : u * scale)}</td>
                <td className="right num">{u === null ? NO_VALUE : formatNumber(Number((u * scale).toPrecision(2)))}</td>
                <td>{shownUnit}</td>
                <td className="right num">{correlationWithF0 === null ? NO_VALUE : formatNumber(correlationWithF0, { decimals: name === "f0Hz" ? 0 : 2 })}</td>
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

function givenOf({ f0Hz, f0StdHz, q, qStd }: SweepAnswer): Parameter[] {
  if (f0Hz === null || q === null) return [];
  return [
    { name: "f0Hz", value: f0Hz, u: f0StdHz, correlationWithF0: 1 },
    { name: "q", value: q, u: qStd, correlationWithF0: null },
  ];
}
