import { demandCompensated } from "@/lib/analysis/demand-compensated";
import { offLoop } from "@/lib/analysis/off-loop";
import { resultOf } from "@/lib/analysis/results";
import type { StabilityAnswer, StabilityQuery } from "@/lib/analysis/schema";
import { contentOf, findFitRun, selectPhases, type SelectedPhase } from "@/lib/analysis/select-phases";
import { noStability, stabilityOf } from "@/lib/analysis/stability-of";
import { impossible } from "@/lib/errors";

/** Values times averaging factors that are done in a few milliseconds here; more go to another process. */
const MOST_HERE = 200_000;

/**
 * Stability of f0 or Q, over repeats within phases or over phase values from cycle to cycle. The phase under way comes in when
 * it closes, unless it is the only one: an answer then stands, and is kept, until the next phase closes.
 *
 * @throws AppError 404, 422 with several set-points and none named, or where there is no temperature coefficient.
 */
export async function readStability(campaignId: string, query: StabilityQuery, { background = false } = {}): Promise<StabilityAnswer> {
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  if (!fitRunId) return noStability(query, "Nothing has been measured yet");
  const selection = { ...query, medium: query.medium ?? "air" };
  const { closed, setPointsC, content } = await contentOf(campaignId, fitRunId, selection);
  if (query.setPointC === undefined) demandOneSetPoint(setPointsC);

  const select = () => selectPhases(campaignId, fitRunId, selection);
  if (closed === 0 || !content) return demandCompensated(await stabilityOf({ phases: await select(), fitRunId, query }));
  const compute = async () => {
    const given = { phases: (await select()).filter((phase) => phase.closed), fitRunId, query };
    return costOf(given.phases, query) <= MOST_HERE ? stabilityOf(given) : offLoop("stability", given);
  };
  const contentNow = async () => (await contentOf(campaignId, fitRunId, selection)).content;
  const answer = await resultOf({ campaignId, question: { kind: "stability", query }, fitRunId, content, contentNow, background, compute });
  return background ? answer : demandCompensated(answer);
}

function costOf(phases: readonly SelectedPhase[], { view, taus }: StabilityQuery): number {
  const values = view === "phases" ? phases.length : phases.reduce((sum, { n }) => sum + (n ?? 0), 0);
  return values * (taus === "all" ? Math.min(values / 2, 2000) : Math.log2(values + 1));
}

/** A series belongs to one set-point; with several in the selection the question has to name one. */
function demandOneSetPoint(setPointsC: readonly (number | null)[]): void {
  if (setPointsC.length <= 1) return;
  const list = setPointsC.map((c) => (c === null ? "none" : `${c} °C`)).join(", ");
  throw impossible(`This campaign was measured at several set-points (${list}); name one with setPointC`, {
    errors: [{ path: "setPointC", message: "is needed" }],
  });
}
