/** A quantity on an axis: `f₀ − 1 234.567 8 Hz / mHz`. */
export type PlotQuantity = {
  /** A symbol is italic, its subscript upright; without one `words` stand. */
  symbol?: string;
  sub?: string;
  words?: string;
  /** What is taken off, with its own unit: `1 234.567 8 Hz`. */
  less?: string;
  unit?: string;
};

export function quantityText({ symbol, sub, words, less, unit }: PlotQuantity): string {
  const name = [symbol && symbol + (sub ?? ""), words].filter(Boolean).join(" ");
  return `${name}${less ? ` − ${less}` : ""}${unit ? ` / ${unit}` : ""}`;
}

type QuantityLabelProps = { quantity: PlotQuantity; x: number; y: number; anchor?: "start" | "end" };

export function QuantityLabel({ quantity: { symbol, sub, words, less, unit }, x, y, anchor = "start" }: QuantityLabelProps) {
  return (
    <text className="label halo" x={x} y={y} textAnchor={anchor}>
      {words && `${words}${symbol ? " " : ""}`}
      {symbol && <tspan className="symbol">{symbol}</tspan>}
      {sub && <><tspan dy="3" className="subscript">{sub}</tspan><tspan dy="-3">{"\u200b"}</tspan></>}
      {less && ` − ${less}`}
      {unit && ` / ${unit}`}
    </text>
  );
}
