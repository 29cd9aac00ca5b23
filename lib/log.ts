import pino from "pino";

/** The one log of a process: JSON lines on standard output, without secrets. */
export const log = pino({
  level: process.env.LOG_LEVEL || (process.env.VITEST ? "silent" : "info"),
  redact: { paths: ["password", "token", "authorization", "cookie", "*.password", "*.token"], censor: "(left out)" },
});
