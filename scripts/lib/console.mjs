/** @typedef {<T>(title: string, work: () => Promise<T>) => Promise<T>} Step Says what is being done and how long it took. */

const started = Date.now();
const showsProgress = process.stdout.isTTY;

/** @param {string} line */
export function say(line) {
  process.stdout.write(`${line}\n`);
}

/** A line with the time of day, for what happens while the laboratory runs. @param {string} line */
export function notice(line) {
  say(`${new Date().toTimeString().slice(0, 8)}  ${line}`);
}

/** @type {Step} */
export async function step(title, work) {
  const begun = Date.now();
  const seconds = () => `${((Date.now() - begun) / 1000).toFixed(1)} s`;
  if (!showsProgress) say(`${title} …`);
  const ticker = showsProgress && setInterval(() => process.stdout.write(`\r${title} … ${seconds()}`), 200);
  try {
    const result = await work();
    if (showsProgress) process.stdout.write(`\r${title} … ${seconds()}\n`);
    else if (Date.now() - begun > 2000) say(`  took ${seconds()}`);
    return result;
  } catch (error) {
    if (showsProgress) process.stdout.write(`\r${title} … failed\n`);
    throw error;
  } finally {
    if (ticker) clearInterval(ticker);
  }
}

/** Seconds since this program began. */
export function sinceStart() {
  return `${((Date.now() - started) / 1000).toFixed(1)} s`;
}
