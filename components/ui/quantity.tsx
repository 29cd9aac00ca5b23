import { formatNumber, formatUncertain } from "@/lib/format";

/** A quantity symbol in italic serif; its subscript stays upright. */
export function Symbol({ name, sub }: { name: string; sub?: string }) {
  return (
    <span className="whitespace-nowrap">
      <i className="q">{name}</i>
      {sub && <sub>{sub}</sub>}
    </span>
  );
}

/** f₀ and Q, everywhere the same. */
export const F0 = () => <Symbol name="f" sub="0" />;
export const Q = () => <Symbol name="Q" />;

type QuantityProps = {
  symbol?: string;
  sub?: string;
  value: number;
  /** Standard uncertainty, in the unit of the value. */
  u?: number | null;
  unit?: string;
  digits?: 1 | 2 | "auto";
  /** Places after the point where there is no uncertainty. */
  decimals?: number;
  signed?: boolean;
};

/** A value with uncertainty and unit: never broken over a line. */
export function Quantity({ symbol, sub, value, u, unit, digits, decimals, signed }: QuantityProps) {
  return (
    <span className="num">
      {symbol && <><Symbol name={symbol} sub={sub} />{"\u00a0"}</>}
      {u == null ? formatNumber(value, { decimals, signed }) : formatUncertain(value, u, { digits, decimals, signed })}
      {unit && `\u00a0${unit}`}
    </span>
  );
}

/** `3.0 × 10⁻⁷` */
export function PowerOfTen({ value, decimals = 1 }: { value: number; decimals?: number }) {
  if (!Number.isFinite(value) || value === 0) return <span className="num">{formatNumber(value)}</span>;
  const [mantissa, exponent] = value.toExponential(decimals).split("e").map(Number);
  return (
    <span className="num">
      {formatNumber(mantissa ?? 0, { decimals })}{"\u2009×\u200910"}<sup>{formatNumber(exponent ?? 0)}</sup>
    </span>
  );
}
