import fs from "node:fs";

// Imported first by each command: what the shell sets wins over the file, as in Next.js.
if (fs.existsSync(".env")) process.loadEnvFile(".env");
