import { delayMs } from "./supervise.mjs";

const lookEveryMs = 1000;

/**
 * Starts the database server again when it died: it is no child of ours, so nobody tells us.
 *
 * @param {import("./postgres.mjs").Cluster} cluster
 * @param {(line: string) => void} notice
 * @returns {{ stop: () => Promise<void> }} `stop` ends the server too.
 */
export function watchPostgres(cluster, notice) {
  let failures = 0;
  let stopping = false;
  let looking = Promise.resolve();
  let timer = setTimeout(look, lookEveryMs);

  return {
    async stop() {
      stopping = true;
      clearTimeout(timer);
      await looking;
      await cluster.stop();
    },
  };

  function look() {
    looking = (cluster.isRunning() ? Promise.resolve() : revive()).then(() => {
      if (!stopping) timer = setTimeout(look, failures === 0 ? lookEveryMs : delayMs(failures));
    });
  }

  async function revive() {
    if (failures === 0) notice("PostgreSQL died; starting it again");
    try {
      await cluster.startAgain();
      failures = 0;
      notice("PostgreSQL runs again");
    } catch (error) {
      failures += 1;
      notice(`${error instanceof Error ? error.message : error} Trying again in ${delayMs(failures) / 1000} s`);
    }
  }
}
