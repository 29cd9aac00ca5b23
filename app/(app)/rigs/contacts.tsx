import { formatCount } from "@/lib/format";

const WIDTH = 360;
const HEIGHT = 22;

/** A line for each ten minutes of the last day, as high as the agent was heard often. */
export function Contacts({ name, counts }: { name: string; counts: readonly number[] }) {
  const most = Math.max(1, ...counts);
  const x = (cell: number) => ((cell + 0.5) / Math.max(1, counts.length)) * WIDTH;
  const d = counts.map((n, cell) => (n > 0 ? `M${x(cell).toFixed(1)} ${(20 - (n / most) * 18).toFixed(1)}V20` : "")).join("");
  const silent = counts.filter((n) => n === 0).length;
  const heard = counts.reduce((sum, n) => sum + n, 0);
  const label = `${name} was heard ${formatCount(heard)} times in 24 hours; in ${silent} of ${counts.length} stretches of ten minutes not at all`;
  return (
    <svg viewBox={`0 0 ${WIDTH} ${HEIGHT}`} width="100%" height={HEIGHT} preserveAspectRatio="none" role="img" aria-label={label}>
      <path d={d} stroke="var(--ink3)" strokeWidth="1.25" />
      <path d={`M0 20.5H${WIDTH}`} stroke="var(--rule2)" />
    </svg>
  );
}
