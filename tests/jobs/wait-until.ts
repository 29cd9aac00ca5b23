/** Looks again until something is so: for what other processes do. Fails with what was looked for. */
export async function waitUntil<T>(what: string, look: () => Promise<T | undefined | false>, withinMs = 20_000): Promise<T> {
  const deadline = Date.now() + withinMs;
  for (;;) {
    const found = await look();
    if (found) return found;
    if (Date.now() > deadline) throw new Error(`${what} did not happen within ${withinMs / 1000} s`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}
