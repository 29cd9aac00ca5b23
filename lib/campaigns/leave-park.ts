import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { change } from "@/lib/db";
import { redirect } from "@/lib/protocol/interpreter";

/**
 * A campaign runs again without a person having said from where: a task was answered, the agent is heard again, the rig was
 * given back. What was parked meanwhile is taken up again from the phase; a park that has not begun is not wanted any more.
 * One under way goes on to its end first. Returns whether anything changed.
 */
export async function leavePark(transaction: Transaction, { id, definition, cursor, parking }: CampaignRow): Promise<boolean> {
  if (!cursor || parking === "running") return false;
  const stranded = cursor.parked && !cursor.redirection;
  if (parking === "none" && !stranded) return false;
  const onward = stranded ? redirect(definition, cursor, { kind: "resume", from: cursor.parked?.begun ? "phase" : "here" }) : cursor;
  if ("impossible" in onward) throw new Error(`campaign ${id} cannot come back from its park: ${onward.impossible}`);
  await change(`update campaign set parking = 'none', cursor = $2 where id = $1`, [id, JSON.stringify(onward)], transaction);
  return true;
}
