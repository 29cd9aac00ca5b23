import { xoroshiro128plus } from "pure-rand/generator/XoroShiro";
import { heartbeat } from "@/lib/agents/heartbeat";
import { hello } from "@/lib/agents/hello";
import type { FinishBody, HeartbeatBody, StepAnswer } from "@/lib/agents/schema";
import { advanceCampaign } from "@/lib/campaigns/advance";
import { findCampaignsToAdvance } from "@/lib/campaigns/to-advance";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import type { Definition } from "@/lib/protocol/schema";
import { KIND, type ReadingInput } from "@/lib/readings/reading";
import { storeReadings } from "@/lib/readings/store-readings";
import { finishStep } from "@/lib/steps/finish-step";
import { nextStep } from "@/lib/steps/next-step";
import type { Campaign } from "@/models/campaign";
import type { Rig } from "@/models/rig";
import { buildAgentToken } from "./agent-token";
import { buildCampaign } from "./campaign";
import { buildMount } from "./mount";
import { buildProtocolVersion, aDefinition } from "./protocol";
import { buildRig } from "./rig";
import { buildSensor } from "./sensor";

type MeasureParams = Extract<StepAnswer["params"], { sweep: unknown }>;

/** What a test's resonator does: f0 and Q by medium, sequence and index, and the cell's temperature. */
export type Truth = (at: { medium: string; sequence: number; index: number }) => { f0Hz: number; q: number; temperatureC?: number };

const steady: Truth = ({ medium }) => (medium === "air" ? { f0Hz: 2400, q: 1800 } : { f0Hz: 2100, q: 60 });

const NOISE_V = 1e-4;

/** A rig with a simulated clock, a mounted sensor, a queued campaign, and an agent that does what it is told. */
export class Bench {
  nowMs = Date.parse("2026-05-14T08:00:00Z");
  clockMs = Date.parse("2026-01-05T08:00:00Z");
  session?: string;
  truth: Truth = steady;
  readonly handled: StepAnswer[] = [];

  private constructor(
    readonly rig: Rig,
    readonly tokenId: string,
    readonly campaign: Campaign,
  ) {}

  static async make({ definition = {}, clock = "simulated" }: { definition?: Partial<Definition>; clock?: "real" | "simulated" } = {}): Promise<Bench> {
    const rig = await buildRig({ clock });
    const sensor = await buildSensor();
    const token = await buildAgentToken({ rigId: rig.id });
    const version = await buildProtocolVersion({ definition: aDefinition(definition) });
    await buildMount({ rigId: rig.id, sensorId: sensor.id });
    const campaign = await buildCampaign({ rigId: rig.id, sensorId: sensor.id, protocolVersionId: version.id, state: "queued" });
    const bench = new Bench(rig, token.id, campaign);
    if (clock === "real") bench.clockMs = bench.nowMs;
    return bench;
  }

  get agent() {
    return { rigId: this.rig.id, rigName: this.rig.name, tokenId: this.tokenId };
  }

  get now(): Date {
    return new Date(this.nowMs);
  }

  get clock(): Date {
    return new Date(this.clockMs);
  }

  pass(seconds: number): void {
    this.nowMs += seconds * 1000;
    this.clockMs += seconds * 1000;
  }

  async hello(instance = "bench", replace = false, repeatable: string[] = []) {
    const answer = await hello({
      agent: this.agent,
      now: this.now,
      body: {
        agent: { name: "bench agent", version: "1", instance },
        clock: this.clock,
        replace,
        abilities: {
          minHz: 100,
          maxHz: 100_000,
          maxPoints: 4001,
          maxDriveV: 1,
          minTemperatureC: 5,
          maxTemperatureC: 60,
          ports: 4,
          kinds: ["measure", "fill", "drain", "rinse", "dry", "settle"],
          repeatable,
        },
      },
    });
    this.session = answer.session;
    return answer;
  }

  /** What the worker does, until nothing is left to do. */
  async work(): Promise<void> {
    for (let turns = 0; turns < 100; turns++) {
      const waiting = await findCampaignsToAdvance({ now: this.now });
      const before = JSON.stringify(waiting);
      for (const campaignId of waiting) await advanceCampaign({ campaignId, now: this.now });
      if (waiting.length === 0 || (turns > 0 && before === this.lastWaiting)) return;
      this.lastWaiting = before;
    }
  }
  private lastWaiting = "";

  heartbeat(body: Partial<HeartbeatBody> = {}) {
    return heartbeat({ agent: this.agent, session: this.session, now: this.now, body: { clock: this.clock, state: "idle", ...body } });
  }

  async next(): Promise<StepAnswer | undefined> {
    this.lastWaiting = "";
    await this.work();
    return nextStep({ agent: this.agent, session: this.session, body: { clock: this.clock }, now: () => this.now });
  }

  reading(step: StepAnswer, index: number): ReadingInput {
    const params = step.params as MeasureParams;
    const { startHz, stopHz, points } = params.sweep;
    const { f0Hz, q, temperatureC = 20 } = this.truth({ medium: params.medium, sequence: step.sequence, index });
    const { re, im } = evaluateResonance(linearGrid(startHz, stopHz, points), { readout: "velocity", f0Hz, q, a: { re: 0.01, im: 0 }, b: { re: 0.02, im: 0.01 } });
    const random = xoroshiro128plus(step.sequence * 100_003 + index + 1);
    const noise = () => ((random.unsafeNext() >>> 0) / 2 ** 32 - 0.5) * NOISE_V;
    const data = new Float64Array(2 * points);
    for (let i = 0; i < points; i++) {
      data[i] = re[i] + noise();
      data[points + i] = im[i] + noise();
    }
    return { index, takenAt: new Date(this.clockMs + index * 1000), temperatureC, record: { kind: KIND.complex, startHz, stopHz, points, data } };
  }

  upload(step: StepAnswer, indices: readonly number[]) {
    const readings = indices.map((index) => this.reading(step, index));
    return storeReadings({ agent: this.agent, session: this.session, stepId: step.id, body: { lease: step.lease, readings }, now: this.now });
  }

  finish(step: StepAnswer, body: Partial<FinishBody> = { outcome: "done" }) {
    return finishStep({ agent: this.agent, session: this.session, stepId: step.id, body: { lease: step.lease, outcome: "done", ...body } as FinishBody, now: this.now });
  }

  /** Carries a step out to its end. */
  async carryOut(step: StepAnswer): Promise<void> {
    this.handled.push(step);
    if (step.kind === "measure") {
      const { repeats } = step.params as MeasureParams;
      const missing = step.missing ?? [[0, repeats - 1]];
      const indices = missing.flatMap(([from, to]) => Array.from({ length: to - from + 1 }, (_, i) => from + i));
      for (let i = 0; i < indices.length; i += 100) await this.upload(step, indices.slice(i, i + 100));
      this.pass(repeats);
    } else {
      this.pass(60);
    }
    await this.finish(step);
  }

  /** Carries out steps until `until` says so or there is none; a waiting simulated clock jumps to what falls due. */
  async run(until: (step: StepAnswer) => boolean = () => false): Promise<StepAnswer | undefined> {
    for (let steps = 0; steps < 500; steps++) {
      const step = await this.next();
      if (step && until(step)) return step;
      if (step) {
        await this.carryOut(step);
        continue;
      }
      const { dueAt } = await this.heartbeat();
      if (!dueAt) return undefined;
      this.clockMs = Date.parse(dueAt);
      await this.heartbeat();
    }
    throw new Error("the campaign did not come to an end");
  }
}

