import { createServer, type IncomingMessage, type Server, type ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import { gunzipSync } from "node:zlib";
import type { Done, Reading, Step, Wish } from "@/rig-simulator/contract";

type WhatToDo<S = Step> = S extends Step ? Pick<S, "kind" | "params"> : never;
type Plan = WhatToDo & { cycle?: number; dueAt?: string };
type Planned = Plan & { sequence: number; state: "ready" | "out" | "done" | "failed"; attempts: number; leases: string[]; done?: Done };

/** What a test may do to a request before it is served: answer it itself, or note it and let it pass. */
export type Meddle = (call: { path: string; body: Record<string, unknown>; number: number }) => Answer | undefined;

type Answer = { status: number; body?: unknown; headers?: Record<string, string> };

/** A small server that keeps the agent contract with a fixed list of steps, in memory. */
export class ContractServer {
  readonly steps: Planned[];
  readonly readings = new Map<string, Reading>();
  readonly calls: { path: string; body: Record<string, unknown> }[] = [];
  readonly finishes: { sequence: number; outcome: string; failure?: { code: string } }[] = [];
  wish: Wish = "none";
  meddle: Meddle = () => undefined;
  limits = { maxReadings: 500, maxBodyBytes: 8 * 1024 * 1024 };
  private clockMs = 0;
  private lease = 0;
  private server!: Server;

  constructor(plan: Plan[]) {
    this.steps = plan.map((step, i) => ({ ...step, sequence: i + 1, state: "ready", attempts: 0, leases: [] }));
  }

  async start(): Promise<string> {
    this.server = createServer((request, response) => void this.serve(request, response));
    await new Promise<void>((resolve) => this.server.listen(0, "127.0.0.1", resolve));
    return `http://127.0.0.1:${(this.server.address() as AddressInfo).port}`;
  }

  async stop(): Promise<void> {
    this.server.closeAllConnections();
    await new Promise((resolve) => this.server.close(resolve));
  }

  stored(sequence: number): Reading[] {
    const step = this.steps[sequence - 1];
    if (step.kind !== "measure") return [];
    return Array.from({ length: step.params.repeats }, (_, i) => this.readings.get(`${sequence}/${i}`)).filter((reading) => reading !== undefined);
  }

  private async serve(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const chunks: Buffer[] = [];
    for await (const chunk of request) chunks.push(chunk as Buffer);
    const raw = Buffer.concat(chunks);
    const text = request.headers["content-encoding"] === "gzip" ? gunzipSync(raw) : raw;
    const path = request.url ?? "";
    const body = JSON.parse(text.toString()) as Record<string, unknown>;
    this.calls.push({ path, body });
    if (typeof body.clock === "string") this.clockMs = Math.max(this.clockMs, Date.parse(body.clock));
    const answer: Answer = this.meddle({ path, body, number: this.calls.length }) ?? this.answer(path, body);
    response.writeHead(answer.status, { "content-type": "application/json", ...answer.headers });
    response.end(answer.body === undefined ? undefined : JSON.stringify(answer.body));
  }

  private answer(path: string, body: Record<string, unknown>): Answer {
    if (path.endsWith("/hello"))
      return {
        status: 200,
        body: { rig: { id: "r", name: "Rig", clock: "simulated" }, session: "s", contract: 1, leaseS: 60, heartbeatS: 30, waitS: 0, ...this.limits },
      };
    if (path.endsWith("/heartbeat")) {
      const step = this.steps.find(({ sequence }) => String(sequence) === body.stepId);
      if (step && body.done) step.done = body.done as Done;
      const next = this.current();
      const dueAt = next?.state === "ready" && next.dueAt && Date.parse(next.dueAt) > this.clockMs ? next.dueAt : undefined;
      return { status: 200, body: { wish: this.wish, ...(dueAt ? { dueAt } : {}) } };
    }
    if (path.endsWith("/next")) return this.give();
    const [, sequence, act] = /steps\/(\d+)\/(readings|finish)$/.exec(path) ?? [];
    const step = this.steps[Number(sequence) - 1];
    if (!step) return { status: 404, body: { type: "/problems/not-found" } };
    return act === "readings" ? this.store(step, body) : this.finish(step, body);
  }

  private current(): Planned | undefined {
    return this.steps.find(({ state }) => state === "ready" || state === "out");
  }

  private give(): Answer {
    const step = this.current();
    if (!step || this.wish !== "none" || (step.dueAt && Date.parse(step.dueAt) > this.clockMs)) return { status: 204 };
    const again = step.attempts > 0;
    step.state = "out";
    step.attempts++;
    step.leases.push(`lease-${++this.lease}`);
    const { sequence, kind, params, cycle = 0, attempts, leases } = step;
    const missing = this.missing(step);
    return {
      status: 200,
      body: {
        id: String(sequence),
        campaignId: "c",
        campaignNumber: 1,
        sequence,
        kind,
        params,
        cycle,
        label: "",
        attempt: attempts,
        lease: leases.at(-1),
        resumeFrom: missing[0]?.[0] ?? 0,
        missing: again && kind === "measure" ? missing : undefined,
        done: again ? step.done : undefined,
      },
    };
  }

  missing(step: Planned): [number, number][] {
    if (step.kind !== "measure") return [];
    const gaps: [number, number][] = [];
    for (let i = 0; i < step.params.repeats; i++) {
      if (this.readings.has(`${step.sequence}/${i}`)) continue;
      const last = gaps.at(-1);
      if (last && last[1] === i - 1) last[1] = i;
      else gaps.push([i, i]);
    }
    return gaps;
  }

  private store(step: Planned, body: Record<string, unknown>): Answer {
    const readings = body.readings as Reading[];
    if (readings.length > this.limits.maxReadings) return { status: 400, body: { detail: "too many readings" } };
    const answer = { stored: [] as number[], alreadyStored: [] as number[], differs: [] as number[] };
    for (const reading of readings) {
      const key = `${step.sequence}/${reading.index}`;
      const known = this.readings.get(key);
      if (!known) this.readings.set(key, reading);
      (known ? (JSON.stringify(known) === JSON.stringify(reading) ? answer.alreadyStored : answer.differs) : answer.stored).push(reading.index);
    }
    const lease = body.lease === step.leases.at(-1) ? "current" : "superseded";
    return { status: 200, body: { ...answer, lease, wish: this.wish } };
  }

  private finish(step: Planned, body: Record<string, unknown>): Answer {
    if (body.lease !== step.leases.at(-1)) return { status: 409, body: { type: "/problems/lease-lost", detail: "given out again" } };
    const outcome = body.outcome as string;
    if (outcome === "done" && this.missing(step).length > 0) return { status: 422, body: { type: "/problems/incomplete", detail: "readings are missing" } };
    this.finishes.push({ sequence: step.sequence, outcome, failure: body.failure as { code: string } | undefined });
    const failure = body.failure as { retry: boolean } | undefined;
    step.state = outcome === "done" ? "done" : outcome === "interrupted" || failure?.retry ? "ready" : "failed";
    return { status: 200, body: { step: step.state, next: "ask" } };
  }
}
