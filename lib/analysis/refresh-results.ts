import { readAirReturn } from "@/lib/analysis/air-return";
import { readDrift } from "@/lib/analysis/drift";
import { findQuestions } from "@/lib/analysis/results";
import type { AirReturnQuery, DriftQuery, StabilityQuery } from "@/lib/analysis/schema";
import { readStability } from "@/lib/analysis/stability";

/**
 * Answers again, after a phase has closed or changed, what people have asked of the campaign lately, so that the next to look
 * at it finds the answers made. What the phase does not touch stays as it is. A campaign that nobody looks at costs nothing.
 */
export async function refreshResults({ campaignId }: { campaignId: string }): Promise<void> {
  for (const { kind, query } of await findQuestions(campaignId)) {
    if (kind === "drift") await readDrift(campaignId, query as DriftQuery, { background: true });
    else if (kind === "airReturn") await readAirReturn(campaignId, query as AirReturnQuery, { background: true });
    else await readStability(campaignId, query as StabilityQuery, { background: true });
  }
}
