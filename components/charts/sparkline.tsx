import { formatNumber } from "@/lib/format";
import { rangeOf } from "./ticks";

type SparklineProps = {
  /** In words: `First 2 hours after clean 3`. The text says first, last, lowest and highest. */
  label: string;
  values: readonly number[];
  /** A band such as the limit or the scatter. */
  band?: { low: number; high: number };
  /** Place of a mark, as an index: `settled here`. */
  mark?: number;
  line?: boolean;
  width?: number;
  height?: number;
  unit?: string;
};

/** A small plot in a table row. Values that are not finite are gaps. */
export function Sparkline({ label, values, band, mark, line, width = 132, height = 20, unit }: SparklineProps) {
  const range = rangeOf([...values, ...(band ? [band.low, band.high] : [])], 0.02);
  if (!range) return <span className="text-ink3">none yet</span>;
  const [low, high] = range;
  const x = (i: number) => (1 + (i / Math.max(1, values.length - 1)) * (width - 2)).toFixed(1);
  const y = (value: number) => (height - 1 - ((value - low) / (high - low)) * (height - 2)).toFixed(1);

  let d = "";
  let pen = false;
  values.forEach((value, i) => {
    if (!Number.isFinite(value)) pen = false;
    else {
      d += line && pen ? `L${x(i)} ${y(value)}` : `M${x(i)} ${y(value)}${line ? "" : "h0"}`;
      pen = true;
    }
  });
  const finite = values.filter(Number.isFinite);
  const say = (value: number | undefined) => (value === undefined ? "" : formatNumber(Number(value.toPrecision(4))));
  const text = `${label}: from ${say(finite[0])} to ${say(finite[finite.length - 1])}${unit ? ` ${unit}` : ""}, between ${say(low)} and ${say(high)}`;
  return (
    <svg width={width} height={height} role="img" aria-label={text} className="inline-block align-middle">
      {band && <rect width={width} y={y(band.high)} height={Number(y(band.low)) - Number(y(band.high))} fill="var(--band)" />}
      <path d={d} fill="none" stroke={line ? "var(--c2)" : "var(--ink2)"} strokeWidth={line ? 1.25 : 2.2} strokeLinecap="round" strokeLinejoin="round" />
      {mark !== undefined && <path d={`M${x(mark)} 0V${height}`} stroke="var(--ink)" strokeWidth="1.2" />}
    </svg>
  );
}

/** A value on its limit: the line runs from minus limit to plus limit, the tick is the value. */
export function OnLimit({ value, limit, width = 66 }: { value: number; limit: number; width?: number }) {
  const end = 3 + (0.15 / 2.3) * (width - 6);
  const x = 3 + ((Math.max(-1.12, Math.min(1.12, value / limit)) + 1.15) / 2.3) * (width - 6);
  return (
    <svg width={width} height="12" className="inline-block align-[-1px]" role="img" aria-label={`${formatNumber((Math.abs(value) / limit) * 100, { decimals: 0 })} % of the limit`}>
      <path d={`M${end} 6H${width - end}M${end} 3v6M${width - end} 3v6M${width / 2} 5v2`} stroke="var(--rule3)" fill="none" />
      <path d={`M${x.toFixed(1)} 1v10`} stroke="var(--ink)" strokeWidth="2.5" />
    </svg>
  );
}
