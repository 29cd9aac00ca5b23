import { timeNextStep } from "../lib/bench-next-step";
import type { BenchResult } from "./fits";

/** One rig with a long phase; the design allows 150 ms at the 95th percentile. */
export const run = (): Promise<BenchResult[]> => timeNextStep({ rigs: 1, sweeps: 200, rounds: 60, warmUp: 10, everyMs: 0, wantedP95Ms: 150 });
