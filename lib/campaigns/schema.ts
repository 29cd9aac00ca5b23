import { z } from "zod";
import { idSchema as id } from "@/lib/http/ids";
import { words } from "@/lib/schema";

export const campaignState = z.enum(["draft", "queued", "running", "held", "finished", "stopped", "failed"]);
export const holdReason = z.enum(["person", "task", "limit", "failure", "silence", "takeOver", "setAside"]);
export const resumeFrom = z.enum(["here", "phase", "cycle"]);

export const holdBody = z.strictObject({ why: words(2000).optional() });
export const resumeBody = z.strictObject({ from: resumeFrom.default("here") });
export const stopBody = z.strictObject({ why: words(2000) });
export const setAsideBody = z.strictObject({ why: words(2000) });
export const amendBody = z.strictObject({ protocolVersionId: id, why: words(2000) });

/** What a campaign's verbs answer. */
export const campaignAfter = z.object({ id: z.string(), state: campaignState });

export type CampaignState = z.output<typeof campaignState>;
export type ResumeFrom = z.output<typeof resumeFrom>;
