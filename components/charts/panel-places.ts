/** Places of panels under each other: `headroom` over the first, `gap` over the others. Pure. */
export function stackPanels(heights: readonly number[], headroom: number, gap: number): { tops: number[]; bottom: number } {
  const tops: number[] = [];
  let bottom = 0;
  for (const height of heights) {
    const top = bottom + (tops.length === 0 ? headroom : gap);
    tops.push(top);
    bottom = top + height;
  }
  return { tops, bottom };
}

/** Which of the places along x get a label, when labels need `apart` pixels each. */
export function placesWithRoom(middles: readonly number[], apart: number): boolean[] {
  let last = -Infinity;
  return middles.map((middle) => {
    const room = middle - last > apart;
    if (room) last = middle;
    return room;
  });
}
