import type { LeafBlock, MeasureBlock } from "./schema";

/** A block as a step's name, in the words of the trade. */
export function stepLabel(block: LeafBlock): string {
  switch (block.kind) {
    case "measure":
      return block.label ?? measureLabel(block);
    case "fill":
      return `Fill ${block.slot}`;
    case "drain":
      return "Drain";
    case "rinse":
      return `Rinse with ${block.slot}${block.times === 1 ? "" : `, ${block.times} times`}`;
    case "dry":
      return `Dry for ${duration(block.seconds)}`;
    case "settle":
      return `Settle at ${block.temperatureC} °C`;
    case "wait":
      return block.until ? `Wait until ${untilText(block.until)}` : `Wait ${duration(block.seconds ?? 0)}`;
    case "ask":
      return "Ask a person";
  }
}

function measureLabel({ medium, role }: MeasureBlock): string {
  const name = medium === "air" ? "Air" : medium;
  if (role === "reference") return `${name} reference`;
  return role === "check" ? `${name} check` : `Measure ${medium}`;
}

const WEEKDAYS = ["Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday", "Sunday"];

export function untilText({ weekday, time }: { weekday?: number; time: string }): string {
  return weekday === undefined ? time : `${WEEKDAYS[weekday - 1]} ${time}`;
}

/** Seconds in the largest units that say them: `1 h 30 min`, `45 s`, `2 d`. */
export function duration(seconds: number): string {
  const parts: string[] = [];
  let left = Math.round(seconds * 10) / 10;
  for (const [unit, size] of [["d", 86_400], ["h", 3600], ["min", 60]] as const) {
    const whole = Math.floor(left / size);
    if (whole > 0) parts.push(`${whole} ${unit}`);
    left = Math.round((left - whole * size) * 10) / 10;
  }
  if (left > 0 || parts.length === 0) parts.push(`${left} s`);
  return parts.join(" ");
}
