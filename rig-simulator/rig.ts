import { createClock, type Clock, type Speed } from "./clock";
import type { Step } from "./contract";
import { nominalInAir } from "./physics/truth";
import type { Resonance } from "./physics/immersed";
import type { Scenario } from "./scenario";
import { newWorld, worldAfter, worldAt, type World } from "./world";

/** Keeps a rig's world over restarts of the simulator. */
export type WorldStore = { load: () => World | undefined; save: (world: World) => void };

export const memoryStore = (): WorldStore => {
  let kept: World | undefined;
  return { load: () => kept, save: (world) => void (kept = world) };
};

/** The truth behind one reading. */
export type TruthRecord = { campaignNumber: number; sequence: number; index: number; takenAt: string; f0Hz: number; q: number; sensorC: number };

type Options = {
  scenario: Scenario;
  seed: number;
  speed: Speed;
  store: WorldStore;
  clockStartMs?: number;
  /** Is told the truth behind every reading that is taken; one that is taken again comes again, the same. */
  onTruth?: (record: TruthRecord) => void;
};

/** The simulated rig: its scenario, its world and its clock. Agents come and go, it stays. */
export class Rig {
  readonly scenario: Scenario;
  readonly seed: number;
  readonly clock: Clock;
  readonly speed: Speed;
  readonly nominal: Resonance;
  readonly onTruth: (record: TruthRecord) => void;
  world: World;
  private readonly store: WorldStore;
  private latestReportedMs = Number.NEGATIVE_INFINITY;

  constructor({ scenario, seed, speed, store, clockStartMs, onTruth = () => undefined }: Options) {
    this.scenario = scenario;
    this.seed = seed;
    this.speed = speed;
    this.store = store;
    this.onTruth = onTruth;
    this.nominal = nominalInAir(scenario);
    this.world = store.load() ?? newWorld(scenario, null);
    const startMs = this.world.clockMs ?? clockStartMs ?? Date.now();
    if (speed.kind !== "real") this.world.clockMs = startMs;
    this.clock = createClock(speed, startMs);
  }

  get isFast(): boolean {
    return this.clock.set !== undefined;
  }

  /** The clock as the rig tells it, never going back, with the scenario's offset. */
  reportedClock(): string {
    this.latestReportedMs = Math.max(this.latestReportedMs, this.clock.nowMs());
    return this.timeText(this.latestReportedMs);
  }

  timeText(ms: number): string {
    return new Date(Math.round(ms + this.scenario.faults.clockOffsetS * 1000)).toISOString();
  }

  /** Puts the rig where this step begins and returns the world there. A bottle or container that was reported has been seen to. */
  begin(step: Step): World {
    this.world = { ...this.world, ...this.seenTo(step) };
    const start = worldAt(this.world, step);
    if (start.clockMs !== null) this.clock.set?.(start.clockMs);
    return start;
  }

  done(step: Step): void {
    this.world = worldAfter(this.world, step, this.scenario);
    if (this.isFast && this.world.clockMs !== null) this.clock.set?.(this.world.clockMs);
    this.save();
  }

  /** Fast mode: nothing happens until then, so it is then. */
  jumpTo(ms: number): void {
    if (ms <= this.clock.nowMs()) return;
    this.clock.set?.(ms);
    this.world = { ...this.world, clockMs: ms };
    this.save();
  }

  save(): void {
    if (this.speed.kind === "times") this.world.clockMs = this.clock.nowMs();
    this.store.save(this.world);
  }

  private seenTo(step: Step): Partial<World> {
    if (step.kind !== "fill" && step.kind !== "rinse" && step.kind !== "drain") return {};
    const port = step.kind === "drain" ? undefined : String(step.params.port);
    const answered = this.world.awaiting.filter((what) => what === "waste" || what === port);
    if (answered.length === 0) return {};
    const ports = { ...this.world.ports };
    for (const loaded of this.scenario.rig.ports) if (answered.includes(String(loaded.port))) ports[loaded.port] = loaded.volumeMl;
    return {
      ports,
      wasteMl: answered.includes("waste") ? 0 : this.world.wasteMl,
      awaiting: this.world.awaiting.filter((what) => !answered.includes(what)),
    };
  }
}
