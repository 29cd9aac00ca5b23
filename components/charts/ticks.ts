/** Ticks and ranges of plots. Pure. */

/** Round ticks inside [low, high], at most `most` (5) of them: steps of 1, 2, 2.5 or 5 times a power of ten. */
export function roundTicks(low: number, high: number, most = 5): number[] {
  if (!(high > low) || !Number.isFinite(high - low)) return Number.isFinite(low) ? [low] : [];
  const raw = (high - low) / most;
  const power = 10 ** Math.floor(Math.log10(raw));
  for (const factor of [1, 2, 2.5, 5, 10, 20, 25, 50]) {
    const step = factor * power;
    const first = Math.ceil(low / step - 1e-9);
    const last = Math.floor(high / step + 1e-9);
    if (last - first + 1 <= most) return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => Number(((first + i) * step).toPrecision(12)));
  }
  return [];
}

/** Powers of ten inside [low, high]; every second or third when there are more than `most`. */
export function decadeTicks(low: number, high: number, most = 6): number[] {
  const first = Math.ceil(Math.log10(low) - 1e-9);
  const last = Math.floor(Math.log10(high) + 1e-9);
  const every = Math.max(1, Math.ceil((last - first + 1) / most));
  const ticks: number[] = [];
  for (let power = first; power <= last; power++) if ((power - first) % every === 0) ticks.push(10 ** power);
  return ticks;
}

/** 2 to 9 times each power of ten. */
export function minorTicks(low: number, high: number): number[] {
  const ticks: number[] = [];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++) {
    for (let factor = 2; factor < 10; factor++) {
      const tick = factor * 10 ** power;
      if (tick >= low && tick <= high) ticks.push(tick);
    }
  }
  return ticks;
}

/** Lowest and highest finite value with a share of room; a flat series gets room as well. Undefined without a finite value. */
export function rangeOf(values: Iterable<number>, room = 0.06): [number, number] | undefined {
  let low = Infinity;
  let high = -Infinity;
  for (const value of values) {
    if (!Number.isFinite(value)) continue;
    if (value < low) low = value;
    if (value > high) high = value;
  }
  if (low > high) return undefined;
  const span = high - low || Math.abs(high) * 1e-6 || 1;
  return [low - span * room, high + span * room];
}
