import "../scripts/lib/env-file.mjs";
import { startWorker } from "@/jobs/start-worker";
import { sequelize } from "@/lib/db";
import { listener } from "@/lib/listener";
import { log } from "@/lib/log";

async function main(): Promise<void> {
  const end = await startWorker();
  log.info("worker ready");

  let stopping = false;
  const stop = async () => {
    if (stopping) return;
    stopping = true;
    await end();
    await listener().close();
    await sequelize.close();
    log.info("worker stopped");
  };
  for (const signal of ["SIGINT", "SIGTERM"] as const) {
    process.on(signal, () => void stop().then(() => process.exit(0), () => process.exit(1)));
  }
}

main().catch((error: unknown) => {
  log.fatal({ error: error instanceof Error ? error.stack : String(error) }, "worker could not start");
  process.exit(1);
});
