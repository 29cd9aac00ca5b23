import { connect } from "node:net";
import { row } from "@/lib/db";
import { env } from "@/lib/env";

export type PartState = "ready" | "away";
export type Health = { database: PartState; queue: PartState; mail: PartState };

const MAIL_WAIT_MS = 1500;
const MAIL_KEPT_MS = 10_000;

/** Whether each part answers. Never says where a part is or what it said. */
export async function readHealth({ now }: { now: Date }): Promise<Health> {
  const [database, mail] = await Promise.all([readDatabase(), readMail(now)]);
  return { ...database, mail };
}

async function readDatabase(): Promise<Pick<Health, "database" | "queue">> {
  try {
    const found = await row<{ queue: boolean }>("select to_regclass('pgboss.job') is not null as queue");
    return { database: "ready", queue: found?.queue ? "ready" : "away" };
  } catch {
    return { database: "away", queue: "away" };
  }
}

let mail: { at: number; state: Promise<PartState> } | undefined;

/** Asked at most every ten seconds, as anybody may ask for the health. */
function readMail(now: Date): Promise<PartState> {
  if (!mail || now.getTime() - mail.at > MAIL_KEPT_MS) mail = { at: now.getTime(), state: mailAnswers() };
  return mail.state;
}

function mailAnswers(): Promise<PartState> {
  const { hostname, port, protocol } = new URL(env().SMTP_URL);
  return new Promise((resolve) => {
    const socket = connect({ host: hostname, port: Number(port || (protocol === "smtps:" ? 465 : 587)), timeout: MAIL_WAIT_MS });
    const end = (state: PartState) => {
      socket.destroy();
      resolve(state);
    };
    socket.once("connect", () => end("ready"));
    socket.once("error", () => end("away"));
    socket.once("timeout", () => end("away"));
  });
}
