import { driftOf } from "@/lib/analysis/drift-of";
import { offLoop } from "@/lib/analysis/off-loop";
import { resultOf } from "@/lib/analysis/results";
import type { DriftAnswer, DriftQuery } from "@/lib/analysis/schema";
import { contentOf, findFitRun, selectPhases } from "@/lib/analysis/select-phases";
import { demandCompensated } from "@/lib/analysis/demand-compensated";

/** Phase values whose line is found in a few milliseconds here; more go to another process. */
const MOST_HERE = 30;

/**
 * Drift of phase values: the slope with an uncertainty that holds under correlated noise, the ordinary and the robust one, a
 * trend test, ageing and steps beside it, brought to one temperature where asked. A line belongs to one mount: the named one,
 * else the newest; `values` holds those of the others as well. @throws AppError 404, 422 where there is no temperature coefficient.
 */
export async function readDrift(campaignId: string, query: DriftQuery, { background = false } = {}): Promise<DriftAnswer> {
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  if (!fitRunId) return driftOf({ phases: [], query: { ...query, compensate: "none" } });
  const selection = { ...query, medium: query.medium ?? "air" };
  const { content } = await contentOf(campaignId, fitRunId, selection);
  if (!content) return driftOf({ phases: [], query: { ...query, compensate: "none" } });
  const compute = async () => {
    const given = { phases: (await selectPhases(campaignId, fitRunId, selection)).filter((phase) => phase.closed), query };
    return given.phases.length <= MOST_HERE ? driftOf(given) : offLoop("drift", given);
  };
  const contentNow = async () => (await contentOf(campaignId, fitRunId, selection)).content;
  const answer = await resultOf({ campaignId, question: { kind: "drift", query }, fitRunId, content, contentNow, background, compute });
  return background ? answer : demandCompensated(answer);
}
