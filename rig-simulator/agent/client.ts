import { sleep as realSleep, type Sleep } from "../clock";
import type { Done, FinishAnswer, HeartbeatAnswer, HelloAnswer, Outcome, ReadingsAnswer, Step } from "../contract";
import { NoAnswer, type Answer, type Transport } from "./transport";

/** The server understood and says no; the code is the last part of the problem's `type`. */
export class Refused extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    detail: string,
  ) {
    super(`${status}${code ? ` ${code}` : ""}: ${detail}`);
    this.name = "Refused";
  }
}

export type Hello = {
  agent: { name: string; version: string; instance: string };
  clock: string;
  abilities: Record<string, unknown>;
};

export type Heartbeat = {
  clock: string;
  state: "idle" | "working" | "fault";
  stepId?: string;
  lease?: string;
  done?: Done;
  temperatureC?: number;
  ports?: { port: number; volumeMl: number }[];
  wasteMl?: number;
  message?: string;
};

const firstPauseMs = 200;
const longestPauseMs = 15_000;

/**
 * The contract's calls. Without an answer, and on 429 and 5xx, a call is repeated after the time the server names or a growing
 * pause, until it is answered or the signal aborted; every call may be repeated. Other refusals throw `Refused`.
 */
export class Client {
  private session: string | undefined;

  constructor(
    private readonly transport: Transport,
    private readonly signal: AbortSignal,
    private readonly log: (text: string) => void,
    private readonly sleep: Sleep = realSleep,
  ) {}

  async hello(hello: Hello): Promise<HelloAnswer> {
    this.session = undefined;
    const answer = (await this.persist("/api/agent/hello", hello)) as HelloAnswer;
    this.session = answer.session;
    return answer;
  }

  /** One try, as the next heartbeat is as good; `insist` where this one has to arrive. */
  async heartbeat(heartbeat: Heartbeat, insist = false): Promise<HeartbeatAnswer> {
    const path = "/api/agent/heartbeat";
    return (await (insist ? this.persist(path, heartbeat) : this.once(path, JSON.stringify(heartbeat)))) as HeartbeatAnswer;
  }

  async next(waitS: number, clock: string, signal: AbortSignal): Promise<Step | undefined> {
    return (await this.persist("/api/agent/steps/next", { waitS, clock }, signal)) as Step | undefined;
  }

  /** One try, so that measuring can go on meanwhile. The readings are JSON texts already. */
  async readings(stepId: string, lease: string, readings: readonly string[]): Promise<ReadingsAnswer> {
    const body = `{"lease":${JSON.stringify(lease)},"readings":[${readings.join(",")}]}`;
    return (await this.once(`/api/agent/steps/${encodeURIComponent(stepId)}/readings`, body)) as ReadingsAnswer;
  }

  async finish(stepId: string, lease: string, outcome: Outcome): Promise<FinishAnswer> {
    return (await this.persist(`/api/agent/steps/${encodeURIComponent(stepId)}/finish`, { lease, ...outcome })) as FinishAnswer;
  }

  /** Waits before the `failures`-th repetition of something that got no answer. */
  async backOff(failures: number, error: unknown): Promise<void> {
    const growing = Math.min(longestPauseMs, firstPauseMs * 2 ** Math.min(failures, 10));
    await this.sleep(error instanceof Busy && error.retryAfterS !== undefined ? error.retryAfterS * 1000 : growing, this.signal);
  }

  private async persist(path: string, body: unknown, signal?: AbortSignal): Promise<unknown> {
    const text = JSON.stringify(body);
    for (let failures = 0; ; failures++) {
      try {
        return await this.once(path, text, signal);
      } catch (error) {
        if (!isPassing(error)) throw error;
        if (failures === 0 || failures % 10 === 9) this.log(`${path}: ${(error as Error).message}; trying again`);
        await this.backOff(failures, error);
      }
    }
  }

  private async once(path: string, body: string, signal = this.signal): Promise<unknown> {
    const answer = await this.transport({ path, body, session: this.session, signal });
    if (answer.status === 429 || answer.status >= 500) throw new Busy(answer);
    if (answer.status >= 400) throw refusal(answer);
    return answer.status === 204 ? undefined : answer.body;
  }
}

/** Worth another try later: no answer, or the server asks to wait. */
export const isPassing = (error: unknown): boolean => error instanceof NoAnswer || error instanceof Busy;

class Busy extends Error {
  readonly retryAfterS: number | undefined;
  constructor(answer: Answer) {
    super(`the server answered ${answer.status}`);
    this.retryAfterS = answer.retryAfterS;
  }
}

function refusal({ status, body }: Answer): Refused {
  const problem = (body ?? {}) as { type?: string; title?: string; detail?: string };
  return new Refused(status, problem.type?.split("/").pop() ?? "", problem.detail ?? problem.title ?? "no detail");
}
