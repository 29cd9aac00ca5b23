/** Runs work one at a time a key. Asking while the key's work runs makes it run once more, however often one asks. */
export class KeyedQueue {
  private readonly state = new Map<string, { again: boolean; ended: Promise<void> }>();

  constructor(private readonly onError: (key: string, error: unknown) => void) {}

  run(key: string, work: () => Promise<unknown>): void {
    const running = this.state.get(key);
    if (running) {
      running.again = true;
      return;
    }
    const state = { again: false, ended: Promise.resolve() };
    this.state.set(key, state);
    state.ended = this.loop(key, state, work);
  }

  /** Resolves when nothing runs any more. */
  async idle(): Promise<void> {
    while (this.state.size > 0) await Promise.all([...this.state.values()].map(({ ended }) => ended));
  }

  private async loop(key: string, state: { again: boolean }, work: () => Promise<unknown>): Promise<void> {
    do {
      state.again = false;
      try {
        await work();
      } catch (error) {
        this.onError(key, error);
      }
    } while (state.again);
    this.state.delete(key);
  }
}
