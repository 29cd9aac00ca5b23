import { z } from "zod";

/** The password of the demo accounts unless LONGREED_DEMO_PASSWORD names another. Never valid outside demo mode. */
export const defaultDemoPassword = "longreed-demo";

/** How a secret that `npm start` made begins, so that a real deployment can refuse it. */
export const generatedSecretPrefix = "demo-";

const loopback = new Set(["localhost", "127.0.0.1", "[::1]"]);

/** A variable set to nothing counts as not set, as in `PORT= npm start`. */
const unset = (value: unknown) => (value === "" ? undefined : value);

function addressOf(...protocols: string[]) {
  const message = `must be an address that begins with ${protocols.map((protocol) => `${protocol}//`).join(" or ")}`;
  return z.string({ error: "is not set" }).refine((value) => {
    return URL.canParse(value) && protocols.includes(new URL(value).protocol);
  }, message);
}

const variables = z.object({
  DATABASE_URL: z.preprocess(unset, addressOf("postgres:", "postgresql:")),
  SMTP_URL: z.preprocess(unset, addressOf("smtp:", "smtps:")),
  MAIL_FROM: z.preprocess(unset, z.string().includes("@", "must hold a mail address").default("Longreed <longreed@longreed.example>")),
  AUTH_SECRET: z.preprocess(unset, z.string({ error: "is not set" }).min(32, "must have at least 32 characters")),
  PORT: z.preprocess(unset, z.coerce.number("must be a number").int().min(1).max(65_535).default(3000)),
  APP_URL: z.preprocess(unset, addressOf("http:", "https:").optional()),
  LONGREED_DEMO: z.preprocess(unset, z.enum(["0", "1"], "must be 1 or 0").default("0")),
  LONGREED_DEMO_PASSWORD: z.preprocess(unset, z.string().min(8, "must have at least 8 characters").default(defaultDemoPassword)),
  LONGREED_DATA_DIR: z.preprocess(unset, z.string().default("data")),
  LOG_LEVEL: z.preprocess(
    unset,
    z.enum(["fatal", "error", "warn", "info", "debug", "trace", "silent"], "must be a level, as info or debug").default("info"),
  ),
});

const schema = variables
  .transform((given) => ({
    ...given,
    /** Without a slash at its end, ready to put a path behind. */
    APP_URL: (given.APP_URL ?? `http://127.0.0.1:${given.PORT}`).replace(/\/+$/, ""),
    LONGREED_DEMO: given.LONGREED_DEMO === "1",
  }))
  .superRefine((given, context) => {
    const refuse = (variable: string, message: string) => context.addIssue({ code: "custom", path: [variable], message });
    if (given.LONGREED_DEMO && !loopback.has(new URL(given.APP_URL).hostname)) {
      refuse("APP_URL", "must name this machine itself in demo mode, which is for loopback only");
    }
    if (!given.LONGREED_DEMO && new URL(given.DATABASE_URL).password.startsWith(generatedSecretPrefix)) {
      refuse("DATABASE_URL", "holds a password that was generated for a demo");
    }
    if (!given.LONGREED_DEMO && given.AUTH_SECRET.startsWith(generatedSecretPrefix)) {
      refuse("AUTH_SECRET", "was generated for a demo; make one of your own, for example with: openssl rand -base64 32");
    }
  });

export type Env = z.output<typeof schema>;

let known: Env | undefined;

/** The checked environment, read at the first call: a build and most tests need none. Throws naming every fault. */
export function env(): Env {
  return (known ??= readEnv(process.env));
}

/** Checks a set of variables; the error says in one line each what is wrong. */
export function readEnv(source: Record<string, string | undefined>): Env {
  const result = schema.safeParse(source);
  if (result.success) return result.data;
  const faults = result.error.issues.map(({ path, message }) => `  ${path.join(".")} ${message}`);
  throw new Error(`The environment is not usable:\n${faults.join("\n")}`);
}

/** Whether a password may be set or used here: the one that every reader of the manual knows, in demo mode only. */
export function passwordAllowed(password: string, { LONGREED_DEMO } = env()): boolean {
  return LONGREED_DEMO || password !== defaultDemoPassword;
}
