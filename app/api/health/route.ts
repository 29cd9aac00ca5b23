import { z } from "zod";
import { away } from "@/lib/errors";
import { readHealth } from "@/lib/health";
import { route } from "@/lib/http/route";

const part = z.enum(["ready", "away"]);

export const GET = route({
  permission: "public",
  summary: "Whether database, queue and mail are ready; 503 names what is not",
  answer: z.object({ database: part, queue: part, mail: part }),
  async handle({ now }) {
    const health = await readHealth({ now });
    const missing = Object.entries(health).filter(([, state]) => state === "away").map(([name]) => name);
    if (missing.length > 0) throw away(`Not ready: ${missing.join(", ")}`, 5, health);
    return health;
  },
});
