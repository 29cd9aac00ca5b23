const WIDTH = 300;

type Span = { from: string; to: string | null };

type MountSpanProps = { span: Span; label: string; /** Of all mounts together. */ from: string; now: string };

/** A mount on the time scale that all mounts of the sensor share: a bar, open at the right while it lasts. */
export function MountSpan({ span, label, from, now }: MountSpanProps) {
  const begin = Date.parse(from);
  const share = (at: string) => (Date.parse(at) - begin) / Math.max(1, Date.parse(now) - begin);
  const x0 = 1 + share(span.from) * (WIDTH - 8);
  const x1 = Math.max(x0 + 2, 1 + share(span.to ?? now) * (WIDTH - 8));
  return (
    <svg viewBox={`0 0 ${WIDTH} 14`} className="h-3.5 w-full" preserveAspectRatio="none" role="img" aria-label={label}>
      <path d={`M0 12.5H${WIDTH}`} stroke="var(--rule)" />
      <path d={`M${x0.toFixed(1)} 7H${x1.toFixed(1)}`} stroke="var(--ink)" strokeWidth="5" />
      {span.to === null && <path d={`M${x1.toFixed(1)} 7h6`} stroke="var(--ink)" strokeWidth="5" strokeDasharray="1.5 1.5" />}
    </svg>
  );
}
