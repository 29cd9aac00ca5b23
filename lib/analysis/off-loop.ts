import type { ChildProcess } from "node:child_process";
import type { Answered, Asked } from "@/lib/analysis/heavy-process";
import type { Heavy } from "@/lib/analysis/heavy";
import { away } from "@/lib/errors";

/** A process that has had nothing to do for so long is ended: it holds some 150 MB. */
const IDLE_MS = 120_000;

type Waiting = { resolve: (value: unknown) => void; reject: (error: Error) => void };

/**
 * Runs a heavy computation in a process of its own, which reads from the database by itself what it needs, so that neither
 * requests nor steps for rigs wait for it. One such process is started when it is first needed and kept while it has work.
 *
 * A process rather than a thread: it is started from the sources like the worker, whatever the web application was bundled
 * with, and running out of memory ends it alone.
 */
class HeavyProcess {
  private child?: ChildProcess;
  private readonly waiting = new Map<number, Waiting>();
  private idle?: NodeJS.Timeout;
  private last = 0;

  run(asked: DistributiveOmit<Asked, "id">): Promise<unknown> {
    clearTimeout(this.idle);
    const child = (this.child ??= this.start());
    child.ref();
    child.channel?.ref();
    const id = ++this.last;
    return new Promise((resolve, reject) => {
      this.waiting.set(id, { resolve, reject });
      child.send({ ...asked, id } as Asked, (error) => error && this.settle(id, (one) => one.reject(error)));
    });
  }

  private start(): ChildProcess {
    // Asked for by name at run time, so that no bundler looks for what is started.
    const { fork } = process.getBuiltinModule("node:child_process");
    const child = fork("lib/analysis/heavy-process.ts", { cwd: process.cwd(), env: { ...process.env, DATABASE_POOL: "2" }, execArgv: ["--import", "tsx"], serialization: "advanced", stdio: ["ignore", "ignore", "inherit", "ipc"] });
    child.on("message", (answer: Answered) => {
      this.settle(answer.id, (one) => {
        if ("error" in answer) one.reject(Object.assign(new Error(answer.error.message), { name: answer.error.name }));
        else one.resolve(answer.value);
      });
    });
    const gone = () => {
      if (this.child !== child) return;
      this.child = undefined;
      for (const id of [...this.waiting.keys()]) this.settle(id, (one) => one.reject(away("The computation was broken off. Nothing was changed; try again.")));
    };
    child.on("error", gone);
    child.on("exit", gone);
    return child;
  }

  private settle(id: number, how: (waiting: Waiting) => void): void {
    const waiting = this.waiting.get(id);
    if (!waiting) return;
    this.waiting.delete(id);
    if (this.waiting.size === 0) this.rest();
    how(waiting);
  }

  /** Without work it keeps nobody from ending, and ends itself after a while. */
  private rest(): void {
    const { child } = this;
    child?.unref();
    child?.channel?.unref();
    this.idle = setTimeout(() => {
      if (this.child === child) this.child = undefined;
      child?.disconnect();
    }, IDLE_MS);
    this.idle.unref();
  }
}

type DistributiveOmit<Union, Key extends PropertyKey> = Union extends unknown ? Omit<Union, Key> : never;

const holder = globalThis as typeof globalThis & { longreedHeavy?: HeavyProcess };

/** Computes elsewhere what would hold up this process, with the same result as `heavy[name](input)`. @throws what the computation throws, by name and message. */
export function offLoop<Name extends keyof Heavy>(name: Name, input: Parameters<Heavy[Name]>[0]): Promise<Awaited<ReturnType<Heavy[Name]>>> {
  const process = (holder.longreedHeavy ??= new HeavyProcess());
  return process.run({ name, input } as DistributiveOmit<Asked, "id">) as Promise<Awaited<ReturnType<Heavy[Name]>>>;
}
