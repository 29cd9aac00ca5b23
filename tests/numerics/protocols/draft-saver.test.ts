import { afterEach, beforeEach, describe, expect, test, vi } from "vitest";
import type { Draft } from "@/lib/protocols/draft";
import { DraftSaver, type Saved } from "@/lib/protocols/draft-saver";

const draft = (name: string): Draft => ({ name, blocks: [], limits: [] });
class Conflict extends Error {}

/** A store that answers when it is told to. */
function aStore() {
  const calls: { name: unknown; id: string | null; basedOn: string | null | undefined; answer: (saved: Saved) => void; refuse: (error: Error) => void }[] = [];
  const store = ({ name }: Draft, { id, basedOn }: { id: string | null; basedOn: string | null | undefined }) =>
    new Promise<Saved>((answer, refuse) => calls.push({ name, id, basedOn, answer, refuse }));
  return { calls, store };
}
const saverOf = (store: ReturnType<typeof aStore>["store"], id: string | null = "7") =>
  new DraftSaver({ id, savedAt: id === null ? null : "t0", store, isConflict: (error) => error instanceof Conflict, delayMs: 800, retryMs: 5000 });

beforeEach(() => vi.useFakeTimers());
afterEach(() => vi.useRealTimers());

describe("DraftSaver", () => {
  test("waits until typing pauses, then sends the newest state with what it is based on", async () => {
    const { calls, store } = aStore();
    const saver = saverOf(store);
    saver.change(draft("a"));
    await vi.advanceTimersByTimeAsync(700);
    saver.change(draft("ab"));
    await vi.advanceTimersByTimeAsync(700);
    expect(calls).toHaveLength(0);
    await vi.advanceTimersByTimeAsync(100);
    expect(calls).toMatchObject([{ name: "ab", id: "7", basedOn: "t0" }]);
    calls[0].answer({ id: "7", draftSavedAt: "t1" });
    await vi.advanceTimersByTimeAsync(0);
    expect(saver.get()).toEqual({ status: "saved", id: "7", savedAt: "t1" });
    expect(saver.unsaved).toBeUndefined();
  });

  test("one save at a time: what changes meanwhile goes out after it, based on it", async () => {
    const { calls, store } = aStore();
    const saver = saverOf(store, null);
    saver.change(draft("a"));
    await vi.advanceTimersByTimeAsync(800);
    saver.change(draft("b"));
    await vi.advanceTimersByTimeAsync(5000);
    expect(calls).toMatchObject([{ name: "a", id: null, basedOn: null }]);
    calls[0].answer({ id: "9", draftSavedAt: "t1" });
    await vi.advanceTimersByTimeAsync(800);
    expect(calls[1]).toMatchObject({ name: "b", id: "9", basedOn: "t1" });
  });

  test("a failure keeps the draft, says why, and tries again", async () => {
    const { calls, store } = aStore();
    const saver = saverOf(store);
    saver.change(draft("a"));
    await vi.advanceTimersByTimeAsync(800);
    calls[0].refuse(new Error("no answer"));
    await vi.advanceTimersByTimeAsync(0);
    expect(saver.get()).toMatchObject({ status: "failed", message: "no answer" });
    await vi.advanceTimersByTimeAsync(5000);
    expect(calls[1]).toMatchObject({ name: "a", basedOn: "t0" });
  });

  test("a conflict stops the saving until somebody decides; then it stands over what is stored", async () => {
    const { calls, store } = aStore();
    const saver = saverOf(store);
    saver.change(draft("a"));
    await vi.advanceTimersByTimeAsync(800);
    calls[0].refuse(new Conflict("changed elsewhere"));
    await vi.advanceTimersByTimeAsync(0);
    saver.change(draft("ab"));
    await vi.advanceTimersByTimeAsync(20_000);
    expect(calls).toHaveLength(1);
    expect(saver.get().status).toBe("conflict");
    void saver.overwrite();
    await vi.advanceTimersByTimeAsync(0);
    expect(calls[1]).toMatchObject({ name: "ab", basedOn: undefined });
  });

  test("after it became a version nothing is sent any more, and closing waits for what is under way", async () => {
    const { calls, store } = aStore();
    const saver = saverOf(store);
    saver.change(draft("a"));
    await vi.advanceTimersByTimeAsync(800);
    let closed = false;
    void saver.close().then(() => (closed = true));
    await vi.advanceTimersByTimeAsync(0);
    expect(closed).toBe(false);
    calls[0].answer({ id: "7", draftSavedAt: "t1" });
    await vi.advanceTimersByTimeAsync(0);
    expect(closed).toBe(true);
    saver.change(draft("late"));
    await vi.advanceTimersByTimeAsync(20_000);
    expect(calls).toHaveLength(1);
    saver.reopen(draft("again"));
    await vi.advanceTimersByTimeAsync(800);
    expect(calls[1]).toMatchObject({ name: "again", basedOn: "t1" });
  });
});
