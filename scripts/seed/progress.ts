import { formatCount } from "@/lib/format";
import type { Standing } from "./run-campaign";

const EVERY_MS = 4000;

/** Says now and then how far all rigs are, in one line. */
export class Progress {
  private readonly standings = new Map<string, Standing>();
  private saidAt = performance.now();

  constructor(private readonly say: (line: string) => void) {}

  tell(name: string, standing: Standing): void {
    this.standings.set(name, standing);
    if (performance.now() - this.saidAt < EVERY_MS) return;
    this.saidAt = performance.now();
    this.say(`Measuring: ${[...this.standings].map(([rig, { repeats }]) => `${rig} ${formatCount(repeats)} repeats`).join(", ")}`);
  }
}
