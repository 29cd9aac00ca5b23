import { audit } from "@/lib/audit/record";
import { inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";

type Cancel = { by: Actor; fitRunId: string; now: Date };

/** Gives up a fit run that is being made; what it has so far stays beside it. @throws AppError 403, 404, 409. */
export function cancelRefit({ by, fitRunId, now }: Cancel): Promise<{ id: string; state: "cancelled" }> {
  return inTransaction(async (transaction) => {
    demand(by, "fit again");
    const run = await row<{ campaignId: string; state: string }>(
      `select campaign_id as "campaignId", state from fit_run where id = $1 for no key update`,
      [fitRunId],
      transaction,
    );
    if (!run) throw notFound("fit run");
    if (run.state === "ready") throw conflict("This fit run is finished already; it is used only when somebody makes it current");
    if (run.state === "waiting") {
      await row(`update fit_run set state = 'cancelled', finished_at = $2 where id = $1 returning id`, [fitRunId, now], transaction);
      await audit(transaction, { by, now, action: "cancel fitting again", entity: "campaign", entityId: run.campaignId, detail: { fitRunId } });
      await notify(`changed:campaign:${run.campaignId}`, transaction);
    }
    return { id: fitRunId, state: "cancelled" as const };
  });
}
