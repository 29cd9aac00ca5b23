import { timeNextStep } from "../lib/bench-next-step";
import type { BenchResult } from "./fits";

/** Fifty rigs that each end a phase every ten seconds, far more often than a laboratory's do. */
export const run = (): Promise<BenchResult[]> => timeNextStep({ rigs: 50, sweeps: 20, rounds: 6, warmUp: 1, everyMs: 10_000 });
