type Clocked = { clock: "real" | "simulated"; reportedClock: Date | null };

/** Protocol time of a rig: the server's for a real clock, the last reported one for a simulated clock; undefined before the first report. */
export function protocolTime(rig: Clocked, now: Date): Date | undefined {
  return rig.clock === "real" ? now : (rig.reportedClock ?? undefined);
}
