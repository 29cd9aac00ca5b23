import { noAirReturn } from "@/lib/analysis/air-return-of";
import { offLoop } from "@/lib/analysis/off-loop";
import { resultOf } from "@/lib/analysis/results";
import type { AirReturnAnswer, AirReturnQuery } from "@/lib/analysis/schema";
import { contentOf, findFitRun, selectPhases } from "@/lib/analysis/select-phases";

/**
 * Whether the air reference comes back after cleaning, and if not, whether residue, ageing or a step keeps it away; and how many
 * repeats after drying are still under its influence. Of the named set-point, else of that of the newest reference.
 */
export async function readAirReturn(campaignId: string, query: AirReturnQuery, { background = false } = {}): Promise<AirReturnAnswer> {
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  const selection = { ...query, medium: "air" };
  const content = fitRunId ? (await contentOf(campaignId, fitRunId, selection)).content : null;
  if (!fitRunId || !content) return noAirReturn;
  const compute = async () => offLoop("airReturn", { campaignId, fitRunId, phases: (await selectPhases(campaignId, fitRunId, selection)).filter(({ closed }) => closed) });
  const contentNow = async () => (await contentOf(campaignId, fitRunId, selection)).content;
  return resultOf({ campaignId, question: { kind: "airReturn", query }, fitRunId, content, contentNow, background, compute });
}
