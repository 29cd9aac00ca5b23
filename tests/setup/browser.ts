import { inject } from "vitest";

// A browser test may use models, factories and use cases on the laboratory's own database.
const names = ["DATABASE_URL", "SMTP_URL", "AUTH_SECRET", "APP_URL", "PORT", "LONGREED_DEMO", "LONGREED_DATA_DIR"];
const { env } = inject("laboratory");
for (const name of names) process.env[name] = env[name];
