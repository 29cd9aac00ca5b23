import { formatNumber } from "@/lib/format";

const WIDTH = 54;

/** Where a shift stands on its limit: nought in the middle, the limit at the ends; beyond it the mark stays at the end. */
export function ShiftOnLimit({ shift, limit, unit }: { shift: number; limit: number; unit: string }) {
  const x = WIDTH / 2 + Math.max(-1, Math.min(1, shift / limit)) * (WIDTH / 2 - 1);
  const share = formatNumber((100 * Math.abs(shift)) / limit, { decimals: 0 });
  return (
    <span className="inline-flex items-center justify-end gap-2">
      <svg width={WIDTH} height="12" role="img" aria-label={`${share} % of the limit of ${formatNumber(limit, { decimals: 1 })} ${unit}`}>
        <path d={`M.5 3v6M${WIDTH - 0.5} 3v6M.5 6H${WIDTH - 0.5}M${WIDTH / 2} 4.5v3`} stroke="var(--ink3)" fill="none" />
        <path d={`M${x.toFixed(1)} 1v10`} stroke="var(--ink)" strokeWidth="2.5" />
      </svg>
      <span>±&#8239;{formatNumber(limit, { decimals: limit < 10 ? 1 : 0 })}</span>
    </span>
  );
}
