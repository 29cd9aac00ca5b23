import { airReturnOf } from "@/lib/analysis/air-return-of";
import { driftOf } from "@/lib/analysis/drift-of";
import { stabilityOf } from "@/lib/analysis/stability-of";

/** Computations that may take longer than an event loop can be kept waiting, by name: plain data in, plain data out. */
export const heavy = { stability: stabilityOf, drift: driftOf, airReturn: airReturnOf };

export type Heavy = typeof heavy;
