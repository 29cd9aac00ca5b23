import type { Transaction } from "sequelize";
import { sequelize } from "@/lib/db";

/** The one channel that processes listen on; the payload is a topic and a key, nothing more. */
export const CHANNEL = "longreed";

/**
 * `rig:<id>` a step may be had; `campaign:<id>` something to decide; `fit:<step id>:<index>` readings to fit, from that index on;
 * `phases:<campaign id>` a phase has a value, or another than before; `mail` notifications wait; `imports` files wait to be imported; `refit:<fit run id>` a campaign to fit again; `changed:<what>` for pages that follow.
 */
export type Topic = `rig:${string}` | `campaign:${string}` | `fit:${string}:${number}` | `phases:${string}` | "mail" | "imports" | `refit:${string}` | `changed:${string}`;

/** Leaves at COMMIT, so that whoever wakes finds the change. */
export async function notify(topic: Topic, transaction?: Transaction): Promise<void> {
  await sequelize.query("select pg_notify($1, $2)", { bind: [CHANNEL, topic], transaction });
}
