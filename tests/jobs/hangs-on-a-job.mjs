// A worker that takes a mail job and never ends it; the test kills it.
import { PgBoss } from "pg-boss";

const boss = new PgBoss({ connectionString: process.env.DATABASE_URL, supervise: false, schedule: false, max: 2 });
boss.on("error", () => undefined);
await boss.start();
await boss.work("mail", { pollingIntervalSeconds: 0.5 }, async () => {
  process.send("active");
  await new Promise(() => undefined);
});
