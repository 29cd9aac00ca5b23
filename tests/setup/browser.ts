import fs from "node:fs";
import path from "node:path";
import { beforeAll, inject } from "vitest";
import { countAtPlace } from "../factories/now";

// A browser test may use models, factories and use cases on the laboratory's own database.
const names = ["DATABASE_URL", "SMTP_URL", "AUTH_SECRET", "APP_URL", "PORT", "LONGREED_DEMO", "LONGREED_DATA_DIR"];
const { env } = inject("laboratory");
for (const name of names) process.env[name] = env[name];

const folder = path.resolve(import.meta.dirname, "../browser");
beforeAll(({}, { file }) => countAtPlace(fs.readdirSync(folder).sort().indexOf(path.basename(file.filepath))));
