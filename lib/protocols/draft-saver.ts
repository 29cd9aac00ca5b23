import type { Draft } from "@/lib/protocols/draft";

export type Saved = { id: string; draftSavedAt: string | null };
export type SaverState = {
  /** `conflict`: somebody else saved since; nothing goes out before that is decided. */
  status: "saved" | "waiting" | "saving" | "failed" | "conflict";
  id: string | null;
  savedAt: string | null;
  message?: string;
};

type Options = {
  id: string | null;
  savedAt: string | null;
  /** Stores the draft under `id`, or makes the protocol where there is none yet. `basedOn` undefined: whatever is stored. */
  store: (draft: Draft, to: { id: string | null; basedOn: string | null | undefined }) => Promise<Saved>;
  isConflict: (error: unknown) => boolean;
  delayMs?: number;
  retryMs?: number;
};

/**
 * Saves a draft by itself a moment after each change: one save at a time, the newest state always last, again after a failure.
 * What nobody changed is never sent.
 */
export class DraftSaver {
  private readonly listeners = new Set<() => void>();
  private timer: ReturnType<typeof setTimeout> | undefined;
  private wanted: Draft | undefined;
  private atWork: Promise<void> | undefined;
  private overwrites = false;
  private isClosed = false;
  private state: SaverState;

  constructor(private readonly options: Options) {
    this.state = { status: "saved", id: options.id, savedAt: options.savedAt };
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };
  readonly get = (): SaverState => this.state;

  /** A protocol is made at once, so that a reload finds it under its address; from then on a pause in typing is waited for. */
  private get delayMs(): number {
    return this.state.id === null ? 0 : (this.options.delayMs ?? 800);
  }

  /** A save is under way. */
  get isSaving(): boolean {
    return this.atWork !== undefined;
  }

  /** What is not stored yet; undefined when everything is. */
  get unsaved(): Draft | undefined {
    return this.wanted;
  }

  change(draft: Draft): void {
    if (this.isClosed) return;
    this.wanted = draft;
    if (this.state.status === "conflict") return;
    this.tell({ ...this.state, status: this.atWork ? "saving" : "waiting" });
    this.plan(this.delayMs);
  }

  /** Saves now what waits, and answers when nothing is under way. */
  async flush(): Promise<void> {
    clearTimeout(this.timer);
    await this.atWork;
    if (this.wanted && this.state.status !== "conflict") await this.save();
  }

  /** After a conflict: what is written here is to stand. */
  async overwrite(): Promise<void> {
    this.overwrites = true;
    this.tell({ ...this.state, status: "waiting" });
    await this.flush();
  }

  /** Nothing is sent from now on: the draft became a version, or was thrown away. */
  async close(): Promise<void> {
    this.isClosed = true;
    clearTimeout(this.timer);
    this.wanted = undefined;
    await this.atWork;
  }

  /** Goes on after `close`, when the version could not be saved after all. */
  reopen(draft: Draft): void {
    this.isClosed = false;
    this.change(draft);
  }

  private plan(ms: number): void {
    clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.flush(), ms);
  }

  private save(): Promise<void> {
    this.atWork ??= this.send().finally(() => {
      this.atWork = undefined;
      if (this.wanted && this.state.status !== "conflict" && !this.isClosed) this.plan(this.state.status === "failed" ? (this.options.retryMs ?? 5000) : this.delayMs);
    });
    return this.atWork;
  }

  private async send(): Promise<void> {
    const draft = this.wanted;
    if (!draft) return;
    const { id, savedAt } = this.state;
    this.tell({ id, savedAt, status: "saving" });
    try {
      const saved = await this.options.store(draft, { id, basedOn: this.overwrites ? undefined : savedAt });
      this.overwrites = false;
      if (this.wanted === draft) this.wanted = undefined;
      this.tell({ status: this.wanted ? "waiting" : "saved", id: saved.id, savedAt: saved.draftSavedAt });
    } catch (error) {
      const message = error instanceof Error ? error.message : undefined;
      this.tell({ id, savedAt, status: this.options.isConflict(error) ? "conflict" : "failed", message });
    }
  }

  private tell(state: SaverState): void {
    this.state = state;
    for (const listener of this.listeners) listener();
  }
}
