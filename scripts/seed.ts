import "./lib/env-file.mjs";
import path from "node:path";
import { sequelize } from "@/lib/db";
import { env } from "@/lib/env";
import { seedDemo } from "./seed/demo";

/** Fills the demo laboratory. What is there is left as it is; after an interruption it goes on. */
async function main(): Promise<void> {
  const { LONGREED_DEMO, LONGREED_DEMO_PASSWORD, LONGREED_DATA_DIR, APP_URL } = env();
  if (!LONGREED_DEMO) throw new Error("Only a demo is seeded: set LONGREED_DEMO=1, or use npm start.");
  try {
    await seedDemo({ password: LONGREED_DEMO_PASSWORD, dataFolder: path.resolve(LONGREED_DATA_DIR), url: APP_URL, say: (line) => console.log(line) });
  } finally {
    await sequelize.close();
  }
}

main().catch((error: unknown) => {
  console.error(`Seeding the demo laboratory: ${error instanceof Error ? error.message : String(error)}`);
  if (process.env.LOG_LEVEL === "debug") console.error(error);
  process.exitCode = 1;
});
