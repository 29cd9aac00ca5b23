import net from "node:net";

/**
 * Whether a server could listen on this loopback port now.
 *
 * @param {number} port
 * @returns {Promise<boolean>}
 */
export function isFree(port) {
  return new Promise((resolve) => {
    const probe = net.createServer();
    probe.once("error", () => resolve(false));
    probe.listen({ port, host: "127.0.0.1", exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/**
 * A loopback port that nobody listens on, chosen by the system.
 *
 * @returns {Promise<number>}
 */
export function freePort() {
  return new Promise((resolve, reject) => {
    const probe = net.createServer();
    probe.once("error", reject);
    probe.listen(0, "127.0.0.1", () => {
      const address = probe.address();
      probe.close(() => (address && typeof address === "object" ? resolve(address.port) : reject(new Error("no port"))));
    });
  });
}

/**
 * The first free port from `preferred` upwards; `undefined` when none of `tries` is.
 *
 * @param {number} preferred
 * @param {{ tries?: number, taken?: ReadonlySet<number>, free?: (port: number) => Promise<boolean> }} [options]
 * @returns {Promise<number | undefined>}
 */
export async function portFrom(preferred, { tries = 100, taken = new Set(), free = isFree } = {}) {
  const last = Math.min(preferred + tries - 1, 65_535);
  for (let port = preferred; port <= last; port++) if (!taken.has(port) && (await free(port))) return port;
  return undefined;
}
