import { sleep as realSleep, type Sleep } from "../clock";
import type { Done, HeartbeatAnswer, HelloAnswer, Step, Wish } from "../contract";
import { linkedController } from "../linked-controller";
import type { Rig } from "../rig";
import { Client, Refused } from "./client";
import type { Transport } from "./transport";

/** Another agent has taken this rig, or the session ended. */
export class SessionLost extends Error {}

export type SessionOptions = {
  rig: Rig;
  transport: Transport;
  instance: string;
  signal: AbortSignal;
  log: (text: string) => void;
  /** Fast mode: nothing is done that would end later than this by the rig's clock. */
  untilMs?: number;
  sleep?: Sleep;
};

/** One life of the agent's memory: from hello to a crash or the end. Knows the server's wish and what is being done. */
export class Session {
  readonly rig: Rig;
  readonly client: Client;
  readonly log: (text: string) => void;
  readonly signal: AbortSignal;
  readonly sleep: Sleep;
  readonly untilMs: number;
  wish: Wish = "none";
  dueAtMs: number | undefined;
  server!: HelloAnswer;
  private readonly instance: string;
  private readonly ending = new AbortController();
  private interrupt: ReturnType<typeof linkedController>;
  private current: { step: Step; done?: Done } | undefined;
  private message: string | undefined;

  constructor({ rig, transport, instance, signal, log, untilMs = Number.POSITIVE_INFINITY, sleep = realSleep }: SessionOptions) {
    this.rig = rig;
    this.log = log;
    this.instance = instance;
    this.sleep = sleep;
    this.untilMs = untilMs;
    this.signal = AbortSignal.any([signal, this.ending.signal]);
    this.interrupt = linkedController(this.signal);
    this.client = new Client(transport, this.signal, log, sleep);
  }

  async open(): Promise<void> {
    const { abilities, ports, name, repeatable } = this.rig.scenario.rig;
    this.server = await this.client.hello({
      agent: { name: `simulator ${name}`, version: "1.0.0", instance: this.instance },
      clock: this.rig.reportedClock(),
      abilities: {
        ...abilities,
        ports: ports.length,
        kinds: ["measure", "fill", "rinse", "drain", "dry", "settle"],
        repeatable,
      },
    });
    void this.beatAtIntervals();
  }

  close(reason: Error): void {
    this.ending.abort(reason);
  }

  /** From now on heartbeats speak for this step. What is given out is wanted: an older wish no longer counts. */
  take(step: Step): void {
    this.current = { step, done: step.done };
    this.interrupt = linkedController(this.signal);
    this.message = undefined;
    this.wish = "none";
  }

  /** The step is over. A fault is told once: then the rig is idle, and may be given a date to wait for. */
  release(message?: string): void {
    this.current = undefined;
    this.interrupt.unlink();
    this.message = message;
  }

  progress(done: Done): void {
    if (this.current) this.current.done = done;
  }

  /** Aborted as soon as the server wishes hold or stop. */
  get interruption(): AbortSignal {
    return this.interrupt.controller.signal;
  }

  heed(wish: Wish): void {
    this.wish = wish;
    if (wish !== "none") this.interrupt.controller.abort(new Interrupted());
  }

  async beat(insist = false): Promise<HeartbeatAnswer> {
    const { rig, current } = this;
    const { world, scenario } = rig;
    const body = {
      clock: rig.reportedClock(),
      state: current ? ("working" as const) : this.message ? ("fault" as const) : ("idle" as const),
      stepId: current?.step.id,
      lease: current?.step.lease,
      done: current?.done,
      temperatureC: Math.round((world.setPointC + world.residualC) * 1e4) / 1e4,
      ...(scenario.rig.levelSensors ? this.levels() : {}),
      message: this.message,
    };
    const answer = await this.client.heartbeat(body, insist);
    if (!current) this.message = undefined;
    this.heed(answer.wish);
    this.dueAtMs = answer.dueAt === undefined ? undefined : Date.parse(answer.dueAt);
    rig.save();
    return answer;
  }

  private levels(): { ports: { port: number; volumeMl: number }[]; wasteMl: number } {
    const { world, scenario } = this.rig;
    return {
      ports: scenario.rig.ports.map(({ port }) => ({ port, volumeMl: Math.max(0, world.ports[port]) })),
      wasteMl: world.wasteMl,
    };
  }

  /** As `beat`, where a failed heartbeat may be left out: the next one comes. */
  async tryBeat(): Promise<void> {
    try {
      await this.beat();
    } catch (error) {
      if (this.signal.aborted) throw error;
      if (error instanceof Refused && error.code === "other-agent") {
        const lost = new SessionLost("another agent has taken this rig");
        this.close(lost);
        throw lost;
      }
      this.log(`heartbeat: ${(error as Error).message}`);
    }
  }

  private async beatAtIntervals(): Promise<void> {
    try {
      for (;;) {
        await this.sleep(this.server.heartbeatS * 1000, this.signal);
        await this.tryBeat();
      }
    } catch {
      // The session has ended; who ended it knows why.
    }
  }
}

/** The server wishes hold or stop. */
export class Interrupted extends Error {}
