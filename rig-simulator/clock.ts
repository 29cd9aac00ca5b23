/** Waits real time; rejects with the signal's reason when that is aborted. */
export type Sleep = (ms: number, signal?: AbortSignal) => Promise<void>;

export const sleep: Sleep = (ms, signal) =>
  new Promise((resolve, reject) => {
    if (signal?.aborted) return reject(signal.reason as Error);
    const timer = setTimeout(done, ms);
    function done(): void {
      signal?.removeEventListener("abort", aborted);
      resolve();
    }
    function aborted(): void {
      clearTimeout(timer);
      reject(signal?.reason as Error);
    }
    signal?.addEventListener("abort", aborted, { once: true });
  });

/** The rig's clock. */
export type Clock = {
  nowMs: () => number;
  /** Lets rig time pass: at once in fast mode, else as long as the speed says. */
  pass: (seconds: number, signal?: AbortSignal) => Promise<void>;
  /** Only a fast clock can be put somewhere. */
  set?: (ms: number) => void;
};

export type Speed = { kind: "real" } | { kind: "times"; factor: number } | { kind: "fast" };

/** `real`, `fast`, or a factor as `×60`, `x60` or `60`. */
export function parseSpeed(text: string): Speed {
  if (text === "real" || text === "fast") return { kind: text };
  const factor = Number(text.replace(/^[×x]/, ""));
  if (!(factor > 0 && factor <= 1e6)) throw new RangeError(`Speed must be real, fast or a factor such as ×60, not "${text}"`);
  return factor === 1 ? { kind: "real" } : { kind: "times", factor };
}

export function createClock(speed: Speed, startMs: number): Clock {
  if (speed.kind === "fast") {
    let ms = startMs;
    return {
      nowMs: () => ms,
      pass: async (seconds) => {
        ms += seconds * 1000;
      },
      set: (to) => {
        ms = to;
      },
    };
  }
  if (speed.kind === "real") return { nowMs: () => Date.now(), pass: (seconds, signal) => sleep(seconds * 1000, signal) };
  const begun = performance.now();
  return {
    nowMs: () => startMs + (performance.now() - begun) * speed.factor,
    pass: (seconds, signal) => sleep((seconds * 1000) / speed.factor, signal),
  };
}
