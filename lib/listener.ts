import pg from "pg";
import { CHANNEL } from "@/lib/notify";

type Wake = (topic: string) => void;

const RECONNECT_MS = 500;

/**
 * One connection a process that hears what others commit. After every reconnect all who wait are woken once,
 * because what was said meanwhile is lost; whoever is woken looks at the tables, the payload is only a hint.
 */
class Listener {
  private readonly waiting = new Map<string, Set<() => void>>();
  private readonly subscribers = new Set<Wake>();
  private client?: pg.Client;
  private connecting?: Promise<void>;
  private closed = false;

  /** Resolves when something is said about the topic, at the timeout, or when the signal aborts. Register first, then look. */
  async wait(topic: string, timeoutMs: number, signal?: AbortSignal): Promise<void> {
    const waiter = this.register(topic);
    await this.connect();
    return waiter.until(timeoutMs, signal);
  }

  /** A waiter that counts from now on, so that nothing said between a look at the tables and the wait is missed. */
  register(topic: string): { until: (timeoutMs: number, signal?: AbortSignal) => Promise<void>; drop: () => void } {
    let wake: () => void = () => {};
    const woken = new Promise<void>((resolve) => (wake = resolve));
    const group = this.waiting.get(topic) ?? new Set();
    group.add(wake);
    this.waiting.set(topic, group);
    const drop = () => {
      group.delete(wake);
      if (group.size === 0) this.waiting.delete(topic);
    };
    return {
      drop,
      until: (timeoutMs, signal) =>
        new Promise((resolve) => {
          const end = () => {
            clearTimeout(timer);
            signal?.removeEventListener("abort", end);
            drop();
            resolve();
          };
          const timer = setTimeout(end, timeoutMs);
          if (signal?.aborted) end();
          else signal?.addEventListener("abort", end, { once: true });
          void woken.then(end);
        }),
    };
  }

  /** Hears every topic; after a reconnect it is called with "*". */
  async subscribe(wake: Wake): Promise<() => void> {
    this.subscribers.add(wake);
    await this.connect();
    return () => this.subscribers.delete(wake);
  }

  async connect(): Promise<void> {
    if (this.client || this.closed) return;
    this.connecting ??= this.open().finally(() => (this.connecting = undefined));
    await this.connecting;
  }

  async close(): Promise<void> {
    this.closed = true;
    const client = this.client;
    this.client = undefined;
    await client?.end();
    this.wakeAll();
  }

  private async open(): Promise<void> {
    const client = new pg.Client({ connectionString: process.env.DATABASE_URL, keepAlive: true });
    const lost = () => {
      if (this.client === client) this.client = undefined;
      client.removeAllListeners("notification");
      if (!this.closed) setTimeout(() => void this.connect().catch(lost), RECONNECT_MS);
    };
    client.on("error", lost);
    await client.connect();
    client.on("end", lost);
    client.on("notification", ({ payload = "" }) => this.wake(payload));
    await client.query(`listen ${CHANNEL}`);
    this.client = client;
    this.wakeAll();
  }

  private wake(topic: string) {
    for (const wake of this.waiting.get(topic) ?? []) wake();
    for (const subscriber of this.subscribers) subscriber(topic);
  }

  private wakeAll() {
    for (const group of this.waiting.values()) for (const wake of group) wake();
    for (const subscriber of this.subscribers) subscriber("*");
  }
}

const holder = globalThis as typeof globalThis & { longreedListener?: Listener };

export const listener = (): Listener => (holder.longreedListener ??= new Listener());
