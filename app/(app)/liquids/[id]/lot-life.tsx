import { formatDay } from "@/lib/format-time";

const WIDTH = 78;

type LotLifeProps = { from: string; expiresAt: string | null; now: string; zone: string };

/** A lot's life from its delivery to its expiry: a line to the present, dots to the end, a bar where it ends. */
export function LotLife({ from, expiresAt, now, zone }: LotLifeProps) {
  const begin = Date.parse(from);
  const end = expiresAt === null ? Math.max(Date.parse(now), begin) : Date.parse(expiresAt);
  const share = end > begin ? Math.max(0, Math.min(1, (Date.parse(now) - begin) / (end - begin))) : 1;
  const expired = expiresAt !== null && expiresAt <= now;
  const x = 1 + share * (WIDTH - 4);
  const colour = expired ? "var(--rule3)" : "var(--ink)";
  const label = expiresAt === null ? `Here since ${formatDay(from, zone, now)}, no expiry recorded` : `From ${formatDay(from, zone, now)} to ${formatDay(expiresAt, zone, now)}, ${Math.round(share * 100)} % passed`;
  return (
    <svg width={WIDTH} height="12" className="min-w-[78px]" role="img" aria-label={label}>
      <path d={`M1 6H${x.toFixed(1)}`} stroke={colour} strokeWidth="2" />
      {!expired && expiresAt !== null && <path d={`M${x.toFixed(1)} 6H${WIDTH - 3}`} stroke={colour} strokeWidth="1.5" strokeDasharray="1 3" />}
      {expiresAt !== null && <path d={`M${WIDTH - 2} 1v10`} stroke={colour} strokeWidth="2" />}
    </svg>
  );
}
