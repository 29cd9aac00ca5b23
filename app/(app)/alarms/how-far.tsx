import type { AlarmAnswer } from "@/lib/alarms/schema";
import { formatNumber } from "@/lib/format";

const WIDTH = 104;
const LIMIT_X = WIDTH / 2;

/** The value on the scale of the limit: grey up to the limit's tick, ink beyond it; cut where it is more than twice the limit. */
export function HowFar({ alarm: { value, limit, unit, kind } }: { alarm: AlarmAnswer }) {
  if (value === undefined || limit === undefined || limit === 0) return <span className="text-ink3">–</span>;
  const said = (n: number) => formatNumber(Number(n.toPrecision(3)));
  const words = `${said(value)} ${unit ?? ""}, limit ${said(limit)}`;
  if (kind === "temperature") return <span className="small text-ink2">{words}</span>;
  const share = Math.abs(value / limit);
  const end = Math.min(WIDTH, share * LIMIT_X);
  return (
    <>
      <svg width={WIDTH} height={10} role="img" aria-label={words}>
        <path d={`M0 5H${WIDTH}`} stroke="var(--rule)" />
        <path d={`M0 5H${Math.min(end, LIMIT_X)}`} stroke="var(--ink3)" strokeWidth="3" />
        {end > LIMIT_X && <path d={`M${LIMIT_X} 5H${end}`} stroke="var(--ink)" strokeWidth="3" />}
        {share > 2 && <path d={`M${WIDTH - 12} 9l4 -8M${WIDTH - 8} 9l4 -8`} stroke="var(--paper)" strokeWidth="2" />}
        <path d={`M${LIMIT_X} 0v10`} stroke="var(--ink)" />
      </svg>
      <span className="line-2">{words}</span>
    </>
  );
}
