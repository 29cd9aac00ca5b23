import { z } from "zod";

const keptAnswer = z.object({
  /** The call's Idempotency-Key: sent twice, it takes effect once. */
  key: z.string().min(1),
  taskId: z.string(),
  path: z.string().startsWith("/api/"),
  body: z.record(z.string(), z.unknown()),
  /** What the person said: `Bottle loaded`. */
  verb: z.string(),
  /** Of the task, so that it can be named when it is no longer in the list. */
  title: z.string(),
  timeZone: z.string(),
  at: z.iso.datetime(),
  /** How often nothing answered. */
  tries: z.int().min(0),
  /** Why the server did not take it; it is not sent again. */
  refusal: z.string().optional(),
});

export type KeptAnswer = z.output<typeof keptAnswer>;

/** Where text is kept on this device: `localStorage`. */
export type Shelf = Pick<Storage, "getItem" | "setItem">;

type Refusal = { status: number; code?: string; message: string };
type OutboxOptions = { personId: string; shelf: Shelf; /** Resolves once the call has taken effect. */ send: (answer: KeptAnswer) => Promise<void> };

const NOTHING: readonly KeptAnswer[] = [];

/**
 * A person's answers until the server has them. They are kept on this device before anything is sent, so that neither a lost
 * network nor a closed page loses one, and go out in the order given. What was refused stays, with the reason, until it is
 * taken back or answered anew.
 */
export class Outbox {
  private readonly place: string;
  private readonly shelf: Shelf;
  private readonly send: OutboxOptions["send"];
  private readonly listeners = new Set<() => void>();
  private read: { text: string | null; items: readonly KeptAnswer[] } = { text: null, items: NOTHING };
  private sending: Promise<void> | undefined;

  constructor({ personId, shelf, send }: OutboxOptions) {
    this.place = `longreed answers ${personId}`;
    this.shelf = shelf;
    this.send = send;
  }

  /** The same array as long as nothing changed. */
  items = (): readonly KeptAnswer[] => {
    const text = this.shelf.getItem(this.place);
    if (text !== this.read.text) this.read = { text, items: parsed(text) };
    return this.read.items;
  };

  subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => void this.listeners.delete(listener);
  };

  /** Another page of this device has changed what is kept. */
  changed = (): void => this.listeners.forEach((listener) => listener());

  /** Keeps the answer and sends it; one to the same task that was refused gives way. */
  give(answer: Omit<KeptAnswer, "tries" | "refusal">): Promise<void> {
    this.keep([...this.items().filter(({ taskId, refusal }) => taskId !== answer.taskId || refusal === undefined), { ...answer, tries: 0 }]);
    return this.sendAll();
  }

  takeBack(key: string): void {
    this.keep(this.items().filter((kept) => kept.key !== key));
  }

  /** Sends what waits, one after another, until one finds no answer. A second call while one is at work joins it. */
  sendAll(): Promise<void> {
    this.sending ??= this.sendInOrder().finally(() => (this.sending = undefined));
    return this.sending;
  }

  private async sendInOrder(): Promise<void> {
    for (let next = this.next(); next; next = this.next()) {
      const { key, tries } = next;
      try {
        await this.send(next);
        this.takeBack(key);
      } catch (error) {
        const refusal = error as Refusal;
        if (mayPass(refusal)) {
          this.change(key, { tries: tries + 1 });
          return;
        }
        this.change(key, { refusal: refusal.message });
      }
    }
  }

  private next(): KeptAnswer | undefined {
    return this.items().find(({ refusal }) => refusal === undefined);
  }

  private change(key: string, changes: Partial<KeptAnswer>): void {
    this.keep(this.items().map((kept) => (kept.key === key ? { ...kept, ...changes } : kept)));
  }

  private keep(items: readonly KeptAnswer[]): void {
    this.shelf.setItem(this.place, JSON.stringify(items));
    this.changed();
  }
}

/** Nothing answered, or what did may answer otherwise later: the server is down or busy, the session is over. */
function mayPass({ status, code }: Refusal): boolean {
  return !(status >= 400) || status >= 500 || [401, 408, 425, 429].includes(status) || code === "in-progress";
}

function parsed(text: string | null): readonly KeptAnswer[] {
  try {
    return z.array(keptAnswer).parse(JSON.parse(text ?? "[]"));
  } catch {
    return NOTHING;
  }
}
